//! The bound ladder in words.

use record::study::{Ladder, RivalLadder};

use super::chart::pixels;
use super::figure::Figure;
use super::{Section, Table, value};
use crate::axis::Axis;
use crate::number::{count, percent, short};

/// How a ladder is drawn.
const DRAWN: &str = "The ladders of all rivals are drawn on one scale, the value that gaps are closed \
towards as a dashed line. A disc is a bound that exact arithmetic proved, a ring one that it did not.";

/// The columns of a drawing, in pixels: steps end where the first begins, bounds begin at the third.
const LEFT: usize = 154;
const RIGHT: usize = 274;
const VALUES: usize = 350;
const STEP: usize = 20;
const TOP: usize = 32;

pub(super) fn sections(ladder: &Ladder) -> Vec<Section> {
    let scale = scale(ladder);
    let of = |rival| of_rival(rival, scale.as_ref().map(|scale| (scale, ladder.reference)));
    let mut sections: Vec<Section> = ladder.rivals.iter().map(of).collect();
    if let (Some(first), Some(_)) = (sections.first_mut(), scale) {
        first.notes.push(DRAWN.to_owned());
    }
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

fn of_rival(rival: &RivalLadder, scale: Option<(&Axis, Option<f64>)>) -> Section {
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
        figure: scale.and_then(|(axis, reference)| figure(rival, axis, reference)),
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

/// One scale for all bounds and the reference.
fn scale(ladder: &Ladder) -> Option<Axis> {
    let bounds = ladder.rivals.iter().flat_map(|rival| &rival.rungs).filter_map(|rung| rung.bound);
    let mut all: Vec<f64> = bounds.chain(ladder.reference).filter(|one| one.is_finite()).collect();
    all.sort_by(f64::total_cmp);
    Some(Axis::fit(*all.first()?, *all.last()?, 2))
}

/// The rungs below each other, each bound at its place, and how far it is from the first.
fn figure(rival: &RivalLadder, axis: &Axis, reference: Option<f64>) -> Option<Figure> {
    let first = rival.rungs.iter().find_map(|rung| rung.bound)?;
    let last = rival.rungs.iter().rev().find_map(|rung| rung.bound)?;
    let x = |value: f64| LEFT + pixels(axis.place(value, 1.0), RIGHT - LEFT);
    let end = TOP + rival.rungs.len() * STEP;
    let mut out = Figure {
        label: format!(
            "Bounds of {} on the way from {} to {}",
            rival.rival,
            short(first),
            short(last)
        ),
        size: (VALUES, end + 24),
        ..Figure::default()
    };
    for tick in axis.ticks() {
        out.rules.push([x(tick), TOP - 8, x(tick), end]);
        out.labels.push((x(tick), end + 16, "middle", axis.label(tick)));
    }
    if let Some(reference) = reference {
        out.lines.push(([x(reference), TOP - 12, x(reference), end], "4 3"));
        out.labels.push((x(reference), TOP - 18, "middle", short(reference)));
    }
    for (place, rung) in rival.rungs.iter().enumerate() {
        let y = TOP + place * STEP + STEP / 2 - 4;
        out.labels.push((LEFT - 14, y + 4, "end", rung.step.clone()));
        out.labels.push((VALUES, y + 4, "end", value(rung.bound)));
        if let Some(bound) = rung.bound {
            out.lines.push(([x(first), y, x(bound), y], "none"));
            out.marks.push((x(bound), y, rung.checked));
        }
    }
    Some(out)
}

#[cfg(test)]
mod tests {
    use record::study::Rung;

    use super::*;

    /// Two ladders on one scale: the same value stands at the same place in both, and each has all rungs.
    #[test]
    fn ladders_are_drawn_on_one_scale() {
        let rung = |step: &str, bound| Rung {
            step: step.to_owned(),
            bound,
            checked: bound == Some(100.0),
            ..Rung::default()
        };
        let rival = |letter: &str, bounds: [Option<f64>; 3]| RivalLadder {
            rival: letter.to_owned(),
            rungs: ["relaxation", "all cuts", "search"]
                .iter()
                .zip(bounds)
                .map(|(s, b)| rung(s, b))
                .collect(),
            ..RivalLadder::default()
        };
        let rivals = vec![
            rival("A", [Some(50.0), Some(75.0), Some(100.0)]),
            rival("B", [Some(75.0), None, Some(100.0)]),
        ];
        let ladder = Ladder { reference: Some(100.0), rivals, ..Ladder::default() };
        let figures: Vec<Figure> =
            sections(&ladder).into_iter().filter_map(|one| one.figure).collect();
        let [a, b] = figures.as_slice() else { unreachable!("two drawings") };
        assert_eq!(a.marks.iter().map(|mark| mark.2).collect::<Vec<_>>(), [false, false, true]);
        assert_eq!(a.marks[1].0, b.marks[0].0, "75 in both");
        assert_eq!(a.marks[0].0 + (a.marks[2].0 - a.marks[0].0) / 2, a.marks[1].0, "75 is halfway");
        assert_eq!(b.marks.len(), 2, "what has no bound has no mark");
        assert!(
            a.svg().contains("aria-label=\"Bounds of A on the way from 50 to 100\""),
            "{}",
            a.label
        );
        let notes = sections(&ladder)[0].notes.join(" ");
        assert!(notes.contains("one scale"), "{notes}");
        assert!(
            sections(&Ladder { rivals: vec![RivalLadder::default()], ..Ladder::default() })[0]
                .figure
                .is_none()
        );
    }
}
