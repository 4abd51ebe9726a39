//! MPS handed over: a rival is written to a file on the disk, read by a small reader that shares
//! no code with ours, and solved by HiGHS to the same relaxation and the same optimum as the
//! rival itself.
//!
//! The reader here knows the plain form alone that programs agree on: words between blanks,
//! sections NAME, OBJSENSE, ROWS, COLUMNS, RHS, RANGES and BOUNDS, integer markers.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use std::collections::BTreeMap;
use std::rc::Rc;

use hullward_tests_reference::agree;
use hullward_tests_reference::golden;
use hullward_tests_reference::independent::{Verdict, highs};
use hullward_tests_reference::round_trip::{instance, rival};
use model::{FamilyState, Model, mps};

/// One row of the file: its type, right-hand side, range and entries by column.
#[derive(Default)]
struct Row {
    kind: char,
    right: f64,
    range: Option<f64>,
    entries: Vec<(usize, f64)>,
}

/// One column of the file.
struct Column {
    cost: f64,
    lower: f64,
    upper: f64,
    integer: bool,
}

/// A file as the small reader understands it.
#[derive(Default)]
struct File {
    maximise: bool,
    objective: String,
    constant: f64,
    order: Vec<String>,
    rows: BTreeMap<String, Row>,
    places: BTreeMap<String, usize>,
    columns: Vec<Column>,
    integer: bool,
}

impl File {
    fn read(text: &str) -> Self {
        let mut file = Self::default();
        let mut section = "";
        for line in text.lines().filter(|line| !line.starts_with('*')) {
            let words: Vec<&str> = line.split_whitespace().collect();
            if !line.starts_with(' ') {
                section = words[0];
                continue;
            }
            match section {
                "OBJSENSE" => file.maximise = words[0] == "MAX",
                "ROWS" => file.row(&words),
                "COLUMNS" => file.column(&words),
                "RHS" if words[1] == file.objective => file.constant = -number(words[2]),
                "RHS" => file.rows.get_mut(words[1]).unwrap().right = number(words[2]),
                "RANGES" => file.rows.get_mut(words[1]).unwrap().range = Some(number(words[2])),
                "BOUNDS" => file.bound(&words),
                other => panic!("{other}: {line}"),
            }
        }
        assert_eq!(section, "ENDATA");
        file
    }

    fn row(&mut self, words: &[&str]) {
        if words[0] == "N" {
            assert!(self.objective.is_empty(), "one objective");
            words[1].clone_into(&mut self.objective);
            return;
        }
        let row = Row { kind: words[0].chars().next().unwrap(), ..Row::default() };
        assert!(self.rows.insert(words[1].to_owned(), row).is_none(), "{} twice", words[1]);
        self.order.push(words[1].to_owned());
    }

    fn column(&mut self, words: &[&str]) {
        if words[1] == "'MARKER'" {
            self.integer = words[2] == "'INTORG'";
            return;
        }
        let next = self.columns.len();
        let place = *self.places.entry(words[0].to_owned()).or_insert(next);
        if place == next {
            let integer = self.integer;
            self.columns.push(Column { cost: 0.0, lower: 0.0, upper: f64::INFINITY, integer });
        }
        for pair in words[1..].chunks(2) {
            if pair[0] == self.objective {
                self.columns[place].cost = number(pair[1]);
            } else {
                self.rows.get_mut(pair[0]).unwrap().entries.push((place, number(pair[1])));
            }
        }
    }

    fn bound(&mut self, words: &[&str]) {
        let column = &mut self.columns[self.places[words[2]]];
        let value = || number(words[3]);
        match words[0] {
            "UP" => column.upper = value(),
            "LO" => column.lower = value(),
            "FX" => (column.lower, column.upper) = (value(), value()),
            "FR" => column.lower = f64::NEG_INFINITY,
            "MI" => column.lower = f64::NEG_INFINITY,
            "PL" => column.upper = f64::INFINITY,
            other => panic!("{other}"),
        }
    }

    /// HiGHS on the file: the relaxation, or with `whole` the integer program.
    fn solve(&self, whole: bool) -> f64 {
        let mut problem = highs::RowProblem::default();
        let columns: Vec<highs::Col> = self
            .columns
            .iter()
            .map(|c| {
                problem.add_column_with_integrality(c.cost, c.lower..=c.upper, whole && c.integer)
            })
            .collect();
        for name in &self.order {
            let row = &self.rows[name];
            let (lower, upper) = match (row.kind, row.range) {
                ('L', None) => (f64::NEG_INFINITY, row.right),
                ('L', Some(range)) => (row.right - range.abs(), row.right),
                ('G', None) => (row.right, f64::INFINITY),
                ('E', None) => (row.right, row.right),
                other => panic!("{other:?}"),
            };
            let entries = row.entries.iter().map(|&(column, a)| (columns[column], a));
            problem.add_row(lower..=upper, entries.collect::<Vec<_>>());
        }
        let sense = if self.maximise { highs::Sense::Maximise } else { highs::Sense::Minimise };
        let mut solver = problem.optimise(sense);
        solver.make_quiet();
        solver.set_option("threads", 1);
        solver.set_option("mip_rel_gap", 0.0);
        solver.set_option("mip_abs_gap", 1e-9);
        let solved = solver.solve();
        assert_eq!(solved.status(), highs::HighsModelStatus::Optimal);
        solved.objective_value() + self.constant
    }
}

fn number(word: &str) -> f64 {
    word.parse().unwrap_or_else(|_| panic!("{word}"))
}

/// The text by way of a file on the disk, as another program gets it.
fn by_file(name: &str, text: &str) -> String {
    let path = std::env::temp_dir().join(format!("hullward-{}-{name}.mps", std::process::id()));
    std::fs::write(&path, text).unwrap();
    let read = std::fs::read_to_string(&path).unwrap();
    std::fs::remove_file(&path).unwrap();
    read
}

fn check(id: &str, seed: u64, model: &Rc<Model>) {
    let name = format!("{}-{seed}", id.replace('/', "-"));
    let file = File::read(&by_file(&name, &mps::write(model).unwrap().text));
    assert_eq!(file.columns.len(), model.columns().len(), "{name}");
    assert_eq!(file.order.len(), model.row_count(), "{name}");
    for whole in [false, true] {
        let Verdict::Optimal(wanted) = highs(model, &[], whole) else { panic!("{name}") };
        let found = file.solve(whole);
        assert!(agree(found, wanted, 1e-7), "{name} whole {whole}: {found} for {wanted}");
    }
}

#[test]
fn every_written_out_rival_has_the_same_relaxation_and_optimum() {
    let mut written = 0;
    for entry in catalogue::entries() {
        for (seed, class) in [(1, catalogue::Class::Uniform), (2, catalogue::Class::Euclidean)] {
            let Some(text) = catalogue::generate(&entry.family, 6, class, seed) else { continue };
            let model = rival(&entry.id, &instance(&text));
            // a relaxation has no optimum to speak of, a family on demand is not in the file
            let whole = model.families().iter().all(|family| family.state == FamilyState::In);
            if whole {
                check(&entry.id, seed, &model);
                written += 1;
            }
        }
    }
    assert!(written >= 16, "{written} rivals were written");
}

/// Negative and infinite lower bounds, equations and maximisation stand among them.
#[test]
fn every_golden_model_keeps_its_relaxation_and_its_optimum() {
    let all = golden::all();
    assert_eq!(all.len(), 109);
    for golden in all {
        let text = mps::write(&golden.model).unwrap().text;
        let (again, _) = mps::read(&text).unwrap();
        assert_eq!(mps::write(&again).unwrap().text, text, "{}", golden.name);
        let file = File::read(&by_file(&golden.name, &text));
        for (whole, wanted) in [(false, golden.lp), (true, golden.mip)] {
            let found = file.solve(whole);
            assert!(
                agree(found, wanted, 1e-6),
                "{}, whole {whole}: {found} for {wanted}",
                golden.name
            );
        }
    }
}
