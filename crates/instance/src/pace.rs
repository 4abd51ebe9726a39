//! Long work in slices. A function that works long is `async` and counts what it touches with
//! [`Pace::spend`]; where a slice is spent, it lets go there and goes on at the next one. Nothing
//! waits for anything else, so what comes out is the same for every slice size.

use std::cell::Cell;
use std::fmt;
use std::future::{Future, poll_fn};
use std::pin::Pin;
use std::rc::Rc;
use std::task::{Context, Poll, Waker};

/// What is left of a slice, in ticks: a tick is a cell or a character of the text looked at, or a
/// few simple steps.
#[derive(Debug, Clone, Default)]
pub struct Pace {
    left: Rc<Cell<u64>>,
    spent: Rc<Cell<u64>>,
}

impl Pace {
    /// Counts `ticks`; where that ends the slice, lets go until the next one.
    pub async fn spend(&self, ticks: usize) {
        let left = self.left.get().saturating_sub(ticks as u64);
        self.left.set(left);
        self.spent.set(self.spent.get().saturating_add(ticks as u64));
        let mut asked = left > 0;
        poll_fn(
            |_| if std::mem::replace(&mut asked, true) { Poll::Ready(()) } else { Poll::Pending },
        )
        .await;
    }
}

/// Work that goes on in slices.
pub struct Slices<'w, T> {
    work: Option<Pin<Box<dyn Future<Output = T> + 'w>>>,
    pace: Pace,
}

impl<T> fmt::Debug for Slices<'_, T> {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.debug_struct("Slices").field("over", &self.work.is_none()).finish_non_exhaustive()
    }
}

impl<'w, T> Slices<'w, T> {
    /// Work that has not begun; it counts what it touches with the pace that it is given.
    pub fn new<W: Future<Output = T> + 'w>(work: impl FnOnce(Pace) -> W) -> Self {
        let pace = Pace::default();
        Self { work: Some(Box::pin(work(pace.clone()))), pace }
    }

    /// Goes on for about so many ticks; what came out, once, where that ends the work.
    pub fn advance(&mut self, ticks: u64) -> Option<T> {
        self.pace.left.set(ticks);
        self.pace.spent.set(0);
        let mut nobody = Context::from_waker(Waker::noop());
        match self.work.as_mut()?.as_mut().poll(&mut nobody) {
            Poll::Ready(found) => {
                self.work = None;
                Some(found)
            }
            Poll::Pending => None,
        }
    }

    /// The ticks that the last slice took: more than it was given where a step could not be cut.
    #[must_use]
    pub fn spent(&self) -> u64 {
        self.pace.spent.get()
    }

    /// All of the work at once.
    pub fn whole<W: Future<Output = T> + 'w>(work: impl FnOnce(Pace) -> W) -> T {
        let mut slices = Self::new(work);
        loop {
            if let Some(found) = slices.advance(u64::MAX) {
                return found;
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    async fn counted(pace: Pace, to: usize) -> usize {
        let mut sum = 0;
        for i in 0..to {
            pace.spend(3).await;
            sum += i;
        }
        sum
    }

    #[test]
    fn slices_of_any_size_give_the_same() {
        assert_eq!(Slices::whole(|pace| counted(pace, 10)), 45);
        for (ticks, slices) in [(0, 11), (1, 11), (3, 11), (4, 6), (7, 4), (30, 2), (31, 1)] {
            let mut work = Slices::new(|pace| counted(pace, 10));
            let mut calls = 1;
            let found = loop {
                match work.advance(ticks) {
                    Some(found) => break found,
                    None => calls += 1,
                }
            };
            assert_eq!((found, calls), (45, slices), "{ticks}");
            assert_eq!(work.advance(ticks), None);
        }
    }
}
