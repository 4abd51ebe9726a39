//! Variability in words.

use record::study::{RivalVariability, Run, Variability, VariabilityPair};

use super::{Section, Table, value};
use crate::number::{count, of, short};

pub(super) fn sections(report: &Variability) -> Vec<Section> {
    let mut out = vec![orders(report)];
    if !report.root.is_empty() && report.rivals.iter().any(|rival| rival.roots.len() > 1) {
        out.push(roots(report));
    }
    out
}

fn orders(report: &Variability) -> Section {
    let head =
        ["rival", "nodes as written", "fewest", "most", "work, least", "mean", "most", "stopped"];
    let mut table = Table::new(&head, &[0]);
    table.rows = report.rivals.iter().map(row).collect();
    let mut verdict: Vec<String> = report.rivals.iter().map(spread).collect();
    let runs = (report.orders + 1) * report.instances.max(1);
    verdict.extend(report.pairs.iter().map(|pair| paired(pair, runs)));
    Section {
        faults: Vec::new(),
        figure: None,
        heading: format!(
            "How much chance is in a search? ({} of rows and columns, at most {} a run)",
            of(u64::from(report.orders), "other order"),
            of(u64::from(report.nodes), "node")
        ),
        verdict,
        table: Some(table),
        notes: notes(report),
    }
}

fn notes(report: &Variability) -> Vec<String> {
    let order = "The same names stand in the same order in every rival. Work is non-zeros touched.";
    let mut notes = vec![order.to_owned()];
    if report.instances > 1 {
        notes.push(format!(
            "Orders of one instance are drawn together when the interval is made: it rests on {}.",
            of(u64::from(report.instances), "instance")
        ));
    }
    notes
}

/// The letter of a rival, and the instance where there are several.
fn named(rival: &RivalVariability) -> String {
    if rival.instance.is_empty() {
        rival.rival.clone()
    } else {
        format!("{} on {}", rival.rival, rival.instance)
    }
}

fn all(rival: &RivalVariability) -> impl Iterator<Item = &Run> {
    std::iter::once(&rival.written).chain(&rival.runs)
}

fn row(rival: &RivalVariability) -> Vec<String> {
    let nodes = || all(rival).map(|run| run.nodes);
    let whole = |number: u32| count(u64::from(number));
    let stopped = all(rival).filter(|run| !run.solved).count();
    vec![
        format!("{} {}", named(rival), rival.title),
        whole(rival.written.nodes),
        whole(nodes().min().unwrap_or(0)),
        whole(nodes().max().unwrap_or(0)),
        short(rival.work.0),
        short(rival.work.1),
        short(rival.work.2),
        stopped.to_string(),
    ]
}

fn spread(rival: &RivalVariability) -> String {
    let factor = if rival.work.0 > 0.0 { rival.work.2 / rival.work.0 } else { 1.0 };
    format!(
        "{}: the same model in another order takes up to {} times the work.",
        named(rival),
        short(factor)
    )
}

fn paired(pair: &VariabilityPair, orders: u32) -> String {
    let [a, b] = &pair.rivals;
    let (ratio, low, high) = (short(pair.ratio), short(pair.interval.0), short(pair.interval.1));
    let noise = if pair.beyond_noise {
        "more than either varies alone"
    } else {
        "within what one of them varies alone: not distinguishable on this instance"
    };
    format!(
        "{b} takes {ratio} times the work of {a} (95 % interval {low} to {high}), {noise}; {a} is ahead \
         in {} of {orders} runs, {b} in {}.",
        pair.wins, pair.losses
    )
}

fn roots(report: &Variability) -> Section {
    let mut head = vec!["root"];
    let with_roots = || report.rivals.iter().filter(|rival| !rival.roots.is_empty());
    head.extend(with_roots().map(|rival| rival.rival.as_str()));
    let mut table = Table::new(&head, &[0]);
    let first = report.rivals.iter().find(|rival| rival.roots.len() > 1);
    for (root, _) in first.map_or(&[][..], |rival| &rival.roots) {
        let bound = |rival: &RivalVariability| {
            value(rival.roots.iter().find(|(own, _)| own == root).and_then(|(_, bound)| *bound))
        };
        let used = if *root == report.root_used { " (used)" } else { "" };
        let mut row = vec![format!("{root}{used}")];
        row.extend(with_roots().map(bound));
        table.rows.push(row);
    }
    Section {
        faults: Vec::new(),
        figure: None,
        heading: format!(
            "Does the root matter? The results are for {} = {}",
            report.root, report.root_used
        ),
        verdict: report.rivals.iter().filter_map(|rival| turn(rival, &report.root_used)).collect(),
        table: Some(table),
        notes: untried(report).into_iter().collect(),
    }
}

/// That not every element was tried, where there are many.
fn untried(report: &Variability) -> Option<String> {
    let tried = report.rivals.iter().map(|rival| rival.roots.len()).max()? as u64;
    let all = u64::from(report.elements);
    (tried < all).then(|| {
        format!(
            "Tried were {} of {}; of the others nothing is said.",
            count(tried),
            of(all, "stop")
        )
    })
}

fn turn(rival: &RivalVariability, used: &str) -> Option<String> {
    let known: Vec<(&String, f64)> =
        rival.roots.iter().filter_map(|(root, bound)| Some((root, (*bound)?))).collect();
    let low = known.iter().min_by(|a, b| a.1.total_cmp(&b.1))?;
    let high = known.iter().max_by(|a, b| a.1.total_cmp(&b.1))?;
    if (high.1 - low.1).abs() <= 1e-6 * (1.0 + high.1.abs()) {
        return Some(format!("{}: the bound is the same whichever stop is the root.", rival.rival));
    }
    let own = known.iter().find(|(root, _)| *root == used).map_or(f64::NAN, |(_, bound)| *bound);
    Some(format!(
        "{}: the bound depends on the root: {} with {used}, from {} with {} to {} with {}.",
        rival.rival,
        short(own),
        short(low.1),
        low.0,
        short(high.1),
        high.0
    ))
}

#[cfg(test)]
mod tests {
    use super::*;

    /// With more stops than are tried, the bound was called the same whichever stop is the root.
    #[test]
    fn roots_that_were_not_tried_are_said() {
        let bounds = [("Ash".to_owned(), Some(4.0)), ("Birch".to_owned(), Some(4.0))];
        let rival = RivalVariability { roots: bounds.to_vec(), ..RivalVariability::default() };
        let report = |elements| Variability {
            rivals: vec![rival.clone()],
            root: "r".to_owned(),
            root_used: "Ash".to_owned(),
            elements,
            ..Variability::default()
        };
        let notes = |elements| roots(&report(elements)).notes;
        assert_eq!(notes(80), ["Tried were 2 of 80 stops; of the others nothing is said."]);
        assert!(notes(2).is_empty());
    }
}
