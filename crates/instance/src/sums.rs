//! Sums, ranges and repetition of the numbers of an instance: what two people compare to know that
//! they have the same data.

use std::collections::BTreeSet;

use crate::complaint::{grouped, plural};
use crate::instance::{Datum, Instance};
use crate::number::{Number, number_text, plus, sum_text};
use crate::pace::Pace;

/// How many numbers are sorted in one step.
const RUN: usize = 4_096;

/// A sentence for each table of numbers. O(cells · log).
pub(crate) async fn of(instance: &Instance, pace: &Pace) -> Vec<String> {
    let mut sentences = Vec::new();
    for (name, datum) in instance.data() {
        let Datum::Table { arity, cells } = datum else { continue };
        if cells.is_empty() || instance.assumed.contains(name) {
            continue;
        }
        let unit = instance.units.get(name).filter(|unit| !unit.is_empty());
        let unit = unit.map_or_else(String::new, |unit| format!(" {unit}"));
        let mut values = Vec::with_capacity(cells.len());
        for value in cells.values() {
            pace.spend(1).await;
            values.push(value);
        }
        let numbers = numbers(&values, pace).await;
        let spread = spread(&values, pace).await;
        let mut places = Vec::with_capacity(*arity);
        for place in 0..*arity {
            places.push(labels(cells.keys().map(|key| key[place].as_str()), pace).await);
        }
        let filled = filled(&places, cells.len());
        sentences.push(format!("{name}: {numbers}{unit}, {spread}{filled}."));
    }
    sentences
}

/// How many labels are different.
async fn labels<'l>(all: impl Iterator<Item = &'l str>, pace: &Pace) -> usize {
    let (mut seen, mut last) = (BTreeSet::new(), None);
    for label in all {
        pace.spend(2).await;
        // keys come in order: the first of them is mostly that before
        if last != Some(label) {
            seen.insert(label);
        }
        last = Some(label);
    }
    seen.len()
}

/// "306 numbers from 4 to 37, sum 5,312"
async fn numbers(values: &[&Number], pace: &Pace) -> String {
    let count = plural(values.len(), "number", "numbers");
    let Some(&first) = values.first() else { return count };
    let (mut least, mut most, mut sum) = (first, first, Some(Number::ZERO));
    for &value in values {
        pace.spend(4).await;
        least = least.min(value);
        most = most.max(value);
        sum = sum.and_then(|sum| plus(sum, value));
    }
    let ends = if least == most {
        format!(", all {}", number_text(first))
    } else {
        format!(" from {} to {}", number_text(least), number_text(most))
    };
    format!("{count}{ends}, sum {}", sum_text(sum.as_ref()))
}

/// Whether they are whole, and how many differ.
async fn spread(values: &[&Number], pace: &Pace) -> String {
    let mut fractions = 0;
    for value in values {
        pace.spend(1).await;
        fractions += usize::from(!value.is_int());
    }
    let different = different(values, pace).await;
    let whole = match fractions {
        0 => "all whole".to_owned(),
        some => format!("{} not whole", grouped(some)),
    };
    match values.len() - different {
        0 => format!("{whole}, no two alike"),
        _ => format!("{whole}, {} different", grouped(different)),
    }
}

/// How many are different; whole numbers are compared fast.
async fn different(values: &[&Number], pace: &Pace) -> usize {
    let mut whole = Vec::with_capacity(values.len());
    for value in values {
        pace.spend(1).await;
        let number = value.is_int().then(|| i64::try_from(value.numerator().clone()).ok());
        let Some(number) = number.flatten() else { return of_all_kinds(values, pace).await };
        whole.push(number);
    }
    sorted(&mut whole, pace).await;
    whole.dedup();
    whole.len()
}

/// How many of any numbers are different.
async fn of_all_kinds(values: &[&Number], pace: &Pace) -> usize {
    let mut met = BTreeSet::new();
    for value in values {
        pace.spend(8).await;
        met.insert(value);
    }
    met.len()
}

/// Sorts in slices: runs of a fixed length, then merged by twos.
async fn sorted(values: &mut Vec<i64>, pace: &Pace) {
    for run in values.chunks_mut(RUN) {
        pace.spend(2 * run.len()).await;
        run.sort_unstable();
    }
    let mut length = RUN;
    while length < values.len() {
        let mut merged = Vec::with_capacity(values.len());
        for pair in values.chunks(2 * length) {
            let (mut left, mut right) = pair.split_at(length.min(pair.len()));
            while let (Some((a, more)), Some((b, others))) =
                (left.split_first(), right.split_first())
            {
                pace.spend(1).await;
                if a <= b {
                    merged.push(*a);
                    left = more;
                } else {
                    merged.push(*b);
                    right = others;
                }
            }
            merged.extend_from_slice(left);
            merged.extend_from_slice(right);
        }
        *values = merged;
        length *= 2;
    }
}

/// How much of the rectangle is filled, where not all is.
fn filled(places: &[usize], cells: usize) -> String {
    let all = places.iter().try_fold(1_usize, |all, &place| all.checked_mul(place));
    match all {
        Some(all) if all > cells && places.len() > 1 => {
            let tenths = cells.saturating_mul(1000) / all;
            format!(", {}.{} % of the cells filled", tenths / 10, tenths % 10)
        }
        _ => String::new(),
    }
}

#[cfg(test)]
mod tests {
    use crate::read;

    #[test]
    fn sums_ranges_and_repetition_are_told() {
        let sums = read("c by i, j\na b 1.5\nb a 3\nb b 3\n\nq by i\na 2\nb 5\n", None).sums;
        assert_eq!(
            sums,
            [
                "c: 3 numbers from 1.5 to 3, sum 7.5, 1 not whole, 2 different, 75.0 % of the cells filled.",
                "q: 2 numbers from 2 to 5, sum 7, all whole, no two alike.",
            ]
        );
    }
}
