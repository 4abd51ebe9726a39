//! The record as JSON, piece by piece.

use super::Block;
use super::cited::with_marks;
use crate::certificate::{list, text};
use crate::study::Table;

pub(super) fn document(blocks: &[Block]) -> String {
    list(blocks, of_block)
}

fn of_block(block: &Block) -> String {
    let (kind, value) = match block {
        Block::Title(words) => ("title", text(words)),
        Block::Heading(words) => ("heading", text(words)),
        Block::Minor(words) => ("subheading", text(words)),
        Block::Part(mark, words) => ("subheading", text(&format!("{words} [{mark}]"))),
        Block::Text(words) => ("text", text(words)),
        Block::Notes(words) => ("notes", text(words)),
        Block::List(items) => ("list", list(items, |item| text(&with_marks(item)))),
        Block::Table(table) => ("table", of_table(table)),
        Block::Figure(svg) => ("figure", text(svg)),
        Block::Code(words) | Block::Formulation(_, words) => ("code", text(words)),
    };
    format!("{{\"{kind}\": {value}}}")
}

fn words(items: &[String]) -> String {
    list(items, |item| text(item))
}

fn of_table(table: &Table) -> String {
    let rows = list(&table.rows, |row| words(row));
    format!("{{\"head\": {}, \"rows\": {rows}}}", words(&table.head))
}
