//! Named blocks: a heading line, its rows, a blank line.
//!
//! ```text
//! V                    c by i, j            Q = 40
//! Ash Birch Cedar      Ash Birch 12         r = Ash
//! ```
//!
//! A bare name heads a list of labels, or of integers when every cell is a whole number. After
//! `by`, rows with as many cells as indices make a set of tuples, rows with one more cell
//! numbers over them, or labels, which are kept as tuples that end with them (`o by k`: the
//! origin of each k). `name = value` is a number or an element and needs no blank line.

use std::collections::BTreeMap;
use std::ops::Range;

use crate::MAX_STOPS;
use crate::cells::{Cell, Separator, is_word, number, split, style};
use crate::complaint::{Complaints, excerpt, grouped, plural};
use crate::facts;
use crate::instance::{Datum, Instance, Reader};
use crate::number::{number_text, parse};
use crate::pace::Pace;
use crate::square::Square;
use crate::text::{Line, lines};

/// More cells than this are refused.
const MAX_ENTRIES: usize = 4_000_000;
/// More blocks than this are refused.
const MAX_BLOCKS: usize = 1_000;

enum Heading<'a> {
    List(&'a str),
    By(&'a str, usize),
    Equation(&'a str, Line<'a>),
}

/// Whether a line is a heading `name by i, j`.
pub(crate) fn is_by_heading(line: &str) -> bool {
    matches!(heading(Line { text: line, start: 0 }), Some(Heading::By(..)))
}

/// Whether a line is `name = value`.
pub(crate) fn is_equation(line: &str) -> bool {
    matches!(heading(Line { text: line, start: 0 }), Some(Heading::Equation(..)))
}

fn is_name(text: &str) -> bool {
    let mut chars = text.chars();
    chars.next().is_some_and(char::is_alphabetic)
        && chars.all(|c| c.is_alphanumeric() || "_^{}\\'".contains(c))
}

fn heading(line: Line<'_>) -> Option<Heading<'_>> {
    let text = line.text.trim();
    if let Some((name, _)) = text.split_once('=') {
        let value = &line.text[line.text.find('=')? + 1..];
        let start = line.end() - value.len();
        let filled = !value.trim().is_empty();
        return (is_name(name.trim()) && filled)
            .then_some(Heading::Equation(name.trim(), Line { text: value, start }));
    }
    let mut words = text.split_whitespace();
    let name = words.next().filter(|name| is_name(name))?;
    if words.next().is_none() {
        return Some(Heading::List(name));
    }
    let indices = text[name.len()..].trim_start().strip_prefix("by")?;
    if !indices.starts_with(char::is_whitespace) {
        return None;
    }
    let mut arity = 0;
    for index in indices.split(|c: char| c == ',' || c.is_whitespace()) {
        if !index.is_empty() && !is_name(index) {
            return None;
        }
        arity += usize::from(!index.is_empty());
    }
    (arity > 0).then_some(Heading::By(name, arity))
}

/// Reads blocks. O(length · log).
pub(crate) async fn read(text: &str, sink: &mut Complaints<'_>) -> Option<(Instance, Vec<String>)> {
    let all: Vec<Line> = lines(text).into_iter().filter(|line| !line.is_remark()).collect();
    let mut instance = Instance::new(Reader::Blocks);
    let mut entries = 0;
    let mut at = 0;
    while at < all.len() {
        let line = all[at];
        at += 1;
        if line.is_blank() {
            continue;
        }
        let body = body(&all, at);
        let (name, datum) = match heading(line) {
            Some(Heading::Equation(name, value)) => (name, equation(value, sink)),
            found => {
                at = body.end;
                let rows = &all[body];
                match found {
                    Some(Heading::List(name)) => (name, list(rows, &mut entries)),
                    Some(Heading::By(name, arity)) => {
                        (name, by(rows, arity, &mut entries, sink).await)
                    }
                    _ => {
                        no_heading(line, sink);
                        continue;
                    }
                }
            }
        };
        let blocks = instance.data().count();
        if entries > MAX_ENTRIES || blocks >= MAX_BLOCKS {
            let message = format!(
                "there are more than {} cells or {} blocks",
                grouped(MAX_ENTRIES),
                grouped(MAX_BLOCKS)
            );
            sink.error(line.span(), "too-large", message, "Paste a smaller instance.");
            return None;
        }
        if instance.get(name).is_some() {
            let message = format!("`{}` is given twice", excerpt(name));
            sink.error(line.span(), "name-twice", message, "Join the blocks, or rename one.");
        }
        instance.set(name, datum);
    }
    if instance.data().next().is_none() && sink.errors() == 0 {
        let mend = "Write a name, rows below it, and a blank line after them.";
        sink.error(0..0, "nothing-to-read", "there is no block", mend);
    }
    let mut facts = describe_all(&mut instance, true, &sink.pace()).await;
    facts.push("Read as named blocks; every line was read.".to_owned());
    Some((instance, facts))
}

fn no_heading(line: Line, sink: &mut Complaints) {
    if sink.is_full() {
        return sink.count_error();
    }
    let message = format!("`{}` heads no block", excerpt(line.text.trim()));
    let mend = "Head a block with `name`, `name by i, j` or `name = value`.";
    sink.error(line.span(), "no-heading", message, mend);
}

/// The rows below a heading: up to a blank line.
fn body(all: &[Line], from: usize) -> Range<usize> {
    let length = all[from..].iter().position(Line::is_blank).unwrap_or(all.len() - from);
    from..from + length
}

fn equation(value: Line, sink: &mut Complaints) -> Datum {
    let cells = split(&value, Separator::Space);
    if let [cell] = cells.as_slice() {
        for comma in [false, true] {
            if let Ok(number) = parse(&cell.text, comma) {
                sink.met(cell, comma, &number);
                return Datum::Number(number);
            }
        }
        return Datum::Element(cell.text.to_string());
    }
    let span = cells.first().map_or(value.start, |c| c.span.start)..value.end();
    let mend = "Write one number or one label; put a label with blanks in double quotes.";
    sink.error(span, "one-value", "more than one value stands here", mend);
    Datum::Element(String::new())
}

fn list(lines: &[Line], entries: &mut usize) -> Datum {
    let style = style(lines);
    let rows: Vec<_> = lines.iter().map(|line| split(line, style.separator)).collect();
    *entries += rows.iter().map(Vec::len).sum::<usize>();
    let cells: Vec<String> = rows
        .into_iter()
        .flatten()
        .map(|cell| cell.text.into_owned())
        .filter(|text| !text.is_empty())
        .collect();
    let integers: Option<Vec<i64>> = cells.iter().map(|text| text.parse().ok()).collect();
    match integers {
        Some(integers) if !integers.is_empty() => Datum::Integers(integers),
        _ => Datum::Labels(cells),
    }
}

async fn by(
    lines: &[Line<'_>],
    arity: usize,
    entries: &mut usize,
    sink: &mut Complaints<'_>,
) -> Datum {
    let style = style(lines);
    let mut rows = Vec::with_capacity(lines.len());
    for line in lines {
        let cells = split(line, style.separator);
        sink.spend(cells.len()).await;
        *entries += cells.len();
        rows.push(cells);
    }
    let wide = rows.iter().filter(|row| row.len() == arity + 1).count();
    let narrow = rows.iter().filter(|row| row.len() == arity).count();
    let numbers = wide > narrow;
    let width = arity + usize::from(numbers);
    let words = |row: &&Vec<Cell>| {
        row.len() == width && row.last().is_some_and(|c| is_word(&c.text, style.decimal_comma))
    };
    let labels = numbers && 2 * rows.iter().filter(words).count() > wide;
    let (arity, numbers) = if labels { (width, false) } else { (arity, numbers) };
    let mut seen: BTreeMap<Vec<String>, Range<usize>> = BTreeMap::new();
    let mut tuples = Vec::new();
    let mut cells = BTreeMap::new();
    for (line, row) in lines.iter().zip(&rows) {
        sink.spend(4 * row.len()).await;
        if row.len() != width {
            wrong_width(*line, row.len(), width, sink);
            continue;
        }
        let key: Vec<String> = row[..arity].iter().map(|cell| cell.text.to_string()).collect();
        if let Some(first) = seen.insert(key.clone(), line.span()) {
            given_twice(*line, &key, &first, sink);
            continue;
        }
        if numbers {
            if let Some(number) = number(&row[arity], style.decimal_comma, sink) {
                cells.insert(key, number);
            }
        } else {
            tuples.push(key);
        }
    }
    if numbers { Datum::Table { arity, cells } } else { Datum::Tuples { arity, rows: tuples } }
}

fn wrong_width(line: Line, found: usize, width: usize, sink: &mut Complaints) {
    if sink.is_full() {
        return sink.count_error();
    }
    let message = format!("{}, where {width} are expected", plural(found, "cell", "cells"));
    let mend = "Write one label for each index, and a number where the block holds numbers.";
    sink.error(line.span(), "row-length", message, mend);
}

fn given_twice(line: Line, key: &[String], first: &Range<usize>, sink: &mut Complaints) {
    if sink.is_full() {
        return sink.count_error();
    }
    let message = format!("({}) is given twice", excerpt(&key.join(", ")));
    let mend = format!("Keep one of the lines; the first is line {}.", sink.place(first.start).0);
    sink.error(line.span(), "tuple-twice", message, mend);
}

/// Says what each datum is (tables only where `tables`); where `V` and `c` make a round trip, adds the habits and what is
/// said of round trips.
pub(crate) async fn describe_all(
    instance: &mut Instance,
    tables: bool,
    pace: &Pace,
) -> Vec<String> {
    let shown = |(_, datum): &(&str, &Datum)| tables || !matches!(datum, Datum::Table { .. });
    let mut sentences: Vec<String> =
        instance.data().filter(shown).map(|(name, datum)| describe(name, datum)).collect();
    if let Some(square) = square(instance) {
        let trip = Instance::round_trip_in_slices(square.labels.clone(), &square.cells, pace).await;
        for name in &trip.assumed {
            if let (None, Some(datum)) = (instance.get(name), trip.get(name)) {
                instance.assume(name, datum.clone());
            }
        }
        sentences.extend(match instance.ends() {
            Some((start, end)) => facts::of_path(&square, (start, end), pace).await,
            None => facts::of(&square, "", pace).await,
        });
    }
    sentences
}

fn describe(name: &str, datum: &Datum) -> String {
    let over =
        |arity: usize| if arity == 1 { "one index".into() } else { format!("{arity} indices") };
    match datum {
        Datum::Labels(labels) => {
            format!("{name} is a set of {}.", plural(labels.len(), "label", "labels"))
        }
        Datum::Integers(values) => {
            format!("{name} is a set of {}.", plural(values.len(), "integer", "integers"))
        }
        Datum::Tuples { arity, rows } => format!(
            "{name} is a set of {} of {}.",
            plural(rows.len(), "tuple", "tuples"),
            plural(*arity, "label", "labels")
        ),
        Datum::Number(number) => format!("{name} is the number {}.", number_text(number)),
        Datum::Element(label) => format!("{name} is the element {}.", excerpt(label)),
        Datum::Table { arity, cells } => format!(
            "{name} holds {} over {}.",
            plural(cells.len(), "number", "numbers"),
            over(*arity)
        ),
    }
}

/// The distances `c` over `V`, when every index of `c` is in `V`.
fn square(instance: &Instance) -> Option<Square> {
    let Some(Datum::Table { arity: 2, cells }) = instance.get("c") else { return None };
    let labels = match instance.get("V") {
        Some(Datum::Labels(labels)) => labels.clone(),
        Some(Datum::Integers(values)) => values.iter().map(ToString::to_string).collect(),
        _ => return None,
    };
    let places: BTreeMap<&str, usize> =
        labels.iter().enumerate().map(|(place, label)| (label.as_str(), place)).collect();
    if labels.len() < 2 || labels.len() > MAX_STOPS || places.len() != labels.len() {
        return None;
    }
    let mut square = Square::empty(labels.clone());
    for (pair, number) in cells {
        let (i, j) = (places.get(pair[0].as_str())?, places.get(pair[1].as_str())?);
        square.put(*i, *j, Some(number.clone()));
    }
    Some(square)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::read;

    const TEXT: &str = "V\nAsh Birch Cedar\n\nE by i, j\nAsh Birch\nBirch Cedar\n\n\
        c by i, j\nAsh Birch 12\nBirch Cedar 7\n\nd by i\nAsh;1,5\n\nT\n1 2 3\n\n\
        Q = 40\nr = Ash\n";

    #[test]
    fn the_documented_example_is_read() {
        let reading = read(TEXT, None);
        assert_eq!((reading.reader, reading.complaints.as_slice()), (Reader::Blocks, &[][..]));
        let instance = reading.instance.unwrap();
        let label = |text: &str| text.to_owned();
        assert_eq!(instance.stops(), ["Ash", "Birch", "Cedar"]);
        let rows = vec![vec![label("Ash"), label("Birch")], vec![label("Birch"), label("Cedar")]];
        assert_eq!(instance.get("E"), Some(&Datum::Tuples { arity: 2, rows: rows.clone() }));
        assert_eq!(instance.get("T"), Some(&Datum::Integers(vec![1, 2, 3])));
        assert_eq!(instance.get("Q"), Some(&Datum::Number(40.into())));
        assert_eq!(instance.get("r"), Some(&Datum::Element(label("Ash"))));
        assert_eq!(instance.get("A"), Some(&Datum::Tuples { arity: 2, rows }));
        assert_eq!(instance.assumed.iter().collect::<Vec<_>>(), ["A"]);
        let half = crate::Number::from_parts(3.into(), 2_u8.into());
        let cells = BTreeMap::from([(vec![label("Ash")], half)]);
        assert_eq!(instance.get("d"), Some(&Datum::Table { arity: 1, cells }));
        assert!(reading.facts.contains(&label("V is a set of 3 labels.")), "{:?}", reading.facts);
    }

    /// The origin of each commodity was "not a number", and could be given as pairs only.
    #[test]
    fn labels_over_indices_are_tuples_that_end_with_them() {
        let reading = read("K\none two\n\no by k\none Ash\ntwo Birch\n", None);
        let rows = [["one", "Ash"], ["two", "Birch"]].map(|row| row.map(str::to_owned).to_vec());
        let wanted = Datum::Tuples { arity: 2, rows: rows.to_vec() };
        assert_eq!(reading.instance.unwrap().get("o"), Some(&wanted));
    }

    /// Facts on round trips (the triangle inequality, "there is no round") were once told of
    /// data for a path, where most pairs have no arc and nothing leads back.
    #[test]
    fn a_path_is_not_described_as_a_round_trip() {
        let text = "V\nAsh Birch Cedar\n\nc by i, j\nAsh Birch 12\nBirch Cedar -7\n\n";
        let facts = |ends: &str| read(&format!("{text}{ends}"), None).facts.join(" ");
        let trip = facts("");
        assert!(trip.contains("Triangle inequality") && trip.contains("no round"), "{trip}");
        let path = facts("s = Ash\nt = Cedar\n");
        assert!(!path.contains("riangle") && !path.contains("round"), "{path}");
        assert!(path.contains("3 stops, 2 drives."), "{path}");
        assert!(path.contains("Cedar can be reached from Ash, in 2 drives or more."), "{path}");
        assert!(path.contains("negative"), "{path}");
        let back = facts("s = Cedar\nt = Ash\n");
        assert!(back.contains("Ash cannot be reached from Cedar: there is no path."), "{back}");
        assert!(facts("s = Ash\nt = Dover\n").contains("no round"), "an end that is no stop");
    }

    #[test]
    fn every_broken_line_is_named() {
        let text = "12 34\n5\n\nc by i, j\na b 1\na b 2\nb 3\nb c x\nd e 5\n\nQ = 1 2\n\nc\na\n";
        let reading = read(text, Some(Reader::Blocks));
        let found: Vec<_> = reading.complaints.iter().map(|c| (c.line, c.code)).collect();
        assert_eq!(
            found,
            [
                (1, "no-heading"),
                (6, "tuple-twice"),
                (7, "row-length"),
                (8, "not-a-number"),
                (11, "one-value"),
                (13, "name-twice")
            ]
        );
        assert_eq!(reading.complaints[3].column, 5);
        assert!(reading.instance.is_none());
    }

    #[test]
    fn headings_are_told_from_rows() {
        assert!(is_by_heading("c by i, j") && is_by_heading(" N_i by k "));
        assert!(
            !is_by_heading("Stoke by 3") && !is_by_heading("c bye i") && !is_by_heading("c by")
        );
        assert!(is_equation("Q = 40") && !is_equation("= 40") && !is_equation("a b = 3"));
        assert!(!is_equation("Q ="));
    }
}
