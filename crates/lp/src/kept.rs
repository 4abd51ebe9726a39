//! What an evaluation leaves for the next one: a node right after its parent begins with the basis,
//! the costs and mostly the nonbasic values that the parent ended with, and basic values and reduced
//! costs follow from those alone.
//!
//! What is taken over is what computing it would give, to the last bit, and counts as the same work:
//! what came before a solve shows nowhere.

use crate::state::Core;

/// What basic values and reduced costs were computed from with the canonical factors.
#[derive(Clone, Debug, Default)]
pub(crate) struct Kept {
    basic: Option<Work>,
    reduced: Option<Work>,
    /// The value of each nonbasic variable that the basic values belong to; zero for basic ones.
    point: Vec<f64>,
    /// The costs that the reduced ones belong to.
    cost: Vec<f64>,
}

/// What a computation took, in ticks.
#[derive(Clone, Copy, Debug)]
struct Work(u64);

impl Kept {
    /// A method begins, or the factors are others: nothing holds.
    pub(crate) fn forget(&mut self) {
        (self.basic, self.reduced) = (None, None);
    }
}

impl Core {
    /// As [`Core::compute_basic`], with canonical factors, where it is not known already. Work: the
    /// variables where it is.
    pub(crate) fn evaluate_basic(&mut self) {
        if let Some(Work(ticks)) = self.kept.basic
            && (0..self.variables()).all(|j| self.kept.point[j] == self.nonbasic_value(j))
        {
            debug_assert!(self.is_same_when_computed(|core| &core.basic, Self::compute_basic));
            self.ticks += ticks;
            self.note_violations();
            return;
        }
        let before = self.ticks;
        self.compute_basic();
        self.kept.basic = Some(Work(self.ticks - before));
        let mut point = std::mem::take(&mut self.kept.point);
        point.clear();
        point.extend((0..self.variables()).map(|j| self.nonbasic_value(j)));
        self.kept.point = point;
    }

    /// As [`Core::compute_reduced`] of the given costs, with canonical factors, where they are not
    /// known already. Work: the variables where they are.
    pub(crate) fn evaluate_reduced(&mut self) {
        if let Some(Work(ticks)) = self.kept.reduced.filter(|_| self.kept.cost == self.work_cost) {
            debug_assert!(self.is_same_when_computed(|core| &core.reduced, Self::compute_reduced));
            self.ticks += ticks;
            return;
        }
        let before = self.ticks;
        self.compute_reduced();
        self.kept.reduced = Some(Work(self.ticks - before));
        self.kept.cost.clone_from(&self.work_cost);
    }

    /// Whether computing anew gives the values that are there.
    fn is_same_when_computed(
        &self,
        values: fn(&Self) -> &Vec<f64>,
        compute: fn(&mut Self),
    ) -> bool {
        let mut other = self.clone();
        compute(&mut other);
        values(&other).iter().zip(values(self)).all(|(a, b)| a.to_bits() == b.to_bits())
    }
}
