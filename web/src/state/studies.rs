//! The studies that the page offers, and what they found.

use std::collections::BTreeMap;
use std::rc::Rc;

use record::file;
use record::scenario::{Field, Scenario, Study};
use record::study::Report;
use report::study::over_instances;
use yew::Reducible;

use crate::state::document::Document;
use crate::state::instances::name_on_record;

/// The kinds, each with its question and what is done to answer it.
pub(crate) const KINDS: [(&str, &str, &str); 12] = [
    (
        "equivalence",
        "Are the rivals the same problem?",
        "The best plan of each in the other, duels on random objectives, every plan of \
         sub-instances, and rivals broken on purpose as a control.",
    ),
    (
        "order",
        "Which relaxation is stronger?",
        "Theorems where there are some; else every row of one rival over the other's relaxation, \
         in exact arithmetic.",
    ),
    (
        "ladder",
        "What lifts the bound?",
        "Propagation, smaller coefficients, each class of general cuts and the search, towards \
         one reference value.",
    ),
    (
        "families",
        "Where does the bound come from?",
        "Each constraint family left out, alone, and its share, by solving anew.",
    ),
    (
        "tightening",
        "Which coefficients could be smaller?",
        "The least that can be proved for each row that a binary switches, and what it buys.",
    ),
    (
        "cuts",
        "Which general cuts are worth their rows?",
        "Each class alone, and the fewest that gain nine tenths of what all gain.",
    ),
    (
        "growth",
        "How do they compare as the instance grows?",
        "Every rival on parts of the instance, five of each size; paired, with what is not \
         distinguishable said to be so.",
    ),
    (
        "numerics",
        "Do the coefficients range too far?",
        "Ranges, ratios, what can leak, the condition of the optimal basis, and what exact \
         arithmetic makes of bound and plan.",
    ),
    (
        "symmetry",
        "What does a rival not tell apart?",
        "Labels that can be exchanged, other symmetries, each verified, and rows that keep one copy.",
    ),
    (
        "variability",
        "How much is chance?",
        "Every rival with its rows and columns in ten other orders, the same for all; each stop \
         as the root.",
    ),
    (
        "infeasibility",
        "Why is there no plan?",
        "The fewest rows that cannot hold together, and the cheapest way to relax them.",
    ),
    (
        PRODUCTION,
        "What did the team's own solver do?",
        "Means, paired ratios with their interval, and whether a result contradicts a bound that is \
         proved here.",
    ),
];

/// The study of pasted results: it is made of all instances at once.
pub(crate) const PRODUCTION: &str = "production";
/// Studies whose one answer speaks of all instances together.
pub(crate) const OVER_ALL: [&str; 2] = ["growth", "variability"];
/// Its field of pasted text.
const TABLE: &str = "table";

/// What a study gave.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Found {
    /// The scenario that it was made of.
    pub(crate) of: Rc<str>,
    /// Instance by instance.
    pub(crate) parts: Vec<Part>,
    /// Instances that were asked for and not come to, since it was stopped.
    pub(crate) left: usize,
}

impl Found {
    /// Its reports, each with its instance's name on record.
    pub(crate) fn named(&self) -> impl Iterator<Item = (String, Report)> + '_ {
        self.parts.iter().flat_map(|part| {
            let reports = part.reports.iter().flatten();
            reports.map(|report| (part.instance.clone(), report.clone()))
        })
    }

    /// What the answers on several instances come to together.
    pub(crate) fn over(&self) -> Vec<Report> {
        over_instances(&self.named().collect::<Vec<_>>())
    }
}

/// What a study gave on one instance.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Part {
    /// The instance's name on record; empty where there is one.
    pub(crate) instance: String,
    /// Its reports, or why there are none.
    pub(crate) reports: Result<Vec<Report>, String>,
}

/// Instances that a study is asked of.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Of {
    /// The one that is chosen.
    Chosen,
    /// All of the scenario.
    All,
}

/// All that was found, and what is being done.
#[derive(Debug, Clone, Default, PartialEq)]
pub(crate) struct Shelf {
    /// By kind.
    pub(crate) found: BTreeMap<&'static str, Rc<Found>>,
    /// The kind that is being made, and what it does now.
    pub(crate) running: Option<(&'static str, String)>,
    /// The kinds that were asked meanwhile, in that order.
    pub(crate) waiting: Vec<&'static str>,
}

/// What happens to the shelf.
#[derive(Debug)]
pub(crate) enum ShelfAction {
    /// A study is asked for while another runs.
    Asked(&'static str),
    /// It is not asked for any more.
    Withdrawn(&'static str),
    /// A study begins.
    Begun(&'static str),
    /// It says what it does.
    Doing(String),
    /// It is at its end.
    Ended(Found),
    /// It is given up.
    Stopped,
}

impl Reducible for Shelf {
    type Action = ShelfAction;

    fn reduce(self: Rc<Self>, action: ShelfAction) -> Rc<Self> {
        let mut shelf = (*self).clone();
        match action {
            ShelfAction::Asked(kind) => shelf.waiting.push(kind),
            ShelfAction::Withdrawn(kind) => shelf.waiting.retain(|&waiting| waiting != kind),
            ShelfAction::Begun(kind) => {
                shelf.waiting.retain(|&waiting| waiting != kind);
                shelf.running = Some((kind, "beginning".to_owned()));
            }
            ShelfAction::Doing(doing) => {
                if let Some((_, now)) = &mut shelf.running {
                    *now = doing;
                }
            }
            ShelfAction::Ended(found) => {
                if let Some((kind, _)) = shelf.running.take() {
                    shelf.found.insert(kind, Rc::new(found));
                }
            }
            ShelfAction::Stopped => shelf.running = None,
        }
        shelf.into()
    }
}

/// The text of the scenario that a study of this kind is made of: the document's, with that study
/// alone, as the document has it or plain.
pub(crate) fn scenario_of(document: &Document, kind: &str) -> String {
    let scenario = document.scenario();
    let own = scenario.studies.iter().find(|study| study.kind == kind).cloned();
    let plain = || Study { kind: kind.to_owned(), fields: BTreeMap::new() };
    let studies = vec![own.unwrap_or_else(plain)];
    let rivals = scenario
        .rivals
        .into_iter()
        .map(|rival| record::scenario::Rival { acts: Vec::new(), ..rival });
    let rivals = rivals.collect();
    file::print(&Scenario {
        studies,
        rivals,
        title: String::new(),
        notes: String::new(),
        ..scenario
    })
}

impl Document {
    /// A study belongs to the scenario from now on.
    pub(crate) fn with_study(&mut self, kind: &str) {
        if self.rest.studies.iter().any(|study| study.kind == kind) {
            return;
        }
        let mut rest = (*self.rest).clone();
        rest.studies.push(Study { kind: kind.to_owned(), fields: BTreeMap::new() });
        self.rest = crate::state::pointer::Shared::new(rest);
    }

    /// The pasted results of the team's own solver.
    pub(crate) fn table(&self) -> &str {
        let study = self.rest.studies.iter().find(|study| study.kind == PRODUCTION);
        match study.and_then(|study| study.fields.get(TABLE)) {
            Some(Field::Text(text)) => text,
            _ => "",
        }
    }

    /// Other results are pasted; without any there is no such study.
    pub(crate) fn with_table(&mut self, text: String) {
        let mut rest = (*self.rest).clone();
        rest.studies.retain(|study| study.kind != PRODUCTION);
        if !text.trim().is_empty() {
            let fields = BTreeMap::from([(TABLE.to_owned(), Field::Text(text))]);
            rest.studies.push(Study { kind: PRODUCTION.to_owned(), fields });
        }
        self.rest = crate::state::pointer::Shared::new(rest);
    }

    /// The instances that a study is asked of, by place, each with its name on record; the first alone,
    /// without a name, of a study that speaks of all together.
    pub(crate) fn asked(&self, kind: &str, of: Of) -> Vec<(usize, String)> {
        if OVER_ALL.contains(&kind) {
            return vec![(0, String::new())];
        }
        let all = self.instances();
        let alone = all.len() == 1;
        let named = all.iter().enumerate().map(|(place, text)| {
            (place, if alone { String::new() } else { name_on_record(text, place) })
        });
        named.filter(|(place, _)| of == Of::All || *place == self.chosen).collect()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::demo::demo;
    use crate::state::document::DocumentAction;
    use crate::state::instances::InstanceEdit;

    #[test]
    fn a_study_is_made_of_what_counts_alone() {
        let mut document = Document::open(demo());
        let before = scenario_of(&document, "ladder");
        document.title = "another".to_owned();
        assert_eq!(scenario_of(&document, "ladder"), before);
        document.seed += 1;
        assert_ne!(scenario_of(&document, "ladder"), before);
        document.with_study("ladder");
        document.with_study("ladder");
        assert_eq!(document.scenario().studies.len(), demo().studies.len() + 1);
    }

    #[test]
    fn a_pasted_table_is_a_study_of_the_scenario_and_an_empty_one_is_none() {
        let mut document = Document::open(demo());
        assert_eq!(document.table(), "");
        let pasted = "instance\trival\tnodes\nMonday\tA\t7\n";
        document.with_table(pasted.to_owned());
        assert_eq!(document.table(), pasted);
        let again = file::parse(&scenario_of(&document, PRODUCTION)).scenario.unwrap();
        assert_eq!(Document::open(again).table(), pasted, "a file keeps its tabs");
        document.with_table(" \n".to_owned());
        assert!(document.scenario().studies.iter().all(|study| study.kind != PRODUCTION));
    }

    #[test]
    fn a_study_is_asked_of_the_chosen_instance_or_of_all() {
        let document = Rc::new(Document::open(demo()));
        assert_eq!(document.asked("ladder", Of::All), [(0, String::new())]);
        let two = document.reduce(DocumentAction::Instances(InstanceEdit::Add));
        let names =
            |of| two.asked("ladder", of).into_iter().map(|(place, _)| place).collect::<Vec<_>>();
        assert_eq!((names(Of::Chosen), names(Of::All)), (vec![1], vec![0, 1]));
        assert_eq!(
            two.asked("growth", Of::Chosen),
            [(0, String::new())],
            "it goes over all by itself"
        );
        assert!(two.asked("ladder", Of::All).iter().all(|(_, name)| !name.is_empty()));
    }

    #[test]
    fn what_ends_is_kept_under_its_kind() {
        let mut shelf = Rc::new(Shelf::default());
        let found = || Found { of: "".into(), parts: Vec::new(), left: 0 };
        for action in [
            ShelfAction::Begun("order"),
            ShelfAction::Doing("row 1".to_owned()),
            ShelfAction::Asked("ladder"),
            ShelfAction::Asked("numerics"),
            ShelfAction::Asked("growth"),
            ShelfAction::Withdrawn("numerics"),
            ShelfAction::Ended(found()),
            ShelfAction::Ended(found()),
            ShelfAction::Begun("ladder"),
            ShelfAction::Stopped,
        ] {
            shelf = shelf.reduce(action);
        }
        assert_eq!(shelf.waiting, ["growth"]);
        assert_eq!(shelf.found.keys().copied().collect::<Vec<_>>(), ["order"]);
        assert_eq!(shelf.running, None);
    }
}
