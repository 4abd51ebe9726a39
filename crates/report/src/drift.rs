//! Results held against those of a regression pack, in sentences.

use record::pack::{Expected, TOLERANCE};

use crate::number::full;

/// What is compared of a rival, with the words for it.
fn measures(one: &Expected) -> [(&'static str, Option<f64>); 7] {
    let decade = |decade: Option<i32>| decade.map(f64::from);
    [
        ("rows", Some(f64::from(one.rows))),
        ("columns", Some(f64::from(one.columns))),
        // Below 2⁵³ as every count here.
        ("non-zeros", Some(one.nonzeros as f64)),
        ("root bound", one.root_bound),
        ("optimum", one.optimum),
        ("smallest power of ten among coefficients", decade(one.smallest_decade)),
        ("largest power of ten among coefficients", decade(one.largest_decade)),
    ]
}

fn slack(value: f64) -> f64 {
    TOLERANCE * (1.0 + value.abs())
}

/// What differs between a result and what was recorded of the same rival on the same instance, a
/// clause each.
#[must_use]
pub fn differences(before: &Expected, now: &Expected) -> Vec<String> {
    let pairs = measures(before).into_iter().zip(measures(now));
    let differing = pairs.filter(|((_, before), (_, now))| match (before, now) {
        (Some(before), Some(now)) => (before - now).abs() > slack(*before),
        _ => before.is_some() != now.is_some(),
    });
    let told = |value: Option<f64>| value.map_or_else(|| "none".to_owned(), full);
    differing
        .map(|((words, before), (_, now))| {
            format!("{words} {} in place of {}", told(now), told(before))
        })
        .collect()
}

/// The measures of a result that lie outside of all that was recorded of its rival, a clause each.
/// What is not known yet, or was never known, is not told.
#[must_use]
pub fn beyond(before: &[&Expected], now: &Expected) -> Vec<String> {
    let mut clauses = Vec::new();
    for (place, (words, now)) in measures(now).into_iter().enumerate() {
        let known = before.iter().filter_map(|before| measures(before)[place].1);
        let range = known.fold(None, |range: Option<(f64, f64)>, value| match range {
            None => Some((value, value)),
            Some((low, high)) => Some((
                if value < low { value } else { low },
                if value > high { value } else { high },
            )),
        });
        let (Some(now), Some((low, high))) = (now, range) else { continue };
        if now >= low - slack(low) && now <= high + slack(high) {
            continue;
        }
        clauses.push(if high - low <= slack(high) {
            format!("{words} {}, where {} was recorded", full(now), full(low))
        } else {
            format!(
                "{words} {}, outside of the recorded {} to {}",
                full(now),
                full(low),
                full(high)
            )
        });
    }
    clauses
}

#[cfg(test)]
mod tests {
    use super::*;

    fn one(rows: u32, root_bound: Option<f64>) -> Expected {
        Expected { rows, root_bound, ..Expected::default() }
    }

    #[test]
    fn what_is_the_same_to_six_digits_is_no_difference() {
        let before = one(3, Some(1e6));
        assert!(differences(&before, &one(3, Some(1e6 + 0.5))).is_empty());
        let told = differences(&before, &one(4, None));
        assert_eq!(told, ["rows 4 in place of 3", "root bound none in place of 1,000,000"]);
    }

    #[test]
    fn an_instance_is_held_against_the_least_and_the_most() {
        let (small, large) = (one(3, Some(10.0)), one(8, Some(30.0)));
        let recorded = [&small, &large];
        assert!(beyond(&recorded, &one(5, Some(30.0))).is_empty());
        assert!(beyond(&recorded, &one(5, None)).is_empty());
        let told = beyond(&recorded, &one(9, Some(2.5)));
        assert_eq!(
            told,
            [
                "rows 9, outside of the recorded 3 to 8",
                "root bound 2.5, outside of the recorded 10 to 30"
            ]
        );
        assert_eq!(beyond(&[&small], &one(9, None)), ["rows 9, where 3 was recorded"]);
        assert!(beyond(&[], &one(9, None)).is_empty());
    }
}
