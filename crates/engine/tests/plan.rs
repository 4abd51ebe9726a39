//! A plan that a person gives: taken as the incumbent when it is one, with every broken row in words
//! when it is none.

#![allow(clippy::unwrap_used, reason = "the helpers of these tests fail loudly")]

use hullward_engine::native::{USUAL_SLICE, Watch, run_rival};
use record::file;
use record::results::SearchReport;

/// Seven stops; the shortest round trip is 26, and that in their order 44.
const STOPS: &str = "\
\tAsh\tBirch\tCedar\tElm\tFir\tGorse\tHazel
Ash\t0\t3\t14\t15\t9\t8\t12
Birch\t2\t0\t6\t5\t3\t11\t7
Cedar\t5\t8\t0\t9\t7\t4\t13
Elm\t9\t3\t2\t0\t3\t12\t6
Fir\t8\t4\t6\t2\t0\t9\t5
Gorse\t7\t12\t5\t10\t8\t0\t3
Hazel\t11\t6\t12\t7\t4\t2\t0
";

const NAMES: [&str; 7] = ["Ash", "Birch", "Cedar", "Elm", "Fir", "Gorse", "Hazel"];

fn searched(rival: &str, plan: &str) -> SearchReport {
    let text = format!(
        "hullward = 1\n[instance]\ntext = '''\n{STOPS}'''\n[[rival]]\nfrom = \"{rival}\"\n[run]\n\
         heuristics = []\nplan = '''\n{plan}\n'''\n"
    );
    let scenario = file::parse(&text).scenario.unwrap();
    run_rival(&scenario, (0, 0), USUAL_SLICE, &mut |_| Watch::GoOn).search.unwrap()
}

#[test]
fn a_round_trip_is_taken_by_every_formulation() {
    for rival in ["atsp/labels", "atsp/one-commodity", "atsp/subtours"] {
        let legs = |line: &dyn Fn(&str, &str) -> String| -> String {
            let next = NAMES.iter().skip(1).chain(NAMES.first());
            let lines: Vec<String> = NAMES.iter().zip(next).map(|(a, b)| line(a, b)).collect();
            lines.join("\n")
        };
        let plans = [
            NAMES.join(", "),
            NAMES.join(" → ") + " → Ash",
            legs(&|a, b| format!("x[{a}, {b}] = 1")),
            legs(&|a, b| format!("{a}: {b}")),
            legs(&|a, b| format!("x {a} {b}")) + "\n# by hand",
        ];
        for plan in &plans {
            let search = searched(rival, plan);
            let told = search.plan.as_ref().unwrap();
            if search.nodes == 1 {
                assert!(told.remarks[0].contains("ended at its root"), "{rival}: {told:?}");
                continue;
            }
            assert_eq!((told.feasible, told.value), (true, Some(44.0)), "{rival}: {told:?}");
            assert!(told.remarks.is_empty(), "{rival}: {told:?}");
            let first = &search.measures.incumbents[0];
            assert_eq!((first.origin.as_str(), first.value), ("given", 44.0), "{rival}");
            assert_eq!(search.incumbent, Some(26.0), "{rival}");
        }
    }
}

#[test]
fn every_broken_row_is_named() {
    let search = searched("atsp/labels", "x[Ash, Birch] = 1\nx[Birch, Ash] = 1\nx[Elm, Fir] = 2");
    let told = search.plan.unwrap();
    assert!(!told.feasible && told.value.is_none());
    let all = told.remarks.join("\n");
    assert!(all.contains("x[Elm → Fir] = 2 is outside 0 to 1"), "{all}");
    assert!(all.contains("leave[Cedar]: the left side is 0, and = 1 is asked"), "{all}");
    assert!(all.contains("enter[Elm]: the left side is 0, and = 1 is asked"), "{all}");
    assert!(!all.contains("leave[Ash]"), "{all}");
}

#[test]
fn subtours_and_what_cannot_be_completed_are_named() {
    let apart =
        "Ash: Birch\nBirch: Ash\nCedar: Elm\nElm: Fir\nFir: Gorse\nGorse: Hazel\nHazel: Cedar";
    let told = searched("atsp/labels", apart).plan.unwrap();
    let all = told.remarks.join("\n");
    assert!(all.contains("the other variables cannot be chosen"), "{all}");
    let told = searched("atsp/subtours", apart).plan.unwrap();
    let all = told.remarks.join("\n");
    assert!(all.contains("for the set {"), "{all}");
}

#[test]
fn what_is_not_understood_is_said_with_its_line() {
    let told = searched("atsp/labels", "Ash, Birch, Oak\nx[Ash, Birch] = one\nfine words").plan;
    let told = told.unwrap();
    assert!(!told.feasible);
    for line in ["Line 1 of", "Line 2 of", "Line 3 of", "Nothing of the plan"] {
        assert!(told.remarks.iter().any(|remark| remark.starts_with(line)), "{told:?}");
    }
}

/// What textbook methods find is a plan of the rival, no better than its optimum, and near it.
#[test]
fn textbook_methods_find_plans_where_they_fit() {
    let expected = [
        ("open-depots", "greedy location with interchange"),
        ("libraries", "greedy location with interchange"),
        ("lots", "Wagner-Whitin"),
        ("rolls", "first fit, largest first"),
        ("one-crane", "dispatch rules"),
        ("three-benches", "dispatch rules"),
    ];
    for (name, method) in expected {
        let path = format!("{}/../../scenarios/{name}.toml", env!("CARGO_MANIFEST_DIR"));
        let mut scenario = file::parse(&std::fs::read_to_string(path).unwrap()).scenario.unwrap();
        scenario.run.heuristics = Some(vec!["family".to_owned()]);
        scenario.run.best_known = None;
        scenario.run.nodes = 2_000;
        let mut found = false;
        for rival in 0..scenario.rivals.len() {
            let run = run_rival(&scenario, (0, rival), USUAL_SLICE, &mut |_| Watch::GoOn);
            let Some(search) = run.search else { continue };
            let mine = search.measures.incumbents.iter().find(|one| one.origin == method);
            let Some(mine) = mine else { continue };
            let best = search.incumbent.unwrap();
            found = true;
            assert!(mine.nodes <= 1 && best <= mine.value, "{name}: {mine:?}");
            // First fit, largest first takes 11/9 of the best and 6/9 more at most (Dósa 2007).
            let most = 11.0 / 9.0 * best + 6.0 / 9.0;
            assert!(mine.value <= most, "{name}: {mine:?} beside {best}");
        }
        assert!(found, "{name}: {method} found no plan");
    }
}

/// However many there are, none is left out, and how many there are is told.
#[test]
fn all_rows_of_a_plan_that_breaks_many_are_listed() {
    let arcs = || NAMES.iter().flat_map(|a| NAMES.iter().map(move |b| (a, b)));
    let lines: Vec<String> =
        arcs().filter(|(a, b)| a != b).map(|(a, b)| format!("x[{a}, {b}] = 1")).collect();
    let told = searched("atsp/labels", &lines.join("\n")).plan.unwrap();
    // Each stop is left and entered six times.
    assert_eq!((told.broken, told.remarks.len()), (14, 14), "{told:?}");
    let lines: Vec<String> =
        arcs().filter(|(a, b)| a != b).map(|(a, b)| format!("x[{a}, {b}] = 3")).collect();
    let told = searched("atsp/labels", &lines.join("\n")).plan.unwrap();
    assert_eq!((told.broken, told.remarks.len()), (42 + 14, 42 + 14), "{told:?}");
    for (a, b) in arcs().filter(|(a, b)| a != b) {
        let words = format!("x[{a} → {b}] = 3 is outside 0 to 1");
        assert!(told.remarks.contains(&words), "{words}");
    }
    // Three circles: each of them, and each two together, leave the others out.
    let apart =
        "Ash: Birch\nBirch: Ash\nCedar: Elm\nElm: Cedar\nFir: Gorse\nGorse: Hazel\nHazel: Fir";
    let told = searched("atsp/subtours", apart).plan.unwrap();
    assert_eq!((told.broken, told.remarks.len()), (6, 6), "{told:?}");
    for set in ["{Ash, Birch}", "{Cedar, Elm}", "{Fir, Gorse, Hazel}", "{Ash, Birch, Cedar, Elm}"] {
        assert!(told.remarks.iter().any(|remark| remark.contains(set)), "{set}: {told:?}");
    }
}

/// Where the sets are too many to look at each, it is said that those listed may not be all.
#[test]
fn that_further_sets_may_be_broken_is_said() {
    let names: Vec<String> = (1..=20).map(|k| format!("stop {k}")).collect();
    let mut stops = format!("\t{}\n", names.join("\t"));
    for (i, name) in names.iter().enumerate() {
        let row: Vec<String> = (0..20_usize).map(|j| i.abs_diff(j).to_string()).collect();
        stops += &format!("{name}\t{}\n", row.join("\t"));
    }
    let circle = |from: usize, to: usize| -> String {
        let next = |k: usize| if k + 1 == to { from } else { k + 1 };
        (from..to).map(|k| format!("{}: {}\n", names[k], names[next(k)])).collect()
    };
    let plan = circle(0, 7) + &circle(7, 13) + &circle(13, 20);
    let text = format!(
        "hullward = 1\n[instance]\ntext = '''\n{stops}'''\n[[rival]]\nfrom = \"atsp/subtours\"\n\
         [run]\nheuristics = []\nnodes = 2\nplan = '''\n{plan}'''\n"
    );
    let scenario = file::parse(&text).scenario.unwrap();
    let run = run_rival(&scenario, (0, 0), USUAL_SLICE, &mut |_| Watch::GoOn);
    let told = run.search.unwrap().plan.unwrap();
    assert!(told.broken >= 3, "{told:?}");
    assert_eq!(told.remarks.len(), told.broken as usize + 1, "{told:?}");
    let last = told.remarks.last().unwrap();
    assert!(last.contains("others may be broken"), "{last}");
}
