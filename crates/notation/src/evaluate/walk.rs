//! Walking through index tuples step by step, depth first, resumable anywhere.

use std::rc::Rc;

use super::{Element, Environment, Evaluated, Evaluator, Guard, Set, fail};
use crate::diagnostic::subsets;
use crate::place::Span;
use crate::plan::{Node, Pattern, Step};

/// How a call of [`Walk::next`] ended.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Found {
    /// The environment holds the next tuple, which counts where the guard holds.
    Tuple(Guard),
    /// The budget is used up; call again.
    Paused,
    /// There are no more.
    Done,
}

#[derive(Debug)]
struct Frame {
    /// The set that is walked; none for a condition.
    set: Option<Rc<Set>>,
    /// The members to visit, when not all.
    chosen: Option<Rc<Vec<u32>>>,
    next: usize,
    /// For a set made from the quantified subset: whether each member belongs to it when it
    /// is in the subset, or when it is not.
    inside: Option<Vec<bool>>,
    /// The guard of the steps before and of the member at hand.
    before: Guard,
    after: Guard,
}

/// Where a walk stands.
#[derive(Debug, Default)]
pub(crate) struct Walk {
    frames: Vec<Frame>,
    started: bool,
    done: bool,
}

impl Walk {
    /// Goes to the next tuple. Each member that is looked at takes one from `budget`.
    pub(crate) fn next(
        &mut self,
        steps: &[Step],
        evaluator: &Evaluator,
        env: &mut Environment,
        budget: &mut u64,
    ) -> Evaluated<Found> {
        if self.done {
            return Ok(Found::Done);
        }
        let mut deeper = !self.started;
        self.started = true;
        loop {
            if deeper {
                if self.frames.len() == steps.len() {
                    return Ok(Found::Tuple(self.frames.last().map_or(Guard::ALWAYS, |f| f.after)));
                }
                let frame = self.open(&steps[self.frames.len()], evaluator, env)?;
                self.frames.push(frame);
            }
            if *budget == 0 {
                self.started = true;
                return Ok(Found::Paused);
            }
            *budget -= 1;
            evaluator.spend(1)?;
            let Some(depth) = self.frames.len().checked_sub(1) else {
                self.done = true;
                return Ok(Found::Done);
            };
            deeper = self.advance(&steps[depth], evaluator, env)?;
            if !deeper {
                continue;
            }
        }
    }

    fn open(&self, step: &Step, evaluator: &Evaluator, env: &mut Environment) -> Evaluated<Frame> {
        let before = self.frames.last().map_or(Guard::ALWAYS, |f| f.after);
        let mut frame =
            Frame { set: None, chosen: None, next: 0, inside: None, before, after: before };
        let Step::Over { pattern, set, .. } = step else { return Ok(frame) };
        let set = if evaluator.depends_on_subset(set) {
            let members = evaluator.members_by_subset(set, env)?;
            frame.inside = Some(members.iter().map(|(_, inside)| *inside).collect());
            Rc::new(Set::new(1, members.into_iter().map(|(element, _)| vec![element])))
        } else {
            evaluator.set(set, env)?
        };
        let (mut mask, mut key) = (0_u32, Vec::new());
        for (place, one) in pattern.iter().enumerate() {
            if let Pattern::Match(node) = one {
                mask |= 1 << place;
                key.push(evaluator.element(node, env)?);
            }
        }
        if mask != 0 {
            frame.chosen = Some(set.slice(mask, &key).unwrap_or_default());
        }
        frame.set = Some(set);
        Ok(frame)
    }

    /// Moves the last frame on; whether it stands on something. One that has nothing more is
    /// taken off.
    fn advance(
        &mut self,
        step: &Step,
        evaluator: &Evaluator,
        env: &mut Environment,
    ) -> Evaluated<bool> {
        let Some(frame) = self.frames.last_mut() else { return Ok(false) };
        let stands = match step {
            Step::When(condition, span) => {
                frame.next += 1;
                frame.next == 1 && frame.meets(condition, *span, evaluator, env)?
            }
            Step::Over { pattern, span, .. } => {
                let length = match (&frame.chosen, &frame.set) {
                    (Some(chosen), _) => chosen.len(),
                    (None, Some(set)) => set.len(),
                    (None, None) => 0,
                };
                if frame.next >= length {
                    self.frames.pop();
                    return Ok(false);
                }
                let at =
                    frame.chosen.as_ref().map_or(frame.next, |chosen| chosen[frame.next] as usize);
                frame.next += 1;
                return frame.enter(at, pattern, *span, env);
            }
        };
        if !stands {
            self.frames.pop();
        }
        Ok(stands)
    }
}

impl Frame {
    fn meets(
        &mut self,
        condition: &Node,
        span: Span,
        evaluator: &Evaluator,
        env: &mut Environment,
    ) -> Evaluated<bool> {
        let truth = evaluator.truth(condition, env).map_err(|d| placed(d, span))?;
        match self.before.and(truth) {
            Some(after) => {
                self.after = after;
                Ok(after.value() != Some(false))
            }
            None => fail(subsets::nonlinear(span)),
        }
    }

    /// Binds the member number `at`; whether it fits.
    fn enter(
        &mut self,
        at: usize,
        pattern: &[Pattern],
        span: Span,
        env: &mut Environment,
    ) -> Evaluated<bool> {
        let Some(set) = &self.set else { return Ok(false) };
        let member = set.get(at);
        for (one, &element) in pattern.iter().zip(member) {
            match one {
                Pattern::Bind(slot) => env[*slot] = element,
                Pattern::Same(slot) if env[*slot] != element => return Ok(false),
                _ => {}
            }
        }
        self.after = self.before;
        if let Some(inside) = &self.inside {
            let Some(after) = self.before.and(Guard::member(member[0], inside[at])) else {
                return fail(subsets::nonlinear(span));
            };
            self.after = after;
            return Ok(after.value() != Some(false));
        }
        Ok(true)
    }
}

/// Puts a place on a diagnostic that has none.
pub(crate) fn placed(
    mut diagnostic: Box<crate::diagnostic::Diagnostic>,
    span: Span,
) -> Box<crate::diagnostic::Diagnostic> {
    if diagnostic.span == (0..0) {
        diagnostic.span = span.range();
    }
    diagnostic
}

impl Evaluator {
    /// Visits every tuple of the steps.
    pub(crate) fn each(
        &self,
        steps: &[Step],
        env: &mut Environment,
        mut visit: impl FnMut(&Self, &mut Environment, Guard) -> Evaluated<()>,
    ) -> Evaluated<()> {
        let mut walk = Walk::default();
        let mut budget = u64::MAX;
        while let Found::Tuple(guard) = walk.next(steps, self, env, &mut budget)? {
            visit(self, env, guard)?;
        }
        Ok(())
    }

    /// The elements in `slots`.
    pub(crate) fn bound(slots: &[usize], env: &Environment) -> Vec<Element> {
        slots.iter().map(|&slot| env[slot]).collect()
    }
}
