//! What a scenario asks for and this version of the engine does not do: it is said, never
//! silently ignored.

use record::scenario::{BranchingRule, Run, Selection};

/// What is left out of such a run, one sentence each; empty when nothing is.
#[must_use]
pub fn left_out(run: &Run) -> Vec<String> {
    let mut sentences = Vec::new();
    let branching = match run.branching {
        BranchingRule::MostFractional | BranchingRule::Pseudocost | BranchingRule::ByHand => None,
        BranchingRule::Strong => Some("strong branching"),
        BranchingRule::Reliability => Some("reliability branching"),
    };
    if let Some(rule) = branching {
        sentences.push(format!("{rule} is not in this version; pseudocost was used"));
    }
    if run.selection == Selection::BestEstimate {
        let rule = "selection by best estimate";
        sentences.push(format!("{rule} is not in this version; best bound was used"));
    }
    let general: Vec<&str> = run
        .cuts
        .iter()
        .flatten()
        .map(String::as_str)
        .filter(|class| *class != "on demand")
        .collect();
    if !general.is_empty() {
        let classes = general.join(", ");
        sentences.push(format!("general cuts ({classes}) are not in this version; none was used"));
    }
    sentences
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn nothing_is_left_out_of_a_usual_run() {
        assert!(left_out(&Run::default()).is_empty());
        let on_demand = Run { cuts: Some(vec!["on demand".to_owned()]), ..Run::default() };
        assert!(left_out(&on_demand).is_empty());
    }

    #[test]
    fn each_thing_left_out_is_named() {
        let run = Run {
            branching: BranchingRule::Reliability,
            selection: Selection::BestEstimate,
            cuts: Some(vec!["on demand".to_owned(), "mir".to_owned()]),
            ..Run::default()
        };
        let sentences = left_out(&run);
        assert_eq!(sentences.len(), 3);
        assert!(sentences[0].starts_with("reliability branching"));
        assert!(sentences[2].contains("(mir)"));
    }
}
