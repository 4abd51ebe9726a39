//! Odd sets, covers, cliques and capacity cuts, against enumeration of all members.

use model::{
    LabelId, Model, Number, Relation, RoundedUp, Scope, SubsetCondition, SubsetFamily,
    SubsetFamilyId, SubsetTerm,
};
use rand_pcg::Pcg64Mcg;

use super::build::{
    CROSSING, Graph, INSIDE, LEAVING, Shape, below, check, enumerated, family, round, size,
};
use super::others::with_family;
use crate::{Exactness, Membership, Separator};

fn half(value: i64) -> Number {
    Number::from_parts(value.into(), 2_u32.into())
}

fn odd() -> SubsetCondition {
    SubsetCondition::Odd(true)
}

/// Points where each node has at least (or at most) one: half-integral cycles, a matching, and
/// noise where `noise` says so.
fn point(graph: &Graph, random: &mut Pcg64Mcg, noise: bool) -> Vec<f64> {
    let mut x = vec![0.0; graph.pairs().len()];
    let order = permutation(graph.nodes, random);
    let mut at = 0;
    while at < order.len() {
        let length = (2 + below(random, 4) as usize).min(order.len() - at);
        let cycle = &order[at..at + length];
        at += length;
        for (k, &i) in cycle.iter().enumerate() {
            let j = cycle[(k + 1) % length];
            let ends = (i.min(j), i.max(j));
            if let Some(place) = graph.pairs().iter().position(|&pair| pair == ends) {
                x[place] += 0.5;
            }
        }
    }
    for value in x.iter_mut().filter(|_| noise) {
        if below(random, 4) == 0 {
            *value = f64::from(below(random, 9)) / 8.0;
        }
    }
    x
}

fn permutation(size: u32, random: &mut Pcg64Mcg) -> Vec<u32> {
    let mut order: Vec<u32> = (0..size).collect();
    for i in (1..size).rev() {
        order.swap(i as usize, below(random, i + 1) as usize);
    }
    order
}

/// Separates at points with and without noise; both outcomes must occur.
fn sweep(graph: &Graph, model: &Model, exactness: Exactness) {
    let mut random = Pcg64Mcg::new(1982);
    let mut separator = Separator::new(model, SubsetFamilyId(0));
    assert_eq!(separator.exactness(), Some(exactness), "{}", separator.description());
    let mut violated = 0;
    for turn in 0..60 {
        let x = point(graph, &mut random, turn % 2 == 1);
        violated += u32::from(check(model, &mut separator, &x));
        let whole: Vec<f64> = x.iter().map(|value| value.round()).collect();
        membership(model, &separator, &whole);
    }
    assert!(violated > 0 && violated < 60, "{violated}");
}

#[allow(clippy::panic, reason = "a failing test")]
/// Whether the point meets all members, which membership must say.
fn membership(model: &Model, separator: &Separator, whole: &[f64]) -> bool {
    let members = enumerated(model.subset_family(SubsetFamilyId(0)), whole);
    let holds = members.iter().all(|(_, violation)| *violation <= 0.0);
    match separator.membership(whole) {
        Membership::Satisfied => assert!(holds),
        Membership::Violated(member) => assert!(!holds && member.violation > 0.0),
        Membership::Unknown => panic!("an exact method knows"),
    }
    holds
}

/// x(δ(S)) ≥ 1 for odd S (perfect matchings; Edmonds 1965).
#[test]
fn odd_cuts_of_perfect_matchings() {
    let shape = Shape { constant: -1, ..CROSSING };
    for nodes in 5..=9 {
        let graph = Graph { nodes, directed: false, degrees: false };
        for least in [1, 3] {
            sweep(
                &graph,
                &graph.model(&shape, vec![odd(), size(least, nodes - 1)]),
                Exactness::Exact,
            );
        }
    }
}

/// x(E(S)) ≤ (|S| − 1)/2 for odd S (matchings; Edmonds 1965).
#[test]
fn odd_sets_of_matchings() {
    for nodes in 5..=9 {
        let graph = Graph { nodes, directed: false, degrees: false };
        let labels = (0..nodes).map(LabelId).collect();
        let mut family = family(labels, &INSIDE, vec![odd(), size(3, nodes)]);
        family.weights = vec![half(-1); nodes as usize];
        family.constant = half(1);
        terms(&mut family, &graph, Scope::Inside);
        sweep(&graph, &with_family(graph.pairs().len(), family), Exactness::Exact);
    }
}

/// Directed cuts, and even sets, which are no cut of a tree.
#[test]
fn other_parities() {
    let mut random = Pcg64Mcg::new(1995);
    for nodes in 4..=7 {
        let graph = Graph { nodes, directed: true, degrees: false };
        for parity in [true, false] {
            let conditions = vec![SubsetCondition::Odd(parity), size(1, nodes - 1)];
            let model = graph.model(&LEAVING, conditions);
            let mut separator = Separator::new(&model, SubsetFamilyId(0));
            assert_eq!(separator.exactness(), Some(Exactness::Exact));
            let mut violated = 0;
            for _ in 0..40 {
                let x: Vec<f64> = graph.point(&mut random).iter().map(|v| v * 1.5).collect();
                violated += u32::from(check(&model, &mut separator, &x));
            }
            assert!(violated > 0);
        }
    }
}

fn terms(family: &mut SubsetFamily, graph: &Graph, scope: fn(LabelId, LabelId) -> Scope) {
    for (k, (i, j)) in graph.pairs().into_iter().enumerate() {
        family.terms.push(SubsetTerm {
            column: model::ColumnId::from_index(k),
            coefficient: Number::ONE,
            scope: scope(LabelId(i), LabelId(j)),
        });
    }
}

/// Σ_{i∈C} z_i ≤ right over sets of 8 with a condition; z in eighths, often 1.
fn by_element(weight: i64, constant: i64, condition: SubsetCondition) -> SubsetFamily {
    let shape = Shape { weight, constant, scope: Scope::Inside, relation: Relation::AtMost };
    let mut family = family((0..8).map(LabelId).collect(), &shape, vec![condition, size(1, 8)]);
    for i in 0..8 {
        family.terms.push(SubsetTerm {
            column: model::ColumnId(i),
            coefficient: Number::ONE,
            scope: Scope::Element(LabelId(i)),
        });
    }
    family
}

fn at_eighths(model: &Model, exactness: Exactness, seed: u32) -> (u32, u32) {
    let mut separator = Separator::new(model, SubsetFamilyId(0));
    assert_eq!(separator.exactness(), Some(exactness), "{}", separator.description());
    let mut random = Pcg64Mcg::new(u128::from(seed));
    let (mut violated, mut met) = (0, 0);
    for _ in 0..120 {
        let zeros = below(&mut random, 6);
        let mut value = || match below(&mut random, 8) {
            k if k < zeros => 0.0,
            k if k % 2 == 0 => 1.0,
            k => f64::from(k) / 8.0,
        };
        let x: Vec<f64> = (0..8).map(|_| value()).collect();
        if exactness == Exactness::Exact {
            violated += u32::from(check(model, &mut separator, &x));
        } else {
            for member in round(&mut separator, &x) {
                assert!(member.violation > 1e-6);
                assert!(model.subset_family(SubsetFamilyId(0)).admits(&member.subset));
            }
        }
        let whole: Vec<f64> = x.iter().map(|v| v.round()).collect();
        if membership(model, &separator, &whole) {
            met += 1;
        } else {
            violated += 1;
        }
    }
    (violated, met)
}

/// Both outcomes occur.
fn both(outcomes: impl Iterator<Item = (u32, u32)>) {
    let (violated, met) = outcomes.fold((0, 0), |(a, b), (c, d)| (a + c, b + d));
    assert!(violated > 40 && met > 40, "{violated} {met}");
}

/// Σ_{i∈C} z_i ≤ |C| − 1 for C over the capacity (Balas 1975), weights of either sign too.
#[test]
fn covers() {
    let mut random = Pcg64Mcg::new(1975);
    both((0..20).map(|seed| {
        let mut weight =
            || Number::from(i64::from(below(&mut random, 20)) - i64::from(seed % 2) * 5);
        let weights: Vec<_> = (0..8).map(|i| (LabelId(i), weight())).collect();
        let over = half(31 + i64::from(seed) * 2);
        let condition = SubsetCondition::WeightOver { weights, over };
        at_eighths(&with_family(8, by_element(-1, 1, condition)), Exactness::Exact, seed)
    }));
}

/// Weights too large for the dynamic programme over the weight: greedy, but whole points are
/// still told exactly. Five elements more that are worth little keep the members unlisted.
#[test]
fn covers_of_large_weights() {
    let weights = (0..8).map(|i| (LabelId(i), Number::from(90_000_001 + 7_000_003 * i64::from(i))));
    let over = Number::from(300_000_000);
    let condition = SubsetCondition::WeightOver { weights: weights.collect(), over };
    let mut family = by_element(-1, 1, condition);
    for i in 8..13 {
        family.ground.push(LabelId(i));
        family.weights.push(-Number::ONE);
    }
    at_eighths_large(family);
}

fn at_eighths_large(family: SubsetFamily) {
    let mut b = model::ModelBuilder::new("large", model::Sense::Minimise);
    (0..13).for_each(|k| {
        b.label(&format!("v{k}"));
    });
    for _ in 0..8 {
        assert!(b.column(&[], &super::build::whole(1)).is_ok());
    }
    b.family("covers", model::FamilyState::OnDemand, false);
    assert!(b.subset_family(family).is_ok());
    let (model, heuristic) = (b.build(), Exactness::Heuristic);
    both((0..4).map(|seed| at_eighths(&model, heuristic, seed)));
}

/// Σ_{i∈C} z_i ≤ 1 for cliques C of a graph (Padberg 1973), and of any other right side.
#[test]
fn cliques() {
    let mut random = Pcg64Mcg::new(1973);
    both((0..20).map(|seed| {
        let pairs = (0..8).flat_map(|i| (0..i).map(move |j| (LabelId(i), LabelId(j))));
        let edges: Vec<_> = pairs.filter(|_| below(&mut random, 10) < 6).collect();
        let condition = SubsetCondition::Clique(edges);
        let family = by_element(0, -1 - i64::from(seed % 2), condition);
        let outcomes = at_eighths(&with_family(8, family.clone()), Exactness::Exact, seed);
        let mut meets = family;
        meets.conditions.push(SubsetCondition::Meets(vec![LabelId(1), LabelId(4)]));
        let model = with_family(8, meets);
        let mut separator = Separator::new(&model, SubsetFamilyId(0));
        for _ in 0..20 {
            let x: Vec<f64> = (0..8).map(|_| f64::from(below(&mut random, 9)) / 8.0).collect();
            check(&model, &mut separator, &x);
        }
        outcomes
    }));
}

/// x(δ(S)) ≥ 2⌈d(S)/Q⌉ over the customers of a round trip with several vehicles.
fn capacity(nodes: u32, directed: bool) -> (Graph, SubsetFamily) {
    let graph = Graph { nodes, directed, degrees: false };
    let shape = if directed { LEAVING } else { CROSSING };
    let ground: Vec<LabelId> = (1..nodes).map(LabelId).collect();
    let mut family = family(ground, &Shape { constant: 0, ..shape }, vec![size(1, nodes)]);
    terms(&mut family, &graph, if directed { Scope::Leaving } else { Scope::Crossing });
    let demand = |i: u32| Number::from_parts((-i64::from(1 + i * 5 % 4)).into(), 5_u32.into());
    // ≥ is ≤ of the negative: −2⌈d/Q⌉ = −(2⌈…⌉) on the left
    family.rounded = Some(RoundedUp {
        factor: Number::from(if directed { -1 } else { -2 }),
        weights: (1..nodes).map(|i| -demand(i)).collect(),
        constant: Number::ZERO,
    });
    (graph, family)
}

fn many_labels(nodes: u32, columns: usize, family: SubsetFamily) -> Model {
    let mut b = model::ModelBuilder::new("capacity", model::Sense::Minimise);
    (0..nodes).for_each(|k| {
        b.label(&format!("v{k}"));
    });
    for _ in 0..columns {
        assert!(b.column(&[], &super::build::whole(2)).is_ok());
    }
    b.family("capacity", model::FamilyState::OnDemand, false);
    assert!(b.subset_family(family).is_ok());
    b.build()
}

/// Routes through the depot, some over the capacity: membership is exact though the method is
/// heuristic, and what is found between them is violated.
#[test]
fn rounded_capacity_cuts() {
    for directed in [false, true] {
        let nodes = 14;
        let (graph, family) = capacity(nodes, directed);
        let model = many_labels(nodes, graph.pairs().len(), family);
        let mut separator = Separator::new(&model, SubsetFamilyId(0));
        assert_eq!(separator.exactness(), Some(Exactness::Heuristic));
        let mut random = Pcg64Mcg::new(1985);
        let (mut met, mut found) = (0, 0);
        let mut last = vec![0.0; graph.pairs().len()];
        for _ in 0..30 {
            let x = routes(&graph, &mut random);
            met += u32::from(membership(&model, &separator, &x));
            let mixed: Vec<f64> = x.iter().zip(&last).map(|(a, b)| (a + b) / 2.0).collect();
            for member in round(&mut separator, &mixed) {
                found += 1;
                assert!(member.violation > 1e-6);
                assert_eq!(
                    member.row,
                    model.subset_family(SubsetFamilyId(0)).member(&member.subset)
                );
            }
            last = x;
        }
        assert!(met > 0 && met < 30 && found > 0, "{met} {found}");
    }
}

/// Tours of random lengths through node 0.
fn routes(graph: &Graph, random: &mut Pcg64Mcg) -> Vec<f64> {
    let pairs = graph.pairs();
    let mut x = vec![0.0; pairs.len()];
    let mut add = |i: u32, j: u32| {
        let ends = if graph.directed { (i, j) } else { (i.min(j), i.max(j)) };
        if let Some(place) = pairs.iter().position(|pair| *pair == ends) {
            x[place] += 1.0;
        }
    };
    let order: Vec<u32> = permutation(graph.nodes - 1, random).iter().map(|i| i + 1).collect();
    let longest = 1 + below(random, 3);
    let mut at = 0;
    while at < order.len() {
        let length = (1 + below(random, longest) as usize).min(order.len() - at);
        let route = &order[at..at + length];
        add(0, route[0]);
        route.windows(2).for_each(|leg| add(leg[0], leg[1]));
        add(route[length - 1], 0);
        at += length;
    }
    x
}
