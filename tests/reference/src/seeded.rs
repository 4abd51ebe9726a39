//! The families of the catalogue and their seeded instances: how large, and how many, so that
//! the checks of theorems and of optima run over every family that has a generator.

use std::collections::BTreeMap;

use catalogue::{Class, entries, generate};
use instance::Instance;

use crate::round_trip::instance;

/// What the checks run on in one family.
#[derive(Debug, Clone, Copy)]
pub struct Extent {
    /// Sizes for the relations of bounds.
    pub bounds: &'static [u32],
    /// Sizes for optima: a whole search for each rival.
    pub optima: &'static [u32],
    /// Seeds of each size and class for the relations.
    pub seeds: u64,
    /// Seeds of each size and class for optima: with two sizes and five classes thirty instances.
    pub searched: u64,
}

/// How large and how many the instances of a family are. What `size` counts says
/// [`catalogue::generate`].
#[must_use]
pub fn extent(family: &str) -> Extent {
    let of = |bounds, optima| Extent { bounds, optima, seeds: 10, searched: 3 };
    match family {
        "atsp" => of(&[4, 6, 8], &[4, 5]),
        "tsp" => of(&[4, 6, 8], &[4, 7]),
        "path" | "ufl" | "lot" => of(&[4, 6, 9], &[4, 7]),
        // Their size is halved: of 4 and 5 they would make the same instance.
        "qap" | "job-shop" | "lines" => of(&[2, 4, 6], &[2, 4]),
        // There are only 64 graphs of four nodes.
        "colouring" => of(&[6, 7, 8], &[6, 7]),
        _ => of(&[4, 5, 6], &[4, 5]),
    }
}

/// Every family with a generator, once, in the catalogue's order.
#[must_use]
pub fn families() -> Vec<String> {
    let mut out: Vec<String> = Vec::new();
    for entry in entries() {
        let made = Class::ALL.iter().any(|&class| generate(&entry.family, 5, class, 1).is_some());
        if made && !out.contains(&entry.family) {
            out.push(entry.family);
        }
    }
    out
}

/// Instances of a family in every class that it has, each with a name that tells how to make it
/// again. All differ: where a class of few numbers draws one again, the next seed stands for it.
///
/// # Panics
/// When the family has no generator, two sizes give the same instance, a class has too few, or one
/// cannot be read.
#[must_use]
pub fn seeded(family: &str, sizes: &[u32], seeds: u64) -> Vec<(String, Instance)> {
    let (mut out, mut known) = (Vec::new(), BTreeMap::new());
    for &size in sizes {
        for class in Class::ALL {
            let wanted = out.len() + usize::try_from(seeds).unwrap_or(usize::MAX);
            for seed in 1..=20 * seeds {
                let Some(text) = generate(family, size, class, seed) else { break };
                let name = format!("{family}, {class:?}, {size}, seed {seed}");
                if let Some(other) = known.get(&text) {
                    assert_eq!(*other, size, "{name} has the text of a size {other}");
                    continue;
                }
                out.push((name, instance(&text)));
                known.insert(text, size);
                if out.len() == wanted {
                    break;
                }
            }
            let made = out.len() == wanted || generate(family, size, class, 1).is_none();
            assert!(made, "{family}, {class:?}, {size}: too few instances");
        }
    }
    assert!(!out.is_empty(), "{family} has no generator");
    out
}
