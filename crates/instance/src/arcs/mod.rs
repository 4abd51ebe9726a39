//! Lists of drives: `from to cost` a line, with any number of cost columns.
//!
//! A line `both directions` before the list makes each of its lines two drives; without it a
//! line is one drive, and a list in which no pair is driven both ways is asked about.

mod costs;
#[cfg(test)]
mod tests;

use std::collections::{BTreeMap, BTreeSet};
use std::ops::Range;

use crate::cells::{Cell, Style, is_blank, is_word, split, style_in_slices};
use crate::complaint::{Complaints, excerpt, grouped, plural};
use crate::instance::{Datum, Instance, Reader};
use crate::matrix::{Row, is_title};
use crate::number::{Number, parse};
use crate::pace::Pace;
use crate::square::Square;
use crate::text::{Line, lines};
use crate::{MAX_STOPS, facts};

use costs::Costs;

const ONE_WAY: [&str; 4] = ["directed", "one way", "one-way", "one direction"];
const BOTH_WAYS: [&str; 4] = ["undirected", "both directions", "both ways", "two-way"];
const BOTH_MEND: &str = "If every line holds for both directions, put a line `both directions` \
    above the list; if not, a line `directed`.";

/// Whether a line says how a list's lines are driven, and whether both ways.
pub(crate) fn direction(line: &str) -> Option<bool> {
    let words = line.split_whitespace().collect::<Vec<_>>().join(" ").to_lowercase();
    let words = words.trim_end_matches(':');
    let both = BOTH_WAYS.contains(&words);
    (both || ONE_WAY.contains(&words)).then_some(both)
}

/// Whether two headings name the ends of a drive.
pub(crate) fn are_ends(from: &str, to: &str) -> bool {
    const ENDS: [(&str, &str); 10] = [
        ("from", "to"),
        ("tail", "head"),
        ("start", "end"),
        ("origin", "destination"),
        ("source", "target"),
        ("source", "destination"),
        ("i", "j"),
        ("u", "v"),
        ("node1", "node2"),
        ("end1", "end2"),
    ];
    ENDS.contains(&(from.to_lowercase().as_str(), to.to_lowercase().as_str()))
}

/// A list on the way to an instance.
struct List {
    title: String,
    /// What the text says of directions, if anything.
    both: Option<bool>,
    labels: Vec<String>,
    places: BTreeMap<String, usize>,
    /// Each drive with the span of its line.
    drives: BTreeMap<(usize, usize), Range<usize>>,
    order: Vec<(usize, usize)>,
    /// For each cost column, the costs in the order of the drives.
    values: Vec<Vec<Number>>,
}

/// Reads a list of drives. O(length · log + n²).
pub(crate) async fn read(text: &str, sink: &mut Complaints<'_>) -> Option<(Instance, Vec<String>)> {
    let (mut list, kept) = head(text);
    let style = style_in_slices(&kept, &sink.pace()).await;
    let mut rows = Vec::with_capacity(kept.len());
    for line in &kept {
        rows.push(Row { cells: split(line, style.separator), end: line.end() });
        sink.spend(rows[rows.len() - 1].cells.len()).await;
    }
    for row in &mut rows {
        while row.cells.len() > 2 && row.cells.last().is_some_and(|cell| cell.text.is_empty()) {
            row.cells.pop();
        }
    }
    let headline = costs::headline(&mut rows, style);
    let Some(first) = rows.first().map(|row| start(row)..row.end) else {
        let mend = "Paste a line `from to cost` for each drive.";
        sink.error(0..0, "nothing-to-read", "there is no drive", mend);
        return None;
    };
    let (mut costs, mut notes) = costs::find(&headline, &rows, style, sink);
    list.values = vec![Vec::new(); costs.columns.len()];
    for row in &rows {
        sink.spend(4 * row.cells.len()).await;
        list.drive(row, &costs, style, sink);
        if list.labels.len() > MAX_STOPS {
            let message = format!("there are more than {} stops", grouped(MAX_STOPS));
            sink.error(start(row)..row.end, "too-large", message, "Paste a smaller instance.");
            return None;
        }
    }
    if sink.errors() > 0 {
        return None;
    }
    if list.both.is_none() && list.is_one_way() {
        let message = "no pair is driven both ways: each line was taken for one direction only";
        sink.warn(first, "one-way", message, BOTH_MEND);
    }
    let (instance, sentences) = list.finish(&mut costs, &sink.pace()).await;
    notes.extend(sentences);
    notes.push(format!(
        "Read as a list of drives, cells separated by {}; every line was read.",
        style.separator.name()
    ));
    Some((instance, notes))
}

/// The title and the direction that stand above a list, and its lines.
fn head(text: &str) -> (List, Vec<Line<'_>>) {
    let all = lines(text);
    let mut list = List {
        title: String::new(),
        both: None,
        labels: Vec::new(),
        places: BTreeMap::new(),
        drives: BTreeMap::new(),
        order: Vec::new(),
        values: Vec::new(),
    };
    let mut kept = Vec::new();
    for (number, line) in all.iter().enumerate() {
        let above = kept.is_empty();
        if line.is_blank() || line.is_remark() {
            continue;
        }
        if let Some(both) = direction(line.text).filter(|_| above) {
            list.both = Some(both);
        } else if above && list.title.is_empty() && is_title(&all[number..]) {
            list.title = line.text.trim().chars().take(120).collect();
        } else {
            kept.push(*line);
        }
    }
    (list, kept)
}

fn start(row: &Row) -> usize {
    row.cells.first().map_or(row.end, |cell| cell.span.start)
}

impl List {
    /// Takes in a row: its ends and its costs.
    fn drive(&mut self, row: &Row, costs: &Costs, style: Style, sink: &mut Complaints) {
        if sink.is_full() {
            return sink.count_error();
        }
        if row.cells.len() != costs.width {
            let found = plural(row.cells.len(), "cell", "cells");
            let message = format!("{found}, where {} are expected", costs.width);
            let mend = "Write each drive as `from to cost`, with a cost for each column; put \
                labels with blanks in double quotes.";
            return sink.error(start(row)..row.end, "row-length", message, mend);
        }
        let (from, to) = (&row.cells[costs.from], &row.cells[costs.to]);
        let ends = (self.stop(from, sink), self.stop(to, sink));
        let values: Vec<Option<Number>> = costs
            .columns
            .iter()
            .map(|column| costs::cost(&row.cells[column.place], style, sink))
            .collect();
        let (Some(i), Some(j)) = ends else { return };
        let span = start(row)..row.end;
        if i == j {
            let message = format!("`{}` is driven to itself", excerpt(&from.text));
            return sink.error(span, "loop", message, "Leave the line out.");
        }
        let turned = if self.both == Some(true) { (j, i) } else { (i, j) };
        if let Some(first) = self.drives.get(&(i, j)).or_else(|| self.drives.get(&turned)) {
            let message = format!("{} → {} is given twice", excerpt(&from.text), excerpt(&to.text));
            let line = sink.place(first.start).0;
            let mend = format!("Keep one of the lines; the first is line {line}.");
            return sink.error(span, "drive-twice", message, mend);
        }
        self.drives.insert((i, j), span);
        self.order.push((i, j));
        for (values, value) in self.values.iter_mut().zip(values) {
            values.extend(value);
        }
    }

    /// The number of a stop, new ones at the end.
    fn stop(&mut self, cell: &Cell, sink: &mut Complaints) -> Option<usize> {
        if is_blank(&cell.text) {
            let mend = "Write where the drive begins and where it ends.";
            sink.error(cell.span.clone(), "label-missing", "a label is missing here", mend);
            return None;
        }
        if let Some(&known) = self.places.get(&*cell.text) {
            return Some(known);
        }
        let next = self.labels.len();
        self.places.insert(cell.text.to_string(), next);
        self.labels.push(cell.text.to_string());
        Some(next)
    }

    fn is_one_way(&self) -> bool {
        !self.order.iter().any(|&(i, j)| self.drives.contains_key(&(j, i)))
    }

    /// The instance and what is said of it.
    async fn finish(mut self, costs: &mut Costs, pace: &Pace) -> (Instance, Vec<String>) {
        if self.both == Some(true) {
            let back: Vec<_> = self.order.iter().map(|&(i, j)| (j, i)).collect();
            self.order.extend(back);
            for values in &mut self.values {
                values.extend_from_within(..);
            }
        }
        let mut square = Square::empty(self.labels.clone());
        let main = costs.columns.iter().position(|column| column.name == "c").unwrap_or(0);
        for (drive, &(i, j)) in self.order.iter().enumerate() {
            let value = self.values.get(main).map_or(Some(Number::ONE), |v| v.get(drive).cloned());
            square.put(i, j, value);
        }
        let mut sentences =
            facts::of_list(&square, &costs.unit, !self.values.is_empty(), pace).await;
        if self.both == Some(true) {
            sentences.push("Each line was taken for both directions.".to_owned());
        }
        let mut instance = Instance::new(Reader::Arcs);
        instance.title = std::mem::take(&mut self.title);
        instance.unit = std::mem::take(&mut costs.unit);
        instance.set("V", Datum::Labels(self.labels.clone()));
        let rows = self.order.iter().map(|&(i, j)| self.pair(i, j)).collect();
        instance.set("A", Datum::Tuples { arity: 2, rows });
        for (column, values) in costs.columns.iter().zip(&self.values) {
            pace.spend(8 * values.len()).await;
            let cells = self.order.iter().zip(values);
            let cells = cells.map(|(&(i, j), value)| (self.pair(i, j), value.clone())).collect();
            instance.set(&column.name, Datum::Table { arity: 2, cells });
            if !column.unit.is_empty() {
                instance.units.insert(column.name.clone(), column.unit.clone());
            }
        }
        sentences.extend(self.habits(&square, costs, &mut instance));
        (instance, sentences)
    }

    fn pair(&self, i: usize, j: usize) -> Vec<String> {
        vec![self.labels[i].clone(), self.labels[j].clone()]
    }

    /// Supplies by habit what the list does not name.
    fn habits(&self, square: &Square, costs: &Costs, instance: &mut Instance) -> Vec<String> {
        let mut said = Vec::new();
        if let (None, Some(first)) = (instance.get("c"), costs.columns.first()) {
            if let Some(datum) = instance.get(&first.name).cloned() {
                instance.assume("c", datum);
            }
            said.push(format!("c, which no heading names, is {}, the first column.", first.name));
        }
        let (Some(first), Some(last)) = (self.labels.first(), self.labels.last()) else {
            return said;
        };
        for (name, label) in [("r", first), ("s", first), ("t", last)] {
            if instance.get(name).is_none() {
                instance.assume(name, Datum::Element(label.clone()));
            }
        }
        if instance.assumed.contains("s") && instance.assumed.contains("t") {
            said.push(format!("s is {first} and t is {last}: the first and the last stop named."));
        }
        let n = square.len();
        let edges: BTreeSet<(usize, usize)> =
            self.order.iter().copied().filter(|(i, j)| i < j).collect();
        let symmetric = (0..n).all(|i| (0..i).all(|j| square.at(i, j) == square.at(j, i)));
        if symmetric && instance.get("E").is_none() {
            let rows = edges.iter().map(|&(i, j)| self.pair(i, j)).collect();
            instance.assume("E", Datum::Tuples { arity: 2, rows });
        }
        said
    }
}

/// Whether rows look like drives: two words and then numbers, or two words alone.
pub(crate) fn are_drives(rows: &[Vec<String>], style: Style) -> bool {
    let word = |cell: &String| is_word(cell, style.decimal_comma);
    let number = |cell: &String| parse(cell, style.decimal_comma).is_ok();
    let drive = |row: &&Vec<String>| {
        row.len() > 1 && row[..2].iter().all(word) && row[2..].iter().all(number)
    };
    let fit = rows.iter().filter(drive).count();
    let costs = rows.iter().filter(drive).any(|row| row.len() > 2);
    fit > 0 && fit * 5 > rows.len() * 4 && (costs || rows.len() > 1)
}
