//! What a look at a node says of its bound: proved as the optimum of its relaxation, from its basis.

use std::rc::Rc;

use model::{Sense, nearest_f64};

use super::support::{Form, Random, finish, random_model, round_trip};
use crate::{NodeId, Search, Settings};

/// Every node with a bound has it exactly, and the root's is that of the root.
#[test]
fn every_node_has_the_exact_optimum_of_its_relaxation() {
    let forms = [(Form::Labels, Sense::Minimise), (Form::Flow, Sense::Maximise)];
    let trips = (0..8).map(|seed| {
        let (form, sense) = forms[seed % 2];
        round_trip(&Random(seed as u64).costs(7, 30), form, sense)
    });
    let mixed = (0..12).map(|seed| random_model(seed, 7, 3));
    let mut looked = 0;
    for model in trips.chain(mixed) {
        let mut search = Search::new(Rc::clone(&model), Settings::default());
        finish(&mut search, 10_000);
        let mut node = NodeId::ROOT;
        while let Some(view) = search.inspect(node) {
            if let (Some(bound), Some(proved)) = (view.bound, &view.checked_bound) {
                let away = (nearest_f64(proved) - bound).abs();
                assert!(view.exact && away <= 1e-9 * (1.0 + bound.abs()), "{bound}, {proved}");
                looked += 1;
            }
            node = NodeId(node.0 + 1);
        }
        let root = search.root().and_then(|root| root.checked_bound.clone());
        assert_eq!(search.inspect(NodeId::ROOT).and_then(|view| view.checked_bound), root);
    }
    assert!(looked > 30, "{looked}");
}
