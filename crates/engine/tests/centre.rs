//! The form over radii on a graph of OR-Library (Beasley 1990): its steps are the distances that
//! differ, not the pairs. The file is read from the folder that `HULLWARD_DATA` names.

#![allow(clippy::print_stdout, clippy::expect_used, reason = "a test's own helpers")]

use record::scenario::{InstanceText, Rival, Scenario};

fn pmed1() -> Option<String> {
    let data = std::env::var_os("HULLWARD_DATA").map(std::path::PathBuf::from);
    data.and_then(|data| std::fs::read_to_string(data.join("pmedian/pmed1.txt")).ok())
}

/// The file's report says that 285 of the 10,000 distances between its 100 nodes differ: a binary
/// for each of them but the largest, with a row for each client.
#[test]
fn radii_of_a_graph_of_a_hundred_nodes() {
    let Some(text) = pmed1() else {
        let message = "skipped: pmedian/pmed1.txt is not in HULLWARD_DATA; OR-Library has it";
        assert!(std::env::var("CI").as_deref() != Ok("true"), "{message}");
        println!("{message}");
        return;
    };
    let scenario = Scenario {
        instance: Some(InstanceText { text, ..InstanceText::default() }),
        rivals: vec![Rival { from: Some("p-centre/radius".to_owned()), ..Rival::default() }],
        ..Scenario::default()
    };
    let model = hullward_engine::prepare(&scenario, 0).expect("a model");
    assert_eq!(model.columns().len(), 100 + 284);
    assert_eq!(model.row_count(), 284 * 100 + 1);
}
