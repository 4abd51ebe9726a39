//! Sums, ranges and repetition of the numbers of an instance: what two people compare to know that
//! they have the same data.

use std::collections::BTreeSet;

use crate::complaint::{grouped, plural};
use crate::instance::{Datum, Instance};
use crate::number::{Number, number_text, total_text};
use crate::pace::Pace;

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
        let values: Vec<&Number> = cells.values().collect();
        pace.spend(4 * cells.len()).await;
        let numbers = numbers(&values);
        pace.spend(4 * cells.len()).await;
        let spread = spread(&values);
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
fn numbers(values: &[&Number]) -> String {
    let ends = values.iter().min().zip(values.iter().max());
    let ends = match ends {
        Some((least, most)) if least != most => {
            format!(" from {} to {}", number_text(least), number_text(most))
        }
        Some((only, _)) => format!(", all {}", number_text(only)),
        None => String::new(),
    };
    let count = plural(values.len(), "number", "numbers");
    format!("{count}{ends}, sum {}", total_text(values.iter().copied()))
}

/// Whether they are whole, and how many differ.
fn spread(values: &[&Number]) -> String {
    let fractions = values.iter().filter(|value| !value.is_int()).count();
    let different = different(values);
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
fn different(values: &[&Number]) -> usize {
    let whole = |value: &&Number| {
        value.is_int().then(|| i64::try_from(value.numerator().clone()).ok()).flatten()
    };
    match values.iter().map(whole).collect::<Option<Vec<i64>>>() {
        Some(mut whole) => {
            whole.sort_unstable();
            whole.dedup();
            whole.len()
        }
        None => values.iter().collect::<BTreeSet<_>>().len(),
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
