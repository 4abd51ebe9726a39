//! Steering by hand: what was done is replayed to the same events, nothing is lost by branching,
//! and what a person closes is not claimed.

use std::collections::BTreeSet;
use std::rc::Rc;

use model::{ColumnId, LabelId, Model, Sense, SubsetFamilyId};
use proptest::prelude::*;

use super::support::{
    Form, Random, best_trip, enumerated, finish, random_model, round_trip, rules, run,
};
use crate::{
    Act, Acted, Event, NodeId, NodeState, Progress, Refusal, Search, Settings, Status, Summary,
};

fn wait(search: &mut Search, ticks: u64) -> Progress {
    loop {
        let progress = search.advance(ticks);
        if progress != Progress::Working {
            return progress;
        }
    }
}

/// Which acts a random hand does.
#[derive(Clone, Copy, PartialEq)]
enum Hand {
    Branches,
    All,
}

fn random_act(model: &Model, nodes: i64, hand: Hand, random: &mut Random) -> Act {
    let node = NodeId(u32::try_from(1 + random.below(2 * nodes + 2)).unwrap());
    let column = ColumnId::from_index(
        usize::try_from(random.below(i64::try_from(model.columns().len()).unwrap())).unwrap(),
    );
    match random.below(8) {
        0 | 1 if hand == Hand::All => Act::Close { node },
        2 if hand == Hand::All && random.below(6) == 0 => Act::Stop,
        3 if !model.subset_families().is_empty() => {
            let ground = &model.subset_families()[0].ground;
            let subset: BTreeSet<LabelId> =
                ground.iter().filter(|_| random.below(3) == 0).copied().collect();
            Act::Cut { family: SubsetFamilyId::from_index(0), subset }
        }
        _ => Act::Branch { node, column },
    }
}

/// A search that a random hand steers: between nodes, inside nodes and while it is paused.
fn steered(model: &Rc<Model>, settings: &Settings, hand: Hand, seed: u64) -> (Search, Vec<Acted>) {
    let mut random = Random(seed);
    let mut search = Search::new(Rc::clone(model), settings.clone());
    let mut acted = Vec::new();
    for _ in 0..100_000 {
        let ticks = [3, 40, 500, u64::MAX][usize::try_from(random.below(4)).unwrap()];
        let progress = search.advance(ticks);
        acted.extend(search.take_acted());
        if progress == Progress::Finished {
            return (search, acted);
        }
        if random.below(4) == 0 {
            let nodes = i64::from(search.summary().nodes);
            search.act(random_act(model, nodes, hand, &mut random));
        }
        if progress == Progress::Working && random.below(3) == 0 {
            search.pause();
        } else if random.below(2) == 0 {
            let step = u32::try_from(random.below(4)).unwrap();
            search.run((random.below(3) > 0).then_some(step));
        }
    }
    panic!("the search does not end");
}

fn replayed(
    model: &Rc<Model>,
    settings: &Settings,
    acts: &[Acted],
    ticks: u64,
) -> (Vec<Event>, Summary, Vec<Acted>) {
    let mut search = Search::new(Rc::clone(model), settings.clone());
    for acted in acts {
        search.replay(acted.after, acted.act.clone());
    }
    finish(&mut search, ticks);
    (search.take_events(), search.summary(), search.take_acted())
}

/// The first round trip by subtours that its root does not end.
fn subtours() -> Rc<Model> {
    let mut models =
        (0..).map(|seed| round_trip(&Random(seed).distances(9), Form::Subtours, Sense::Minimise));
    let unfinished = |model: &Rc<Model>| run(model, &Settings::default(), u64::MAX).1.nodes > 6;
    models.find(unfinished).unwrap()
}

fn models() -> Vec<Rc<Model>> {
    let costs = Random(21).distances(8);
    let mut all = vec![round_trip(&costs, Form::Labels, Sense::Minimise), subtours()];
    all.extend((200..204).map(|seed| random_model(seed, 9, 2)));
    all
}

#[test]
fn acts_are_replayed_to_the_same_events() {
    let mut kinds = [0; 4];
    for model in models() {
        for (settings, seed) in rules().iter().cycle().zip(0..40) {
            let (mut search, acted) = steered(&model, settings, Hand::All, seed);
            let done: Vec<Acted> =
                acted.into_iter().filter(|acted| acted.refused.is_none()).collect();
            for acted in &done {
                kinds[match acted.act {
                    Act::Branch { .. } => 0,
                    Act::Close { .. } => 1,
                    Act::Cut { .. } => 2,
                    Act::Stop | Act::Rule(_) => 3,
                }] += 1;
            }
            let (events, summary) = (search.take_events(), search.summary());
            for ticks in [7, u64::MAX] {
                let (same, again, replay) = replayed(&model, settings, &done, ticks);
                let place = format!("{} {seed}: {done:?}", model.title());
                assert_eq!(same, events, "{place}");
                assert_eq!(again, summary, "{place}");
                // Cuts come in the order they were made; a cut may be told before a branching.
                let replay: BTreeSet<String> = replay
                    .into_iter()
                    .map(|acted| format!("{:?}", Acted { replayed: false, ..acted }))
                    .collect();
                let expected: BTreeSet<String> =
                    done.iter().map(|acted| format!("{acted:?}")).collect();
                assert_eq!(replay, expected, "{place}");
            }
        }
    }
    assert!(kinds.iter().all(|&count| count > 4), "{kinds:?}");
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 60, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn branching_by_hand_loses_no_solution(seed in any::<u64>(), hand in any::<u64>()) {
        let model = random_model(seed, 7, 2);
        let (search, _) = steered(&model, &Settings::default(), Hand::Branches, hand);
        let summary = search.summary();
        match enumerated(&model) {
            Some(value) => {
                prop_assert_eq!(summary.status, Status::Optimal);
                prop_assert!((summary.incumbent.unwrap() - value).abs() < 1e-6);
                prop_assert!((summary.bound.unwrap() - value).abs() < 1e-6);
            }
            None => prop_assert_eq!(summary.status, Status::Infeasible),
        }
    }

    #[test]
    fn what_is_closed_by_hand_is_not_claimed(seed in any::<u64>(), hand in any::<u64>()) {
        let model = random_model(seed, 8, 0);
        let (search, _) = steered(&model, &Settings::default(), Hand::All, hand);
        let summary = search.summary();
        let best = enumerated(&model);
        let sign = if model.sense() == Sense::Minimise { 1.0 } else { -1.0 };
        match (summary.status, best) {
            (Status::Optimal, Some(best)) => {
                prop_assert!((summary.incumbent.unwrap() - best).abs() < 1e-6);
            }
            (Status::Infeasible, best) => prop_assert_eq!(best, None),
            (Status::Limit, Some(best)) => {
                prop_assert!(!summary.checked);
                prop_assert!(summary.bound.is_none_or(|bound| sign * (best - bound) > -1e-6));
            }
            (status, best) => prop_assert_eq!((status, best), (Status::Limit, None)),
        }
    }

    #[test]
    fn cuts_and_branchings_keep_the_best_round_trip(seed in any::<u64>(), hand in any::<u64>()) {
        let costs = Random(seed).distances(8);
        let model = round_trip(&costs, Form::Subtours, Sense::Minimise);
        let (search, _) = steered(&model, &Settings::default(), Hand::Branches, hand);
        let summary = search.summary();
        let best = best_trip(&costs) as f64;
        prop_assert_eq!((summary.status, summary.incumbent), (Status::Optimal, Some(best)));
    }
}

/// A search of the labels that stands still with some nodes open.
fn standing() -> Search {
    let model = round_trip(&Random(21).distances(8), Form::Labels, Sense::Minimise);
    let mut search = Search::new(model, Settings::default());
    assert_eq!(wait(&mut search, 1000), Progress::RootSolved);
    search.run(Some(3));
    assert_eq!(wait(&mut search, 1000), Progress::Paused);
    search
}

fn answer(search: &mut Search, act: Act) -> Option<Refusal> {
    search.act(act);
    wait(search, 1000);
    let acted = search.take_acted();
    assert_eq!(acted.len(), 1, "{acted:?}");
    acted.into_iter().next().unwrap().refused
}

fn open_node(search: &mut Search) -> NodeId {
    let nodes = (2..).map(NodeId);
    nodes
        .take_while(|&node| node.0 < 100)
        .find(|&node| search.inspect(node).is_some_and(|view| view.state == NodeState::Open))
        .unwrap()
}

#[test]
fn what_does_not_apply_is_refused_and_changes_nothing() {
    let mut search = standing();
    let before = search.summary();
    let open = open_node(&mut search);
    let whole = ColumnId(0);
    let continuous = ColumnId::from_index(search.model().columns().len() - 1);
    let column = search.inspect(open).unwrap().path.last().unwrap().column;
    let root = NodeId::ROOT;
    for (act, refusal) in [
        (Act::Branch { node: NodeId(99), column: whole }, Refusal::NoSuchNode(NodeId(99))),
        (Act::Branch { node: NodeId(0), column: whole }, Refusal::NoSuchNode(NodeId(0))),
        (Act::Branch { node: open, column: continuous }, Refusal::NotWhole),
        (Act::Branch { node: open, column: ColumnId(9999) }, Refusal::NotWhole),
        (Act::Branch { node: open, column }, Refusal::Fixed(open)),
        (Act::Branch { node: root, column: whole }, Refusal::NotOpen(root, NodeState::Branched)),
        (Act::Close { node: root }, Refusal::WholeTree),
        (Act::Close { node: NodeId(77) }, Refusal::NoSuchNode(NodeId(77))),
        (
            Act::Cut { family: SubsetFamilyId::from_index(0), subset: BTreeSet::new() },
            Refusal::NotOnDemand,
        ),
    ] {
        assert!(!refusal.to_string().is_empty());
        assert_eq!(answer(&mut search, act), Some(refusal));
    }
    assert_eq!(search.summary(), before);
    search.run(None);
    assert_eq!(wait(&mut search, 1000), Progress::Finished);
    let (events, summary) = run(search.model(), &Settings::default(), u64::MAX);
    assert_eq!((search.take_events(), search.summary()), (events, summary));
    assert_eq!(answer(&mut search, Act::Stop), Some(Refusal::Ended));
}

#[test]
fn a_node_is_branched_on_the_column_that_was_chosen() {
    let mut search = standing();
    let open = open_node(&mut search);
    let fixed: Vec<ColumnId> =
        search.inspect(open).unwrap().path.iter().map(|branch| branch.column).collect();
    let column = (0..56).map(ColumnId).rev().find(|column| !fixed.contains(column)).unwrap();
    search.take_events();
    assert_eq!(answer(&mut search, Act::Branch { node: open, column }), None);
    search.run(Some(1));
    assert_eq!(wait(&mut search, 1000), Progress::Paused);
    let events = search.take_events();
    let Some(Event::Solved { node, branch_column, .. }) =
        events.iter().find(|event| matches!(event, Event::Solved { .. }))
    else {
        panic!("{events:?}")
    };
    assert_eq!((*node, *branch_column), (open, Some(column)));
    let children = events.iter().filter(|event| {
        matches!(event, Event::Created { parent: Some(parent), branching: Some(branch), .. }
            if *parent == open && branch.column == column)
    });
    assert_eq!(children.count(), 2);
}

#[test]
fn the_root_is_branched_on_the_column_that_was_chosen() {
    let model = round_trip(&Random(21).distances(8), Form::Labels, Sense::Minimise);
    let mut search = Search::new(model, Settings::default());
    wait(&mut search, 1000);
    assert_eq!(
        answer(&mut search, Act::Close { node: NodeId(2) }),
        Some(Refusal::NoSuchNode(NodeId(2)))
    );
    let act = Act::Branch { node: NodeId::ROOT, column: ColumnId(55) };
    assert_eq!(answer(&mut search, act), None);
    search.run(Some(0));
    wait(&mut search, 1000);
    assert_eq!(search.inspect(NodeId(3)).unwrap().path[0].column, ColumnId(55));
}

#[test]
fn a_closed_subtree_keeps_its_bound() {
    let mut search = standing();
    let open = open_node(&mut search);
    let bound = search.summary().bound.unwrap();
    let left = search.summary().open;
    assert_eq!(answer(&mut search, Act::Close { node: NodeId(2) }), None);
    assert_eq!(answer(&mut search, Act::Close { node: NodeId(3) }), None);
    let closed = search.take_events();
    let closed = closed
        .iter()
        .filter(|event| matches!(event, Event::Dropped { state: NodeState::Closed, .. }));
    assert_eq!(closed.count(), left as usize);
    assert_eq!(
        answer(&mut search, Act::Close { node: open }),
        Some(Refusal::Ended),
        "with nothing open the search is over"
    );
    let summary = search.summary();
    assert_eq!((summary.status, summary.open, summary.checked), (Status::Limit, 0, false));
    assert_eq!(summary.bound, Some(bound));
    assert!(summary.stopped.unwrap().contains("closed by hand"));
}

#[test]
fn a_cut_must_be_a_member_that_is_not_there() {
    let model = subtours();
    let family = SubsetFamilyId::from_index(0);
    let ground = model.subset_family(family).ground.clone();
    let cut = |size: usize| Act::Cut { family, subset: ground[..size].iter().copied().collect() };
    let mut search = Search::new(Rc::clone(&model), Settings::default());
    wait(&mut search, 1000);
    assert_eq!(answer(&mut search, cut(1)), Some(Refusal::NoMember));
    assert_eq!(answer(&mut search, cut(9)), Some(Refusal::NoMember));
    assert_eq!(answer(&mut search, cut(5)), None);
    assert_eq!(answer(&mut search, cut(5)), Some(Refusal::Present));
    let stranger = Act::Cut { family, subset: BTreeSet::from([LabelId(999), ground[0]]) };
    assert_eq!(answer(&mut search, stranger), Some(Refusal::NoMember));
}

#[test]
fn an_act_inside_a_node_waits_for_its_end_even_in_a_pause() {
    let mut search = standing();
    search.run(None);
    while search.work().doing != "solving a node" {
        search.advance(1);
    }
    search.pause();
    assert_eq!(search.advance(1), Progress::Paused);
    let nodes = search.summary().nodes;
    search.act(Act::Stop);
    assert!(search.has_acts_waiting());
    assert_eq!(wait(&mut search, 1), Progress::Finished);
    let acted = search.take_acted();
    assert_eq!((acted[0].after, &acted[0].refused), (nodes + 1, &None));
    let summary = search.summary();
    assert_eq!((summary.status, summary.nodes), (Status::Limit, nodes + 1));
    assert_eq!(summary.stopped.as_deref(), Some("stopped by hand"));
}
