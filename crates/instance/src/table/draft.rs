//! What the tables of a paste give, gathered before it becomes an instance.

use std::collections::{BTreeMap, BTreeSet};
use std::ops::Range;

use crate::cells::{self, Cell, Style, is_blank};
use crate::complaint::{Complaints, excerpt, grouped, plural};
use crate::instance::{Datum, Instance};
use crate::names::Name;
use crate::number::Number;

use super::MAX_TABLES;

/// A set in the order of listing.
#[derive(Default)]
struct Set {
    labels: Vec<String>,
    known: BTreeSet<String>,
}

/// Sets, and what lies over them.
pub(super) struct Draft {
    sets: Vec<(String, Set)>,
    /// Each with the place of its heading.
    data: Vec<(String, Range<usize>, Datum)>,
    taken: BTreeSet<String>,
    units: BTreeMap<String, String>,
    notes: Vec<String>,
}

impl Draft {
    pub(super) fn new() -> Self {
        Self {
            sets: Vec::new(),
            data: Vec::new(),
            taken: BTreeSet::new(),
            units: BTreeMap::new(),
            notes: Vec::new(),
        }
    }

    pub(super) fn note(&mut self, note: String) {
        if !self.notes.contains(&note) {
            self.notes.push(note);
        }
    }

    /// The name of a heading, noted where it differs.
    pub(super) fn name(&mut self, heading: &Cell, sink: &mut Complaints) -> Option<String> {
        self.name_at(&heading.text, heading.span.clone(), sink)
    }

    pub(super) fn name_at(
        &mut self,
        heading: &str,
        span: Range<usize>,
        sink: &mut Complaints,
    ) -> Option<String> {
        let name = super::named(heading, span, sink)?;
        if let Some(note) = name.note(&excerpt(heading)) {
            self.note(note);
        }
        let Name { text, unit } = name;
        if !unit.is_empty() {
            self.units.insert(text.clone(), unit);
        }
        Some(text)
    }

    /// Adds labels to a set, in order.
    pub(super) fn extend<'l>(&mut self, name: &str, labels: impl Iterator<Item = &'l str>) {
        let place = self.sets.iter().position(|(known, _)| known == name);
        let place = place.unwrap_or_else(|| {
            self.sets.push((name.to_owned(), Set::default()));
            self.sets.len() - 1
        });
        let set = &mut self.sets[place].1;
        for label in labels {
            if set.known.insert(label.to_owned()) {
                set.labels.push(label.to_owned());
            }
        }
    }

    /// The first set that holds all the labels.
    pub(super) fn set_of(&self, labels: &[&str]) -> Option<String> {
        let holds = |set: &Set| labels.iter().all(|label| set.known.contains(*label));
        self.sets.iter().find(|(_, set)| holds(set)).map(|(name, _)| name.clone())
    }

    /// A name for a set that has none, from `V` if it stands at both sides, else I to N.
    pub(super) fn free_set(&self, both: bool) -> String {
        let free = |name: &&str| {
            !self.taken.contains(*name) && !self.sets.iter().any(|(known, _)| known == *name)
        };
        let letters = ["V", "I", "J", "K", "L", "M", "N"];
        let found = letters[usize::from(!both)..].iter().find(|name| free(name));
        found.map_or_else(|| format!("S{}", self.sets.len() + 1), |name| (*name).to_owned())
    }

    /// Adds a datum; complains at its heading when the name is taken.
    pub(super) fn datum(
        &mut self,
        name: &str,
        heading: &Cell,
        datum: Datum,
        sink: &mut Complaints,
    ) {
        if self.data.len() >= MAX_TABLES {
            let message = format!("there are more than {} tables", grouped(MAX_TABLES));
            let mend = "Paste a smaller instance.";
            return sink.error(heading.span.clone(), "too-large", message, mend);
        }
        if self.taken.insert(name.to_owned()) {
            self.data.push((name.to_owned(), heading.span.clone(), datum));
            return;
        }
        let message = format!("the name {} is given twice", excerpt(name));
        let mend = "Give each table a name of its own.";
        sink.error(heading.span.clone(), "name-twice", message, mend);
    }

    /// Moves everything into an instance, sets first; gives the notes. Complains where a table
    /// has the name of a set.
    pub(super) fn fill(self, instance: &mut Instance, sink: &mut Complaints) -> Vec<String> {
        let clash = |name: &String| self.sets.iter().any(|(set, _)| set == name);
        for (name, span, _) in self.data.iter().filter(|(name, ..)| clash(name)) {
            let message = format!("{} is the name of a set too", excerpt(name));
            let mend = "Give the table or the set another heading.";
            sink.error(span.clone(), "name-twice", message, mend);
        }
        for (name, set) in self.sets {
            let integers: Option<Vec<i64>> = set.labels.iter().map(|label| whole(label)).collect();
            let datum = integers.map_or(Datum::Labels(set.labels), Datum::Integers);
            instance.set(&name, datum);
        }
        for (name, _, datum) in self.data {
            instance.set(&name, datum);
        }
        for (name, unit) in self.units {
            if matches!(instance.get(&name), Some(Datum::Table { .. } | Datum::Number(_))) {
                instance.units.insert(name, unit);
            }
        }
        if let Some(unit) = instance.units.get("c") {
            instance.unit = unit.clone();
        }
        self.notes
    }
}

/// A whole number, as an integer set writes it.
pub(super) fn whole(text: &str) -> Option<i64> {
    text.parse::<i64>().ok().filter(|value| value.to_string() == text)
}

/// A number; complains of what is none. Blank cells are the caller's.
pub(super) fn number(cell: &Cell, style: Style, sink: &mut Complaints) -> Option<Number> {
    if is_blank(&cell.text) && !sink.is_full() {
        let mend = "Write the number, or take the line out.";
        sink.error(cell.span.clone(), "blank", "a number is missing here", mend);
        return None;
    }
    cells::number(cell, style.decimal_comma, sink)
}

/// What is said of a table over `sets`.
pub(super) fn said(name: &str, datum: &Datum, sets: &str) -> String {
    let count = if let Datum::Table { cells, .. } = datum { cells.len() } else { 0 };
    format!("{name} holds {} over {sets}.", plural(count, "number", "numbers"))
}

/// The cells of one table as they are read.
pub(super) struct Cells {
    pub(super) cells: BTreeMap<Vec<String>, Number>,
    pub(super) blank: usize,
    /// How many are clock times.
    clocks: usize,
}

impl Cells {
    pub(super) fn new() -> Self {
        Self { cells: BTreeMap::new(), blank: 0, clocks: 0 }
    }

    /// Puts a cell in its place; a blank one is counted.
    pub(super) fn put(
        &mut self,
        key: Vec<String>,
        cell: &Cell,
        style: Style,
        sink: &mut Complaints,
    ) {
        if is_blank(&cell.text) {
            self.blank += 1;
        } else if let Some(number) = number(cell, style, sink) {
            self.cells.insert(key, number);
            self.clocks += usize::from(cell.text.contains(':'));
        }
    }

    /// The table, and what is said of its blanks and of clock times below a unit.
    pub(super) fn finish(mut self, name: &str, arity: usize, draft: &mut Draft) -> Datum {
        if self.blank > 0 {
            let cells = plural(self.blank, "cell", "cells");
            draft.note(format!("{cells} of {name} left blank: no number there."));
        }
        let unit = draft.units.get(name).map_or("", String::as_str);
        let minutes = match unit.to_lowercase().as_str() {
            "h" | "hour" | "hours" | "hrs" => Number::from(60),
            "s" | "sec" | "second" | "seconds" => Number::ONE / Number::from(60),
            _ => Number::ONE,
        };
        if self.clocks > 0 && !minutes.is_one() {
            let said = if self.clocks == self.cells.len() {
                self.cells.values_mut().for_each(|value| *value = &*value / &minutes);
                format!("The clock times of {name} were turned into {unit}.")
            } else {
                format!("{name} mixes clock times, in minutes, with numbers, in {unit}.")
            };
            draft.note(said);
        }
        Datum::Table { arity, cells: self.cells }
    }
}
