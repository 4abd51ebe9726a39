//! The record as Markdown, with tables as the common extension has them.

use std::fmt::Write;

use super::Block;
use super::cited::with_marks;
use crate::study::Table;

pub(super) fn document(blocks: &[Block]) -> String {
    let mut out = String::new();
    for block in blocks {
        // Writing to a string cannot fail.
        let _ = match block {
            Block::Title(text) => writeln!(out, "# {}\n", line(text)),
            Block::Heading(text) => writeln!(out, "## {}\n", line(text)),
            Block::Minor(text) => writeln!(out, "### {}\n", line(text)),
            Block::Part(mark, text) => writeln!(out, "### {} [{mark}]\n", line(text)),
            Block::Text(text) | Block::Notes(text) => writeln!(out, "{text}\n"),
            Block::List(items) => {
                let items: Vec<String> =
                    items.iter().map(|item| format!("- {}", line(&with_marks(item)))).collect();
                writeln!(out, "{}\n", items.join("\n"))
            }
            Block::Code(text) | Block::Formulation(_, text) => {
                let fence = fence(text);
                writeln!(out, "{fence}\n{}\n{fence}\n", text.trim_end())
            }
            // What a drawing shows is said in words beside it.
            Block::Figure(_) => Ok(()),
            Block::Table(found) => writeln!(out, "{}", table(found)),
        };
    }
    out
}

/// One line: what is set as a heading or an item has no other.
fn line(text: &str) -> String {
    text.split_whitespace().collect::<Vec<_>>().join(" ")
}

/// A fence that the text does not hold.
fn fence(text: &str) -> String {
    let mut fence = "```".to_owned();
    while text.contains(&fence) {
        fence.push('`');
    }
    fence
}

fn table(table: &Table) -> String {
    let row = |cells: &[String]| {
        let cells: Vec<String> = cells.iter().map(|cell| line(cell).replace('|', "\\|")).collect();
        format!("| {} |", cells.join(" | "))
    };
    let rule = (0..table.head.len())
        .map(|column| if table.words.contains(&column) { "---" } else { "---:" })
        .collect::<Vec<_>>();
    let mut lines = vec![row(&table.head), format!("|{}|", rule.join("|"))];
    lines.extend(table.rows.iter().map(|cells| row(cells)));
    lines.join("\n") + "\n"
}
