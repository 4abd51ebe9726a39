//! Values of relaxations on instances drawn with seed 1.
//!
//! Source of the values: HiGHS 1.16 and microlp 0.7 on the same instances, which agree on every
//! one.

use crate::instances::{
    facilities, lot_sizing, lot_sizing_by_use, multi_commodity, one_machine, packing,
    position_labels, single_commodity,
};
use crate::shadow::{Shadow, Verdict};
use hullward_lp::{Limits, Progress};

fn check(name: &str, shadow: &Shadow, value: f64) {
    let verdict = shadow.verdict(shadow.simplex().solve(Limits::default()), name);
    assert!(
        verdict.agrees(Verdict::Optimal(value), 1e-9),
        "{name}: {verdict:?}, should be {value}"
    );
}

#[test]
fn round_trips() {
    check("position labels 10", &position_labels(10, 1), 12_436.0 / 9.0);
    check("position labels 20", &position_labels(20, 1), 2_794.736_842_1);
    check("position labels 30", &position_labels(30, 1), 3_763.896_551_7);
    check("position labels 50", &position_labels(50, 1), 4_669.265_306_1);
    check("one commodity 10", &single_commodity(10, 1), 1_500.444_444_4);
    check("one commodity 20", &single_commodity(20, 1), 3_121.157_894_7);
    check("one commodity 30", &single_commodity(30, 1), 3_851.793_103_4);
    check("one commodity 40", &single_commodity(40, 1), 4_312.923_076_9);
    check("a commodity a stop 10", &multi_commodity(10, 1), 1_996.0);
    check("a commodity a stop 15", &multi_commodity(15, 1), 3_692.0);
}

#[test]
fn location_packing_lots_and_machine() {
    check("facilities 20x50 weak", &facilities(20, 50, false, 1), 781.6);
    check("facilities 20x50 strong", &facilities(20, 50, true, 1), 1_526.0);
    check("facilities 50x100 weak", &facilities(50, 100, false, 1), 914.84);
    check("facilities 50x100 strong", &facilities(50, 100, true, 1), 2_482.0);
    check("packing 25x12", &packing(25, 12, 1), 7.0 + 112.0 / 150.0);
    check("packing 50x25", &packing(50, 25, 1), 14.0 + 97.0 / 150.0);
    check("lot sizing 50", &lot_sizing(50, 1), 4_162.973_298);
    check("lot sizing by use 50", &lot_sizing_by_use(50, 1), 7_248.0);
    check("one machine 20", &one_machine(20, 1), 7_431.0);
}

/// 6,937 rows: the largest problem asked for, in slices as the page takes them.
#[test]
fn a_commodity_a_stop_with_twenty_stops() {
    let shadow = multi_commodity(20, 1);
    let mut simplex = shadow.simplex();
    simplex.start(Limits::default());
    while simplex.advance(2_000_000) == Progress::Working {}
    let verdict = shadow.verdict(simplex.outcome().unwrap(), "20 stops");
    assert!(verdict.agrees(Verdict::Optimal(4_190.5), 1e-9), "{verdict:?}");
}
