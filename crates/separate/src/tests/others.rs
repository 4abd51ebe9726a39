//! Shapes with node terms and weights, listed families, and written rows on demand.

use model::{
    ColumnId, FamilyId, FamilyState, LabelId, Model, ModelBuilder, Number, Relation, Scope, Sense,
    SubsetCondition, SubsetFamily, SubsetFamilyId, SubsetTerm,
};
use rand_pcg::Pcg64Mcg;

use super::build::{Graph, INSIDE, LEAVING, Shape, below, check, family, row, size, whole};
use crate::{Exactness, Membership, Progress, RowSeparator, Separator};

/// A model with `columns` whole columns in [0, 1] and no rows but one family over subsets.
pub(crate) fn with_family(columns: usize, family: SubsetFamily) -> Model {
    let mut b = ModelBuilder::new("test", Sense::Minimise);
    for k in 0..8 {
        b.label(&format!("v{k}"));
    }
    for _ in 0..columns {
        b.column(&[], &whole(1)).unwrap();
    }
    b.family("subsets", FamilyState::OnDemand, false);
    b.subset_family(family).unwrap();
    b.build()
}

fn term(column: u32, coefficient: i64, scope: Scope) -> SubsetTerm {
    SubsetTerm { column: ColumnId(column), coefficient: Number::from(coefficient), scope }
}

pub(crate) fn labels(count: u32) -> Vec<LabelId> {
    (0..count).map(LabelId).collect()
}

/// Random points with values in eighths; in half of them the columns from `ones` on are 1.
fn sweep(model: &Model, exactness: Exactness, ones: u32) {
    let mut separator = Separator::new(model, SubsetFamilyId(0));
    assert_eq!(separator.exactness(), Some(exactness), "{}", separator.description());
    let mut random = Pcg64Mcg::new(3);
    let mut violated = 0;
    for turn in 0..60 {
        let zeros = below(&mut random, 8);
        let value = |column| {
            let eighths = below(&mut random, 9);
            if turn % 2 == 0 && column >= ones as usize {
                1.0
            } else if below(&mut random, 8) < zeros {
                0.0
            } else {
                f64::from(eighths) / 8.0
            }
        };
        let x: Vec<f64> = (0..model.columns().len()).map(value).collect();
        violated += u32::from(check(model, &mut separator, &x));
    }
    assert!(violated > 0 && violated < 60, "{violated}");
}

/// x(E(S)) ≤ y(S) − y_k for every k in S (generalised subtours): y_k stands always.
#[test]
fn inside_with_node_terms() {
    for nodes in 4..=7 {
        let graph = Graph { nodes, directed: false, degrees: false };
        let k = LabelId(1);
        let mut family = family(
            labels(nodes),
            &Shape { weight: 0, constant: 0, ..INSIDE },
            vec![size(2, nodes), SubsetCondition::Contains(k)],
        );
        let edges = graph.pairs();
        let first = u32::try_from(edges.len()).unwrap();
        for (e, (i, j)) in (0..).zip(edges) {
            family.terms.push(term(e, 1, Scope::Inside(LabelId(i), LabelId(j))));
        }
        for v in 0..nodes {
            family.terms.push(term(first + v, -1, Scope::Element(LabelId(v))));
        }
        family.terms.push(term(first + 1, 1, Scope::Always));
        sweep(&with_family((first + nodes) as usize, family), Exactness::Exact, first);
    }
}

/// x(δ⁺(S)) ≥ Σ_{i∈S} d_i / 3, S avoiding the depot, which is not in the ground set.
#[test]
fn fractional_capacity_cuts() {
    for nodes in 4..=7 {
        let graph = Graph { nodes, directed: true, degrees: false };
        let ground = labels(nodes).split_off(1);
        let shape = Shape { constant: 0, ..LEAVING };
        let mut family = family(ground, &shape, vec![size(1, nodes)]);
        family.weights = (1..nodes)
            .map(|d| Number::from_parts((-i64::from(d % 3)).into(), 3_u32.into()))
            .collect();
        for (e, (i, j)) in (0..).zip(graph.pairs()) {
            family.terms.push(term(e, 1, Scope::Leaving(LabelId(i), LabelId(j))));
        }
        sweep(&with_family(graph.pairs().len(), family), Exactness::Exact, 99);
    }
}

/// Σ_{t∈S} x_t + Σ_{t∉S} 3 y_t ≥ 4 over S ⊆ {1..l}: each element by itself, of any sign.
#[test]
fn terms_that_split_by_element() {
    let shape =
        Shape { scope: Scope::Inside, weight: 0, constant: -2, relation: Relation::AtLeast };
    let mut family = family(labels(6), &shape, vec![]);
    for t in 0..6 {
        family.terms.push(term(t, 2, Scope::Element(LabelId(t))));
        family.terms.push(term(6 + t, 3 - 4 * i64::from(t % 2), Scope::Outside(LabelId(t))));
    }
    sweep(&with_family(12, family), Exactness::Exact, 99);
}

/// Covers and cliques over pairs have no cut; few enough members are listed.
#[test]
fn other_shapes_are_listed() {
    let graph = Graph { nodes: 6, directed: false, degrees: false };
    let edges: Vec<(LabelId, LabelId)> =
        graph.pairs().into_iter().map(|(i, j)| (LabelId(i), LabelId(j))).collect();
    let weights = (0..6).map(|i| (LabelId(i), Number::from(i + 1))).collect();
    let conditions = [
        vec![SubsetCondition::WeightOver { weights, over: Number::from(9) }, size(1, 6)],
        vec![SubsetCondition::Clique(edges[..9].to_vec()), size(2, 6)],
        vec![
            size(4, 5),
            SubsetCondition::Meets(vec![LabelId(0)]),
            SubsetCondition::Meets(vec![LabelId(2)]),
        ],
    ];
    for conditions in conditions {
        let model = graph.model(&INSIDE, conditions);
        sweep(&model, Exactness::Enumerated, 99);
    }
}

/// Coefficients of the wrong sign: x(E(S)) ≥ |S| − 2 is no cut.
#[test]
fn wrong_signs_are_not_taken_for_a_cut() {
    let graph = Graph { nodes: 5, directed: false, degrees: false };
    let shape = Shape { constant: 2, relation: Relation::AtLeast, ..INSIDE };
    sweep(&graph.model(&shape, vec![size(2, 3)]), Exactness::Enumerated, 9);
    let large = Graph { nodes: 14, directed: false, degrees: false };
    let model = large.model(&shape, vec![size(2, 14)]);
    let mut separator = Separator::new(&model, SubsetFamilyId(0));
    assert_eq!(separator.exactness(), None);
    assert!(separator.description().starts_with("no method"));
    let x = vec![0.0; model.columns().len()];
    separator.start(&x);
    assert_eq!(separator.advance(1), Progress::Finished);
    assert_eq!((separator.take(), separator.membership(&x)), (vec![], Membership::Unknown));
}

/// Two parities at once are searched for one cut after another: what is found is violated.
#[test]
fn heuristic_members_are_violated() {
    let graph = Graph { nodes: 14, directed: false, degrees: false };
    let odd = || SubsetCondition::Odd(true);
    let model = graph.model(&INSIDE, vec![odd(), odd(), size(3, 14)]);
    let mut separator = Separator::new(&model, SubsetFamilyId(0));
    assert_eq!(separator.exactness(), Some(Exactness::Heuristic));
    let mut x = vec![0.0; model.columns().len()];
    for (k, pair) in graph.pairs().into_iter().enumerate() {
        x[k] = if matches!(pair, (3, 5) | (5, 9) | (3, 9)) { 1.0 } else { 0.0 };
    }
    assert!(check(&model, &mut separator, &x));
    assert!(matches!(separator.membership(&x), Membership::Violated(_)));
}

#[test]
fn written_rows_on_demand() {
    let mut b = ModelBuilder::new("rows", Sense::Minimise);
    let columns: Vec<ColumnId> = (0..4).map(|_| b.column(&[], &whole(9)).unwrap()).collect();
    b.family("first", FamilyState::In, false);
    b.row(&[], row(columns.clone(), Some(100), None)).unwrap();
    b.family("pairs", FamilyState::OnDemand, false);
    for pair in [[0, 1], [1, 2], [2, 3], [0, 3]] {
        let pair = pair.iter().map(|&k: &usize| columns[k]).collect();
        b.row(&[], row(pair, Some(1), Some(3))).unwrap();
    }
    let model = b.build();
    let mut separator = RowSeparator::new(&model, FamilyId(1));
    let mut rounds = Vec::new();
    for ticks in [1, u64::MAX] {
        separator.start(&[0.0, 0.25, 4.0, 1.0]);
        let mut slices = 1;
        while separator.advance(&model, ticks) == Progress::Working {
            slices += 1;
        }
        rounds.push((slices, separator.take()));
    }
    let found: Vec<(u32, f64)> = rounds[0].1.iter().map(|r| (r.row.0, r.violation)).collect();
    assert_eq!(found, [(3, 2.0), (2, 1.25), (1, 0.75)]);
    assert_eq!(rounds[0].1, rounds[1].1);
    assert_eq!((rounds[0].0, rounds[1].0), (4, 1));
}
