//! Seeded, invented instances as one would paste them: a matrix, or named blocks.
//!
//! The classes differ in what makes relaxations strong or weak: uniform costs, points in a
//! square, points in clusters, costs 0 and 1, and nearly symmetric costs (points with up to a
//! tenth on top, drawn for each direction). Whole numbers, by PCG (O'Neill 2014) from the seed.

mod draw;
mod facilities;
mod lots;
mod path;
mod round_trip;

/// The class of data.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Class {
    /// Each cost from 1 to 99, drawn alone; demands from 0 to 99.
    Uniform,
    /// Rounded distances of points in a square of side 1000.
    Euclidean,
    /// Rounded distances of points around a few centres; demand in a few periods out of many.
    Clustered,
    /// Costs 0 and 1; demands 0 and 1.
    ZeroOne,
    /// Distances of points with up to a tenth on top for each direction.
    NearlySymmetric,
}

impl Class {
    /// All classes.
    pub const ALL: [Self; 5] =
        [Self::Uniform, Self::Euclidean, Self::Clustered, Self::ZeroOne, Self::NearlySymmetric];
}

/// An invented instance of a family as text, or `None` where the family has no generator or the
/// class means nothing in it. The same arguments give the same text on every machine.
///
/// | family | `size` | classes |
/// |---|---|---|
/// | `atsp` | stops | all |
/// | `tsp` | stops; costs are the same both ways | all but nearly symmetric |
/// | `path` | nodes, some three arcs from each; the end can be reached | all |
/// | `ufl` | facilities, twice as many clients | all but nearly symmetric |
/// | `lot` | periods | uniform, clustered, 0 and 1 |
///
/// `O(size²)`.
#[must_use]
pub fn generate(family: &str, size: u32, class: Class, seed: u64) -> Option<String> {
    match family {
        "atsp" => Some(round_trip::directed(size, class, seed)),
        "tsp" => round_trip::undirected(size, class, seed),
        "path" => Some(path::network(size, class, seed)),
        "ufl" => facilities::sites(size, class, seed),
        "lot" => lots::periods(size, class, seed),
        _ => None,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const FAMILIES: [(&str, usize); 5] =
        [("atsp", 5), ("tsp", 4), ("path", 5), ("ufl", 4), ("lot", 3)];

    #[test]
    fn the_same_seed_gives_the_same_text_and_another_seed_another() {
        for (family, classes) in FAMILIES {
            let mut made = 0;
            for class in Class::ALL {
                let Some(text) = generate(family, 6, class, 7) else { continue };
                made += 1;
                assert_eq!(generate(family, 6, class, 7), Some(text.clone()));
                assert_ne!(generate(family, 6, class, 8), Some(text), "{family} {class:?}");
            }
            assert_eq!(made, classes, "{family}");
        }
        assert_eq!(generate("no-such-family", 6, Class::Uniform, 7), None);
    }
}
