//! The record as JSON, piece by piece.

use record::file;

use super::choice::Interval;
use super::cited::with_marks;
use super::{Block, Evidence};
use crate::certificate::{list, text};
use crate::study::Table;

pub(super) fn object(evidence: &Evidence<'_>, intervals: &[Interval], blocks: &[Block]) -> String {
    format!(
        "{{\n\"hullward_record\": 1,\n\"engine\": {},\n\"scenario\": {},\n\"intervals\": {},\n\"record\": {}\n}}\n",
        text(evidence.engine),
        text(&file::print(evidence.scenario)),
        list(intervals, |one| of_interval(one, evidence.unit)),
        list(blocks, of_block),
    )
}

fn of_interval(one: &Interval, unit: &str) -> String {
    let sense = if one.maximise { "maximise" } else { "minimise" };
    let plan = one.plan.map_or_else(|| "null".to_owned(), |plan| format!("{plan:?}"));
    format!(
        "{{\"instance\": {}, \"sense\": \"{sense}\", \"bound\": {:?}, \"plan\": {plan}, \"unit\": {}, \"closed\": {}}}",
        text(&one.instance),
        one.bound,
        text(unit),
        one.is_closed(),
    )
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
