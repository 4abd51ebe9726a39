//! The equivalence court's verdict in words.

use record::study::{
    Counterexample, Equivalence, EquivalenceKind as Kind, EquivalenceLevel as Level, Evidence,
    Mutant,
};

use super::{Section, Table, and};
use crate::number::{count, of, short};

/// Values of a plan that are written out at most.
const MOST_VALUES: usize = 24;

pub(super) fn section(verdict: &Equivalence) -> Section {
    let [a, b] = &verdict.rivals;
    let mut table = Table::new(&["test", "outcome", "agree"], &[0, 1, 2]);
    table.rows = verdict.evidence.iter().map(row).collect();
    Section {
        figure: None,
        heading: format!("Are {a} and {b} the same problem?"),
        verdict: sentences(verdict),
        table: Some(table),
        notes: notes(verdict),
    }
}

fn row(evidence: &Evidence) -> Vec<String> {
    let agrees = match evidence.agrees {
        Some(true) => "yes",
        Some(false) => "no",
        None => "–",
    };
    vec![evidence.test.clone(), evidence.outcome.clone(), agrees.to_owned()]
}

fn sentences(verdict: &Equivalence) -> Vec<String> {
    let [a, b] = &verdict.rivals;
    let mut out = vec![main(verdict)];
    if !verdict.shared.is_empty() {
        let shared: Vec<String> = verdict
            .shared
            .iter()
            .map(|(name, columns)| format!("{name} ({})", of(u64::from(*columns), "column")))
            .collect();
        out.push(format!("{a} and {b} are compared in {}.", and(&shared)));
    }
    out.extend(verdict.counterexample.as_ref().map(example));
    out
}

fn main(verdict: &Equivalence) -> String {
    let [a, b] = &verdict.rivals;
    let tried = match verdict.level {
        Level::Proved if verdict.evidence.iter().any(|one| one.test.starts_with("rows of")) => {
            "no plan of either breaks a row of the other"
        }
        Level::Proved => "every plan of this instance was compared",
        Level::Enumerated => {
            "every plan of sub-instances was compared, and nothing tells them apart on this one"
        }
        Level::Unrefuted => "nothing that was tried tells them apart",
    };
    match (verdict.equivalent, verdict.kind) {
        (Some(true), Kind::Sets) => format!("{a} and {b} admit the same plans: {tried}."),
        (Some(true), Kind::NonNegativeCosts) => format!(
            "{a} and {b} do not admit the same plans, but have the same optimum in every duel with \
             non-negative costs."
        ),
        (Some(true), Kind::ThisObjective) => format!(
            "{a} and {b} do not admit the same plans; for this objective they have the same optimum, \
             for others they need not."
        ),
        (Some(false), _) => format!("{a} and {b} are not the same problem: their optima differ."),
        (None, _) if verdict.counterexample.is_some() => {
            format!("{a} and {b} do not admit the same plans; their optima were not settled.")
        }
        (None, _) => format!("Whether {a} and {b} are the same problem is undecided."),
    }
}

fn example(example: &Counterexample) -> String {
    let (own, other) = (&example.admitted_by, &example.refused_by);
    let place = example.size.map_or_else(String::new, |size| format!("on the first {size}, "));
    let head = match example.values {
        Some((left, right)) => format!(
            "{place}a plan that {own} values at {} and {other} at {}",
            short(left),
            short(right)
        ),
        None if example.violated.is_empty() => {
            format!("{place}a plan that {own} admits and {other} does not")
        }
        None => format!(
            "{place}a plan that {own} admits and {other} does not (it cannot hold with {})",
            and(&example.violated)
        ),
    };
    format!("The smallest difference found: {head}: {}.", plan(example))
}

fn plan(example: &Counterexample) -> String {
    let mut words: Vec<String> = example
        .plan
        .iter()
        .take(MOST_VALUES)
        .map(|entry| {
            let index = entry.indices.join(", ");
            let name = if index.is_empty() {
                entry.variable.clone()
            } else {
                format!("{}[{index}]", entry.variable)
            };
            format!("{name} = {}", short(entry.value))
        })
        .collect();
    if words.is_empty() {
        words.push("every shared variable is 0".to_owned());
    }
    let more = example.plan.len().saturating_sub(MOST_VALUES);
    if more > 0 {
        words.push(format!("and {} more", count(more as u64)));
    }
    words.join(", ")
}

fn notes(verdict: &Equivalence) -> Vec<String> {
    if verdict.mutants.is_empty() {
        return Vec::new();
    }
    let caught = verdict.mutants.iter().filter(|mutant| mutant.caught == Some(true)).count();
    let mut out = vec![format!(
        "Control: {} of the two rivals, each with one family left out on purpose; the court \
         noticed {}.",
        of(verdict.mutants.len() as u64, "copy").replace("copys", "copies"),
        count(caught as u64),
    )];
    let name = |mutant: &Mutant| format!("{} without {}", mutant.rival, mutant.without);
    let same = |mutant: &&Mutant| mutant.caught == Some(false);
    let idle: Vec<String> = verdict.mutants.iter().filter(same).map(name).collect();
    if !idle.is_empty() {
        out.push(format!("No other problem, by every plan of a sub-instance: {}.", and(&idle)));
    }
    let open: Vec<String> =
        verdict.mutants.iter().filter(|mutant| mutant.caught.is_none()).map(name).collect();
    if !open.is_empty() {
        out.push(format!("Not noticed and not shown to be the same: {}.", and(&open)));
    }
    out
}
