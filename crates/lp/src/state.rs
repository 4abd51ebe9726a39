//! The state both simplex methods work on.
//!
//! min cᵀx, Ax − s = 0, bounds on x and s: row i has a logical s_i (variable n + i, column −e_i)
//! whose bounds are the row's range. With y = B⁻ᵀc_B the reduced costs are d_j = c_j − a_jᵀy, and d
//! of a logical is y_i. Everything is in scaled units (see `scale`). The methods may alter
//! *working* costs and bounds (perturbation, shifts); the given ones stay.

use crate::basis::Status;
use crate::care::{ATTEMPTS, Care};
use crate::dual::Breakpoint;
use crate::kept::Kept;
use crate::lu::{Factor, Workspace};
use crate::problem::Problem;
use crate::random::{detoured, half_to_one};
use crate::sparse::{Matrix, Partition, SparseVector, largest};
use crate::tolerances::{self, PRIMAL_RELATIVE, VERIFY_ROW};

/// Vectors kept between iterations so that nothing is allocated in them.
#[derive(Clone, Debug, Default)]
pub(crate) struct Scratch {
    /// A row of B⁻¹.
    pub(crate) rho: SparseVector,
    /// That row times [A, −I], by variable; those that are basic or fixed are left out.
    pub(crate) row: SparseVector,
    /// B⁻¹ times the entering column, by position.
    pub(crate) column: SparseVector,
    /// B⁻¹ρ, by position.
    pub(crate) tau: SparseVector,
    /// B⁻¹ times the columns of flipped variables, by position.
    pub(crate) flips: SparseVector,
    /// The variables that bound the dual step.
    pub(crate) points: Vec<Breakpoint>,
    /// The variables that flip before the next pivot.
    pub(crate) flipped: Vec<u32>,
}

/// How much violation counts as none in the current attempt.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Room {
    /// Violation of bounds.
    pub(crate) primal: f64,
    /// Wrong sign of reduced costs.
    pub(crate) dual: f64,
}

impl Default for Room {
    fn default() -> Self {
        Self { primal: tolerances::PRIMAL, dual: tolerances::DUAL }
    }
}

/// Problem, basis, factors and current values.
#[derive(Clone, Debug)]
pub(crate) struct Core {
    pub(crate) matrix: Matrix,
    /// The rows as pricing sees them.
    pub(crate) partition: Partition,
    /// The caller's value of a variable for a scaled value of 1.
    pub(crate) unit: Vec<f64>,
    pub(crate) is_scaled: bool,
    pub(crate) cost: Vec<f64>,
    pub(crate) lower: Vec<f64>,
    pub(crate) upper: Vec<f64>,
    pub(crate) work_cost: Vec<f64>,
    pub(crate) work_lower: Vec<f64>,
    pub(crate) work_upper: Vec<f64>,
    pub(crate) status: Vec<Status>,
    /// Basic variable by position.
    pub(crate) head: Vec<u32>,
    /// Value of the basic variable by position.
    pub(crate) basic: Vec<f64>,
    /// Reduced cost by variable, of the working costs.
    pub(crate) reduced: Vec<f64>,
    /// Steepest-edge weight by position.
    pub(crate) weight: Vec<f64>,
    /// Squared violation of working bounds by position.
    pub(crate) violation: Vec<f64>,
    /// Positions that may have a violation, each once.
    pub(crate) violated: Vec<u32>,
    /// Whether a position is among them.
    pub(crate) is_listed: Vec<bool>,
    /// Variables whose reduced costs may have the wrong sign, each once (primal).
    pub(crate) attractive: Vec<u32>,
    /// Whether a variable is among them.
    pub(crate) is_attractive: Vec<bool>,
    /// Reference weight by variable (primal).
    pub(crate) devex: Vec<f64>,
    pub(crate) factor: Factor,
    pub(crate) factoring: Workspace,
    /// True while the factors belong to the sorted head and carry no update.
    pub(crate) canonical: bool,
    /// What the last factorisation cost in ticks.
    pub(crate) factor_ticks: u64,
    pub(crate) care: Care,
    pub(crate) room: Room,
    pub(crate) kept: Kept,
    pub(crate) scratch: Scratch,
    pub(crate) ticks: u64,
    pub(crate) iterations: u64,
    pub(crate) refactors: u32,
}

impl Core {
    /// The problem with its slack basis.
    pub(crate) fn new(problem: Problem) -> Self {
        let (n, m) = (problem.cost.len(), problem.rows.len());
        let mut matrix = Matrix::new(n);
        matrix.append(problem.rows.iter().map(|row| row.entries.as_slice()));
        let (mut cost, mut lower, mut upper) = (problem.cost, problem.lower, problem.upper);
        cost.resize(n + m, 0.0);
        lower.extend(problem.rows.iter().map(|row| row.lower));
        upper.extend(problem.rows.iter().map(|row| row.upper));
        let mut core = Self {
            matrix,
            partition: Partition::default(),
            unit: Vec::new(),
            is_scaled: false,
            work_cost: cost.clone(),
            work_lower: lower.clone(),
            work_upper: upper.clone(),
            cost,
            lower,
            upper,
            status: vec![Status::Lower; n],
            head: Vec::new(),
            basic: Vec::new(),
            reduced: Vec::new(),
            weight: Vec::new(),
            violation: Vec::new(),
            violated: Vec::new(),
            is_listed: Vec::new(),
            attractive: Vec::new(),
            is_attractive: Vec::new(),
            devex: Vec::new(),
            factor: Factor::default(),
            factoring: Workspace::default(),
            canonical: false,
            factor_ticks: 0,
            care: ATTEMPTS[0],
            room: Room::default(),
            kept: Kept::default(),
            scratch: Scratch::default(),
            ticks: 0,
            iterations: 0,
            refactors: 0,
        };
        core.status.resize(n + m, Status::Basic);
        core.scale(&[]);
        core.restore_given();
        core.settle_statuses();
        core.sort_head();
        core
    }

    /// Number of columns.
    pub(crate) fn columns(&self) -> usize {
        self.matrix.column_count()
    }

    /// Number of rows.
    pub(crate) fn rows(&self) -> usize {
        self.matrix.row_count()
    }

    /// Number of variables: columns and logicals.
    pub(crate) fn variables(&self) -> usize {
        self.status.len()
    }

    /// Makes the slack basis current; on a detour some columns are at their upper bound.
    pub(crate) fn reset_to_slack_basis(&mut self, detour: u32) {
        let n = self.columns();
        let is_upper = |j: usize| detour > 0 && half_to_one(detoured(j, detour)) < 0.75;
        for (j, status) in self.status.iter_mut().enumerate() {
            *status = match (j < n, is_upper(j)) {
                (false, _) => Status::Basic,
                (true, true) => Status::Upper,
                (true, false) => Status::Lower,
            };
        }
        self.adopt_statuses();
    }

    /// Sets each working cost and bound to the given one.
    pub(crate) fn restore_given(&mut self) {
        self.work_cost.clone_from(&self.cost);
        self.work_lower.clone_from(&self.lower);
        self.work_upper.clone_from(&self.upper);
        self.partition.is_current = false;
        if self.care.widens {
            self.widen_rows();
        }
    }

    /// Moves the working sides of each row apart by half of what the row may be violated by, at values
    /// of about 1.
    fn widen_rows(&mut self) {
        let n = self.columns();
        for i in 0..self.rows() {
            let width = 0.5 * VERIFY_ROW * self.row_size(i);
            self.work_lower[n + i] -= width;
            self.work_upper[n + i] += width;
        }
    }

    /// What a tolerance of a row is relative to at values of about 1: its largest entry, plus 1 in the
    /// caller's or in scaled units, whichever is less.
    pub(crate) fn row_size(&self, i: usize) -> f64 {
        self.row_one(i) + largest(self.matrix.row(i).map(|(_, value)| value))
    }

    /// 1 in the caller's or in scaled units of a row, whichever is less.
    pub(crate) fn row_one(&self, i: usize) -> f64 {
        let unit = self.unit[self.columns() + i];
        if unit > 1.0 { 1.0 / unit } else { 1.0 }
    }

    /// The statuses as they stand become the basis, of the given costs and bounds.
    pub(crate) fn adopt_statuses(&mut self) {
        self.restore_given();
        self.settle_statuses();
        self.head.clear();
        self.sort_head();
    }

    /// Moves every nonbasic status to a bound that exists (working bounds); fixed variables count
    /// as at the lower one.
    pub(crate) fn settle_statuses(&mut self) {
        for j in 0..self.status.len() {
            if self.status[j] != Status::Basic {
                self.status[j] = settled(self.status[j], self.work_lower[j], self.work_upper[j]);
            }
        }
    }

    /// Orders the head by variable, weights along with it, and gives every array its length.
    /// A variable that was not in the head has weight 1.
    pub(crate) fn sort_head(&mut self) {
        let (variables, m) = (self.variables(), self.rows());
        let mut weight = vec![1.0; variables];
        for (&j, &held) in self.head.iter().zip(&self.weight) {
            weight[j as usize] = held;
        }
        self.head.clear();
        self.head
            .extend((0..variables as u32).filter(|&j| self.status[j as usize] == Status::Basic));
        self.weight.clear();
        self.weight.extend(self.head.iter().map(|&j| weight[j as usize]));
        self.basic.resize(m, 0.0);
        self.violation.resize(m, 0.0);
        self.violated.clear();
        self.is_listed.clear();
        self.is_listed.resize(m, false);
        self.reduced.resize(variables, 0.0);
        self.devex.resize(variables, 1.0);
        self.scratch.rho.reset(m);
        self.scratch.row.reset(variables);
        self.scratch.column.reset(m);
        self.scratch.tau.reset(m);
        self.scratch.flips.reset(m);
        self.canonical = false;
        self.partition.is_current = false;
    }

    /// Factorises the basis in the order of the head, with the threshold of the attempt. Dependent
    /// columns are replaced by logicals; returns how many.
    pub(crate) fn refactor(&mut self) -> u32 {
        self.refactor_with(self.care.threshold)
    }

    fn refactor_with(&mut self, threshold: f64) -> u32 {
        let columns = &mut self.factoring.columns;
        columns.clear();
        for &j in &self.head {
            for_column(&self.matrix, j, |row, value| columns.push(row, value));
            columns.close_column();
        }
        let (replaced, ticks) =
            self.factor.factorise(&mut self.factoring, threshold, self.care.singular);
        self.factor_ticks = ticks;
        self.count_factorisation();
        self.kept.forget();
        for r in &replaced {
            let out = self.head[r.position as usize] as usize;
            let logical = self.columns() + r.row as usize;
            self.status[out] = settled(Status::Lower, self.work_lower[out], self.work_upper[out]);
            self.status[logical] = Status::Basic;
            self.head[r.position as usize] = logical as u32;
            self.weight[r.position as usize] = 1.0;
            self.partition.is_current = false;
        }
        replaced.len() as u32
    }

    /// Counts the work of the last factorisation.
    pub(crate) fn count_factorisation(&mut self) {
        self.ticks += self.factor_ticks;
        self.refactors += 1;
    }

    /// Factors of the sorted head without updates; attempts differ in which bases they count as
    /// singular, not in the factors of one that is not. Returns how many columns were replaced.
    pub(crate) fn refactor_canonical(&mut self) -> u32 {
        if self.canonical && self.factor.updates() == 0 {
            return 0;
        }
        let mut replaced = 0;
        loop {
            self.sort_head();
            let now = self.refactor_with(ATTEMPTS[0].threshold);
            replaced += now;
            if now == 0 {
                break;
            }
        }
        self.canonical = true;
        replaced
    }

    /// Factors as a first attempt sees them, whatever the last solve went through. Returns how many
    /// columns were replaced.
    pub(crate) fn refactor_first(&mut self) -> u32 {
        self.care = ATTEMPTS[0];
        self.refactor_canonical()
    }

    /// The value of a nonbasic variable (working bounds).
    pub(crate) fn nonbasic_value(&self, j: usize) -> f64 {
        match self.status[j] {
            Status::Lower => self.work_lower[j],
            Status::Upper => self.work_upper[j],
            Status::Basic | Status::Free => 0.0,
        }
    }

    /// True when a variable's working bounds are equal: it never enters.
    pub(crate) fn is_fixed(&self, j: usize) -> bool {
        self.work_lower[j] == self.work_upper[j]
    }

    /// Puts `entering` at a position with a value; the variable that leaves goes to
    /// `leaving_status`.
    pub(crate) fn exchange(
        &mut self,
        position: u32,
        entering: u32,
        value: f64,
        leaving_status: Status,
    ) {
        let at = position as usize;
        let leaving = self.head[at] as usize;
        self.status[leaving] =
            settled(leaving_status, self.work_lower[leaving], self.work_upper[leaving]);
        self.status[entering as usize] = Status::Basic;
        self.head[at] = entering;
        self.repartition(leaving, entering);
        self.basic[at] = value;
        self.note_violation(at);
        self.factor.update(position, self.scratch.column.get(position));
        self.canonical = false;
        self.iterations += 1;
    }

    /// Keeps the rows as pricing sees them.
    fn repartition(&mut self, leaving: usize, entering: u32) {
        if (entering as usize) < self.columns() {
            self.partition.take_out(&self.matrix, entering);
        }
        if leaving < self.columns() && !self.is_fixed(leaving) {
            self.partition.put_in(&self.matrix, leaving as u32);
        }
    }

    /// Moves the working bounds of violated basic variables to their values.
    pub(crate) fn admit_violations(&mut self) {
        for k in 0..self.violated.len() {
            let position = self.violated[k] as usize;
            let (j, value) = (self.head[position] as usize, self.basic[position]);
            if value < self.work_lower[j] {
                self.work_lower[j] = value;
            } else if value > self.work_upper[j] {
                self.work_upper[j] = value;
            }
            self.note_violation(position);
        }
    }

    /// Basic values after a step along `scratch.column`: x_B ← x_B − step · α.
    pub(crate) fn move_basic(&mut self, step: f64) {
        for k in 0..self.scratch.column.count() {
            let position = self.scratch.column.indices()[k];
            let change = step * self.scratch.column.get(position);
            if change != 0.0 {
                self.basic[position as usize] -= change;
                self.note_violation(position as usize);
            }
        }
        self.ticks += self.scratch.column.count() as u64;
    }
}

/// Calls `visit` with the entries (row, value) of a variable's column; returns how many there are.
pub(crate) fn for_column(matrix: &Matrix, j: u32, mut visit: impl FnMut(u32, f64)) -> u64 {
    let n = matrix.column_count();
    if (j as usize) < n {
        let mut count = 0;
        for (row, value) in matrix.column(j as usize) {
            visit(row, value);
            count += 1;
        }
        count
    } else {
        visit(j - n as u32, -1.0);
        1
    }
}

/// A nonbasic status that fits the bounds.
pub(crate) fn settled(status: Status, lower: f64, upper: f64) -> Status {
    let (has_lower, has_upper) = (lower > f64::NEG_INFINITY, upper < f64::INFINITY);
    match (has_lower, has_upper) {
        (false, false) => Status::Free,
        (true, false) => Status::Lower,
        (false, true) => Status::Upper,
        (true, true) if status == Status::Upper && lower < upper => Status::Upper,
        (true, true) => Status::Lower,
    }
}

/// How far a value is below (negative) or above (positive) its bounds; zero within `room`.
pub(crate) fn excess(value: f64, lower: f64, upper: f64, room: f64) -> f64 {
    if value >= lower && value <= upper {
        0.0
    } else if value < lower - room - PRIMAL_RELATIVE * lower.abs() {
        value - lower
    } else if value > upper + room + PRIMAL_RELATIVE * upper.abs() {
        value - upper
    } else {
        0.0
    }
}
