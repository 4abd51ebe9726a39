//! A pasted table of the team's own solver, from the scenario to statistics, words and the decision
//! record. The figures are invented; what comes of them is worked out by hand.

use serde_json::Value;

use crate::launch::{err, hullward, out, status};

/// Five stops, invented, and results of two days: on Monday A was stopped with a gap.
const SCENARIO: &str = "\
hullward = 1
title = \"Own results (invented)\"

[[instance]]
title = \"Monday\"
text = '''
Ash 0 0
Birch 9 2
Cedar 4 8
Elm 11 9
Fir 2 5
'''

[[instance]]
title = \"Tuesday\"
text = '''
Ash 1 0
Birch 9 7
Cedar 4 3
Elm 1 9
Fir 6 5
'''

[[rival]]
from = \"atsp/labels\"
[[rival]]
from = \"atsp/subtours\"

[run]
search = false

[[study]]
kind = \"production\"
table = '''
instance\trival\tbound\tplan\tnodes\ttime
Monday\tA\t20\t40\t20000\t60.5
Monday\tB\t40\t40\t3\t0.5
Tuesday\tA\t41\t41\t4000\t12
Tuesday\tB\t1\t1\t9\t1
'''
";

fn studies() -> Vec<Value> {
    let run = hullward(&["run", "--json", "-"], SCENARIO);
    assert_eq!(status(&run), 0, "{}", err(&run));
    let lines = out(&run);
    let objects = lines.lines().map(|line| serde_json::from_str::<Value>(line).expect("JSON"));
    objects.filter(|object| object["study"] == "production").collect()
}

#[test]
fn pasted_results_enter_the_statistics_and_are_held_against_what_is_proved() {
    let objects = studies();
    let [monday, tuesday] = objects.as_slice() else { panic!("{objects:?}") };
    assert_eq!((&monday["results"], &monday["measure"]), (&4.into(), &"milliseconds".into()));
    // √(61.5 · 13) − 1 and √(1.5 · 2) − 1 seconds.
    let close = |value: &Value, wanted: f64| {
        value.as_f64().is_some_and(|value| (value - wanted).abs() < 1e-3 * wanted)
    };
    assert!(close(&monday["means"][0]["work"], ((61.5_f64 * 13.0).sqrt() - 1.0) * 1e3));
    assert!(close(&monday["means"][1]["work"], (3.0_f64.sqrt() - 1.0) * 1e3));
    // A took √(61.5/1.5 · 13/2) times the time of B; one of its runs was stopped.
    let pair = &monday["pairs"][0];
    assert!(close(&pair["ratio"], 1.0 / (41.0_f64 * 6.5).sqrt()), "{pair}");
    assert_eq!((&pair["losses"], &pair["censored"]), (&2.into(), &1.into()));
    // Two instances are too few to tell them apart: the sign test has p = 1/2.
    assert!(close(&pair["p"], 0.5) && pair["distinguishable"] == false, "{pair}");
    // What the whole table comes to stands with the first instance, each result with its own.
    assert_eq!(tuesday["means"].as_array().map(Vec::len), Some(0));
    let wrong = |object: &Value, of: usize| object["against"][of]["wrong"].as_str() != Some("");
    assert!(!wrong(monday, 0) && !wrong(monday, 1) && !wrong(tuesday, 0), "{objects:?}");
    // A round through five stops that costs 1 is not one of these stops.
    assert!(wrong(tuesday, 1), "{tuesday}");
}

#[test]
fn pasted_results_stand_in_the_decision_record() {
    let record = hullward(&["write", "--as", "markdown", "-"], SCENARIO);
    assert_eq!(status(&record), 0, "{}", err(&record));
    let words = out(&record);
    for sentence in [
        "### In production (4 pasted results) (Monday)",
        "A and B are not distinguishable",
        "1 of 2 pasted results cannot be of the same model and data, B to begin with: its plan is \
         better than the bound that is proved here.",
        "nobody checked them here",
    ] {
        assert!(words.contains(sentence), "{sentence}\n{words}");
    }
}

#[test]
fn a_table_without_its_headings_says_what_it_needs() {
    let wrong = SCENARIO.replace("instance\trival\tbound\tplan\tnodes\ttime\n", "");
    let words = out(&hullward(&["run", "-"], &wrong));
    // Once, and not for each instance.
    assert_eq!(
        words.matches("The table needs the headings instance, rival, bound").count(),
        1,
        "{words}"
    );
}
