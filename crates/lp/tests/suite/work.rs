//! The work of root solves against a list: speed in a measure that is the same on every machine.
//!
//! `fixtures/work.txt` holds iterations and nonzeros touched as they were when it was last written.
//! Less work is welcome; more than the tolerance fails. The message of a failure is the whole list
//! as it is now: it becomes the file when the change is meant.

use crate::instances::{
    facilities, lot_sizing, lot_sizing_by_use, multi_commodity, one_machine, packing,
    position_labels, single_commodity,
};
use crate::shadow::Shadow;
use hullward_lp::Limits;

/// What a count may rise by.
const TOLERANCE: f64 = 1.15;

const HELD: &str = include_str!("../fixtures/work.txt");

fn problems() -> Vec<(&'static str, Shadow)> {
    vec![
        ("position-labels-20", position_labels(20, 1)),
        ("position-labels-40", position_labels(40, 1)),
        ("one-commodity-20", single_commodity(20, 1)),
        ("one-commodity-30", single_commodity(30, 1)),
        ("commodities-10", multi_commodity(10, 1)),
        ("commodities-15", multi_commodity(15, 1)),
        ("facilities-20x50-weak", facilities(20, 50, false, 1)),
        ("facilities-20x50-strong", facilities(20, 50, true, 1)),
        ("facilities-50x100-strong", facilities(50, 100, true, 1)),
        ("lot-sizing-50", lot_sizing(50, 1)),
        ("lot-sizing-by-use-50", lot_sizing_by_use(50, 1)),
        ("packing-25x12", packing(25, 12, 1)),
        ("packing-50x25", packing(50, 25, 1)),
        ("one-machine-20", one_machine(20, 1)),
    ]
}

/// The held counts of a problem.
fn held(name: &str) -> Option<(f64, f64)> {
    let line = HELD.lines().find(|line| line.split(' ').next() == Some(name))?;
    let mut numbers = line.split(' ').skip(1).map(|word| word.parse().unwrap());
    Some((numbers.next()?, numbers.next()?))
}

#[test]
fn root_solves_take_no_more_work_than_they_did() {
    let (mut now, mut more) = (String::new(), Vec::new());
    for (name, shadow) in problems() {
        let mut simplex = shadow.simplex();
        simplex.solve(Limits::default());
        let stats = simplex.stats();
        now.push_str(&format!("{name} {} {}\n", stats.iterations, stats.ticks));
        let (iterations, ticks) = held(name).unwrap_or_default();
        let rose = |found: u64, held: f64| found as f64 > TOLERANCE * held;
        if rose(stats.iterations, iterations) || rose(stats.ticks, ticks) {
            more.push(name);
        }
    }
    assert_eq!(HELD.lines().count(), problems().len(), "one line a problem:\n{now}");
    assert!(more.is_empty(), "more work than held: {more:?}; now\n{now}");
}
