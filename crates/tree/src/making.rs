//! A search made part by part, so that a worker hears between them: the relaxation, the separators one
//! by one, the checker, and what the settings ask for. Each part costs about one look at the model.

use std::rc::Rc;

use model::Model;

use crate::branching::Chooser;
use crate::cutting::Cutting;
use crate::propagate::Propagator;
use crate::relaxation::Relaxation;
use crate::round_trip::RoundTrip;
use crate::rounds::Rounds;
use crate::search::Search;
use crate::settings::Settings;
use crate::solution::Checker;
use crate::target::Target;

/// What is made next.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Next {
    Relaxation,
    Separator,
    Checker,
    Chooser,
    Trip,
    Cutting,
    Propagator,
    Whole,
}

/// The parts that are made.
#[derive(Debug, Default)]
pub(crate) struct Parts {
    pub(crate) target: Option<Target>,
    pub(crate) relaxation: Option<Relaxation>,
    /// Why the kernel does not take the model.
    pub(crate) trouble: String,
    pub(crate) rounds: Option<Rounds>,
    pub(crate) checker: Option<Checker>,
    pub(crate) chooser: Option<Chooser>,
    pub(crate) trip: Option<Rc<RoundTrip>>,
    pub(crate) cutting: Option<Cutting>,
    pub(crate) propagator: Option<Propagator>,
}

/// A search on its way to its beginning.
#[derive(Debug)]
pub struct Making {
    model: Rc<Model>,
    settings: Settings,
    parts: Parts,
    next: Next,
    /// What one look at the model costs.
    look: u64,
    ticks: u64,
}

impl Making {
    /// Nothing is made yet. `O(rows)`.
    #[must_use]
    pub fn new(model: Rc<Model>, settings: Settings) -> Self {
        let rows = (0..model.row_count()).map(model::RowId::from_index);
        let entries: usize = rows.map(|row| model.row_entries(row).len()).sum();
        let look = (entries + model.columns().len() + model.row_count()) as u64;
        let parts = Parts::default();
        Self { model, settings, parts, next: Next::Relaxation, look, ticks: 0 }
    }

    /// Makes parts for about `ticks`, at least one; the search once all are made.
    pub fn advance(&mut self, ticks: u64) -> Option<Search> {
        let stop = self.ticks.saturating_add(ticks);
        while self.next != Next::Whole {
            self.step();
            if self.ticks >= stop {
                return None;
            }
        }
        let (model, settings) = (Rc::clone(&self.model), self.settings.clone());
        Some(Search::of_parts(model, settings, std::mem::take(&mut self.parts)))
    }

    /// Non-zeros looked at.
    #[must_use]
    pub fn ticks(&self) -> u64 {
        self.ticks
    }

    fn step(&mut self) {
        let (model, settings, parts) = (&self.model, &self.settings, &mut self.parts);
        self.ticks += 1 + self.look;
        self.next = match self.next {
            Next::Relaxation => {
                parts.target = Some(Target::new(model, settings.node_work.lattice));
                match Relaxation::new(model) {
                    Ok(relaxation) => parts.relaxation = Some(relaxation),
                    Err(error) => parts.trouble = error.to_string(),
                }
                Next::Separator
            }
            Next::Separator => {
                let rounds = parts.rounds.get_or_insert_with(|| Rounds::new(model));
                if rounds.recognise_next() { Next::Separator } else { Next::Checker }
            }
            Next::Checker => {
                parts.checker = Some(Checker::new(model));
                Next::Chooser
            }
            Next::Chooser => {
                parts.chooser = Some(Chooser::new(model, &settings.priority));
                Next::Trip
            }
            Next::Trip => {
                let wanted = settings.heuristics.trip;
                parts.trip = wanted.then(|| RoundTrip::find(model).map(Rc::new)).flatten();
                Next::Cutting
            }
            Next::Cutting => {
                parts.cutting = (!settings.cuts.is_empty()).then(|| Cutting::new(model));
                Next::Propagator
            }
            Next::Propagator | Next::Whole => {
                parts.propagator = settings.node_work.propagation.then(|| Propagator::new(model));
                Next::Whole
            }
        };
    }
}
