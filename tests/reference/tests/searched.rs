//! This project's own search, set as a production solver would be, on instances of MIPLIB 3 and the
//! OR-Library: the published optimum, on some with every leaf proved in exact arithmetic.
//!
//! Optima: MIPLIB 3's catalogue (Bixby, Ceria, McZeal, Savelsbergh, Optima 58 (1998) 12-15); the
//! OR-Library's lists `uncapopt` and `capopt`, the numbers in `mknap1`, and for generalised assignment
//! values computed with HiGHS. The quick ones are always searched; with `HULLWARD_WHOLE` the longer
//! ones as well, and those that no search here closes within its limits are named.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]
#![allow(clippy::print_stderr, reason = "a check says what it has seen")]

use std::rc::Rc;

use hullward_tests_reference::round_trip::{formulation, rival};
use hullward_tests_reference::{open_data, whole};
use instance::Instance;
use model::{Model, mps};
use tree::{Progress, Search, Settings, Status, Summary};

const MIPLIB: &str = "MIPLIB 3";
const OR_LIBRARY: &str = "the OR-Library, J. E. Beasley, Brunel University";

/// What is done in one slice, in non-zeros touched.
const SLICE: u64 = 1_000_000;

/// A search to its end, or until so many non-zeros are touched.
fn searched(model: &Rc<Model>, most: u64) -> Summary {
    let mut search = Search::new(Rc::clone(model), Settings::production());
    while search.work().ticks < most {
        match search.advance(SLICE) {
            Progress::Finished => break,
            Progress::RootSolved | Progress::Paused => search.run(None),
            Progress::Working => {}
        }
    }
    search.summary()
}

/// Holds a search to the published optimum; `tolerance` is half a unit of its last digit. Says
/// what is proved in exact arithmetic; of some it must be every leaf.
fn held(name: &str, model: &Rc<Model>, (optimum, tolerance): (f64, f64)) {
    let found = searched(model, u64::MAX);
    assert_eq!(found.status, Status::Optimal, "{name}: {:?}", found.stopped);
    let value = found.incumbent.unwrap();
    assert!((value - optimum).abs() <= tolerance, "{name}: {value} for {optimum}");
    assert_eq!(found.bound, found.incumbent, "{name}");
    let unproved = found.leaves_unchecked;
    assert!(found.checked || !PROVED.contains(&name), "{name}: {unproved} leaves are not proved");
    eprintln!("{name}: {} nodes, checked {}, unproved {unproved}", found.nodes, found.checked);
}

fn of_miplib(name: &str) -> Option<Rc<Model>> {
    let text = open_data(&format!("miplib3/{name}.mps"), MIPLIB)?;
    let (model, _) = mps::read(&text).unwrap_or_else(|wrong| panic!("{name}: {wrong:?}"));
    Some(Rc::new(model))
}

/// Searches every leaf of which is proved.
const PROVED: [&str; 10] =
    ["flugpl", "p0033", "egout", "dcmulti", "lseu", "rgn", "pp08a", "mod008", "bell5", "pp08aCUTS"];

/// By name, the optimum and how far the printed one may be off.
const QUICK: [(&str, (f64, f64)); 5] = [
    ("flugpl", (1_201_500.0, 1e-6)),
    ("p0033", (3_089.0, 1e-6)),
    ("egout", (568.101, 5e-4)),
    ("dcmulti", (188_182.0, 1e-6)),
    ("lseu", (1_120.0, 1e-6)),
];
const LONGER: [(&str, (f64, f64)); 15] = [
    ("khb05250", (106_940_226.0, 1e-6)),
    ("vpm1", (20.0, 1e-6)),
    ("gt2", (21_166.0, 1e-6)),
    ("rgn", (82.199_9, 1e-3)),
    ("pp08a", (7_350.0, 1e-6)),
    ("mod008", (307.0, 1e-6)),
    ("bell5", (8_966_406.49, 5e-3)),
    ("pp08aCUTS", (7_350.0, 1e-6)),
    ("bell3a", (878_430.32, 5e-3)),
    ("p0282", (258_411.0, 1e-6)),
    ("stein27", (18.0, 1e-6)),
    ("misc03", (3_360.0, 1e-6)),
    ("p0201", (7_615.0, 1e-6)),
    ("blend2", (7.598_985, 1e-6)),
    ("vpm2", (13.75, 1e-6)),
];

#[test]
fn published_optima_of_miplib() {
    for (name, optimum) in QUICK.into_iter().chain(LONGER.into_iter().filter(|_| whole())) {
        let Some(model) = of_miplib(name) else { return };
        held(name, &model, optimum);
    }
}

fn part(file: &str, part: usize) -> Option<Instance> {
    let text = open_data(file, OR_LIBRARY)?;
    let reading = instance::read_part(&text, None, Some(part));
    Some(reading.instance.unwrap_or_else(|| panic!("{file}: {:?}", reading.complaints)))
}

#[test]
fn published_optima_of_knapsacks_with_several_rows() {
    let all =
        [(1, 3_800.0), (2, 8_706.1), (4, 6_120.0), (5, 12_400.0), (6, 10_618.0), (7, 16_537.0)];
    for (at, best) in all {
        let Some(instance) = part("mknap/mknap1.txt", at) else { return };
        for id in ["multi-knapsack/plain", "multi-knapsack/covers"] {
            held(&format!("{id} on mknap1-{at}"), &rival(id, &instance), (best, 1e-6));
        }
    }
}

const AGENTS: &str = "Assignment\ndata\n I  agents\n J  jobs\n c_{i,j} ∀ i ∈ I, j ∈ J\n a_{i,j} ∀ i ∈ I, j ∈ J\n b_i ∀ i ∈ I\n\
    maximise\n Σ_{i ∈ I, j ∈ J} c_{i,j} x_{i,j}\nsubject to\n Σ_{i ∈ I} x_{i,j} = 1 ∀ j ∈ J (one)\n \
    Σ_{j ∈ J} a_{i,j} x_{i,j} ≤ b_i ∀ i ∈ I (fit)\n x_{i,j} ∈ {0,1} ∀ i ∈ I, j ∈ J\n";

#[test]
fn optima_of_generalised_assignment() {
    let quick = [("gap1", 1, 336.0), ("gap1", 2, 327.0), ("gap1", 4, 341.0), ("gap1", 5, 326.0)];
    let longer = [
        ("gap2", 1, 434.0),
        ("gap2", 2, 436.0),
        ("gap2", 3, 420.0),
        ("gap2", 5, 428.0),
        ("gap3", 1, 580.0),
        ("gap3", 2, 564.0),
        ("gap3", 3, 573.0),
        ("gap3", 4, 570.0),
        ("gap3", 5, 564.0),
    ];
    for (file, at, best) in quick.into_iter().chain(longer.into_iter().filter(|_| whole())) {
        let Some(instance) = part(&format!("gap/{file}.txt"), at) else { return };
        held(&format!("{file}-{at}"), &formulation(AGENTS, &instance), (best, 1e-6));
    }
}

/// Sites without a limit, each link on its own: the relaxation is nearly whole.
#[test]
fn published_optima_of_sites() {
    let all = [
        ("cap71", 932_615.750),
        ("cap72", 977_799.400),
        ("cap74", 1_034_976.975),
        ("cap73", 1_010_641.450),
        ("cap101", 796_648.437),
        ("cap102", 854_704.200),
        ("cap103", 893_782.112),
        ("cap104", 928_941.750),
        ("cap131", 793_439.562),
        ("cap132", 851_495.325),
        ("cap133", 893_076.712),
        ("cap134", 928_941.750),
    ];
    for (file, best) in all {
        let Some(instance) = part(&format!("cap/{file}.txt"), 1) else { return };
        held(file, &rival("ufl/split", &instance), (best, 1e-3));
    }
}

/// What no search here need close within these limits is not passed over in silence: each has a bound and
/// a plan on the right sides of the published optimum.
#[test]
fn what_is_not_closed_is_bounded_on_both_sides() {
    let open: [(&str, f64); 1] = [("pk1", 11.0)];
    if !whole() {
        return;
    }
    for (name, optimum) in open {
        let Some(model) = of_miplib(name) else { return };
        let found = searched(&model, 300_000_000);
        let slack = 1e-4 * optimum.abs();
        assert!(found.bound.is_none_or(|bound| bound <= optimum + slack), "{name}: {found:?}");
        assert!(found.incumbent.is_none_or(|value| value >= optimum - slack), "{name}: {found:?}");
        eprintln!("{name}: {:?} {:?} to {:?}", found.status, found.bound, found.incumbent);
    }
}
