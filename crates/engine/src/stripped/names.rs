//! New names for old: the same one for the same label in every instance.

use std::collections::{BTreeMap, BTreeSet};

use instance::{Datum, Instance};

/// Names of data of so many letters at most stay: they are symbols.
const SYMBOL: usize = 2;

/// Labels that have been met.
#[derive(Debug, Default)]
pub(super) struct Names {
    labels: BTreeMap<String, String>,
    /// Whole numbers of sets of numbers: formulas may count with them.
    numbers: BTreeSet<String>,
}

impl Names {
    /// The new name of a label. A whole number of a set of numbers stays.
    pub(super) fn label(&mut self, label: &str) -> String {
        if self.numbers.contains(label) {
            return label.to_owned();
        }
        let next = format!("e{}", self.labels.len() + 1);
        self.labels.entry(label.to_owned()).or_insert(next).clone()
    }

    fn tuple(&mut self, tuple: &[String]) -> Vec<String> {
        tuple.iter().map(|label| self.label(label)).collect()
    }

    /// A datum with its labels replaced.
    pub(super) fn datum(&mut self, datum: &Datum) -> Datum {
        match datum {
            Datum::Labels(labels) => Datum::Labels(self.tuple(labels)),
            Datum::Tuples { arity, rows } => {
                let rows = rows.iter().map(|row| self.tuple(row)).collect();
                Datum::Tuples { arity: *arity, rows }
            }
            Datum::Element(label) => Datum::Element(self.label(label)),
            Datum::Table { arity, cells } => {
                let cells = cells.iter().map(|(tuple, number)| (self.tuple(tuple), number.clone()));
                Datum::Table { arity: *arity, cells: cells.collect() }
            }
            Datum::Integers(_) | Datum::Number(_) => datum.clone(),
        }
    }

    /// The names of the data of an instance: symbols stay, words are replaced.
    pub(super) fn of_data(&mut self, instance: &Instance) -> BTreeMap<String, String> {
        let mut out = BTreeMap::new();
        for (place, (name, datum)) in instance.data().enumerate() {
            if let Datum::Integers(integers) = datum {
                self.numbers.extend(integers.iter().map(i64::to_string));
            }
            let symbol = name.chars().count() <= SYMBOL && name.chars().all(char::is_alphanumeric);
            let starts = name.chars().next().is_some_and(char::is_alphabetic);
            let new =
                if symbol && starts { name.to_owned() } else { format!("datum{}", place + 1) };
            out.insert(name.to_owned(), new);
        }
        out
    }
}
