//! Measures, the estimate and the diagnosis of a search, with their words.

use model::{LabelId, Model};
use record::results::{
    DiagnosisKind, DiagnosisReport, EstimateReport, IncumbentReport, LeavesReport, MeasuresReport,
};
use tree::{Diagnosis, Gains, Measures, Origin};

use super::{finite, tidy};

/// Labels that are named of those that are alike.
const NAMED: usize = 4;

/// How the tree grew.
pub(crate) fn measures(found: &Measures) -> MeasuresReport {
    let mean = |gains: Gains| finite(gains.mean).filter(|_| gains.count > 0);
    let leaves = found.leaves;
    MeasuresReport {
        depths: found.depths.clone(),
        leaves: LeavesReport {
            pruned: leaves.pruned,
            dropped: leaves.dropped,
            infeasible: leaves.infeasible,
            integer: leaves.integer,
            other: leaves.other,
        },
        gain_down: mean(found.down),
        gain_up: mean(found.up),
        primal_integral: found.primal_integral.and_then(finite),
        dual_integral: found.dual_integral.and_then(finite),
        incumbents: found.found.iter().map(incumbent).collect(),
        plateau: found.plateau,
    }
}

fn incumbent(found: &tree::Found) -> IncumbentReport {
    let origin = match &found.origin {
        Origin::Relaxation => "relaxation".to_owned(),
        Origin::Rounding => "rounding".to_owned(),
        Origin::Heuristic(name) => name.clone(),
        Origin::Given => "given".to_owned(),
    };
    IncumbentReport { nodes: found.nodes, work: found.work, value: tidy(found.value), origin }
}

/// How many nodes there will be.
pub(crate) fn estimate(found: tree::Estimate) -> EstimateReport {
    EstimateReport { low: found.low, middle: found.middle, high: found.high }
}

/// What the search suffers from, in sentences.
pub(crate) fn diagnosis(model: &Model, found: &[Diagnosis]) -> Vec<DiagnosisReport> {
    let one = |diagnosis| {
        let (kind, words) = words(model, diagnosis);
        DiagnosisReport { kind, words }
    };
    found.iter().map(one).collect()
}

fn words(model: &Model, diagnosis: &Diagnosis) -> (DiagnosisKind, String) {
    match diagnosis {
        Diagnosis::WeakRoot { root, best, gap } => {
            let (root, best, gap) = (figure(*root), figure(*best), percent(*gap));
            let words = format!(
                "The root bound {root} is {gap} away from {best}: the tree has to close what the \
                 formulation leaves open"
            );
            (DiagnosisKind::WeakRoot, words)
        }
        Diagnosis::IncumbentLate { after, nodes } => {
            let (after, nodes) = (count(*after), count(*nodes));
            let words = format!(
                "The best plan came after {after} of {nodes} nodes: until then little could be \
                 closed by its value. Give a best known value or a plan, or switch heuristics on"
            );
            (DiagnosisKind::IncumbentLate, words)
        }
        Diagnosis::Plateau { stretch, nodes, idle, branchings } => {
            let (stretch, nodes) = (count(*stretch), count(*nodes));
            let (idle, branchings) = (count(*idle), count(*branchings));
            let words = format!(
                "The bound stood still for {stretch} of {nodes} nodes, and {idle} of {branchings} \
                 branchings raised it on neither side"
            );
            (DiagnosisKind::Plateau, words)
        }
        Diagnosis::Unbalanced { down, up, nodes } => {
            let nodes = count(*nodes);
            let (down, up) = (figure(*down), figure(*up));
            let words = format!(
                "Branching is one-sided: “at most” raises the bound by {down} and “at least” by \
                 {up} (means over {nodes} nodes), so that one side hardly gets smaller"
            );
            (DiagnosisKind::UnbalancedBranching, words)
        }
        Diagnosis::Copies { labels, idle, branchings } => {
            let words = copies(model, labels, [count(*idle), count(*branchings)]);
            (DiagnosisKind::SymmetricCopies, words)
        }
        Diagnosis::Infeasible { empty, leaves } => {
            let (empty, leaves) = (count(*empty), count(*leaves));
            let words = format!(
                "{empty} of {leaves} leaves have no point: the rows leave little room, and what \
                 rules a branch out shows only deep in the tree. Propagation may close it sooner"
            );
            (DiagnosisKind::ManyInfeasibleLeaves, words)
        }
        Diagnosis::Numerics { unproved, unsolved, leaves, rounded } => {
            let words = numerics([*unproved, *unsolved, *leaves], *rounded);
            (DiagnosisKind::Numerics, words)
        }
    }
}

fn numerics(counts: [u32; 3], rounded: bool) -> String {
    let [unproved, unsolved, leaves] = counts.map(count);
    let plan = ", and the best plan meets a row only within the tolerance";
    let plan = if rounded { plan } else { "" };
    format!(
        "{unproved} of {leaves} leaves could not be proved and {unsolved} nodes not be solved{plan}: \
         look at the range of the coefficients"
    )
}

fn copies(model: &Model, labels: &[LabelId], [idle, branchings]: [String; 2]) -> String {
    let names: Vec<&str> =
        labels.iter().take(NAMED).map(|&label| model.labels().name(label)).collect();
    let (names, all) = (names.join(", "), labels.len());
    let more = if all > NAMED { "…" } else { "" };
    format!(
        "The model does not tell {all} labels apart ({names}{more}), so that each plan has copies; \
         {idle} of {branchings} branchings raised the bound on neither side. Order them by a row"
    )
}

/// A count with its thousands apart.
fn count(value: impl Into<u64>) -> String {
    grouped(&value.into().to_string())
}

/// Digits with commas between the thousands.
fn grouped(digits: &str) -> String {
    let mut text = String::new();
    for (place, digit) in digits.chars().enumerate() {
        if place > 0 && (digits.len() - place).is_multiple_of(3) {
            text.push(',');
        }
        text.push(digit);
    }
    text
}

/// Four significant digits.
fn figure(value: f64) -> String {
    let size = value.abs();
    let digits = [1.0, 10.0, 100.0, 1000.0].iter().filter(|limit| size >= **limit).count();
    let text = format!("{value:.*}", 4_usize.saturating_sub(digits));
    let (sign, text) = text.strip_prefix('-').map_or(("", text.as_str()), |text| ("−", text));
    let (whole, part) = text.split_once('.').unwrap_or((text, ""));
    let part = part.trim_end_matches('0');
    let point = if part.is_empty() { "" } else { "." };
    [sign, &grouped(whole), point, part].concat()
}

fn percent(share: f64) -> String {
    format!("{:.1} %", 100.0 * share)
}

#[cfg(test)]
mod tests {
    use super::{count, figure};

    #[test]
    fn thousands_stand_apart() {
        let all = [0_u32, 999, 1_000, 1_410_862].map(count);
        assert_eq!(all, ["0", "999", "1,000", "1,410,862"]);
    }

    #[test]
    fn figures_have_four_digits() {
        let all = [151.2, 1234.5, 0.12345, 12.0, -3.5, 1e7, 0.0].map(figure);
        assert_eq!(all, ["151.2", "1,234", "0.1235", "12", "−3.5", "10,000,000", "0"]);
    }
}
