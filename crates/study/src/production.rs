//! Results of the team's production solver, pasted as a table: instance, rival, bound, plan, nodes,
//! time. They enter the statistics of the growth study, paired by instance; and where a result is of the
//! instance at hand, it must not contradict the bound that is proved here.
//!
//! A result counts as solved where bound and plan are within one part in ten thousand, at which
//! production solvers stop by habit (common practice).

use std::collections::BTreeMap;
use std::rc::Rc;

use instance::{Datum, Instance, Reader, read};
use model::{Number, Sense, nearest_f64};
use record::study::{Against, Cell, Growth, Production};

use crate::desk::Desk;
use crate::growth::summed_up;
use crate::plan::Plan;
use crate::subject::Subject;

/// Bound and plan within this share of the plan: solved.
const SOLVED: f64 = 1e-4;
/// A plan may be better than a proved bound by this share: it was rounded when it was printed.
const PRINTED: f64 = 1e-5;
/// A second in the unit of work, and a node where there is no time.
const SECOND: f64 = 1_000.0;
const NODE: f64 = 100.0;

/// One result.
#[derive(Debug, Clone, Default)]
struct Line {
    instance: String,
    rival: String,
    bound: Option<f64>,
    plan: Option<f64>,
    nodes: Option<f64>,
    time: Option<f64>,
}

/// A pasted table, and the instance at hand by its name; empty where there is one.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Pasted {
    /// The table.
    pub text: String,
    /// The name of the instance at hand.
    pub instance: String,
    /// Whether it is the first instance, which carries what the whole table comes to.
    pub first: bool,
}

/// What a table comes to.
pub async fn production(
    desk: Rc<Desk>,
    subjects: Vec<Subject>,
    (plan, pasted): (Plan, Pasted),
) -> Production {
    let (lines, remarks) = lines(&pasted.text);
    let mut out = Production {
        results: u32::try_from(lines.len()).unwrap_or(u32::MAX),
        remarks: if pasted.first { remarks } else { Vec::new() },
        ..Production::default()
    };
    if pasted.first {
        sum_up(&mut out, &lines, plan.seed);
    }
    for line in of_instance(&lines, &pasted.instance) {
        let Some(subject) = subjects.iter().find(|subject| subject.letter == line.rival) else {
            continue;
        };
        desk.say(format!("{}: its relaxation", subject.letter));
        let solved = desk.relax(&subject.model).await;
        let root = solved.checked_bound.as_ref().map(nearest_f64);
        out.against.push(Against {
            rival: line.rival.clone(),
            instance: line.instance.clone(),
            bound: line.bound,
            plan: line.plan,
            root,
            wrong: contradiction(line, root, subject.model.sense()),
        });
    }
    out
}

/// The results of the instance at hand; of the only one where it has no name.
fn of_instance<'l>(lines: &'l [Line], instance: &str) -> Vec<&'l Line> {
    let first = lines.first().map_or("", |line| line.instance.as_str());
    let only = lines.iter().all(|line| line.instance == first);
    let own = |line: &&Line| line.instance == instance || (instance.is_empty() && only);
    lines.iter().filter(own).collect()
}

/// Why a result and a proved bound cannot be of the same model and data.
fn contradiction(line: &Line, root: Option<f64>, sense: Sense) -> String {
    let (Some(plan), Some(root)) = (line.plan, root) else { return String::new() };
    let over = match sense {
        Sense::Minimise => root - plan,
        Sense::Maximise => plan - root,
    };
    if over > PRINTED * (1.0 + root.abs()) {
        return "its plan is better than the bound that is proved here".to_owned();
    }
    String::new()
}

/// Means, pairs and profile by the growth study's code.
fn sum_up(out: &mut Production, lines: &[Line], seed: u64) {
    let timed = lines.iter().any(|line| line.time.is_some());
    out.measure = if timed { "milliseconds" } else { "nodes" }.to_owned();
    let mut cells = Vec::new();
    for line in lines {
        let spent =
            if timed { line.time.map(|time| time * SECOND) } else { line.nodes.map(|n| n * NODE) };
        let gap = line
            .plan
            .zip(line.bound)
            .map(|(plan, bound)| (plan - bound).abs() - SOLVED * plan.abs());
        cells.push(Cell {
            cell: u32::try_from(cells.len()).unwrap_or(u32::MAX),
            rival: line.rival.clone(),
            class: line.instance.clone(),
            nodes: whole(line.nodes.unwrap_or(0.0)) as u32,
            work: whole(spent.unwrap_or(0.0)),
            incumbent: line.plan,
            solved: gap.is_some_and(|over| over <= 0.0),
            failed: if spent.is_none() {
                "neither time nor nodes".to_owned()
            } else {
                String::new()
            },
            ..Cell::default()
        });
    }
    let growth = summed_up(Growth { cells, seed, ..Growth::default() });
    (out.means, out.pairs, out.profile) = (growth.means, growth.pairs, growth.profile);
}

/// A count from a number of the table.
fn whole(value: f64) -> u64 {
    let rounded = libm::round(value);
    // Counts and milliseconds of a table are far below 2^53, and not negative here.
    #[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "checked above")]
    let count = if (0.0..9.0e15).contains(&rounded) { rounded as u64 } else { 0 };
    count
}

/// The results of a text, in order of instance and rival, and what was said of it.
fn lines(text: &str) -> (Vec<Line>, Vec<String>) {
    let reading = read(text, Some(Reader::Table));
    let mut remarks: Vec<String> = reading
        .complaints
        .iter()
        .map(|one| format!("line {}: {}. {}", one.line, one.message, one.mend))
        .collect();
    let mut found: BTreeMap<Vec<String>, Line> = BTreeMap::new();
    for (column, set) in COLUMNS {
        let table = reading.instance.as_ref();
        let Some(cells) = table.and_then(|table| column_of(table, column)) else { continue };
        for (key, value) in cells {
            let [instance, rival] = key.as_slice() else { continue };
            let line = found.entry(key.clone()).or_insert_with(|| Line {
                instance: instance.clone(),
                rival: rival.clone(),
                ..Line::default()
            });
            set(line, nearest_f64(value));
        }
    }
    if found.is_empty() {
        remarks.push(
            "No result was read. The table needs the headings instance, rival, bound, plan, nodes, \
             time, and a line for each instance and rival."
                .to_owned(),
        );
    }
    (found.into_values().collect(), remarks)
}

type Put = fn(&mut Line, f64);

/// The columns of numbers and where they go.
const COLUMNS: [(&str, Put); 4] = [
    ("bound", |line, value| line.bound = Some(value)),
    ("plan", |line, value| line.plan = Some(value)),
    ("nodes", |line, value| line.nodes = Some(value)),
    ("time", |line, value| line.time = Some(value)),
];

/// The table under a heading that begins so, over instance and rival.
fn column_of<'t>(table: &'t Instance, heading: &str) -> Option<&'t BTreeMap<Vec<String>, Number>> {
    table.data().find_map(|(name, datum)| match datum {
        Datum::Table { arity: 2, cells } if name.to_lowercase().starts_with(heading) => Some(cells),
        _ => None,
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    const TABLE: &str = "instance\trival\tbound\tplan\tnodes\ttime\n\
        Monday\tA\t150\t159\t20000\t60.5\nMonday\tB\t159\t159\t3\t0.5\n\
        Tuesday\tA\t170\t170\t4000\t12\nTuesday\tB\t170\t170\t9\t1\n";

    #[test]
    fn a_table_is_summed_up_by_rival_and_pair() {
        let (found, remarks) = lines(TABLE);
        assert_eq!((found.len(), remarks.len()), (4, 0), "{found:?} {remarks:?}");
        let mut out = Production::default();
        sum_up(&mut out, &found, 1);
        assert_eq!(out.measure, "milliseconds");
        let [a, b] = [&out.means[0], &out.means[1]];
        assert_eq!((a.rival.as_str(), a.instances, a.stopped), ("A", 2, 1));
        // √(61.5 · 13) − 1 seconds.
        assert!((a.work / 1_000.0 - (libm::sqrt(61.5 * 13.0) - 1.0)).abs() < 1e-6, "{a:?}");
        assert_eq!((b.stopped, out.pairs[0].losses, out.pairs[0].censored), (0, 2, 1));
    }

    #[test]
    fn a_table_that_cannot_be_read_is_told_what_it_needs() {
        let (found, remarks) = lines("what is this");
        assert!(found.is_empty() && remarks.last().is_some_and(|one| one.contains("headings")));
    }

    #[test]
    fn a_plan_better_than_a_proved_bound_is_a_contradiction() {
        let line = Line { plan: Some(140.0), ..Line::default() };
        assert!(!contradiction(&line, Some(150.0), Sense::Minimise).is_empty());
        assert!(contradiction(&line, Some(139.0), Sense::Minimise).is_empty());
        assert!(!contradiction(&line, Some(139.0), Sense::Maximise).is_empty());
        assert!(contradiction(&line, None, Sense::Minimise).is_empty());
    }
}
