//! Acts by hand in the document: what a person did to a rival's search. They belong to one tree: a
//! change of what that tree is made of forgets them.

use record::scenario::{Act, ActKind, BranchingRule, Preset, Rival, Run, Selection};
use report::number::of;

use crate::state::document::Document;
use crate::state::lane::LaneId;
use crate::state::pointer::Shared;

/// What is done to the acts of rivals.
#[derive(Debug)]
pub(crate) enum Steer {
    /// An act took effect.
    Did(LaneId, Act),
    /// The act at a place is taken back.
    TakeBack(LaneId, usize),
    /// All acts of a rival are forgotten.
    Forget(LaneId),
    /// A stop by hand is taken back, so that the search can go on.
    GoOn(LaneId),
    /// Rivals are searched by another branching rule.
    Rule(BranchingRule),
    /// Rivals are searched by another rule for the next node.
    Next(Selection),
    /// Rivals are searched with the settings of a preset.
    Preset(Preset),
    /// Rivals begin with another plan; none where the text is empty.
    Plan(String),
}

impl Steer {
    /// What it is, in words.
    pub(crate) fn words(&self) -> &'static str {
        match self {
            Self::Did(..) => "act by hand",
            Self::TakeBack(..) => "act that was taken back",
            Self::Forget(_) => "acts that were forgotten",
            Self::GoOn(_) => "stop that was taken back",
            Self::Rule(_) => "branching rule",
            Self::Next(_) => "rule for the next node",
            Self::Preset(_) => "settings",
            Self::Plan(_) => "plan to begin with",
        }
    }
}

impl Document {
    /// Carries it out; a lane that is gone changes nothing.
    pub(crate) fn steer(&mut self, steer: Steer) {
        match steer {
            Steer::Did(id, act) => self.acts(id, |acts| acts.push(act)),
            Steer::TakeBack(id, place) => self.acts(id, |acts| {
                if place < acts.len() {
                    acts.remove(place);
                }
            }),
            Steer::Forget(id) => self.acts(id, Vec::clear),
            Steer::GoOn(id) => self.acts(id, |acts| acts.retain(|act| act.what != ActKind::Stop)),
            Steer::Rule(branching) => {
                self.run = Shared::new(Run { branching, ..(*self.run).clone() });
                self.forget_acts();
            }
            Steer::Preset(preset) => {
                self.run = Shared::new(self.run.with(preset));
                self.forget_acts();
            }
            Steer::Next(selection) => {
                self.run = Shared::new(Run { selection, ..(*self.run).clone() });
                self.forget_acts();
            }
            Steer::Plan(text) => {
                let plan = Some(text).filter(|text| !text.trim().is_empty());
                self.run = Shared::new(Run { plan, ..(*self.run).clone() });
                self.forget_acts();
            }
        }
    }

    /// Forgets every act: the trees that they were done to are no more.
    pub(crate) fn forget_acts(&mut self) {
        for slot in &mut self.slots {
            if !slot.rival.acts.is_empty() {
                slot.rival = Shared::new(Rival { acts: Vec::new(), ..(*slot.rival).clone() });
            }
        }
    }

    fn acts(&mut self, id: LaneId, change: impl FnOnce(&mut Vec<Act>)) {
        let Some(slot) = self.slots.iter_mut().find(|slot| slot.id == id) else { return };
        let mut rival = (*slot.rival).clone();
        change(&mut rival.acts);
        if rival.acts != slot.rival.acts {
            slot.rival = Shared::new(rival);
        }
    }
}

/// An act in words: "after 12 nodes: branched node 9 on x[Ash → Birch]".
pub(crate) fn act_words(act: &Act, columns: &[String]) -> String {
    let node = act.node.unwrap_or_default();
    let done = match act.what {
        ActKind::Branch => format!("branched node {node} on {}", column_words(&act.on, columns)),
        ActKind::Close => format!("closed the subtree of node {node}"),
        ActKind::Cut => match act.on.split_first() {
            Some((family, set)) => format!("added {family} of {}", set.join(", ")),
            None => "added a row".to_owned(),
        },
        ActKind::Stop => "stopped".to_owned(),
        ActKind::Rule => match act.on.as_slice() {
            [name, values @ ..] => format!("{}: {}", rule_name(name), values.join(", ")),
            [] => "a rule".to_owned(),
        },
    };
    format!("after {}: {done}", of(u64::from(act.after), "node"))
}

/// A rule by the name that the page has for it.
fn rule_name(name: &str) -> &str {
    match name {
        "selection" => "next node",
        "nodes" => "nodes at most",
        "priority" => "variables first",
        "iterations" => "iterations at most",
        name => name,
    }
}

/// The column that an act names, as the model writes it where it has such a column.
pub(crate) fn column_words(on: &[String], columns: &[String]) -> String {
    let Some((variable, indices)) = on.split_first() else { return "no variable".to_owned() };
    if indices.is_empty() {
        return variable.clone();
    }
    let arrow = format!("{variable}[{}]", indices.join(" → "));
    if columns.contains(&arrow) { arrow } else { format!("{variable}[{}]", indices.join(", ")) }
}

/// Whether a stop by hand ends the rival's search.
pub(crate) fn is_stopped(rival: &Rival) -> bool {
    rival.acts.iter().any(|act| act.what == ActKind::Stop)
}

#[cfg(test)]
mod tests {
    use std::rc::Rc;

    use record::scenario::{FamilyState, InstanceText, Scenario};
    use yew::Reducible;

    use super::*;
    use crate::state::document::DocumentAction;

    fn act(after: u32, what: ActKind) -> Act {
        let on = ["x", "Ash", "Birch"].map(str::to_owned).to_vec();
        Act { after, what, node: Some(9), on }
    }

    fn document() -> Rc<Document> {
        let rival = |id: &str| Rival { from: Some(id.to_owned()), ..Rival::default() };
        Rc::new(Document::open(Scenario {
            instance: Some(InstanceText { text: "0 1\n1 0".to_owned(), ..InstanceText::default() }),
            rivals: vec![rival("atsp/labels"), rival("atsp/subtours")],
            ..Scenario::default()
        }))
    }

    fn did(document: Rc<Document>, act: Act) -> Rc<Document> {
        document.reduce(DocumentAction::Steer(Steer::Did(LaneId(1), act)))
    }

    #[test]
    fn an_act_is_kept_undone_and_taken_back() {
        let (branch, stop) = (act(5, ActKind::Branch), act(7, ActKind::Stop));
        let acted = did(did(document(), branch.clone()), stop.clone());
        assert_eq!(acted.slots[0].rival.acts, [branch.clone(), stop.clone()]);
        assert!(acted.slots[1].rival.acts.is_empty());
        let undone = Rc::clone(&acted).reduce(DocumentAction::Undo);
        assert_eq!(undone.slots[0].rival.acts, std::slice::from_ref(&branch));
        let back = Rc::clone(&acted).reduce(DocumentAction::Steer(Steer::TakeBack(LaneId(1), 0)));
        assert_eq!(back.slots[0].rival.acts, [stop]);
        let on = Rc::clone(&acted).reduce(DocumentAction::Steer(Steer::GoOn(LaneId(1))));
        assert_eq!(on.slots[0].rival.acts, [branch]);
        let none = acted.reduce(DocumentAction::Steer(Steer::Forget(LaneId(1))));
        assert!(none.slots[0].rival.acts.is_empty());
        assert_eq!(none.history.undo_words(), Some("acts that were forgotten"));
    }

    /// Node numbers of one tree mean nothing in another.
    #[test]
    fn another_tree_forgets_what_was_done_to_the_old_one() {
        let acted = did(document(), act(5, ActKind::Branch));
        let family = DocumentAction::Family(LaneId(1), "order".to_owned(), FamilyState::Out);
        let rule = DocumentAction::Steer(Steer::Rule(BranchingRule::ByHand));
        for change in [family, rule] {
            let changed = Rc::clone(&acted).reduce(change);
            assert!(changed.slots[0].rival.acts.is_empty());
            let back = changed.reduce(DocumentAction::Undo);
            assert_eq!(back.slots[0].rival.acts.len(), 1);
        }
        let report = || record::message::InstanceReport { usable: true, ..Default::default() };
        let read = |document: Rc<Document>| {
            let text = document.draft.clone();
            document.reduce(DocumentAction::Read(text, report()))
        };
        let first = read(acted);
        assert_eq!(first.slots[0].rival.acts.len(), 1);
        let other = read(first.reduce(DocumentAction::Text("0 2\n2 0".to_owned())));
        assert!(other.slots[0].rival.acts.is_empty());
    }

    #[test]
    fn acts_are_told_as_the_model_writes_them() {
        let columns = ["x[Ash → Birch]".to_owned()];
        let words = |what, columns: &[String]| act_words(&act(12, what), columns);
        assert_eq!(
            words(ActKind::Branch, &columns),
            "after 12 nodes: branched node 9 on x[Ash → Birch]"
        );
        assert_eq!(words(ActKind::Branch, &[]), "after 12 nodes: branched node 9 on x[Ash, Birch]");
        assert_eq!(words(ActKind::Cut, &[]), "after 12 nodes: added x of Ash, Birch");
        assert_eq!(act_words(&act(1, ActKind::Stop), &[]), "after 1 node: stopped");
        let rule = Act {
            on: vec!["selection".to_owned(), "depth first".to_owned()],
            ..act(12, ActKind::Rule)
        };
        assert_eq!(act_words(&rule, &[]), "after 12 nodes: next node: depth first");
        assert!(words(ActKind::Close, &[]).ends_with("closed the subtree of node 9"));
    }
}
