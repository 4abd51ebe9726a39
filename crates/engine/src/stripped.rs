//! A scenario without names, to be shared where the data may not be: labels, titles, remarks and notes
//! are replaced, and where a factor is given the costs of the objective are multiplied by it. What is
//! left is compared with what it was, rival by rival and instance by instance: the same columns and
//! rows, and costs that are the old ones times the factor.

mod names;
mod same;

use std::collections::BTreeMap;

use instance::{Datum, Instance, Number, blocks_text};
use model::Model;
use record::file;
use record::message::Reply;
use record::results::ErrorReport;
use record::scenario::{InstanceText, Rival, Scenario, letter};

use crate::fault::fault;
use crate::handover::{Refusal, written};
use crate::load::{formulation, load};
use crate::readings::Readings;
use names::Names;
use same::{nameless, same};

/// A scenario without names.
#[derive(Debug, Clone, PartialEq)]
pub struct Stripped {
    /// The scenario.
    pub scenario: Scenario,
    /// What who takes it should know, one sentence each.
    pub notes: Vec<String>,
}

/// The answer to a page that strips a scenario, given as text, of its names.
pub(crate) fn stripped_of(text: &str, factor: &str) -> Reply {
    match file::parse(text).scenario {
        Some(scenario) => {
            let bare = stripped(&scenario, factor);
            written(bare.map(|bare| (file::print(&bare.scenario), bare.notes)), "scenario")
        }
        None => Reply::Failed(fault("scenario", "the scenario cannot be read")),
    }
}

/// The scenario without names, its costs multiplied by a positive decimal number.
///
/// # Errors
/// A factor that is none; an instance or a rival that cannot be read; costs that cannot be told from
/// other data; what is no longer the same, which is our fault.
pub fn stripped(scenario: &Scenario, factor: &str) -> Result<Stripped, Refusal> {
    let factor = positive(factor)?;
    let places = places(scenario);
    let mut before = Vec::new();
    for &place in &places {
        before.push(load(scenario, place)?.model);
    }
    let mut names = Names::default();
    let mut out =
        Scenario { seed: scenario.seed, run: scenario.run.clone(), ..Scenario::default() };
    out.run.plan = None;
    let mut texts = Vec::new();
    for place in 0..scenario.instances().count() {
        texts.push(instance_text(scenario, place, &mut names)?);
    }
    let mut texts = texts.into_iter();
    (out.instance, out.further_instances) = (texts.next(), texts.collect());
    for (place, rival) in scenario.rivals.iter().enumerate() {
        let model = places.iter().position(|(_, rival)| *rival == place).map(|at| &before[at]);
        out.rivals.push(nameless_rival(rival, place, model.map(|model| &**model), &mut names)?);
    }
    out.studies = scenario.studies.iter().filter(|one| one.kind != "production").cloned().collect();
    if factor != Number::ONE {
        scaled(&mut out, &places, (&before, &factor))?;
    }
    compared(&out, &places, (&before, &factor))?;
    Ok(Stripped { notes: notes(scenario, &factor), scenario: out })
}

/// A factor from its text.
fn positive(text: &str) -> Result<Number, ErrorReport> {
    let value = text.parse::<f64>().ok().filter(|value| value.is_finite() && *value > 0.0);
    let number = value.and_then(|value| Number::try_from(value).ok());
    number.ok_or_else(|| fault("scenario", format!("the factor must be over 0, not {text}")))
}

/// Every instance with every rival, by place.
fn places(scenario: &Scenario) -> Vec<(usize, usize)> {
    let instances = scenario.instances().count().max(1);
    let rivals = scenario.rivals.len();
    (0..instances).flat_map(|at| (0..rivals).map(move |rival| (at, rival))).collect()
}

/// An instance as blocks, its labels and long names replaced, and what binds formulations to it.
fn instance_text(
    scenario: &Scenario,
    place: usize,
    names: &mut Names,
) -> Result<InstanceText, ErrorReport> {
    let given = scenario.instances().nth(place).cloned().unwrap_or_default();
    let reading = Readings::default().read(&given)?;
    let Some(instance) = &reading.instance else {
        return Err(fault("instance", "the instance cannot be read"));
    };
    let renamed = names.of_data(instance);
    let mut bind = BTreeMap::new();
    for rival in scenario.rivals.iter().filter(|rival| rival.mps.is_none()) {
        let (text, _) = formulation(rival)?;
        let parse = notation::parse(&text);
        let (checked, _) = notation::check(&parse.tree);
        for line in notation::matches(&text, &checked, instance, &given.bind) {
            let taken = line.taken.and_then(|taken| renamed.get(&taken).cloned());
            if let Some(taken) = taken.filter(|taken| *taken != line.name) {
                bind.entry(line.name).or_insert(taken);
            }
        }
    }
    let mut bare = Instance::new(instance::Reader::Blocks);
    for (name, datum) in instance.data() {
        bare.set(&renamed[name], names.datum(datum));
    }
    let several = !scenario.further_instances.is_empty();
    let title = if several { format!("instance {}", place + 1) } else { String::new() };
    let reader = Some(instance::Reader::Blocks.name().to_owned());
    Ok(InstanceText { reader, title, text: blocks_text(&bare), bind })
}

/// A rival without title and remarks; a model in MPS with other names.
fn nameless_rival(
    rival: &Rival,
    place: usize,
    model: Option<&Model>,
    names: &mut Names,
) -> Result<Rival, Refusal> {
    let mut out = Rival { acts: Vec::new(), title: String::new(), ..rival.clone() };
    if rival.text.is_some() {
        let (text, _) = formulation(rival)?;
        let mut tree = notation::parse(&text).tree;
        tree.title = Some(format!("Rival {}", letter(place)));
        for line in &mut tree.data {
            line.remark = None;
        }
        out.text = Some(notation::print(&tree));
    }
    if let (Some(_), Some(model)) = (&rival.mps, model) {
        let bare = nameless(model, names).map_err(|error| fault("rival", error.to_string()))?;
        let text = model::mps::write(&bare).map_err(|error| fault("rival", error.to_string()))?;
        out.mps = Some(text.text);
        out.families.clear();
    }
    Ok(out)
}

type Before<'b> = (&'b [std::rc::Rc<Model>], &'b Number);

/// Multiplies by the factor what costs alone depend on: a datum is one where with it multiplied every
/// row is as before.
fn scaled(
    out: &mut Scenario,
    places: &[(usize, usize)],
    before: Before<'_>,
) -> Result<(), Refusal> {
    let (models, factor) = before;
    for (place, rival) in out.rivals.iter_mut().enumerate() {
        let at = places.iter().position(|(_, rival)| *rival == place);
        if let (Some(text), Some(at)) = (&rival.mps, at) {
            let (model, _) = model::mps::read(text)
                .map_err(|_| Refusal::Broken("the MPS text cannot be read again".to_owned()))?;
            debug_assert_eq!(model.columns().len(), models[at].columns().len());
            let priced = same::priced(&model, factor);
            let written = model::mps::write(&priced);
            rival.mps = Some(written.map_err(|error| fault("rival", error.to_string()))?.text);
        }
    }
    for at in 0..out.instances().count() {
        let given = out.instances().nth(at).cloned().unwrap_or_default();
        let reading = Readings::default().read(&given)?;
        let Some(mut instance) = reading.instance.clone() else { continue };
        let names: Vec<String> = instance.data().map(|(name, _)| name.to_owned()).collect();
        for name in names {
            let Some(datum) = instance.get(&name).and_then(|datum| times(datum, factor)) else {
                continue;
            };
            let mut tried = instance.clone();
            tried.set(&name, datum);
            let text = InstanceText { text: blocks_text(&tried), ..given.clone() };
            let trial = with_instance(out, at, text);
            let own = places.iter().zip(models).filter(|((on, _), _)| *on == at);
            let mut notation = own.filter(|((_, rival), _)| out.rivals[*rival].mps.is_none());
            let rows_stay = notation.all(|(&place, old)| {
                load(&trial, place).is_ok_and(|new| same::rows(old, &new.model).is_ok())
            });
            if rows_stay {
                instance = tried;
            }
        }
        *out = with_instance(out, at, InstanceText { text: blocks_text(&instance), ..given });
    }
    Ok(())
}

/// A number, or numbers, times a factor.
fn times(datum: &Datum, factor: &Number) -> Option<Datum> {
    match datum {
        Datum::Number(number) => Some(Datum::Number(number * factor)),
        Datum::Table { arity, cells } => {
            let cells = cells.iter().map(|(tuple, number)| (tuple.clone(), number * factor));
            Some(Datum::Table { arity: *arity, cells: cells.collect() })
        }
        _ => None,
    }
}

fn with_instance(scenario: &Scenario, at: usize, text: InstanceText) -> Scenario {
    let mut out = scenario.clone();
    match at.checked_sub(1) {
        None => out.instance = Some(text),
        Some(further) => out.further_instances[further] = text,
    }
    out
}

/// Every rival on every instance is what it was, but for names and the factor of its costs.
fn compared(
    out: &Scenario,
    places: &[(usize, usize)],
    (before, factor): Before<'_>,
) -> Result<(), Refusal> {
    for (&place, old) in places.iter().zip(before) {
        let named = |what: String| format!("rival {} without names: {what}", letter(place.1));
        let new = load(out, place).map_err(|error| Refusal::Broken(named(error.message)))?;
        same::rows(old, &new.model).map_err(|what| Refusal::Broken(named(what)))?;
        if let Err(what) = same(old, &new.model, factor) {
            let why = format!(
                "{what}: its costs are made of data that rows need too, or of products; without a factor \
                 it can be stripped"
            );
            return Err(fault("rival", named(why)).into());
        }
    }
    Ok(())
}

/// What is not in it, and what is.
fn notes(scenario: &Scenario, factor: &Number) -> Vec<String> {
    let mut notes = vec![
        "labels, titles, remarks, notes, places on the map, acts by hand and a plan to begin with are not \
         in it; every rival was compared with what it was"
            .to_owned(),
    ];
    if scenario.rivals.iter().any(|rival| rival.text.is_some()) {
        notes.push(
            "names of variables and families in your own notation are still in it".to_owned(),
        );
    }
    if *factor == Number::ONE {
        notes.push("numbers are as they were; a factor would multiply the costs".to_owned());
    }
    notes
}
