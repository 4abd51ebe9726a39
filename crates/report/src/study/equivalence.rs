//! The equivalence court's verdict in words.

use record::results::SolutionEntry;
use record::study::{
    ConflictRow, Counterexample, Equivalence, EquivalenceKind as Kind, EquivalenceLevel as Level,
    Evidence, Mutant,
};

use super::{Section, Table, and, entries, plans};
use crate::number::{count, of, short};

/// Values of a plan that are written out at most.
const MOST_VALUES: usize = 24;
/// Shared variables, elements and rows that are named at most.
const MOST_NAMES: usize = 6;

pub(super) fn section(verdict: &Equivalence) -> Section {
    let [a, b] = &verdict.rivals;
    let mut table = Table::new(&["test", "outcome", "agree"], &[0, 1, 2]);
    table.rows = verdict.evidence.iter().map(row).collect();
    Section {
        faults: Vec::new(),
        figure: verdict.counterexample.as_ref().and_then(plans::figure),
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
        out.push(format!("{a} and {b} are compared in {}.", shared(&verdict.shared)));
    }
    out.extend(verdict.counterexample.iter().flat_map(example));
    out
}

/// The variables in which they are compared; of a model whose columns have names of their own, some.
fn shared(shared: &[(String, u32)]) -> String {
    if shared.len() <= MOST_NAMES {
        let named = shared
            .iter()
            .map(|(name, columns)| format!("{name} ({})", of(u64::from(*columns), "column")));
        return and(&named.collect::<Vec<_>>());
    }
    let columns: u64 = shared.iter().map(|(_, columns)| u64::from(*columns)).sum();
    let some: Vec<&str> = shared.iter().take(3).map(|(name, _)| name.as_str()).collect();
    format!("the {} that both name: {} and so on", of(columns, "column"), some.join(", "))
}

fn main(verdict: &Equivalence) -> String {
    let [a, b] = &verdict.rivals;
    // How far it goes, as the test says it: "the same 1, 2, 6 plans on the first 2 to 4".
    let compared =
        verdict.evidence.iter().find(|one| one.test == "every plan" && one.agrees == Some(true));
    let compared = compared.map_or_else(String::new, |one| format!(" ({})", one.outcome));
    let part = format!(
        "every plan of sub-instances was compared{compared}, and nothing tells them apart on this one"
    );
    let tried = match verdict.level {
        Level::Proved if verdict.evidence.iter().any(|one| one.test.starts_with("rows of")) => {
            "no plan of either breaks a row of the other"
        }
        Level::Proved => "every plan of this instance was compared",
        Level::Enumerated => &part,
        Level::Unrefuted => "nothing that was tried tells them apart",
    };
    match (verdict.equivalent, verdict.kind) {
        (Some(true), Kind::Sets) if verdict.level == Level::Unrefuted => format!(
            "Nothing that was tried tells {a} and {b} apart: that they admit the same plans is not proved."
        ),
        (Some(true), Kind::Sets) => format!("{a} and {b} admit the same plans: {tried}."),
        (Some(true), Kind::NonNegativeCosts) => format!(
            "{a} and {b} do not admit the same plans, but have the same optimum in every duel with \
             non-negative costs."
        ),
        (Some(true), Kind::ThisObjective) if verdict.shared.is_empty() => format!(
            "{a} and {b} have the same optimum on this instance. They name no column alike, so that no \
             plan of one can be put into the other: whether they admit the same plans is not known."
        ),
        (Some(true), Kind::ThisObjective) => format!(
            "{a} and {b} do not admit the same plans; for this objective they have the same optimum, \
             for others they need not."
        ),
        (Some(false), _) => format!("{a} and {b} are not the same problem: their optima differ."),
        (None, _) if verdict.counterexample.is_some() => {
            format!("{a} and {b} do not admit the same plans; their optima were not settled.")
        }
        (None, _) if verdict.shared.is_empty() => format!(
            "Whether {a} and {b} are the same problem is undecided: they name no column alike, and \
             their optima were not settled."
        ),
        (None, _) => format!("Whether {a} and {b} are the same problem is undecided."),
    }
}

fn example(example: &Counterexample) -> Vec<String> {
    let (own, other) = (&example.admitted_by, &example.refused_by);
    let place = place(example);
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
            some(&example.violated)
        ),
    };
    let mut out = vec![format!("The smallest difference found: {head}: {}.", plan(&example.plan))];
    out.extend(rows(example));
    if !example.nearest.is_empty() {
        out.push(format!("The nearest plan that {other} admits: {}.", plan(&example.nearest)));
    }
    out
}

/// On what the plan is one.
fn place(example: &Counterexample) -> String {
    match example.size {
        _ if !example.elements.is_empty() => format!("on {} alone, ", some(&example.elements)),
        Some(size) => format!("on the first {size}, "),
        None => String::new(),
    }
}

/// The first names of many.
fn some(names: &[String]) -> String {
    if names.len() <= 2 * MOST_NAMES {
        return and(names);
    }
    let more = names.len() - MOST_NAMES;
    format!("{} and {} more", names[..MOST_NAMES].join(", "), count(more as u64))
}

/// What of the rival refuses the plan.
fn rows(example: &Counterexample) -> Option<String> {
    let other = &example.refused_by;
    let said = |row: &ConflictRow| {
        if row.row.is_empty() { row.says.clone() } else { format!("{}: {}", row.row, row.says) }
    };
    let rows: Vec<String> = example.rows.iter().take(MOST_NAMES).map(said).collect();
    let more = example.rows.len().saturating_sub(MOST_NAMES);
    let more = if more > 0 { format!("; and {} more", count(more as u64)) } else { String::new() };
    match example.rows.as_slice() {
        [] => None,
        [one, ..] if one.row.is_empty() => Some(format!("{}{more}.", rows.join("; "))),
        [_] => Some(format!("The plan breaks this row of {other}: {}.", rows[0])),
        _ => Some(format!(
            "With the plan these rows of {other} cannot hold together: {}{more}.",
            rows.join("; ")
        )),
    }
}

fn plan(plan: &[SolutionEntry]) -> String {
    if plan.is_empty() {
        return "every shared variable is 0".to_owned();
    }
    entries(plan, MOST_VALUES).join(", ")
}

fn notes(verdict: &Equivalence) -> Vec<String> {
    let mut out = Vec::new();
    let drawn = verdict.counterexample.as_ref().filter(|one| !one.nearest.is_empty());
    if let Some(figure) = drawn.and_then(plans::figure) {
        let mark = if figure.lines.is_empty() { "What has a dot" } else { "A dashed arrow" };
        out.push(format!("{mark} is in one of the two plans alone."));
    }
    if verdict.mutants.is_empty() {
        return out;
    }
    let caught = verdict.mutants.iter().filter(|mutant| mutant.caught == Some(true)).count();
    out.push(format!(
        "Control: {} of the two rivals, each with one family left out on purpose; the court \
         noticed {}.",
        of(verdict.mutants.len() as u64, "copy").replace("copys", "copies"),
        count(caught as u64),
    ));
    let name = |mutant: &Mutant| format!("{} without {}", mutant.rival, mutant.without);
    let same = |mutant: &&Mutant| mutant.caught == Some(false);
    let idle: Vec<String> = verdict.mutants.iter().filter(same).map(name).collect();
    if !idle.is_empty() {
        out.push(format!("No other problem, by every plan of a sub-instance: {}.", some(&idle)));
    }
    let open: Vec<String> =
        verdict.mutants.iter().filter(|mutant| mutant.caught.is_none()).map(name).collect();
    if !open.is_empty() {
        out.push(format!("Not noticed and not shown to be the same: {}.", some(&open)));
    }
    if verdict.mutants_untried > 0 {
        let untried = count(u64::from(verdict.mutants_untried));
        out.push(format!("Of the control {untried} further families were passed over."));
    }
    out
}
