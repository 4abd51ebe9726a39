//! The exact value of a relaxation from its final basis, and the exact ray of one without a
//! point: one slice at a time.
//!
//! The basis gives x and y exactly. Whatever the basis, y proves a bound ([`crate::bound()`] says
//! how); when x is within all rows and bounds and costs as much as y proves, both are optimal and
//! the bound is the exact optimum. Where a floating-point kernel was wrong by a little, the
//! certifier asks for the solution of a problem in which that little is large
//! ([`crate::Residual`]), and goes on from its basis.

use dashu_int::{IBig, ops::BitTest};
use model::{Number, Sense};

use crate::basis::{Standing, Standings, System, Vertex};
use crate::bound::closed;
use crate::kernel::Objective;
use crate::lifting::{Elimination, Eliminator, Factor, Fractions, Lifting};
use crate::multipliers::{Multipliers, has_side};
use crate::ray::{candidates, ray};
use crate::refine::{Exact, Residual, residual};
use crate::rows::{Bounds, ExactRows};
use crate::vertex::Variable;

/// How often a residual problem is asked for.
const ROUNDS: usize = 8;

/// How many rows of the inverse are tried as rays.
const RAYS: usize = 4;

/// What is to be proved.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Wish {
    /// The optimum, or, where one is given, any bound that reaches a value: in the direction of
    /// the objective, offset included.
    Optimum(Option<Number>),
    /// That there is no point.
    Refutation,
}

/// What a certifier may spend.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Budget {
    /// Non-zeros touched, those of long numbers by their words.
    pub ticks: u64,
    /// Bits of the numbers modulo which systems are solved.
    pub bits: usize,
}

impl Default for Budget {
    /// Some seconds; numbers of six thousand digits.
    fn default() -> Self {
        Self { ticks: 400_000_000, bits: 20_000 }
    }
}

/// How far [`Certifier::advance`] came.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Progress {
    /// There is more to do.
    Working,
    /// A residual problem is to be solved: see [`Certifier::residual`].
    Asks,
    /// Nothing more will come.
    Done,
}

#[derive(Debug, Clone)]
enum Stage {
    Begin,
    Eliminate(Eliminator),
    Dual(Lifting),
    Primal(Vertex, Lifting),
    /// A row of the inverse: for this variable, which is over (or under) its bounds.
    Ray(Variable, Lifting),
    Ask(Box<Residual>),
    Done,
}

/// A proof under way. Always with the same rows, to which rows may be added meanwhile.
#[derive(Debug, Clone)]
pub struct Certifier {
    bounds: Vec<Bounds>,
    basis: Standings,
    wish: Wish,
    budget: Budget,
    stage: Stage,
    system: Option<System>,
    factor: Option<Factor>,
    multipliers: Option<Multipliers>,
    vertex: Option<Vertex>,
    tried: Vec<Variable>,
    rounds: usize,
    /// Whether a singular basis was repaired.
    repaired: bool,
    ticks: u64,
    bound: Option<Number>,
    exact: bool,
    refuted: bool,
}

impl Certifier {
    /// A proof from `basis`, with one pair of bounds a column. `O(1)`.
    #[must_use]
    pub fn new(bounds: Vec<Bounds>, basis: Standings, wish: Wish, budget: Budget) -> Self {
        Self {
            bounds,
            basis,
            wish,
            budget,
            stage: Stage::Begin,
            system: None,
            factor: None,
            multipliers: None,
            vertex: None,
            tried: Vec::new(),
            rounds: 0,
            repaired: false,
            ticks: 0,
            bound: None,
            exact: false,
            refuted: false,
        }
    }

    /// Works on for about `ticks`.
    pub fn advance(&mut self, rows: &ExactRows, ticks: u64) -> Progress {
        let stop = self.ticks.saturating_add(ticks);
        loop {
            match self.stage {
                Stage::Done => return Progress::Done,
                Stage::Ask(_) => return Progress::Asks,
                _ => self.step(rows),
            }
            if self.ticks >= self.budget.ticks {
                self.stage = Stage::Done;
            } else if self.ticks >= stop {
                return Progress::Working;
            }
        }
    }

    /// The problem that is to be solved.
    #[must_use]
    pub fn residual(&self) -> Option<&Residual> {
        match &self.stage {
            Stage::Ask(residual) => Some(residual),
            _ => None,
        }
    }

    /// Takes the optimal basis of the residual problem; `None` where it has none.
    pub fn answer(&mut self, basis: Option<Standings>) {
        let Stage::Ask(residual) = std::mem::replace(&mut self.stage, Stage::Done) else { return };
        if let Some(basis) = basis.map(|basis| residual.read(&self.basis, basis))
            && basis != self.basis
        {
            self.basis = basis;
            self.repaired = false;
            self.stage = Stage::Begin;
        }
    }

    /// The best bound proved so far, in the direction of the objective, offset included.
    #[must_use]
    pub fn bound(&self, rows: &ExactRows) -> Option<Number> {
        self.bound.as_ref().map(|value| rows.as_given(value.clone()))
    }

    /// Whether the bound is the optimum: a point of that value is within all rows and bounds.
    #[must_use]
    pub fn is_exact(&self) -> bool {
        self.exact
    }

    /// Whether it is proved that there is no point.
    #[must_use]
    pub fn is_refuted(&self) -> bool {
        self.refuted
    }

    /// The optimal point, one value a column, when the bound is the optimum.
    #[must_use]
    pub fn point(&self) -> Option<Vec<Number>> {
        self.vertex.as_ref().filter(|_| self.exact).map(Vertex::point)
    }

    /// The exact point of the last basis, one value a column, which may break bounds and rows where the
    /// bound is not the optimum.
    #[must_use]
    pub fn vertex(&self) -> Option<Vec<Number>> {
        self.vertex.as_ref().map(Vertex::point)
    }

    /// Whether it ended because the budget of ticks was spent.
    #[must_use]
    pub fn is_spent(&self) -> bool {
        self.ticks >= self.budget.ticks
    }

    /// The exact multipliers of the last basis.
    #[must_use]
    pub fn into_multipliers(self) -> Option<ExactMultipliers> {
        self.multipliers.map(ExactMultipliers)
    }

    /// Non-zeros touched so far.
    #[must_use]
    pub fn ticks(&self) -> u64 {
        self.ticks
    }

    fn step(&mut self, rows: &ExactRows) {
        self.stage = match std::mem::replace(&mut self.stage, Stage::Done) {
            Stage::Begin => self.begin(rows),
            Stage::Eliminate(eliminator) => self.eliminate(rows, eliminator),
            Stage::Dual(mut lifting) => match self.lift(&mut lifting) {
                Lifted::More => Stage::Dual(lifting),
                Lifted::Found(found) => self.priced(rows, found),
                Lifted::Never => Stage::Done,
            },
            Stage::Primal(vertex, mut lifting) => match self.lift(&mut lifting) {
                Lifted::More => Stage::Primal(vertex, lifting),
                Lifted::Found(found) => self.placed(rows, vertex, found),
                Lifted::Never => Stage::Done,
            },
            Stage::Ray(variable, mut lifting) => match self.lift(&mut lifting) {
                Lifted::More => Stage::Ray(variable, lifting),
                Lifted::Found(found) => self.cast(rows, variable, found),
                Lifted::Never => Stage::Done,
            },
            rest @ (Stage::Ask(_) | Stage::Done) => rest,
        };
    }

    fn begin(&mut self, rows: &ExactRows) -> Stage {
        self.ticks += (rows.column_count() + rows.row_count()) as u64;
        if self.bounds.len() != rows.column_count() {
            return Stage::Done;
        }
        let Some(system) = System::new(rows, &self.basis) else { return Stage::Done };
        let eliminator = Eliminator::new(&system.matrix);
        self.ticks += eliminator.work();
        self.system = Some(system);
        Stage::Eliminate(eliminator)
    }

    fn eliminate(&mut self, rows: &ExactRows, mut eliminator: Eliminator) -> Stage {
        let before = eliminator.work();
        let state = eliminator.step();
        self.ticks += eliminator.work() - before;
        match (state, &self.system) {
            (Elimination::Working, _) => Stage::Eliminate(eliminator),
            (Elimination::Singular, _) => self.repair(eliminator),
            (_, None) => Stage::Done,
            (Elimination::Done, Some(system)) => {
                self.factor = Some(eliminator.finish());
                match self.wish {
                    Wish::Optimum(_) => {
                        Stage::Dual(Lifting::new(&system.matrix, true, system.costs(rows)))
                    }
                    Wish::Refutation => self.place(rows),
                }
            }
        }
    }

    /// A basis that is regular in floating-point arithmetic alone: rows that depend on the others
    /// become slack, and as many columns leave. Once a basis, for what is left is regular.
    fn repair(&mut self, eliminator: Eliminator) -> Stage {
        let Some(system) = self.system.take().filter(|_| !self.repaired) else {
            return Stage::Done;
        };
        self.repaired = true;
        let (rows, columns) = eliminator.into_dependent();
        for row in rows {
            self.basis.rows[system.rows[row as usize] as usize] = Standing::Basic;
        }
        for column in columns {
            self.basis.columns[system.columns[column as usize] as usize] = Standing::Lower;
        }
        Stage::Begin
    }

    fn lift(&mut self, lifting: &mut Lifting) -> Lifted {
        let (Some(system), Some(factor)) = (&self.system, &self.factor) else {
            return Lifted::Never;
        };
        self.ticks += factor.nonzeros() + system.matrix.nonzeros() as u64;
        let found = lifting.step(&system.matrix, factor);
        let words = lifting.attempted_words();
        self.ticks += words * words * system.matrix.size() as u64 / 4;
        match found {
            Some(found) => Lifted::Found(found),
            None if lifting.bits() >= self.budget.bits => Lifted::Never,
            None => Lifted::More,
        }
    }

    /// The multipliers are known: what they prove.
    fn priced(&mut self, rows: &ExactRows, found: Fractions) -> Stage {
        let Some(system) = &self.system else { return Stage::Done };
        let multipliers = system.multipliers(rows, found);
        self.ticks += rows.nonzeros() as u64;
        let clipped = clipped(rows, &multipliers);
        let value = closed(rows, Objective::Costs, &self.bounds, &clipped);
        self.bound = self.bound.take().max(value);
        self.multipliers = Some(multipliers);
        if self.reaches(rows) { Stage::Done } else { self.place(rows) }
    }

    /// Whether the bound is what was wished for.
    fn reaches(&self, rows: &ExactRows) -> bool {
        let (Wish::Optimum(Some(goal)), Some(bound)) = (&self.wish, self.bound(rows)) else {
            return false;
        };
        match rows.sense {
            Sense::Minimise => bound >= *goal,
            Sense::Maximise => bound <= *goal,
        }
    }

    fn place(&mut self, rows: &ExactRows) -> Stage {
        let Some(system) = &self.system else { return Stage::Done };
        self.ticks += rows.nonzeros() as u64;
        let (vertex, right) = system.right(rows, &self.bounds, &self.basis);
        Stage::Primal(vertex, Lifting::new(&system.matrix, false, right))
    }

    /// The point is known: whether it is one, and what it costs.
    fn placed(&mut self, rows: &ExactRows, rest: Vertex, found: Fractions) -> Stage {
        let Some(system) = &self.system else { return Stage::Done };
        let vertex = system.vertex(rest, found);
        self.ticks += rows.nonzeros() as u64;
        if self.wish == Wish::Refutation {
            self.vertex = Some(vertex);
            return self.next_ray(rows);
        }
        let excesses = vertex.excesses(rows, &self.bounds, &self.basis);
        let value = vertex.objective(rows);
        self.exact = excesses.is_empty() && self.bound.as_ref() == Some(&value);
        let asks = self.multipliers.as_ref().filter(|_| !self.exact && self.rounds < ROUNDS);
        let asked = asks.and_then(|multipliers| {
            let (bounds, basis) = (&self.bounds, &self.basis);
            residual(rows, Exact { bounds, basis, vertex: &vertex, multipliers }, &excesses)
        });
        self.vertex = Some(vertex);
        self.rounds += 1;
        asked.map_or(Stage::Done, |asked| {
            self.ticks += rows.nonzeros() as u64;
            Stage::Ask(Box::new(asked))
        })
    }

    /// The next row of the inverse that may be a ray: that of the basic variable that is most out
    /// of its bounds and was not tried.
    fn next_ray(&mut self, rows: &ExactRows) -> Stage {
        let (Some(system), Some(vertex)) = (&self.system, &self.vertex) else { return Stage::Done };
        self.ticks += rows.nonzeros() as u64;
        let excesses = vertex.excesses(rows, &self.bounds, &self.basis);
        let next = candidates(&excesses, &self.basis).find(|v| !self.tried.contains(v));
        let Some(variable) = next.filter(|_| self.tried.len() < RAYS) else { return Stage::Done };
        self.tried.push(variable);
        let right = match variable {
            Variable::Row(row) => system.row(rows, row),
            Variable::Column(column) => {
                let mut unit = vec![IBig::ZERO; system.columns.len()];
                unit[system.place(column)] = IBig::ONE;
                unit
            }
        };
        Stage::Ray(variable, Lifting::new(&system.matrix, true, right))
    }

    /// A row of the inverse is known: whether it proves that there is no point.
    fn cast(&mut self, rows: &ExactRows, variable: Variable, found: Fractions) -> Stage {
        let Some(system) = &self.system else { return Stage::Done };
        let multipliers = ray(rows, system, variable, found);
        for multipliers in [multipliers.negated(), multipliers] {
            self.ticks += rows.nonzeros() as u64;
            let clipped = clipped(rows, &multipliers);
            let value = closed(rows, Objective::Nothing, &self.bounds, &clipped);
            if value.is_some_and(|value| value > Number::ZERO) {
                self.refuted = true;
                self.multipliers = Some(multipliers);
                return Stage::Done;
            }
        }
        self.next_ray(rows)
    }
}

enum Lifted {
    More,
    Found(Fractions),
    Never,
}

/// Exact multipliers, to be used again under other bounds.
#[derive(Debug, Clone)]
pub struct ExactMultipliers(Multipliers);

impl ExactMultipliers {
    /// The bound that they prove under these bounds: see [`crate::bound()`].
    #[must_use]
    pub fn bound(&self, rows: &ExactRows, bounds: &[Bounds]) -> Option<Number> {
        if bounds.len() != rows.column_count() {
            return None;
        }
        let mut own = clipped(rows, &self.0);
        own.values.resize(rows.row_count(), IBig::ZERO);
        closed(rows, Objective::Costs, bounds, &own).map(|value| rows.as_given(value))
    }

    /// The bits of the largest number.
    #[must_use]
    pub fn bits(&self) -> usize {
        let values = self.0.values.iter().map(BitTest::bit_len).max().unwrap_or(0);
        values.max(self.0.denominator.bit_len())
    }
}

/// The multipliers without those whose sign has no side in their row.
fn clipped(rows: &ExactRows, multipliers: &Multipliers) -> Multipliers {
    let mut out = multipliers.clone();
    for (row, value) in out.values.iter_mut().enumerate() {
        if !has_side(rows, row, (*value).cmp(&IBig::ZERO)) {
            *value = IBig::ZERO;
        }
    }
    out
}
