//! Published formulations as journal notation, what is known of the strength of their linear
//! relaxations, and generators of invented instances.
//!
//! | module | holds |
//! |---|---|
//! | [`mod@entry`] | the shipped formulations: [`entries`], [`find`] |
//! | [`relation`] | what is published about the bounds of rivals: [`relations`] |
//! | [`generator`] | seeded instances as one would paste them: [`generate`] |
//!
//! A formulation is a text file in `formulations/<family>/`, a family has one `family.toml`
//! beside them. To add one, see DEVELOPERS.md.

pub mod entry;
pub mod generator;
pub mod relation;
mod shipped;

pub use entry::{Entry, entries, find};
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
