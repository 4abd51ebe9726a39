//! Values computed with the factors: basic values, duals, reduced costs, a row and a column of the
//! tableau.

use crate::basis::Status;
use crate::sparse::{SparseVector, largest};
use crate::state::{Core, excess, for_column};
use crate::tolerances;

impl Core {
    /// x_B = −B⁻¹ N x_N, and the violations.
    pub(crate) fn compute_basic(&mut self) {
        let mut side = std::mem::take(&mut self.scratch.flips);
        side.clear();
        self.add_nonbasic(&mut side);
        self.ticks += self.factor.ftran(&mut side);
        for position in 0..self.rows() {
            self.basic[position] = side.get(position as u32);
        }
        side.clear();
        self.scratch.flips = side;
        self.note_violations();
    }

    /// Sets the stored violations from the basic values.
    pub(crate) fn note_violations(&mut self) {
        self.violated.clear();
        self.is_listed.fill(false);
        for position in 0..self.rows() {
            self.note_violation(position);
        }
    }

    /// Adds −N x_N to a vector by row.
    pub(crate) fn add_nonbasic(&mut self, side: &mut SparseVector) {
        for j in 0..self.variables() {
            let value = self.nonbasic_value(j);
            if value != 0.0 {
                self.ticks +=
                    for_column(&self.matrix, j as u32, |row, entry| side.add(row, -entry * value));
            }
        }
    }

    /// Sets the stored violation of a position from its value.
    pub(crate) fn note_violation(&mut self, position: usize) {
        let j = self.head[position] as usize;
        let excess =
            excess(self.basic[position], self.work_lower[j], self.work_upper[j], self.room.primal);
        self.violation[position] = excess * excess;
        if excess != 0.0 && !self.is_listed[position] {
            self.is_listed[position] = true;
            self.violated.push(position as u32);
        }
    }

    /// y = B⁻ᵀc_B into `scratch.rho`.
    pub(crate) fn compute_duals(&mut self, given_costs: bool) {
        let cost = if given_costs { &self.cost } else { &self.work_cost };
        self.scratch.rho.clear();
        for (position, &j) in (0u32..).zip(&self.head) {
            if cost[j as usize] != 0.0 {
                self.scratch.rho.set(position, cost[j as usize]);
            }
        }
        self.ticks += self.factor.btran(&mut self.scratch.rho);
    }

    /// Reduced costs of the working costs, zero for basic variables.
    pub(crate) fn compute_reduced(&mut self) {
        self.compute_duals(false);
        let (n, y) = (self.columns(), &self.scratch.rho);
        for j in 0..self.status.len() {
            self.reduced[j] = if self.status[j] == Status::Basic {
                0.0
            } else if j >= n {
                self.work_cost[j] + y.get((j - n) as u32)
            } else {
                self.work_cost[j]
                    - self.matrix.column(j).map(|(row, value)| value * y.get(row)).sum::<f64>()
            };
        }
        self.ticks += self.matrix.nonzeros() as u64;
    }

    /// How far a nonbasic variable's reduced cost has the wrong sign; zero when it has not or the
    /// variable is fixed.
    pub(crate) fn wrong_sign(&self, j: usize) -> f64 {
        let d = self.reduced[j];
        if d == 0.0 {
            return 0.0;
        }
        let wrong = match self.status[j] {
            Status::Basic => return 0.0,
            Status::Lower => -d,
            Status::Upper => d,
            Status::Free => d.abs(),
        };
        if wrong > 0.0 && !self.is_fixed(j) { wrong } else { 0.0 }
    }

    /// True when no basic variable is out of its working bounds.
    pub(crate) fn is_primal_feasible(&self) -> bool {
        self.violated.iter().all(|&position| self.violation[position as usize] == 0.0)
    }

    /// Largest wrong-signed reduced cost.
    pub(crate) fn worst_reduced(&self) -> f64 {
        largest((0..self.variables()).map(|j| self.wrong_sign(j)))
    }

    /// ρ = B⁻ᵀe_r into `scratch.rho` and ρ[A, −I] into `scratch.row`.
    pub(crate) fn compute_row(&mut self, position: u32) {
        self.compute_rho(position);
        self.price();
    }

    /// ρ = B⁻ᵀe_r into `scratch.rho`.
    pub(crate) fn compute_rho(&mut self, position: u32) {
        let mut rho = std::mem::take(&mut self.scratch.rho);
        rho.clear();
        rho.set(position, 1.0);
        self.ticks += self.factor.btran(&mut rho);
        if self.care.refines {
            let mut side = std::mem::take(&mut self.scratch.flips);
            side.set(position, 1.0);
            self.refine_backward(&mut side, &mut rho);
            self.scratch.flips = side;
        }
        self.scratch.rho = rho;
    }

    /// ρ[A, −I] into `scratch.row`, row by row of A, without basic and fixed variables. When more
    /// entries are added than there are columns, the places are listed afterwards, in order.
    pub(crate) fn price(&mut self) {
        if !self.partition.is_current {
            let (status, lower, upper) = (&self.status, &self.work_lower, &self.work_upper);
            let priced = |j: usize| status[j] != Status::Basic && lower[j] != upper[j];
            self.partition.rebuild(&self.matrix, priced);
            self.ticks += self.matrix.nonzeros() as u64;
        }
        let n = self.columns();
        let row = &mut self.scratch.row;
        row.clear();
        let mut entries = 0;
        for (i, multiplier) in self.scratch.rho.iter() {
            entries += self.partition.row(i).0.len();
            let logical = n + i as usize;
            if self.status[logical] != Status::Basic
                && self.work_lower[logical] != self.work_upper[logical]
            {
                row.add(logical as u32, -multiplier);
            }
        }
        self.ticks += (entries + self.scratch.rho.count()) as u64;
        let is_dense = entries > n;
        for (i, multiplier) in self.scratch.rho.iter() {
            let (columns, values) = self.partition.row(i);
            if is_dense {
                row.add_unlisted(columns, values, multiplier);
            } else {
                columns.iter().zip(values).for_each(|(&j, &value)| row.add(j, multiplier * value));
            }
        }
        if is_dense {
            row.list_below(n as u32);
        }
    }

    /// B⁻¹a_j into `scratch.column`.
    pub(crate) fn compute_column(&mut self, j: u32) {
        let mut column = std::mem::take(&mut self.scratch.column);
        column.clear();
        for_column(&self.matrix, j, |row, value| column.set(row, value));
        self.ticks += self.factor.ftran_entering(&mut column);
        if self.care.refines {
            let mut side = std::mem::take(&mut self.scratch.flips);
            for_column(&self.matrix, j, |row, value| side.set(row, value));
            self.refine_forward(&mut side, &mut column);
            self.scratch.flips = side;
        }
        self.scratch.column = column;
    }

    /// True when the pivot of `scratch.column` is large enough beside the column and agrees with
    /// the one of `scratch.row`.
    pub(crate) fn pivot_is_sound(&self, position: u32, entering: u32) -> bool {
        let by_column = self.scratch.column.get(position);
        let by_row = self.scratch.row.get(entering);
        let (least, agreement) = if self.factor.updates() > 0 {
            (tolerances::PIVOT_AFTER_UPDATES, tolerances::AGREEMENT_AFTER_UPDATES)
        } else {
            (self.care.pivot, tolerances::AGREEMENT_FRESH)
        };
        let largest = self.scratch.column.largest();
        let least = if largest < 1.0 { least * largest } else { least };
        by_column.abs() >= least && (by_column - by_row).abs() <= agreement * by_column.abs()
    }

    /// c'x with working costs and the current values.
    pub(crate) fn working_objective(&mut self) -> f64 {
        let nonbasic: f64 =
            (0..self.variables()).map(|j| self.work_cost[j] * self.nonbasic_value(j)).sum();
        let basic: f64 = self
            .head
            .iter()
            .zip(&self.basic)
            .map(|(&j, &value)| self.work_cost[j as usize] * value)
            .sum();
        self.ticks += self.variables() as u64 / 4;
        nonbasic + basic
    }

    /// y = B⁻ᵀc_B with the given costs, one a row.
    pub(crate) fn given_duals(&mut self) -> Vec<f64> {
        self.compute_duals(true);
        (0..self.rows() as u32).map(|row| self.scratch.rho.get(row)).collect()
    }
}
