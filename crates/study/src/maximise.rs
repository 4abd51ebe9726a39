//! One relaxation, maximised for one expression after another from the basis before, with exact
//! multipliers.
//!
//! For max a'x over L ≤ Rx ≤ U, l ≤ x ≤ u any y gives, with d = a − R'y,
//! a'x ≤ Σ (y_i > 0 ? y_i U_i : y_i L_i) + Σ (d_j > 0 ? d_j u_j : d_j l_j). The kernel's multipliers
//! are taken as simple fractions, or else as they are, and the sum is formed in exact arithmetic:
//! whoever has the rows can form it again. Rows of families on demand are those that separation
//! needed so far.

use std::collections::{BTreeMap, BTreeSet};
use std::rc::Rc;

use dashu_int::{IBig, UBig};
use lp::{Col, Limits, Outcome, Problem, Progress, Simplex};
use model::{ColumnId, FamilyState, Model, Number, Row, RowId, Sense, nearest_f64};

use crate::desk::Desk;
use crate::propagate::{Bounds, bounds_of};

/// Slices of the kernel, in non-zeros touched.
const SLICE: u64 = 100_000;
/// A bound over the side by less is not looked at again.
const ROUNDING: f64 = 1e-9;

/// Multipliers other than 0 by place of the row.
pub(crate) type Multipliers = Vec<(usize, Number)>;

/// A row of the relaxation by its name.
#[derive(Debug, Clone)]
pub(crate) struct Named {
    pub(crate) name: String,
    pub(crate) row: Row,
}

/// How large an expression can get.
#[derive(Debug, Clone, Default)]
pub(crate) struct Most {
    /// The largest value; `None` where it has no end or was not found.
    pub(crate) value: Option<f64>,
    /// Whether the relaxation has no point at all.
    pub(crate) nothing: bool,
    /// Where it is largest.
    pub(crate) point: Vec<f64>,
    /// Multipliers by place of the row, and the bound that they prove.
    pub(crate) proof: Option<(Multipliers, Number)>,
}

/// A relaxation that is maximised again and again.
pub(crate) struct Maximiser<'m> {
    desk: &'m Desk,
    model: &'m Rc<Model>,
    simplex: Option<Simplex>,
    pub(crate) rows: Vec<Named>,
    pub(crate) bounds: Vec<Bounds>,
    names: BTreeSet<String>,
    priced: Vec<ColumnId>,
}

impl<'m> Maximiser<'m> {
    pub(crate) fn new(desk: &'m Desk, model: &'m Rc<Model>) -> Self {
        let meant = |row: &RowId| {
            model.families()[model.row_family(*row).index()].state != FamilyState::Out
        };
        let rows = (0..model.row_count()).map(RowId::from_index).filter(meant);
        let rows = rows.map(|row| Named { name: model.row_name(row), row: model.row(row) });
        let mut out = Self {
            desk,
            model,
            simplex: None,
            rows: rows.collect(),
            bounds: bounds_of(model),
            names: BTreeSet::new(),
            priced: Vec::new(),
        };
        out.simplex = out.problem().map(Simplex::new);
        out
    }

    fn problem(&self) -> Option<Problem> {
        let mut problem = Problem::new();
        let side = |side: &Option<Number>, none: f64| side.as_ref().map_or(none, nearest_f64);
        for (lower, upper) in &self.bounds {
            let bounds = (side(lower, f64::NEG_INFINITY), side(upper, f64::INFINITY));
            problem.add_column(0.0, bounds.0, bounds.1).ok()?;
        }
        for Named { row, .. } in &self.rows {
            let (lower, upper) =
                (side(&row.lower, f64::NEG_INFINITY), side(&row.upper, f64::INFINITY));
            problem.add_row(&entries(row), lower, upper).ok()?;
        }
        Some(problem)
    }

    /// The multipliers where a row of the relaxation is the expression itself, with a side that is no
    /// larger: nothing needs to be solved. `O(rows)` and the entries of rows that begin alike.
    pub(crate) fn as_written(&self, of: &[(ColumnId, Number)], side: &Number) -> Option<Most> {
        let place = self.rows.iter().position(|Named { row, .. }| {
            row.upper.as_ref().is_some_and(|upper| upper <= side) && row.entries == of
        });
        let turned = || {
            self.rows.iter().position(|Named { row, .. }| {
                let is = |(a, b): (&(ColumnId, Number), &(ColumnId, Number))| {
                    a.0 == b.0 && (&a.1 + &b.1).is_zero()
                };
                row.lower.as_ref().is_some_and(|lower| -lower <= *side)
                    && row.entries.len() == of.len()
                    && row.entries.iter().zip(of).all(is)
            })
        };
        let (place, y) = match place {
            Some(place) => (place, Number::ONE),
            None => (turned()?, -Number::ONE),
        };
        let proof = Some((vec![(place, y)], side.clone()));
        Some(Most { proof, ..Most::default() })
    }

    /// The largest value of an expression; as soon as it is known to be at most `side`, no row on
    /// demand is looked for.
    pub(crate) async fn most(&mut self, of: &[(ColumnId, Number)], side: &Number) -> Most {
        let found = self.solved(of).await;
        let enough = nearest_f64(side) + ROUNDING;
        let holds = found.nothing || found.value.is_some_and(|value| value <= enough);
        if holds || self.model.subset_families().is_empty() || !self.separated(of).await {
            return found;
        }
        self.solved(of).await
    }

    /// Adds the rows on demand that this expression needs; whether there were new ones.
    async fn separated(&mut self, of: &[(ColumnId, Number)]) -> bool {
        let priced = Rc::new(self.model.priced(Sense::Maximise, of));
        let members = self.desk.members(&priced).await;
        let new: Vec<Named> = members
            .into_iter()
            .filter(|(name, _)| self.names.insert(name.clone()))
            .map(|(name, row)| Named { name, row })
            .collect();
        if new.is_empty() {
            return false;
        }
        self.rows.extend(new);
        self.priced.clear();
        self.simplex = self.problem().map(Simplex::new);
        true
    }

    async fn solved(&mut self, of: &[(ColumnId, Number)]) -> Most {
        let Some(simplex) = &mut self.simplex else { return Most::default() };
        for column in self.priced.drain(..) {
            simplex.set_cost(Col(column.0), 0.0);
        }
        for (column, a) in of {
            simplex.set_cost(Col(column.0), -nearest_f64(a));
            self.priced.push(*column);
        }
        simplex.start(Limits::default());
        loop {
            let before = simplex.stats().ticks;
            let progress = simplex.advance(SLICE);
            self.desk.spend((simplex.stats().ticks - before).max(1)).await;
            if progress == Progress::Finished {
                break;
            }
        }
        self.desk.count();
        match simplex.outcome() {
            Some(Outcome::Optimal(solution)) => {
                let y: Vec<f64> = solution.duals.iter().map(|dual| -dual).collect();
                Most {
                    value: Some(-solution.objective),
                    point: solution.x.clone(),
                    proof: self.proved(of, &y),
                    nothing: false,
                }
            }
            Some(Outcome::Infeasible(_)) => Most { nothing: true, ..Most::default() },
            _ => Most::default(),
        }
    }

    /// The best bound that the multipliers prove in one of two roundings.
    fn proved(&self, of: &[(ColumnId, Number)], y: &[f64]) -> Option<(Multipliers, Number)> {
        let ways: [fn(f64) -> Option<Number>; 2] = [simple, |value| Number::try_from(value).ok()];
        let proofs = ways.into_iter().filter_map(|way| {
            let used = y.iter().enumerate().filter(|(_, y)| y.abs() > 1e-12);
            let exact: Option<Multipliers> =
                used.map(|(place, &y)| Some((place, way(y)?))).collect();
            let exact: Multipliers =
                exact?.into_iter().filter(|(place, y)| self.has_side(*place, y)).collect();
            let bound = self.sum(of, &exact)?;
            Some((exact, bound))
        });
        proofs.min_by(|a, b| a.1.cmp(&b.1))
    }

    fn has_side(&self, place: usize, y: &Number) -> bool {
        let row = &self.rows[place].row;
        !y.is_zero() && if *y > Number::ZERO { row.upper.is_some() } else { row.lower.is_some() }
    }

    /// The sum at the head of this file; `None` where a bound that it needs is infinite.
    fn sum(&self, of: &[(ColumnId, Number)], y: &[(usize, Number)]) -> Option<Number> {
        let mut rest: BTreeMap<ColumnId, Number> = of.iter().cloned().collect();
        let mut total = Number::ZERO;
        for (place, y) in y {
            let row = &self.rows[*place].row;
            let side = if *y > Number::ZERO { &row.upper } else { &row.lower };
            total += y * side.as_ref()?;
            for (column, a) in &row.entries {
                *rest.entry(*column).or_insert(Number::ZERO) -= y * a;
            }
        }
        for (column, d) in rest.iter().filter(|(_, d)| !d.is_zero()) {
            let (lower, upper) = &self.bounds[column.index()];
            let bound = if *d > Number::ZERO { upper } else { lower };
            total += d * bound.as_ref()?;
        }
        Some(total)
    }
}

fn entries(row: &Row) -> Vec<(Col, f64)> {
    row.entries.iter().map(|(column, a)| (Col(column.0), nearest_f64(a))).collect()
}

/// A simple fraction near a value.
pub(crate) fn simple(value: f64) -> Option<Number> {
    let (top, bottom) = proof::simple_fraction(value)?;
    Some(Number::from_parts(IBig::from(top), UBig::try_from(bottom).ok()?))
}
