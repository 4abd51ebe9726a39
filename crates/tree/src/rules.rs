//! Rules and limits that are changed during a run. A change is an act: it comes between two nodes,
//! tells how many were solved before it, and is replayed there to the same events.

use crate::event::NodeId;
use crate::hold::Held;
use crate::search::Search;
use crate::settings::{Branching, Selection};

/// What holds from now on.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Rule {
    /// The branching rule. Nodes that waited for a branching by hand are branched on by it.
    Branching(Branching),
    /// The rule for the next node, over all nodes that are open.
    Selection(Selection),
    /// The variables that go first, by name, as [`crate::Settings::priority`].
    Priority(Vec<String>),
    /// The search ends when so many nodes are solved in all; `None` is no limit. One that has ended by
    /// this limit goes on where it is raised.
    Nodes(Option<u32>),
    /// The search ends after the node at which so many simplex iterations are made in all, the root
    /// alone in the middle; `None` is no limit. One that has ended by this limit goes on where it is
    /// raised.
    Iterations(Option<u64>),
}

impl Search {
    /// Lets a rule hold from now on. `O(nodes held)`.
    pub(crate) fn change(&mut self, rule: &Rule) {
        match rule {
            Rule::Branching(branching) => {
                self.settings.branching = *branching;
                if *branching != Branching::ByHand {
                    self.release_all(*branching);
                }
            }
            Rule::Selection(selection) => self.settings.selection = *selection,
            Rule::Priority(names) => {
                self.chooser.prefer(&self.model, names);
                self.settings.priority.clone_from(names);
            }
            Rule::Nodes(limit) => self.settings.node_limit = *limit,
            Rule::Iterations(limit) => self.settings.iteration_limit = *limit,
        }
    }

    /// Branches on the nodes that wait for a person, each by this rule at its own point.
    fn release_all(&mut self, branching: Branching) {
        let held: Vec<(NodeId, Held)> = self.holding.take_all();
        for (node, held) in held {
            match self.chooser.choose(branching, held.x()) {
                Some(choice) => self.branch_held(node, &held, &choice),
                None => self.holding.put_back(node, held),
            }
        }
    }
}
