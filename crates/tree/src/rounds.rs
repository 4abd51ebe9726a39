//! One round of separation: every family over subsets, and every written family on demand.
//!
//! A round looks at one point and finds rows that it violates: the families over subsets by
//! their separators, one after the other, then the written families that are on demand.

use std::rc::Rc;

use model::{FamilyId, FamilyState, Model, SubsetFamilyId};
use separate::{Progress, RowSeparator, Separator};

use crate::relaxation::{Addition, RowOrigin};

/// The separators of a model and the round in hand.
#[derive(Debug)]
pub(crate) struct Rounds {
    model: Rc<Model>,
    /// Families over subsets whose shape is not recognised yet, the next one last.
    unrecognised: Vec<SubsetFamilyId>,
    separators: Vec<Separator>,
    rows: Vec<RowSeparator>,
    x: Vec<f64>,
    /// The separator at work: those of families over subsets first.
    next: usize,
    running: bool,
    found: Vec<Addition>,
    /// Rounds of single separators that have ended, each a tick of its own.
    ended: u64,
}

impl Rounds {
    /// Rounds without the families over subsets, which [`Self::recognise_next`] takes in.
    pub(crate) fn new(model: &Rc<Model>) -> Self {
        let over_subsets = (0..model.subset_families().len()).map(SubsetFamilyId::from_index);
        let written = model.families().iter().enumerate();
        let on_demand =
            written.filter(|(_, f)| f.state == FamilyState::OnDemand && !f.rows.is_empty());
        let row_separator = |(index, _)| RowSeparator::new(model, FamilyId::from_index(index));
        Self {
            unrecognised: over_subsets.rev().collect(),
            separators: Vec::new(),
            rows: on_demand.map(row_separator).collect(),
            model: Rc::clone(model),
            x: Vec::new(),
            next: 0,
            running: false,
            found: Vec::new(),
            ended: 0,
        }
    }

    /// Rounds with every family, at once.
    pub(crate) fn whole(model: &Rc<Model>) -> Self {
        let mut rounds = Self::new(model);
        while rounds.recognise_next() {}
        rounds
    }

    /// Recognises the next family over subsets; whether there was one.
    pub(crate) fn recognise_next(&mut self) -> bool {
        let next = self.unrecognised.pop();
        self.separators.extend(next.map(|id| Separator::new(&self.model, id)));
        next.is_some()
    }

    /// Whether there is nothing to separate.
    pub(crate) fn is_empty(&self) -> bool {
        self.separators.is_empty() && self.rows.is_empty()
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
        self.found.clear();
    }

    /// Works on for about `ticks`; true when the round is done.
    pub(crate) fn advance(&mut self, ticks: u64) -> bool {
        let stop = self.ticks().saturating_add(ticks);
        let all = self.separators.len() + self.rows.len();
        while self.next < all {
            let now = self.ticks();
            if now >= stop {
                return false;
            }
            let done = if self.next < self.separators.len() {
                self.members(stop - now)
            } else {
                self.written(stop - now)
            };
            self.running = !done;
            self.next += usize::from(done);
            self.ended += u64::from(done);
        }
        true
    }

    /// Goes on with a family over subsets; true when it is done.
    fn members(&mut self, ticks: u64) -> bool {
        let separator = &mut self.separators[self.next];
        if !self.running {
            separator.start(&self.x);
        }
        if separator.advance(ticks) == Progress::Working {
            return false;
        }
        let violated = separator.take().into_iter();
        self.found.extend(violated.map(|v| Addition {
            origin: RowOrigin::Member { family: v.family, subset: v.subset },
            row: v.row,
        }));
        true
    }

    /// Goes on with a written family; true when it is done.
    fn written(&mut self, ticks: u64) -> bool {
        let separator = &mut self.rows[self.next - self.separators.len()];
        if !self.running {
            separator.start(&self.x);
        }
        if separator.advance(&self.model, ticks) == Progress::Working {
            return false;
        }
        let violated = separator.take().into_iter();
        let model = &self.model;
        self.found.extend(
            violated.map(|v| Addition { origin: RowOrigin::Written(v.row), row: model.row(v.row) }),
        );
        true
    }

    /// What the round found.
    pub(crate) fn take(&mut self) -> Vec<Addition> {
        std::mem::take(&mut self.found)
    }

    /// Non-zeros touched so far.
    pub(crate) fn ticks(&self) -> u64 {
        let members = self.separators.iter().map(Separator::ticks);
        let rows = self.rows.iter().map(RowSeparator::ticks);
        self.ended + members.chain(rows).sum::<u64>()
    }
}
