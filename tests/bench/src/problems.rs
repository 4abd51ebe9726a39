//! The problems by name: the 24 of the baselines and any other size of the same families.

use crate::instances;
use crate::shadow::Shadow;

/// The set whose baselines were taken with seed 1, by size.
pub(crate) const NAMES: [&str; 24] = [
    "tsp10-mtz",
    "tsp20-mtz",
    "tsp30-mtz",
    "tsp40-mtz",
    "tsp50-mtz",
    "tsp10-scf",
    "tsp20-scf",
    "tsp30-scf",
    "tsp40-scf",
    "tsp50-scf",
    "tsp10-mcf",
    "tsp15-mcf",
    "ufl20x50-weak",
    "ufl20x50-strong",
    "ufl50x100-weak",
    "ufl50x100-strong",
    "uls50-bigm",
    "uls50-fl",
    "bp25x12",
    "bp50x25",
    "ti20",
    "ti30",
    "tsp20-mcf",
    "tsp25-mcf",
];

/// A problem with its name and the number of leading columns that a search would branch on.
#[derive(Clone, Debug)]
pub(crate) struct Named {
    pub(crate) name: String,
    pub(crate) lp: Shadow,
    pub(crate) whole: usize,
}

/// The problem of a name such as `tsp20-mcf`, `ufl50x100-strong`, `uls50-fl`, `bp25x12`, `ti20`.
pub(crate) fn named(name: &str, seed: u64) -> Option<Named> {
    let start = name.find(|c: char| c.is_ascii_digit())?;
    let (family, rest) = name.split_at(start);
    let (size, kind) = rest.split_once('-').unwrap_or((rest, ""));
    let (a, b) = size.split_once('x').unwrap_or((size, "0"));
    let (a, b): (usize, usize) = (a.parse().ok()?, b.parse().ok()?);
    let arcs = a * a.saturating_sub(1);
    let (lp, whole) = match (family, kind) {
        ("tsp", "mtz") => (instances::position_labels(a, seed), arcs),
        ("tsp", "scf") => (instances::single_commodity(a, seed), arcs),
        ("tsp", "mcf") => (instances::multi_commodity(a, seed), arcs),
        ("ufl", "weak") => (instances::facilities(a, b, false, seed), a),
        ("ufl", "strong") => (instances::facilities(a, b, true, seed), a),
        ("uls", "bigm") => (instances::lot_sizing(a, seed), a),
        ("uls", "fl") => (instances::lot_sizing_by_use(a, seed), a),
        ("bp", "") => (instances::packing(a, b, seed), b * (a + 1)),
        ("ti", "") => {
            let lp = instances::one_machine(a, seed);
            let columns = lp.cost.len();
            (lp, columns)
        }
        _ => return None,
    };
    let name = if seed == 1 { name.to_owned() } else { format!("{name} #{seed}") };
    Some(Named { name, lp, whole })
}
