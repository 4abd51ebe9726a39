//! A basis with its factors, set aside and taken up again: trying many changes from one basis
//! (strong branching) factorises it once.

use crate::basis::Status;
use crate::lu::Factor;
use crate::simplex::Simplex;

/// A basis with its factors and steepest-edge weights. Bounds and costs are not part of it.
#[derive(Clone, Debug)]
pub struct Checkpoint {
    columns: usize,
    rows: usize,
    nonzeros: usize,
    status: Vec<Status>,
    head: Vec<u32>,
    weight: Vec<f64>,
    factor: Factor,
    factor_ticks: u64,
}

impl Simplex {
    /// Sets the current basis aside with its factors; a solve under way is dropped. Work: the
    /// nonzeros of the factors.
    pub fn checkpoint(&mut self) -> Checkpoint {
        self.machine.forget();
        let core = &mut self.core;
        core.restore_given();
        core.refactor_first();
        Checkpoint {
            columns: core.columns(),
            rows: core.rows(),
            nonzeros: core.matrix.nonzeros(),
            status: core.status.clone(),
            head: core.head.clone(),
            weight: core.weight.clone(),
            factor: core.factor.clone(),
            factor_ticks: core.factor_ticks,
        }
    }

    /// Takes a basis up again, without factorising it; what follows depends on it, the bounds and
    /// the costs alone. False, with nothing changed, when rows were added or deleted since.
    pub fn restore(&mut self, checkpoint: &Checkpoint) -> bool {
        let core = &mut self.core;
        let size = (core.columns(), core.rows(), core.matrix.nonzeros());
        if size != (checkpoint.columns, checkpoint.rows, checkpoint.nonzeros) {
            return false;
        }
        core.status.clone_from(&checkpoint.status);
        core.head.clone_from(&checkpoint.head);
        core.weight.clone_from(&checkpoint.weight);
        core.factor.clone_from(&checkpoint.factor);
        core.factor_ticks = checkpoint.factor_ticks;
        core.canonical = true;
        core.kept.forget();
        core.restore_given();
        core.settle_statuses();
        self.machine.forget();
        true
    }
}
