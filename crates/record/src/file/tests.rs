//! Every field of version 1, every kind of mistake, and print as the inverse of parse.

use std::collections::BTreeMap;

use proptest::collection::{btree_map, vec};
use proptest::option;
use proptest::prelude::*;

use super::*;
use crate::scenario::{
    Act, ActKind, BranchingRule, FamilyState, Field, InstanceText, MOST_ACTS, MOST_RIVALS, Preset,
    Rival, Role, Run, Study,
};

/// The example of the file's description, every field of version 1 in it.
const EXAMPLE: &str = r#"hullward = 1
title = "Mobile library round"
seed = 7
notes = "Markdown"
engine = "0.1.0"
digest = "0123456789abcdef"

[instance]
reader = "tsplib"
text = '''
NAME: four
DIMENSION: 4'''
bind = { c = "distance", V = "stop" }

[[rival]]
title = "Position labels"
from = "atsp/labels"
families = { order = "in", "row 3" = "on demand", leave = "out" }

[[rival.act]]
after = 12
do = "branch"
node = 9
on = ["x", "Ash", "Birch"]

[[rival]]
text = '''
min x'''

[[rival]]
mps = "ROWS"
role = "relaxation"

[run]
search = true
nodes = 20000
iterations = 0
seconds = 60
best_known = 39.0
branching = "reliability"
selection = "best bound"
cuts = ["on demand", "gomory", "mir", "cover", "clique"]

[[study]]
kind = "growth"
sizes = [8, 10, 12]
seeds = [1, 2, 3]
"#;

fn complaints(text: &str) -> Vec<(u32, u32, String, String)> {
    let parsed = parse(text);
    assert!(parsed.scenario.is_none(), "accepted:\n{text}");
    parsed.complaints.into_iter().map(|c| (c.line, c.column, c.message, c.mend)).collect()
}

fn only(text: &str) -> (u32, u32, String, String) {
    let mut all = complaints(text);
    assert_eq!(all.len(), 1, "{all:?}");
    all.remove(0)
}

#[test]
fn every_field_of_version_one_is_read() {
    let parsed = parse(EXAMPLE);
    assert_eq!(parsed.complaints, []);
    let scenario = parsed.scenario.expect("no complaint");
    assert_eq!(scenario.title, "Mobile library round");
    assert_eq!((scenario.seed, scenario.notes.as_str()), (7, "Markdown"));
    let instance = scenario.instance.as_ref().expect("an instance");
    assert_eq!(instance.text, "NAME: four\nDIMENSION: 4");
    assert_eq!(instance.bind["V"], "stop");
    assert_eq!(scenario.rivals[0].families["row 3"], FamilyState::OnDemand);
    assert_eq!(scenario.rivals[0].acts[0].what, ActKind::Branch);
    assert_eq!(scenario.rivals[2].role, Some(Role::Relaxation));
    assert_eq!(scenario.run.branching, BranchingRule::Reliability);
    assert_eq!(scenario.run.best_known, Some(39.0));
    assert_eq!(
        scenario.studies[0].fields["sizes"],
        Field::List([8, 10, 12].map(Field::Whole).to_vec())
    );
    assert_eq!(parse(&print(&scenario)).scenario, Some(scenario));
}

#[test]
fn places_in_a_text_become_places_in_the_file() {
    let parsed = parse(EXAMPLE);
    let complaint = |line, column| Complaint {
        error: true,
        code: String::new(),
        line,
        column,
        start: 0,
        end: 0,
        message: String::new(),
        mend: String::new(),
    };
    assert_eq!(parsed.instance_origins[0].place(&complaint(2, 4)), (12, 4));
    assert_eq!(parsed.rival_origins[0], None);
    assert_eq!(parsed.rival_origins[1].expect("a text").place(&complaint(1, 5)), (28, 5));
    assert_eq!(parsed.rival_origins[2].expect("a text").place(&complaint(1, 2)), (31, 9));
    let escaped = parse("hullward = 1\n[instance]\ntext = \"a\\nb\"");
    assert_eq!(escaped.instance_origins[0].place(&complaint(2, 1)), (3, 9));
}

#[test]
fn several_instances_are_read() {
    let text =
        "hullward = 1\n[[instance]]\ntitle = \"Mon\"\ntext = \"1\"\n[[instance]]\ntext = \"2\"";
    let scenario = parse(text).scenario.expect("no complaint");
    assert_eq!(scenario.instances().map(|i| i.text.as_str()).collect::<Vec<_>>(), ["1", "2"]);
    assert_eq!(parse(&print(&scenario)).scenario, Some(scenario));
}

#[test]
fn a_newer_version_is_refused_with_words() {
    let (line, column, message, mend) = only("hullward = 2\nwhatever = 3");
    assert_eq!((line, column), (1, 12));
    assert_eq!(message, "the file is of version 2; this program reads version 1");
    assert!(mend.contains("newer"));
    assert_eq!(only("title = \"x\"").3, "begin with hullward = 1");
}

#[test]
fn unknown_names_come_with_the_nearest_known_one() {
    let (line, column, message, mend) = only("hullward = 1\n[run]\nnodez = 5");
    assert_eq!((line, column, message.as_str()), (3, 1, "run has no field `nodez`"));
    assert_eq!(mend, "did you mean `nodes`?");
    let (.., mend) = only("hullward = 1\n[run]\nbranching = \"pseudo-cost\"");
    assert_eq!(mend, "did you mean \"pseudocost\"?");
    let (line, column, ..) =
        only("hullward = 1\n[[rival]]\nfrom = \"a/b\"\nfamilies = { \"é\" = \"inn\" }");
    assert_eq!((line, column), (4, 20));
}

#[test]
fn every_mistake_is_reported_at_its_place() {
    let text = "hullward = 1\nseed = -1\ntitle = 5\n[run]\nsearch = 1\nseconds = nan\nnodes = 5000000000\n\
                [[rival]]\n[[rival]]\nfrom = \"a\"\ntext = \"b\"\n[instance]\nreader = \"tsplibb\"\n[[study]]\nkind = \"growth\"\nday = 2020-01-01\n";
    let places: Vec<u32> = complaints(text).iter().map(|c| c.0).collect();
    assert_eq!(places, [2, 3, 5, 6, 7, 8, 9, 12, 13, 16]);
}

#[test]
fn what_is_not_toml_is_refused_at_its_place() {
    let (line, _, message, mend) = only("hullward = 1\ntitle = \"a\nseed = 3\n");
    assert_eq!(line, 2);
    assert!(message.starts_with("this is not TOML") && !mend.is_empty());
    assert_eq!(only("hullward = 1\nseed = 1\nseed = 2\n").0, 3);
}

#[test]
fn what_a_literal_cannot_hold_is_escaped() {
    for text in ["a'''b\nc", "bell\u{7}\nx", "a\r\nb", "ends with '\n'", "\\ \" \n\\", "\n\na\n"] {
        let scenario = Scenario { notes: text.to_owned(), ..Scenario::default() };
        assert_eq!(parse(&print(&scenario)).scenario, Some(scenario));
    }
    let plain = Scenario { notes: "a \\ b\nc".to_owned(), ..Scenario::default() };
    assert!(print(&plain).contains("notes = '''\na \\ b\nc'''"));
}

fn any_text() -> impl Strategy<Value = String> {
    prop_oneof!["[a-z ]{0,8}", "[a'\"\\\\\n\t\r\u{0}\u{7f}é𝑥#=\\[\\]]{0,12}", "\\PC{0,6}"]
}

fn finite() -> impl Strategy<Value = f64> {
    prop_oneof![Just(0.0), -1e9..1e9, prop::num::f64::NORMAL]
}

fn field() -> impl Strategy<Value = Field> {
    let leaf = prop_oneof![
        any_text().prop_map(Field::Text),
        any::<i64>().prop_map(Field::Whole),
        finite().prop_map(Field::Number),
        any::<bool>().prop_map(Field::Flag),
    ];
    leaf.prop_recursive(2, 8, 3, |inner| {
        prop_oneof![
            vec(inner.clone(), 0..3).prop_map(Field::List),
            btree_map("\\PC{0,4}", inner, 0..3).prop_map(Field::Table),
        ]
    })
}

fn instance() -> impl Strategy<Value = InstanceText> {
    let reader = option::of(prop::sample::select(vec!["matrix".to_owned(), "blocks".to_owned()]));
    (reader, any_text(), any_text(), btree_map("\\PC{0,4}", any_text(), 0..3))
        .prop_map(|(reader, title, text, bind)| InstanceText { reader, title, text, bind })
}

fn act() -> impl Strategy<Value = Act> {
    let what = prop::sample::select(decode::ACTS.map(|(_, what)| what).to_vec());
    (any::<u32>(), what, option::of(any::<u32>()), vec(any_text(), 0..3))
        .prop_map(|(after, what, node, on)| Act { after, what, node, on })
}

fn rival() -> impl Strategy<Value = Rival> {
    let states = prop::sample::select(decode::FAMILY_STATES.map(|(_, state)| state).to_vec());
    let families = btree_map("\\PC{0,5}", states, 0..3);
    (any_text(), any_text(), 0..3, any::<bool>(), families, vec(act(), 0..3)).prop_map(
        |(title, source, which, relaxation, families, acts)| Rival {
            title,
            from: (which == 0).then(|| source.clone()),
            text: (which == 1).then(|| source.clone()),
            mps: (which == 2).then_some(source),
            role: relaxation.then_some(Role::Relaxation),
            families,
            acts,
        },
    )
}

fn run() -> impl Strategy<Value = Run> {
    let branching = prop::sample::select(decode::BRANCHING.map(|(_, rule)| rule).to_vec());
    let selection = prop::sample::select(decode::SELECTION.map(|(_, rule)| rule).to_vec());
    let cuts =
        option::of(vec(prop::sample::select(vec!["gomory".to_owned(), "mir".to_owned()]), 0..3));
    let works = vec!["propagation".to_owned(), "reduced costs".to_owned()];
    let finds = vec!["diving".to_owned(), "feasibility pump".to_owned()];
    let finds = option::of(vec(prop::sample::select(finds), 0..3));
    let works = option::of(vec(prop::sample::select(works), 0..3));
    let lists = (cuts, works, vec("\\PC{1,5}", 0..3), finds, option::of(any_text()));
    let limits = (any::<u32>(), any::<u64>(), 0.0..1e6);
    (any::<bool>(), limits, option::of(finite()), branching, selection, lists).prop_map(
        |(search, (nodes, iterations, seconds), best_known, branching, selection, lists)| {
            let preset = if search { Preset::Bare } else { Preset::Production };
            let of = Run::of(preset);
            Run {
                search,
                nodes,
                iterations,
                seconds,
                best_known,
                branching,
                selection,
                priority: lists.2,
                node_work: lists.1.or(of.node_work),
                cuts: lists.0.or(of.cuts),
                cut_every: nodes % 7,
                cut_rounds: nodes % 3,
                preset,
                heuristics: lists.3.or(of.heuristics),
                plan: lists.4,
            }
        },
    )
}

fn study() -> impl Strategy<Value = Study> {
    btree_map("\\PC{1,5}", field(), 0..3)
        .prop_filter("kind is not free", |fields: &BTreeMap<String, Field>| {
            !fields.contains_key("kind")
        })
        .prop_map(|fields| Study { kind: "growth".to_owned(), fields })
}

fn scenario() -> impl Strategy<Value = Scenario> {
    let head =
        (any_text(), any::<u64>(), any_text(), option::of(any_text()), option::of(any_text()));
    (head, vec(instance(), 0..3), vec(rival(), 0..3), run(), vec(study(), 0..2)).prop_map(
        |((title, seed, notes, engine, digest), instances, rivals, run, studies)| {
            let mut instances = instances.into_iter();
            Scenario {
                hullward: 1,
                title,
                seed,
                notes,
                engine,
                digest,
                instance: instances.next(),
                further_instances: instances.collect(),
                rivals,
                run,
                studies,
            }
        },
    )
}

proptest! {
    #![proptest_config(ProptestConfig { failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn what_is_printed_reads_back(scenario in scenario()) {
        let text = print(&scenario);
        let parsed = parse(&text);
        prop_assert_eq!(&parsed.complaints, &[], "{}", text);
        prop_assert_eq!(parsed.scenario.as_ref(), Some(&scenario), "{}", text);
        prop_assert_eq!(print(&scenario), text);
    }

    #[test]
    fn nothing_panics(start in 0_usize..EXAMPLE.len(), length in 0_usize..40, put in any_text()) {
        let end = (start + length).min(EXAMPLE.len());
        let _ = parse(&format!("{}{put}{}", &EXAMPLE[..start], &EXAMPLE[end..]));
    }
}

#[test]
fn more_rivals_than_a_page_can_hold_are_refused_at_the_first_too_many() {
    let rivals =
        |count: usize| format!("hullward = 1\n{}", "[[rival]]\nfrom = \"a\"\n".repeat(count));
    assert_eq!(parse(&rivals(MOST_RIVALS)).complaints, []);
    let (line, _, message, mend) = only(&rivals(MOST_RIVALS + 1));
    assert_eq!(line as usize, 2 + 2 * MOST_RIVALS);
    assert_eq!(message, "there are 101 [[rival]] tables");
    assert_eq!(mend, "100 are possible: split the scenario");
    let acts = "[[rival.act]]\ndo = \"stop\"\n".repeat(MOST_ACTS + 1);
    let (line, _, message, _) = only(&format!("{}{acts}", rivals(1)));
    assert_eq!(line as usize, 4 + 2 * MOST_ACTS);
    assert_eq!(message, "there are 10001 [[act]] tables");
}

#[test]
fn nesting_without_end_is_refused() {
    const DEEP: usize = 100_000;
    let lists = format!("title = {}{}", "[".repeat(DEEP), "]".repeat(DEEP));
    let tables = format!("title = {}1{}", "{a=".repeat(DEEP), "}".repeat(DEEP));
    let dotted = format!("{}a = 1", "a.".repeat(DEEP));
    let heading = format!("[{}a]", "a.".repeat(DEEP));
    for text in [lists, tables, dotted, heading] {
        let said = complaints(&format!("hullward = 1\n{text}\n"));
        let (_, _, message, mend) = &said[0];
        assert!(message.contains("recursion") && mend.contains("too deeply"), "{said:?}");
    }
}
