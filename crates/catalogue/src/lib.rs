//! Published formulations as journal notation, what is known of the strength of their linear
//! relaxations, and generators of invented instances.
//!
//! | module | holds |
//! |---|---|
//! | [`mod@entry`] | the shipped formulations: [`entries`], [`find`], [`nonnegative`] |
//! | [`relation`] | what is published about the bounds of rivals: [`relations`] |
//! | [`generator`] | seeded instances as one would paste them: [`generate`] |
//!
//! # What the literature names and is not shipped
//!
//! | what | why |
//! |---|---|
//! | blossoms, combs, D-inequalities, source-destination and other facets of round trips | classes of general cuts where the search has them; blossoms also as odd cuts, `tsp/blossoms` |
//! | rows of partitions and odd holes (Steiner trees), larger 2-partitions (groups), Möbius ladders and larger fences (orders), antiholes and larger wheels (stable sets) | they range over partitions, circles or pairs of sets, and a family here ranges over one set; the smallest of each are written out in `grouping/two-partitions`, `ordering/fences`, `stable-set/wheels` |
//! | circles on demand (maximum cut, stable sets, orders) | the same; as distances in `max-cut/odd-cycles` and `stable-set/every-odd-cycle`, and of orders the 3-dicycles say as much |
//! | cuts of all goods together (network design) | what goods send over a cut hangs on both ends, which the right-hand side of a family over sets cannot; of one node in `capacitated-design/node-cuts` |
//! | lifted bounds of paths over hubs (Hamacher et al. 2004) | of places that may use several hubs, another problem |
//! | lifted and extended covers, flow covers, flow packs, submodular and residual capacity rows | their coefficients come out of an algorithm: general cuts; the last are what `lines/multiple-choice` says |
//! | constants of Gilmore and Lawler (Xia & Yuan 2006) | each is the optimum of an assignment, and no expression; `qap/least-ways` has a simpler one |
//! | facilities as set packing; p-median by substitution (Church 2003) | other columns for the same rows; sets of nearer sites that are equal cannot be asked for in an expression |
//! | compressed arc flow (Brandão & Pedroso 2016), reduced horizons, dominated columns | an algorithm that makes a graph smaller, not a statement |
//! | single-source facilities, knapsacks with choices or set-ups, lots with backlogging or start-ups, units with ramps, partitions in place of coverings | other problems, for which no second form is named |
//! | aggregated coverings | a relaxation of the covering rows that is no formulation |
//! | quadratic hubs (O'Kelly 1987) | not linear: what it says is linearised in the three forms shipped |
//! | branching on sets (Beale & Tomlin 1970), indicator rows, logarithmic cases | a way to search, or what `piecewise/logarithmic` shows |
//!
//! A formulation is a text file in `formulations/<family>/`, a family has one `family.toml`
//! beside them. To add one, see DEVELOPERS.md.

pub mod entry;
pub mod generator;
pub mod relation;
mod shipped;

pub use entry::{Entry, entries, find, nonnegative};
pub use generator::{Class, generate};
pub use relation::{Level, Order, Relation, relations};

use toml::{Table, Value};

/// The parsed file of each family. A test holds that every shipped file parses.
fn families() -> impl Iterator<Item = (&'static str, Table)> {
    shipped::FAMILIES.iter().filter_map(|family| Some((family.name, family.file.parse().ok()?)))
}

/// The tables of an array of tables, in order.
fn tables<'a>(table: &'a Table, key: &str) -> impl Iterator<Item = &'a Table> {
    table.get(key).and_then(Value::as_array).into_iter().flatten().filter_map(Value::as_table)
}

/// The text at a key; empty when it is missing.
fn text<'a>(table: &'a Table, key: &str) -> &'a str {
    table.get(key).and_then(Value::as_str).unwrap_or_default()
}
