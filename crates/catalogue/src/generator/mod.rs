//! Seeded, invented instances as one would paste them: a matrix, or named blocks.
//!
//! The classes differ in what makes relaxations strong or weak: uniform costs, points in a
//! square, points in clusters, costs 0 and 1, and nearly symmetric costs (points with up to a
//! tenth on top, drawn for each direction). Whole numbers, by PCG (O'Neill 2014) from the seed.

mod blocks;
mod draw;
mod facilities;
mod graphs;
mod items;
mod listed;
mod lots;
mod networks;
mod open_sites;
mod packing;
mod path;
mod production;
mod quadratic;
mod round_trip;
mod scheduling;

use blocks::Blocks;

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

    /// The name by which scenarios choose it.
    #[must_use]
    pub fn name(self) -> &'static str {
        match self {
            Self::Uniform => "uniform",
            Self::Euclidean => "euclidean",
            Self::Clustered => "clustered",
            Self::ZeroOne => "zero-one",
            Self::NearlySymmetric => "nearly symmetric",
        }
    }

    /// The class of that name.
    #[must_use]
    pub fn from_name(name: &str) -> Option<Self> {
        Self::ALL.into_iter().find(|class| class.name() == name)
    }
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
/// | `limited-path` | nodes, some four arcs from each | all |
/// | `cvrp` | depot and customers; all rounds, of up to 13 places | all |
/// | `cfl`, `p-median`, `p-centre` | sites, twice as many clients | all but nearly symmetric |
/// | `tree`, `steiner` | nodes, half of which are to be connected | all but nearly symmetric |
/// | `design` | nodes, about as many pairs with goods | all |
/// | `matching`, `max-cut`, `stable-set` | nodes | all but nearly symmetric |
/// | `colouring` | nodes; all stable sets, of up to 12 nodes | uniform, Euclidean, clustered |
/// | `ordering` | items | uniform, 0 and 1, nearly symmetric |
/// | `grouping` | items | all but nearly symmetric |
/// | `hub` | places, two hubs; lengths of shortest ways | all |
/// | `bins` | sizes, with all patterns | uniform, clustered, 0 and 1 |
/// | `knapsack` | items | uniform, clustered, 0 and 1 |
/// | `gap` | jobs for three agents; all lists, of up to 12 jobs | uniform, clustered, 0 and 1 |
/// | `cover` | rows, twice as many choices | uniform, clustered, 0 and 1 |
/// | `machine` | jobs | uniform, clustered, 0 and 1 |
/// | `job-shop` | jobs: half of it and 1, on three machines | uniform, clustered, 0 and 1 |
/// | `rcpsp` | activities | uniform, clustered, 0 and 1 |
/// | `clsp` | periods for two items | uniform, clustered, 0 and 1 |
/// | `unit` | hours for three units | uniform, clustered, 0 and 1 |
/// | `piecewise` | pieces of each of four curves | uniform, clustered, 0 and 1 |
/// | `qap` | plants: half of it and 2 | all |
///
/// `O(size²)`; `hub` `O(size³)`; where all of something is listed, exponential up to its limit.
#[must_use]
pub fn generate(family: &str, size: u32, class: Class, seed: u64) -> Option<String> {
    match family {
        "atsp" => Some(round_trip::directed(size, class, seed)),
        "tsp" => round_trip::undirected(size, class, seed),
        "path" => Some(path::network(size, class, seed)),
        "ufl" => facilities::sites(size, class, seed),
        "lot" => lots::periods(size, class, seed),
        _ => blocks(family, size, class, seed).map(Blocks::text),
    }
}

/// The families whose generators make their text by [`Blocks`].
fn blocks(family: &str, size: u32, class: Class, seed: u64) -> Option<Blocks> {
    match family {
        "limited-path" => Some(networks::limited(size, class, seed)),
        "cvrp" => Some(networks::vehicles(size, class, seed)),
        "cfl" => open_sites::limited(size, class, seed),
        "p-median" => open_sites::median(size, class, seed),
        "p-centre" => open_sites::centre(size, class, seed),
        "tree" => graphs::tree(size, class, seed),
        "steiner" => graphs::steiner(size, class, seed),
        "design" => Some(networks::design(size, class, seed)),
        "matching" | "max-cut" => graphs::worths(size, class, seed),
        "stable-set" => graphs::conflicts(size, class, seed),
        "colouring" => graphs::colours(size, class, seed),
        "ordering" => items::ordering(size, class, seed),
        "grouping" => items::grouping(size, class, seed),
        "hub" => Some(networks::hubs(size, class, seed)),
        _ => planned(family, size, class, seed),
    }
}

/// Packing, scheduling, production and quadratic assignment.
fn planned(family: &str, size: u32, class: Class, seed: u64) -> Option<Blocks> {
    match family {
        "bins" => packing::bins(size, class, seed),
        "knapsack" => packing::knapsack(size, class, seed),
        "gap" => packing::agents(size, class, seed),
        "cover" => packing::covers(size, class, seed),
        "machine" => scheduling::machine(size, class, seed),
        "job-shop" => scheduling::job_shop(size, class, seed),
        "rcpsp" => scheduling::project(size, class, seed),
        "clsp" => production::limited_lots(size, class, seed),
        "unit" => production::units(size, class, seed),
        "piecewise" => production::bent_costs(size, class, seed),
        "qap" => Some(quadratic::plants(size, class, seed)),
        _ => None,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const FAMILIES: [(&str, usize); 30] = [
        ("atsp", 5),
        ("tsp", 4),
        ("path", 5),
        ("ufl", 4),
        ("lot", 3),
        ("limited-path", 5),
        ("cvrp", 5),
        ("cfl", 4),
        ("p-median", 4),
        ("p-centre", 4),
        ("tree", 4),
        ("steiner", 4),
        ("design", 5),
        ("matching", 4),
        ("stable-set", 4),
        ("colouring", 3),
        ("ordering", 3),
        ("grouping", 4),
        ("hub", 5),
        ("bins", 3),
        ("knapsack", 3),
        ("gap", 3),
        ("cover", 3),
        ("machine", 3),
        ("job-shop", 3),
        ("rcpsp", 3),
        ("clsp", 3),
        ("unit", 3),
        ("piecewise", 3),
        ("qap", 5),
    ];

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
