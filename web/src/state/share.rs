//! The scenario on its way out and in: as a file, as a link, and as what the browser keeps.

use record::file::parse;
use record::link::{PREFIX, unpack};
use record::message::Complaint;
use record::scenario::{InstanceText, Run, Scenario};

use crate::state::document::{Document, Slot};
use crate::state::pointer::Shared;

/// Characters of a title that go into a file's name.
const LONGEST_NAME: usize = 80;

/// What a person changes in a document, compared by address where it is long.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Edited {
    title: String,
    notes: Shared<String>,
    seed: u64,
    run: Shared<Run>,
    draft: Shared<InstanceText>,
    others: Vec<Shared<InstanceText>>,
    chosen: usize,
    slots: Vec<Slot>,
    rest: Shared<Scenario>,
}

impl Document {
    /// What a person changes in it.
    pub(crate) fn edited(&self) -> Edited {
        Edited {
            title: self.title.clone(),
            notes: self.notes.clone(),
            seed: self.seed,
            run: self.run.clone(),
            draft: self.draft.clone(),
            others: self.others.clone(),
            chosen: self.chosen,
            slots: self.slots.clone(),
            rest: self.rest.clone(),
        }
    }

    /// The scenario as it stands. Results of another engine do not hold for it any more, so it
    /// carries neither their digest nor that engine's version.
    pub(crate) fn scenario(&self) -> Scenario {
        let empty = self.others.is_empty() && *self.draft == InstanceText::default();
        let mut instances = self.instances().into_iter().map(|text| (*text).clone());
        let instance = instances.next().filter(|_| !empty);
        Scenario {
            title: self.title.clone(),
            seed: self.seed,
            notes: (*self.notes).clone(),
            instance,
            further_instances: instances.collect(),
            rivals: self.slots.iter().map(|slot| (*slot.rival).clone()).collect(),
            run: (*self.run).clone(),
            studies: self.rest.studies.clone(),
            ..Scenario::default()
        }
    }

    /// The scenario file.
    pub(crate) fn file(&self) -> String {
        record::file::print(&self.scenario())
    }
}

/// Why a scenario was not opened.
#[derive(Debug, Clone, Default, PartialEq)]
pub(crate) struct Refusal {
    /// A sentence.
    pub(crate) words: String,
    /// What is wrong in the text, by place.
    pub(crate) complaints: Vec<Complaint>,
}

impl Refusal {
    /// A refusal in one sentence.
    pub(crate) fn new(words: impl Into<String>) -> Self {
        Self { words: words.into(), complaints: Vec::new() }
    }
}

/// The scenario of a text; `from` begins the sentence when there is none: "The file".
pub(crate) fn read(text: &str, from: &str) -> Result<Scenario, Refusal> {
    let parsed = parse(text);
    parsed.scenario.ok_or_else(|| Refusal {
        words: format!("{from} holds no scenario that can be opened. The page is as it was."),
        complaints: parsed.complaints,
    })
}

/// The scenario in the fragment of an address; `None` where the fragment is none of ours.
pub(crate) fn from_fragment(fragment: &str) -> Option<Result<Scenario, Refusal>> {
    let version = fragment.strip_prefix("#s")?.split('.').next()?;
    let ours = fragment.contains('.') && version.bytes().all(|byte| byte.is_ascii_digit());
    if !ours || version.is_empty() {
        return None;
    }
    if !fragment.starts_with(PREFIX) {
        return Some(Err(Refusal::new(
            "The link is of a newer version than this page can read: open it with the page it \
             came from, or ask for the file. The page is as it was.",
        )));
    }
    Some(match unpack(fragment) {
        Ok(text) => read(&text, "The link"),
        Err(error) => Err(Refusal::new(format!("Not opened: {error}. The page is as it was."))),
    })
}

/// A name for the scenario's file that every system takes: `Round.hullward.toml`.
pub(crate) fn file_name(title: &str) -> String {
    file_of(title, "hullward.toml")
}

/// A name for a file with an ending: `A Position labels.mps`.
pub(crate) fn file_of(title: &str, ending: &str) -> String {
    let safe = |c: char| if c.is_control() || "\\/:*?\"<>|".contains(c) { ' ' } else { c };
    let name: String = title.chars().map(safe).collect();
    let words: Vec<&str> = name.split_whitespace().collect();
    let cut: String = words.join(" ").chars().take(LONGEST_NAME).collect();
    let name = cut.trim_matches(['.', ' ']);
    format!("{}.{ending}", if name.is_empty() { "scenario" } else { name })
}

/// One of the two places in the browser's store: a number that grows with each save, and the
/// scenario file.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Saved {
    /// Of two, the one with the larger number was saved last.
    pub(crate) number: u64,
    /// The scenario file.
    pub(crate) text: String,
}

impl Saved {
    /// As it is stored: the number in a line of its own, then the text.
    pub(crate) fn print(&self) -> String {
        format!("{}\n{}", self.number, self.text)
    }

    /// From what is stored; `None` when it is not what [`Saved::print`] gives.
    pub(crate) fn parse(stored: &str) -> Option<Self> {
        let (number, text) = stored.split_once('\n')?;
        Some(Self { number: number.parse().ok()?, text: text.to_owned() })
    }
}

/// Of what stands in the two places, the scenario that was saved last and can still be read.
pub(crate) fn restored(places: &[Option<Saved>; 2]) -> Option<(Scenario, &str)> {
    let mut saved: Vec<&Saved> = places.iter().flatten().collect();
    saved.sort_by_key(|saved| std::cmp::Reverse(saved.number));
    saved.into_iter().find_map(|saved| Some((parse(&saved.text).scenario?, saved.text.as_str())))
}

/// Which of the two places the next save goes to, and its number: the place that was not saved
/// last, so that a save cut short leaves the other whole.
pub(crate) fn next_place(places: &[Option<Saved>; 2]) -> (usize, u64) {
    let number = |place: usize| places[place].as_ref().map(|saved| saved.number);
    let place = usize::from(number(0) > number(1));
    let last = number(0).max(number(1)).unwrap_or(0);
    (place, last.saturating_add(1))
}

#[cfg(test)]
mod tests {
    use std::rc::Rc;

    use record::link::pack;
    use record::scenario::{FamilyState, Rival, Study};
    use yew::Reducible;

    use super::*;
    use crate::state::document::DocumentAction;
    use crate::state::lane::LaneId;

    fn full() -> Scenario {
        let families = [("order".to_owned(), FamilyState::Out)].into();
        Scenario {
            title: "Round".to_owned(),
            seed: 9,
            notes: "*why*".to_owned(),
            instance: Some(InstanceText {
                reader: Some("matrix".to_owned()),
                text: "0 1\n1 0".to_owned(),
                ..InstanceText::default()
            }),
            further_instances: vec![InstanceText {
                text: "0 2\n2 0".to_owned(),
                ..InstanceText::default()
            }],
            rivals: vec![
                Rival { from: Some("atsp/labels".to_owned()), families, ..Rival::default() },
                Rival { text: Some("min 1".to_owned()), ..Rival::default() },
            ],
            run: Run { nodes: 5, best_known: Some(2.5), ..Run::default() },
            studies: vec![Study { kind: "growth".to_owned(), fields: [].into() }],
            ..Scenario::default()
        }
    }

    fn saved(number: u64, text: &str) -> Option<Saved> {
        Some(Saved { number, text: text.to_owned() })
    }

    #[test]
    fn nothing_is_lost_between_scenario_and_document() {
        let document = Document::open(full());
        assert_eq!(document.scenario(), full());
        assert_eq!(parse(&document.file()).scenario, Some(full()));
        assert_eq!(Document::open(Scenario::default()).scenario(), Scenario::default());
    }

    #[test]
    fn a_link_holds_what_was_changed_by_hand() {
        let document = Rc::new(Document::open(full()));
        let state = FamilyState::OnDemand;
        let changed = document.reduce(DocumentAction::Family(LaneId(2), "cut".to_owned(), state));
        let link = pack(&changed.file()).unwrap();
        let opened = from_fragment(&link).unwrap().unwrap();
        assert_eq!(opened.rivals[1].families["cut"], state);
    }

    #[test]
    fn a_fragment_that_cannot_be_opened_is_refused_in_words() {
        assert_eq!(from_fragment("#rivals-heading"), None);
        assert_eq!(from_fragment("#s.x"), None);
        assert_eq!(from_fragment(""), None);
        let words = |fragment: &str| from_fragment(fragment).unwrap().unwrap_err().words;
        assert!(words("#s2.AAAA").contains("newer version"));
        let link = pack(&record::file::print(&full())).unwrap();
        let half = words(&link[..link.len() / 2]);
        assert!(half.contains("cut short") || half.contains("damaged"), "{half}");
        let newer = from_fragment(&pack("hullward = 2").unwrap()).unwrap().unwrap_err();
        assert!(newer.complaints[0].message.contains("version 2"));
    }

    #[test]
    fn a_broken_file_is_refused_with_line_and_mend() {
        let refusal = read("hullward = 1\ntitel = \"x\"", "The file").unwrap_err();
        assert!(refusal.words.starts_with("The file holds no scenario"));
        let complaint = &refusal.complaints[0];
        assert_eq!((complaint.line, complaint.column), (2, 1));
        assert!(!complaint.mend.is_empty());
    }

    #[test]
    fn a_file_is_named_after_the_title() {
        assert_eq!(file_name("Mobile library"), "Mobile library.hullward.toml");
        assert_eq!(file_name(" ../a\\b: \u{7}c?. "), "a b c.hullward.toml");
        assert_eq!(file_name(" ... "), "scenario.hullward.toml");
        assert_eq!(file_name(&"é".repeat(200)).chars().count(), LONGEST_NAME + 14);
    }

    #[test]
    fn what_is_stored_reads_back() {
        let one = Saved { number: 7, text: "hullward = 1\n\n".to_owned() };
        assert_eq!(Saved::parse(&one.print()), Some(one));
        assert_eq!(Saved::parse("hullward = 1\n"), None);
        assert_eq!(Saved::parse(""), None);
    }

    #[test]
    fn saves_take_turns_and_the_last_readable_one_is_restored() {
        let text = |title: &str| format!("hullward = 1\ntitle = \"{title}\"\n");
        let title = |places: &[Option<Saved>; 2]| restored(places).map(|(found, _)| found.title);
        let mut places = [None, None];
        assert_eq!((next_place(&places), title(&places)), ((0, 1), None));
        places[0] = saved(1, &text("one"));
        assert_eq!(next_place(&places), (1, 2));
        places[1] = saved(2, &text("two"));
        assert_eq!(next_place(&places), (0, 3));
        assert_eq!(title(&places).as_deref(), Some("two"));
        places[1] = saved(2, "hullward = 1\ntitle = \"tw");
        assert_eq!(title(&places).as_deref(), Some("one"));
    }
}
