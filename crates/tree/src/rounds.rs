//! One round of separation: every family over subsets, and every written family on demand.
//!
//! A round looks at one point and finds rows that it violates: the families over subsets by
//! their separators, one after the other, then the written rows that are not in the relaxation.

use std::rc::Rc;

use model::{FamilyState, Model, RowId, SubsetFamilyId};
use separate::{Progress, Separator};

use crate::relaxation::{Addition, Relaxation, RowOrigin};

/// A row counts as violated from here on; absolute, in the units of the row.
const VIOLATION: f64 = 1e-6;

/// The separators of a model and the round in hand.
#[derive(Debug)]
pub(crate) struct Rounds {
    model: Rc<Model>,
    separators: Vec<Separator>,
    on_demand: Vec<RowId>,
    x: Vec<f64>,
    next: usize,
    running: bool,
    scanned: usize,
    found: Vec<Addition>,
    ticks: u64,
}

impl Rounds {
    pub(crate) fn new(model: &Rc<Model>) -> Self {
        let families = (0..model.subset_families().len()).map(SubsetFamilyId::from_index);
        let rows = (0..model.row_count()).map(RowId::from_index);
        let state = |row: RowId| model.families()[model.row_family(row).index()].state;
        Self {
            separators: families.map(|id| Separator::new(model, id)).collect(),
            on_demand: rows.filter(|&row| state(row) == FamilyState::OnDemand).collect(),
            model: Rc::clone(model),
            x: Vec::new(),
            next: 0,
            running: false,
            scanned: 0,
            found: Vec::new(),
            ticks: 0,
        }
    }

    /// Whether there is nothing to separate.
    pub(crate) fn is_empty(&self) -> bool {
        self.separators.is_empty() && self.on_demand.is_empty()
    }

    /// The separators in the order of the model's families over subsets.
    pub(crate) fn separators(&self) -> &[Separator] {
        &self.separators
    }

    /// Begins a round at `x`.
    pub(crate) fn start(&mut self, x: &[f64]) {
        self.x.clear();
        self.x.extend_from_slice(x);
        self.next = 0;
        self.running = false;
        self.scanned = 0;
        self.found.clear();
    }

    /// Works on for about `ticks`; true when the round is done.
    pub(crate) fn advance(&mut self, ticks: u64, relaxation: &Relaxation) -> bool {
        let stop = self.ticks.saturating_add(ticks);
        while self.ticks < stop {
            if self.next < self.separators.len() {
                self.separate(stop - self.ticks);
            } else if self.scanned < self.on_demand.len() {
                self.scan(relaxation);
            } else {
                return true;
            }
        }
        self.next == self.separators.len() && self.scanned == self.on_demand.len()
    }

    fn separate(&mut self, ticks: u64) {
        let separator = &mut self.separators[self.next];
        if !self.running {
            separator.start(&self.x);
            self.running = true;
        }
        let before = separator.ticks();
        let done = separator.advance(ticks) == Progress::Finished;
        self.ticks += separator.ticks() - before;
        if done {
            let violated = separator.take().into_iter();
            self.found.extend(violated.map(|v| Addition {
                origin: RowOrigin::Member { family: v.family, subset: v.subset },
                row: v.row,
            }));
            self.next += 1;
            self.ticks += 1;
            self.running = false;
        }
    }

    /// Looks at one written row.
    fn scan(&mut self, relaxation: &Relaxation) {
        let row = self.on_demand[self.scanned];
        self.scanned += 1;
        self.ticks += 1;
        if relaxation.holds(row) {
            return;
        }
        self.ticks += self.model.row_entries(row).len() as u64;
        if outside(&self.model, row, &self.x) > VIOLATION {
            self.found.push(Addition { origin: RowOrigin::Written(row), row: self.model.row(row) });
        }
    }

    /// What the round found.
    pub(crate) fn take(&mut self) -> Vec<Addition> {
        std::mem::take(&mut self.found)
    }

    /// Non-zeros touched so far.
    pub(crate) fn ticks(&self) -> u64 {
        self.ticks
    }
}

/// By how much a point is outside the sides of a written row; at most 0 when it is not.
pub(crate) fn outside(model: &Model, row: RowId, x: &[f64]) -> f64 {
    let numbers = model.numbers();
    let terms = model.row_entries(row).iter();
    let activity = terms.fold(0.0, |sum, &(c, a)| sum + numbers.float(a) * x[c.index()]);
    let (lower, upper) = model.row_sides(row);
    let under = lower.map_or(f64::NEG_INFINITY, |n| numbers.float(n) - activity);
    let over = upper.map_or(f64::NEG_INFINITY, |n| activity - numbers.float(n));
    if under > over { under } else { over }
}
