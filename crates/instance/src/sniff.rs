//! Which reader a text looks made for.

use std::collections::BTreeSet;

use crate::blocks::{is_by_heading, is_equation};
use crate::cells::{Separator, Style, is_word, split, style_in_slices};
use crate::instance::Reader;
use crate::matrix::is_title;
use crate::number::parse;
use crate::pace::Pace;
use crate::text::{Line, lines};
use crate::{arcs, library, points, table, tsplib};

/// Lines looked at; the rest of a long text is much the same.
const LOOKED_AT: usize = 400;

/// Guesses the reader: TSPLIB by its keywords, files of other libraries by keywords or by counts
/// that add up, blocks by their headings, points by a heading of
/// coordinates, drives by their ends or by a line on directions, tables by headings that are no
/// labels of rows, points by two numbers a row, else a matrix. O(length).
pub(crate) async fn guess(text: &str, pace: &Pace) -> Reader {
    let all = lines(text);
    let found: Vec<Line> = all
        .iter()
        .filter(|line| !line.is_blank() && !line.is_remark())
        .take(LOOKED_AT)
        .copied()
        .collect();
    if found.iter().any(|line| tsplib::is_telling(line.text)) {
        return Reader::Tsplib;
    }
    if let Some(reader) = library::guess(text, pace).await {
        return reader;
    }
    if found.iter().any(|line| is_by_heading(line.text) || is_equation(line.text)) {
        return Reader::Blocks;
    }
    if is_one_set(&found) {
        return Reader::Blocks;
    }
    // A title stands before a blank line.
    let titled = all.iter().position(|line| !line.is_blank() && !line.is_remark());
    let found = &found[usize::from(titled.is_some_and(|first| is_title(&all[first..])))..];
    if found.first().is_some_and(|line| arcs::direction(line.text).is_some()) {
        return Reader::Arcs;
    }
    guess_by_rows(text, found, pace).await
}

/// A name alone on its line, then a line of words: `N` and `a b c d`.
fn is_one_set(found: &[Line]) -> bool {
    let [name, members] = found else { return false };
    let cells =
        |line: &Line| -> Vec<String> { line.text.split_whitespace().map(str::to_owned).collect() };
    let (name, members) = (cells(name), cells(members));
    let words = members.len() > 1 && members.iter().all(|cell| is_word(cell, true));
    matches!(&name[..], [one] if is_word(one, true) && !members.contains(one)) && words
}

async fn guess_by_rows(text: &str, found: &[Line<'_>], pace: &Pace) -> Reader {
    let style = style_in_slices(found, pace).await;
    let mut rows: Vec<Vec<String>> = Vec::with_capacity(found.len());
    for line in found {
        pace.spend(2 * line.text.len()).await;
        rows.push(split(line, style.separator).into_iter().map(|c| c.text.into()).collect());
    }
    let cells = rows.iter().map(Vec::len).sum::<usize>();
    let Some((first, body)) = rows.split_first() else { return Reader::Matrix };
    // A matrix may have stops called x and y, or from and to: its rows are called so too.
    let common = body.iter().any(|row| row.first().is_some_and(|label| first.contains(label)));
    match points::heading(first) {
        Some(heading) if !common && heading.geographic => return Reader::Geographic,
        Some(_) if !common => return Reader::Points,
        _ => {}
    }
    pace.spend(4 * cells).await;
    let arcs = match style.separator {
        Separator::Space => are_arcs(&rows, common, style),
        _ => are_arcs(&filled(&rows), common, style),
    };
    pace.spend(4 * cells).await;
    if arcs {
        Reader::Arcs
    } else if table::is_likely(&text[..found.last().map_or(0, Line::end)], pace).await {
        Reader::Table
    } else if are_points(&rows, style) {
        Reader::Points
    } else {
        Reader::Matrix
    }
}

/// The rows without empty cells at their ends.
fn filled(rows: &[Vec<String>]) -> Vec<Vec<String>> {
    let mut rows = rows.to_vec();
    for row in &mut rows {
        while row.last().is_some_and(String::is_empty) {
            row.pop();
        }
    }
    rows
}

/// A headline that names ends, or two words and numbers a row. Below a headline that names no
/// ends, the two columns of words must have a label in common: else they are two sets.
fn are_arcs(rows: &[Vec<String>], common: bool, style: Style) -> bool {
    let Some((first, body)) = rows.split_first() else { return false };
    let square = body.iter().all(|row| row.len() == body.len());
    let ends = |pair: &[String]| {
        arcs::are_ends(&pair[0], &pair[1]) && (!square || pair[0].chars().count() > 1)
    };
    if !common && !body.is_empty() && first.windows(2).any(ends) {
        return true;
    }
    if are_numbered(rows, style) {
        return true;
    }
    let headed = first.len() > 2 && first.iter().all(|cell| is_word(cell, style.decimal_comma));
    if !headed {
        return arcs::are_drives(rows, style);
    }
    let starts: BTreeSet<&String> = body.iter().filter_map(|row| row.first()).collect();
    let meet = body.iter().filter_map(|row| row.get(1)).any(|label| starts.contains(label));
    meet && arcs::are_drives(body, style) && body.iter().all(|row| row.len() > 2)
}

/// Three numbers a row, the first of which repeat and so are no labels of points: drives
/// between numbered stops. Three rows are a matrix.
fn are_numbered(rows: &[Vec<String>], style: Style) -> bool {
    let whole = |cell: &String| cell.parse::<u32>().is_ok();
    let drive = |row: &Vec<String>| row.len() == 3 && row[..2].iter().all(whole);
    let starts: BTreeSet<&String> = rows.iter().filter_map(|row| row.first()).collect();
    let pairs: BTreeSet<&[String]> = rows.iter().filter_map(|row| row.get(..2)).collect();
    rows.len() > 3
        && rows.iter().all(|row| drive(row) && parse(&row[2], style.decimal_comma).is_ok())
        && starts.len() < rows.len()
        && pairs.len() == rows.len()
}

fn are_points(rows: &[Vec<String>], style: Style) -> bool {
    let Some(first) = rows.first() else { return false };
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
            ("stop lat lon\na 1 2\nb 3 4", Reader::Geographic),
            ("from,to,minutes\n1,2,5\n2,3,7\n3,1,4", Reader::Arcs),
            ("Streets\n\na b 5\nb c 7", Reader::Arcs),
            ("undirected\n1 2 5\n2 3 7\n3 1 4", Reader::Arcs),
            ("1 2 5\n2 3 7\n3 1 4", Reader::Matrix),
            ("1 2 5\n2 3 7\n3 1 4\n1 3 9", Reader::Arcs),
            ("1 2 5\n2 3 7\n3 1 4\n4 3 9", Reader::Points),
            ("i j k\n0 1 2\n1 0 3\n2 3 0", Reader::Matrix),
            ("i j c\n1 2 5\n2 3 7\n3 1 4\n1 3 9", Reader::Arcs),
            ("from to\nfrom 0 1\nto 1 0", Reader::Matrix),
            ("a b", Reader::Matrix),
            ("N\na b c d", Reader::Blocks),
            ("N\na 1", Reader::Matrix),
            ("one end minutes\na b 3\nb c 4", Reader::Arcs),
            ("client depot cost\na p 3\nb q 4", Reader::Table),
            ("client demand cost\na 3 4\nb 5 6\nc 7 8", Reader::Table),
            (
                "period demand setup holding\n1 10 50 2\n2 20 50 2\n3 30 60 2\n4 5 60 2",
                Reader::Table,
            ),
            ("a b c d\n0 10 50 2\n2 0 50 2\n3 30 0 2\n4 5 60 0", Reader::Matrix),
            ("c\tD1\tD2\nA\t1\t2\nB\t3\t4\nC\t5\t6", Reader::Table),
            ("client\\period;1;2;3\nA;1;2;3\nB;3;4;5", Reader::Table),
            ("c 1 2 3\nA 4 5 6\nB 7 8 9", Reader::Matrix),
            ("c 1 2 3\nA 4 5 6", Reader::Table),
            ("client demand\na 3\nb 4\n\nclient depot cost\na p 3\nb q 4", Reader::Table),
            ("Round, in minutes\n\n;a;b\na;0;1\nb;2;0", Reader::Matrix),
        ] {
            let found = crate::pace::Slices::whole(async |pace| guess(text, &pace).await);
            assert_eq!(found, reader, "{text}");
        }
    }
}
