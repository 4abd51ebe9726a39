//! Jeroslow's instance: a tree whose size is known.
//!
//! min y, 2(x₁ + … + xₙ) + y = n, n odd, all binary (Jeroslow 1974, Mathematical Programming 6).
//! Every LP-based branch and bound makes 2·C(n+1, (n+1)/2) − 1 nodes, whatever the rules: a leaf
//! is reached exactly when (n+1)/2 columns stand at the same value.

use std::rc::Rc;

use model::{ColumnId, Model, ModelBuilder, Sense};

use super::support::{Random, row, rules, run, spec};
use crate::{Act, Branching, NodeId, Progress, Search, Selection, Settings, Status};

fn instance(n: i64) -> Rc<Model> {
    let mut builder = ModelBuilder::new("Jeroslow", Sense::Minimise);
    let mut entries: Vec<(ColumnId, i64)> =
        (0..n).map(|_| (builder.column(&[], &spec((0, 1), 0, true)).unwrap(), 2)).collect();
    entries.push((builder.column(&[], &spec((0, 1), 1, true)).unwrap(), 1));
    builder.row(&[], row(&entries, Some(n), Some(n))).unwrap();
    Rc::new(builder.build())
}

/// `C(n, n/2)`.
fn binomial(n: i64) -> i64 {
    (1..=n / 2).fold(1, |product, k| product * (n / 2 + k) / k)
}

#[test]
fn the_tree_has_the_known_size() {
    for n in [3, 5, 7, 9, 11, 13] {
        let nodes = u32::try_from(2 * binomial(n + 1) - 1).unwrap();
        for settings in rules() {
            let (events, summary) = run(&instance(n), &settings, u64::MAX);
            assert_eq!(summary.nodes, nodes, "n = {n}, {settings:?}");
            assert_eq!(
                (summary.status, summary.incumbent, summary.checked),
                (Status::Optimal, Some(1.0), true)
            );
            let created =
                events.iter().filter(|e| matches!(e, crate::Event::Created { .. })).count();
            assert_eq!(created, nodes as usize);
            assert!(events.iter().all(
                |e| !matches!(e, crate::Event::Dropped { node, .. } if *node == NodeId::ROOT)
            ));
        }
    }
}

/// Branches every node that waits on some column of x that is not fixed there; to the end.
fn by_hand(n: i64, selection: Selection) -> Search {
    let settings = Settings { branching: Branching::ByHand, selection, ..Settings::default() };
    let mut search = Search::new(instance(n), settings);
    let mut random = Random(n.unsigned_abs());
    loop {
        match search.advance(u64::MAX) {
            Progress::Finished => return search,
            Progress::Working => {}
            Progress::RootSolved | Progress::Paused => {
                let held: Vec<NodeId> =
                    search.open.iter().filter(|&node| search.holding.holds(node)).collect();
                for node in held {
                    let mut columns = search.branchable(node);
                    columns.retain(|column| i64::from(column.0) < n);
                    let place = random.below(i64::try_from(columns.len()).unwrap());
                    let column = columns[usize::try_from(place).unwrap()];
                    search.act(Act::Branch { node, column });
                }
                search.run(None);
            }
        }
    }
}

/// The rule by hand: whatever columns a person chooses, the tree has the known size.
#[test]
fn the_tree_has_the_known_size_by_hand() {
    for n in [3, 5, 7, 9, 11, 13] {
        let nodes = u32::try_from(2 * binomial(n + 1) - 1).unwrap();
        for selection in [Selection::BestBound, Selection::DepthFirst, Selection::BestEstimate] {
            let mut search = by_hand(n, selection);
            let summary = search.summary();
            assert_eq!(summary.nodes, nodes, "n = {n}, {selection:?}");
            assert_eq!(
                (summary.status, summary.incumbent, summary.checked),
                (Status::Optimal, Some(1.0), true)
            );
            let acted = search.take_acted();
            assert_eq!(acted.len(), nodes as usize / 2, "one branching a node with children");
            assert!(acted.iter().all(|one| one.refused.is_none()));
        }
    }
}
