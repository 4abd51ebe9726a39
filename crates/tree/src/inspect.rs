//! A node in full, from its stored basis.
//!
//! The relaxation is built anew with the rows the node had, its bounds and its final basis. The
//! kernel reports every optimum from a fresh factor of the basis, so the bound has the same
//! bits as the one in the log.

use std::collections::BTreeSet;

use lp::{Limits, Outcome};
use model::{ColumnId, LabelId, Number};
use proof::Budget;
use separate::{Progress, Separator, Violated};

use crate::acts::Refusal;
use crate::cycle::{self, Cycle};
use crate::event::{Branch, NodeId, NodeState};
use crate::family_view::FamilyView;
use crate::relaxation::{RowOrigin, direction};
use crate::search::Search;

/// Simplex iterations spent at most on the relaxation of a node that is not solved yet: from its
/// parent's basis a branching takes some tens.
const LOOK: u64 = 1_000;

/// What the exact optimum of a node that is looked at may cost: some hundredths of a second.
const EYE: Budget = Budget { ticks: 4_000_000, bits: 8_000 };

/// A set of labels and the member of a family that it violates.
#[derive(Debug, Clone, PartialEq)]
pub struct ViolatedSubset {
    /// The family by name; `subtour` in a model without families over subsets that holds round
    /// trips.
    pub family: String,
    /// The outer index tuple of the family; mostly empty.
    pub tuple: Vec<LabelId>,
    /// The set.
    pub subset: BTreeSet<LabelId>,
    /// By how much the row is violated.
    pub violation: f64,
}

/// A node in full.
#[derive(Debug, Clone, PartialEq)]
pub struct NodeView {
    /// Its number.
    pub node: NodeId,
    /// How it stands.
    pub state: NodeState,
    /// Its depth; the root's is 0.
    pub depth: u32,
    /// Its own bound in the direction of the objective.
    pub bound: Option<f64>,
    /// The bound that is proved in exact arithmetic: from its basis, where that takes little, or
    /// what its multipliers prove.
    pub checked_bound: Option<Number>,
    /// Whether the checked bound is the exact optimum of its relaxation.
    pub exact: bool,
    /// The branchings from the root to it.
    pub path: Vec<Branch>,
    /// The value of each column; empty when it has no point.
    pub x: Vec<f64>,
    /// The reduced cost of each column in the direction of the objective.
    pub reduced_costs: Vec<f64>,
    /// What is expected of a branching on each fractional column: how far the bound moves below and
    /// above it, by the pseudocosts seen so far. Empty before there are any.
    pub expected: Vec<(ColumnId, [f64; 2])>,
    /// What each family does in the relaxation.
    pub families: Vec<FamilyView>,
    /// Sets whose member the point violates. In a model without families over subsets that holds
    /// round trips: the sets that arcs with a value leave with less than 1 in all.
    pub violated: Vec<ViolatedSubset>,
    /// Rows of the ray of an infeasible node with their multipliers.
    pub ray: Vec<(String, f64)>,
    /// The cycle that this ray, or the direction of an unbounded node, walks.
    pub cycle: Option<Cycle>,
    /// Whether the search has not solved it yet: what is shown is its relaxation with the rows
    /// known now, without a round of separation of its own.
    pub ahead: bool,
    /// The columns that may be branched on by hand, in order.
    pub branchable: Vec<ColumnId>,
    /// Why it is not branched on by hand.
    pub branching: Option<Refusal>,
    /// Why its subtree is not closed by hand.
    pub closing: Option<Refusal>,
}

impl Search {
    /// Shows a node; `None` when there is no such node. One factor and one pass of separation; an
    /// open node that is not solved yet is solved for the eye alone, from its parent's basis, and
    /// has a path and no more where that takes long. Changes nothing.
    #[must_use]
    pub fn inspect(&mut self, id: NodeId) -> Option<NodeView> {
        if !self.tree.has(id) {
            return None;
        }
        let path = self.tree.branchings(id);
        let node = self.tree.node(id);
        let mut view = NodeView {
            node: id,
            state: node.state,
            depth: node.depth,
            bound: None,
            checked_bound: None,
            exact: false,
            path,
            x: Vec::new(),
            reduced_costs: Vec::new(),
            expected: Vec::new(),
            families: Vec::new(),
            violated: Vec::new(),
            ray: Vec::new(),
            cycle: None,
            ahead: node.state == NodeState::Open && !node.is_solved(),
            branchable: self.branchable(id),
            branching: self.branching_refused(id),
            closing: self.closing_refused(id),
        };
        self.fill(&mut view);
        Some(view)
    }

    fn fill(&self, view: &mut NodeView) {
        let node = self.tree.node(view.node);
        if node.state == NodeState::Unbounded {
            view.cycle = self.cycle_without_bound();
        }
        let Some(relaxation) = &self.relaxation else { return };
        let above = node.parent().filter(|_| view.ahead);
        let Some(basis) = self.tree.basis(above.unwrap_or(view.node)) else { return };
        let rows = if view.ahead { relaxation.row_count() } else { node.rows as usize };
        let path = self.tree.path(view.node);
        let Ok(mut simplex) = relaxation.rebuilt(rows, &path) else { return };
        simplex.load_basis(&basis);
        let iterations = view.ahead.then_some(LOOK);
        simplex.solve(Limits { iterations, ..Limits::default() });
        let Some(outcome) = simplex.outcome() else { return };
        match outcome {
            Outcome::Optimal(solution) => {
                view.bound = Some(self.user(relaxation.internal(solution.objective)));
                let cheap = relaxation.prove_at(&path, &solution.duals);
                let (proved, exact) = relaxation.certified(&path, &simplex.basis(), EYE);
                (view.checked_bound, view.exact) = (self.better(cheap, proved), exact);
                let direction = direction(&self.model);
                view.reduced_costs =
                    solution.reduced_costs.iter().map(|d| direction * d + 0.0).collect();
                view.x.clone_from(&solution.x);
                view.expected = self.chooser.expectations(&view.x);
                view.families = self.family_views(solution, &simplex.basis());
                view.violated = self.violated(&view.x);
            }
            Outcome::Infeasible(ray) => {
                view.ray = self.named_ray(&ray.multipliers);
                view.cycle = self.cycle_of(&ray.multipliers);
            }
            Outcome::Unbounded { .. } | Outcome::Stopped { .. } => {}
        }
    }

    /// The cycle that the rows of a ray walk, when they do and none of them is a separated one.
    fn cycle_of(&self, ray: &[f64]) -> Option<Cycle> {
        let origins = self.relaxation.as_ref()?.origins().iter().zip(ray);
        let rows = origins.filter(|&(_, &y)| y != 0.0).map(|(origin, &y)| match origin {
            RowOrigin::Written(row) => Some((*row, y)),
            RowOrigin::Member { .. } | RowOrigin::Cut(..) => None,
        });
        cycle::of_rows(&self.model, &rows.collect::<Option<Vec<_>>>()?)
    }

    /// The cycle along which the objective has no bound, where its direction walks one. A search
    /// ends with the LP that shows this, so it is still in hand.
    fn cycle_without_bound(&self) -> Option<Cycle> {
        match self.relaxation.as_ref()?.simplex.outcome()? {
            Outcome::Unbounded { ray, .. } => cycle::of_columns(&self.model, ray),
            _ => None,
        }
    }

    /// The sets whose member a point violates.
    fn violated(&self, x: &[f64]) -> Vec<ViolatedSubset> {
        if self.model.subset_families().is_empty() {
            return self.violated_subtours(x);
        }
        let named = |found: Violated| {
            let family = self.model.subset_family(found.family);
            ViolatedSubset {
                family: self.model.families()[family.family.index()].name.clone(),
                tuple: family.tuple.clone(),
                subset: found.subset,
                violation: found.violation,
            }
        };
        let separators = self.rounds.separators().iter();
        let found = separators.flat_map(|separator| whole_round(separator.clone(), x));
        found.map(named).collect()
    }

    /// In a model that holds round trips: the sets that arcs leave with less than 1 in all.
    fn violated_subtours(&self, x: &[f64]) -> Vec<ViolatedSubset> {
        let Some(trip) = &self.trip else { return Vec::new() };
        let Some(separator) = trip.separator(&self.model) else { return Vec::new() };
        let arcs: Vec<f64> = trip.arcs.iter().map(|&(_, _, column)| x[column.index()]).collect();
        let subtour = |found: Violated| ViolatedSubset {
            family: "subtour".to_owned(),
            tuple: Vec::new(),
            subset: trip.stops_of(&found.subset),
            violation: found.violation,
        };
        whole_round(separator, &arcs).into_iter().map(subtour).collect()
    }

    /// The rows of a ray that count, by name.
    pub(crate) fn named_ray(&self, ray: &[f64]) -> Vec<(String, f64)> {
        let Some(relaxation) = &self.relaxation else { return Vec::new() };
        let rows = relaxation.origins().iter().zip(ray).filter(|&(_, &y)| y != 0.0);
        rows.map(|(origin, &y)| (self.row_name(origin), y)).collect()
    }

    /// The members of families over subsets that separation added to the relaxation, by name, in
    /// exact arithmetic.
    #[must_use]
    pub fn members(&self) -> Vec<(String, model::Row)> {
        let Some(relaxation) = &self.relaxation else { return Vec::new() };
        let members = relaxation.origins().iter().filter_map(|origin| match origin {
            RowOrigin::Member { family, subset } => {
                let row = self.model.subset_family(*family).member(subset);
                Some((self.row_name(origin), row))
            }
            RowOrigin::Written(_) | RowOrigin::Cut(..) => None,
        });
        members.collect()
    }

    /// The general cuts that are in the relaxation, in exact arithmetic, in the order in which they
    /// stand there.
    #[must_use]
    pub fn cut_rows(&self) -> Vec<model::Row> {
        let Some(relaxation) = &self.relaxation else { return Vec::new() };
        let origins = relaxation.origins().iter().enumerate();
        let cuts = origins.filter(|(_, origin)| matches!(origin, RowOrigin::Cut(..)));
        cuts.filter_map(|(place, _)| relaxation.exact_row(place)).collect()
    }

    /// The name of a row of the relaxation: `order[Ash → Birch]`, `subtour{Ash, Birch}`.
    fn row_name(&self, origin: &RowOrigin) -> String {
        match origin {
            RowOrigin::Written(row) => self.model.row_name(*row),
            RowOrigin::Cut(class, number) => {
                format!("{} cut {}", class.word(), number + 1)
            }
            RowOrigin::Member { family, subset } => {
                let of = self.model.subset_family(*family);
                let name = |label: &LabelId| self.model.labels().name(*label).to_owned();
                let outer: Vec<String> = of.tuple.iter().map(name).collect();
                let outer = if outer.is_empty() {
                    String::new()
                } else {
                    format!("[{}]", outer.join(", "))
                };
                let set: Vec<String> = subset.iter().map(name).collect();
                format!(
                    "{}{outer}{{{}}}",
                    self.model.families()[of.family.index()].name,
                    set.join(", ")
                )
            }
        }
    }
}

/// What one round of a separator finds.
fn whole_round(mut separator: Separator, x: &[f64]) -> Vec<Violated> {
    separator.start(x);
    while separator.advance(u64::MAX) == Progress::Working {}
    separator.take()
}
