//! Studies of a scenario: what `hullward run` prints of them, as JSON and in words.

use serde_json::Value;

use crate::launch::{err, hullward, out, status};

/// Six stops, invented; distances of points, rounded.
const SCENARIO: &str = "\
hullward = 1
title = \"Six stops (invented)\"
seed = 3

[instance]
text = '''
Ash 0 0
Birch 9 2
Cedar 4 8
Elm 11 9
Fir 2 5
Gorse 7 4
'''

[[rival]]
from = \"atsp/labels\"
[[rival]]
from = \"atsp/subtours\"

[[study]]
kind = \"ladder\"
[[study]]
kind = \"families\"
[[study]]
kind = \"equivalence\"
sizes = [3, 4]
duels = 2
[[study]]
kind = \"order\"
[[study]]
kind = \"tightening\"
[[study]]
kind = \"numerics\"
";

fn studies(text: &str) -> Vec<Value> {
    let output = hullward(&["run", "-", "--json"], text);
    assert_eq!(status(&output), 0, "{}", err(&output));
    let objects = out(&output);
    let objects = objects.lines().map(|line| serde_json::from_str::<Value>(line).expect("JSON"));
    objects.filter(|object| object.get("study").is_some()).collect()
}

#[test]
fn each_study_gives_an_object_of_its_own() {
    let objects = studies(SCENARIO);
    let kinds: Vec<&str> = objects.iter().filter_map(|object| object["study"].as_str()).collect();
    assert_eq!(
        kinds,
        ["ladder", "families", "equivalence", "order", "tightening", "numerics"],
        "{objects:?}"
    );
    let [ladder, families, court, order, ..] = objects.as_slice() else { return };
    assert_eq!(ladder["rivals"][1]["rungs"][0]["step"], "relaxation");
    assert!(families["rivals"][0]["families"][0]["shapley"].is_number());
    assert_eq!(court["rivals"], serde_json::json!(["A", "B"]));
    assert_eq!(court["equivalent"], Value::Bool(true));
    assert_eq!((&court["level"], &court["kind"]), (&"enumerated".into(), &"sets".into()));
    assert!(court["counterexample"].is_null());
    assert_eq!((&order["relation"], &order["level"]), (&"⪯".into(), &"theorem".into()));
    // The same again, byte for byte: no clock and no chance is in it.
    assert_eq!(objects, studies(SCENARIO));
}

/// Fifty days of one round: every study runs over all of them, each day by its name, and the record says what
/// their orders come to.
#[test]
fn studies_run_over_fifty_instances() {
    let day = |day: usize| {
        let drive = |from: usize, to: usize| 1 + (from * 7 + to * 11 + day * 5) % 23;
        let row = |from: usize| {
            (0..4).map(|to| drive(from, to).to_string()).collect::<Vec<_>>().join(" ")
        };
        let rows: Vec<String> = (0..4).map(row).collect();
        format!("[[instance]]\ntitle = \"Day {day}\"\ntext = '''\n{}\n'''\n", rows.join("\n"))
    };
    let days: String = (1..=50).map(day).collect();
    let text = format!(
        "hullward = 1\n{days}[[rival]]\nfrom = \"atsp/labels\"\n[[rival]]\nfrom = \"atsp/subtours\"\n\
         [[study]]\nkind = \"ladder\"\n[[study]]\nkind = \"order\"\n"
    );
    let objects = studies(&text);
    for kind in ["ladder", "order"] {
        let of = objects.iter().filter(|object| object["study"] == kind);
        let names: Vec<&str> = of.filter_map(|object| object["instance"].as_str()).collect();
        let wanted: Vec<String> = (1..=50).map(|day| format!("Day {day}")).collect();
        assert_eq!(names.iter().filter(|name| !name.is_empty()).count(), 50, "{kind}: {names:?}");
        assert!(wanted.iter().all(|day| names.contains(&day.as_str())), "{kind}: {names:?}");
    }
    let record = out(&hullward(&["write", "-", "--as", "markdown"], &text));
    assert!(record.contains("of 50 instances"), "{record}");
}

#[test]
fn in_words_every_study_has_its_verdict() {
    let output = hullward(&["run", "-"], SCENARIO);
    let words = out(&output);
    for sentence in [
        // Round trips through three and four stops: 2! and 3!.
        "A and B admit the same plans: every plan of sub-instances was compared (the same 2, 6 plans \
         on the first 3 to 4), and nothing tells them apart on this one.",
        "B ⪰ A: B is never weaker than A – theorem:",
        "Bound ladder of A: Position labels",
        "Leaving out any one of leave and enter loses 0.000.",
        "Nothing in its coefficients is to be worried about.",
    ] {
        assert!(words.contains(sentence), "{sentence}\n{words}");
    }
    assert!(words.trim_end().ends_with("come first."), "the caution stands under everything");
}

#[test]
fn a_field_that_a_study_does_not_have_is_said() {
    let text = SCENARIO.replace("duels = 2", "duels = 2\nsizez = [3]");
    let output = hullward(&["run", "-"], &text);
    assert_eq!(status(&output), 2);
    let said = err(&output);
    assert!(
        said.contains("the study equivalence was left out: the study has no \"sizez\""),
        "{said}"
    );
    // The other studies are made all the same.
    assert!(out(&output).contains("Bound ladder of B"));
}

/// A growth study over parts of the instance.
fn growth() -> String {
    let head = &SCENARIO[..SCENARIO.find("[[study]]").unwrap_or_default()];
    format!(
        "{head}[run]\nsearch = false\n[[study]]\nkind = \"growth\"\nsizes = [3, 4, 5]\nseeds = [1, 2]\n"
    )
}

#[test]
fn cells_made_one_by_one_give_the_study_byte_for_byte() {
    let text = growth();
    let listed = out(&hullward(&["cells", "-"], &text));
    let cells: Vec<&str> = listed.lines().collect();
    // Three sizes, two seeds, two rivals.
    assert_eq!(cells.len(), 12);
    let folder = std::env::temp_dir().join(format!("hullward-cells-{}", std::process::id()));
    std::fs::create_dir_all(&folder).expect("a folder");
    let mut files = Vec::new();
    // In an order of their own, as a batch queue would.
    for cell in cells.iter().rev() {
        let made = hullward(&["run", "--cell", cell, "-"], &text);
        assert_eq!(status(&made), 0, "{}", err(&made));
        let file = folder.join(format!("{cell}.json"));
        std::fs::write(&file, made.stdout).expect("it is written");
        files.push(file.to_string_lossy().into_owned());
    }
    let words = |json: &'static str| {
        let mut words = vec!["gather", json];
        words.extend(files.iter().map(String::as_str));
        words
    };
    let whole = out(&hullward(&["run", "-", "--json"], &text));
    let whole = whole.lines().last().unwrap_or_default().to_owned();
    assert_eq!(out(&hullward(&words("--json"), "")).trim_end(), whole);
    let object: Value = serde_json::from_str(&whole).expect("JSON");
    assert_eq!(object["study"], "growth");
    assert_eq!(object["pairs"][0]["instances"], 6);

    let missing = hullward(&["gather", &files[0]], "");
    assert_eq!(status(&missing), 2);
    assert!(err(&missing).contains("cells are missing: 0, 1,"), "{}", err(&missing));
    std::fs::remove_dir_all(&folder).expect("it was there");
}

#[test]
fn generated_instances_of_each_class_are_paired() {
    let text =
        growth().replace("seeds = [1, 2]", "seeds = [1]\nclasses = [\"uniform\", \"zero-one\"]");
    let object = studies(&text).remove(0);
    assert_eq!(object["data"], "generated: atsp");
    let cells = object["cells"].as_array().map(Vec::len);
    assert_eq!((cells, &object["of"]), (Some(12), &Value::from(12)));
    let wrong = text.replace("zero-one", "zero");
    let said = err(&hullward(&["run", "-"], &wrong));
    assert!(said.contains("there is no class \"zero\" of data; there are uniform"), "{said}");
}

#[test]
fn the_decision_record_holds_what_was_found_and_what_would_reopen_it() {
    let text = growth().replace("search = false", "search = true");
    let page = hullward(&["write", "-", "--as", "report"], &text);
    assert_eq!(status(&page), 0, "{}", err(&page));
    let page = out(&page);
    assert!(page.starts_with("<!doctype html>") && page.contains("<h1>Six stops (invented)</h1>"));
    let words = out(&hullward(&["write", "-", "--as", "markdown"], &text));
    for sentence in [
        "# Six stops (invented)",
        "A: Position labels (Miller, Tucker & Zemlin 1960) (atsp/labels)",
        "every leaf checked.",
        "### Growth (parts of the instance; at most 5,000 nodes a run)",
        "an instance larger than 5: nothing larger was run",
        "\\tag{order}",
        "#s1.",
        "come first.",
    ] {
        assert!(words.contains(sentence), "{sentence}\n{words}");
    }
    let table = out(&hullward(&["write", "-", "--as", "csv"], &text));
    let lines: Vec<&str> = table.lines().collect();
    assert_eq!(lines.len(), 3);
    assert!(lines[1].starts_with("Six stops (invented),,A,"), "{table}");
}

#[test]
fn a_tightened_rival_is_handed_over_and_one_with_nothing_to_tighten_is_refused() {
    let text = "hullward = 1\n[instance]\ntext = '''\nT\na b\n\nd by t\na 30\nb 20\n'''\n[[rival]]\ntext = '''\nLots\ndata\n  T  periods\n  \
                d_t  ∀ t ∈ T  demand\nminimise\n  Σ_{t ∈ T} 10 y_t + Σ_{t ∈ T} 2 q_t\nsubject to\n  q_t ≤ 1000 y_t  ∀ t ∈ T  (switch)\n  \
                q_t ≥ d_t  ∀ t ∈ T  (meet)\n  0 ≤ q_t ≤ 40  ∀ t ∈ T\n  y_t ∈ {0, 1}  ∀ t ∈ T\n'''\n";
    let tight = hullward(&["write", "-", "--as", "tightened"], text);
    assert_eq!(status(&tight), 0, "{}", err(&tight));
    let (tight, said) = (out(&tight), err(&tight));
    assert!(tight.contains("-40") && !tight.contains("-1000"), "{tight}");
    assert!(said.contains("coefficients of rows made smaller: 2"), "{said}");
    // As a rival of its own it has the bound that was promised: 2·50 + 10·(30 + 20)/40.
    let rival = format!("hullward = 1\n[[rival]]\nmps = '''\n{tight}'''\n");
    let run = out(&hullward(&["run", "-", "--json"], &rival));
    let object: Value = serde_json::from_str(run.lines().next().unwrap_or_default()).expect("JSON");
    let bound = object["root"]["bound"].as_f64().expect("a bound");
    assert!((112.5 - 1e-9..=120.0 + 1e-9).contains(&bound), "{object}");
    assert_eq!(object["search"]["incumbent"].as_f64(), Some(120.0), "{object}");

    let none = hullward(&["write", "-", "--as", "tightened", "--rival", "B"], SCENARIO);
    assert_eq!(status(&none), 2);
    assert!(err(&none).contains("rows on demand would be lost"), "{}", err(&none));
}

#[test]
fn a_pack_is_run_again_and_a_new_instance_is_held_against_it() {
    let head = &SCENARIO[..SCENARIO.find("[[study]]").unwrap_or_default()];
    let pack = hullward(&["write", "-", "--as", "pack"], head);
    assert_eq!(status(&pack), 0, "{}", err(&pack));
    let pack = out(&pack);
    let object: Value = serde_json::from_str(&pack).expect("JSON");
    assert_eq!(object["expected"].as_array().map(Vec::len), Some(2));
    assert_eq!(object["expected"][0]["columns"], 35);
    let again = hullward(&["drift", "-"], &pack);
    assert_eq!((status(&again), out(&again).trim()), (0, "all 2 results are as recorded"));
    // Another optimum was recorded: that is told, and fails.
    let optimum = object["expected"][0]["optimum"].to_string();
    let wrong = pack.replacen(&format!("\"optimum\": {optimum}"), "\"optimum\": 1.5", 1);
    let told = hullward(&["drift", "-"], &wrong);
    assert_eq!(status(&told), 3);
    assert!(out(&told).starts_with("A: optimum"), "{}", out(&told));
    // One stop more than was ever recorded.
    let file = std::env::temp_dir().join(format!("hullward-drift-{}", std::process::id()));
    let stops = "Ash 0 0\nBirch 9 2\nCedar 4 8\nElm 11 9\nFir 2 5\nGorse 7 4\nHazel 5 5\n";
    std::fs::write(&file, stops).expect("it is written");
    let drift = hullward(&["drift", "-", &file.to_string_lossy()], &pack);
    assert_eq!(status(&drift), 0, "{}", err(&drift));
    let said = out(&drift);
    assert!(said.contains("A: columns 48, where 35 was recorded"), "{said}");
    std::fs::remove_file(&file).expect("it was there");
    assert_eq!(status(&hullward(&["drift", "-"], "{}")), 2);
}
