//! The instance: named sets, tables, numbers and elements, in the order in which they came.

use std::collections::{BTreeMap, BTreeSet};

use crate::number::Number;
use crate::pace::{Pace, Slices};

/// A way to read a text.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Reader {
    /// A distance matrix.
    Matrix,
    /// Points in the plane, or by latitude and longitude where a heading says so.
    Points,
    /// Points by latitude and longitude.
    Geographic,
    /// A list of drives.
    Arcs,
    /// Tables copied from a spreadsheet.
    Table,
    /// A TSPLIB file.
    Tsplib,
    /// Named blocks.
    Blocks,
    /// A knapsack of one row.
    Knapsack,
    /// A knapsack with several rows: OR-Library mknap.
    MultiKnapsack,
    /// Generalised assignment: OR-Library gap.
    Assignment,
    /// Sites with capacities: OR-Library cap.
    Sites,
    /// Medians of a graph: OR-Library pmed.
    Medians,
    /// Weighted tardiness on one machine: OR-Library wt.
    Tardiness,
    /// A job shop, by machine and duration.
    JobShop,
    /// Quadratic assignment: QAPLIB.
    Quadratic,
    /// A graph for colouring: DIMACS.
    Graph,
    /// A Steiner tree: SteinLib.
    Steiner,
    /// Vehicle routing, its older form.
    Routing,
}

/// Each reader, the name by which scenarios choose it, and what a text is taken for.
const READERS: [(Reader, &str, &str); 18] = [
    (Reader::Matrix, "matrix", "a distance matrix"),
    (Reader::Points, "points", "points in the plane"),
    (Reader::Geographic, "points geographic", "points by latitude and longitude"),
    (Reader::Arcs, "arcs", "a list of drives"),
    (Reader::Table, "table", "tables with headings"),
    (Reader::Tsplib, "tsplib", "a TSPLIB file"),
    (Reader::Blocks, "blocks", "named blocks"),
    (Reader::Knapsack, "knapsack", "a knapsack"),
    (Reader::MultiKnapsack, "multi-knapsack", "a knapsack with several rows"),
    (Reader::Assignment, "assignment", "generalised assignment"),
    (Reader::Sites, "sites", "sites with capacities and clients"),
    (Reader::Medians, "medians", "medians of a graph"),
    (Reader::Tardiness, "tardiness", "weighted tardiness on one machine"),
    (Reader::JobShop, "job-shop", "a job shop"),
    (Reader::Quadratic, "quadratic", "quadratic assignment"),
    (Reader::Graph, "graph", "a graph for colouring"),
    (Reader::Steiner, "steiner", "a Steiner tree problem"),
    (Reader::Routing, "routing", "vehicle routing, n K Q and then q x y"),
];

impl Reader {
    /// Every reader.
    pub fn all() -> impl Iterator<Item = Self> {
        READERS.into_iter().map(|(reader, ..)| reader)
    }

    fn words(self) -> (&'static str, &'static str) {
        let found = READERS.iter().find(|(reader, ..)| *reader == self);
        found.map_or(("", ""), |&(_, name, words)| (name, words))
    }

    /// The name by which scenarios choose it.
    #[must_use]
    pub fn name(self) -> &'static str {
        self.words().0
    }

    /// What a text that it reads is taken for.
    pub(crate) fn taken_for(self) -> &'static str {
        self.words().1
    }

    /// The reader of that name, if there is one.
    #[must_use]
    pub fn from_name(name: &str) -> Option<Self> {
        Self::all().find(|reader| reader.name() == name)
    }
}

/// One named thing that an instance supplies.
#[derive(Debug, Clone, PartialEq)]
pub enum Datum {
    /// A set of labels, in the order of listing.
    Labels(Vec<String>),
    /// A set of whole numbers, in the order of listing.
    Integers(Vec<i64>),
    /// A set of tuples.
    Tuples {
        /// Cells in each tuple.
        arity: usize,
        /// The tuples, in the order of listing.
        rows: Vec<Vec<String>>,
    },
    /// A number.
    Number(Number),
    /// An element of a set.
    Element(String),
    /// Numbers over tuples.
    Table {
        /// Cells in each index tuple.
        arity: usize,
        /// The number at each tuple that has one.
        cells: BTreeMap<Vec<String>, Number>,
    },
}

/// Where the stops stand, in the order of `V`.
#[derive(Debug, Clone, PartialEq)]
pub struct Points {
    /// Across (growing to the right) and along (growing upwards), in the units of the text.
    pub places: Vec<(f64, f64)>,
    /// Whether they are longitude and latitude in degrees.
    pub geographic: bool,
}

/// What a formulation is run on.
#[derive(Debug, Clone, PartialEq)]
pub struct Instance {
    /// The title found in the text; may be empty.
    pub title: String,
    /// The unit of the distances ("minutes"); empty when the text does not name one.
    pub unit: String,
    /// The units of tables by their names, where headings name them ("EUR").
    pub units: BTreeMap<String, String>,
    /// The reader that read it.
    pub reader: Reader,
    /// Where the stops stand, when the text says so.
    pub points: Option<Points>,
    /// The names that the text does not hold and the reader's habit supplies.
    pub assumed: BTreeSet<String>,
    pub(crate) data: Vec<(String, Datum)>,
}

/// What it takes to write down a drive, in ticks.
const TICKS_OF_A_DRIVE: usize = 8;

/// What it takes to put a drive into a table, in ticks: a descent of its tree besides.
const TICKS_OF_AN_ENTRY: usize = 16;

impl Instance {
    /// An instance that holds nothing yet.
    #[must_use]
    pub fn new(reader: Reader) -> Self {
        Self {
            title: String::new(),
            unit: String::new(),
            units: BTreeMap::new(),
            reader,
            points: None,
            assumed: BTreeSet::new(),
            data: Vec::new(),
        }
    }

    /// A round trip over `labels`: `cells` holds the distances by rows, `None` where there is no
    /// drive; the diagonal is not looked at and missing cells count as `None`. Supplies `V` and
    /// `c`, and assumes `A`, `r` and, where `c` is symmetric, `E` (pairs in the order of listing).
    #[must_use]
    pub fn round_trip(labels: Vec<String>, cells: &[Option<Number>]) -> Self {
        Slices::whole(async |pace| Self::round_trip_in_slices(labels, cells, &pace).await)
    }

    /// As [`Self::round_trip`], in the slices of a pace.
    pub(crate) async fn round_trip_in_slices(
        labels: Vec<String>,
        cells: &[Option<Number>],
        pace: &Pace,
    ) -> Self {
        let n = labels.len();
        let at = |i: usize, j: usize| if i == j { None } else { cells.get(i * n + j)?.as_ref() };
        let pair = |i: usize, j: usize| vec![labels[i].clone(), labels[j].clone()];
        let (mut drives, mut edges, mut symmetric) = (Vec::new(), Vec::new(), true);
        for i in 0..n {
            pace.spend(TICKS_OF_A_DRIVE * n).await;
            for j in 0..n {
                symmetric &= at(i, j) == at(j, i);
                if at(i, j).is_some() {
                    drives.push(pair(i, j));
                }
            }
        }
        if symmetric {
            for i in 0..n {
                pace.spend(TICKS_OF_A_DRIVE * (n - i)).await;
                let ups = (i + 1..n).filter(|&j| at(i, j).is_some());
                edges.extend(ups.map(|j| pair(i, j)));
            }
        }
        // Entry by entry, for a map that is built of all of them at once takes one long step; the last
        // first, for a new entry then meets the first of each node alone on its way down.
        let mut sorted: Vec<usize> = (0..n).collect();
        sorted.sort_by(|&i, &j| labels[j].cmp(&labels[i]));
        let mut table = BTreeMap::new();
        for &i in &sorted {
            for &j in &sorted {
                pace.spend(TICKS_OF_AN_ENTRY).await;
                if let Some(number) = at(i, j) {
                    table.insert(pair(i, j), number.clone());
                }
            }
        }
        let root = labels.first().cloned();
        let mut instance = Self::new(Reader::Matrix);
        instance.set("V", Datum::Labels(labels));
        instance.set("c", Datum::Table { arity: 2, cells: table });
        instance.assume("A", Datum::Tuples { arity: 2, rows: drives });
        if let Some(root) = root {
            instance.assume("r", Datum::Element(root));
        }
        if symmetric {
            instance.assume("E", Datum::Tuples { arity: 2, rows: edges });
        }
        instance
    }

    /// Sets the datum `name`, in its old place if there is one.
    pub fn set(&mut self, name: &str, datum: Datum) {
        match self.data.iter_mut().find(|(known, _)| known == name) {
            Some(place) => place.1 = datum,
            None => self.data.push((name.to_owned(), datum)),
        }
    }

    /// Sets the datum `name` and marks it as supplied by habit.
    pub fn assume(&mut self, name: &str, datum: Datum) {
        self.set(name, datum);
        self.assumed.insert(name.to_owned());
    }

    /// The datum of that name.
    #[must_use]
    pub fn get(&self, name: &str) -> Option<&Datum> {
        self.data.iter().find(|(known, _)| known == name).map(|(_, datum)| datum)
    }

    /// Every datum with its name, in order.
    pub fn data(&self) -> impl Iterator<Item = (&str, &Datum)> {
        self.data.iter().map(|(name, datum)| (name.as_str(), datum))
    }

    /// The stops: the labels of `V`; empty when there is no such set.
    #[must_use]
    pub fn stops(&self) -> &[String] {
        match self.get("V") {
            Some(Datum::Labels(labels)) => labels,
            _ => &[],
        }
    }

    /// Start and end of a path: the elements `s` and `t`, where both are stops. Such an instance
    /// need not hold a round trip.
    #[must_use]
    pub fn ends(&self) -> Option<(&str, &str)> {
        let stop = |name: &str| match self.get(name) {
            Some(Datum::Element(label)) if self.stops().contains(label) => Some(label.as_str()),
            _ => None,
        };
        Some((stop("s")?, stop("t")?))
    }

    /// The distances `c` over [`Self::stops`] by rows, `None` where there is no drive; empty
    /// when the instance is no round trip. O(n² log n).
    #[must_use]
    pub fn matrix(&self) -> Vec<Option<&Number>> {
        Slices::whole(async |pace| self.matrix_in_slices(&pace).await)
    }

    /// As [`Self::matrix`], in the slices of a pace.
    pub async fn matrix_in_slices(&self, pace: &Pace) -> Vec<Option<&Number>> {
        let Some(Datum::Table { arity: 2, cells }) = self.get("c") else { return Vec::new() };
        let stops = self.stops();
        let places: BTreeMap<&str, usize> =
            stops.iter().enumerate().map(|(place, stop)| (stop.as_str(), place)).collect();
        let mut matrix = vec![None; stops.len() * stops.len()];
        let mut last = None;
        for (pair, number) in cells {
            pace.spend(TICKS_OF_A_DRIVE).await;
            let [from, to] = pair.as_slice() else { continue };
            // Keys come in order: the first of a pair is mostly that of the pair before.
            let i = match last {
                Some((label, i)) if label == from => i,
                _ => places.get(from.as_str()).copied(),
            };
            last = Some((from, i));
            if let (Some(i), Some(&j)) = (i, places.get(to.as_str()))
                && i != j
            {
                matrix[i * stops.len() + j] = Some(number);
            }
        }
        matrix
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_round_trip_supplies_its_habits() {
        let cell = |value: u32| Some(Number::from(value));
        let labels = vec!["a".to_owned(), "b".to_owned()];
        let instance = Instance::round_trip(labels.clone(), &[cell(9), cell(1), cell(2), cell(9)]);
        assert_eq!(instance.stops(), labels);
        assert_eq!(instance.get("r"), Some(&Datum::Element("a".to_owned())));
        assert_eq!(instance.get("E"), None);
        let names: Vec<_> = instance.data().map(|(name, _)| name).collect();
        assert_eq!(names, ["V", "c", "A", "r"]);
        assert!(instance.assumed.contains("A") && !instance.assumed.contains("c"));
        let matrix = instance.matrix();
        assert_eq!(matrix, [None, Some(&Number::from(1u32)), Some(&Number::from(2u32)), None]);
    }

    /// The table of a round trip was built in one step, of 120 ms at 1,000 stops.
    #[test]
    fn no_slice_of_a_round_trip_is_longer_than_a_row() {
        let n: usize = 120;
        let labels: Vec<String> = (0..n).map(|i| format!("s{}", i * 7 % n)).collect();
        for symmetric in [false, true] {
            let value = |i: usize, j: usize| if symmetric { i.min(j) } else { 3 * i + j };
            let cells: Vec<_> =
                (0..n * n).map(|k| Some(Number::from((value(k / n, k % n)) as u32))).collect();
            let work =
                async |pace| Instance::round_trip_in_slices(labels.clone(), &cells, &pace).await;
            let (given, row) = (1_000, (TICKS_OF_A_DRIVE * n) as u64);
            let mut slices = Slices::new(work);
            let (mut longest, mut all, mut count) = (0, 0, 0);
            let found = loop {
                let found = slices.advance(given);
                longest = longest.max(slices.spent());
                (all, count) = (all + slices.spent(), count + 1);
                if let Some(found) = found {
                    break found;
                }
            };
            assert!(longest < given + row, "{longest} ticks in a slice");
            assert!(all > (2 * n * n) as u64 && count > 100, "{all} ticks in {count} slices");
            assert_eq!(found, Instance::round_trip(labels.clone(), &cells));
        }
    }

    #[test]
    fn names_of_readers_round_trip() {
        for reader in Reader::all() {
            assert_eq!(Reader::from_name(reader.name()), Some(reader));
        }
        assert_eq!(Reader::from_name("spreadsheet"), None);
    }
}
