//! The bound ladder in words.

use record::study::{Ladder, RivalLadder};

use super::{Section, Table, value};
use crate::number::{count, percent, short};

pub(super) fn sections(ladder: &Ladder) -> Vec<Section> {
    let mut sections: Vec<Section> = ladder.rivals.iter().map(of_rival).collect();
    if let (Some(first), Some(reference)) = (sections.first_mut(), ladder.reference) {
        let from = &ladder.reference_from;
        first.verdict.insert(0, format!("Gaps are closed towards {} ({from}).", short(reference)));
    }
    if let (Some(first), false) = (sections.first_mut(), ladder.root.is_empty()) {
        first.notes.push(format!(
            "The root of the round trip is {} = {}. The bounds of labels and of one-commodity flow depend \
             on which stop it is, that of subtours does not: the study of variability tries the others.",
            ladder.root, ladder.root_used
        ));
    }
    sections
}

fn of_rival(rival: &RivalLadder) -> Section {
    let mut table =
        Table::new(&["step", "bound", "", "gap closed", "iterations", "work", ""], &[0, 6]);
    table.rows = rival
        .rungs
        .iter()
        .map(|rung| {
            vec![
                rung.step.clone(),
                value(rung.bound),
                if rung.checked { "✓".to_owned() } else { String::new() },
                rung.closed.map_or_else(|| "–".to_owned(), percent),
                count(rung.iterations),
                count(rung.work),
                rung.note.clone(),
            ]
        })
        .collect();
    Section {
        faults: Vec::new(),
        figure: None,
        heading: format!("Bound ladder of {}: {}", rival.rival, rival.title),
        verdict: best_step(rival).into_iter().collect(),
        table: Some(table),
        notes: Vec::new(),
    }
}

/// The step short of the search that closes most, where any closes something.
fn best_step(rival: &RivalLadder) -> Option<String> {
    let before_search = rival.rungs.iter().filter(|rung| rung.step != "search");
    let mut best: Option<(&str, f64)> = None;
    for rung in before_search {
        if let Some(closed) = rung.closed
            && closed > best.map_or(1e-6, |(_, closed)| closed)
        {
            best = Some((&rung.step, closed));
        }
    }
    let closes = rival.rungs.iter().any(|rung| rung.closed.is_some());
    Some(match best {
        Some((step, closed)) => {
            format!(
                "Short of the search, most of its gap is closed by {step}: {}.",
                percent(closed)
            )
        }
        None if closes => "Nothing short of the search lifts its bound.".to_owned(),
        None => return None,
    })
}
