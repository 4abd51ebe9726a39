//! Good round trips: nearest neighbour from many starts, each mended by 2-opt and or-opt.
//!
//! Nearest neighbour: Rosenkrantz, Stearns, Lewis 1977 (SIAM Journal on Computing 6). 2-opt:
//! Croes 1958 (Operations Research 6); on costs that differ by direction turning a piece round
//! changes the cost of its inside, which prefix sums give in O(1). Or-opt: Or 1976 (thesis,
//! Northwestern University): a piece of one to three stops moves elsewhere, in its direction.

use std::rc::Rc;

use crate::round_trip::RoundTrip;

/// The name that incumbents carry.
pub(crate) const NAME: &str = "nearest neighbour with 2-opt and or-opt";

/// The longest piece that or-opt moves.
const PIECE: usize = 3;

/// About how many arcs all starts together may look at while building and mending once.
const STARTS_WORK: usize = 1_000_000;

/// A change must save more than this, relative to 1 + |cost of the trip|.
const SAVING: f64 = 1e-9;

/// What is done next.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Stage {
    Build,
    TwoOpt,
    OrOpt,
}

/// The search for a good round trip, in slices.
#[derive(Debug)]
pub(crate) struct TourSearch {
    trip: Rc<RoundTrip>,
    cost: Vec<f64>,
    starts: Vec<usize>,
    next: usize,
    stage: Stage,
    tour: Vec<usize>,
    length: f64,
    best: Option<(f64, Vec<usize>)>,
    ticks: u64,
}

impl TourSearch {
    /// From every stop, or, where that were too much, from a number of them spread evenly
    /// from one that `seed` gives.
    pub(crate) fn new(trip: &Rc<RoundTrip>, seed: u64) -> Self {
        let n = trip.stops.len();
        let count = (STARTS_WORK / (n * n)).clamp(1, n);
        let first = if count == n { 0 } else { usize::try_from(seed % n as u64).unwrap_or(0) };
        let size = trip.cost.iter().filter(|c| c.is_finite()).fold(1.0, |sum, c| sum + c.abs());
        Self {
            cost: trip.cost.iter().map(|&c| if c.is_finite() { c } else { size }).collect(),
            trip: Rc::clone(trip),
            starts: (0..count).map(|k| (first + k * n / count) % n).collect(),
            next: 0,
            stage: Stage::Build,
            tour: Vec::new(),
            length: 0.0,
            best: None,
            ticks: 0,
        }
    }

    /// Works on for about `ticks`; true when it is done.
    pub(crate) fn advance(&mut self, ticks: u64) -> bool {
        let stop = self.ticks.saturating_add(ticks);
        while self.next < self.starts.len() && self.ticks < stop {
            self.step();
        }
        self.next == self.starts.len()
    }

    /// The best round trip found, as the columns of its arcs; `None` when each found one
    /// uses an arc that does not exist.
    pub(crate) fn columns(&self) -> Option<Vec<model::ColumnId>> {
        let (_, tour) = self.best.as_ref()?;
        let n = tour.len();
        (0..n).map(|k| self.trip.column[tour[k] * n + tour[(k + 1) % n]]).collect()
    }

    /// Arcs looked at so far.
    pub(crate) fn ticks(&self) -> u64 {
        self.ticks
    }

    /// One build or one sweep.
    fn step(&mut self) {
        let n = self.trip.stops.len();
        self.ticks += (n * n) as u64;
        match self.stage {
            Stage::Build => {
                self.build(self.starts[self.next]);
                self.stage = Stage::TwoOpt;
            }
            Stage::TwoOpt => {
                if !self.two_opt() {
                    self.stage = Stage::OrOpt;
                }
            }
            Stage::OrOpt => {
                if self.or_opt() {
                    self.stage = Stage::TwoOpt;
                } else {
                    self.close();
                }
            }
        }
    }

    /// Keeps the trip if it is the best and goes to the next start.
    fn close(&mut self) {
        if self.best.as_ref().is_none_or(|(best, _)| self.length < *best) {
            self.best = Some((self.length, self.tour.clone()));
        }
        self.next += 1;
        self.stage = Stage::Build;
    }

    fn arc(&self, tail: usize, head: usize) -> f64 {
        self.cost[tail * self.trip.stops.len() + head]
    }

    fn measure(&self, tour: &[usize]) -> f64 {
        let n = tour.len();
        (0..n).fold(0.0, |sum, k| sum + self.arc(tour[k], tour[(k + 1) % n]))
    }

    fn build(&mut self, start: usize) {
        let n = self.trip.stops.len();
        let mut free = vec![true; n];
        let mut here = start;
        self.tour = vec![start];
        free[start] = false;
        while self.tour.len() < n {
            let mut nearest: Option<usize> = None;
            for stop in (0..n).filter(|&stop| free[stop]) {
                if nearest.is_none_or(|best| self.arc(here, stop) < self.arc(here, best)) {
                    nearest = Some(stop);
                }
            }
            let Some(stop) = nearest else { break };
            free[stop] = false;
            self.tour.push(stop);
            here = stop;
        }
        self.length = self.measure(&self.tour);
    }

    /// One sweep: for each place the best piece that starts after it is turned round.
    fn two_opt(&mut self) -> bool {
        let n = self.tour.len();
        let mut better = false;
        let (mut along, mut back) = self.prefixes();
        for i in 0..n.saturating_sub(2) {
            let t = &self.tour;
            let mut best = (self.least_saving(), 0);
            for j in i + 2..n {
                let after = t[(j + 1) % n];
                let old =
                    self.arc(t[i], t[i + 1]) + self.arc(t[j], after) + along[j] - along[i + 1];
                let new = self.arc(t[i], t[j]) + self.arc(t[i + 1], after) + back[j] - back[i + 1];
                if new - old < best.0 {
                    best = (new - old, j);
                }
            }
            if best.1 > 0 {
                let mut tour = self.tour.clone();
                tour[i + 1..=best.1].reverse();
                better |= self.take(tour);
                (along, back) = self.prefixes();
            }
        }
        better
    }

    /// One sweep: for each piece the best other place.
    fn or_opt(&mut self) -> bool {
        let n = self.tour.len();
        let mut better = false;
        for piece in 1..=PIECE {
            if n < piece + 2 {
                break;
            }
            for start in 0..n {
                if let Some(tour) = self.moved(start, piece) {
                    better |= self.take(tour);
                }
            }
        }
        better
    }

    /// The trip with the piece of `size` stops at `start` put in its best place, if that saves.
    fn moved(&self, start: usize, size: usize) -> Option<Vec<usize>> {
        let n = self.tour.len();
        let at = |k: usize| self.tour[(start + k) % n];
        let (first, last) = (at(0), at(size - 1));
        let (before, after) = (at(n - 1), at(size));
        let saved = self.arc(before, first) + self.arc(last, after) - self.arc(before, after);
        let mut best: (f64, Option<usize>) = (self.least_saving(), None);
        for k in size..n - 1 {
            let (left, right) = (at(k), at(k + 1));
            let spent = self.arc(left, first) + self.arc(last, right) - self.arc(left, right);
            if spent - saved < best.0 {
                best = (spent - saved, Some(k));
            }
        }
        let place = best.1?;
        Some((size..=place).chain(0..size).chain(place + 1..n).map(at).collect())
    }

    /// Takes over a trip that is shorter; false when it is not.
    fn take(&mut self, tour: Vec<usize>) -> bool {
        let length = self.measure(&tour);
        let shorter = length - self.length < 0.0;
        if shorter {
            self.tour = tour;
            self.length = length;
        }
        shorter
    }

    /// A change must be under this.
    fn least_saving(&self) -> f64 {
        -SAVING * (1.0 + self.length.abs())
    }

    /// Cost along the trip up to each place, and of the same way back.
    fn prefixes(&self) -> (Vec<f64>, Vec<f64>) {
        let n = self.tour.len();
        let (mut along, mut back) = (vec![0.0; n], vec![0.0; n]);
        for k in 1..n {
            along[k] = along[k - 1] + self.arc(self.tour[k - 1], self.tour[k]);
            back[k] = back[k - 1] + self.arc(self.tour[k], self.tour[k - 1]);
        }
        (along, back)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::tests::support::{Form, Random, best_trip, round_trip};
    use model::{Model, Sense};

    fn search(costs: &[Vec<i64>], slice: u64) -> (TourSearch, Rc<Model>) {
        let model = round_trip(costs, Form::Subtours, Sense::Minimise);
        let trip = Rc::new(RoundTrip::find(&model).unwrap());
        let mut search = TourSearch::new(&trip, 0);
        while !search.advance(slice) {}
        (search, model)
    }

    #[test]
    fn small_trips_are_near_the_best() {
        let mut met = 0;
        for seed in 0..20 {
            let costs = Random(seed).costs(8, 50);
            let (search, _) = search(&costs, u64::MAX);
            let (length, tour) = search.best.clone().unwrap();
            let best = best_trip(&costs) as f64;
            let mut sorted = tour.clone();
            sorted.sort_unstable();
            assert_eq!(sorted, (0..8).collect::<Vec<_>>());
            assert!((search.measure(&tour) - length).abs() < 1e-9 && length >= best);
            assert!(length <= 1.25 * best, "{length} against {best}");
            met += u32::from(length == best);
        }
        assert!(met >= 15, "{met}");
    }

    #[test]
    fn slices_do_not_change_the_trip() {
        let costs = Random(9).distances(12);
        let whole = search(&costs, u64::MAX).0;
        let sliced = search(&costs, 1).0;
        assert_eq!((whole.columns(), whole.ticks()), (sliced.columns(), sliced.ticks()));
    }

    #[test]
    fn turning_a_piece_round_counts_its_inside() {
        // 0 → 1 → 2 → 3 → 0 costs 4 that way and 40 the other: no piece may be turned.
        let n = 4;
        let way = |i: usize, j: usize| if (i + 1) % n == j { 1 } else { 10 };
        let costs: Vec<Vec<i64>> =
            (0..n).map(|i| (0..n).map(|j| if i == j { 0 } else { way(i, j) }).collect()).collect();
        let (search, _) = search(&costs, u64::MAX);
        assert_eq!(search.best.as_ref().unwrap().0, 4.0);
    }

    #[test]
    fn arcs_that_do_not_exist_are_not_used() {
        let costs = Random(4).costs(6, 9);
        let model = round_trip(&costs, Form::Subtours, Sense::Minimise);
        let mut trip = RoundTrip::find(&model).unwrap();
        for (place, column) in trip.column.iter_mut().enumerate() {
            let (tail, head) = (place / 6, place % 6);
            if (tail + 1) % 6 != head {
                *column = None;
                trip.cost[place] = f64::INFINITY;
            }
        }
        let mut search = TourSearch::new(&Rc::new(trip.clone()), 0);
        assert!(search.advance(u64::MAX));
        assert_eq!(search.columns().unwrap().len(), 6);
        trip.column[5 * 6] = None;
        trip.cost[5 * 6] = f64::INFINITY;
        let mut search = TourSearch::new(&Rc::new(trip), 0);
        assert!(search.advance(u64::MAX));
        assert_eq!(search.columns(), None);
    }
}
