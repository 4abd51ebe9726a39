//! The rule by hand: nothing is branched on before a person says so, nothing is lost by it, and
//! what was said is replayed to the same events.

use std::rc::Rc;

use model::{Model, Sense};
use proptest::prelude::*;

use super::support::{Form, Random, enumerated, random_model, round_trip};
use crate::{
    Act, Acted, Branching, Event, NodeId, NodeState, Progress, Search, Selection, Settings, Status,
};

fn by_hand(selection: Selection) -> Settings {
    Settings { branching: Branching::ByHand, selection, ..Settings::default() }
}

/// Works until the search stands still.
fn wait(search: &mut Search, ticks: u64) -> Progress {
    loop {
        let progress = search.advance(ticks);
        if progress != Progress::Working {
            return progress;
        }
    }
}

/// The nodes that wait for a column.
fn held(search: &mut Search) -> Vec<NodeId> {
    let nodes = (1..).map(NodeId);
    let views = nodes.map_while(|node| search.inspect(node));
    let open = views.filter(|view| view.state == NodeState::Open && !view.ahead);
    open.map(|view| view.node).collect()
}

/// A search in which a random hand branches every node, some before they are solved.
fn steered(model: &Rc<Model>, settings: &Settings, seed: u64) -> (Search, Vec<Acted>) {
    let mut random = Random(seed);
    let mut search = Search::new(Rc::clone(model), settings.clone());
    let mut acted = Vec::new();
    for _ in 0..10_000 {
        let progress = wait(&mut search, 200);
        acted.extend(search.take_acted());
        if progress == Progress::Finished {
            return (search, acted);
        }
        let step = (random.below(3) == 0).then(|| u32::try_from(random.below(3)).unwrap());
        search.run(step);
        if wait(&mut search, 200) == Progress::Finished {
            acted.extend(search.take_acted());
            return (search, acted);
        }
        let waiting = held(&mut search);
        assert!(step.is_some() || (search.waits_for_a_branching() && !waiting.is_empty()));
        let Some(&node) = waiting.first() else { continue };
        let columns = search.inspect(node).unwrap().branchable;
        let column = columns[usize::try_from(random.below(columns.len() as i64)).unwrap()];
        search.act(Act::Branch { node, column });
    }
    panic!("the search does not end");
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 60, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn every_branching_is_a_persons_and_nothing_is_lost(seed in any::<u64>(), hand in any::<u64>()) {
        let model = random_model(seed, 7, 2);
        for selection in [Selection::BestBound, Selection::DepthFirst] {
            let settings = by_hand(selection);
            let (mut search, acted) = steered(&model, &settings, hand);
            let summary = search.summary();
            match enumerated(&model) {
                Some(value) => {
                    prop_assert_eq!(summary.status, Status::Optimal);
                    prop_assert!((summary.incumbent.unwrap() - value).abs() < 1e-6);
                }
                None => prop_assert_eq!(summary.status, Status::Infeasible),
            }
            let events = search.take_events();
            let made = events.iter().filter(|event| matches!(event, Event::Created { .. }));
            prop_assert_eq!(made.count(), 1 + 2 * acted.len());
            for ticks in [9, u64::MAX] {
                let mut again = Search::new(Rc::clone(&model), settings.clone());
                for one in &acted {
                    again.replay(one.after, one.act.clone());
                }
                prop_assert_eq!(wait(&mut again, ticks), Progress::RootSolved);
                again.run(None);
                prop_assert_eq!(wait(&mut again, ticks), Progress::Finished);
                prop_assert_eq!(&again.take_events(), &events);
                prop_assert_eq!(&again.summary(), &summary);
            }
        }
    }
}

#[test]
fn the_search_stands_still_where_it_needs_a_person() {
    let model = round_trip(&Random(21).distances(8), Form::Labels, Sense::Minimise);
    let mut search = Search::new(model, by_hand(Selection::BestBound));
    assert_eq!(wait(&mut search, 1000), Progress::RootSolved);
    let bound = search.summary().bound;
    for _ in 0..2 {
        search.run(None);
        assert_eq!(wait(&mut search, 1000), Progress::Paused);
        assert!(search.waits_for_a_branching());
        let summary = search.summary();
        assert_eq!((summary.nodes, summary.open, summary.bound), (1, 1, bound));
    }
    // A stop waits until it can be told from one before the root was branched on.
    search.act(Act::Stop);
    assert_eq!(wait(&mut search, 1000), Progress::Paused);
    let column = search.inspect(NodeId::ROOT).unwrap().branchable[3];
    search.act(Act::Branch { node: NodeId::ROOT, column });
    assert_eq!(wait(&mut search, 1000), Progress::Finished);
    assert_eq!(search.inspect(NodeId(2)).unwrap().path[0].column, column);
    assert_eq!(search.inspect(NodeId::ROOT).unwrap().state, NodeState::Branched);
    assert_eq!(search.summary().stopped.as_deref(), Some("stopped by hand"));
}
