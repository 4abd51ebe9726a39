//! A proof in exact arithmetic as a job: from a basis, with the floating-point kernel at hand for
//! residual problems.

use lp::{Basis, Limits, Outcome, Problem, Progress as LpProgress, Simplex};
use proof::{Bounds, Budget, Certifier, ExactRows, Progress, Residual, Standing, Standings, Wish};

/// A proof under way.
#[derive(Debug)]
pub(crate) struct Proving {
    pub(crate) certifier: Certifier,
    /// The last basis of the kernel.
    basis: Basis,
    kernel: Option<Box<Simplex>>,
    /// Work of kernels that are done.
    ticks: u64,
}

impl Proving {
    pub(crate) fn new(bounds: Vec<Bounds>, basis: Basis, wish: Wish, budget: Budget) -> Self {
        let certifier = Certifier::new(bounds, standings(&basis), wish, budget);
        Self { certifier, basis, kernel: None, ticks: 0 }
    }

    /// Works on for about `ticks`; true when it is done. `problem` makes a residual problem.
    pub(crate) fn advance(
        &mut self,
        rows: &ExactRows,
        problem: impl Fn(&Residual) -> Option<Problem>,
        ticks: u64,
    ) -> bool {
        if let Some(kernel) = &mut self.kernel {
            if kernel.advance(ticks) == LpProgress::Finished {
                self.answer();
            }
            return false;
        }
        match self.certifier.advance(rows, ticks) {
            Progress::Working => false,
            Progress::Done => true,
            Progress::Asks => {
                let Some(problem) = self.certifier.residual().and_then(problem) else {
                    return true;
                };
                let mut kernel = Simplex::new(problem);
                kernel.load_basis(&self.basis);
                kernel.start(Limits::default());
                self.kernel = Some(Box::new(kernel));
                false
            }
        }
    }

    fn answer(&mut self) {
        let Some(kernel) = self.kernel.take() else { return };
        self.ticks += kernel.stats().ticks;
        let optimal = matches!(kernel.outcome(), Some(Outcome::Optimal(_)));
        self.basis = kernel.basis();
        self.certifier.answer(optimal.then(|| standings(&self.basis)));
    }

    /// Non-zeros touched so far.
    pub(crate) fn ticks(&self) -> u64 {
        let running = self.kernel.as_ref().map_or(0, |kernel| kernel.stats().ticks);
        self.certifier.ticks() + self.ticks + running
    }
}

/// A basis of the kernel as the proof reads it. `O(columns + rows)`.
#[must_use]
pub fn standings(basis: &Basis) -> Standings {
    let one = |basic: bool, upper: bool| match (basic, upper) {
        (true, _) => Standing::Basic,
        (false, true) => Standing::Upper,
        (false, false) => Standing::Lower,
    };
    let column = |j| one(basis.is_basic_column(j), basis.is_upper_column(j));
    let row = |i| one(basis.is_basic_row(i), basis.is_upper_row(i));
    Standings {
        columns: (0..basis.column_count()).map(column).collect(),
        rows: (0..basis.row_count()).map(row).collect(),
    }
}
