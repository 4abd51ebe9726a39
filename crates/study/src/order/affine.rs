//! An affine map from the columns of one relaxation to the further variables of another rival.
//!
//! For P_A = {z : L ≤ Rz ≤ U, l ≤ z ≤ u} and a rival with rows g'x + h'y ≤ d, x among the columns z, a map
//! y = Tz + t shows that P_A, in x, lies within the projection of the other relaxation where every row
//! holds over P_A: by duality where multipliers λ, μ ≥ 0 have g + T'h ≤ R'λ + μ (with = for a column
//! without a lower bound) and λ'b + μ'u + h't ≤ d. That is one linear program in T, t and the
//! multipliers of all rows at once. It is sufficient and not necessary: that a relaxation lies within a
//! projection is hard to decide in general. First each variable may depend on columns with all of
//! its labels alone, which is a smaller program with simpler numbers; then on all. T and t are taken as
//! simple fractions; whether they serve is settled row by row in exact arithmetic afterwards.

use std::collections::{BTreeMap, BTreeSet};

use lp::{Limits, Outcome, Problem, Progress, Simplex};
use model::{ColumnId, LabelId, Model, Number, nearest_f64};

use crate::claims::{Claim, halves, too_many};
use crate::desk::Desk;
use crate::maximise::simple;
use crate::propagate::{Bounds, bounds_of};
use crate::shared::Shared;
use crate::subject::Subject;

/// Slices of the kernel, in non-zeros touched.
const SLICE: u64 = 100_000;
/// Programs of more rows or non-zeros are not tried.
const MOST_ROWS: usize = 6_000;
const MOST_NONZEROS: usize = 600_000;

/// What stands for each further variable: a constant and coefficients of the columns of the inner
/// relaxation.
pub(super) type Map = BTreeMap<ColumnId, (Number, Vec<(ColumnId, Number)>)>;

/// Two relaxations between which a map is looked for.
pub(super) struct Between<'s> {
    inner: &'s Model,
    outer: &'s Model,
    /// Columns of the outer one to those of the inner one.
    to: BTreeMap<ColumnId, ColumnId>,
    /// Columns of the outer one that stand for nothing of the inner one, and are 0.
    none: BTreeSet<ColumnId>,
    most: u32,
}

impl<'s> Between<'s> {
    pub(super) fn new([inner, outer]: [&'s Subject; 2], shared: &Shared, most: u32) -> Self {
        let to = shared.pairs.iter().map(|&(inner, outer)| (outer, inner)).collect();
        let none = shared.only[1].iter().copied().collect();
        Self { inner: &inner.model, outer: &outer.model, to, none, most }
    }

    /// Rows and bounds of the outer rival in its own columns: those in the shared variables alone, and
    /// the others.
    ///
    /// # Errors
    /// There are too many; the reason in words.
    pub(super) fn rows(&self) -> Result<(Vec<Claim>, Vec<Claim>), String> {
        let mut all = halves(self.outer, self.most)?;
        for (index, bounds) in bounds_of(self.outer).into_iter().enumerate() {
            all.extend(of_bounds(self.outer, ColumnId::from_index(index), bounds));
        }
        if all.len() > self.most as usize {
            return Err(too_many(self.most));
        }
        let own = |claim: &Claim| claim.entries.iter().any(|(column, _)| self.is_own(*column));
        Ok(all.into_iter().partition(|claim| !own(claim)))
    }

    fn is_own(&self, column: ColumnId) -> bool {
        !self.to.contains_key(&column) && !self.none.contains(&column)
    }

    /// A row of the outer rival with the map put in, in the columns of the inner one.
    pub(super) fn put_in(&self, claim: &Claim, map: &Map) -> Claim {
        let mut entries: BTreeMap<ColumnId, Number> = BTreeMap::new();
        let mut side = claim.side.clone();
        for (column, a) in &claim.entries {
            if let Some(own) = self.to.get(column) {
                *entries.entry(*own).or_insert(Number::ZERO) += a;
            } else if let Some((constant, of)) = map.get(column) {
                side -= a * constant;
                for (own, b) in of {
                    *entries.entry(*own).or_insert(Number::ZERO) += a * b;
                }
            }
        }
        let entries = entries.into_iter().filter(|(_, a)| !a.is_zero()).collect();
        Claim { name: claim.name.clone(), entries, side }
    }

    /// A map for rows with further variables.
    ///
    /// # Errors
    /// Why there is none.
    pub(super) async fn map(&self, desk: &Desk, rows: &[Claim]) -> Result<Map, String> {
        // Members of families that are too many are left to the exact check of each row.
        let on_demand = self.inner.subset_families().iter().map(|family| family.family);
        let written = self.inner.left_out(&on_demand.collect::<Vec<_>>());
        let inner = halves(self.inner, self.most).or_else(|_| halves(&written, self.most))?;
        let mut why = String::new();
        for local in [true, false] {
            let program = Program::new(self, (rows, &inner), local);
            match program.solved(desk).await {
                Ok(map) => return Ok(map),
                Err(reason) => why = reason,
            }
        }
        Err(why)
    }
}

/// The bounds of a column as claims.
fn of_bounds(model: &Model, column: ColumnId, (lower, upper): Bounds) -> Vec<Claim> {
    let name = model.column_name(column);
    let upper = upper.map(|side| Claim {
        name: format!("upper bound of {name}"),
        entries: vec![(column, Number::ONE)],
        side,
    });
    let lower = lower.map(|side| Claim {
        name: format!("lower bound of {name}"),
        entries: vec![(column, -Number::ONE)],
        side: -side,
    });
    upper.into_iter().chain(lower).collect()
}

/// The linear program for a map.
struct Program<'p> {
    of: &'p Between<'p>,
    rows: &'p [Claim],
    inner: &'p [Claim],
    bounds: Vec<Bounds>,
    /// Variables of the program for each further variable: its constant and its coefficients.
    places: BTreeMap<ColumnId, (usize, BTreeMap<ColumnId, usize>)>,
    columns: usize,
}

impl<'p> Program<'p> {
    fn new(of: &'p Between<'p>, (rows, inner): (&'p [Claim], &'p [Claim]), local: bool) -> Self {
        let mut out = Self {
            of,
            rows,
            inner,
            bounds: bounds_of(of.inner),
            places: BTreeMap::new(),
            columns: 0,
        };
        let labels = |model: &Model, column: ColumnId| -> BTreeSet<String> {
            let name = |label: &LabelId| model.labels().name(*label).to_owned();
            model.column_tuple(column).iter().map(name).collect()
        };
        let theirs: Vec<BTreeSet<String>> = (0..of.inner.columns().len())
            .map(|column| labels(of.inner, ColumnId::from_index(column)))
            .collect();
        let own = (0..of.outer.columns().len()).map(ColumnId::from_index);
        for column in own.filter(|&column| of.is_own(column)) {
            let needed = labels(of.outer, column);
            let takes = theirs.iter().enumerate();
            let takes = takes.filter(|(_, has)| !local || needed.is_subset(has));
            let takes: Vec<ColumnId> =
                takes.map(|(place, _)| ColumnId::from_index(place)).collect();
            let first = out.columns;
            out.columns += 1 + takes.len();
            let by_column = takes.into_iter().zip(first + 1..).collect();
            out.places.insert(column, (first, by_column));
        }
        out
    }

    /// Rows and non-zeros, about.
    fn size(&self) -> (usize, usize) {
        let entries: usize = self.inner.iter().map(|claim| claim.entries.len()).sum();
        let further: usize = self.places.values().map(|(_, of)| of.len()).max().unwrap_or(0);
        let one = entries + 2 * self.bounds.len() + self.inner.len() + 4 * further;
        (self.rows.len() * (self.bounds.len() + 1), self.rows.len() * one)
    }

    async fn solved(&self, desk: &Desk) -> Result<Map, String> {
        let (rows, nonzeros) = self.size();
        if rows > MOST_ROWS || nonzeros > MOST_NONZEROS {
            return Err(format!("the program for an affine map would have {rows} rows"));
        }
        let problem = self.problem().ok_or("the program for an affine map could not be written")?;
        let mut simplex = Simplex::new(problem);
        simplex.start(Limits::default());
        loop {
            let before = simplex.stats().ticks;
            let progress = simplex.advance(SLICE);
            desk.spend((simplex.stats().ticks - before).max(1)).await;
            if progress == Progress::Finished {
                break;
            }
        }
        desk.count();
        match simplex.outcome() {
            Some(Outcome::Optimal(solution)) => {
                self.read(&solution.x).ok_or_else(|| "the affine map has no simple numbers".into())
            }
            _ => {
                Err("no affine map was found, which does not say that there is no projection"
                    .into())
            }
        }
    }

    fn read(&self, x: &[f64]) -> Option<Map> {
        let mut map = Map::new();
        for (column, (constant, of)) in &self.places {
            let mut entries = Vec::new();
            for (own, place) in of {
                let value = simple(x[*place])?;
                if !value.is_zero() {
                    entries.push((*own, value));
                }
            }
            map.insert(*column, (simple(x[*constant])?, entries));
        }
        Some(map)
    }

    fn problem(&self) -> Option<Problem> {
        let mut problem = Problem::new();
        for _ in 0..self.columns {
            problem.add_column(0.0, f64::NEG_INFINITY, f64::INFINITY).ok()?;
        }
        for claim in self.rows {
            self.add(&mut problem, claim)?;
        }
        Some(problem)
    }

    /// The multipliers of one row and what they must meet.
    fn add(&self, problem: &mut Problem, claim: &Claim) -> Option<()> {
        let mut by_column: Vec<Vec<(lp::Col, f64)>> = vec![Vec::new(); self.bounds.len()];
        let mut fixed = vec![0.0; self.bounds.len()];
        let mut last: Vec<(lp::Col, f64)> = Vec::new();
        let at = |place: usize| u32::try_from(place).ok().map(lp::Col);
        for (column, a) in &claim.entries {
            let a = nearest_f64(a);
            if let Some(own) = self.of.to.get(column) {
                fixed[own.index()] += a;
            } else if let Some((constant, of)) = self.places.get(column) {
                last.push((at(*constant)?, a));
                for (own, place) in of {
                    by_column[own.index()].push((at(*place)?, a));
                }
            }
        }
        for row in self.inner {
            let y = problem.add_column(0.0, 0.0, f64::INFINITY).ok()?;
            for (column, a) in &row.entries {
                by_column[column.index()].push((y, -nearest_f64(a)));
            }
            last.push((y, nearest_f64(&row.side)));
        }
        let sides = by_column.iter_mut().zip(&fixed).zip(&self.bounds);
        for ((entries, fixed), (lower, upper)) in sides {
            let mut dual = |sign: f64, side: &Number| -> Option<()> {
                let y = problem.add_column(0.0, 0.0, f64::INFINITY).ok()?;
                entries.push((y, -sign));
                last.push((y, sign * nearest_f64(side)));
                Some(())
            };
            if let Some(upper) = upper {
                dual(1.0, upper)?;
            }
            if let Some(lower) = lower.as_ref().filter(|lower| !lower.is_zero()) {
                dual(-1.0, lower)?;
            }
            // A multiplier of the lower bound 0 costs nothing: it is the slack.
            let none = if lower.as_ref().is_some_and(Number::is_zero) {
                f64::NEG_INFINITY
            } else {
                -fixed
            };
            problem.add_row(entries, none, -fixed).ok()?;
        }
        problem.add_row(&last, f64::NEG_INFINITY, nearest_f64(&claim.side)).ok()?;
        Some(())
    }
}
