//! Which reader a text looks made for.

use crate::blocks::{is_by_heading, is_equation};
use crate::cells::{Style, is_word, split, style};
use crate::instance::Reader;
use crate::number::parse;
use crate::text::{Line, lines};
use crate::{points, tsplib};

/// Lines looked at; the rest of a long text is much the same.
const LOOKED_AT: usize = 400;

/// Guesses the reader: TSPLIB by its keywords, blocks by their headings, points by two numbers a
/// row or a heading of coordinates, else a matrix. O(lines looked at).
pub(crate) fn guess(text: &str) -> Reader {
    let found: Vec<Line> = lines(text)
        .into_iter()
        .filter(|line| !line.is_blank() && !line.is_remark())
        .take(LOOKED_AT)
        .collect();
    if found.iter().any(|line| tsplib::is_telling(line.text)) {
        return Reader::Tsplib;
    }
    if found.iter().any(|line| is_by_heading(line.text) || is_equation(line.text)) {
        return Reader::Blocks;
    }
    if are_points(&found) { Reader::Points } else { Reader::Matrix }
}

fn are_points(found: &[Line]) -> bool {
    let style = style(found);
    let rows: Vec<Vec<String>> = found
        .iter()
        .map(|line| split(line, style.separator).into_iter().map(|c| c.text.into()).collect())
        .collect();
    let Some(first) = rows.first() else { return false };
    if points::is_heading(first) {
        // A matrix may have stops called x and y: its rows are called so too.
        return !rows[1..].iter().any(|row| row.first().is_some_and(|label| first.contains(label)));
    }
    let body = &rows[usize::from(!is_point(first, style))..];
    let above = |row: &Vec<String>| row.first().is_some_and(|label| first.contains(label));
    let headed = body.len() < rows.len() && (first.len() > 3 || body.iter().any(above));
    let fit = body.iter().filter(|row| is_point(row, style)).count();
    let widths = body.iter().map(Vec::len).max().unwrap_or(0);
    let square = widths == body.len() || (widths == 2 && body.len() == 3);
    let labelled = body.iter().all(|row| row.len() == 3 && is_word(&row[0], style.decimal_comma));
    // Three labelled rows of two numbers are points, unless labels of columns stand above them.
    !headed && body.len() > 2 && fit * 5 > body.len() * 4 && (!square || labelled)
}

/// Two numbers, with or without a label before them.
fn is_point(row: &[String], style: Style) -> bool {
    let number = |cell: &String| parse(cell, style.decimal_comma).is_ok();
    matches!(row.len(), 2 | 3) && row[row.len() - 2..].iter().all(number)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn readers_are_guessed() {
        for (text, reader) in [
            ("NAME: x\nTYPE : TSP\nDIMENSION : 3", Reader::Tsplib),
            ("V\na b\n\nc by i, j\na b 1", Reader::Blocks),
            ("Q = 40", Reader::Blocks),
            ("0 1 2\n1 0 3\n2 3 0", Reader::Matrix),
            (";a;b\na;0;1\nb;1;0", Reader::Matrix),
            ("a 0 1\nb 1 0", Reader::Matrix),
            ("a 0 1\nb 1 0\nc 4 4", Reader::Points),
            ("1 2\n3 4\n5 6\n7 8", Reader::Points),
            ("1 2\n3 4\n5 6", Reader::Matrix),
            ("stop,x,y\na,1,2\nb,3,4", Reader::Points),
            ("1 10 20\n2 11 21\n3 12 22\n4 13 23", Reader::Points),
            ("3\n4 5\n6 7 8", Reader::Matrix),
            ("a b c\na 1 2\nb 1 2\nc 1 2", Reader::Matrix),
            (";x;y\nx;0;1\ny;1;0", Reader::Matrix),
            ("", Reader::Matrix),
        ] {
            assert_eq!(guess(text), reader, "{text}");
        }
    }
}
