//! The page's sentences about a run, without marks.

use record::event::{Branching, NodeState, Side};
use record::results::{RootReport, SearchReport, Status, WAITS};
use record::scenario::FamilyState;
use report::number::{of, short};

use crate::state::lane::{Lane, Phase};

/// How a run stands, in a sentence without a stop.
pub(crate) fn status(lane: &Lane) -> String {
    match lane.phase {
        _ if lane.proving => loading(lane),
        Phase::Idle => "waits for an instance".to_owned(),
        Phase::Loading => loading(lane),
        Phase::Ready => ready(lane.root.as_deref()),
        Phase::Running => format!("searching: {}", counts(lane)),
        Phase::Pausing => "pausing".to_owned(),
        Phase::Paused => paused(lane),
        Phase::Explaining => format!(
            "{}; looking for the families that cannot hold together",
            no_plan(&of(u64::from(lane.nodes()), "node"))
        ),
        Phase::Stopping => "stopping".to_owned(),
        Phase::Done => done(lane),
        Phase::Failed => "could not be run".to_owned(),
    }
}

fn loading(lane: &Lane) -> String {
    match &lane.progress {
        Some(progress) if progress.iterations > 0 => {
            format!("{}: {}", progress.doing, of(progress.iterations, "iteration"))
        }
        Some(progress) => progress.doing.clone(),
        None => "reading the formulation".to_owned(),
    }
}

fn counts(lane: &Lane) -> String {
    format!(
        "{}, {} open",
        of(u64::from(lane.nodes()), "node"),
        report::number::count(u64::from(lane.tally.open))
    )
}

fn ready(root: Option<&RootReport>) -> String {
    let text = match root.map(|root| root.status) {
        Some(Status::Infeasible) => "the relaxation is infeasible",
        Some(Status::Unbounded) => "the relaxation is unbounded",
        Some(Status::Limit) => "a limit ended the root",
        Some(Status::Error) => "the root could not be solved",
        Some(Status::Optimal) | None => "root solved, not searched yet",
    };
    text.to_owned()
}

fn paused(lane: &Lane) -> String {
    let waits = lane.search.as_ref().is_some_and(|search| search.stopped.as_deref() == Some(WAITS));
    let why = if waits { "; every open node waits for a branching by hand" } else { "" };
    format!("paused: {}{why}", counts(lane))
}

fn done(lane: &Lane) -> String {
    let nodes = of(u64::from(lane.nodes()), "node");
    match lane.search.as_deref() {
        Some(search) => ended(search, &nodes),
        None => "stopped before the root was solved".to_owned(),
    }
}

fn ended(search: &SearchReport, nodes: &str) -> String {
    match search.status {
        Status::Optimal => match search.incumbent {
            Some(value) => format!("closed: {} is optimal, {nodes}", short(value)),
            None => format!("closed: nothing better than the value given, {nodes}"),
        },
        Status::Infeasible => no_plan(nodes),
        Status::Unbounded => "the objective has no bound".to_owned(),
        Status::Limit => {
            let why = match search.stopped.as_deref() {
                Some("stopped" | "stopped by hand") => "by hand",
                Some(why) => why,
                None => "a limit",
            };
            format!(
                "stopped ({why}): {nodes}, {} open",
                report::number::count(u64::from(search.open))
            )
        }
        Status::Error => "the search failed".to_owned(),
    }
}

fn no_plan(nodes: &str) -> String {
    format!("closed: no solution exists, {nodes}")
}

/// A clause with a stop at its end.
pub(crate) fn sentence(clause: &str) -> String {
    let ended = clause.is_empty() || clause.ends_with(['.', '!', '?']);
    if ended { clause.to_owned() } else { [clause, "."].concat() }
}

/// A clause as a sentence of its own: with a capital and a stop.
pub(crate) fn advice(clause: &str) -> String {
    let mut letters = clause.chars();
    let capital: String = letters.next().into_iter().flat_map(char::to_uppercase).collect();
    sentence(&[capital.as_str(), letters.as_str()].concat())
}

/// The state of a node in a word or two.
pub(crate) fn node_state(state: NodeState) -> &'static str {
    match state {
        NodeState::Open => "open",
        NodeState::Branched => "branched",
        NodeState::Integer => "integer",
        NodeState::Infeasible => "infeasible",
        NodeState::Pruned => "pruned by bound",
        NodeState::Closed => "closed by hand",
        NodeState::Unbounded => "unbounded",
        NodeState::Unsolved => "unsolved",
    }
}

/// The state of a family from its words.
pub(crate) fn family_state_from(words: &str) -> Option<FamilyState> {
    [FamilyState::In, FamilyState::OnDemand, FamilyState::Out]
        .into_iter()
        .find(|&state| state.word() == words)
}

/// A branching: `x[Ash → Birch] ≤ 0`.
pub(crate) fn branching(branching: &Branching, columns: &[String]) -> String {
    let sign = match branching.side {
        Side::AtMost => '≤',
        Side::AtLeast => '≥',
    };
    let name = columns.get(branching.column as usize).map_or("?", String::as_str);
    format!("{name} {sign} {}", short(branching.bound))
}

/// A piece of a sentence.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Span<'text> {
    /// Words.
    Words(&'text str),
    /// What is typed.
    Code(&'text str),
}

/// A text in pieces: what stands between grave accents is code.
pub(crate) fn spans(text: &str) -> impl Iterator<Item = Span<'_>> {
    let pieces = text.split('`').enumerate();
    pieces.map(|(place, piece)| if place % 2 == 0 { Span::Words(piece) } else { Span::Code(piece) })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::state::pointer::Shared;

    fn search(status: Status, incumbent: Option<f64>) -> SearchReport {
        SearchReport {
            status,
            bound: incumbent,
            incumbent,
            gap: None,
            nodes: 95,
            open: 3,
            iterations: 0,
            work: 0,
            solution: Vec::new(),
            checked: true,
            stopped: Some("node limit".to_owned()),
            ..SearchReport::default()
        }
    }

    #[test]
    fn an_end_says_what_was_proved() {
        let lane = |report| Lane {
            phase: Phase::Done,
            search: Some(Shared::new(report)),
            ..Lane::default()
        };
        assert_eq!(
            status(&lane(search(Status::Optimal, Some(153.0)))),
            "closed: 153 is optimal, 95 nodes"
        );
        assert_eq!(
            status(&lane(search(Status::Limit, None))),
            "stopped (node limit): 95 nodes, 3 open"
        );
        assert_eq!(
            status(&Lane { phase: Phase::Done, ..Lane::default() }),
            "stopped before the root was solved"
        );
    }

    #[test]
    fn a_branching_reads_as_a_bound() {
        let step = Branching { column: 1, side: Side::AtLeast, bound: 1.0 };
        assert_eq!(
            branching(&step, &["x".to_owned(), "x[Ash → Birch]".to_owned()]),
            "x[Ash → Birch] ≥ 1"
        );
        assert_eq!(branching(&step, &[]), "? ≥ 1");
    }

    #[test]
    fn a_clause_becomes_a_sentence_once() {
        assert_eq!((sentence("x").as_str(), sentence("x.").as_str()), ("x.", "x."));
        assert_eq!(advice("did you mean `c`?"), "Did you mean `c`?");
        assert_eq!(advice("give a default"), "Give a default.");
    }

    #[test]
    fn family_states_read_back() {
        for state in [FamilyState::In, FamilyState::OnDemand, FamilyState::Out] {
            assert_eq!(family_state_from(state.word()), Some(state));
        }
        assert_eq!(family_state_from("perhaps"), None);
    }

    #[test]
    fn code_stands_between_grave_accents() {
        let found: Vec<_> = spans("a `b` c").collect();
        assert_eq!(found, [Span::Words("a "), Span::Code("b"), Span::Words(" c")]);
    }
}
