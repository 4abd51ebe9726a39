//! What the derivations of general cuts rest on: each row by where it comes from, once. A round of
//! cuts speaks of rows by their places in the relaxation of that round, which change; here they have
//! numbers that stay, so that a log can say how each cut follows.

use std::collections::BTreeMap;

use separate::general::{Derivation, GeneralCut};

use crate::pool::Pool;
use crate::relaxation::RowOrigin;

/// The rows by number.
#[derive(Debug, Default)]
pub(crate) struct Sources {
    rows: Vec<RowOrigin>,
    numbers: BTreeMap<RowOrigin, usize>,
}

impl Sources {
    /// A cut whose derivation speaks of these rows, found in a round where each row came from
    /// `origin`.
    pub(crate) fn keep(
        &mut self,
        mut cut: GeneralCut,
        origin: &dyn Fn(usize) -> Option<RowOrigin>,
    ) -> GeneralCut {
        cut.derivation.renumber(&mut |row| origin(row).map_or(usize::MAX, |row| self.number(row)));
        cut
    }

    fn number(&mut self, row: RowOrigin) -> usize {
        let next = self.rows.len();
        let number = *self.numbers.entry(row.clone()).or_insert(next);
        if number == next {
            self.rows.push(row);
        }
        number
    }

    /// The cuts that are in the relaxation and those that they rest on, in the order in which they
    /// were found, with the rows that they rest on: all numbered anew. `O(size of the derivations)`.
    pub(crate) fn told(&self, pool: &Pool) -> (Vec<RowOrigin>, Vec<GeneralCut>) {
        let wanted = self.wanted(pool);
        let mut places = BTreeMap::new();
        let mut told = (Self::default(), Vec::new());
        for (number, _) in wanted.iter().enumerate().filter(|(_, wanted)| **wanted) {
            let Some(cut) = pool.cut(number) else { continue };
            let origin = |row: usize| match self.rows.get(row)? {
                RowOrigin::Cut(class, before) => {
                    places.get(before).map(|&place| RowOrigin::Cut(*class, place))
                }
                row => Some(row.clone()),
            };
            let cut = told.0.keep(cut.clone(), &origin);
            places.insert(number, told.1.len());
            told.1.push(cut);
        }
        (told.0.rows, told.1)
    }

    /// Which cuts are in the relaxation or are rested on by one that is.
    fn wanted(&self, pool: &Pool) -> Vec<bool> {
        let mut wanted: Vec<bool> = (0..pool.len()).map(|number| pool.is_inside(number)).collect();
        for number in (0..wanted.len()).rev() {
            if !wanted[number] {
                continue;
            }
            let Some(cut) = pool.cut(number) else { continue };
            for row in rows_of(&cut.derivation) {
                if let Some(RowOrigin::Cut(_, before)) = self.rows.get(row)
                    && *before < number
                {
                    wanted[*before] = true;
                }
            }
        }
        wanted
    }
}

/// The rows that a derivation speaks of.
pub(crate) fn rows_of(derivation: &Derivation) -> Vec<usize> {
    let mut rows = Vec::new();
    derivation.clone().renumber(&mut |row| {
        rows.push(row);
        row
    });
    rows
}
