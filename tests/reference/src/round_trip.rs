//! Round trips: shipped rivals on an instance, their roots and optima, and the values that
//! `fixtures/round_trips.json` holds for TSPLIB instances.

use std::collections::BTreeMap;
use std::path::Path;
use std::rc::Rc;
use std::sync::LazyLock;

use catalogue::Entry;
use instance::Instance;
use model::{Model, nearest_f64};
use serde_json::Value;
use tree::{Progress, RootResult, Search, Settings, Status, Summary};

use crate::theory::{labels, table};

/// Work in one slice: large, for nobody waits between slices here.
const SLICE: u64 = 10_000_000;

/// An instance from its text.
///
/// # Panics
/// When the text cannot be read.
#[must_use]
pub fn instance(text: &str) -> Instance {
    let reading = instance::read(text, None);
    reading.instance.unwrap_or_else(|| panic!("not read: {:?}", reading.complaints))
}

/// A shipped rival on an instance.
///
/// # Panics
/// When there is no such rival, or it does not fit the instance.
#[must_use]
pub fn rival(id: &str, instance: &Instance) -> Rc<Model> {
    static SHIPPED: LazyLock<Vec<Entry>> = LazyLock::new(catalogue::entries);
    let entry = SHIPPED.iter().find(|entry| entry.id == id);
    formulation(entry.unwrap_or_else(|| panic!("no rival {id}")).text, instance)
}

/// A notation text on an instance.
///
/// # Panics
/// When the text is wrong or does not fit the instance.
#[must_use]
pub fn formulation(text: &str, instance: &Instance) -> Rc<Model> {
    match notation::model(text, instance, &BTreeMap::new(), &BTreeMap::new()) {
        Ok((model, _)) => Rc::new(model),
        Err(diagnostics) => panic!("{diagnostics:?}"),
    }
}

/// The relaxation of a model, its own families separated.
///
/// # Panics
/// When the search ends without a root.
#[must_use]
pub fn root(model: &Rc<Model>) -> RootResult {
    let settings = Settings { search: false, ..Settings::default() };
    let mut search = Search::new(Rc::clone(model), settings);
    while search.advance(SLICE) == Progress::Working {}
    search.root().unwrap().clone()
}

/// A whole search.
#[must_use]
pub fn solve(model: &Rc<Model>, settings: Settings) -> Summary {
    let mut search = Search::new(Rc::clone(model), settings);
    search.run(None);
    while search.advance(SLICE) != Progress::Finished {
        search.run(None);
    }
    search.summary()
}

/// A value for a TSPLIB instance, with where it comes from.
#[derive(Debug, Clone)]
pub struct Published {
    /// The instance's name in TSPLIB.
    pub instance: String,
    /// The rival, or `optimum`.
    pub rival: String,
    /// What is measured.
    pub quantity: String,
    /// The value.
    pub value: f64,
    /// How far it may be off.
    pub tolerance: f64,
    /// Where it comes from.
    pub source: String,
}

/// All values of the fixture.
///
/// # Panics
/// When the fixture cannot be read.
#[must_use]
pub fn values() -> Vec<Published> {
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("fixtures/round_trips.json");
    let values: Value = serde_json::from_str(&std::fs::read_to_string(path).unwrap()).unwrap();
    let text = |value: &Value, key: &str| value[key].as_str().unwrap().to_owned();
    let entry = |value: &Value| Published {
        instance: text(value, "instance"),
        rival: text(value, "rival"),
        quantity: text(value, "quantity"),
        value: value["value"].as_f64().unwrap(),
        tolerance: value["tolerance"].as_f64().unwrap(),
        source: text(value, "source"),
    };
    values.as_array().unwrap().iter().map(entry).collect()
}

/// Checks a bound against its stored value, and what is proved of it.
///
/// # Panics
/// When they differ by more than the value's tolerance, or the bound is not proved.
pub fn check_bound(value: &Published, model: &Rc<Model>) {
    let root = root(model);
    let name = format!("{} on {}", value.rival, value.instance);
    assert_eq!(root.status, Status::Optimal, "{name}");
    let bound = root.bound.unwrap();
    let off = (bound - value.value).abs();
    let near = off <= value.tolerance * (1.0 + bound.abs());
    assert!(near, "{name}: {bound} for {} ({})", value.value, value.source);
    let proved = nearest_f64(&root.checked_bound.unwrap());
    let near = (proved - bound).abs() <= 1e-9 * (1.0 + bound.abs());
    assert!(near, "{name}: proved {proved} of {bound}");
}

/// The same stops with another of them first: the depot, where the reader takes the first stop.
///
/// # Panics
/// When the instance is no round trip or has no such stop.
#[must_use]
pub fn from_depot(trip: &Instance, depot: usize) -> Instance {
    let mut stops = labels(trip, "V");
    stops.rotate_left(depot);
    let costs = table(trip, "c");
    let mut text = format!("V\n{}\n\nr = {}\n", stops.join(" "), stops[0]);
    for heading in ["A by i, j", "c by i, j"] {
        text.push_str(&format!("\n{heading}\n"));
        for (drive, cost) in costs.iter().filter(|(drive, _)| drive[0] != drive[1]) {
            let number = if heading.starts_with('c') { format!(" {cost}") } else { String::new() };
            text.push_str(&format!("{} {}{number}\n", drive[0], drive[1]));
        }
    }
    instance(&text)
}

/// A TSPLIB instance by name, or `None` when the open data are not at hand.
#[must_use]
pub fn tsplib(name: &str) -> Option<Instance> {
    let symmetric = ["tsp", "atsp"].iter().find_map(|ending| {
        let file = format!("tsplib/{name}.{ending}");
        let folder = std::env::var_os("HULLWARD_DATA")?;
        Path::new(&folder).join(&file).exists().then_some(file)
    });
    let file = symmetric.unwrap_or_else(|| format!("tsplib/{name}.tsp"));
    crate::open_data(&file, crate::TSPLIB).map(|text| instance(&text))
}
