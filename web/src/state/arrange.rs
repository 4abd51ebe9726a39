//! The rivals' titles and their order. Lanes keep their runs; letters follow the order.

use record::scenario::Rival;

use crate::state::document::Document;
use crate::state::lane::LaneId;
use crate::state::pointer::Shared;

/// What is done to titles and order.
#[derive(Debug)]
pub(crate) enum Arrange {
    /// A rival gets another title; an empty one is the formulation's own.
    Rename(LaneId, String),
    /// A rival changes places with the one before it.
    Up(LaneId),
    /// A rival changes places with the one after it.
    Down(LaneId),
    /// Rivals of a family of the catalogue take the place of all.
    Family(String),
}

/// Rivals that a family gives at once.
const FIRST: usize = 2;

impl Arrange {
    /// What it is, in words.
    pub(crate) fn words(&self) -> &'static str {
        match self {
            Self::Rename(..) => "title of a rival",
            Self::Up(_) | Self::Down(_) => "order of the rivals",
            Self::Family(_) => "rivals of another family",
        }
    }
}

impl Document {
    /// Carries it out; a lane that is gone, or is at the end already, changes nothing.
    pub(crate) fn arrange(&mut self, arrange: Arrange) {
        let place = |id: LaneId| self.slots.iter().position(|slot| slot.id == id);
        match arrange {
            Arrange::Rename(id, title) => {
                if let Some(slot) = self.slots.iter_mut().find(|slot| slot.id == id) {
                    let title = title.trim().to_owned();
                    slot.rival = Shared::new(Rival { title, ..(*slot.rival).clone() });
                }
            }
            Arrange::Up(id) => {
                if let Some(place) = place(id).filter(|place| *place > 0) {
                    self.slots.swap(place - 1, place);
                }
            }
            Arrange::Down(id) => {
                if let Some(place) = place(id).filter(|place| place + 1 < self.slots.len()) {
                    self.slots.swap(place, place + 1);
                }
            }
            Arrange::Family(family) => {
                let catalogue = self.catalogue.clone();
                let own = catalogue.iter().filter(|one| one.family == family && !one.relaxation);
                self.slots.clear();
                for entry in own.take(FIRST) {
                    self.push(Rival { from: Some(entry.id.clone()), ..Rival::default() });
                }
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use std::rc::Rc;

    use record::message::CatalogueEntry;
    use record::scenario::Scenario;
    use yew::Reducible;

    use super::*;
    use crate::state::document::DocumentAction;

    fn order(document: &Document) -> Vec<u32> {
        document.slots.iter().map(|slot| slot.id.0).collect()
    }

    #[test]
    fn a_family_gives_its_first_rivals_but_for_relaxations() {
        let entry = |id: &str, relaxation| CatalogueEntry {
            id: id.to_owned(),
            family: id.split('/').next().unwrap_or_default().to_owned(),
            relaxation,
            ..CatalogueEntry::default()
        };
        let entries = vec![
            entry("round/weak", true),
            entry("round/a", false),
            entry("path/a", false),
            entry("round/b", false),
            entry("round/c", false),
        ];
        let rivals = vec![Rival::default(), Rival::default()];
        let first = Rc::new(Document::open(Scenario { rivals, ..Scenario::default() }));
        let listed = first.reduce(DocumentAction::Catalogue(entries));
        let family = Arrange::Family("round".to_owned());
        let taken = listed.reduce(DocumentAction::Arrange(family));
        let ids = |document: &Document| {
            let from = document.slots.iter().map(|slot| slot.rival.from.clone());
            from.collect::<Vec<_>>()
        };
        assert_eq!(ids(&taken), [Some("round/a".to_owned()), Some("round/b".to_owned())]);
        assert_eq!(taken.history.undo_words(), Some("rivals of another family"));
        assert_eq!(ids(&taken.reduce(DocumentAction::Undo)), [None, None]);
    }

    #[test]
    fn rivals_change_places_and_names_and_undo_brings_them_back() {
        let rivals = vec![Rival::default(), Rival::default(), Rival::default()];
        let first = Rc::new(Document::open(Scenario { rivals, ..Scenario::default() }));
        let act =
            |document: Rc<Document>, arrange| document.reduce(DocumentAction::Arrange(arrange));
        let moved = act(first, Arrange::Up(LaneId(3)));
        assert_eq!(order(&moved), [1, 3, 2]);
        let moved = act(act(moved, Arrange::Down(LaneId(1))), Arrange::Down(LaneId(2)));
        assert_eq!(order(&moved), [3, 1, 2]);
        let named = act(moved, Arrange::Rename(LaneId(1), " Mine ".to_owned()));
        assert_eq!(named.slots[1].rival.title, "Mine");
        assert_eq!(named.history.undo_words(), Some("title of a rival"));
        let back = named.reduce(DocumentAction::Undo).reduce(DocumentAction::Undo);
        assert_eq!(order(&back), [1, 3, 2]);
        assert!(back.slots.iter().all(|slot| slot.rival.title.is_empty()));
    }
}
