//! Random numbers, points and costs of a class.

use rand_core::{Rng, SeedableRng};
use rand_pcg::Pcg32;

use super::Class;

/// A point in a square of side 1000.
pub(super) type Point = (i64, i64);

/// A stream of random numbers.
pub(super) struct Draw(Pcg32);

impl Draw {
    pub(super) fn new(seed: u64) -> Self {
        Self(Pcg32::seed_from_u64(seed))
    }

    /// A number from 0 to `bound` − 1, all equally likely up to a bias of `bound` / 2^32.
    pub(super) fn below(&mut self, bound: i64) -> i64 {
        (i64::from(self.0.next_u32()) * bound) >> 32
    }

    /// A place in a list of `count` members.
    pub(super) fn place(&mut self, count: usize) -> usize {
        let count = i64::try_from(count).unwrap_or(i64::MAX);
        usize::try_from(self.below(count)).unwrap_or_default()
    }

    /// The numbers below `count` in a random order (Fisher & Yates).
    pub(super) fn order(&mut self, count: usize) -> Vec<usize> {
        let mut order: Vec<usize> = (0..count).collect();
        for last in (1..count).rev() {
            order.swap(last, self.place(last + 1));
        }
        order
    }

    /// An amount from `least` on: anywhere in the range; around its ends and its middle for
    /// clustered data; the least or one more for data of 0 and 1; as far as two points of a square
    /// lie apart for Euclidean data; about the middle for data that are nearly alike.
    pub(super) fn amount(&mut self, class: Class, least: i64, range: i64) -> i64 {
        let above = match class {
            Class::Uniform => self.below(range),
            Class::Clustered => self.below(3) * (range / 3) + self.below(range / 9 + 1),
            Class::ZeroOne => self.below(2),
            Class::Euclidean => self.apart() * range / 1415,
            Class::NearlySymmetric => range / 2 + self.below(range / 10 + 2),
        };
        least + above
    }

    /// How far two points of a square of side 1000 lie apart.
    fn apart(&mut self) -> i64 {
        let (across, along) =
            (self.below(1000) - self.below(1000), self.below(1000) - self.below(1000));
        rounded_root(across * across + along * along)
    }

    /// Points around three centres for clustered data, else anywhere.
    pub(super) fn points(&mut self, count: u32, class: Class) -> Vec<Point> {
        let centres: Vec<Point> = (0..3).map(|_| (self.below(800), self.below(800))).collect();
        (0..count as usize)
            .map(|i| match class {
                Class::Clustered => {
                    let (x, y) = centres[i % centres.len()];
                    (x + self.below(200), y + self.below(200))
                }
                _ => (self.below(1000), self.below(1000)),
            })
            .collect()
    }

    /// What it costs to go from a point to another.
    pub(super) fn cost(&mut self, class: Class, from: Point, to: Point) -> i64 {
        let (across, along) = (from.0 - to.0, from.1 - to.1);
        let distance = || rounded_root(across * across + along * along);
        match class {
            Class::Uniform => 1 + self.below(99),
            Class::ZeroOne => self.below(2),
            Class::Euclidean | Class::Clustered => distance(),
            Class::NearlySymmetric => {
                let base = distance();
                base + self.below(base / 10 + 1)
            }
        }
    }
}

/// The nearest whole number to the root of `square` (below 2^31).
fn rounded_root(square: i64) -> i64 {
    let mut root = 0;
    while (2 * root + 1) * (2 * root + 1) <= 4 * square {
        root += 1;
    }
    root
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn roots_are_rounded_to_the_nearest_whole_number() {
        for (square, root) in [(0, 0), (1, 1), (2, 1), (3, 2), (6, 2), (7, 3), (1_000_000, 1000)] {
            assert_eq!(rounded_root(square), root, "√{square}");
        }
    }
}
