//! Rivals that a person writes: a shipped formulation that is edited becomes a text of its own,
//! and can go back.

use record::message::{CatalogueEntry, CheckReport};
use record::scenario::{Rival, Role};

use crate::state::document::{Document, Slot};
use crate::state::lane::LaneId;
use crate::state::pointer::Shared;

/// What a formulation begins with: the data of a round trip and the degree rows.
pub(crate) const SCAFFOLD: &str = include_str!("scaffold.txt");

/// A formulation as it is typed.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub(crate) struct Draft {
    /// The rival's title; the formulation's own when empty.
    pub(crate) title: String,
    /// Journal notation.
    pub(crate) text: String,
    /// Whether it is only bounded, not compared for its optimum.
    pub(crate) relaxation: bool,
}

impl Draft {
    /// The draft of a rival as it runs; `None` for one that is not written in notation.
    pub(crate) fn of(rival: &Rival, catalogue: &[CatalogueEntry]) -> Option<Self> {
        let entry = catalogue.iter().find(|entry| rival.from.as_ref() == Some(&entry.id));
        let text = rival.text.clone().or_else(|| entry.map(|entry| entry.text.clone()))?;
        let title = match entry {
            Some(entry) if rival.title.is_empty() => entry.title.clone(),
            _ => rival.title.clone(),
        };
        let relaxation = entry.is_some_and(|entry| entry.relaxation);
        Some(Self { title, text, relaxation: relaxation || rival.role == Some(Role::Relaxation) })
    }

    /// The rival that this draft makes of `rival`. A shipped formulation becomes a text that says
    /// in its title that it was edited; families that are gone lose their states, and acts by hand
    /// on the old tree are forgotten.
    fn applied(self, rival: &Rival, families: &[String]) -> Rival {
        let edited = rival.from.is_some() && self.text_differs(rival) && !self.title.is_empty();
        let title = if edited { marked(&self.title) } else { self.title };
        let kept = rival.families.iter().filter(|(name, _)| families.contains(name));
        Rival {
            title,
            text: Some(self.text),
            role: self.relaxation.then_some(Role::Relaxation),
            families: kept.map(|(name, state)| (name.clone(), *state)).collect(),
            ..Rival::default()
        }
    }

    fn text_differs(&self, rival: &Rival) -> bool {
        rival.text.as_ref() != Some(&self.text)
    }
}

/// A title that says that the text was edited, once.
fn marked(title: &str) -> String {
    const MARK: &str = "(edited)";
    if title.ends_with(MARK) { title.to_owned() } else { format!("{title} {MARK}") }
}

/// What a person does to a rival's formulation.
#[derive(Debug)]
pub(crate) enum Edit {
    /// A draft that was checked is what the lane shall run.
    Use(LaneId, Draft, Shared<CheckReport>),
    /// The shipped text comes back.
    Restore(LaneId),
    /// A copy of the rival joins.
    Duplicate(LaneId),
    /// A copy of the shipped formulation of that id joins, to be edited.
    Copy(String),
    /// An own rival joins, with what a formulation begins with.
    Write,
}

impl Edit {
    /// What it is, in words.
    pub(crate) fn words(&self) -> &'static str {
        match self {
            Self::Use(..) => "formulation",
            Self::Restore(_) => "return to the shipped text",
            Self::Duplicate(_) | Self::Copy(_) => "copy of a rival",
            Self::Write => "own rival",
        }
    }
}

impl Document {
    /// Carries an edit out; a lane that is gone, or a text that is unsound, changes nothing.
    pub(crate) fn edit(&mut self, edit: Edit) {
        match edit {
            Edit::Duplicate(_) | Edit::Copy(_) if self.is_full() => {}
            Edit::Use(id, draft, report) if report.is_sound() => {
                if let Some(slot) = self.slot(id) {
                    slot.take(draft, &report.families);
                }
            }
            Edit::Use(..) => {}
            Edit::Restore(id) => {
                if let Some(slot) = self.slot(id)
                    && let Some(shipped) = slot.shipped.take()
                {
                    slot.rival = shipped;
                }
            }
            Edit::Duplicate(id) => {
                let Some(slot) = self.slots.iter().find(|slot| slot.id == id).cloned() else {
                    return;
                };
                let title = format!("{} (copy)", self.rival_title(&slot.rival));
                self.push(Rival { title, ..(*slot.rival).clone() });
                if let Some(copy) = self.slots.last_mut() {
                    copy.shipped = slot.shipped;
                }
            }
            Edit::Copy(id) => self.copy(id),
            Edit::Write => self.push(Rival {
                text: Some(SCAFFOLD.to_owned()),
                role: Some(Role::Relaxation),
                title: "Own formulation".to_owned(),
                ..Rival::default()
            }),
        }
    }

    /// A text of one's own that is still that of the shipped formulation.
    fn copy(&mut self, id: String) {
        let Some(entry) = self.catalogue.iter().find(|entry| entry.id == id) else { return };
        let rival = Rival {
            text: Some(entry.text.clone()),
            role: entry.relaxation.then_some(Role::Relaxation),
            title: format!("{} (copy)", entry.title.split(" (").next().unwrap_or_default()),
            ..Rival::default()
        };
        self.push(rival);
        if let Some(slot) = self.slots.last_mut() {
            slot.shipped = Some(Shared::new(Rival { from: Some(id), ..Rival::default() }));
        }
    }

    /// Whether a rival is a copy of a shipped formulation in which nothing was changed.
    pub(crate) fn is_fresh_copy(&self, slot: &Slot) -> bool {
        let shipped = slot.shipped.as_ref().and_then(|shipped| self.entry(shipped));
        shipped.is_some_and(|entry| slot.rival.text.as_ref() == Some(&entry.text))
    }

    /// Finds what texts were before they were edited: the shipped formulation that has the title
    /// in the text's first line. A file holds the text alone.
    pub(crate) fn recognise(&mut self) {
        for slot in &mut self.slots {
            let Some(text) = slot.rival.text.as_ref().filter(|_| slot.shipped.is_none()) else {
                continue;
            };
            let title = text.lines().map(str::trim).find(|line| !line.is_empty());
            let mut same = self.catalogue.iter().filter(|entry| Some(entry.title.trim()) == title);
            if let (Some(entry), None) = (same.next(), same.next()) {
                let from = Some(entry.id.clone());
                slot.shipped = Some(Shared::new(Rival { from, ..Rival::default() }));
            }
        }
    }

    fn slot(&mut self, id: LaneId) -> Option<&mut Slot> {
        self.slots.iter_mut().find(|slot| slot.id == id)
    }
}

impl Slot {
    fn take(&mut self, draft: Draft, families: &[String]) {
        if self.rival.from.is_some() {
            self.shipped = Some(self.rival.clone());
        }
        self.rival = Shared::new(draft.applied(&self.rival, families));
    }

    /// Whether it was just begun, and nothing written yet.
    pub(crate) fn is_scaffold(&self) -> bool {
        self.rival.text.as_deref() == Some(SCAFFOLD)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use record::message::{Complaint, Remark};
    use record::scenario::{FamilyState, Scenario};

    fn document() -> Document {
        let families =
            ["order", "leave"].map(|name| (name.to_owned(), FamilyState::Out)).into_iter();
        let rival = Rival {
            from: Some("a/b".to_owned()),
            families: families.collect(),
            ..Rival::default()
        };
        let mut document =
            Document::open(Scenario { rivals: vec![rival.clone(), rival], ..Scenario::default() });
        document.catalogue = Shared::new(vec![CatalogueEntry {
            id: "a/b".to_owned(),
            title: "Labels".to_owned(),
            text: "min x".to_owned(),
            ..CatalogueEntry::default()
        }]);
        document
    }

    fn sound(families: &[&str]) -> Shared<CheckReport> {
        let families = families.iter().map(|&name| name.to_owned()).collect();
        Shared::new(CheckReport { families, ..CheckReport::default() })
    }

    fn draft(document: &Document, place: usize) -> Draft {
        Draft::of(&document.slots[place].rival, &document.catalogue).unwrap()
    }

    #[test]
    fn an_edited_rival_becomes_a_text_and_goes_back() {
        let mut document = document();
        let before = document.slots.clone();
        let id = before[0].id;
        let edited = Draft { text: "min 2x".to_owned(), ..draft(&document, 0) };
        document.edit(Edit::Use(id, edited.clone(), sound(&["order"])));
        let rival = &document.slots[0].rival;
        assert_eq!((rival.from.as_deref(), rival.text.as_deref()), (None, Some("min 2x")));
        assert_eq!(rival.title, "Labels (edited)");
        assert_eq!(rival.families.keys().collect::<Vec<_>>(), ["order"]);
        assert_eq!(document.slots[1], before[1]);
        let again = Draft { text: "min 3x".to_owned(), ..draft(&document, 0) };
        document.edit(Edit::Use(id, again, sound(&[])));
        assert_eq!(document.slots[0].rival.title, "Labels (edited)");
        document.edit(Edit::Restore(id));
        assert_eq!(document.slots, before);
    }

    /// A link holds the edited text alone: opened from one, it had no way back.
    #[test]
    fn an_edited_text_from_a_file_finds_its_way_back() {
        let catalogue = document().catalogue;
        let text = |text: &str| Rival { text: Some(text.to_owned()), ..Rival::default() };
        let rivals = vec![text("\n Labels \nmin 2x"), text("Others\nmin x")];
        let mut opened = Document::open(Scenario { rivals, ..Scenario::default() });
        opened.catalogue = catalogue;
        opened.recognise();
        let shipped = opened.slots[0].shipped.clone();
        opened.recognise();
        assert_eq!(opened.slots[0].shipped, shipped);
        assert_eq!(shipped.and_then(|rival| rival.from.clone()).as_deref(), Some("a/b"));
        assert_eq!(opened.slots[1].shipped, None);
    }

    #[test]
    fn an_unsound_text_touches_no_lane() {
        let mut document = document();
        let before = document.slots.clone();
        let complaint = Complaint {
            error: true,
            code: String::new(),
            line: 1,
            column: 1,
            start: 0,
            end: 1,
            message: String::new(),
            mend: String::new(),
        };
        let remarks = vec![Remark { complaint, mends: Vec::new() }];
        let report = Shared::new(CheckReport { remarks, ..CheckReport::default() });
        document.edit(Edit::Use(before[0].id, draft(&document, 0), report));
        document.edit(Edit::Restore(before[0].id));
        assert_eq!(document.slots, before);
    }

    #[test]
    fn a_copy_is_a_rival_of_its_own() {
        let mut document = document();
        let id = document.slots[1].id;
        document.edit(Edit::Duplicate(id));
        let copy = &document.slots[2];
        assert_eq!(copy.rival.from, document.slots[1].rival.from);
        assert_eq!(copy.rival.title, "Labels (copy)");
        assert!(document.slots[..2].iter().all(|slot| slot.id != copy.id));
    }

    #[test]
    fn an_own_rival_begins_as_a_relaxation() {
        let mut document = document();
        document.edit(Edit::Copy("a/b".to_owned()));
        let copy = document.slots[2].clone();
        assert_eq!(
            (copy.rival.title.as_str(), copy.rival.text.as_deref()),
            ("Labels (copy)", Some("min x"))
        );
        assert!(document.is_fresh_copy(&copy) && !document.is_fresh_copy(&document.slots[0]));
        document.edit(Edit::Restore(copy.id));
        assert_eq!(document.slots[2].rival.from.as_deref(), Some("a/b"));
        document.edit(Edit::Copy("no/such".to_owned()));
        assert_eq!(document.slots.len(), 3);
        document.slots.pop();
        document.edit(Edit::Write);
        let slot = document.slots[2].clone();
        assert!(slot.is_scaffold() && document.is_relaxation(&slot.rival));
        let draft = Draft { relaxation: false, ..draft(&document, 2) };
        document.edit(Edit::Use(slot.id, draft, sound(&[])));
        assert!(!document.is_relaxation(&document.slots[2].rival));
        assert_eq!(document.slots[2].rival.title, "Own formulation");
    }
}
