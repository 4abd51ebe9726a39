//! The growth study in words.

use record::study::{Fit, Growth, GrowthPair, SizeMean};

use super::growth_chart::{growing, profiled};
use super::{Section, Table};
use crate::number::{count, of, percent, short};

/// What a reader must know of the figures.
const MEANING: &str = "Work counts non-zeros touched, the same on every machine; means are \
shifted geometric ones. A run that was stopped counts with what it had done until then, so that \
its rival looks better than it is. Ratios are paired: the same instances for both.";

pub(super) fn sections(growth: &Growth) -> Vec<Section> {
    let mut rivals: Vec<&str> = Vec::new();
    for cell in &growth.cells {
        if !rivals.contains(&cell.rival.as_str()) {
            rivals.push(&cell.rival);
        }
    }
    let mut sections = vec![sizes(growth, &rivals)];
    if !growth.pairs.is_empty() {
        sections.push(pairs(&growth.pairs, "work"));
    }
    if !growth.fits.is_empty() {
        sections.push(fits(growth));
    }
    if !growth.profile.is_empty() {
        sections.push(profile(&growth.profile, &rivals, "work"));
    }
    sections
}

fn sizes(growth: &Growth, rivals: &[&str]) -> Section {
    let head = ["rival", "size", "instances", "stopped", "root gap", "nodes", "work"];
    let mut table = Table::new(&head, &[0]);
    table.rows = growth.means.iter().map(mean).collect();
    let failed = growth.cells.iter().filter(|cell| !cell.failed.is_empty()).count();
    let mut notes = vec![MEANING.to_owned()];
    notes.extend(sources(growth));
    notes.extend(again(growth));
    if failed > 0 {
        notes.push(format!("{} gave no result: no model of that size.", of(failed as u64, "run")));
    }
    Section {
        faults: Vec::new(),
        figure: growing(growth, rivals),
        heading: format!(
            "Growth ({}; at most {}{} a run)",
            growth.data,
            of(u64::from(growth.nodes), "node"),
            growth
                .most_work
                .map_or_else(String::new, |most| format!(" and {} non-zeros touched", count(most)))
        ),
        verdict: growth.pairs.iter().map(|pair| verdict(pair, "work")).collect(),
        table: Some(table),
        notes,
    }
}

/// Of what the intervals speak.
fn sources(growth: &Growth) -> Option<String> {
    let mut instances: Vec<&String> = Vec::new();
    for cell in &growth.cells {
        if !instances.contains(&&cell.instance) {
            instances.push(&cell.instance);
        }
    }
    let own = growth.cells.iter().all(|cell| cell.class.is_empty());
    match instances.len() {
        _ if !own => None,
        0 => None,
        1 => Some(
            "All are parts of one instance: intervals and sign tests say how its parts scatter, and \
             nothing of other instances."
                .to_owned(),
        ),
        many => Some(format!(
            "Parts of one instance are drawn together when the interval is made, and have one vote in the \
             sign test: both rest on {}.",
            of(many as u64, "instance")
        )),
    }
}

/// That parts which are the same count once.
fn again(growth: &Growth) -> Option<String> {
    (growth.again > 0).then(|| {
        format!(
            "{} that were asked for are left out: a part is no larger than its instance, and parts with the same \
             elements are one instance and count once.",
            of(u64::from(growth.again), "part")
        )
    })
}

fn mean(mean: &SizeMean) -> Vec<String> {
    vec![
        mean.rival.clone(),
        count(u64::from(mean.size)),
        count(u64::from(mean.instances)),
        count(u64::from(mean.stopped)),
        mean.gap.map_or_else(|| "–".to_owned(), percent),
        short(mean.nodes),
        short(mean.work),
    ]
}

/// A pair in a sentence; `what` is "work", "time" or "nodes".
pub(super) fn verdict(pair: &GrowthPair, what: &str) -> String {
    let [a, b] = &pair.rivals;
    if pair.instances == 0 {
        return format!("{a} and {b}: neither was solved on any instance within the limit.");
    }
    let times = format!(
        "{} times the {what} (95 % interval {} to {}, {})",
        short(pair.ratio),
        short(pair.interval.0),
        short(pair.interval.1),
        of(u64::from(pair.instances), "instance")
    );
    if !pair.distinguishable {
        return format!("{a} and {b} are not distinguishable: {b} takes {times}.");
    }
    let least = if pair.censored > 0 { "at least " } else { "" };
    if pair.ratio >= 1.0 {
        return format!("{b} takes {least}{times} that {a} takes.");
    }
    let turned = GrowthPair {
        rivals: [b.clone(), a.clone()],
        ratio: 1.0 / pair.ratio,
        interval: (1.0 / pair.interval.1, 1.0 / pair.interval.0),
        ..pair.clone()
    };
    verdict(&turned, what)
}

/// Wins, ties and losses of each pair.
pub(super) fn pairs(pairs: &[GrowthPair], what: &str) -> Section {
    let (less, more) = (format!("less {what}"), format!("more {what}"));
    let head = ["pair", &less, "about the same", &more, "sign test p", "after Holm", "one stopped"];
    let mut table = Table::new(&head, &[0]);
    table.rows = pairs
        .iter()
        .map(|pair| {
            vec![
                format!("{} against {}", pair.rivals[0], pair.rivals[1]),
                count(u64::from(pair.wins)),
                count(u64::from(pair.ties)),
                count(u64::from(pair.losses)),
                short(pair.p),
                short(pair.adjusted),
                count(u64::from(pair.censored)),
            ]
        })
        .collect();
    Section {
        heading: "Instance by instance".to_owned(),
        table: Some(table),
        notes: vec!["About the same: within a tenth.".to_owned()],
        ..Section::default()
    }
}

fn fits(growth: &Growth) -> Section {
    let size = count(u64::from(growth.production));
    let at = format!("work at size {size}");
    let head = ["rival", "growth", &at, "95 % from", "to", "fits"];
    let mut table = Table::new(&head, &[0, 1]);
    table.rows = growth.fits.iter().map(fit).collect();
    Section {
        heading: format!("Drawn out to size {size}"),
        table: Some(table),
        notes: vec![
            "A fit is drawn out beyond what was seen: the band says how instances scatter, not \
             whether growth goes on in the same way."
                .to_owned(),
        ],
        ..Section::default()
    }
}

fn fit(fit: &Fit) -> Vec<String> {
    let words = if fit.model == "power" {
        format!("size to the power {}", short(fit.factor))
    } else {
        format!("times {} for each element", short(fit.factor))
    };
    vec![fit.rival.clone(), words, short(fit.at), short(fit.low), short(fit.high), percent(fit.r2)]
}

/// The performance profile of these rivals.
pub(super) fn profile(shares: &[(f64, Vec<f64>)], rivals: &[&str], what: &str) -> Section {
    let within = format!("{what} within");
    let head: Vec<&str> = std::iter::once(within.as_str()).chain(rivals.iter().copied()).collect();
    let mut table = Table::new(&head, &[0]);
    table.rows = shares
        .iter()
        .map(|(factor, shares)| {
            let head = format!("{} × the best", short(*factor));
            std::iter::once(head).chain(shares.iter().map(|share| percent(*share))).collect()
        })
        .collect();
    let mut notes = Vec::new();
    if rivals.len() > 2 {
        notes.push(
            "With more than two rivals read each line against the best alone, not one rival \
             against another (Gould & Scott 2016)."
                .to_owned(),
        );
    }
    Section {
        heading: "Performance profile (Dolan & Moré 2002): share of instances solved".to_owned(),
        figure: profiled(shares, rivals, what),
        table: Some(table),
        notes,
        ..Section::default()
    }
}

#[cfg(test)]
mod tests {
    use super::profile;

    /// A profile ranks two rivals; with three a rival that is not there may change the ranks of the others (Gould
    /// & Scott 2016), and it is said.
    #[test]
    fn more_than_two_rivals_are_warned_of() {
        let noted = |rivals: &[&str]| {
            let shares = vec![(1.0, vec![0.5; rivals.len()]), (2.0, vec![1.0; rivals.len()])];
            profile(&shares, rivals, "work").notes.concat().contains("Gould & Scott")
        };
        assert!(!noted(&["A", "B"]) && noted(&["A", "B", "C"]));
    }
}
