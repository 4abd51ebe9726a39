//! The pool of general cuts. Every cut that was ever added is in it, with what became of it: a cut of
//! the root that was slack for some rounds is purged from the relaxation and comes back when a point
//! violates it again. Below the root rows stay, because nodes keep bases over them.
//!
//! Everything goes by number, in the order in which cuts were added, so that nothing depends on how
//! the work was cut into slices.

use model::{Row, nearest_f64};
use separate::general::{Class, GeneralCut};

use crate::relaxation::{Relaxation, RowOrigin};

/// Rounds that a cut of the root may be slack for before it is purged.
const MOST_SLACK: u32 = 3;
/// Rounds that a purged cut is looked at without being violated.
const MOST_IDLE: u32 = 30;
/// How far a row may be from its side, relative to it, and count as tight.
const TIGHT: f64 = 1e-6;

/// A cut in the pool.
#[derive(Debug)]
struct Pooled {
    cut: GeneralCut,
    /// Whether it is a row of the relaxation.
    inside: bool,
    /// Rounds since it was tight, or since it was purged.
    age: u32,
}

/// All general cuts by number.
#[derive(Debug, Default)]
pub(crate) struct Pool {
    cuts: Vec<Pooled>,
}

impl Pool {
    /// Ages the cuts at a point and says which rows of the relaxation are to go: cuts that were
    /// slack for too long, or, at the `end`, all that are slack. Rows up to `first` stay.
    pub(crate) fn slack(
        &mut self,
        relaxation: &Relaxation,
        x: &[f64],
        (first, end): (usize, bool),
    ) -> Vec<usize> {
        let mut gone = Vec::new();
        let basis = relaxation.simplex.basis();
        for (place, origin) in relaxation.origins().iter().enumerate().skip(first) {
            let RowOrigin::Cut(_, number) = origin else { continue };
            let Some(pooled) = self.cuts.get_mut(*number) else { continue };
            let tight = is_tight(&pooled.cut.row, x);
            pooled.age = if tight { 0 } else { pooled.age + 1 };
            let basic = u32::try_from(place).is_ok_and(|place| basis.is_basic_row(place));
            if !tight && basic && (end || pooled.age > MOST_SLACK) {
                pooled.inside = false;
                pooled.age = 0;
                gone.push(place);
            }
        }
        gone
    }

    /// The purged cuts that a point violates, with their efficacy there.
    pub(crate) fn violated(&mut self, x: &[f64]) -> Vec<GeneralCut> {
        let mut found = Vec::new();
        for pooled in self.cuts.iter_mut().filter(|p| !p.inside && p.age <= MOST_IDLE) {
            let efficacy = pooled.cut.efficacy_at(x);
            pooled.age += 1;
            if efficacy > TIGHT {
                found.push(GeneralCut { efficacy, ..pooled.cut.clone() });
            }
        }
        found
    }

    /// The number of a cut with the same row and whether it is in the relaxation.
    pub(crate) fn find(&self, row: &Row) -> Option<(usize, bool)> {
        let place = self.cuts.iter().position(|pooled| pooled.cut.row == *row)?;
        Some((place, self.cuts[place].inside))
    }

    /// Notes that a cut of the pool is in the relaxation again, or a new one under the next number.
    pub(crate) fn enter(&mut self, number: usize, cut: GeneralCut) {
        match self.cuts.get_mut(number) {
            Some(pooled) => (pooled.inside, pooled.age) = (true, 0),
            None => self.cuts.push(Pooled { cut, inside: true, age: 0 }),
        }
    }

    /// How many cuts there are.
    pub(crate) fn len(&self) -> usize {
        self.cuts.len()
    }

    /// A cut by its number.
    pub(crate) fn cut(&self, number: usize) -> Option<&GeneralCut> {
        self.cuts.get(number).map(|pooled| &pooled.cut)
    }

    /// Whether a cut is in the relaxation.
    pub(crate) fn is_inside(&self, number: usize) -> bool {
        self.cuts.get(number).is_some_and(|pooled| pooled.inside)
    }

    /// How many cuts of each class are in the relaxation.
    pub(crate) fn inside(&self) -> [u32; Class::ALL.len()] {
        let mut counts = [0; Class::ALL.len()];
        for pooled in self.cuts.iter().filter(|pooled| pooled.inside) {
            counts[pooled.cut.class.index()] += 1;
        }
        counts
    }
}

fn is_tight(row: &Row, x: &[f64]) -> bool {
    let side = row.upper.as_ref().map_or(f64::INFINITY, nearest_f64);
    side - row.activity(x) <= TIGHT * (1.0 + side.abs())
}
