//! The scenario as it is edited: the instance's text, what was read of it, and the rivals.

use std::collections::BTreeMap;
use std::rc::Rc;

use crate::demo::demo;
use crate::state::arrange::Arrange;
use crate::state::editor::Edit;
use crate::state::history::History;
use crate::state::instances::InstanceEdit;
use crate::state::lane::LaneId;
use crate::state::mps::looks_like_mps;
use crate::state::pointer::Shared;
use crate::state::recorded::Recorded;
use crate::state::same::Made;
use crate::state::steer::Steer;
use record::file::{looks_like_a_scenario, parse};
use record::message::{Binding, CatalogueEntry, InstanceReport, Suit};
use record::scenario::{
    FamilyState, InstanceText, MOST_RIVALS, Rival, Role, Run, Scenario, letter,
};

/// The readers, as the scenario file names them, with a word for people.
pub(crate) const READERS: [(&str, &str); 18] = [
    ("matrix", "distance table"),
    ("points", "points in the plane"),
    ("points geographic", "points by latitude, longitude"),
    ("arcs", "list of drives"),
    ("table", "tables of a spreadsheet"),
    ("tsplib", "TSPLIB file"),
    ("blocks", "named blocks"),
    ("knapsack", "knapsack"),
    ("multi-knapsack", "OR-Library mknap"),
    ("assignment", "OR-Library gap"),
    ("sites", "OR-Library cap"),
    ("medians", "OR-Library pmed"),
    ("tardiness", "OR-Library wt"),
    ("job-shop", "job shop"),
    ("quadratic", "QAPLIB file"),
    ("graph", "DIMACS graph"),
    ("steiner", "SteinLib file"),
    ("routing", "routing: n K Q, q x y"),
];

/// A title for an instance that has none.
const UNTITLED: &str = "Pasted instance";

/// A rival in its lane.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Slot {
    /// The lane.
    pub(crate) id: LaneId,
    /// The rival.
    pub(crate) rival: Shared<Rival>,
    /// What it was as shipped, once it was edited.
    pub(crate) shipped: Option<Shared<Rival>>,
}

/// An instance that was read and can be used.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Accepted {
    /// The text.
    pub(crate) text: Shared<InstanceText>,
    /// What was understood.
    pub(crate) report: Shared<InstanceReport>,
}

/// The scenario as it is edited.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Document {
    /// The title.
    pub(crate) title: String,
    /// Whether a person gave the title.
    titled: bool,
    /// The notes.
    pub(crate) notes: Shared<String>,
    /// The seed.
    pub(crate) seed: u64,
    /// How rivals are run.
    pub(crate) run: Shared<Run>,
    /// The text in the box.
    pub(crate) draft: Shared<InstanceText>,
    /// What was read of the text in the box; `None` while it is being read.
    pub(crate) reading: Option<Shared<InstanceReport>>,
    /// The last text that could be used, which the rivals run on.
    pub(crate) accepted: Option<Accepted>,
    /// The other instances in order; the one in the box stands before that at `chosen`.
    pub(crate) others: Vec<Shared<InstanceText>>,
    /// The place of the instance in the box among all.
    pub(crate) chosen: usize,
    /// What the rivals take from the instance, by their names.
    pub(crate) bindings: Shared<Vec<Binding>>,
    /// Families whose data the instance holds, where no rival finds all of its own.
    pub(crate) suits: Shared<Vec<Suit>>,
    /// Lanes that a change of names did not touch, with the text that they still run on.
    pub(crate) held: BTreeMap<LaneId, Shared<InstanceText>>,
    /// The rivals in order.
    pub(crate) slots: Vec<Slot>,
    /// The shipped formulations.
    pub(crate) catalogue: Shared<Vec<CatalogueEntry>>,
    /// The scenario it was opened from: what the page does not edit is kept there.
    pub(crate) rest: Shared<Scenario>,
    /// What it was made with, where it was opened with results.
    pub(crate) made: Option<Made>,
    /// The pack that it was opened from, or is held against.
    pub(crate) pack: Option<Shared<Recorded>>,
    /// What can be undone and redone.
    pub(crate) history: Shared<History>,
    next: u32,
}

/// What a person, or the authoring worker, does to the document.
#[derive(Debug)]
pub(crate) enum DocumentAction {
    /// A scenario is opened in place of this one.
    Open(Box<Scenario>),
    /// A pack is opened: its scenario in place of this one, and held against what was recorded.
    OpenPack(Box<Scenario>, Box<Recorded>),
    /// What was recorded is no longer of interest.
    ForgetPack,
    /// The last change is taken back.
    Undo,
    /// What was taken back is done again.
    Redo,
    /// The title is given.
    Title(String),
    /// The notes are others.
    Notes(String),
    /// The text in the box is another.
    Text(String),
    /// The reader is another; `None` leaves it to be guessed.
    Reader(Option<String>),
    /// A text was read.
    Read(Shared<InstanceText>, InstanceReport),
    /// It is known what the rivals take from the instance, and what would suit it where none does.
    Bound(Vec<Binding>, Vec<Suit>),
    /// A name of the rivals takes another datum of the instance; `None` leaves it to be found.
    Bind(String, Option<String>),
    /// An instance joins, leaves, is chosen or named.
    Instances(InstanceEdit),
    /// The catalogue came.
    Catalogue(Vec<CatalogueEntry>),
    /// A rival from the catalogue joins.
    Add(String),
    /// A rival leaves.
    Remove(LaneId),
    /// A family of a rival gets a state.
    Family(LaneId, String, FamilyState),
    /// A rival is written or copied.
    Edit(Edit),
    /// The order or a title is another.
    Arrange(Arrange),
    /// What was done by hand is another.
    Steer(Steer),
    /// A study of this kind is asked for.
    Study(&'static str),
    /// Other results of the team's own solver are pasted.
    Table(String),
}

impl Document {
    /// The document of a scenario.
    pub(crate) fn open(scenario: Scenario) -> Self {
        Self::numbered(scenario, 1)
    }

    /// The document of a scenario whose lanes are numbered from `next`.
    fn numbered(mut scenario: Scenario, next: u32) -> Self {
        let rivals = std::mem::take(&mut scenario.rivals);
        let others = std::mem::take(&mut scenario.further_instances);
        let mut document = Self {
            titled: false,
            title: std::mem::take(&mut scenario.title),
            notes: Shared::new(std::mem::take(&mut scenario.notes)),
            seed: scenario.seed,
            run: Shared::new(scenario.run.clone()),
            draft: Shared::new(scenario.instance.take().unwrap_or_default()),
            reading: None,
            accepted: None,
            others: others.into_iter().map(Shared::new).collect(),
            chosen: 0,
            bindings: Shared::new(Vec::new()),
            suits: Shared::new(Vec::new()),
            held: BTreeMap::new(),
            slots: Vec::new(),
            catalogue: Shared::new(Vec::new()),
            rest: Shared::new(scenario),
            made: None,
            pack: None,
            history: Shared::new(History::default()),
            next,
        };
        for rival in rivals {
            document.push(rival);
        }
        document.made = Made::of(&document);
        document
    }

    /// The document of another scenario, opened in this one's place.
    fn open_another(&self, scenario: Scenario) -> Self {
        Self::numbered(scenario, self.next).again(self, self.history.clone())
    }

    /// This document in place of another: what is not of the scenario goes on.
    pub(crate) fn again(&self, other: &Self, history: Shared<History>) -> Self {
        let next = if self.next > other.next { self.next } else { other.next };
        let mut again = Self { catalogue: other.catalogue.clone(), history, next, ..self.clone() };
        again.recognise();
        again
    }

    /// The letter of the rival at a place.
    pub(crate) fn letter(place: usize) -> String {
        letter(place)
    }

    /// A title for a rival: its own, else the catalogue's without what stands in brackets, else
    /// its id.
    pub(crate) fn rival_title(&self, rival: &Rival) -> String {
        if !rival.title.is_empty() {
            return rival.title.clone();
        }
        let listed = self.entry(rival).map(|entry| bracketed(&entry.title).0.to_owned());
        let id = || rival.from.clone().unwrap_or_else(|| "own formulation".to_owned());
        listed.unwrap_or_else(id)
    }

    /// What the catalogue's title says in brackets: who published it.
    pub(crate) fn rival_source(&self, rival: &Rival) -> String {
        self.entry(rival).map_or_else(String::new, |entry| bracketed(&entry.title).1.to_owned())
    }

    pub(crate) fn entry(&self, rival: &Rival) -> Option<&CatalogueEntry> {
        self.catalogue.iter().find(|entry| rival.from.as_ref() == Some(&entry.id))
    }

    /// Whether a rival is known to be no more than a relaxation, so that its best solution need
    /// not be one of the problem.
    pub(crate) fn is_relaxation(&self, rival: &Rival) -> bool {
        rival.role == Some(Role::Relaxation)
            || self.entry(rival).is_some_and(|entry| entry.relaxation)
            || rival.families.values().any(|&state| state == FamilyState::Out)
    }

    /// Whether it has as many rivals as a scenario may have.
    pub(crate) fn is_full(&self) -> bool {
        self.slots.len() >= MOST_RIVALS
    }

    /// A rival joins, unless there are as many as there may be.
    pub(crate) fn push(&mut self, rival: Rival) {
        if self.is_full() {
            return;
        }
        self.slots.push(Slot { id: LaneId(self.next), rival: Shared::new(rival), shipped: None });
        self.next += 1;
    }

    /// Another text in the box; what was read of the old one does not hold for it.
    pub(crate) fn draft(&mut self, draft: InstanceText) {
        self.draft = Shared::new(draft);
        self.reading = None;
    }

    fn read(&mut self, text: Shared<InstanceText>, report: InstanceReport) {
        let report = Shared::new(report);
        self.reading = Some(report.clone());
        if !report.usable {
            return;
        }
        let before = self.accepted.as_ref().map(|accepted| accepted.text.clone());
        let another = before.as_ref().is_some_and(|before| *before != text);
        if another {
            self.held.clear();
        }
        let alone = self.others.is_empty();
        if before.is_some_and(|before| alone && is_another(&before.text, &text.text))
            && *self.notes == demo().notes
        {
            self.notes = Shared::new(String::new());
        }
        if another && alone {
            self.forget_acts();
        }
        if another && alone && !self.titled {
            self.title =
                if report.title.is_empty() { UNTITLED.to_owned() } else { report.title.clone() };
        }
        self.accepted = Some(Accepted { text, report });
    }

    fn set_family(&mut self, id: LaneId, family: String, state: FamilyState) {
        let Some(slot) = self.slots.iter_mut().find(|slot| slot.id == id) else { return };
        let mut rival = (*slot.rival).clone();
        rival.families.insert(family, state);
        rival.acts.clear();
        slot.rival = Shared::new(rival);
    }
}

/// A title and what stands in brackets at its end.
fn bracketed(title: &str) -> (&str, &str) {
    let inner = title.strip_suffix(')').and_then(|title| title.rsplit_once(" ("));
    inner.unwrap_or((title, ""))
}

/// The scenario that a text holds, if it is one without an error.
fn scenario(text: &str) -> Option<Scenario> {
    looks_like_a_scenario(text).then(|| parse(text).scenario).flatten()
}

/// What is wrong with a text that is meant as a scenario; `None` for any other text.
pub(crate) fn broken_scenario(text: &str) -> Option<InstanceReport> {
    looks_like_a_scenario(text).then(|| InstanceReport {
        facts: vec!["This is a scenario file that cannot be opened as it is.".to_owned()],
        complaints: parse(text).complaints,
        ..InstanceReport::default()
    })
}

impl Document {
    /// The document after a text was given: another scenario, a rival in MPS, or the instance.
    fn given(self: Rc<Self>, text: String) -> Rc<Self> {
        if text == self.draft.text {
            return self;
        }
        let mut document = (*self).clone();
        if let Some(scenario) = scenario(&text) {
            return document.open_another(scenario).into();
        }
        if looks_like_mps(&text) && !self.is_full() {
            document.push(Rival { mps: Some(text), ..Rival::default() });
            return document.into();
        }
        let another = is_another(&self.draft.text, &text);
        let InstanceText { reader, title, bind, .. } = (*self.draft).clone();
        let title = if self.others.is_empty() { String::new() } else { title };
        let (reader, bind) = if another { (None, BTreeMap::new()) } else { (reader, bind) };
        document.draft(InstanceText { reader, title, text, bind });
        document.into()
    }

    /// The document after an action; its history is the matter of [`crate::state::history`].
    pub(crate) fn apply(self: Rc<Self>, action: DocumentAction) -> Rc<Self> {
        let mut document = (*self).clone();
        match action {
            DocumentAction::Open(scenario) => return document.open_another(*scenario).into(),
            DocumentAction::OpenPack(scenario, recorded) => {
                let mut opened = document.open_another(*scenario);
                opened.pack = Some(Shared::new(*recorded));
                return opened.into();
            }
            DocumentAction::ForgetPack => document.pack = None,
            DocumentAction::Undo | DocumentAction::Redo => return self,
            DocumentAction::Notes(notes) => document.notes = Shared::new(notes),
            DocumentAction::Title(title) => {
                document.titled = !title.trim().is_empty();
                document.title = title;
            }
            DocumentAction::Text(text) => return self.given(text),
            DocumentAction::Reader(reader) => {
                document.draft(InstanceText { reader, ..(*document.draft).clone() });
            }
            DocumentAction::Read(text, report) => {
                if text != document.draft {
                    return self;
                }
                document.read(text, report);
            }
            DocumentAction::Catalogue(entries) => {
                document.catalogue = Shared::new(entries);
                document.recognise();
            }
            DocumentAction::Bound(bindings, suits) => {
                document.bindings = Shared::new(bindings);
                document.suits = Shared::new(suits);
            }
            DocumentAction::Bind(name, taken) => document.bind(name, taken),
            DocumentAction::Instances(edit) => document.edit_instances(edit),
            DocumentAction::Add(id) => {
                document.push(Rival { from: Some(id), ..Rival::default() });
            }
            DocumentAction::Remove(id) => document.slots.retain(|slot| slot.id != id),
            DocumentAction::Family(id, family, state) => document.set_family(id, family, state),
            DocumentAction::Edit(edit) => document.edit(edit),
            DocumentAction::Arrange(arrange) => document.arrange(arrange),
            DocumentAction::Steer(steer) => document.steer(steer),
            DocumentAction::Study(kind) => document.with_study(kind),
            DocumentAction::Table(text) => document.with_table(text),
        }
        document.release_changed(&self);
        document.into()
    }
}

/// Whether a text stands in place of the old one instead of changing it: less than half of it was
/// there before, counted from both ends. Then the reader that was right for the old one may be
/// wrong.
pub(crate) fn is_another(old: &str, new: &str) -> bool {
    let longer = old.len().max(new.len());
    let start = old.bytes().zip(new.bytes()).take_while(|(a, b)| a == b).count();
    let rest = (old.len() - start).min(new.len() - start);
    let ends = old.bytes().rev().zip(new.bytes().rev()).take(rest);
    let end = ends.take_while(|(a, b)| a == b).count();
    !old.is_empty() && 2 * (start + end) < longer
}

#[cfg(test)]
mod tests {
    use yew::Reducible;

    use super::*;

    fn document() -> Rc<Document> {
        let rival = |id: &str| Rival { from: Some(id.to_owned()), ..Rival::default() };
        Rc::new(Document::open(Scenario {
            title: "Round".to_owned(),
            instance: Some(InstanceText { text: "0 1\n1 0".to_owned(), ..InstanceText::default() }),
            rivals: vec![rival("atsp/labels"), rival("atsp/subtours")],
            ..Scenario::default()
        }))
    }

    fn usable(title: &str) -> InstanceReport {
        InstanceReport { usable: true, title: title.to_owned(), ..InstanceReport::default() }
    }

    fn read(document: Rc<Document>, report: InstanceReport) -> Rc<Document> {
        let text = document.draft.clone();
        document.reduce(DocumentAction::Read(text, report))
    }

    #[test]
    fn a_broken_text_keeps_the_last_good_instance() {
        let first = read(document(), usable(""));
        let good = first.accepted.clone();
        let typed = first.reduce(DocumentAction::Text("nonsense".to_owned()));
        let broken = read(typed, InstanceReport::default());
        assert_eq!(broken.draft.text, "nonsense");
        assert_eq!(broken.accepted, good);
        assert_eq!(broken.title, "Round");
    }

    #[test]
    fn a_chosen_reader_outlives_changes_but_not_another_text() {
        let chosen = document().reduce(DocumentAction::Reader(Some("matrix".to_owned())));
        let changed = chosen.reduce(DocumentAction::Text("0 3\n1 0".to_owned()));
        assert_eq!(changed.draft.reader.as_deref(), Some("matrix"));
        let another = changed.reduce(DocumentAction::Text("A 3 4\nB 1 2".to_owned()));
        assert_eq!(another.draft.reader, None);
    }

    /// The demo's notes say that all data are invented: under a table of one's own they lied.
    #[test]
    fn the_notes_of_the_demo_do_not_stay_under_other_data() {
        let demo = read(Rc::new(Document::open(demo())), usable(""));
        let edited = demo.draft.text.replacen("19", "18", 1);
        let edited = read(demo.reduce(DocumentAction::Text(edited)), usable(""));
        assert!(edited.notes.contains("invented"));
        let other = "A 3 4\nB 1 2\nC 5 6".to_owned();
        let other = read(edited.reduce(DocumentAction::Text(other)), usable(""));
        assert_eq!(*other.notes, "");
        let own = other.reduce(DocumentAction::Notes("ours".to_owned()));
        let third = read(own.reduce(DocumentAction::Text("9 9 9 9".to_owned())), usable(""));
        assert_eq!(*third.notes, "ours");
    }

    #[test]
    fn a_reading_of_an_older_text_is_dropped() {
        let first = document();
        let old = first.draft.clone();
        let typed = first.reduce(DocumentAction::Text("0 2\n2 0".to_owned()));
        let late = Rc::clone(&typed).reduce(DocumentAction::Read(old, usable("")));
        assert!(Rc::ptr_eq(&typed, &late));
    }

    #[test]
    fn another_instance_brings_its_title_unless_one_was_given() {
        let first = read(document(), usable("ignored"));
        assert_eq!(first.title, "Round");
        let typed = first.reduce(DocumentAction::Text("0 2\n2 0".to_owned()));
        let second = read(typed, usable(""));
        assert_eq!(second.title, UNTITLED);
        let titled = second.reduce(DocumentAction::Title("Mine".to_owned()));
        let third =
            read(titled.reduce(DocumentAction::Text("0 3\n3 0".to_owned())), usable("other"));
        assert_eq!(third.title, "Mine");
    }

    #[test]
    fn a_pasted_scenario_is_opened_in_lanes_of_its_own() {
        let text = "hullward = 1\ntitle = \"Other\"\n[instance]\ntext = \"0 1\\n1 0\"\n\
                    [[rival]]\nfrom = \"atsp/cuts\"\n";
        let opened = document().reduce(DocumentAction::Text(text.to_owned()));
        assert_eq!((opened.title.as_str(), opened.draft.text.as_str()), ("Other", "0 1\n1 0"));
        assert_eq!(opened.slots.iter().map(|slot| slot.id).collect::<Vec<_>>(), [LaneId(3)]);
        let broken = document().reduce(DocumentAction::Text("hullward = 1\ntitel = 2".to_owned()));
        assert_eq!(broken.slots.len(), 2);
        assert!(!broken_scenario(&broken.draft.text).unwrap().complaints.is_empty());
        assert!(broken_scenario("0 1\n1 0").is_none());
    }

    #[test]
    fn a_pasted_model_in_mps_is_another_rival_and_the_instance_stays() {
        let text = "NAME tools\nROWS\n N cost\nCOLUMNS\nENDATA\n".to_owned();
        let before = document();
        let after = Rc::clone(&before).reduce(DocumentAction::Text(text.clone()));
        assert_eq!(after.slots[2].rival.mps, Some(text));
        assert_eq!(after.draft, before.draft);
        assert_eq!(after.reduce(DocumentAction::Undo).slots.len(), 2);
    }

    #[test]
    fn a_title_leaves_its_source_to_a_line_of_its_own() {
        assert_eq!(bracketed("Cut form (Dantzig 1954)"), ("Cut form", "Dantzig 1954"));
        assert_eq!(bracketed("Cut form"), ("Cut form", ""));
    }

    #[test]
    fn a_rival_without_one_of_its_families_is_a_relaxation() {
        let document = document();
        let rival = (*document.slots[0].rival).clone();
        assert!(!document.is_relaxation(&rival));
        let families = [("order".to_owned(), FamilyState::Out)].into();
        assert!(document.is_relaxation(&Rival { families, ..rival }));
    }

    #[test]
    fn a_family_touches_its_own_lane_only() {
        let before = document();
        let (one, two) = (before.slots[0].clone(), before.slots[1].clone());
        let after =
            before.reduce(DocumentAction::Family(one.id, "order".to_owned(), FamilyState::Out));
        assert_ne!(after.slots[0], one);
        assert_eq!(after.slots[1], two);
        assert_eq!(after.slots[0].rival.families["order"], FamilyState::Out);
    }

    /// A scenario with one more could be saved, but not opened again.
    #[test]
    fn no_rival_joins_a_full_document() {
        let mut full = (*document()).clone();
        while !full.is_full() {
            full.push(Rival::default());
        }
        let (last, count) = (full.slots.last().cloned(), full.slots.len());
        full.push(Rival::default());
        full.edit(Edit::Duplicate(full.slots[0].id));
        assert_eq!((full.slots.last().cloned(), full.slots.len()), (last, count));
    }

    #[test]
    fn lanes_keep_their_ids_when_others_leave() {
        let before = document();
        let kept = before.slots[1].id;
        let after = before.reduce(DocumentAction::Remove(LaneId(1)));
        let added = after.reduce(DocumentAction::Add("atsp/cuts".to_owned()));
        assert_eq!(added.slots[0].id, kept);
        assert_eq!(added.slots[1].id, LaneId(3));
        assert_eq!(Document::letter(1), "B");
    }
}
