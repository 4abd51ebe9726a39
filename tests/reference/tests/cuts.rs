//! What each class of general cuts gains alone on the golden models: the share of the gap between the
//! relaxation and the integer optimum that rounds at the root close. The table stands in
//! `fixtures/cuts.txt` and is held to it; `HULLWARD_CUTS=write` writes it anew, to be read before it
//! is kept. Optima: the stored values, computed with HiGHS.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]
#![allow(clippy::print_stdout, reason = "which classes gain where, for the reader")]

use std::fmt::Write;
use std::path::Path;
use std::rc::Rc;

use hullward_tests_reference::golden::{self, Golden};
use hullward_tests_reference::round_trip::root;
use model::{Model, Sense};
use tree::{Class, Classes, Cuts, Progress, Search, Settings};

/// The bound of the root with these classes, up to the optimum; none where no cuts were looked for.
fn bound(model: &Rc<Model>, classes: Classes) -> Option<f64> {
    let settings =
        Settings { cuts: Cuts::at_root(classes), node_limit: Some(1), ..Settings::default() };
    let mut search = Search::new(Rc::clone(model), settings);
    while !matches!(search.advance(u64::MAX), Progress::RootSolved | Progress::Finished) {}
    search.run(None);
    while search.advance(u64::MAX) != Progress::Finished {}
    let cuts = search.cuts()?;
    assert_eq!(cuts.refused, 0);
    cuts.bound
}

/// The share of the gap that is closed, in per cent.
fn closed(golden: &Golden, model: &Rc<Model>, lp: f64, classes: Classes) -> Option<f64> {
    let sign = if model.sense() == Sense::Minimise { 1.0 } else { -1.0 };
    let (gap, gained) = (sign * (golden.mip - lp), sign * (bound(model, classes)? - lp));
    let name = &golden.name;
    assert!(
        gained <= gap + 1e-5 * (1.0 + golden.mip.abs()),
        "{name} {classes:?}: over the optimum"
    );
    assert!(gained >= -1e-6 * (1.0 + lp.abs()), "{name} {classes:?}: under the relaxation");
    Some(100.0 * gained / gap)
}

fn table() -> String {
    let mut text = "share of the root gap that each class closes alone, per cent\n".to_owned();
    write!(text, "{:<32}", "model").unwrap();
    Class::ALL.iter().for_each(|(_, word)| write!(text, "{word:>12}").unwrap());
    writeln!(text, "{:>12}", "all").unwrap();
    for golden in golden::all() {
        let model = Rc::new(golden.model.clone());
        let lp = root(&model).bound.unwrap();
        if (golden.mip - lp).abs() <= 1e-6 * (1.0 + golden.mip.abs()) {
            continue;
        }
        write!(text, "{:<32}", golden.name).unwrap();
        let single = Class::ALL.iter().map(|&(class, _)| [class].into_iter().collect());
        for classes in single.chain([Classes::all()]) {
            match closed(&golden, &model, lp, classes) {
                Some(share) if share.abs() >= 0.05 => write!(text, "{share:>12.1}").unwrap(),
                _ => write!(text, "{:>12}", "·").unwrap(),
            }
        }
        text.push('\n');
    }
    text
}

#[test]
fn each_class_closes_what_the_table_says() {
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("fixtures/cuts.txt");
    let found = table();
    if std::env::var("HULLWARD_CUTS").as_deref() == Ok("write") {
        std::fs::write(&path, &found).unwrap();
    }
    let kept = std::fs::read_to_string(&path).unwrap();
    for (found, kept) in found.lines().zip(kept.lines()) {
        assert_eq!(found, kept, "read the change, then HULLWARD_CUTS=write");
    }
    assert_eq!(found.lines().count(), kept.lines().count());
    for (place, (_, word)) in Class::ALL.iter().enumerate() {
        let gains =
            |line: &str| line.chars().skip(32 + 12 * place).take(12).any(|c| c.is_ascii_digit());
        let some = kept.lines().skip(2).filter(|line| gains(line)).count();
        println!("{word}: gains on {some} models");
    }
}
