//! The relaxation in hand: one working LP for the whole search, and the same rows in exact
//! arithmetic beside it.
//!
//! Columns are those of the model in order. Rows are the written rows that are in, in order,
//! and then the rows that separation added: these are members of families of the model, so they
//! hold for every solution, and they stay. A node's relaxation is therefore its bounds and how
//! many rows there were. Going from node to node changes only the bounds that differ.

use std::collections::BTreeSet;
use std::rc::Rc;

use lp::{Basis, Col, NewRow, Problem, ProblemError, Simplex};
use model::{
    ColumnId, FamilyState, LabelId, Model, Number, Row, RowId, Sense, SubsetFamilyId, nearest_f64,
};
use proof::{Budget, ExactRows, Residual, Wish};
use separate::general::{Class, GeneralCut};

use crate::event::{Branch, Side};
use crate::proving::Proving;

/// Where a row of the relaxation comes from.
#[derive(Debug, Clone, PartialEq, Eq, PartialOrd, Ord)]
pub(crate) enum RowOrigin {
    /// A written row of the model.
    Written(RowId),
    /// A member of a family over subsets.
    Member {
        /// The family.
        family: SubsetFamilyId,
        /// The subset.
        subset: BTreeSet<LabelId>,
    },
    /// A general cut, by its class and its number among all of them.
    Cut(Class, usize),
}

/// A row to be added.
#[derive(Debug, Clone)]
pub(crate) struct Addition {
    pub(crate) origin: RowOrigin,
    pub(crate) row: Row,
}

/// The working LP with its rows in exact arithmetic.
#[derive(Debug)]
pub(crate) struct Relaxation {
    model: Rc<Model>,
    pub(crate) simplex: Simplex,
    slack: Basis,
    origins: Vec<RowOrigin>,
    added: Vec<NewRow>,
    written: Vec<bool>,
    /// Every general cut by number, those that were purged among them.
    pub(crate) cuts: Vec<Row>,
    members: BTreeSet<(SubsetFamilyId, BTreeSet<LabelId>)>,
    exact: ExactRows,
    bounds: Vec<proof::Bounds>,
    moved: Vec<ColumnId>,
    /// Entries of the written rows, and columns.
    entries: usize,
}

fn rows_of(model: &Model) -> impl Iterator<Item = RowId> + Clone {
    (0..model.row_count()).map(RowId::from_index)
}

impl Relaxation {
    /// The relaxation of the root before separation.
    ///
    /// # Errors
    /// Where the kernel refuses the model (it has grown too large).
    pub(crate) fn new(model: &Rc<Model>) -> Result<Self, ProblemError> {
        let simplex = Simplex::new(problem(model, |row| model.row_is_in(row))?);
        let rows = rows_of(model);
        let written: Vec<bool> = rows.clone().map(|row| model.row_is_in(row)).collect();
        let origins = rows.filter(|row| written[row.index()]).map(RowOrigin::Written).collect();
        let bounds = proof::bounds_of(model);
        let entries: usize = rows_of(model).map(|row| model.row_entries(row).len()).sum();
        Ok(Self {
            entries: entries + model.columns().len(),
            model: Rc::clone(model),
            slack: simplex.basis(),
            simplex,
            origins,
            added: Vec::new(),
            written,
            cuts: Vec::new(),
            members: BTreeSet::new(),
            exact: ExactRows::new(model),
            bounds,
            moved: Vec::new(),
        })
    }

    /// Entries of the written rows, and columns: what one proof looks at.
    pub(crate) fn entries(&self) -> usize {
        self.entries
    }

    /// Changes the bounds to those of the node at the end of `path`. `O(depth)`.
    pub(crate) fn enter(&mut self, path: &[Branch]) {
        let moved = std::mem::take(&mut self.moved);
        for column in moved {
            self.bounds[column.index()] = model_bounds(&self.model, column);
            let (lower, upper) = float_bounds(&self.model, column);
            self.simplex.set_bounds(Col(column.0), lower, upper);
        }
        for branch in path {
            let (lower, upper) = self.simplex.bounds(Col(branch.column.0));
            let exact = &mut self.bounds[branch.column.index()];
            let bound = Number::try_from(branch.bound).ok();
            match branch.side {
                Side::AtMost => {
                    exact.1 = bound;
                    self.simplex.set_bounds(Col(branch.column.0), lower, branch.bound);
                }
                Side::AtLeast => {
                    exact.0 = bound;
                    self.simplex.set_bounds(Col(branch.column.0), branch.bound, upper);
                }
            }
            self.moved.push(branch.column);
        }
    }

    /// Loads a basis, or the slack basis.
    pub(crate) fn load(&mut self, basis: Option<&Basis>) {
        self.simplex.load_basis(basis.unwrap_or(&self.slack));
    }

    /// Adds those rows that are not there yet and says how many they were, by family.
    ///
    /// # Errors
    /// Where the kernel refuses them.
    pub(crate) fn add(
        &mut self,
        additions: Vec<Addition>,
    ) -> Result<Vec<model::FamilyId>, ProblemError> {
        let mut rows = Vec::new();
        let mut families = Vec::new();
        for Addition { origin, row } in additions {
            if !self.note(&origin) {
                continue;
            }
            families.extend(self.family(&origin));
            self.exact.add(&row);
            rows.push(float_row(&row));
            self.origins.push(origin);
        }
        if !rows.is_empty() {
            self.simplex.add_rows(&rows)?;
            self.added.extend(rows);
        }
        Ok(families)
    }

    /// Notes that a row is there now; false when it was before.
    fn note(&mut self, origin: &RowOrigin) -> bool {
        match origin {
            RowOrigin::Written(row) => !std::mem::replace(&mut self.written[row.index()], true),
            RowOrigin::Member { family, subset } => self.members.insert((*family, subset.clone())),
            RowOrigin::Cut(..) => true,
        }
    }

    fn family(&self, origin: &RowOrigin) -> Option<model::FamilyId> {
        match origin {
            RowOrigin::Written(row) => Some(self.model.row_family(*row)),
            RowOrigin::Member { family, .. } => Some(self.model.subset_family(*family).family),
            RowOrigin::Cut(..) => None,
        }
    }

    /// Adds general cuts by their numbers: new ones, or such as were there before.
    ///
    /// # Errors
    /// Where the kernel refuses them.
    pub(crate) fn add_cuts(&mut self, cuts: &[(usize, GeneralCut)]) -> Result<(), ProblemError> {
        let mut additions = Vec::new();
        for (number, GeneralCut { class, row, .. }) in cuts {
            let origin = RowOrigin::Cut(*class, *number);
            additions.push(Addition { origin, row: row.clone() });
            if *number == self.cuts.len() {
                self.cuts.push(row.clone());
            }
        }
        self.add(additions).map(|_| ())
    }

    /// Takes rows out that separation added and whose slacks are basic; later rows move up.
    ///
    /// # Errors
    /// Where the kernel refuses it.
    pub(crate) fn drop_rows(&mut self, places: &[usize]) -> Result<(), ProblemError> {
        if places.is_empty() {
            return Ok(());
        }
        let id = |&place: &usize| lp::RowId(u32::try_from(place).unwrap_or(u32::MAX));
        self.simplex.delete_rows(&places.iter().map(id).collect::<Vec<_>>())?;
        let written = self.origins.len() - self.added.len();
        for &place in places.iter().rev() {
            self.origins.remove(place);
            self.added.remove(place - written);
        }
        self.exact = ExactRows::new(&self.model);
        let left = written..self.origins.len();
        let rows: Vec<Row> = left.filter_map(|index| self.exact_row(index)).collect();
        rows.iter().for_each(|row| {
            self.exact.add(row);
        });
        Ok(())
    }

    /// The model.
    pub(crate) fn model(&self) -> &Model {
        &self.model
    }

    /// The general cuts added so far.
    pub(crate) fn cuts(&self) -> &[Row] {
        &self.cuts
    }

    /// A row of the relaxation in exact numbers.
    pub(crate) fn exact_row(&self, index: usize) -> Option<Row> {
        match self.origins.get(index)? {
            RowOrigin::Written(row) => Some(self.model.row(*row)),
            RowOrigin::Member { family, subset } => {
                Some(self.model.subset_family(*family).member(subset))
            }
            RowOrigin::Cut(_, number) => self.cuts.get(*number).cloned(),
        }
    }

    /// How many rows there are.
    pub(crate) fn row_count(&self) -> usize {
        self.origins.len()
    }

    /// Where each row comes from.
    pub(crate) fn origins(&self) -> &[RowOrigin] {
        &self.origins
    }

    /// A value of the LP (without offset) as an internal value.
    pub(crate) fn internal(&self, objective: f64) -> f64 {
        objective + direction(&self.model) * nearest_f64(self.model.offset())
    }

    /// The bound on the node in hand that multipliers prove, in the objective's direction.
    pub(crate) fn prove(&self, duals: &[f64]) -> Option<Number> {
        proof::bound(&self.exact, &self.bounds, duals)
    }

    /// The same with less care, given the value of the relaxation.
    pub(crate) fn prove_quickly(&self, duals: &[f64], value: f64) -> Option<Number> {
        proof::quick_bound(&self.exact, &self.bounds, duals, value)
    }

    /// The bound that multipliers prove on the node at the end of `path`.
    pub(crate) fn prove_at(&self, path: &[Branch], duals: &[f64]) -> Option<Number> {
        proof::bound(&self.exact, &self.bounds_at(path), duals)
    }

    /// The bound that a basis proves on the node at the end of `path`, and whether it is the
    /// optimum: as far as the budget goes, without another solve where the basis is not optimal.
    pub(crate) fn certified(
        &self,
        path: &[Branch],
        basis: &Basis,
        budget: Budget,
    ) -> (Option<Number>, bool) {
        let wish = Wish::Optimum(None);
        let mut proving = Proving::new(self.bounds_at(path), basis.clone(), wish, budget);
        while !proving.advance(&self.exact, |_| None, budget.ticks) {}
        (proving.certifier.bound(&self.exact), proving.certifier.is_exact())
    }

    /// The exact bounds of the node at the end of `path`. `O(columns)`.
    pub(crate) fn bounds_at(&self, path: &[Branch]) -> Vec<proof::Bounds> {
        let columns = (0..self.bounds.len()).map(ColumnId::from_index);
        let mut bounds: Vec<proof::Bounds> =
            columns.map(|column| model_bounds(&self.model, column)).collect();
        for branch in path {
            let (lower, upper) = &mut bounds[branch.column.index()];
            let side = if branch.side == Side::AtMost { upper } else { lower };
            *side = Number::try_from(branch.bound).ok();
        }
        bounds
    }

    /// The rows in exact arithmetic.
    pub(crate) fn exact(&self) -> &ExactRows {
        &self.exact
    }

    /// A residual problem: the rows and columns of the relaxation, other costs, bounds and sides.
    ///
    /// # Errors
    /// Where the kernel refuses it.
    pub(crate) fn residual(&self, residual: &Residual) -> Result<Problem, ProblemError> {
        let rows = (0..self.model.row_count()).map(RowId::from_index);
        let rows = rows.filter(|&row| self.model.row_is_in(row));
        let written = rows.map(|row| float_entries(&self.model, row));
        residual_problem(residual, written.chain(self.added.iter().map(|r| r.entries.clone())))
    }

    /// Whether a ray proves that the node in hand has no point.
    pub(crate) fn refutes(&self, ray: &[f64]) -> bool {
        proof::infeasible(&self.exact, &self.bounds, ray)
    }

    /// Those of the first `rows` rows that separation added.
    pub(crate) fn added_of(&self, rows: usize) -> &[NewRow] {
        let written = self.origins.len() - self.added.len();
        let count = rows.saturating_sub(written).min(self.added.len());
        &self.added[..count]
    }

    /// A fresh LP with the first `rows` rows and the bounds at the end of `path`.
    ///
    /// # Errors
    /// Where the kernel refuses it.
    pub(crate) fn rebuilt(&self, rows: usize, path: &[Branch]) -> Result<Simplex, ProblemError> {
        let mut problem = problem(&self.model, |row| self.model.row_is_in(row))?;
        for row in self.added_of(rows) {
            problem.add_row(&row.entries, row.lower, row.upper)?;
        }
        let mut simplex = Simplex::new(problem);
        for branch in path {
            let (lower, upper) = simplex.bounds(Col(branch.column.0));
            match branch.side {
                Side::AtMost => simplex.set_bounds(Col(branch.column.0), lower, branch.bound),
                Side::AtLeast => simplex.set_bounds(Col(branch.column.0), branch.bound, upper),
            }
        }
        Ok(simplex)
    }
}

/// An LP of all columns and the written rows that `wanted` names.
///
/// # Errors
/// Where the kernel refuses it.
pub(crate) fn problem(
    model: &Model,
    wanted: impl Fn(RowId) -> bool,
) -> Result<Problem, ProblemError> {
    let mut problem = Problem::new();
    let direction = direction(model);
    for (index, column) in model.columns().iter().enumerate() {
        let (lower, upper) = float_bounds(model, ColumnId::from_index(index));
        problem.add_column(direction * model.numbers().float(column.cost) + 0.0, lower, upper)?;
    }
    let float =
        |id: Option<model::NumberId>, none: f64| id.map_or(none, |n| model.numbers().float(n));
    for row in (0..model.row_count()).map(RowId::from_index).filter(|&row| wanted(row)) {
        let entries = float_entries(model, row);
        let (lower, upper) = model.row_sides(row);
        problem.add_row(&entries, float(lower, f64::NEG_INFINITY), float(upper, f64::INFINITY))?;
    }
    Ok(problem)
}

/// The coefficients of a written row as floats.
pub(crate) fn float_entries(model: &Model, row: RowId) -> Vec<(Col, f64)> {
    let entries = model.row_entries(row).iter();
    entries.map(|&(c, a)| (Col(c.0), model.numbers().float(a))).collect()
}

/// A residual problem over these rows.
///
/// # Errors
/// Where the kernel refuses it.
pub(crate) fn residual_problem(
    residual: &Residual,
    rows: impl Iterator<Item = Vec<(Col, f64)>>,
) -> Result<Problem, ProblemError> {
    let mut problem = Problem::new();
    for (&cost, &(lower, upper)) in residual.costs.iter().zip(&residual.bounds) {
        problem.add_column(cost, lower, upper)?;
    }
    for (entries, &(lower, upper)) in rows.zip(&residual.sides) {
        problem.add_row(&entries, lower, upper)?;
    }
    Ok(problem)
}

/// Whether a written row belongs to the model's meaning.
pub(crate) fn is_meant(model: &Model, row: RowId) -> bool {
    model.families()[model.row_family(row).index()].state != FamilyState::Out
}

/// 1 when minimising, −1 when maximising: the kernel minimises.
pub(crate) fn direction(model: &Model) -> f64 {
    match model.sense() {
        Sense::Minimise => 1.0,
        Sense::Maximise => -1.0,
    }
}

/// The bounds of a column in the model as floats.
pub(crate) fn float_bounds(model: &Model, column: ColumnId) -> (f64, f64) {
    let column = &model.columns()[column.index()];
    let lower = column.lower.map_or(f64::NEG_INFINITY, |n| model.numbers().float(n));
    let upper = column.upper.map_or(f64::INFINITY, |n| model.numbers().float(n));
    (lower, upper)
}

/// The bounds of a column in the model, exactly.
pub(crate) fn model_bounds(model: &Model, column: ColumnId) -> proof::Bounds {
    let column = &model.columns()[column.index()];
    let exact = |id: Option<model::NumberId>| id.map(|n| model.numbers().exact(n).clone());
    (exact(column.lower), exact(column.upper))
}

fn float_row(row: &Row) -> NewRow {
    NewRow {
        entries: row.entries.iter().map(|(c, a)| (Col(c.0), nearest_f64(a))).collect(),
        lower: row.lower.as_ref().map_or(f64::NEG_INFINITY, nearest_f64),
        upper: row.upper.as_ref().map_or(f64::INFINITY, nearest_f64),
    }
}
