//! Rules and limits of a run.

use notation::Help;
use record::file::nearest;
use record::message::Complaint;
use record::scenario::{BranchingRule, Run, Selection};

/// The search's settings.
pub(crate) fn settings(run: &Run, seed: u64) -> tree::Settings {
    tree::Settings {
        branching: branching(run.branching),
        selection: selection(run.selection),
        priority: run.priority.clone(),
        node_work: node_work(run),
        cuts: cuts(run),
        heuristics: heuristics(run),
        cutoff: run.best_known,
        node_limit: (run.nodes > 0).then_some(run.nodes),
        iteration_limit: (run.iterations > 0).then_some(run.iterations),
        search: run.search,
        seed,
    }
}

pub(super) fn branching(rule: BranchingRule) -> tree::Branching {
    match rule {
        BranchingRule::MostFractional => tree::Branching::MostFractional,
        BranchingRule::Pseudocost => tree::Branching::Pseudocost,
        BranchingRule::Strong => tree::Branching::Strong,
        BranchingRule::Reliability => tree::Branching::Reliability,
        BranchingRule::ByHand => tree::Branching::ByHand,
    }
}

pub(super) fn selection(rule: Selection) -> tree::Selection {
    match rule {
        Selection::BestBound => tree::Selection::BestBound,
        Selection::DepthFirst => tree::Selection::DepthFirst,
        Selection::BestEstimate => tree::Selection::BestEstimate,
    }
}

/// What is done at a node: the words of the scenario, or the default where it has none.
fn node_work(run: &Run) -> tree::NodeWork {
    let Some(words) = &run.node_work else { return tree::NodeWork::default() };
    let has = |wanted: &str| words.iter().any(|word| word == wanted);
    tree::NodeWork {
        propagation: has("propagation"),
        fixing: has("reduced costs"),
        lattice: has("objective step"),
    }
}

/// General cuts by the words of the scenario.
fn cuts(run: &Run) -> tree::Cuts {
    let has = |wanted: &str| run.cuts.iter().flatten().any(|class| class == wanted);
    let classes = tree::Class::ALL.into_iter().filter(|(_, word)| has(word));
    tree::Cuts {
        classes: classes.map(|(class, _)| class).collect(),
        every: run.cut_every,
        rounds: run.cut_rounds,
    }
}

/// The code of a name in `priority` that is no variable. The example is the list.
pub(crate) const HELP: Help = Help {
    code: "run.priority",
    meaning: "The list `priority` of a run says which variables are branched on first. A name in it that a \
        rival does not have changes nothing for that rival; it stands there by a slip, or for another rival.",
    example: " [run]\n-priority = [\"open\"]\n+priority = [\"y\"]\n",
};

/// What is to be said of the run's settings for a rival: variables that it does not have.
pub(crate) fn complaints(run: &Run, model: &model::Model) -> Vec<Complaint> {
    let known: Vec<&str> = model.variables().iter().map(|v| v.name.as_str()).collect();
    let unknown = run.priority.iter().filter(|name| !known.contains(&name.as_str()));
    let complaint = |name: &String| {
        let near = nearest(name, &known).map(|near| format!("did you mean {near}? "));
        Complaint {
            error: false,
            code: HELP.code.to_owned(),
            line: 1,
            column: 1,
            start: 0,
            end: 0,
            message: format!(
                "`priority` in [run] names {name}, which is no variable of this rival"
            ),
            mend: format!("{}its variables: {}", near.unwrap_or_default(), known.join(", ")),
        }
    };
    unknown.map(complaint).collect()
}

/// How plans are looked for: the words of the scenario, or the default where it has none.
fn heuristics(run: &Run) -> tree::Heuristics {
    let Some(words) = &run.heuristics else { return tree::Heuristics::default() };
    let has = |wanted: &str| words.iter().any(|word| word == wanted);
    tree::Heuristics {
        rounding: has("rounding"),
        trip: has("round trip") || has("family"),
        diving: has("diving"),
        pump: has("feasibility pump"),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use record::scenario::{CUT_CLASSES, Preset};

    #[test]
    fn scenario_and_search_have_the_same_classes_of_cuts() {
        assert_eq!(tree::Class::ALL.map(|(_, word)| word), CUT_CLASSES);
        let all = settings(&Run::of(Preset::Production), 0);
        assert_eq!(all.cuts.classes, tree::Classes::all());
        assert!(settings(&Run::default(), 0).cuts.is_empty());
    }

    #[test]
    fn a_priority_without_a_variable_is_told() {
        let mut builder = model::ModelBuilder::new("m", model::Sense::Minimise);
        builder.variable("open", false);
        let model = builder.build();
        let run = |names: &[&str]| Run {
            priority: names.iter().map(|&name| name.to_owned()).collect(),
            ..Run::default()
        };
        assert!(complaints(&run(&["open"]), &model).is_empty());
        let told = complaints(&run(&["opne", "open"]), &model);
        assert_eq!(told.len(), 1);
        assert!(told[0].message.contains("names opne"), "{told:?}");
        assert!(told[0].mend.starts_with("did you mean open?"), "{told:?}");
    }
}
