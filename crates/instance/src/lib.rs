//! Sets, tables and geometry, and the readers of pasted text.
//!
//! [`read()`] takes a text and gives a [`Reading`]: an [`Instance`] where the text could be read,
//! what was understood in sentences, and every place that was not, with its mend. Numbers are
//! exact: decimal text becomes a rational. Nothing here fails or panics on any text. [`read_in_slices()`]
//! does the same with a [`Pace`], letting go where a slice is spent; [`Slices`] drives it.
//!
//! | reader | takes |
//! |---|---|
//! | [`Reader::Matrix`] | a table of distances, whole or half, with or without labels |
//! | [`Reader::Points`] | points in the plane: `label x y` or `x y` |
//! | [`Reader::Geographic`] | points on the globe: `label latitude longitude` |
//! | [`Reader::Arcs`] | a list of drives: `from to cost`, with as many cost columns as there are |
//! | [`Reader::Table`] | tables with headings, copied from a spreadsheet |
//! | [`Reader::Tsplib`] | a TSPLIB file (Reinelt, ORSA Journal on Computing 3, 1991) of type TSP, ATSP or CVRP |
//! | [`Reader::Blocks`] | named sets, tables and numbers under headings |
//! | the others | files of the public libraries: see `library` |
//!
//! Matrices, points and TSPLIB files give a round trip: the stops `V`, the distances `c` over
//! pairs of them, and by habit (see [`Instance::assumed`]) the drives `A`, the root `r` and, on
//! symmetric data, the edges `E`. A list of drives gives `V`, `A` and a table for each column of
//! costs, and by habit `r` and `s` (the first stop named), `t` (the last one) and, where every
//! drive is the same both ways, `E`. Tables and blocks give what their headings name, and the same
//! habits where that is a round trip. [`layout()`] gives each stop a place on the map.

mod arcs;
mod blocks;
mod blocks_text;
mod cells;
mod complaint;
mod extra;
mod facts;
mod finish;
mod geo;
mod instance;
mod layout;
mod library;
mod matrix;
mod names;
mod number;
mod pace;
mod points;
mod read;
mod restrict;
mod sniff;
mod square;
mod sums;
mod table;
mod text;
mod triangle;
mod tsplib;

pub use blocks_text::blocks_text;
pub use complaint::{Complaint, Severity};
pub use instance::{Datum, Instance, Points, Reader};
pub use layout::{Layout, has_layout, layout, layout_in_slices};
pub use number::{Number, number_text};
pub use pace::{Pace, Slices};
pub use read::{Reading, read, read_in_slices, read_part};

/// The longest text that is read, in bytes.
pub const MAX_TEXT: usize = 8 << 20;
/// The largest number of stops of a round trip: a million drives fill some 250 MB.
pub const MAX_STOPS: usize = 1_000;
