//! What the browser keeps of the page: the scenario, in two places that take turns.
//!
//! Pages opened from disk may share one store, so the names begin with the project's and end
//! with the version of what stands there.

use gloo_utils::window;
use record::scenario::Scenario;
use web_sys::Storage;

use crate::state::share::{Saved, next_place, restored};

/// The two places.
pub(crate) const PLACES: [&str; 2] = ["hullward.scenario.1.a", "hullward.scenario.1.b"];

fn storage() -> Option<Storage> {
    window().local_storage().ok().flatten()
}

fn saved(storage: &Storage) -> [Option<Saved>; 2] {
    PLACES.map(|place| storage.get_item(place).ok().flatten().and_then(|text| Saved::parse(&text)))
}

/// The scenario that was saved last, with its text; `None` too where the store is blocked.
pub(crate) fn restore() -> Option<(Scenario, String)> {
    let places = saved(&storage()?);
    restored(&places).map(|(scenario, text)| (scenario, text.to_owned()))
}

/// Saves a scenario file; the reason in words when the browser does not.
pub(crate) fn save(text: &str) -> Result<(), &'static str> {
    let storage = storage().ok_or("its store is blocked")?;
    let (place, number) = next_place(&saved(&storage));
    let text = Saved { number, text: text.to_owned() }.print();
    storage.set_item(PLACES[place], &text).map_err(|_| "its store is full or blocked")
}
