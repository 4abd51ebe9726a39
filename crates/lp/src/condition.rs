//! An estimate of the condition of the basis in the 1-norm: ‖B‖₁ ‖B⁻¹‖₁.
//!
//! ‖B⁻¹‖₁ is the largest ‖B⁻¹x‖₁ over ‖x‖₁ = 1, a convex function whose maximum is at a unit
//! vector. From x = (1/m, …, 1/m): y = B⁻¹x, z = B⁻ᵀ sign(y) is a subgradient; the next x is the
//! unit vector where |z| is largest, until |z| is nowhere larger than zᵀx. The result is a lower
//! bound, nearly always within a factor of three.
//!
//! Source: Hager 1984; Higham 1988.

use crate::simplex::Simplex;
use crate::sparse::{SparseVector, largest};
use crate::state::{Core, for_column};

/// Most unit vectors tried.
const STEPS: u32 = 5;

impl Simplex {
    /// An estimate (from below) of the condition number of the current basis in scaled units, in
    /// the 1-norm; none while a solve is under way. Work: a few solves with the factors.
    pub fn condition_estimate(&mut self) -> Option<f64> {
        if self.machine.is_working() {
            return None;
        }
        self.core.refactor_first();
        Some(self.core.condition_estimate())
    }
}

impl Core {
    fn condition_estimate(&mut self) -> f64 {
        self.norm_of_basis() * self.norm_of_inverse()
    }

    /// ‖B‖₁: the largest sum of sizes of a column.
    fn norm_of_basis(&self) -> f64 {
        largest(self.head.iter().map(|&j| {
            let mut sum = 0.0;
            for_column(&self.matrix, j, |_, value| sum += value.abs());
            sum
        }))
    }

    /// The estimate of ‖B⁻¹‖₁.
    fn norm_of_inverse(&mut self) -> f64 {
        let rows = self.rows();
        let (mut x, mut z) = (SparseVector::default(), SparseVector::default());
        x.reset(rows);
        z.reset(rows);
        (0..rows as u32).for_each(|row| x.set(row, 1.0 / rows as f64));
        let (mut norm, mut unit) = (0.0, None);
        for _ in 0..STEPS {
            self.ticks += self.factor.ftran(&mut x);
            let now: f64 = x.iter().map(|(_, value)| value.abs()).sum();
            if now <= norm {
                break;
            }
            norm = now;
            z.clear();
            x.drain(|position, value| z.set(position, value.signum()));
            self.ticks += self.factor.btran(&mut z);
            let best = z.iter().fold((0, 0.0), |best: (u32, f64), (row, value)| {
                let ahead = value.abs() > best.1 || (value.abs() == best.1 && row < best.0);
                if ahead { (row, value.abs()) } else { best }
            });
            if unit == Some(best.0) {
                break;
            }
            unit = Some(best.0);
            x.set(best.0, 1.0);
        }
        norm
    }
}
