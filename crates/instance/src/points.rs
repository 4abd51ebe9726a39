//! Points: `label x y` or `x y` a line in the plane, `label latitude longitude` or `latitude
//! longitude` on the globe. A plane distance is Euclidean, rounded half up to two decimals,
//! exactly; for the others see [`crate::geo`]. Further columns below headings are tables.

use std::collections::BTreeMap;

use dashu_int::{IBig, UBig, ops::SquareRoot};
use dashu_ratio::RBig;

use crate::cells::{Cell, Style, is_blank};
use crate::complaint::{Complaints, excerpt, plural};
use crate::extra;
use crate::finish::RoundTrip;
use crate::geo;
use crate::instance::Points;
use crate::matrix::{Row, Table, table};
use crate::number::{Number, parse};
use crate::pace::Pace;
use crate::square::{Square, counted};

const ACROSS: [&str; 3] = ["x", "east", "easting"];
const ALONG: [&str; 3] = ["y", "north", "northing"];
const LONGITUDE: [&str; 6] = ["longitude", "long", "lon", "lng", "λ", "lambda"];
const LATITUDE: [&str; 4] = ["latitude", "lat", "φ", "phi"];

const PLANE_NOTE: &str = "The distance of two points is Euclidean, rounded to two decimals.";

const DEGREES_MEND: &str = "Write decimal degrees, such as 48.2 or -16.37, south and west with a \
    minus.";

/// Two columns of coordinates that a heading names.
#[derive(Clone, Copy, PartialEq, Eq)]
pub(crate) struct Heading {
    across: usize,
    along: usize,
    pub(crate) geographic: bool,
}

/// The columns of coordinates, if a row names them. A unit in brackets after a name is passed
/// over.
pub(crate) fn heading(row: &[impl AsRef<str>]) -> Option<Heading> {
    let find = |words: &[&str]| {
        row.iter().position(|cell| {
            let name = cell.as_ref().split(['(', '[', '.', '°']).next().unwrap_or("").trim();
            words.contains(&name.to_lowercase().as_str())
        })
    };
    let pair = |x: &[&str], y: &[&str], geographic| {
        Some(Heading { across: find(x)?, along: find(y)?, geographic })
    };
    pair(&ACROSS, &ALONG, false).or_else(|| pair(&LONGITUDE, &LATITUDE, true))
}

/// Which cells of a row hold the label and the coordinates.
#[derive(Clone, Copy)]
struct Columns {
    label: Option<usize>,
    x: usize,
    y: usize,
    width: usize,
    geographic: bool,
}

impl Columns {
    fn unused(&self) -> Vec<usize> {
        let used = [Some(self.x), Some(self.y), self.label];
        (0..self.width).filter(|place| !used.contains(&Some(*place))).collect()
    }
}

/// Reads points; as latitude and longitude when `geographic` or when the heading says so. O(n²).
pub(crate) async fn read(
    text: &str,
    geographic: bool,
    sink: &mut Complaints<'_>,
) -> Option<RoundTrip> {
    let Table { title, style, rows } = table(text, sink).await?;
    let (columns, body) = columns(&rows, geographic);
    let mut labels = Vec::new();
    let mut points = Vec::new();
    for row in body {
        if let Some((label, place)) = point(row, columns, style, sink) {
            labels.push(label);
            points.push(place);
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
        None => counted(points.len()),
    };
    let mut notes = notes(columns, body.len() < rows.len());
    let unused = columns.unused();
    let further = if body.len() < rows.len() { &unused[..] } else { &[] };
    let tables = extra::tables((&rows[0], body), (&labels, further), style, &mut notes, sink);
    let float = |number: &Number| number.to_f64().value() + 0.0;
    let places: Vec<_> = points.iter().map(|(x, y)| (float(x), float(y))).collect();
    let pace = sink.pace();
    let (square, what) = if columns.geographic {
        let distance = |from: &(f64, f64), to: &(f64, f64)| geo::distance(*from, *to);
        (square(labels, &places, distance, &pace).await, "points on the globe")
    } else {
        (square(labels, &points, distance, &pace).await, "points in the plane")
    };
    let separator = style.separator.name();
    Some(RoundTrip {
        title,
        unit: if columns.geographic { "km".to_owned() } else { String::new() },
        square,
        points: Some(Points { places, geographic: columns.geographic }),
        tables,
        notes,
        how: format!("{what}, cells separated by {separator}"),
    })
}

/// What is said of the distances.
fn notes(columns: Columns, headed: bool) -> Vec<String> {
    let note = if columns.geographic { geo::NOTE } else { PLANE_NOTE };
    let mut notes = vec![note.to_owned()];
    if columns.geographic && !headed {
        notes.push("Without a heading the first number is the latitude.".to_owned());
    }
    notes
}

/// The columns, from a heading where there is one, and the rows below it.
fn columns<'r, 'a>(rows: &'r [Row<'a>], geographic: bool) -> (Columns, &'r [Row<'a>]) {
    let width = |row: &Row| row.cells.len();
    let texts = |row: &Row| row.cells.iter().map(|c| c.text.to_string()).collect::<Vec<_>>();
    let first = rows.first();
    if let Some((first, found)) = first.and_then(|row| Some((row, heading(&texts(row))?))) {
        let (x, y) = (found.across, found.along);
        let label = (0..width(first)).find(|&column| column != x && column != y);
        let geographic = geographic || found.geographic;
        return (Columns { label, x, y, width: width(first), geographic }, &rows[1..]);
    }
    let longest = rows.iter().map(width).filter(|w| matches!(w, 2 | 3)).max().unwrap_or(3);
    let label = (longest == 3).then_some(0);
    let (first, second) = (longest - 2, longest - 1);
    let (x, y) = if geographic { (second, first) } else { (first, second) };
    (Columns { label, x, y, width: longest, geographic }, rows)
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
    let (x, y) = (&row.cells[columns.x], &row.cells[columns.y]);
    let (across, along) =
        (coordinate(x, columns, style, sink), coordinate(y, columns, style, sink));
    let (across, along) = (across?, along?);
    if columns.geographic {
        let longitude = is_within(x, ("longitude", 180), &across, sink);
        if !is_within(y, ("latitude", 90), &along, sink) || !longitude {
            return None;
        }
    }
    Some((&row.cells[columns.label.unwrap_or(0)], (across, along)))
}

/// Whether degrees are within their limits; complains if not.
fn is_within(
    cell: &Cell,
    (what, most): (&str, i32),
    degrees: &Number,
    sink: &mut Complaints,
) -> bool {
    let (most, least) = (RBig::from(most), RBig::from(-most));
    let within = *degrees >= least && *degrees <= most;
    if !within && sink.is_full() {
        sink.count_error();
    } else if !within {
        let text = excerpt(&cell.text);
        let message = format!("`{text}` is no {what}: it lies between {least} and {most} degrees");
        let mend = "Write decimal degrees, south and west with a minus; perhaps latitude and \
            longitude have changed places.";
        sink.error(cell.span.clone(), "degrees", message, mend);
    }
    within
}

fn coordinate(
    cell: &Cell,
    columns: Columns,
    style: Style,
    sink: &mut Complaints,
) -> Option<Number> {
    match parse(&cell.text, style.decimal_comma) {
        Ok(number) => {
            sink.met(cell, style.decimal_comma, &number);
            Some(number)
        }
        Err(_) if is_blank(&cell.text) => {
            let mend = "Every stop needs both coordinates.";
            sink.error(cell.span.clone(), "blank", "a coordinate is missing here", mend);
            None
        }
        Err(_) if sink.is_full() => {
            sink.count_error();
            None
        }
        Err(why) => {
            let message = format!("`{}` is not a number", excerpt(&cell.text));
            let mend = if columns.geographic { DEGREES_MEND } else { why.mend() };
            sink.error(cell.span.clone(), "not-a-number", message, mend);
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

/// The square of a symmetric distance of points.
async fn square<P>(
    labels: Vec<String>,
    places: &[P],
    distance: impl Fn(&P, &P) -> Number,
    pace: &Pace,
) -> Square {
    let mut square = Square::empty(labels);
    for (i, from) in places.iter().enumerate() {
        pace.spend(32 * (places.len() - i)).await;
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
    use crate::{Datum, Reader, read};
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
    fn latitude_and_longitude() {
        for (text, reader) in [
            ("stop lat lon\na 0 0\nb 0 1\nc 1 0", None),
            ("stop;Longitude (°);Latitude (°)\na;0;0\nb;1,0;0\nc;0;1,0", None),
            ("Lat.,Long.,name\n0,0,a\n0,1,b\n1,0,c", None),
            ("a 0 0\nb 0 1\nc 1 0", Some(Reader::Geographic)),
        ] {
            let reading = read(text, reader);
            assert_eq!(
                (reading.reader, reading.complaints.len()),
                (Reader::Geographic, 0),
                "{text}"
            );
            let instance = reading.instance.unwrap();
            assert_eq!(
                (instance.unit.as_str(), instance.stops().join(" ")),
                ("km", "a b c".into())
            );
            let points = instance.points.as_ref().unwrap();
            assert!(points.geographic);
            assert_eq!(points.places, [(0.0, 0.0), (1.0, 0.0), (0.0, 1.0)]);
            let matrix: Vec<_> = instance.matrix().into_iter().flatten().map(number_text).collect();
            // By Pythagoras on the sphere, cos d = cos² 1°: d = 1.414178° = 157.2496 km.
            assert_eq!(matrix[..2], ["111.195", "111.195"]);
            assert_eq!(matrix[3], "157.25");
            assert!(reading.facts.contains(&geo::NOTE.to_owned()));
        }
    }

    #[test]
    fn degrees_have_limits() {
        let text = "stop lat lon\na 90 -180\nb 90.01 10\nc 5 181\nd 48°12' 16\ne -91 -181";
        let reading = read(text, None);
        assert!(reading.instance.is_none());
        let found: Vec<_> = reading.complaints.iter().map(|c| (c.line, c.column, c.code)).collect();
        assert_eq!(
            found,
            [
                (3, 3, "degrees"),
                (4, 5, "degrees"),
                (5, 3, "not-a-number"),
                (6, 3, "degrees"),
                (6, 7, "degrees")
            ]
        );
        assert_eq!(reading.complaints[2].mend, DEGREES_MEND);
    }

    #[test]
    fn further_columns_are_tables() {
        let text = "stop;x;y;demand (t);street;r\na;0;0;3;Elm;1\nb;3;4;-;Oak;2";
        let reading = read(&text.replace(";r\n", ";due\n"), None);
        assert_eq!(reading.complaints, []);
        let instance = reading.instance.unwrap();
        let cells = BTreeMap::from([(vec!["a".to_owned()], RBig::from(3))]);
        assert_eq!(instance.get("demand"), Some(&Datum::Table { arity: 1, cells }));
        assert!(matches!(instance.get("due"), Some(Datum::Table { .. })));
        assert_eq!((instance.units["demand"].as_str(), instance.get("street")), ("t", None));
        let said = "The column `street` was not read: it holds words, or its heading none.";
        assert!(reading.facts.contains(&said.to_owned()), "{:?}", reading.facts);
        let taken = read(&text.replace("-;Oak", "3O;Oak"), None);
        let found: Vec<_> = taken.complaints.iter().map(|c| (c.line, c.column, c.code)).collect();
        assert_eq!(found, [(1, 28, "name-twice"), (3, 7, "not-a-number")]);
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
