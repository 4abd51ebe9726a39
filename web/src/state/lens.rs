//! How all lanes are looked at: which part of the shared axis is in view, and whether the trees are
//! shown as they are or as they stood at one moment, the same for all.

use std::rc::Rc;

use yew::Reducible;

use crate::state::span::{self, Span};
use crate::state::tree::Tree;

/// Steps of the slider of moments.
pub(crate) const STEPS: u32 = 1000;

/// By what the lanes are brought to one moment.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum By {
    /// The same number of solved nodes.
    Nodes,
    /// The same work: simplex iterations, weighted by the coefficients of the rival.
    Work,
}

/// A moment of all searches: a step of the slider, from 0 to [`STEPS`].
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) struct Moment {
    /// By what.
    pub(crate) by: By,
    /// The step.
    pub(crate) step: u32,
}

impl Moment {
    /// The nodes, or the work, at this moment, where `most` is at the last one. Steps are fine at
    /// the beginning, where trees differ, and coarse at the end.
    pub(crate) fn amount(self, most: u64) -> u64 {
        let share = f64::from(self.step.min(STEPS)) / f64::from(STEPS);
        (most as f64 * share * share * share).ceil() as u64
    }

    /// How many nodes of a tree had been solved.
    pub(crate) fn solved(self, most: u64, tree: &Tree, coefficients: u64) -> u32 {
        let amount = self.amount(most);
        match self.by {
            By::Nodes => u32::try_from(amount).unwrap_or(u32::MAX).min(tree.tally().solved),
            By::Work => tree.solved_within(amount / coefficients.max(1)),
        }
    }
}

/// The lens.
#[derive(Debug, Clone, Default, PartialEq)]
pub(crate) struct Lens {
    /// The part of the axis in view, in the unit of the objective; `None` is the whole.
    pub(crate) part: Option<Span>,
    /// `None` shows the trees as they are.
    pub(crate) moment: Option<Moment>,
    /// Nodes and work of the longest search, when they were last asked for.
    pub(crate) most: (u64, u64),
}

/// What is done with the lens. `whole` is the axis without zoom.
#[derive(Debug)]
pub(crate) enum Look {
    /// Nearer by a factor (farther below 1), with a value kept in its place.
    Zoom { whole: Span, about: f64, factor: f64 },
    /// Moved along.
    Pan { whole: Span, by: f64 },
    /// Moved so that a value is in view.
    Hold { whole: Span, value: f64 },
    /// The whole axis.
    Whole,
    /// At a moment, with nodes and work of the longest search.
    At(Option<Moment>, (u64, u64)),
    /// One step of a replay on.
    Next,
}

impl Reducible for Lens {
    type Action = Look;

    fn reduce(self: Rc<Self>, look: Look) -> Rc<Self> {
        let mut lens = (*self).clone();
        match look {
            Look::Zoom { whole, about, factor } => {
                lens.part = span::zoomed(lens.part, whole, about, factor);
            }
            Look::Pan { whole, by } => lens.part = span::moved(lens.part, whole, by),
            Look::Hold { whole, value } => lens.part = span::holding(lens.part, whole, value),
            Look::Whole => lens.part = None,
            Look::At(moment, most) => (lens.moment, lens.most) = (moment, most),
            Look::Next => {
                if let Some(moment) = &mut lens.moment {
                    moment.step = (moment.step + 5).min(STEPS);
                }
            }
        }
        lens.into()
    }
}

impl Lens {
    /// How many nodes of a tree are shown as solved; `None` shows it as it is.
    pub(crate) fn solved(&self, tree: &Tree, coefficients: u64) -> Option<u32> {
        let moment = self.moment?;
        let most = if moment.by == By::Nodes { self.most.0 } else { self.most.1 };
        Some(moment.solved(most, tree, coefficients))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::state::tree::tests::small;

    #[test]
    fn a_moment_is_fine_at_the_beginning_and_whole_at_the_end() {
        let at = |step| Moment { by: By::Nodes, step }.amount(5000);
        assert_eq!((at(0), at(1), at(100), at(500), at(STEPS)), (0, 1, 5, 625, 5000));
        assert_eq!(at(9 * STEPS), 5000);
    }

    #[test]
    fn a_lane_that_ended_before_the_moment_is_shown_whole() {
        let tree = small();
        let end = Moment { by: By::Nodes, step: STEPS };
        assert_eq!(end.solved(5000, &tree, 7), 2);
        assert_eq!(Moment { by: By::Work, step: STEPS }.solved(5000, &tree, 7), 2);
        assert_eq!(Lens::default().solved(&tree, 7), None);
    }

    #[test]
    fn a_replay_ends_at_the_end() {
        let moment = Some(Moment { by: By::Work, step: STEPS - 3 });
        let lens = Rc::new(Lens::default()).reduce(Look::At(moment, (10, 90)));
        let lens = lens.reduce(Look::Next).reduce(Look::Next);
        assert_eq!(lens.moment.map(|moment| moment.step), Some(STEPS));
    }
}
