//! Seeded, invented instances as one would paste them: a matrix, or named blocks.
//!
//! The classes differ in what makes relaxations strong or weak: uniform costs, points in a
//! square, points in clusters, costs 0 and 1, and nearly symmetric costs (points with up to a
//! tenth on top, drawn for each direction). Whole numbers, by PCG (O'Neill 2014) from the seed.

mod blocks;
mod cases;
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
    /// About the middle of the costs that are drawn of it: what is taken off where either sign is
    /// wanted.
    fn middle(self) -> i64 {
        match self {
            Self::Uniform => 50,
            Self::Clustered => 300,
            Self::Euclidean | Self::NearlySymmetric => 450,
            Self::ZeroOne => 1,
        }
    }

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

/// An invented instance of a family as text, or `None` where the family has no generator. The same
/// arguments give the same text on every machine. Where nothing has a place or a direction,
/// Euclidean amounts are as far as drawn points lie apart, and nearly symmetric ones nearly alike.
///
/// | family | `size` |
/// |---|---|
/// | `atsp`, `tsp` | stops |
/// | `path` | nodes, some three arcs from each; the end can be reached |
/// | `elementary-path` | the same with four arcs, lengths of either sign |
/// | `ufl` | facilities, twice as many clients |
/// | `lot` | periods |
/// | `limited-path` | nodes, some four arcs from each |
/// | `cvrp` | depot and customers; all rounds, of up to 13 places |
/// | `cfl`, `p-median`, `p-centre` | sites, twice as many clients |
/// | `tree`, `steiner` | nodes, half of which are to be connected |
/// | `design`, `capacitated-design` | nodes, about as many pairs with goods; all paths, of up to 12 nodes |
/// | `lines` | nodes: half of it and 2, about as many pairs with traffic |
/// | `matching`, `max-cut`, `stable-set` | nodes |
/// | `colouring` | nodes; all stable sets, of up to 12 nodes |
/// | `ordering` | items |
/// | `grouping` | items; all groups, of up to 12 |
/// | `quadratic` | decisions |
/// | `hub` | places, two hubs; lengths of shortest ways |
/// | `bins` | sizes, with all patterns |
/// | `knapsack`, `multi-knapsack` | items, three resources |
/// | `gap` | jobs for three agents; all lists, of up to 12 jobs |
/// | `cover` | rows, twice as many choices |
/// | `cases` | cases of three amounts |
/// | `machine`, `tardiness` | jobs |
/// | `job-shop` | jobs: half of it and 1, on three machines |
/// | `rcpsp` | activities |
/// | `clsp` | periods for two items |
/// | `unit`, `start-limits` | hours for three units, with a fourth where starts are limited |
/// | `piecewise` | pieces of each of four curves |
/// | `qap` | plants: half of it and 2 |
///
/// `O(size²)`; `hub` `O(size³)`; where all of something is listed, exponential up to its limit.
#[must_use]
pub fn generate(family: &str, size: u32, class: Class, seed: u64) -> Option<String> {
    match family {
        "atsp" => Some(round_trip::directed(size, class, seed)),
        "tsp" => Some(round_trip::undirected(size, class, seed)),
        "path" => Some(path::network(size, class, seed)),
        "ufl" => Some(facilities::sites(size, class, seed)),
        "lot" => Some(lots::periods(size, class, seed)),
        _ => maker(family).map(|make| make(size, class, seed).text()),
    }
}

type Make = fn(u32, Class, u64) -> Blocks;

/// The families whose generators make their text by [`Blocks`].
fn maker(family: &str) -> Option<Make> {
    Some(match family {
        "elementary-path" => path::with_gains,
        "limited-path" => networks::limited,
        "cvrp" => networks::vehicles,
        "cfl" => open_sites::limited,
        "p-median" => open_sites::median,
        "p-centre" => open_sites::centre,
        "tree" => graphs::tree,
        "steiner" => graphs::steiner,
        "design" => networks::design,
        "capacitated-design" => networks::capacitated,
        "lines" => networks::lines,
        "matching" | "max-cut" => graphs::worths,
        "stable-set" => graphs::conflicts,
        "colouring" => graphs::colours,
        "ordering" => items::ordering,
        "grouping" => items::grouping,
        "quadratic" => quadratic::decisions,
        "hub" => networks::hubs,
        "cases" => cases::cases,
        _ => return planned(family),
    })
}

/// Packing, scheduling, production and quadratic assignment.
fn planned(family: &str) -> Option<Make> {
    Some(match family {
        "bins" => packing::bins,
        "knapsack" => packing::knapsack,
        "multi-knapsack" => packing::several,
        "gap" => packing::agents,
        "cover" => packing::covers,
        "machine" => scheduling::machine,
        "tardiness" => scheduling::due,
        "job-shop" => scheduling::job_shop,
        "rcpsp" => scheduling::project,
        "clsp" => production::limited_lots,
        "unit" => production::units,
        "start-limits" => production::limited_units,
        "piecewise" => production::bent_costs,
        "qap" => quadratic::plants,
        _ => return None,
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_same_seed_gives_the_same_text_and_another_seed_another() {
        for family in crate::shipped::FAMILIES.iter().map(|family| family.name) {
            for class in Class::ALL {
                let text = generate(family, 6, class, 7);
                assert!(text.is_some(), "{family} {class:?}");
                assert_eq!(generate(family, 6, class, 7), text);
                assert_ne!(generate(family, 6, class, 8), text, "{family} {class:?}");
            }
        }
        assert_eq!(generate("no-such-family", 6, Class::Uniform, 7), None);
    }
}
