//! Names of the rivals that take data of other names: a change re-runs the rivals that use it.

use record::scenario::{InstanceText, Rival};

use crate::state::document::{Document, Slot};
use crate::state::lane::LaneId;
use crate::state::pointer::Shared;

impl Document {
    /// A name of the rivals takes another datum. Rivals that do not use the name run on.
    pub(crate) fn bind(&mut self, name: String, taken: Option<String>) {
        let mut text = (*self.draft).clone();
        let affected: Vec<bool> =
            self.slots.iter().map(|slot| self.uses(&slot.rival, &name)).collect();
        match taken {
            Some(taken) => text.bind.insert(name, taken),
            None => text.bind.remove(&name),
        };
        let text = Shared::new(text);
        if let Some(accepted) = &mut self.accepted
            && accepted.text == self.draft
        {
            for (slot, affected) in self.slots.iter().zip(affected) {
                if affected {
                    self.held.remove(&slot.id);
                } else {
                    self.held.entry(slot.id).or_insert_with(|| accepted.text.clone());
                }
            }
            accepted.text = text.clone();
        }
        self.draft = text;
    }

    /// The instance that a lane runs on.
    pub(crate) fn instance_of(&self, slot: &Slot) -> Option<Shared<InstanceText>> {
        let held = self.held.get(&slot.id);
        held.or(self.accepted.as_ref().map(|accepted| &accepted.text)).cloned()
    }

    /// Rivals that were changed run on the instance as it is now named.
    pub(crate) fn release_changed(&mut self, before: &Self) {
        let held = std::mem::take(&mut self.held);
        let rival = |document: &Self, id: LaneId| {
            let slot = document.slots.iter().find(|slot| slot.id == id);
            slot.map(|slot| slot.rival.clone())
        };
        let same = |id: LaneId| {
            let now = rival(self, id);
            now.is_some() && now == rival(before, id)
        };
        self.held = held.into_iter().filter(|(id, _)| same(*id)).collect();
    }

    /// Whether a name occurs in a rival's text; a text that is not known may hold any.
    fn uses(&self, rival: &Rival, name: &str) -> bool {
        let shipped = || self.entry(rival).map(|entry| entry.text.as_str());
        match (rival.text.as_deref().or_else(shipped), &rival.mps) {
            (Some(text), _) => holds_word(text, name),
            (None, Some(_)) => false,
            (None, None) => true,
        }
    }
}

/// Whether a word stands in a text with no letter or digit beside it.
fn holds_word(text: &str, word: &str) -> bool {
    let beside = |c: Option<char>| c.is_some_and(char::is_alphanumeric);
    text.match_indices(word).any(|(at, _)| {
        let (before, after) = (&text[..at], &text[at + word.len()..]);
        !beside(before.chars().next_back()) && !beside(after.chars().next())
    })
}

#[cfg(test)]
mod tests {
    use std::rc::Rc;

    use record::message::InstanceReport;
    use record::scenario::Scenario;
    use yew::Reducible;

    use super::*;
    use crate::state::document::DocumentAction;

    #[test]
    fn only_whole_words_count() {
        assert!(holds_word("  c_{i,j} x", "c") && holds_word("Σ d_t", "d"));
        assert!(!holds_word("cost", "c") && !holds_word("", "c"));
    }

    #[test]
    fn a_name_touches_only_the_rivals_that_use_it() {
        let rival = |text: &str| Rival { text: Some(text.to_owned()), ..Rival::default() };
        let opened = Rc::new(Document::open(Scenario {
            instance: Some(InstanceText { text: "0 1".to_owned(), ..InstanceText::default() }),
            rivals: vec![rival("c_{i} x"), rival("d_{i} x")],
            ..Scenario::default()
        }));
        let draft = opened.draft.clone();
        let report = InstanceReport { usable: true, ..InstanceReport::default() };
        let read = opened.reduce(DocumentAction::Read(draft.clone(), report));
        let bound =
            Rc::clone(&read).reduce(DocumentAction::Bind("c".to_owned(), Some("km".to_owned())));
        let on =
            |document: &Document, at: usize| document.instance_of(&document.slots[at]).unwrap();
        assert_eq!(on(&bound, 0).bind["c"], "km");
        assert!(on(&bound, 1) == draft, "the other rival runs on");
        assert_eq!(bound.scenario().instance.unwrap().bind["c"], "km");
        let undone = Rc::clone(&bound).reduce(DocumentAction::Undo);
        assert!(on(&undone, 0) == draft && undone.draft.bind.is_empty());
        let both = bound.reduce(DocumentAction::Bind("d".to_owned(), Some("t".to_owned())));
        assert_eq!((on(&both, 0).bind.len(), on(&both, 1).bind.len()), (1, 2));
    }
}
