//! Which plans are looked for beside those that the relaxations give, and the way they take: plans
//! that were handed in, dives and the feasibility pump, once, between the root and the first
//! branching. Whatever finds a plan, it is one only after the exact check.

use model::ColumnId;

use crate::dive::{Dive, Rule, Step};
use crate::event::{NodeId, Origin};
use crate::search::{Job, Progress, Purpose, Search};
use crate::solution::Verdict;

/// Rows of families on demand that a dive takes in at most.
const MOST_ROWS: u32 = 60;

/// How plans are looked for.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
#[expect(clippy::struct_excessive_bools, reason = "each is switched by itself")]
pub struct Heuristics {
    /// The relaxation's point rounded to the nearest whole numbers, at every node.
    pub rounding: bool,
    /// Nearest neighbour with 2-opt and or-opt, where the model holds round trips.
    pub trip: bool,
    /// Diving: a column is rounded and the relaxation solved again, until it is whole.
    pub diving: bool,
    /// The feasibility pump (Fischetti, Glover, Lodi 2005, Mathematical Programming 104).
    pub pump: bool,
}

impl Default for Heuristics {
    /// What the bare mode has: roundings and round trips.
    fn default() -> Self {
        Self { rounding: true, trip: true, diving: false, pump: false }
    }
}

/// Values of some columns from which a plan may be made.
#[derive(Debug, Clone, PartialEq)]
pub struct Suggestion {
    /// Who says so.
    pub origin: SuggestedBy,
    /// The columns with their values; the others are solved for.
    pub values: Vec<(ColumnId, f64)>,
}

/// Who made a suggestion.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum SuggestedBy {
    /// A person.
    Person,
    /// A heuristic, by its published name.
    Heuristic(&'static str),
}

impl SuggestedBy {
    pub(crate) fn origin(self) -> Origin {
        match self {
            Self::Person => Origin::Given,
            Self::Heuristic(name) => Origin::Heuristic(name.to_owned()),
        }
    }
}

/// What became of the plan that a person gave.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct GivenPlan {
    /// Its value in the direction of the objective, where it can be completed to a plan.
    pub value: Option<f64>,
}

/// What is in hand of suggestions and dives.
#[derive(Debug, Default)]
pub(crate) struct Suggestions {
    waiting: std::collections::VecDeque<Suggestion>,
    now: Option<Suggestion>,
    /// Whether the whole columns of the one in hand are rounded already.
    rounded: bool,
    pub(crate) given: Option<GivenPlan>,
    /// The rules of diving that are left, the next one last; `None` before the first.
    dives: Option<Vec<Rule>>,
    rows: u32,
}

impl Search {
    /// Hands in values from which a plan may be made. They are tried in order after the root is
    /// solved, each completed by solving for the other columns.
    pub fn suggest(&mut self, suggestion: Suggestion) {
        self.suggestions.waiting.push_back(suggestion);
    }

    /// What became of the plan that a person gave; `None` before it was tried.
    #[must_use]
    pub fn given_plan(&self) -> Option<GivenPlan> {
        self.suggestions.given
    }

    /// Begins with the next suggestion; false when there is none.
    pub(crate) fn next_suggestion(&mut self) -> bool {
        while let Some(next) = self.suggestions.waiting.pop_front() {
            let by = next.origin;
            let begun = self.checker.begin(&next.values);
            self.suggestions.rounded = false;
            self.suggestions.now = Some(next);
            if begun {
                self.job = Job::Complete(Purpose::Suggested(by));
                return true;
            }
            self.told_of(by, None);
        }
        false
    }

    /// Notes what became of a suggestion.
    pub(crate) fn told_of(&mut self, by: SuggestedBy, value: Option<f64>) {
        if by == SuggestedBy::Person {
            self.suggestions.given = Some(GivenPlan { value });
        }
    }

    /// The columns left free came out fractional: once they are rounded and the rest is solved for.
    pub(crate) fn rounds_suggestion(&mut self, by: SuggestedBy, x: Option<&[f64]>) -> bool {
        let (Some(x), false, Some(now)) = (x, self.suggestions.rounded, &self.suggestions.now)
        else {
            return false;
        };
        let mut fixes = now.values.clone();
        let set: std::collections::BTreeSet<ColumnId> = fixes.iter().map(|fix| fix.0).collect();
        let free = self.chooser.whole().iter().filter(|column| !set.contains(column));
        fixes.extend(free.map(|&column| (column, x[column.index()].round() + 0.0)));
        self.suggestions.rounded = true;
        let begun = fixes.len() > set.len() && self.checker.begin(&fixes);
        if begun {
            self.job = Job::Complete(Purpose::Suggested(by));
        }
        begun
    }

    /// Begins the next dive; false when none is left or there is nothing to find.
    pub(crate) fn next_dive(&mut self) -> bool {
        let wanted = self.settings.heuristics;
        let rules = self.suggestions.dives.get_or_insert_with(|| {
            let diving = [Rule::Guided, Rule::Fractional].into_iter().filter(|_| wanted.diving);
            diving.chain([Rule::Pump].into_iter().filter(|_| wanted.pump)).collect()
        });
        while let Some(rule) = rules.pop() {
            let bound = self.tree.node(NodeId::ROOT).bound;
            let best = self.incumbent.as_ref().map(|found| found.solution.x.as_slice());
            let wanted = match rule {
                Rule::Fractional => true,
                Rule::Guided => best.is_some(),
                Rule::Pump => best.is_none(),
            };
            if self.plan.is_none() || self.target.closes(bound) || !wanted {
                continue;
            }
            let Some(relaxation) = &self.relaxation else { return false };
            let root = self.tree.node(NodeId::ROOT);
            let Ok(mut simplex) = relaxation.rebuilt(root.rows as usize, &[]) else { continue };
            if let Some(basis) = self.tree.basis(NodeId::ROOT) {
                simplex.load_basis(&basis);
            }
            let guide = if rule == Rule::Guided { best.map(<[f64]>::to_vec) } else { None };
            self.suggestions.rows = 0;
            self.job = Job::Dive(Box::new(Dive::new(simplex, rule, guide)));
            return true;
        }
        false
    }

    /// Goes on with a dive.
    pub(crate) fn dive(&mut self, ticks: u64) -> Option<Progress> {
        let Job::Dive(dive) = &mut self.job else { return None };
        match dive.advance(&self.chooser, ticks) {
            Step::Working => None,
            Step::Bound(bound) => {
                let offset = self.relaxation.as_ref()?.internal(bound);
                if self.target.closes(offset) {
                    self.end_dive();
                }
                None
            }
            Step::Failed => {
                self.end_dive();
                None
            }
            Step::Whole(x) => self.dived(&x),
        }
    }

    /// A dive came to a whole point: a plan, or a row of a family on demand that it breaks.
    fn dived(&mut self, x: &[f64]) -> Option<Progress> {
        let Job::Dive(dive) = &mut self.job else { return None };
        let name = dive.rule().name();
        let purpose = Purpose::Suggested(SuggestedBy::Heuristic(name));
        match self.checker.check(self.rounds.separators(), x) {
            Verdict::Solution(solution) if solution.exact && !dive.is_distance() => {
                self.end_dive();
                self.accept(solution, purpose);
            }
            Verdict::Violates(violated) if self.suggestions.rows < MOST_ROWS => {
                self.suggestions.rows += 1;
                if !dive.add(&violated.row) {
                    self.end_dive();
                }
            }
            _ => {
                let whole = self.chooser.whole().iter();
                let fixes: Vec<_> = whole.map(|&c| (c, x[c.index()].round() + 0.0)).collect();
                self.end_dive();
                self.suggestions.now = None;
                if self.checker.begin(&fixes) {
                    self.job = Job::Complete(purpose);
                }
            }
        }
        None
    }

    fn end_dive(&mut self) {
        if let Job::Dive(dive) = std::mem::replace(&mut self.job, Job::None) {
            self.ledger.ticks += dive.ticks();
            self.ledger.iterations += dive.iterations();
        }
    }
}
