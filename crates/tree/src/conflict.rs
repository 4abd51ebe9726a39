//! Which families of an infeasible model cannot hold together: a smallest set of them.
//!
//! Families that can hold together with the domains have a plan in common; a set that has none
//! is in conflict. First one family after the other is dropped where the rest stays in conflict
//! (the deletion filter: Chinneck, Dravnieks 1991, ORSA Journal on Computing 3, there for single
//! rows), which leaves a set of which each family is needed. Then every set of one family less is tried: when each
//! has a plan, no smaller set is in conflict, since fewer families have that plan too. A smaller
//! set that is found is filtered in turn. Each trial is a search without objective, ended by
//! counts of nodes and iterations alone, so that the answer is the same for every slicing.

use std::collections::BTreeSet;
use std::rc::Rc;

use model::{FamilyId, Model};

use crate::root::Status;
use crate::search::{Progress, Search};
use crate::settings::{Selection, Settings};

/// Limits of the whole search for a conflict, all trials together.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct ConflictLimits {
    /// Nodes of all trials.
    pub nodes: u32,
    /// Nodes of one trial.
    pub trial_nodes: u32,
    /// Simplex iterations of all trials.
    pub iterations: u64,
}

impl Default for ConflictLimits {
    fn default() -> Self {
        Self { nodes: 20_000, trial_nodes: 4_000, iterations: 1_000_000 }
    }
}

/// What is known of a set of families in conflict.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Certainty {
    /// No smaller set is in conflict.
    Smallest,
    /// Without any one of its families the others have a plan.
    Irreducible,
    /// The limits left it open whether all of its families are needed.
    Undecided,
}

/// A set of families in conflict; without families the domains alone have no plan.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct ConflictResult {
    /// The families in the order of their statements.
    pub families: Vec<FamilyId>,
    /// What is known of the set.
    pub certainty: Certainty,
    /// Nodes solved in all trials.
    pub nodes: u32,
    /// Trials made.
    pub trials: u32,
}

type Set = BTreeSet<FamilyId>;

/// What is tried next.
#[derive(Debug, Clone, PartialEq, Eq)]
enum Stage {
    /// The conflict without the family at this place among all.
    Drop(usize),
    /// A set of one family less than the conflict: these places among all.
    Smaller(Vec<usize>),
    Done,
}

/// What became of a trial.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Verdict {
    Plan,
    Conflict,
    Undecided,
}

/// The search for a smallest set of families in conflict, one slice at a time.
#[derive(Debug)]
pub struct Conflict {
    model: Rc<Model>,
    limits: ConflictLimits,
    all: Vec<FamilyId>,
    /// In conflict, as far as is known a smallest set.
    found: Set,
    /// Sets with a plan.
    plans: Vec<Set>,
    /// Sets that the limits left open.
    open: Vec<Set>,
    stage: Stage,
    trial: Option<(Set, Box<Search>)>,
    nodes: u32,
    iterations: u64,
    ticks: u64,
    trials: u32,
}

impl Conflict {
    /// Begins with a model that is known to have no plan.
    #[must_use]
    pub fn new(model: Rc<Model>, limits: ConflictLimits) -> Self {
        let all = model.families_that_hold();
        Self {
            found: all.iter().copied().collect(),
            model,
            limits,
            all,
            plans: Vec::new(),
            open: Vec::new(),
            stage: Stage::Drop(0),
            trial: None,
            nodes: 0,
            iterations: 0,
            ticks: 0,
            trials: 0,
        }
    }

    /// Works on for about `ticks` non-zeros touched, at least one step; true when it has ended.
    pub fn advance(&mut self, ticks: u64) -> bool {
        let mut left = ticks.max(1);
        while left > 0 {
            if let Some((set, mut search)) = self.trial.take() {
                let before = search.work().ticks;
                match search.advance(left) {
                    Progress::Finished => self.learn(set, &search),
                    Progress::RootSolved | Progress::Paused => {
                        search.run(None);
                        self.trial = Some((set, search));
                    }
                    Progress::Working => self.trial = Some((set, search)),
                }
                let spent = self.ticks_of_trial().map_or(left, |now| now - before);
                left = left.saturating_sub(spent.max(1));
            } else if self.stage == Stage::Done {
                return true;
            } else {
                left = left.saturating_sub(self.begin());
            }
        }
        self.stage == Stage::Done
    }

    /// Non-zeros touched so far.
    #[must_use]
    pub fn ticks(&self) -> u64 {
        self.ticks + self.ticks_of_trial().unwrap_or(0)
    }

    /// What is known so far; at any time a set in conflict.
    #[must_use]
    pub fn result(&self) -> ConflictResult {
        let needed = |family: &FamilyId| {
            let mut rest = self.found.clone();
            rest.remove(family);
            self.has_plan(&rest)
        };
        let certainty = if !self.found.iter().all(needed) {
            Certainty::Undecided
        } else if self.stage == Stage::Done && self.smaller_sets_have_plans() {
            Certainty::Smallest
        } else {
            Certainty::Irreducible
        };
        let (nodes, trials) = (self.nodes, self.trials);
        ConflictResult { families: self.found.iter().copied().collect(), certainty, nodes, trials }
    }

    fn ticks_of_trial(&self) -> Option<u64> {
        self.trial.as_ref().map(|(_, search)| search.work().ticks)
    }

    fn has_plan(&self, set: &Set) -> bool {
        self.plans.iter().any(|plan| set.is_subset(plan))
    }

    /// Whether the last stage went through every smaller set and met none that stayed open.
    fn smaller_sets_have_plans(&self) -> bool {
        let smaller = self.found.len().checked_sub(1);
        smaller.is_none_or(|size| !self.open.iter().any(|open| open.len() == size))
            && !self.out_of_budget()
    }

    fn out_of_budget(&self) -> bool {
        self.nodes >= self.limits.nodes || self.iterations >= self.limits.iterations
    }

    /// Begins the next trial, or goes on past one that is decided already. Gives its ticks.
    fn begin(&mut self) -> u64 {
        if self.out_of_budget() {
            self.stage = Stage::Done;
            return 1;
        }
        let Some(set) = self.next_set() else { return 1 };
        if self.has_plan(&set) || self.open.contains(&set) {
            return 1;
        }
        let model = Rc::new(self.model.feasibility(&set));
        let size = model.columns().len() + model.row_count();
        let settings = Settings {
            selection: Selection::DepthFirst,
            node_limit: Some(self.limits.trial_nodes.min(self.limits.nodes - self.nodes)),
            iteration_limit: Some(self.limits.iterations - self.iterations),
            ..Settings::default()
        };
        self.trials += 1;
        self.trial = Some((set, Box::new(Search::new(model, settings))));
        size as u64
    }

    /// The set to be tried, moving the stage on past it.
    fn next_set(&mut self) -> Option<Set> {
        match &mut self.stage {
            Stage::Drop(place) => {
                let Some(&family) = self.all.get(*place) else {
                    self.stage = match self.found.len().checked_sub(1) {
                        Some(size) => Stage::Smaller((0..size).collect()),
                        None => Stage::Done,
                    };
                    return None;
                };
                *place += 1;
                let mut rest = self.found.clone();
                rest.remove(&family).then_some(rest)
            }
            Stage::Smaller(places) => {
                let set = places.iter().map(|&place| self.all[place]).collect();
                if !next_choice(places, self.all.len()) {
                    self.stage = Stage::Done;
                }
                Some(set)
            }
            Stage::Done => None,
        }
    }

    /// Takes in how a trial ended.
    fn learn(&mut self, set: Set, search: &Search) {
        let summary = search.summary();
        self.nodes = self.nodes.saturating_add(summary.nodes);
        self.iterations = self.iterations.saturating_add(summary.iterations);
        self.ticks = self.ticks.saturating_add(summary.work);
        match verdict(&summary) {
            Verdict::Plan => self.plans.push(set),
            Verdict::Undecided => self.open.push(set),
            Verdict::Conflict => {
                // Within the filter the next family is dropped from the smaller set; a smaller
                // set found later is filtered from its first family on.
                if !matches!(self.stage, Stage::Drop(_)) {
                    self.stage = Stage::Drop(0);
                }
                self.found = set;
            }
        }
    }
}

fn verdict(summary: &crate::Summary) -> Verdict {
    match summary.status {
        Status::Infeasible => Verdict::Conflict,
        _ if summary.incumbent.is_some() && summary.status == Status::Optimal => Verdict::Plan,
        _ => Verdict::Undecided,
    }
}

/// The next choice of so many places out of `all`, in lexicographic order; false after the last.
fn next_choice(places: &mut [usize], all: usize) -> bool {
    let size = places.len();
    let Some(at) = (0..size).rev().find(|&k| places[k] + size - k < all) else { return false };
    places[at] += 1;
    for k in at + 1..size {
        places[k] = places[k - 1] + 1;
    }
    true
}

#[cfg(test)]
mod tests {
    use super::next_choice;

    #[test]
    fn all_choices_come_once() {
        let mut places = vec![0, 1];
        let mut seen = vec![places.clone()];
        while next_choice(&mut places, 4) {
            seen.push(places.clone());
        }
        assert_eq!(seen, [[0, 1], [0, 2], [0, 3], [1, 2], [1, 3], [2, 3]]);
        assert!(!next_choice(&mut [], 3));
    }
}
