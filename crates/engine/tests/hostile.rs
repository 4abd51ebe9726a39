//! Texts from outside, cut up and stuck together: whatever comes, an answer and no panic.

use hullward_engine::log_digest;
use proptest::prelude::*;

const SCENARIOS: [&str; 3] = [
    include_str!("scenarios/labels.toml"),
    include_str!("scenarios/subtours.toml"),
    include_str!("scenarios/knapsack.toml"),
];

/// The formulations of the round trip as texts of one's own, so that they can be cut up.
fn formulation() -> impl Strategy<Value = String> {
    let entries = catalogue::entries();
    let texts: Vec<String> = entries.iter().map(|entry| entry.text.to_owned()).collect();
    prop::sample::select(texts)
}

/// The text with a piece taken out and another put in.
fn cut_up(text: &str, place: f64, length: usize, put: &str) -> String {
    let letters: Vec<char> = text.chars().collect();
    let start = (place * letters.len() as f64) as usize;
    let end = (start + length).min(letters.len());
    let (before, after) = (&letters[..start], &letters[end..]);
    before.iter().chain(put.chars().collect::<Vec<_>>().iter()).chain(after).collect()
}

fn piece() -> impl Strategy<Value = String> {
    prop_oneof![
        Just(String::new()),
        "[a-zA-Z0-9_{}()∀∈Σ≤=,.:;+−*/^ \n\t-]{1,6}",
        prop::sample::select(vec![
            "Σ_{i ∈ V}",
            "∀ S ⊂ V",
            "999999999999",
            "1e400",
            "x_{i,j}",
            "^{9}",
            "{1..99999999}",
            "/ 0",
            "\u{0}",
            "|V|",
        ])
        .prop_map(str::to_owned),
    ]
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 200, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn scenarios_in_pieces_are_answered(
        which in 0_usize..3, place in 0.0..1.0, length in 0_usize..30, put in piece(),
    ) {
        let text = cut_up(SCENARIOS[which], place, length, &put);
        let _ = log_digest(&format!("{text}nodes = 3\n"), 0, 50_000);
    }

    #[test]
    fn formulations_in_pieces_are_answered(
        text in formulation(), place in 0.0..1.0, length in 0_usize..30, put in piece(),
    ) {
        let text = cut_up(&text, place, length, &put);
        let head = "hullward = 1\n[instance]\ntext = '''\n0 3 4 5\n2 0 4 6\n7 3 0 5\n4 6 3 0\n'''\n";
        let scenario = format!("{head}[[rival]]\ntext = '''\n{text}'''\n[run]\nnodes = 3\niterations = 3000\n");
        let _ = log_digest(&scenario, 0, 50_000);
    }
}
