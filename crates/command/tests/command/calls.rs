//! The built command on small scenarios: exit status, JSON, places of mistakes.

use std::process::Output;

use serde_json::Value;

use crate::launch::{err, hullward, out, status};

/// Five stops, not symmetric; the shortest round trip by enumeration of all 24 is 15:
/// Ash, Birch, Fir, Elm, Cedar.
const INSTANCE: &str = "\
[instance]
text = '''
\tAsh\tBirch\tCedar\tElm\tFir
Ash\t0\t3\t14\t15\t9
Birch\t2\t0\t6\t5\t3
Cedar\t5\t8\t0\t9\t7
Elm\t9\t3\t2\t0\t3
Fir\t8\t4\t6\t2\t0
'''
";

fn scenario(rest: &str) -> String {
    format!("hullward = 1\ntitle = \"Five stops\"\n{INSTANCE}\n{rest}")
}

fn two_rivals(rest: &str) -> String {
    scenario(&format!(
        "[[rival]]\nfrom = \"atsp/labels\"\n[[rival]]\nfrom = \"atsp/subtours\"\n{rest}"
    ))
}

/// The JSON objects of a run, its times taken out.
fn lines(output: &Output) -> Vec<Value> {
    let objects =
        out(output).lines().map(|line| serde_json::from_str(line).expect("JSON")).collect();
    let mut objects: Vec<Value> = objects;
    for object in objects.iter_mut().filter(|object| object.get("study").is_none()) {
        let timing = object.as_object_mut().expect("an object").remove("timing").expect("times");
        assert!(timing["root_ms"].as_f64().is_some_and(|ms| ms >= 0.0), "{timing}");
        assert!(timing["search_ms"].as_f64().is_some_and(|ms| ms >= 0.0), "{timing}");
    }
    objects
}

#[test]
fn two_rivals_agree_and_every_field_is_there() {
    let output = hullward(&["run", "-", "--json"], &two_rivals(""));
    assert_eq!(status(&output), 0, "{}", err(&output));
    let lines = lines(&output);
    assert_eq!(lines.len(), 2);
    for (object, letter) in lines.iter().zip(["A", "B"]) {
        assert_eq!(object["scenario"], "Five stops");
        assert_eq!(object["rival"], letter);
        assert_eq!(object["status"], "optimal");
        assert_eq!(object["root"]["status"], "optimal");
        assert_eq!(object["root"]["checked"], true);
        assert!(object["root"]["bound"].as_f64().is_some_and(|bound| bound <= 15.0));
        assert!(object["root"]["checked_bound"].is_string());
        let (ours, second) = (&object["root"]["bound"], &object["root"]["second_opinion"]);
        let near = ours.as_f64().zip(second.as_f64()).map(|(a, b)| (a - b).abs() < 1e-7);
        assert_eq!(near, Some(true), "{ours} and {second}");
        assert_eq!(object["second"]["agrees"], true);
        assert_eq!(object["second"]["status"], "optimal");
        let search = &object["search"];
        assert_eq!(search["status"], "optimal");
        assert_eq!(
            (&search["incumbent"], &search["bound"]),
            (&Value::from(15.0), &Value::from(15.0))
        );
        assert_eq!((&search["gap"], &search["checked"]), (&Value::from(0.0), &Value::from(true)));
        let arcs = search["solution"].as_array().expect("a list");
        assert!(arcs.contains(&serde_json::json!(["x", "Ash", "Birch", 1.0])), "{arcs:?}");
        for count in ["nodes", "iterations"] {
            assert!(search[count].is_u64(), "{count}");
        }
    }
    // Labels for 5 stops: 20 arcs and 4 labels; 10 assignment rows and 4 · 3 order rows.
    let labels = &lines[0];
    assert_eq!(
        (&labels["columns"], &labels["integer_columns"]),
        (&Value::from(24), &Value::from(20))
    );
    assert_eq!(labels["rows"], 22);
    let order =
        labels["families"].as_array().expect("a list").iter().find(|f| f["name"] == "order");
    let order = order.expect("the family");
    assert_eq!((&order["state"], &order["rows"]), (&Value::from("in"), &Value::from(12)));
    assert!(order["decades"]["0"].as_u64().is_some_and(|count| count > 0));
    let subtour =
        lines[1]["families"].as_array().expect("a list").iter().find(|f| f["name"] == "subtour");
    assert_eq!(subtour.expect("the family")["state"], "on demand");
}

#[test]
fn two_runs_give_the_same_but_for_the_times() {
    let text = two_rivals("");
    let run = || lines(&hullward(&["run", "-", "--json"], &text));
    assert_eq!(run(), run());
}

#[test]
fn the_table_names_rivals_and_ends_with_the_caution() {
    let output = hullward(&["run", "-"], &two_rivals(""));
    assert_eq!((status(&output), err(&output).as_str()), (0, ""));
    let table = out(&output);
    assert!(table.starts_with("Five stops\n"), "{table}");
    for word in [
        "root bound",
        "incumbent",
        "A  Position labels",
        "B  Subtours",
        "optimal ✓",
        " ✓ =",
        "= a second LP code agrees",
        "decision aid",
    ] {
        assert!(table.contains(word), "{word}:\n{table}");
    }
}

/// Labels on stops in clusters of three, far apart: a weak root and a large tree.
fn clusters(stops: u64, run: &str) -> String {
    let distance =
        |i: u64, j: u64| 1 + (i * 7 + j * 11 + i * j * 5) % 13 + 40 * u64::from(i / 3 != j / 3);
    let mut rows = String::new();
    for i in 0..stops {
        let cells = (0..stops).map(|j| distance(i, j).to_string()).collect::<Vec<_>>();
        rows.push_str(&format!("{}\n", cells.join(" ")));
    }
    format!(
        "hullward = 1\n[instance]\ntext = '''\n{rows}'''\n[[rival]]\nfrom = \"atsp/labels\"\n[run]\n{run}\n"
    )
}

#[test]
fn a_limit_is_status_one_and_results_are_printed() {
    let output = hullward(&["run", "-", "--json"], &clusters(9, "nodes = 5"));
    let lines = lines(&output);
    assert_eq!(status(&output), 1, "{}", err(&output));
    let search = &lines[0]["search"];
    assert_eq!((&search["status"], &search["nodes"]), (&Value::from("limit"), &Value::from(5)));
    assert!(search["stopped"].is_string() && search["open"].as_u64().is_some_and(|open| open > 0));
    assert!(lines[0]["root"]["bound"].is_f64());
}

#[test]
fn the_clock_stops_a_long_run_and_steers_nothing() {
    let text = clusters(30, "nodes = 0");
    let output = hullward(&["run", "-", "--json", "--seconds", "0.2"], &text);
    let lines = lines(&output);
    assert_eq!(status(&output), 1, "{}", err(&output));
    assert_eq!(lines[0]["status"], "limit");
    let stopped = lines[0]["search"]["stopped"].as_str().or(lines[0]["root"]["stopped"].as_str());
    assert!(stopped.is_some_and(|why| why.contains("time limit of 0.2 s")), "{}", lines[0]);
}

/// A rival of its own over the stops `V`.
fn own(text: &str) -> String {
    format!("[[rival]]\ntext = '''\ndata\n  V  stops\n{text}\n'''\n")
}

#[test]
fn infeasible_and_unbounded_are_results_with_status_zero() {
    let none = own(
        "min Σ_{i ∈ V} y_i\ns.t.\n y_i ≥ 2 ∀ i ∈ V (low)\n Σ_{i ∈ V} y_i ≤ 9 (cap)\n y_i ≥ 0 ∀ i ∈ V",
    );
    let half = own("min Σ_{i ∈ V} y_i\ns.t.\n 2 y_i = 1 ∀ i ∈ V (half)\n y_i ∈ ℤ_+ ∀ i ∈ V");
    let free = own("max Σ_{i ∈ V} y_i\ns.t.\n y_i ≥ 2 ∀ i ∈ V (low)\n y_i ∈ ℤ_+ ∀ i ∈ V");
    let output = hullward(&["run", "-", "--json"], &scenario(&format!("{none}{half}{free}")));
    assert_eq!(status(&output), 0, "{}", err(&output));
    let lines = lines(&output);
    let found: Vec<&Value> = lines.iter().map(|object| &object["status"]).collect();
    assert_eq!(found, ["infeasible", "infeasible", "unbounded"]);
    // The ray adds the rows y_i ≥ 2 of the five stops and −(Σ y_i ≤ 9): 10 ≤ 9.
    let ray = lines[0]["root"]["ray"].as_array().expect("a list");
    let scale = ray[5][1].as_f64().expect("a number");
    let weights = ray.iter().map(|row| row[1].as_f64().expect("a number") / scale);
    assert_eq!(weights.collect::<Vec<_>>(), [-1.0, -1.0, -1.0, -1.0, -1.0, 1.0]);
    assert_eq!(
        (&ray[5][0], &lines[0]["root"]["checked"]),
        (&Value::from("cap"), &Value::from(true))
    );
    assert_eq!(lines[1]["root"]["bound"], 2.5);
}

/// A root that is stopped has a bound that is proved and not the optimum, and says so.
#[test]
fn a_bound_that_is_not_the_optimum_is_told_from_one_that_is() {
    let early = two_rivals("[run]\niterations = 6\n");
    let output = hullward(&["run", "-", "--json"], &early);
    assert_eq!(status(&output), 1, "{}", err(&output));
    let root = &lines(&output)[0]["root"];
    assert_eq!((&root["status"], &root["proof"]), (&"limit".into(), &"within".into()), "{root}");
    assert!(root["checked_within"].as_f64().is_some_and(|away| away < 1e-6), "{root}");
    let table = out(&hullward(&["run", "-"], &early));
    assert!(table.contains(" ~") && table.contains("A: root bound checked to within"), "{table}");
    let whole = &lines(&hullward(&["run", "-", "--json"], &two_rivals("")))[0]["root"];
    assert_eq!((&whole["proof"], &whole["checked_within"]), (&"exact".into(), &Value::Null));
    let table = out(&hullward(&["run", "-"], &two_rivals("")));
    assert!(table.contains(" ✓") && !table.contains("checked to within"), "{table}");
}

#[test]
fn a_known_value_closes_what_is_no_better() {
    let output = hullward(&["run", "-", "--json"], &two_rivals("[run]\nbest_known = 14\n"));
    assert_eq!(status(&output), 0, "{}", err(&output));
    for object in lines(&output) {
        let search = &object["search"];
        assert_eq!(
            (&search["status"], &search["incumbent"]),
            (&Value::from("optimal"), &Value::Null)
        );
        assert_eq!(search["bound"], 14.0);
    }
}

#[test]
fn without_search_only_the_root_is_given() {
    let output = hullward(&["run", "-", "--json"], &two_rivals("[run]\nsearch = false\n"));
    assert_eq!(status(&output), 0, "{}", err(&output));
    let lines = lines(&output);
    assert!(lines.iter().all(|object| object.get("search").is_none()));
    assert_eq!(lines[1]["root"]["status"], "optimal");
}

#[test]
fn a_relaxation_is_bounded_and_not_searched() {
    let text = scenario("[[rival]]\nfrom = \"atsp/assignment\"\nrole = \"relaxation\"\n");
    let output = hullward(&["run", "-", "--json"], &text);
    let lines = lines(&output);
    assert_eq!(status(&output), 0);
    assert!(lines[0].get("search").is_none() && lines[0]["root"]["bound"].is_f64());
}

#[test]
fn a_wrong_scenario_is_named_with_its_place() {
    let output = hullward(&["run", "-"], "hullward = 1\n[run]\nnodez = 3\n");
    assert_eq!((status(&output), out(&output).as_str()), (2, ""));
    assert_eq!(err(&output), "-:3:1: error: run has no field `nodez` (did you mean `nodes`?)\n");
    let output = hullward(&["run", "-"], "hullward = 2\n");
    assert_eq!(status(&output), 2);
    assert!(
        err(&output).starts_with("-:1:12: error: the file is of version 2"),
        "{}",
        err(&output)
    );
    assert_eq!(status(&hullward(&["run", "no-such-file.toml"], "")), 2);
    assert_eq!(status(&hullward(&["run", "-"], "hullward = 1\n")), 2);
}

#[test]
fn a_broken_cell_has_its_place_in_the_file() {
    let text = two_rivals("").replace("14", "1x4");
    let output = hullward(&["run", "-"], &text);
    assert_eq!(status(&output), 2);
    // The matrix begins at line 5, so row Ash is line 6; its third cell begins at column 9.
    let message = err(&output);
    assert!(message.lines().any(|line| line.starts_with("-:6:9: error: ")), "{message}");
}

#[test]
fn a_rival_that_cannot_be_run_keeps_no_other_from_running() {
    let own = "[[rival]]\ntitle = \"Own\"\ntext = '''\nminimise\n  Σ_{i ∈ V} c_{i} y_{i\n'''\n";
    let rest = format!("{own}[[rival]]\nfrom = \"atsp/subtours\"\n");
    let output = hullward(&["run", "-", "--json"], &scenario(&rest));
    assert_eq!(status(&output), 2);
    let lines = lines(&output);
    assert_eq!(
        (&lines[0]["status"], &lines[1]["status"]),
        (&Value::from("error"), &Value::from("optimal"))
    );
    assert!(lines[0]["error"]["complaints"].as_array().is_some_and(|list| !list.is_empty()));
    // The text of the rival begins at line 16 of the file, its sum is line 17.
    assert!(
        err(&output).lines().any(|line| line.starts_with("-:17:") || line.starts_with("-:18:")),
        "{}",
        err(&output)
    );
    let output = hullward(&["run", "-"], &scenario("[[rival]]\nfrom = \"atsp/label\"\n"));
    assert_eq!(status(&output), 2);
    assert!(err(&output).contains("did you mean \"atsp/labels\"?"), "{}", err(&output));
}

#[test]
fn a_study_that_there_is_not_is_refused_with_those_that_there_are() {
    let rest = "[run]\nbranching = \"reliability\"\ncuts = [\"flow cover\"]\n[[study]]\nkind = \"horoscope\"\n";
    let output = hullward(&["run", "-", "--json"], &two_rivals(rest));
    assert_eq!(status(&output), 2, "{}", err(&output));
    let said = err(&output);
    assert!(said.contains("horoscope") && said.contains("symmetry"), "{said}");
}

/// The preset of the file, and that of the command line instead; what each class of cuts did.
#[test]
fn a_preset_is_run_and_said() {
    let bare = hullward(&["run", "-", "--json"], &two_rivals(""));
    let line = &lines(&bare)[0];
    assert!(line["preset"] == "bare" && line["search"]["cuts"].is_null(), "{line}");
    let text = two_rivals("[run]\npreset = \"production\"\n");
    let by_file = hullward(&["run", "-", "--json"], &text);
    let by_flag = hullward(&["run", "-", "--json", "--preset", "production"], &two_rivals(""));
    let (file, flag) = (&lines(&by_file)[0], &lines(&by_flag)[0]);
    assert_eq!(file["preset"], "as a production solver would");
    assert_eq!((&file["preset"], &file["search"]), (&flag["preset"], &flag["search"]));
    assert_eq!(file["search"]["incumbent"], line["search"]["incumbent"]);
    let table = hullward(&["run", "-", "--preset", "production"], &two_rivals(""));
    assert!(out(&table).contains("run as a production solver would\n"), "{}", out(&table));
    let wrong = hullward(&["run", "-", "--preset", "productoin"], &two_rivals(""));
    assert!(err(&wrong).contains("did you mean production?"), "{}", err(&wrong));
}

/// A priority that fits no variable is told with the variables there are.
#[test]
fn a_priority_without_a_variable_is_told() {
    let output = hullward(&["run", "-"], &two_rivals("[run]\npriority = [\"xx\"]\n"));
    let said = err(&output);
    assert!(said.contains("warning: `priority` in [run] names xx"), "{said}");
    // It was told at line 1 of the rival's formulation.
    let input = two_rivals("[run]\npriority = [\"xx\"]\n");
    let line = 1 + input.lines().position(|line| line.starts_with("priority")).expect("there");
    assert!(said.contains(&format!("-:{line}:12: warning: `priority`")), "{said}");
    assert!(said.contains("did you mean x? its variables: x"), "{said}");
}

#[test]
fn acts_by_hand_are_replayed_and_one_that_does_not_apply_is_said() {
    let acts = "\
[[rival.act]]
after = 1
do = \"branch\"
node = 700
on = [\"x\", \"Ash\", \"Birch\"]
[[rival.act]]
after = 1
do = \"stop\"
";
    let rival = "from = \"atsp/labels\"\n";
    let text = include_str!("../../../engine/tests/scenarios/labels.toml");
    let text = text.replace(rival, &format!("{rival}{acts}"));
    let output = hullward(&["run", "-", "--rival", "A", "--json"], &text);
    assert_eq!(status(&output), 1, "{}", err(&output));
    let line = &lines(&output)[0];
    assert_eq!(line["search"]["stopped"], Value::from("stopped by hand"));
    assert_eq!(line["search"]["nodes"], Value::from(1));
    let left_out = line["left_out"][0].as_str().expect("one act is refused");
    assert!(left_out.contains("branch at node 700 on x, Ash, Birch"), "{left_out}");
    assert!(left_out.contains("was left out after 1 node:"), "{left_out}");
}

#[test]
fn every_rival_runs_on_each_of_several_instances() {
    let second = "[[instance]]\ntitle = \"Tuesday\"\ntext = '''\n0 1 9\n9 0 1\n1 9 0\n'''\n";
    let text = two_rivals("").replace("[instance]", "[[instance]]");
    let text = text.replacen("[[rival]]", &format!("{second}[[rival]]"), 1);
    let output = hullward(&["run", "-", "--json"], &text);
    assert_eq!(status(&output), 0, "{}", err(&output));
    let found: Vec<(Value, Value)> = lines(&output)
        .iter()
        .map(|object| (object["instance"].clone(), object["search"]["incumbent"].clone()))
        .collect();
    let expected = [("instance 1", 15.0), ("instance 1", 15.0), ("Tuesday", 3.0), ("Tuesday", 3.0)];
    assert_eq!(found, expected.map(|(title, value)| (Value::from(title), Value::from(value))));
}

#[test]
fn a_saved_digest_is_compared() {
    let first = out(&hullward(&["run", "-", "--json"], &two_rivals("")));
    let results: Vec<record::results::RivalResult> =
        first.lines().map(|line| serde_json::from_str(line).expect("JSON")).collect();
    let digest = record::results::digest(&results).expect("there are results");
    let with = |digest: &str| {
        two_rivals("").replacen("title", &format!("digest = \"{digest}\"\ntitle"), 1)
    };
    let said = |digest: &str, call: &[&str]| {
        let output = hullward(&[&["run", "-"], call].concat(), &with(digest));
        assert_eq!(status(&output), 0, "{}", err(&output));
        err(&output)
    };
    assert!(said(&digest, &[]).contains("are the same as those it was made with\n"));
    assert!(said(&digest, &["--json"]).contains("are the same"));
    // The second rival's search, with one digit of its digest changed.
    let last = if digest.ends_with('0') { "1" } else { "0" };
    let tampered = format!("{}{last}", &digest[..digest.len() - 1]);
    assert!(said(&tampered, &[]).contains("differ from those it was made with, B: the search"));
    assert!(said(&tampered, &["--rival", "A"]).contains("are the same"));
    assert!(said(&tampered, &["--rival", "B"]).contains("differ"));
    let roots = digest.split(' ').map(|word| &word[..16]).collect::<Vec<_>>().join(" ");
    assert!(said(&roots, &[]).contains("are the same"));
    let older = with(&digest).replacen("title", "engine = \"0.0.1\"\ntitle", 1);
    assert!(err(&hullward(&["run", "-"], &older)).contains("results are of engine 0.0.1; this is"));
    assert!(said("-", &[]).contains("no result could be compared"));
}

#[test]
fn a_log_is_saved_and_is_what_the_digest_says() {
    let path = format!("{}/labels.log", env!("CARGO_TARGET_TMPDIR"));
    let text = two_rivals("");
    let refused = hullward(&["run", "-", "--log", &path], &text);
    assert_eq!(status(&refused), 2, "two rivals, one log");
    let output = hullward(&["run", "-", "--log", &path, "--rival", "a"], &text);
    assert_eq!(status(&output), 0, "{}", err(&output));
    let log = record::log::decode(&std::fs::read(&path).expect("saved")).expect("a log");
    let line = format!("A {} {}", log.events.len(), record::log::digest(&log.events));
    for slice in ["101", "99999"] {
        let digest = out(&hullward(&["digest", "-", "--slice", slice], &text));
        assert_eq!(digest.lines().next(), Some(line.as_str()));
        assert_eq!(digest.lines().count(), 2);
    }
}

#[test]
fn read_says_what_is_understood() {
    let output = hullward(&["read", "-"], "0 3 4\n2 0 5\n1 6 0\n");
    assert_eq!((status(&output), err(&output).as_str()), (0, ""));
    assert!(out(&output).contains("3 stops"), "{}", out(&output));
    let output = hullward(&["read", "-"], &scenario(""));
    assert!(out(&output).contains("5 stops"), "{}", out(&output));
    let output = hullward(&["read", "-"], "0 3 4\n2 0 x\n1 6 0\n");
    assert_eq!(status(&output), 2);
    assert!(err(&output).starts_with("-:2:5: error: "), "{}", err(&output));
}

#[test]
fn list_names_the_catalogue_and_prints_one_text() {
    let all = hullward(&["list"], "");
    assert_eq!(status(&all), 0);
    assert!(out(&all).contains("atsp/labels") && out(&all).contains("atsp/subtours"));
    let one = hullward(&["list", "atsp/labels"], "");
    assert!(out(&one).contains("minimise") && out(&one).contains("1960"), "{}", out(&one));
    assert!(
        out(&one).contains("# bound: never weaker than \u{201c}Assignment rows alone"),
        "{}",
        out(&one)
    );
    let some = hullward(&["list", "cornuejols 1980"], "");
    assert!(out(&some).contains("ufl/radii") && !out(&some).contains("atsp/"), "{}", out(&some));
    let none = hullward(&["list", "atsp/lables"], "");
    assert_eq!(status(&none), 2);
    assert!(err(&none).contains("did you mean atsp/labels?"), "{}", err(&none));
}

#[test]
fn a_link_runs_like_its_file() {
    let text = two_rivals("");
    let link = format!("https://host/page.html{}", record::link::pack(&text).expect("short"));
    let by_link = hullward(&["run", &link, "--json"], "");
    assert_eq!(lines(&by_link), lines(&hullward(&["run", "-", "--json"], &text)));
}

#[test]
fn wrong_words_are_status_two_and_help_is_status_zero() {
    for words in [&["rnu"][..], &["run"], &["run", "-", "--jsno"], &["list", "a", "b"]] {
        let output = hullward(words, "");
        assert_eq!(status(&output), 2, "{words:?}");
        assert!(err(&output).starts_with("hullward: "), "{words:?}");
    }
    for words in [&[][..], &["help"], &["run", "--help"], &["help", "digest"], &["--version"]] {
        assert_eq!(status(&hullward(words, "")), 0, "{words:?}");
    }
}
