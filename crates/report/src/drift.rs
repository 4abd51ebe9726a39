//! Results held against those of a regression pack, in sentences.

use record::pack::Expected;
use record::results::Status;

use crate::number::ten_digits;

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

/// How far two values may be away from each other and still count as the same.
fn slack(value: f64, tolerance: f64) -> f64 {
    tolerance * (1.0 + value.abs())
}

/// How the search ended, where that is known and is no limit; a relaxation that was solved and not
/// searched says nothing of the problem.
fn ending(one: &Expected) -> Option<Status> {
    let open = one.status == Some(Status::Limit)
        || one.status == Some(Status::Optimal) && one.optimum.is_none();
    one.status.filter(|_| !open)
}

/// What differs between a result and what was recorded of the same rival on the same instance, a
/// clause each. What was not known then is not compared.
#[must_use]
pub fn differences(before: &Expected, now: &Expected, tolerance: f64) -> Vec<String> {
    let mut clauses = other_ending(&[before], now);
    let pairs = measures(before).into_iter().zip(measures(now));
    let differing = pairs.filter_map(|((words, before), (_, now))| {
        let before = before?;
        let same = now.is_some_and(|now| (before - now).abs() <= slack(before, tolerance));
        let told = now.map_or_else(|| "none".to_owned(), ten_digits);
        (!same).then(|| format!("{words} {told} in place of {}", ten_digits(before)))
    });
    clauses.extend(differing);
    clauses
}

/// That a search ended in another way than all before.
fn other_ending(before: &[&Expected], now: &Expected) -> Vec<String> {
    let known: Vec<Status> = before.iter().filter_map(|before| ending(before)).collect();
    let other = ending(now).filter(|now| !known.is_empty() && !known.contains(now));
    let clause = |now: Status| format!("{}, where {} was recorded", now.word(), known[0].word());
    other.map(clause).into_iter().collect()
}

/// The measures of a result that lie outside of all that was recorded of its rival, a clause each.
/// What is not known yet, or was never known, is not told.
#[must_use]
pub fn beyond(before: &[&Expected], now: &Expected, tolerance: f64) -> Vec<String> {
    let slack = |value| slack(value, tolerance);
    let mut clauses = other_ending(before, now);
    for (place, (words, now)) in measures(now).into_iter().enumerate() {
        let known = before.iter().filter_map(|before| measures(before)[place].1);
        let (Some(now), Some((low, high))) = (now, range(known)) else { continue };
        if now >= low - slack(low) && now <= high + slack(high) {
            continue;
        }
        clauses.push(if high - low <= slack(high) {
            format!("{words} {}, where {} was recorded", ten_digits(now), ten_digits(low))
        } else {
            let (low, high) = (ten_digits(low), ten_digits(high));
            format!("{words} {}, outside of the recorded {low} to {high}", ten_digits(now))
        });
    }
    clauses
}

/// The least and the largest.
fn range(values: impl Iterator<Item = f64>) -> Option<(f64, f64)> {
    values.fold(None, |range, value| {
        let (low, high) = range.unwrap_or((value, value));
        Some((if value < low { value } else { low }, if value > high { value } else { high }))
    })
}

#[cfg(test)]
mod tests {
    use record::pack::TOLERANCE;

    use super::*;

    fn one(rows: u32, root_bound: Option<f64>) -> Expected {
        Expected { rows, root_bound, ..Expected::default() }
    }

    #[test]
    fn what_is_the_same_to_six_digits_is_no_difference() {
        let before = one(3, Some(1e6));
        assert!(differences(&before, &one(3, Some(1e6 + 0.5)), TOLERANCE).is_empty());
        let told = differences(&before, &one(4, None), TOLERANCE);
        assert_eq!(told, ["rows 4 in place of 3", "root bound none in place of 1,000,000"]);
    }

    /// A bound of 44/3 was told as 14.666666666666668 in place of 14.666666666666666.
    #[test]
    fn values_are_told_to_ten_digits() {
        let told = differences(&one(3, Some(44.0 / 3.0)), &one(3, Some(43.0 / 3.0)), TOLERANCE);
        assert_eq!(told, ["root bound 14.33333333 in place of 14.66666667"]);
    }

    #[test]
    fn an_instance_is_held_against_the_least_and_the_most() {
        let (small, large) = (one(3, Some(10.0)), one(8, Some(30.0)));
        let recorded = [&small, &large];
        assert!(beyond(&recorded, &one(5, Some(30.0)), TOLERANCE).is_empty());
        assert!(beyond(&recorded, &one(5, None), TOLERANCE).is_empty());
        let told = beyond(&recorded, &one(9, Some(2.5)), TOLERANCE);
        assert_eq!(
            told,
            [
                "rows 9, outside of the recorded 3 to 8",
                "root bound 2.5, outside of the recorded 10 to 30"
            ]
        );
        assert_eq!(beyond(&[&small], &one(9, None), TOLERANCE), ["rows 9, where 3 was recorded"]);
        assert!(beyond(&[], &one(9, None), TOLERANCE).is_empty());
    }

    #[test]
    fn an_ending_is_told_and_a_limit_is_none() {
        let ended =
            |status, optimum| Expected { status: Some(status), optimum, ..Expected::default() };
        let solved = ended(Status::Optimal, Some(4.0));
        let none = ended(Status::Infeasible, None);
        assert_eq!(
            beyond(&[&solved], &none, TOLERANCE),
            ["infeasible, where optimal was recorded"]
        );
        assert!(beyond(&[&solved, &none], &none, TOLERANCE).is_empty());
        // Neither a search that a limit stopped nor a relaxation alone says how it would have ended.
        for open in [ended(Status::Limit, None), ended(Status::Optimal, None)] {
            assert!(differences(&open, &solved, TOLERANCE).is_empty());
            assert!(differences(&open, &none, TOLERANCE).is_empty());
        }
    }
}
