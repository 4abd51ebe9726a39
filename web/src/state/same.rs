//! Whether results are those that were there when the link or file was made.

use record::message::RivalReport;
use record::results::{Comparison, RivalResult, RootReport, SearchReport, compare, digest};
use record::scenario::{InstanceText, Run, Scenario};

use crate::state::board::Board;
use crate::state::document::{Document, Slot};
use crate::state::instances::name_on_record;
use crate::state::lane::Lane;
use crate::state::pointer::Shared;

/// The version of page and engine, which are one file.
const VERSION: &str = env!("CARGO_PKG_VERSION");

/// What a scenario was made with, and what it was then.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Made {
    digest: String,
    engine: Option<String>,
    slots: Vec<Slot>,
    draft: Shared<InstanceText>,
    run: Shared<Run>,
}

impl Made {
    /// What a scenario that was just opened says; `None` where it was made without results.
    pub(crate) fn of(document: &Document) -> Option<Self> {
        Some(Self {
            digest: document.rest.digest.clone()?,
            engine: document.rest.engine.clone(),
            slots: document.slots.clone(),
            draft: document.draft.clone(),
            run: document.run.clone(),
        })
    }

    /// Whether the document is still what was opened, so that results can be compared.
    fn holds(&self, document: &Document) -> bool {
        self.slots == document.slots && self.draft == document.draft && self.run == document.run
    }
}

/// What the lanes have found, by the order of the rivals; compared by address.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Found(Vec<FoundInLane>);

/// What a rival is, its relaxation and its search, as far as they are there.
pub(crate) type FoundInLane =
    (Option<Shared<RivalReport>>, Option<Shared<RootReport>>, Option<Shared<SearchReport>>);

impl Found {
    /// What the lanes of a document have found.
    pub(crate) fn on(document: &Document, board: &Board) -> Self {
        let lanes = document.slots.iter().map(|slot| board.lane(slot.id));
        Self(lanes.map(|lane| found_in(&lane)).collect())
    }

    fn results(&self) -> Vec<RivalResult> {
        self.0.iter().map(result).collect()
    }

    /// Its digest; `None` where nothing is found yet.
    pub(crate) fn digest(&self) -> Option<String> {
        digest(&self.results())
    }
}

/// What a lane has found, its search once that stands still.
pub(crate) fn found_in(lane: &Lane) -> FoundInLane {
    let search = lane.search.clone().filter(|_| !lane.phase.is_busy());
    (lane.rival.clone(), lane.root.clone(), search)
}

/// What is known of every rival on every instance, as a record and a pack name it; what was not run
/// on an instance is left out.
pub(crate) fn results(document: &Document, board: &Board) -> Vec<RivalResult> {
    let instances = document.instances();
    let several = instances.len() > 1;
    let mut all = Vec::new();
    for (place, text) in instances.iter().enumerate() {
        let instance = if several { name_on_record(text, place) } else { String::new() };
        for (number, slot) in document.slots.iter().enumerate() {
            let found = if place == document.chosen {
                Some(found_in(&board.lane(slot.id)))
            } else {
                board.kept_of(&slot.rival, text).map(|outcome| outcome.found)
            };
            all.extend(found.map(|found| RivalResult {
                instance: instance.clone(),
                ..named(document, (number, slot), &found)
            }));
        }
    }
    all
}

/// A result with its letter, title and ending.
fn named(document: &Document, (place, slot): (usize, &Slot), found: &FoundInLane) -> RivalResult {
    let result = result(found);
    let ended = result.search.as_ref().map(|search| search.status);
    let ended = ended.or(result.root.as_ref().map(|root| root.status));
    RivalResult {
        rival: Document::letter(place),
        title: document.rival_title(&slot.rival),
        status: ended.unwrap_or_default(),
        relaxation: document.is_relaxation(&slot.rival),
        ..result
    }
}

fn result((rival, root, search): &FoundInLane) -> RivalResult {
    let mut result = RivalResult::default();
    if let Some(rival) = rival {
        result.maximise = rival.maximise;
        result.rows = rival.rows;
        result.columns = rival.columns;
        result.integer_columns = rival.integer_columns;
        result.nonzeros = rival.nonzeros;
        result.families.clone_from(&rival.families);
    }
    result.root = root.as_deref().cloned();
    result.search = search.as_deref().cloned();
    result
}

impl Document {
    /// The scenario file with what its results were.
    pub(crate) fn file_with(&self, digest: Option<&String>) -> String {
        let engine = digest.map(|_| VERSION.to_owned());
        let scenario = Scenario { engine, digest: digest.cloned(), ..self.scenario() };
        record::file::print(&scenario)
    }

    /// Whether the results are those that the scenario was made with, in words; empty while there
    /// is nothing to compare.
    pub(crate) fn verdict(&self, found: &Found) -> String {
        let Some(made) = self.made.as_ref().filter(|made| made.holds(self)) else {
            return String::new();
        };
        let results = found.results();
        let compared = results.iter().enumerate();
        let compared: Vec<Comparison> =
            compared.map(|(place, result)| compare(&made.digest, place, result)).collect();
        let words = words(&compared);
        match made.engine.as_deref().filter(|engine| *engine != VERSION) {
            Some(engine) if !words.is_empty() => {
                format!("{words} It was made with engine {engine}; this is {VERSION}.")
            }
            _ => words,
        }
    }
}

fn words(compared: &[Comparison]) -> String {
    let letters = |wanted: &Comparison| {
        let places = (0..compared.len()).filter(|&place| compared[place] == *wanted);
        places.map(Document::letter).collect::<Vec<_>>().join(", ")
    };
    let differs = compared.iter().enumerate().find_map(|(place, found)| match found {
        Comparison::Differs(what) => Some(format!("{}, {what}", Document::letter(place))),
        _ => None,
    });
    if let Some(what) = differs {
        return format!("Differs from the results that this was made with: {what}.");
    }
    match (letters(&Comparison::Same).is_empty(), letters(&Comparison::Waiting)) {
        (true, _) => String::new(),
        (false, waiting) if waiting.is_empty() => "Same results as when this was made.".to_owned(),
        (false, waiting) => {
            format!("Same results so far as when this was made; {waiting} came further then.")
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::state::document::DocumentAction;
    use record::results::Status;
    use record::scenario::Rival;
    use yew::Reducible;

    fn root(bound: f64) -> RootReport {
        RootReport {
            status: Status::Optimal,
            bound: Some(bound),
            checked: true,
            iterations: 1,
            ..RootReport::default()
        }
    }

    fn found(bounds: &[Option<f64>]) -> Found {
        let lane = |bound: &Option<f64>| (None, bound.map(|bound| Shared::new(root(bound))), None);
        Found(bounds.iter().map(lane).collect())
    }

    /// A rival that a file may hold without an instance.
    fn rival() -> Rival {
        Rival { mps: Some("NAME\n".to_owned()), ..Rival::default() }
    }

    fn opened(digest: Option<String>, engine: &str) -> Document {
        Document::open(Scenario {
            rivals: vec![rival(), rival()],
            engine: digest.as_ref().map(|_| engine.to_owned()),
            digest,
            ..Scenario::default()
        })
    }

    #[test]
    fn the_verdict_waits_for_results_and_names_what_differs() {
        let made = found(&[Some(1.0), Some(2.0)]).digest();
        let document = opened(made, VERSION);
        let said = |bounds: &[Option<f64>]| document.verdict(&found(bounds));
        assert_eq!(said(&[None, None]), "");
        assert!(said(&[Some(1.0), None]).contains("so far as when this was made; B came further"));
        assert_eq!(said(&[Some(1.0), Some(2.0)]), "Same results as when this was made.");
        assert!(said(&[Some(1.0), Some(2.5)]).ends_with("made with: B, the relaxation."));
        assert_eq!(opened(None, VERSION).verdict(&found(&[Some(1.0), None])), "");
    }

    #[test]
    fn another_engine_is_named() {
        let document = opened(found(&[Some(1.0)]).digest(), "0.0.1");
        assert!(document.verdict(&found(&[Some(1.0), None])).contains("made with engine 0.0.1;"));
    }

    #[test]
    fn a_scenario_that_was_changed_is_not_judged_until_undo() {
        let document = std::rc::Rc::new(opened(found(&[Some(1.0)]).digest(), VERSION));
        let now = found(&[Some(1.0), None]);
        let id = document.slots[1].id;
        let changed = document.reduce(DocumentAction::Remove(id));
        assert_eq!(changed.verdict(&now), "");
        assert!(!changed.reduce(DocumentAction::Undo).verdict(&now).is_empty());
    }

    #[test]
    fn a_file_carries_digest_and_version() {
        let document = opened(None, VERSION);
        let digest = found(&[Some(1.0), None]).digest();
        let read = record::file::parse(&document.file_with(digest.as_ref())).scenario.unwrap();
        assert_eq!((read.digest, read.engine.as_deref()), (digest, Some(VERSION)));
        assert!(!document.file_with(None).contains("engine"));
    }
}
