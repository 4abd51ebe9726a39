//! Several instances in one scenario: every rival runs on each, the lanes show the chosen one.

use record::scenario::{InstanceText, MOST_INSTANCES};

use crate::state::document::Document;
use crate::state::pointer::Shared;

/// What a person does to the list of instances.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) enum InstanceEdit {
    /// A copy of the chosen one joins at the end and is chosen.
    Add,
    /// The one at a place is chosen.
    Choose(usize),
    /// The chosen one gets a title.
    Rename(String),
    /// The chosen one leaves; the one before it is chosen.
    Remove,
}

impl InstanceEdit {
    /// What it is, for Undo.
    pub(crate) fn words(&self) -> &'static str {
        match self {
            Self::Add => "instance that joined",
            Self::Choose(_) => "choice of an instance",
            Self::Rename(_) => "title of an instance",
            Self::Remove => "instance that left",
        }
    }
}

impl Document {
    /// All instances in order.
    pub(crate) fn instances(&self) -> Vec<Shared<InstanceText>> {
        let mut all = self.others.clone();
        all.insert(self.chosen.min(all.len()), self.draft.clone());
        all
    }

    pub(crate) fn edit_instances(&mut self, edit: InstanceEdit) {
        let mut all = self.instances();
        let chosen = match edit {
            InstanceEdit::Add if all.len() >= MOST_INSTANCES => return,
            InstanceEdit::Add => {
                let title = instance_title(&self.draft, self.chosen);
                if self.draft.title.is_empty() {
                    all[self.chosen] = titled(&self.draft, title);
                }
                all.push(titled(&self.draft, format!("Instance {}", all.len() + 1)));
                all.len() - 1
            }
            InstanceEdit::Choose(place) => place.min(all.len() - 1),
            InstanceEdit::Rename(title) => {
                let named = titled(&self.draft, title);
                if let Some(accepted) = &mut self.accepted
                    && accepted.text == self.draft
                {
                    for slot in &self.slots {
                        self.held.entry(slot.id).or_insert_with(|| accepted.text.clone());
                    }
                    accepted.text = named.clone();
                }
                self.draft = named;
                return;
            }
            InstanceEdit::Remove if all.len() > 1 => {
                all.remove(self.chosen);
                self.chosen.saturating_sub(1)
            }
            InstanceEdit::Remove => return,
        };
        let draft = all.remove(chosen);
        (self.others, self.chosen) = (all, chosen);
        if draft != self.draft {
            self.draft = draft;
            self.reading = None;
        }
    }
}

fn titled(text: &InstanceText, title: String) -> Shared<InstanceText> {
    Shared::new(InstanceText { title, ..text.clone() })
}

/// The title of an instance, or its number where it has none.
pub(crate) fn instance_title(text: &InstanceText, place: usize) -> String {
    if text.title.is_empty() { format!("Instance {}", place + 1) } else { text.title.clone() }
}

/// The same as records and the command name it.
pub(crate) fn name_on_record(text: &InstanceText, place: usize) -> String {
    if text.title.is_empty() { format!("instance {}", place + 1) } else { text.title.clone() }
}

#[cfg(test)]
mod tests {
    use std::rc::Rc;

    use record::scenario::Scenario;
    use yew::Reducible;

    use super::*;
    use crate::state::document::DocumentAction;

    fn titles(document: &Document) -> Vec<String> {
        let scenario = document.scenario();
        scenario.instances().map(|text| text.title.clone()).collect()
    }

    fn after(document: &Rc<Document>, edit: InstanceEdit) -> Rc<Document> {
        Rc::clone(document).reduce(DocumentAction::Instances(edit))
    }

    #[test]
    fn instances_join_are_chosen_named_and_leave() {
        let text = |title: &str| InstanceText {
            title: title.to_owned(),
            text: title.to_owned(),
            ..InstanceText::default()
        };
        let opened = Rc::new(Document::open(Scenario {
            instance: Some(text("Mon")),
            further_instances: vec![text("Tue"), text("Wed")],
            ..Scenario::default()
        }));
        assert_eq!(titles(&opened), ["Mon", "Tue", "Wed"]);
        let second = after(&opened, InstanceEdit::Choose(1));
        assert_eq!((second.draft.text.as_str(), second.chosen), ("Tue", 1));
        assert_eq!(titles(&second), ["Mon", "Tue", "Wed"], "choosing keeps the order");
        let named = after(&second, InstanceEdit::Rename("Fri".to_owned()));
        assert_eq!(titles(&named), ["Mon", "Fri", "Wed"]);
        let added = after(&named, InstanceEdit::Add);
        assert_eq!(titles(&added), ["Mon", "Fri", "Wed", "Instance 4"]);
        assert_eq!((added.chosen, added.draft.text.as_str()), (3, "Tue"));
        let removed = after(&after(&added, InstanceEdit::Choose(1)), InstanceEdit::Remove);
        assert_eq!(titles(&removed), ["Mon", "Wed", "Instance 4"]);
        assert_eq!((removed.chosen, removed.draft.text.as_str()), (0, "Mon"));
        let undone = removed.reduce(DocumentAction::Undo);
        assert_eq!(titles(&undone), ["Mon", "Fri", "Wed", "Instance 4"]);
    }

    #[test]
    fn the_last_instance_stays() {
        let one = Rc::new(Document::open(Scenario::default()));
        assert_eq!(after(&one, InstanceEdit::Remove).instances().len(), 1);
    }
}
