//! Small models with one family over subsets, and the oracle that enumerates it.

use std::collections::BTreeSet;

use model::{
    ColumnId, ColumnSpec, FamilyId, FamilyState, LabelId, Model, ModelBuilder, Number, Relation,
    Row, Scope, Sense, SubsetCondition, SubsetFamily, SubsetFamilyId, SubsetTerm,
};
use rand_core::Rng;
use rand_pcg::Pcg64Mcg;

use crate::{Progress, Separator, Violated};

pub(crate) type Scopes = fn(LabelId, LabelId) -> Scope;

/// A graph model to be.
pub(crate) struct Graph {
    pub(crate) nodes: u32,
    pub(crate) directed: bool,
    /// Whether the degree equations are rows that are in.
    pub(crate) degrees: bool,
}

/// A family on it.
pub(crate) struct Shape {
    pub(crate) scope: Scopes,
    pub(crate) weight: i64,
    pub(crate) constant: i64,
    pub(crate) relation: Relation,
}

pub(crate) const INSIDE: Shape =
    Shape { scope: Scope::Inside, weight: -1, constant: 1, relation: Relation::AtMost };
pub(crate) const LEAVING: Shape =
    Shape { scope: Scope::Leaving, weight: 0, constant: -1, relation: Relation::AtLeast };
pub(crate) const ENTERING: Shape = Shape {
    scope: |i, j| Scope::Leaving(j, i),
    weight: 0,
    constant: -1,
    relation: Relation::AtLeast,
};
pub(crate) const CROSSING: Shape =
    Shape { scope: Scope::Crossing, weight: 0, constant: -2, relation: Relation::AtLeast };

pub(crate) fn size(at_least: u32, at_most: u32) -> SubsetCondition {
    SubsetCondition::Size { at_least, at_most }
}

pub(crate) fn whole(upper: i64) -> ColumnSpec {
    ColumnSpec {
        lower: Some(Number::ZERO),
        upper: Some(Number::from(upper)),
        cost: Number::from(1),
        integer: true,
    }
}

pub(crate) fn row(columns: Vec<ColumnId>, lower: Option<i64>, upper: Option<i64>) -> Row {
    let entries = columns.into_iter().map(|column| (column, Number::from(1))).collect();
    Row { entries, lower: lower.map(Number::from), upper: upper.map(Number::from) }
}

pub(crate) fn family(
    ground: Vec<LabelId>,
    shape: &Shape,
    conditions: Vec<SubsetCondition>,
) -> SubsetFamily {
    SubsetFamily {
        family: FamilyId(0),
        tuple: Vec::new(),
        weights: vec![Number::from(shape.weight); ground.len()],
        ground,
        conditions,
        terms: Vec::new(),
        constant: Number::from(shape.constant),
        rounded: None,
        relation: shape.relation,
    }
}

impl Graph {
    /// The pairs that have a column, in the order of their columns.
    pub(crate) fn pairs(&self) -> Vec<(u32, u32)> {
        let all = (0..self.nodes).flat_map(|i| (0..self.nodes).map(move |j| (i, j)));
        all.filter(|(i, j)| if self.directed { i != j } else { i < j }).collect()
    }

    /// The model, with degree rows where asked for, and the family over the nodes.
    pub(crate) fn model(&self, shape: &Shape, conditions: Vec<SubsetCondition>) -> Model {
        let mut b = ModelBuilder::new("test", Sense::Minimise);
        let labels: Vec<LabelId> = (0..self.nodes).map(|i| b.label(&format!("v{i}"))).collect();
        b.variable("x", self.directed);
        for (i, j) in self.pairs() {
            b.column(&[labels[i as usize], labels[j as usize]], &whole(1)).unwrap();
        }
        if self.degrees {
            self.degree_rows(&mut b);
        }
        b.family("subsets", FamilyState::OnDemand, false);
        let mut family = family(labels.clone(), shape, conditions);
        for (k, (i, j)) in self.pairs().into_iter().enumerate() {
            family.terms.push(SubsetTerm {
                column: ColumnId::from_index(k),
                coefficient: Number::from(1),
                scope: (shape.scope)(labels[i as usize], labels[j as usize]),
            });
        }
        b.subset_family(family).unwrap();
        b.build()
    }

    fn degree_rows(&self, b: &mut ModelBuilder) {
        let select = |wanted: &dyn Fn((u32, u32)) -> bool| {
            let pairs = self.pairs().into_iter().enumerate().filter(|(_, pair)| wanted(*pair));
            pairs.map(|(k, _)| ColumnId::from_index(k)).collect::<Vec<_>>()
        };
        b.family("degree", FamilyState::In, false);
        for v in 0..self.nodes {
            if self.directed {
                b.row(&[], row(select(&|(i, _)| i == v), Some(1), Some(1))).unwrap();
                b.row(&[], row(select(&|(_, j)| j == v), Some(1), Some(1))).unwrap();
            } else {
                b.row(&[], row(select(&|(i, j)| i == v || j == v), Some(2), Some(2))).unwrap();
            }
        }
    }

    /// A random point: a mix of permutations where the degree equations are to hold, else
    /// eighths, most of them 0.
    pub(crate) fn point(&self, random: &mut Pcg64Mcg) -> Vec<f64> {
        if !self.degrees {
            let value = |random: &mut Pcg64Mcg| {
                if below(random, 3) > 0 { 0.0 } else { f64::from(below(random, 9)) / 8.0 }
            };
            return self.pairs().iter().map(|_| value(random)).collect();
        }
        let mut x = vec![0.0; self.pairs().len()];
        let parts = 1 + below(random, 3);
        for part in 0..parts {
            let next = derangement(self.nodes, random);
            let weight =
                if parts == 3 { [0.5, 0.25, 0.25][part as usize] } else { 1.0 / f64::from(parts) };
            for (k, (i, j)) in self.pairs().into_iter().enumerate() {
                let there = next[i as usize] == j;
                let back = !self.directed && next[j as usize] == i;
                x[k] += weight * f64::from(u8::from(there) + u8::from(back));
            }
        }
        x
    }
}

pub(crate) fn below(random: &mut Pcg64Mcg, limit: u32) -> u32 {
    random.next_u32() % limit
}

/// A permutation without fixed points, by rejection.
fn derangement(size: u32, random: &mut Pcg64Mcg) -> Vec<u32> {
    loop {
        let mut next: Vec<u32> = (0..size).collect();
        for i in (1..size).rev() {
            next.swap(i as usize, below(random, i + 1) as usize);
        }
        if next.iter().zip(0..).all(|(a, b)| *a != b) {
            return next;
        }
    }
}

/// By how much a row is violated.
pub(crate) fn violation(row: &Row, x: &[f64]) -> f64 {
    let activity = row.activity(x);
    let under = row.lower.as_ref().map_or(f64::NEG_INFINITY, |l| model::nearest_f64(l) - activity);
    let over = row.upper.as_ref().map_or(f64::NEG_INFINITY, |u| activity - model::nearest_f64(u));
    if under > over { under } else { over }
}

/// All admitted subsets with the violation of their members.
pub(crate) fn enumerated(family: &SubsetFamily, x: &[f64]) -> Vec<(BTreeSet<LabelId>, f64)> {
    let sets = (0..1_usize << family.ground.len()).map(|mask| {
        let places = (0..family.ground.len()).filter(|place| mask >> place & 1 == 1);
        places.map(|place| family.ground[place]).collect::<BTreeSet<LabelId>>()
    });
    let admitted = sets.filter(|set| family.admits(set));
    admitted.map(|set| (violation(&family.member(&set), x), set)).map(|(v, s)| (s, v)).collect()
}

/// A whole round, in one slice and in the smallest slices; both must agree.
pub(crate) fn round(separator: &mut Separator, x: &[f64]) -> Vec<Violated> {
    separator.start(x);
    while separator.advance(u64::MAX) == Progress::Working {}
    let at_once = separator.take();
    separator.start(x);
    while separator.advance(1) == Progress::Working {}
    assert_eq!(at_once, separator.take());
    at_once
}

/// Separates at `x` and holds the outcome against enumeration; whether a member is violated.
pub(crate) fn check(model: &Model, separator: &mut Separator, x: &[f64]) -> bool {
    let family = model.subset_family(SubsetFamilyId(0));
    let worst = enumerated(family, x).into_iter().map(|(_, violation)| violation);
    let worst = worst.fold(f64::NEG_INFINITY, |a, b| if b > a { b } else { a });
    let found = round(separator, x);
    assert_eq!(!found.is_empty(), worst > 1e-6, "worst {worst}, x {x:?}");
    assert!(found.len() <= 100);
    for member in &found {
        assert!(family.admits(&member.subset));
        assert_eq!(member.row, family.member(&member.subset));
        assert_eq!(member.violation, violation(&member.row, x));
        assert!(member.violation > 1e-6);
    }
    for pair in found.windows(2) {
        let key = |member: &Violated| (-member.violation, member.subset.clone());
        assert!(key(&pair[0]) < key(&pair[1]));
    }
    !found.is_empty()
}
