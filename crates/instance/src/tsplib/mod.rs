//! TSPLIB files of type TSP, ATSP and CVRP (Reinelt, ORSA Journal on Computing 3, 1991, 376-384).

mod distance;
mod explicit;
mod file;
mod routing;
#[cfg(test)]
mod tests;

use std::collections::BTreeSet;

use crate::MAX_STOPS;
use crate::cells::{Cell, Separator, split};
use crate::complaint::{Complaints, excerpt, grouped};
use crate::finish::RoundTrip;
use crate::instance::Points;
use crate::number::parse;
use crate::square::{Square, counted};
use crate::text::Line;

pub(crate) use distance::Rule;
use explicit::Format;
use file::File;

pub(crate) use file::is_telling;

/// Reads a TSPLIB file. O(n²).
pub(crate) async fn read(text: &str, sink: &mut Complaints<'_>) -> Option<RoundTrip> {
    let file = File::scan(text, sink);
    check_type(&file, sink)?;
    let n = dimension(&file, sink);
    let (rule, rule_line) = weight_rule(&file, sink)?;
    let n = n?;
    let coordinates = file.section("NODE_COORD_SECTION").map(|rows| places(rows, n, sink));
    let display = file.section("DISPLAY_DATA_SECTION").map(|rows| places(rows, n, sink));
    let (square, how) = match rule {
        None => explicit_square(&file, n, sink).await?,
        Some(rule) => {
            let Some(nodes) = coordinates.as_ref() else {
                let message = "the coordinates are missing";
                let mend = "Add a NODE_COORD_SECTION with a line for each stop.";
                sink.error(rule_line.span(), "section-missing", message, mend);
                return None;
            };
            let nodes = nodes.as_ref()?;
            let value = |i: usize, j: usize| rule.between(nodes.places[i], nodes.places[j]).into();
            let square = Square::of(nodes.labels.clone(), value, &sink.pace()).await;
            (square, rule.name().to_owned())
        }
    };
    let geographic = rule == Some(Rule::Geo);
    let points = points(coordinates.flatten(), display.flatten(), geographic);
    let mut notes = Vec::new();
    let tables = match file.value("TYPE") {
        Some("CVRP") => routing::tables(&file, &square.labels, &mut notes, sink)?,
        _ => Vec::new(),
    };
    Some(RoundTrip {
        title: file.value("NAME").map(excerpt).unwrap_or_default(),
        unit: String::new(),
        square,
        points,
        tables,
        notes,
        how: format!("a TSPLIB file, distances by {how}"),
    })
}

fn points(nodes: Option<Nodes>, display: Option<Nodes>, geographic: bool) -> Option<Points> {
    let geographic = geographic && display.is_none();
    let mut places = display.or(nodes)?.places;
    if geographic {
        // Files give latitude first, in degrees and minutes.
        let turn = |&(lat, lon): &(f64, f64)| (distance::degrees(lon), distance::degrees(lat));
        places = places.iter().map(turn).collect();
    }
    Some(Points { places, geographic })
}

/// None where the file is no instance at all.
fn check_type(file: &File, sink: &mut Complaints) -> Option<()> {
    let Some((value, line)) = file.keyword("TYPE") else { return Some(()) };
    if value == "TOUR" {
        let mend = "Paste the instance that it is a tour of.";
        sink.error(line.span(), "type", "this is a tour, no instance", mend);
        return None;
    }
    if !["TSP", "ATSP", "CVRP"].contains(&value) {
        let message = format!("files of type `{}` are not read", excerpt(value));
        sink.error(line.span(), "type", message, "Types that are read: TSP, ATSP and CVRP.");
    }
    Some(())
}

fn dimension(file: &File, sink: &mut Complaints) -> Option<usize> {
    let Some((value, line)) = file.keyword("DIMENSION") else {
        let mend = "Add a line `DIMENSION: n` with the number of stops.";
        sink.error(0..0, "keyword-missing", "DIMENSION is missing", mend);
        return None;
    };
    match value.parse::<usize>() {
        Ok(n) if (2..=MAX_STOPS).contains(&n) => Some(n),
        _ => {
            let message = format!("`{}` stops cannot be read", excerpt(value));
            let mend = format!("Give a whole number from 2 to {}.", grouped(MAX_STOPS));
            sink.error(line.span(), "dimension", message, mend);
            None
        }
    }
}

/// The rule that computes distances, or none where they are listed; with its line.
fn weight_rule<'a>(file: &'a File, sink: &mut Complaints) -> Option<(Option<Rule>, Line<'a>)> {
    let Some((value, line)) = file.keyword("EDGE_WEIGHT_TYPE") else {
        let mend = format!("Add a line with one of: EXPLICIT, {}.", Rule::names());
        sink.error(0..0, "keyword-missing", "EDGE_WEIGHT_TYPE is missing", mend);
        return None;
    };
    let rule = Rule::from_name(value);
    if rule.is_none() && value != "EXPLICIT" {
        let message = format!("distances by `{}` are not known", excerpt(value));
        let mend = format!("Known are EXPLICIT, {}.", Rule::names());
        sink.error(line.span(), "weight-type", message, mend);
        return None;
    }
    Some((rule, line))
}

async fn explicit_square(
    file: &File<'_>,
    n: usize,
    sink: &mut Complaints<'_>,
) -> Option<(Square, String)> {
    let Some((value, line)) = file.keyword("EDGE_WEIGHT_FORMAT") else {
        let mend = format!("Add a line with one of: {}.", Format::names());
        sink.error(0..0, "keyword-missing", "EDGE_WEIGHT_FORMAT is missing", mend);
        return None;
    };
    let Some(format) = Format::from_name(value) else {
        let message = format!("the layout `{}` is not known", excerpt(value));
        let mend = format!("Known are {}.", Format::names());
        sink.error(line.span(), "weight-format", message, mend);
        return None;
    };
    let Some(rows) = file.section("EDGE_WEIGHT_SECTION") else {
        let mend = "Add an EDGE_WEIGHT_SECTION with the distances.";
        sink.error(line.span(), "section-missing", "the distances are missing", mend);
        return None;
    };
    let square = explicit::square(rows, format, counted(n), sink).await?;
    Some((square, format!("list ({})", format.name())))
}

/// Numbered stops with two coordinates each.
struct Nodes {
    labels: Vec<String>,
    places: Vec<(f64, f64)>,
}

/// Reads lines `label x y`, as many as there are stops.
fn places(rows: &[Line], n: usize, sink: &mut Complaints) -> Option<Nodes> {
    let mut seen = BTreeSet::new();
    let mut nodes = Nodes { labels: Vec::new(), places: Vec::new() };
    let before = sink.errors();
    for line in rows {
        if sink.is_full() {
            sink.count_error();
            continue;
        }
        let cells = split(line, Separator::Space);
        let [label, x, y] = cells.as_slice() else {
            let message = "a stop needs its number and two coordinates";
            sink.error(line.span(), "row-length", message, "Write `number x y`.");
            continue;
        };
        if !seen.insert(label.text.to_string()) {
            let message = format!("stop `{}` is given twice", excerpt(&label.text));
            sink.error(label.span.clone(), "label-twice", message, "Number the stops from 1.");
        }
        if let (Some(x), Some(y)) = (coordinate(x, sink), coordinate(y, sink)) {
            nodes.labels.push(label.text.to_string());
            nodes.places.push((x, y));
        }
    }
    if rows.len() != n {
        let end = rows.last().map_or(0, Line::end);
        let message =
            format!("the section has {} lines, where {n} are expected", grouped(rows.len()));
        let mend = "Give a line for each stop, or mend DIMENSION.";
        sink.error(end..end, "row-count", message, mend);
    }
    (sink.errors() == before).then_some(nodes)
}

fn coordinate(cell: &Cell, sink: &mut Complaints) -> Option<f64> {
    match parse(&cell.text, false) {
        Ok(number) => Some(number.to_f64().value() + 0.0),
        Err(_) => {
            let message = format!("`{}` is not a number", excerpt(&cell.text));
            let mend = "Write a coordinate as a decimal number.";
            sink.error(cell.span.clone(), "not-a-number", message, mend);
            None
        }
    }
}
