//! `hullward write` and rivals in MPS, on the built command.

use serde_json::Value;

use crate::launch::hullward;

/// Five stops; the shortest round trip by enumeration of all 24 is 15.
const SCENARIO: &str = "\
hullward = 1
title = \"Five stops\"
[instance]
text = '''
\tAsh\tBirch\tCedar\tElm\tFir
Ash\t0\t3\t14\t15\t9
Birch\t2\t0\t6\t5\t3
Cedar\t5\t8\t0\t9\t7
Elm\t9\t3\t2\t0\t3
Fir\t8\t4\t6\t2\t0
'''
[[rival]]
from = \"atsp/labels\"
[[rival]]
from = \"atsp/subtours\"
families = { subtour = \"in\" }
";

/// Knapsack of capacity 4 with weights 3 and 2, values 5 and 3: the best is 6 with y twice.
const KNAPSACK: &str = "\
NAME knapsack
OBJSENSE
 MAX
ROWS
 N value
 L weight
COLUMNS
 m1 'MARKER' 'INTORG'
 x value 5 weight 3
 y value 3 weight 2
 m2 'MARKER' 'INTEND'
RHS
 RHS weight 4
BOUNDS
 UP BND x 9
 UP BND y 9
ENDATA
";

/// Exit status, standard output and standard error.
fn told(words: &[&str], input: &str) -> (i32, String, String) {
    let output = hullward(words, input);
    let text = |bytes: &[u8]| String::from_utf8(bytes.to_vec()).expect("text");
    let status = output.status.code().expect("no signal");
    (status, text(&output.stdout), text(&output.stderr))
}

fn in_mps(text: &str) -> String {
    format!("hullward = 1\n[[rival]]\nmps = '''\n{text}'''\n")
}

/// The JSON objects of a run.
fn run(text: &str) -> Vec<Value> {
    let (status, out, err) = told(&["run", "-", "--json"], text);
    assert_eq!(status, 0, "{err}");
    out.lines().map(|line| serde_json::from_str(line).expect("JSON")).collect()
}

#[test]
fn a_rival_in_mps_runs_without_an_instance() {
    let object = &run(&in_mps(KNAPSACK))[0];
    assert_eq!((&object["title"], &object["status"]), (&"knapsack".into(), &"optimal".into()));
    assert_eq!((&object["rows"], &object["integer_columns"]), (&1.into(), &2.into()));
    assert_eq!(object["search"]["incumbent"], 6.0);
    assert_eq!(object["search"]["solution"], serde_json::json!([["y", 2.0]]));
    // The relaxation takes 4/3 of x.
    assert_eq!(object["root"]["checked_bound"], "20/3");
}

#[test]
fn a_wrong_line_of_mps_has_its_place_in_the_scenario() {
    let (status, _, err) = told(&["run", "-"], &in_mps(&KNAPSACK.replace("weight 4", "weight 4x")));
    assert_eq!(status, 2);
    // The text begins at line 4; its line 13 is `RHS weight 4x`.
    assert!(err.lines().any(|line| line.starts_with("-:16:13: error: ")), "{err}");
    let (status, _, err) = told(
        &["run", "-"],
        &in_mps(KNAPSACK).replace("mps =", "families = { weight = \"out\" }\nmps ="),
    );
    assert_eq!(status, 2);
    assert!(err.contains("weight cannot be switched"), "{err}");
}

#[test]
fn what_is_written_as_mps_runs_to_the_same_bounds() {
    let before = run(SCENARIO);
    for (rival, before) in ["a", "b"].iter().zip(&before) {
        let (status, text, err) = told(&["write", "-", "--rival", rival, "--as", "mps"], SCENARIO);
        assert_eq!((status, err.as_str()), (0, ""));
        let after = &run(&in_mps(&text))[0];
        for field in ["rows", "columns", "integer_columns", "nonzeros"] {
            assert_eq!(before[field], after[field], "{rival} {field}");
        }
        assert_eq!(before["root"]["checked_bound"], after["root"]["checked_bound"]);
        assert_eq!(after["search"]["incumbent"], 15.0);
        assert_eq!(before["search"]["solution"], after["search"]["solution"]);
    }
}

#[test]
fn families_on_demand_are_not_in_the_file_and_that_is_said() {
    let text = SCENARIO.replace("families = { subtour = \"in\" }\n", "");
    let (status, out, err) = told(&["write", "-", "--rival", "B", "--as", "mps"], &text);
    assert_eq!(status, 0);
    assert!(out.contains("ENDATA"));
    assert_eq!(err, "-: note: subtour is on demand: its rows are not in the file\n");
}

#[test]
fn notation_and_latex_read_back_as_the_rival() {
    let before = &run(SCENARIO)[0];
    for form in ["text", "latex"] {
        let (status, text, err) = told(&["write", "-", "--rival", "A", "--as", form], SCENARIO);
        assert_eq!(status, 0, "{err}");
        assert_eq!(err.contains("amsmath"), form == "latex", "{err}");
        assert_eq!(text.contains("\\begin{align*}"), form == "latex");
        let start = SCENARIO.find("[[rival]]").expect("there");
        let own = format!("{}[[rival]]\ntext = '''\n{text}'''\n", &SCENARIO[..start]);
        let after = &run(&own)[0];
        for field in ["rows", "columns", "nonzeros", "families", "root"] {
            assert_eq!(before[field], after[field], "{form} {field}");
        }
    }
}

#[test]
fn scenario_and_link_hold_all_or_one() {
    let (status, whole, _) = told(&["write", "-", "--as", "scenario"], SCENARIO);
    assert_eq!(status, 0);
    let parsed = |text: &str| record::file::parse(text).scenario.expect("a scenario");
    assert_eq!(parsed(&whole), parsed(SCENARIO));
    let (_, one, _) = told(&["write", "-", "--as", "scenario", "--rival", "b"], SCENARIO);
    assert_eq!(parsed(&one).rivals[..], parsed(SCENARIO).rivals[1..]);
    let (status, link, err) = told(&["write", "-", "--as", "link"], SCENARIO);
    assert_eq!((status, err.as_str()), (0, ""));
    assert_eq!(record::link::unpack(&link), Ok(whole));
    let (status, again, _) = told(&["write", link.trim(), "--as", "link"], "");
    assert_eq!((status, again), (0, link));
}

#[test]
fn a_long_link_comes_with_a_warning_and_a_longer_one_is_refused() {
    // Digits of a linear congruential sequence: they do not pack well.
    let digits = |count: usize| {
        let mut state = 1_u64;
        let next = std::iter::repeat_with(|| {
            state = state.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1);
            char::from(b'a' + u8::try_from((state >> 33) % 26).expect("small"))
        });
        next.take(count).collect::<String>()
    };
    let noted = |count| format!("notes = \"{}\"\n{SCENARIO}", digits(count));
    let (status, link, err) = told(&["write", "-", "--as", "link"], &noted(12_000));
    assert_eq!(status, 0);
    assert!(link.len() > 8_000 && err.contains("some mail and chat programs cut it"), "{err}");
    let (status, out, err) = told(&["write", "-", "--as", "link"], &noted(1 << 20));
    assert_eq!((status, out.as_str()), (2, ""));
    assert!(err.contains("too long for a link: use the file"), "{err}");
}

#[test]
fn a_file_is_written_where_asked() {
    let path = format!("{}/knapsack.mps", env!("CARGO_TARGET_TMPDIR"));
    let words = ["write", "-", "--as", "mps", "-o", &path];
    let (status, out, err) = told(&words, &in_mps(KNAPSACK));
    assert_eq!((status, out.as_str(), err.as_str()), (0, "", ""));
    let (status, out, err) = told(&["read", &path], "");
    assert_eq!((status, err.as_str()), (0, ""));
    assert!(out.starts_with("knapsack (read as mps)\n"), "{out}");
    assert!(out.contains("1 row in 2 columns, 2 non-zeros, maximised"), "{out}");
    assert!(out.contains("2 of the columns must be whole"), "{out}");
    let words = ["write", "-", "--as", "mps", "-o", "no/such/folder/a.mps"];
    let (status, _, err) = told(&words, &in_mps(KNAPSACK));
    assert_eq!(status, 2);
    assert!(err.starts_with("hullward: no/such/folder/a.mps: cannot be written"), "{err}");
}

#[test]
fn mps_is_read_as_a_model_and_not_as_an_instance() {
    let (status, out, _) = told(&["read", "-"], &in_mps(KNAPSACK));
    assert_eq!(status, 0);
    assert!(out.contains("variables: x, y"), "{out}");
    let disputed = KNAPSACK.replace(" UP BND x 9\n", "");
    let (status, _, err) = told(&["read", "-"], &disputed);
    assert_eq!(status, 0);
    assert!(err.starts_with("-:9:") && err.contains("warning: "), "{err}");
    let (status, _, err) = told(&["read", "-"], &KNAPSACK.replace("ENDATA\n", ""));
    assert_eq!(status, 2);
    assert!(err.contains("ENDATA"), "{err}");
    let instance = format!("hullward = 1\n[instance]\ntext = '''\n{KNAPSACK}'''\n");
    let (status, _, err) = told(&["read", "-"], &instance);
    assert_eq!(status, 2);
    assert!(err.contains("-:4:1: error: this is a whole model in MPS"), "{err}");
    let both = format!("{instance}[[rival]]\nfrom = \"atsp/labels\"\n");
    let (status, _, err) = told(&["run", "-"], &both);
    assert_eq!(status, 2);
    assert!(err.contains("make it a rival"), "{err}");
}

#[test]
fn a_model_in_mps_is_written_out_as_notation() {
    let (status, out, err) = told(&["write", "-", "--as", "text"], &in_mps(KNAPSACK));
    assert_eq!(status, 0, "{err}");
    assert!(out.contains("5 x + 3 y") && out.contains("x ∈ ℤ"), "{out}");
}

#[test]
fn what_cannot_be_written_is_refused_in_words() {
    let refused = |words: &[&str], text: &str, says: &str| {
        let (status, out, err) = told(words, text);
        assert_eq!((status, out.as_str()), (2, ""), "{words:?}");
        assert!(err.contains(says), "{words:?}: {err}");
    };
    let write = |rest: &[&'static str]| [&["write", "-"], rest].concat();
    for form in ["pdf", "docx"] {
        let says = "there are mps, tightened, latex, text, scenario, link";
        refused(&write(&["--as", form]), SCENARIO, says);
    }
    refused(&write(&[]), SCENARIO, "write needs --as and one of mps");
    refused(&write(&["--as", "mps"]), SCENARIO, "name the rival with --rival: A to B");
    refused(&write(&["--as", "mps", "--rival", "c"]), SCENARIO, "there is no rival C: it has 2");
    let second = write(&["--as", "mps", "--rival", "a", "--instance", "2"]);
    refused(&second, SCENARIO, "there is no instance 2");
    let wrong = SCENARIO.replace("from = \"atsp/labels\"", "text = '''\nmin Σ_{i x\n'''");
    refused(&write(&["--as", "latex", "--rival", "a"]), &wrong, "-:14:");
    let broken = SCENARIO.replace("14", "1x4");
    refused(&write(&["--as", "mps", "--rival", "a"]), &broken, "-:6:9: error: ");
}
