//! Certificates made false on purpose: multipliers and rays with an entry turned round, moved or
//! taken from elsewhere, bases with columns exchanged or sides changed.

use proof::{Standing, Standings};
use rand_core::{Rng, SeedableRng};
use rand_pcg::Pcg32;

/// Numbers that no kernel should give.
const STRANGE: [f64; 8] =
    [f64::NAN, f64::INFINITY, f64::NEG_INFINITY, 1e300, -1e300, 5e-324, -0.0, 1e18];

/// A seeded falsifier.
#[derive(Debug)]
pub struct Falsifier(Pcg32);

impl Falsifier {
    /// From a seed.
    #[must_use]
    pub fn new(seed: u64) -> Self {
        Self(Pcg32::seed_from_u64(seed))
    }

    fn below(&mut self, count: usize) -> usize {
        self.0.next_u32() as usize % if count == 0 { 1 } else { count }
    }

    /// A number of either sign, of a size from a millionth to a million.
    fn number(&mut self) -> f64 {
        let size = [1e-6, 1e-3, 0.1, 1.0, 10.0, 1e3, 1e6][self.below(7)];
        size * (f64::from(self.0.next_u32()) / f64::from(u32::MAX) - 0.5)
    }

    /// The multipliers, or the ray, in many false ways. `foreign` is of another problem.
    pub fn multipliers(&mut self, right: &[f64], foreign: &[f64]) -> Vec<Vec<f64>> {
        let mut out = Vec::new();
        let filled: Vec<usize> = (0..right.len()).filter(|&i| right[i] != 0.0).collect();
        let mut change = |change: &dyn Fn(&mut [f64])| {
            let mut y = right.to_vec();
            change(&mut y);
            out.push(y);
        };
        if !right.is_empty() {
            let (anywhere, other) = (self.below(right.len()), self.below(right.len()));
            let here = filled.get(self.below(filled.len())).copied().unwrap_or(anywhere);
            let (moved, strange) = (self.number(), STRANGE[self.below(STRANGE.len())]);
            change(&|y| y[here] = -y[here]);
            change(&|y| y[here] = 0.0);
            change(&|y| y[here] += moved);
            change(&|y| y[here] *= 1.0 + 1e-6);
            change(&|y| y[anywhere] += moved);
            change(&|y| y.swap(here, other));
            change(&|y| y[anywhere] = strange);
            change(&|y| y.rotate_right(1));
        }
        change(&|y| y.iter_mut().for_each(|y| *y = -*y));
        change(&|y| y.iter_mut().for_each(|y| *y *= 1.5));
        out.push(right.iter().map(|_| self.number()).collect());
        out.push(foreign.iter().copied().cycle().take(right.len().min(foreign.len())).collect());
        out
    }

    /// The basis in many false ways.
    pub fn bases(&mut self, right: &Standings) -> Vec<Standings> {
        let mut out = Vec::new();
        for exchanges in [1, 1, 2, 5] {
            let mut basis = right.clone();
            (0..exchanges).for_each(|_| self.exchange(&mut basis));
            out.push(basis);
        }
        let mut sides = right.clone();
        let turned = self.below(sides.columns.len());
        for (place, standing) in sides.columns.iter_mut().chain(&mut sides.rows).enumerate() {
            if place == turned || self.0.next_u32().is_multiple_of(4) {
                *standing = match standing {
                    Standing::Basic => Standing::Basic,
                    Standing::Lower => Standing::Upper,
                    Standing::Upper => Standing::Lower,
                };
            }
        }
        out.push(sides);
        let slack = Standings {
            columns: vec![Standing::Lower; right.columns.len()],
            rows: vec![Standing::Basic; right.rows.len()],
        };
        let mut many = slack.clone();
        many.columns.fill(Standing::Basic);
        let mut short = right.clone();
        short.columns.pop();
        out.extend([slack, many, short]);
        out
    }

    /// Puts a basic variable at a bound and makes another one basic.
    fn exchange(&mut self, basis: &mut Standings) {
        let columns = basis.columns.len();
        let all: Vec<Standing> = basis.columns.iter().chain(&basis.rows).copied().collect();
        let places = |basic: bool| -> Vec<usize> {
            (0..all.len()).filter(|&at| (all[at] == Standing::Basic) == basic).collect()
        };
        let (inside, outside) = (places(true), places(false));
        if inside.is_empty() || outside.is_empty() {
            return;
        }
        let leaves = inside[self.below(inside.len())];
        let enters = outside[self.below(outside.len())];
        let side = [Standing::Lower, Standing::Upper][self.below(2)];
        let mut set = |at: usize, standing: Standing| match at.checked_sub(columns) {
            None => basis.columns[at] = standing,
            Some(row) => basis.rows[row] = standing,
        };
        set(leaves, side);
        set(enters, Standing::Basic);
    }
}
