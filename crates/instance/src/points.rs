//! Points in the plane: `label x y` or `x y` a line. The distance of two points is Euclidean,
//! rounded half up to two decimals, exactly.

use std::collections::BTreeMap;

use dashu_int::{IBig, UBig, ops::SquareRoot};
use dashu_ratio::RBig;

use crate::cells::{Cell, Style, is_blank};
use crate::complaint::{Complaints, excerpt, plural};
use crate::finish::RoundTrip;
use crate::instance::Points;
use crate::matrix::{Row, Table, table};
use crate::number::{Number, parse};
use crate::square::{Square, counted};

const ACROSS: [&str; 6] = ["x", "east", "easting", "lon", "longitude", "lng"];
const ALONG: [&str; 5] = ["y", "north", "northing", "lat", "latitude"];

/// Whether a row names two columns of coordinates.
pub(crate) fn is_heading(row: &[impl AsRef<str>]) -> bool {
    heading(row).is_some()
}

/// The columns of x and y, if a row names them.
fn heading(row: &[impl AsRef<str>]) -> Option<(usize, usize)> {
    let find = |words: &[&str]| {
        row.iter().position(|cell| words.iter().any(|w| cell.as_ref().eq_ignore_ascii_case(w)))
    };
    Some((find(&ACROSS)?, find(&ALONG)?))
}

/// Which cells of a row hold the label and the coordinates.
#[derive(Clone, Copy)]
struct Columns {
    label: Option<usize>,
    x: usize,
    y: usize,
    width: usize,
}

/// Reads points. O(n²).
pub(crate) fn read(text: &str, sink: &mut Complaints) -> Option<RoundTrip> {
    let Table { title, style, rows } = table(text, sink)?;
    let (columns, body) = columns(&rows, sink);
    let mut labels = Vec::new();
    let mut places = Vec::new();
    for row in body {
        if let Some((label, place)) = point(row, columns, style, sink) {
            labels.push(label);
            places.push(place);
        }
    }
    if columns.label.is_some() {
        check_labels(&labels, sink);
    }
    if body.len() < 2 {
        let end = rows.last().map_or(0, |row| row.end);
        let mend = "Paste a line with x and y for each stop.";
        sink.error(end..end, "too-few-stops", "a round needs at least two stops", mend);
    }
    if sink.errors() > 0 {
        return None;
    }
    let labels = match columns.label {
        Some(_) => labels.iter().map(|cell| cell.text.to_string()).collect(),
        None => counted(places.len()),
    };
    let square = square(labels, &places);
    let float = |number: &Number| number.to_f64().value() + 0.0;
    let places = places.iter().map(|(x, y)| (float(x), float(y))).collect();
    Some(RoundTrip {
        title,
        unit: String::new(),
        square,
        points: Some(Points { places, geographic: false }),
        notes: vec!["The distance of two points is Euclidean, rounded to two decimals.".to_owned()],
        how: format!("points in the plane, cells separated by {}", style.separator.name()),
    })
}

/// The columns, from a heading where there is one, and the rows below it.
fn columns<'r, 'a>(rows: &'r [Row<'a>], sink: &mut Complaints) -> (Columns, &'r [Row<'a>]) {
    let width = |row: &Row| row.cells.len();
    let texts = |row: &Row| row.cells.iter().map(|c| c.text.to_string()).collect::<Vec<_>>();
    let Some(first) = rows.first() else {
        return (Columns { label: None, x: 0, y: 1, width: 2 }, rows);
    };
    if let Some((x, y)) = heading(&texts(first)) {
        for cell in &first.cells {
            refuse_degrees(cell, sink);
        }
        let label = (0..width(first)).find(|&column| column != x && column != y);
        return (Columns { label, x, y, width: width(first) }, &rows[1..]);
    }
    let longest = rows.iter().map(width).filter(|w| matches!(w, 2 | 3)).max().unwrap_or(3);
    let label = (longest == 3).then_some(0);
    let columns = Columns { label, x: longest - 2, y: longest - 1, width: longest };
    (columns, rows)
}

fn refuse_degrees(cell: &Cell, sink: &mut Complaints) {
    let name = cell.text.to_ascii_lowercase();
    if ["lon", "lng", "lat", "longitude", "latitude"].contains(&name.as_str()) {
        let message = format!("`{}` is in degrees, which are no plane distances", cell.text);
        let mend = "Give x and y in a plane grid, or a TSPLIB file with EDGE_WEIGHT_TYPE: GEO.";
        sink.error(cell.span.clone(), "degrees", message, mend);
    }
}

fn point<'r, 'a>(
    row: &'r Row<'a>,
    columns: Columns,
    style: Style,
    sink: &mut Complaints,
) -> Option<(&'r Cell<'a>, (Number, Number))> {
    if row.cells.len() != columns.width {
        let message = format!(
            "{}, where {} are expected",
            plural(row.cells.len(), "cell", "cells"),
            columns.width
        );
        let start = row.cells.first().map_or(row.end, |cell| cell.span.start);
        let mend = "Write each stop as its label, x and y, or all as x and y.";
        sink.error(start..row.end, "row-length", message, mend);
        return None;
    }
    let x = coordinate(&row.cells[columns.x], style, sink);
    let y = coordinate(&row.cells[columns.y], style, sink);
    Some((&row.cells[columns.label.unwrap_or(0)], (x?, y?)))
}

fn coordinate(cell: &Cell, style: Style, sink: &mut Complaints) -> Option<Number> {
    match parse(&cell.text, style.decimal_comma) {
        Ok(number) => Some(number),
        Err(_) if is_blank(&cell.text) => {
            let mend = "Every stop needs x and y.";
            sink.error(cell.span.clone(), "blank", "a coordinate is missing here", mend);
            None
        }
        Err(_) if sink.is_full() => {
            sink.count_error();
            None
        }
        Err(why) => {
            let message = format!("`{}` is not a number", excerpt(&cell.text));
            sink.error(cell.span.clone(), "not-a-number", message, why.mend());
            None
        }
    }
}

fn check_labels(labels: &[&Cell], sink: &mut Complaints) {
    let mut seen = BTreeMap::new();
    for cell in labels {
        if cell.text.is_empty() {
            let mend = "Give every stop a name, or none.";
            sink.error(cell.span.clone(), "label-missing", "a label is missing here", mend);
        } else if seen.insert(&cell.text, ()).is_some() {
            let message = format!("the label `{}` is given twice", excerpt(&cell.text));
            sink.error(cell.span.clone(), "label-twice", message, "Labels must tell stops apart.");
        }
    }
}

fn square(labels: Vec<String>, places: &[(Number, Number)]) -> Square {
    let mut square = Square::empty(labels);
    for (i, from) in places.iter().enumerate() {
        for (j, to) in places.iter().enumerate().skip(i + 1) {
            let value = distance(from, to);
            square.put(i, j, Some(value.clone()));
            square.put(j, i, Some(value));
        }
    }
    square
}

/// √(Δx² + Δy²) rounded half up to hundredths: with s = ⌊√(4·10⁴·(Δx² + Δy²))⌋, which is
/// ⌊2·100·d⌋, the hundredths are ⌊(s + 1)/2⌋.
fn distance(from: &(Number, Number), to: &(Number, Number)) -> Number {
    let (dx, dy) = (&from.0 - &to.0, &from.1 - &to.1);
    let squared = (&dx * &dx + &dy * &dy) * RBig::from(40_000_u32);
    let doubled = UBig::try_from(squared.floor()).map_or(UBig::ZERO, |whole| whole.sqrt());
    RBig::from_parts(IBig::from((doubled + 1_u8) / 2_u8), UBig::from(100_u8))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::number::number_text;
    use crate::{Reader, read};
    use proptest::prelude::*;

    fn between(from: (&str, &str), to: (&str, &str)) -> String {
        let point = |(x, y): (&str, &str)| (parse(x, false).unwrap(), parse(y, false).unwrap());
        number_text(&distance(&point(from), &point(to)))
    }

    #[test]
    fn distances_are_rounded_half_up() {
        assert_eq!(between(("0", "0"), ("3", "4")), "5");
        assert_eq!(between(("0", "0"), ("1", "1")), "1.41");
        assert_eq!(between(("0", "0"), ("0.005", "0")), "0.01");
        assert_eq!(between(("0", "0"), ("0.0049", "0")), "0");
        assert_eq!(between(("-1/3", "0"), ("1/3", "0")), "0.67");
    }

    #[test]
    fn forms_of_points() {
        for text in [
            "a 0 0\nb 3 4\nc 3 0",
            "stop;y;x\na;0;0\nb;4;3\nc;0;3",
            "a,0,0\nb,3,4\nc,3,0",
            "a\t0,0\t0\nb\t3,0\t4\nc\t3\t0",
        ] {
            let reading = read(text, None);
            assert_eq!(reading.reader, Reader::Points, "{text}");
            let instance = reading.instance.unwrap();
            let points = instance.points.as_ref().unwrap();
            assert_eq!(points.places, [(0.0, 0.0), (3.0, 4.0), (3.0, 0.0)]);
            let matrix: Vec<_> = instance.matrix().into_iter().flatten().map(number_text).collect();
            assert_eq!(matrix, ["5", "3", "5", "4", "3", "4"]);
        }
    }

    #[test]
    fn broken_points_are_all_named() {
        let reading = read("a 0 0\nb 1O 4\nc 3\na 5 6\nd 7 -", Some(Reader::Points));
        assert!(reading.instance.is_none());
        let found: Vec<_> = reading.complaints.iter().map(|c| (c.line, c.column, c.code)).collect();
        assert_eq!(
            found,
            [(2, 3, "not-a-number"), (3, 1, "row-length"), (4, 1, "label-twice"), (5, 5, "blank")]
        );
    }

    #[test]
    fn degrees_are_refused() {
        let reading = read("stop lat lon\na 50 10\nb 51 11", None);
        assert_eq!(reading.complaints[0].code, "degrees");
    }

    proptest! {
        #[test]
        fn the_rounding_is_the_nearest(x in -2000_i64..2000, y in -2000_i64..2000) {
            let origin = (RBig::ZERO, RBig::ZERO);
            let there = (RBig::from_parts(x.into(), 7_u8.into()), RBig::from(y));
            let found = distance(&origin, &there);
            let half = RBig::from_parts(1.into(), 200_u8.into());
            let squared = &there.0 * &there.0 + &there.1 * &there.1;
            let (low, high) = (&found - &half, &found + &half);
            prop_assert!(low < RBig::ZERO || &low * &low <= squared);
            prop_assert!(squared < &high * &high);
        }
    }
}
