//! Undo and redo: the documents before each change, which share all that did not change.
//!
//! Changes of one kind made in a row while typing are one step; a text that was read in between
//! ends the row, since it is read only when typing rests.

use std::rc::Rc;

use yew::Reducible;

use crate::state::document::{Document, DocumentAction, is_another};
use crate::state::instances::InstanceEdit;
use crate::state::pointer::Shared;

/// Steps that can be undone.
const MOST: usize = 100;

/// A document as it was, and what was then done to it, in words.
#[derive(Debug, Clone, PartialEq)]
struct Step {
    words: &'static str,
    document: Shared<Document>,
}

/// What can be undone and redone.
#[derive(Debug, Clone, Default, PartialEq)]
pub(crate) struct History {
    past: Vec<Step>,
    future: Vec<Step>,
    /// What the row of typing now going on is about.
    typing: Option<&'static str>,
}

impl History {
    /// What Undo would take back, in words.
    pub(crate) fn undo_words(&self) -> Option<&'static str> {
        self.past.last().map(|step| step.words)
    }

    /// What Redo would do again, in words.
    pub(crate) fn redo_words(&self) -> Option<&'static str> {
        self.future.last().map(|step| step.words)
    }

    /// The history after a change of the document `before`.
    fn after(&self, before: &Document, change: Change) -> Self {
        let mut history = self.clone();
        let goes_on = change.typing && self.typing == Some(change.words);
        if !goes_on {
            history.past.push(Step { words: change.words, document: bare(before) });
            if history.past.len() > MOST {
                history.past.remove(0);
            }
        }
        history.future.clear();
        history.typing = change.typing.then_some(change.words);
        history
    }
}

/// A document without its history.
fn bare(document: &Document) -> Shared<Document> {
    Shared::new(document.again(document, Shared::new(History::default())))
}

/// An action in the words of the history.
#[derive(Debug, Clone, Copy)]
struct Change {
    words: &'static str,
    typing: bool,
}

/// The words for an action; `None` for one that is not a person's.
fn change(document: &Document, action: &DocumentAction) -> Option<Change> {
    let typed = |words| Some(Change { words, typing: true });
    let done = |words| Some(Change { words, typing: false });
    match action {
        DocumentAction::Title(_) => typed("title"),
        DocumentAction::Notes(_) => typed("notes"),
        DocumentAction::Text(text) => {
            Some(Change { words: "instance text", typing: !is_another(&document.draft.text, text) })
        }
        DocumentAction::Reader(_) => done("reader"),
        DocumentAction::Add(_) => done("rival that joined"),
        DocumentAction::Remove(_) => done("rival that left"),
        DocumentAction::Family(..) => done("state of a family"),
        DocumentAction::Open(_) | DocumentAction::OpenPack(..) => done("scenario that was opened"),
        DocumentAction::Bind(..) => done("choice of data"),
        DocumentAction::Instances(edit @ InstanceEdit::Rename(_)) => typed(edit.words()),
        DocumentAction::Instances(edit) => done(edit.words()),
        DocumentAction::Edit(edit) => done(edit.words()),
        DocumentAction::Arrange(arrange) => done(arrange.words()),
        DocumentAction::Steer(steer) => done(steer.words()),
        DocumentAction::Study(_) => done("study that was asked for"),
        DocumentAction::Table(_) => typed("table of results"),
        DocumentAction::Read(..)
        | DocumentAction::Catalogue(_)
        | DocumentAction::Bound(..)
        | DocumentAction::ForgetPack
        | DocumentAction::Undo
        | DocumentAction::Redo => None,
    }
}

impl Reducible for Document {
    type Action = DocumentAction;

    fn reduce(self: Rc<Self>, action: DocumentAction) -> Rc<Self> {
        match action {
            DocumentAction::Undo => self.undo(),
            DocumentAction::Redo => self.redo(),
            action => self.act(action),
        }
    }
}

impl Document {
    fn act(self: Rc<Self>, action: DocumentAction) -> Rc<Self> {
        let change = change(&self, &action);
        let rests = matches!(action, DocumentAction::Read(..)) && self.history.typing.is_some();
        let before = Rc::clone(&self);
        let after = self.apply(action);
        let history = match change {
            Some(change) if after.edited() != before.edited() => {
                before.history.after(&before, change)
            }
            None if rests && !Rc::ptr_eq(&before, &after) => {
                History { typing: None, ..(*before.history).clone() }
            }
            _ => return after,
        };
        after.again(&after, Shared::new(history)).into()
    }

    fn undo(self: Rc<Self>) -> Rc<Self> {
        let mut history = (*self.history).clone();
        let Some(step) = history.past.pop() else { return self };
        history.future.push(Step { words: step.words, document: bare(&self) });
        self.back_to(&step.document, history)
    }

    fn redo(self: Rc<Self>) -> Rc<Self> {
        let mut history = (*self.history).clone();
        let Some(step) = history.future.pop() else { return self };
        history.past.push(Step { words: step.words, document: bare(&self) });
        self.back_to(&step.document, history)
    }

    fn back_to(&self, document: &Document, history: History) -> Rc<Self> {
        let history = Shared::new(History { typing: None, ..history });
        document.again(self, history).into()
    }
}

#[cfg(test)]
mod tests {
    use record::message::InstanceReport;
    use record::scenario::{FamilyState, InstanceText, Rival, Scenario};

    use super::*;
    use crate::state::lane::LaneId;

    fn document() -> Rc<Document> {
        let rival = |id: &str| Rival { from: Some(id.to_owned()), ..Rival::default() };
        Rc::new(Document::open(Scenario {
            title: "Round".to_owned(),
            instance: Some(InstanceText { text: "0 1\n1 0".to_owned(), ..InstanceText::default() }),
            rivals: vec![rival("atsp/labels"), rival("atsp/subtours")],
            ..Scenario::default()
        }))
    }

    fn read(document: Rc<Document>) -> Rc<Document> {
        let text = document.draft.clone();
        let report = InstanceReport { usable: true, ..InstanceReport::default() };
        document.reduce(DocumentAction::Read(text, report))
    }

    fn text(document: Rc<Document>, text: &str) -> Rc<Document> {
        document.reduce(DocumentAction::Text(text.to_owned()))
    }

    #[test]
    fn every_kind_of_change_is_taken_back_and_done_again() {
        let first = read(document());
        let changes = [
            DocumentAction::Title("Mine".to_owned()),
            DocumentAction::Family(LaneId(1), "order".to_owned(), FamilyState::Out),
            DocumentAction::Remove(LaneId(2)),
            DocumentAction::Add("atsp/cuts".to_owned()),
            DocumentAction::Notes("why".to_owned()),
            DocumentAction::Open(Box::new(Scenario {
                title: "Other".to_owned(),
                ..Scenario::default()
            })),
        ];
        let count = changes.len();
        let mut seen = vec![first.edited()];
        let mut now = first;
        for change in changes {
            now = now.reduce(change);
            seen.push(now.edited());
        }
        for step in (0..count).rev() {
            assert!(now.history.undo_words().is_some());
            now = now.reduce(DocumentAction::Undo);
            assert_eq!(now.edited(), seen[step]);
        }
        assert_eq!(now.history.undo_words(), None);
        for step in &seen[1..] {
            now = now.reduce(DocumentAction::Redo);
            assert_eq!(&now.edited(), step);
        }
        assert_eq!(now.history.redo_words(), None);
    }

    #[test]
    fn typing_is_one_step_until_it_rests() {
        let first = read(document());
        let typed = text(text(first, "0 12\n1 0"), "0 123\n1 0");
        let more = text(read(typed), "0 1234\n1 0");
        let once = more.reduce(DocumentAction::Undo);
        assert_eq!(once.draft.text, "0 123\n1 0");
        let twice = once.reduce(DocumentAction::Undo);
        assert_eq!(twice.draft.text, "0 1\n1 0");
        assert_eq!(twice.history.undo_words(), None);
        assert_eq!(twice.history.redo_words(), Some("instance text"));
    }

    #[test]
    fn the_title_survives_a_reading_after_undo() {
        let pasted = read(text(read(document()), "A 1 2\nB 3 4\nC 9 9"));
        assert_ne!(pasted.title, "Round");
        let back = read(pasted.reduce(DocumentAction::Undo));
        assert_eq!((back.title.as_str(), back.draft.text.as_str()), ("Round", "0 1\n1 0"));
    }

    #[test]
    fn a_change_after_undo_ends_what_could_be_redone() {
        let changed = document().reduce(DocumentAction::Remove(LaneId(1)));
        let undone = changed.reduce(DocumentAction::Undo);
        let other = undone.reduce(DocumentAction::Add("atsp/cuts".to_owned()));
        assert_eq!(other.history.redo_words(), None);
        assert_eq!(other.slots.last().map(|slot| slot.id), Some(LaneId(3)));
        let same = Rc::clone(&other).reduce(DocumentAction::Redo);
        assert!(Rc::ptr_eq(&other, &same));
    }

    #[test]
    fn a_lane_that_comes_after_undo_has_an_id_of_its_own() {
        let added = document().reduce(DocumentAction::Add("atsp/cuts".to_owned()));
        let again =
            added.reduce(DocumentAction::Undo).reduce(DocumentAction::Add("atsp/two".to_owned()));
        assert_eq!(again.slots.last().map(|slot| slot.id), Some(LaneId(4)));
    }
}
