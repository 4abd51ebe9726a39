//! What is said of a round trip, one sentence each.

use std::collections::BTreeMap;

use crate::complaint::{grouped, plural};
use crate::instance::Points;
use crate::pace::Pace;
use crate::square::Square;
use crate::triangle::{EVERY_TRIPLE, Scaled, triangles};

/// Words that name a unit of a drive.
const UNITS: [&str; 40] = [
    "minutes",
    "minute",
    "min",
    "mins",
    "hours",
    "hour",
    "hrs",
    "h",
    "seconds",
    "second",
    "sec",
    "s",
    "days",
    "day",
    "kilometres",
    "kilometers",
    "kilometre",
    "kilometer",
    "km",
    "metres",
    "meters",
    "metre",
    "meter",
    "m",
    "miles",
    "mile",
    "mi",
    "feet",
    "ft",
    "yards",
    "euro",
    "euros",
    "EUR",
    "€",
    "pounds",
    "GBP",
    "£",
    "dollars",
    "USD",
    "$",
];

/// Whether a word names a unit.
pub(crate) fn is_unit(word: &str) -> bool {
    UNITS.iter().any(|unit| *unit == word || (unit.len() > 2 && unit.eq_ignore_ascii_case(word)))
}

/// Every sentence on a square. O(n³) up to 300 stops.
pub(crate) async fn of(square: &Square, unit: &str, pace: &Pace) -> Vec<String> {
    let n = square.len();
    let drives = square.cells.iter().flatten().count();
    let unit = if unit.is_empty() { String::new() } else { format!(", {unit}") };
    let mut facts = vec![format!(
        "{}, {}{unit}.",
        plural(n, "stop", "stops"),
        plural(drives, "drive", "drives")
    )];
    match Scaled::of(square, pace).await {
        Some(scaled) => {
            facts.push(symmetry(square, &scaled));
            facts.push(triangle(square, &scaled, pace).await);
            facts.extend(odd_values(square, &scaled));
            pace.spend(square.cells.len()).await;
        }
        None => facts.push("The numbers are too long to be compared with each other.".to_owned()),
    }
    let missing = n * n.saturating_sub(1) - drives;
    if missing > 0 {
        facts.push(missing_drives(square, missing));
        facts.extend(connection(square));
    }
    facts
}

/// Every sentence on a list of drives, where a missing pair is nothing to speak of. O(n²).
pub(crate) async fn of_list(square: &Square, unit: &str, costs: bool, pace: &Pace) -> Vec<String> {
    let drives = square.cells.iter().flatten().count();
    let unit = if unit.is_empty() { String::new() } else { format!(", {unit}") };
    let stops = plural(square.len(), "stop", "stops");
    let mut facts = vec![format!("{stops}, {}{unit}.", plural(drives, "drive", "drives"))];
    match Scaled::of(square, pace).await {
        Some(scaled) if costs => {
            facts.push(symmetry(square, &scaled));
            facts.extend(odd_values(square, &scaled));
        }
        Some(scaled) => {
            facts.push(symmetry(square, &scaled));
            facts.push("The list gives no costs, so there is no c.".to_owned());
        }
        None => facts.push("The numbers are too long to be compared with each other.".to_owned()),
    }
    facts.extend(connection(square));
    facts
}

/// Every sentence on the arcs of a path from a start to an end, both stops. O(n²).
pub(crate) async fn of_path(
    square: &Square,
    (start, end): (&str, &str),
    pace: &Pace,
) -> Vec<String> {
    let drives = plural(square.cells.iter().flatten().count(), "drive", "drives");
    let mut facts = vec![format!("{}, {drives}.", plural(square.len(), "stop", "stops"))];
    match Scaled::of(square, pace).await {
        Some(scaled) => {
            facts.push(symmetry(square, &scaled));
            facts.extend(odd_values(square, &scaled));
        }
        None => facts.push("The numbers are too long to be compared with each other.".to_owned()),
    }
    facts.push(match fewest_drives(square, start, end) {
        Some(0) => format!("{start} is both start and end."),
        Some(fewest) => format!(
            "{end} can be reached from {start}, in {} or more.",
            plural(fewest, "drive", "drives")
        ),
        None => format!("{end} cannot be reached from {start}: there is no path."),
    });
    facts
}

/// The fewest drives from a stop to another, breadth first; none when it is not reached.
fn fewest_drives(square: &Square, start: &str, end: &str) -> Option<usize> {
    let place = |label: &str| square.labels.iter().position(|known| known == label);
    let (start, end) = (place(start)?, place(end)?);
    let mut seen = vec![false; square.len()];
    seen[start] = true;
    let (mut front, mut drives) = (vec![start], 0);
    while !front.contains(&end) {
        let mut next = Vec::new();
        for i in front {
            for (j, seen) in seen.iter_mut().enumerate() {
                if square.at(i, j).is_some() && !std::mem::replace(seen, true) {
                    next.push(j);
                }
            }
        }
        if next.is_empty() {
            return None;
        }
        (front, drives) = (next, drives + 1);
    }
    Some(drives)
}

fn symmetry(square: &Square, scaled: &Scaled) -> String {
    let n = scaled.n;
    let (mut differ, mut one_way) = (0, 0);
    let mut most: Option<(i64, usize, usize)> = None;
    for i in 0..n {
        for j in i + 1..n {
            match (scaled.at(i, j), scaled.at(j, i)) {
                (Some(there), Some(back)) if there != back => {
                    differ += 1;
                    let by = (there - back).abs();
                    if most.is_none_or(|(most, ..)| by > most) {
                        most = Some(if there > back { (by, i, j) } else { (by, j, i) });
                    }
                }
                (Some(_), None) | (None, Some(_)) => one_way += 1,
                _ => {}
            }
        }
    }
    let pairs = grouped(n * n.saturating_sub(1) / 2);
    let one_way = match one_way {
        0 => String::new(),
        count => format!("; {} one way only", plural(count, "pair is driven", "pairs are driven")),
    };
    match most {
        None if one_way.is_empty() => "Symmetric.".to_owned(),
        None => format!("Not symmetric{one_way}."),
        Some((by, i, j)) => {
            let text = |i, j| scaled.at(i, j).map_or_else(String::new, |value| scaled.text(value));
            format!(
                "Not symmetric: {} of {pairs} pairs differ, by up to {} ({} {}, back {}){one_way}.",
                grouped(differ),
                scaled.text(by),
                square.drive(i, j),
                text(i, j),
                text(j, i)
            )
        }
    }
}

async fn triangle(square: &Square, scaled: &Scaled, pace: &Pace) -> String {
    let found = triangles(scaled, pace).await;
    let drawn = if scaled.n > EVERY_TRIPLE { " drawn with a fixed seed" } else { "" };
    let counts = format!(
        "Triangle inequality broken for {} of {}{drawn}",
        grouped(found.broken),
        plural(found.examined, "triple", "triples")
    );
    let Some((excess, [i, k, j])) = found.worst else { return format!("{counts}.") };
    let direct = scaled.at(i, j).unwrap_or(0);
    format!(
        "{counts}, most by {}: {} is {}, by way of {} it is {}.",
        scaled.text(excess),
        square.drive(i, j),
        scaled.text(direct),
        square.labels[k],
        scaled.text(direct - excess)
    )
}

/// Sentences on zero, negative and huge values.
fn odd_values(square: &Square, scaled: &Scaled) -> Vec<String> {
    let mut all: Vec<i64> = scaled.values.iter().flatten().copied().collect();
    let middle = all.len() / 2;
    let median = if all.is_empty() { 0 } else { *all.select_nth_unstable(middle).1 };
    let mut facts = Vec::new();
    let mut say = |one: &str, many: &str, advice: &str, odd: &dyn Fn(i64) -> bool| {
        let count = all.iter().filter(|value| odd(**value)).count();
        let first = scaled.values.iter().position(|value| value.is_some_and(odd));
        if let Some(place) = first {
            let value = scaled.values[place].map_or_else(String::new, |value| scaled.text(value));
            let drive = square.drive(place / scaled.n, place % scaled.n);
            let verb = if count == 1 { one } else { many };
            facts.push(format!(
                "{} {verb} (first: {drive} {value}){advice}.",
                plural(count, "drive", "drives")
            ));
        }
    };
    say("costs nothing", "cost nothing", "", &|value| value == 0);
    say("is negative", "are negative", "", &|value| value < 0);
    let huge = |value: i64| {
        median > 0 && value / 100 >= median
            || value / 10 >= median && median > 0 && is_nines(&scaled.text(value))
    };
    let advice = ": if that stands for no drive, leave the cell blank";
    say("is huge", "are huge", advice, &huge);
    facts
}

/// Whether a number is written as four or more nines, as placeholders are.
fn is_nines(text: &str) -> bool {
    text.len() >= 4 && text.bytes().all(|byte| byte == b'9')
}

fn missing_drives(square: &Square, missing: usize) -> String {
    let n = square.len();
    let blank = |&place: &usize| place / n != place % n && square.cells[place].is_none();
    let first = (0..n * n).find(blank).unwrap_or(0);
    format!(
        "{} (first: {}).",
        plural(missing, "cell is blank: no drive", "cells are blank: no drive"),
        square.drive(first / n, first % n)
    )
}

/// A sentence where no round can exist because some stop cannot be reached from the first, or
/// the first from it. O(n²).
fn connection(square: &Square) -> Option<String> {
    let n = square.len();
    let apart = unreached(square, |i, j| square.at(i, j).is_some() || square.at(j, i).is_some());
    if let Some(stop) = apart {
        let (first, stop) = (&square.labels[0], &square.labels[stop]);
        return Some(format!(
            "The drives fall into {} parts that nothing joins ({first} and {stop} are apart): \
             there is no round.",
            parts(square)
        ));
    }
    let first = square.labels.first().filter(|_| n > 1)?;
    if let Some(stop) = unreached(square, |i, j| square.at(i, j).is_some()) {
        let stop = &square.labels[stop];
        return Some(format!("{stop} cannot be reached from {first}: there is no round."));
    }
    let stop = unreached(square, |i, j| square.at(j, i).is_some())?;
    Some(format!("{first} cannot be reached from {}: there is no round.", square.labels[stop]))
}

/// The first stop that steps from the first one do not reach.
fn unreached(square: &Square, step: impl Fn(usize, usize) -> bool) -> Option<usize> {
    let mut seen = vec![false; square.len()];
    reach(&mut seen, 0, step);
    seen.iter().position(|seen| !seen)
}

/// Marks what steps from `start` reach.
fn reach(seen: &mut [bool], start: usize, step: impl Fn(usize, usize) -> bool) {
    let mut open = vec![start];
    while let Some(i) = open.pop() {
        if std::mem::replace(&mut seen[i], true) {
            continue;
        }
        open.extend((0..seen.len()).filter(|&j| !seen[j] && step(i, j)));
    }
}

/// How many parts no drive joins.
fn parts(square: &Square) -> usize {
    let mut seen = vec![false; square.len()];
    let mut parts = 0;
    while let Some(start) = seen.iter().position(|seen| !seen) {
        reach(&mut seen, start, |i, j| square.at(i, j).is_some() || square.at(j, i).is_some());
        parts += 1;
    }
    parts
}

/// A sentence where stops stand at the same place. O(n log n).
pub(crate) fn same_places(labels: &[String], points: &Points) -> Option<String> {
    let mut seen: BTreeMap<(u64, u64), usize> = BTreeMap::new();
    let mut pairs = Vec::new();
    for (stop, (x, y)) in points.places.iter().enumerate() {
        let key = ((x + 0.0).to_bits(), (y + 0.0).to_bits());
        if let Some(first) = seen.insert(key, stop) {
            pairs.push((first, stop));
        }
    }
    let &(first, second) = pairs.first()?;
    Some(format!(
        "{} where another does (first: {} and {}).",
        plural(pairs.len(), "stop stands", "stops stand"),
        labels[first],
        labels[second]
    ))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::number::Number;
    use crate::pace::Slices;
    use crate::square::counted;

    fn facts(rows: &[&[i32]]) -> Vec<String> {
        let mut square = Square::empty(counted(rows.len()));
        for (i, row) in rows.iter().enumerate() {
            for (j, &value) in row.iter().enumerate() {
                square.put(i, j, (value != -99).then(|| Number::from(value)));
            }
        }
        Slices::whole(async |pace| of(&square, "minutes", &pace).await)
    }

    #[test]
    fn a_plain_square() {
        assert_eq!(
            facts(&[&[0, 5, 7], &[5, 0, 3], &[7, 3, 0]]),
            [
                "3 stops, 6 drives, minutes.",
                "Symmetric.",
                "Triangle inequality broken for 0 of 6 triples."
            ]
        );
    }

    #[test]
    fn oddities_are_named() {
        let found = facts(&[&[0, 5, 9999], &[4, 0, 0], &[-7, -99, 0]]);
        assert_eq!(
            found,
            [
                "3 stops, 5 drives, minutes.",
                "Not symmetric: 2 of 3 pairs differ, by up to 10006 (1 → 3 9999, back -7); \
                 1 pair is driven one way only.",
                "Triangle inequality broken for 2 of 3 triples, most by 9994: 1 → 3 is 9999, \
                 by way of 2 it is 5.",
                "1 drive costs nothing (first: 2 → 3 0).",
                "1 drive is negative (first: 3 → 1 -7).",
                "1 drive is huge (first: 1 → 3 9999): if that stands for no drive, leave the \
                 cell blank.",
                "1 cell is blank: no drive (first: 3 → 2).",
            ]
        );
    }

    #[test]
    fn what_is_apart_is_said() {
        let none = -99;
        let apart = facts(&[&[0, 1, none], &[1, 0, none], &[none, none, 0]]);
        assert!(apart.last().unwrap().starts_with("The drives fall into 2 parts"), "{apart:?}");
        let there = facts(&[&[0, 1, none], &[1, 0, none], &[1, none, 0]]);
        assert_eq!(there.last().unwrap(), "3 cannot be reached from 1: there is no round.");
        let back = facts(&[&[0, 1, 1], &[1, 0, 1], &[none, none, 0]]);
        assert_eq!(back.last().unwrap(), "1 cannot be reached from 3: there is no round.");
    }

    #[test]
    fn units_are_known_words() {
        assert!(is_unit("minutes") && is_unit("Minutes") && is_unit("km") && is_unit("€"));
        assert!(!is_unit("S") && !is_unit("from") && !is_unit(""));
    }

    #[test]
    fn same_places_are_said() {
        let points =
            Points { places: vec![(0.0, 1.0), (-0.0, 1.0), (2.0, 1.0)], geographic: false };
        assert_eq!(
            same_places(&counted(3), &points).unwrap(),
            "1 stop stands where another does (first: 1 and 2)."
        );
    }
}
