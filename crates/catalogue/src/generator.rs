//! Seeded, invented instances as one would paste them: a matrix with a headline and labels.
//!
//! The classes differ in what makes relaxations strong or weak: uniform costs, points in a
//! square, points in clusters, costs 0 and 1, and nearly symmetric costs (points with up to a
//! tenth on top, drawn for each direction). Whole numbers, by PCG (O'Neill 2014) from the seed.

use std::fmt::Write;

use rand_core::{Rng, SeedableRng};
use rand_pcg::Pcg32;

/// The class of data.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Class {
    /// Each cost from 1 to 99, drawn alone.
    Uniform,
    /// Rounded distances of points in a square of side 1000.
    Euclidean,
    /// Rounded distances of points around a few centres.
    Clustered,
    /// Costs 0 and 1.
    ZeroOne,
    /// Distances of points with up to a tenth on top for each direction.
    NearlySymmetric,
}

impl Class {
    /// All classes.
    pub const ALL: [Self; 5] =
        [Self::Uniform, Self::Euclidean, Self::Clustered, Self::ZeroOne, Self::NearlySymmetric];
}

/// An invented instance of a family as text, or `None` where the family has no generator.
/// The same arguments give the same text on every machine. `O(size²)`.
#[must_use]
pub fn generate(family: &str, size: u32, class: Class, seed: u64) -> Option<String> {
    (family == "atsp").then(|| round_trip(size, class, seed))
}

fn round_trip(size: u32, class: Class, seed: u64) -> String {
    let mut random = Pcg32::seed_from_u64(seed);
    let points = points(&mut random, size, class);
    let mut text = String::from("stop");
    for j in 1..=size {
        let _ = write!(text, "\ts{j}");
    }
    for i in 0..size {
        let _ = write!(text, "\ns{}", i + 1);
        for j in 0..size {
            if i == j {
                text.push_str("\t-");
                continue;
            }
            let _ = write!(text, "\t{}", cost(&mut random, class, &points, (i, j)));
        }
    }
    text.push('\n');
    text
}

fn points(random: &mut Pcg32, size: u32, class: Class) -> Vec<(i64, i64)> {
    let centres: Vec<(i64, i64)> =
        (0..3).map(|_| (below(random, 800), below(random, 800))).collect();
    (0..size as usize)
        .map(|i| match class {
            Class::Clustered => {
                let (x, y) = centres[i % centres.len()];
                (x + below(random, 200), y + below(random, 200))
            }
            _ => (below(random, 1000), below(random, 1000)),
        })
        .collect()
}

fn cost(random: &mut Pcg32, class: Class, points: &[(i64, i64)], arc: (u32, u32)) -> i64 {
    let distance = || {
        let (a, b) = (points[arc.0 as usize], points[arc.1 as usize]);
        rounded_root((a.0 - b.0) * (a.0 - b.0) + (a.1 - b.1) * (a.1 - b.1))
    };
    match class {
        Class::Uniform => 1 + below(random, 99),
        Class::ZeroOne => below(random, 2),
        Class::Euclidean | Class::Clustered => distance(),
        Class::NearlySymmetric => {
            let base = distance();
            base + below(random, base / 10 + 1)
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

/// A number from 0 to `bound` − 1, all equally likely up to a bias of `bound` / 2^32.
fn below(random: &mut Pcg32, bound: i64) -> i64 {
    (i64::from(random.next_u32()) * bound) >> 32
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

    #[test]
    fn the_same_seed_gives_the_same_text_and_another_seed_another() {
        for class in Class::ALL {
            let text = generate("atsp", 6, class, 7).unwrap();
            assert_eq!(generate("atsp", 6, class, 7).unwrap(), text);
            assert_ne!(generate("atsp", 6, class, 8).unwrap(), text, "{class:?}");
            assert_eq!(text.lines().count(), 7);
        }
        assert_eq!(generate("no-such-family", 6, Class::Uniform, 7), None);
    }
}
