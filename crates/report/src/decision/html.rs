//! The record as HTML: one file, no script, nothing fetched. Every text is escaped.

use std::fmt::Write;

use super::Block;
use super::cited::Cited;
use crate::notes::{Hand, Piece, Run, pieces};
use crate::study::Table;

/// Paper first: a serif, thin rules, page breaks that keep tables whole.
const STYLE: &str = "\
:root{color-scheme:light dark}\
body{max-width:46rem;margin:2rem auto;padding:0 1rem;font:16px/24px Charter,'Bitstream Charter','Source Serif 4',Georgia,serif}\
h1{font-size:28px;line-height:36px;margin:0 0 16px}\
h2{font-size:19px;line-height:28px;margin:32px 0 8px;padding-top:8px;border-top:1px solid #8884}\
h3{font-size:16px;line-height:24px;margin:20px 0 4px}\
p,ul,ol{margin:4px 0 8px}ul,ol{padding-left:20px}p{white-space:pre-line}\
.scroll{overflow-x:auto}\
table{border-collapse:collapse;margin:8px 0;font:13px/20px system-ui,sans-serif;font-variant-numeric:tabular-nums}\
th,td{padding:3px 10px 3px 0;border-bottom:1px solid #8884;text-align:right;font-weight:400;vertical-align:top}\
h3 small{font-weight:400;opacity:.7}\
svg{display:block;max-width:100%;height:auto;margin:8px 0}\
th.w,td.w{text-align:left}thead th{opacity:.7}\
.set td{text-align:left;padding:2px 8px 2px 0;border:0;font-size:14px}.set td.l{text-align:right;padding-right:3px}\
pre{overflow-x:auto;margin:8px 0;padding:8px;border:1px solid #8884;font:13px/18px ui-monospace,monospace;white-space:pre-wrap;overflow-wrap:anywhere}\
@media print{body{max-width:none;margin:0;font-size:10.5pt;line-height:15pt}h2,h3{break-after:avoid}table,svg,li{break-inside:avoid}.scroll{overflow:visible}a{color:inherit}}\
@page{margin:20mm}";

pub(super) fn document(blocks: &[Block]) -> String {
    let title = blocks.iter().find_map(|block| match block {
        Block::Title(title) => Some(title.as_str()),
        _ => None,
    });
    let mut out = format!(
        "<!doctype html>\n<html lang=\"en\">\n<head>\n<meta charset=\"utf-8\">\n\
         <meta name=\"viewport\" content=\"width=device-width, initial-scale=1\">\n\
         <meta http-equiv=\"Content-Security-Policy\" content=\"default-src 'none'; style-src 'unsafe-inline'\">\n\
         <title>{}</title>\n<style>{STYLE}</style>\n</head>\n<body>\n",
        escaped(title.unwrap_or_default())
    );
    for block in blocks {
        write_block(block, &mut out);
    }
    out.push_str("</body>\n</html>\n");
    out
}

fn write_block(block: &Block, out: &mut String) {
    let tag = |tag: &str, text: &str| format!("<{tag}>{}</{tag}>\n", escaped(text));
    match block {
        Block::Title(text) => out.push_str(&tag("h1", text)),
        Block::Heading(text) => out.push_str(&tag("h2", text)),
        Block::Minor(text) => out.push_str(&tag("h3", text)),
        Block::Part(mark, text) => {
            let text = escaped(text);
            // Writing to a string cannot fail.
            let _ = writeln!(out, "<h3 id=\"e{mark}\">{text} <small>[{mark}]</small></h3>");
        }
        Block::Text(text) => out.push_str(&tag("p", text)),
        Block::Notes(text) => pieces(text).iter().for_each(|piece| write_piece(piece, out)),
        Block::Code(text) => out.push_str(&tag("pre", text)),
        Block::Formulation(set, text) => {
            out.push_str(set);
            out.push_str(&tag("pre", text));
        }
        Block::List(items) => {
            let items: String = items.iter().map(cited).collect();
            // Writing to a string cannot fail.
            let _ = write!(out, "<ul>\n{items}</ul>\n");
        }
        Block::Figure(svg) => {
            out.push_str(svg);
            out.push('\n');
        }
        Block::Table(table) => write_table(table, out),
    }
}

/// A sentence with links to the evidence that it cites.
fn cited((sentence, marks): &Cited) -> String {
    let link = |mark: &usize| format!("<a href=\"#e{mark}\">{mark}</a>");
    let links: Vec<String> = marks.iter().map(link).collect();
    let links = if links.is_empty() { String::new() } else { format!(" [{}]", links.join(", ")) };
    format!("<li>{}{links}</li>\n", escaped(sentence))
}

fn write_piece(piece: &Piece, out: &mut String) {
    let items = |items: &[Vec<Run>]| -> String {
        items.iter().map(|item| format!("<li>{}</li>\n", set(item))).collect()
    };
    // Writing to a string cannot fail.
    let _ = match piece {
        Piece::Heading(runs) => writeln!(out, "<h3>{}</h3>", set(runs)),
        Piece::Paragraph(runs) => writeln!(out, "<p>{}</p>", set(runs)),
        Piece::Bullets(list) => writeln!(out, "<ul>\n{}</ul>", items(list)),
        Piece::Numbers(first, list) => {
            writeln!(out, "<ol start=\"{first}\">\n{}</ol>", items(list))
        }
        Piece::Code(text) => writeln!(out, "<pre>{}</pre>", escaped(text)),
    };
}

fn set(runs: &[Run]) -> String {
    let run = |run: &Run| {
        let text = escaped(&run.text);
        match run.hand {
            Hand::Plain => text,
            Hand::Emphasis => format!("<em>{text}</em>"),
            Hand::Strong => format!("<strong>{text}</strong>"),
            Hand::Code => format!("<code>{text}</code>"),
        }
    };
    runs.iter().map(run).collect()
}

fn write_table(table: &Table, out: &mut String) {
    let class = |column: usize| if table.words.contains(&column) { " class=\"w\"" } else { "" };
    let cells = |cells: &[String], tag: &str| -> String {
        let cell = |(column, cell): (usize, &String)| {
            format!("<{tag}{}>{}</{tag}>", class(column), escaped(cell))
        };
        cells.iter().enumerate().map(cell).collect()
    };
    // Writing to a string cannot fail.
    let _ = write!(
        out,
        "<div class=\"scroll\"><table>\n<thead><tr>{}</tr></thead>\n<tbody>\n",
        cells(&table.head, "th")
    );
    for row in &table.rows {
        let _ = writeln!(out, "<tr>{}</tr>", cells(row, "td"));
    }
    out.push_str("</tbody>\n</table></div>\n");
}

pub(crate) fn escaped(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for letter in text.chars() {
        match letter {
            '&' => out.push_str("&amp;"),
            '<' => out.push_str("&lt;"),
            '>' => out.push_str("&gt;"),
            '"' => out.push_str("&quot;"),
            other => out.push(other),
        }
    }
    out
}
