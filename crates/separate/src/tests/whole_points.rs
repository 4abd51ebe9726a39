//! Every shape of a family over subsets on two hundred small random models: no member that a round
//! finds, whatever point suggested it, cuts off a whole point that meets the model, and membership
//! says of whole points what an enumeration of all members says.

use std::collections::BTreeSet;

use model::{
    ColumnId, LabelId, Model, ModelBuilder, Number, Relation, RoundedUp, Row, RowId, Scope, Sense,
    SubsetCondition, SubsetFamily, SubsetFamilyId, SubsetTerm,
};
use rand_pcg::Pcg64Mcg;

use super::build::{CROSSING, ENTERING, INSIDE, LEAVING, Shape, below, family, round, row, size};
use super::build::{violation, whole};
use crate::{Exactness, Membership, Separator};

const MODELS: u32 = 200;
/// Columns at most: all whole points are listed.
const MOST_COLUMNS: usize = 10;

/// A graph of which some edges lack, and what is built on it.
struct Draw {
    random: Pcg64Mcg,
    nodes: u32,
    pairs: Vec<(u32, u32)>,
    family: SubsetFamily,
    /// Rows that are in beside the family.
    rows: Vec<Row>,
    columns: usize,
    /// Elements of the ground set that no term speaks of: with them the members are too many to be
    /// listed, and say nothing new.
    ghosts: u32,
}

impl Draw {
    fn new(seed: u32, nodes: u32, directed: bool) -> Self {
        let mut random = Pcg64Mcg::new(u128::from(seed) * 2 + 1);
        let all = (0..nodes).flat_map(|i| (0..nodes).map(move |j| (i, j)));
        let mut pairs: Vec<(u32, u32)> =
            all.filter(|(i, j)| if directed { i != j } else { i < j }).collect();
        while pairs.len() > MOST_COLUMNS || (pairs.len() > 4 && below(&mut random, 4) == 0) {
            let place = below(&mut random, u32::try_from(pairs.len()).unwrap());
            pairs.remove(place as usize);
        }
        let ground = (0..nodes).map(LabelId).collect();
        let (columns, rows) = (pairs.len(), Vec::new());
        let family = family(ground, &INSIDE, Vec::new());
        Self { random, nodes, pairs, family, rows, columns, ghosts: 0 }
    }

    /// A family of this shape over the nodes, with a coefficient a pair.
    fn shaped(&mut self, shape: &Shape, conditions: Vec<SubsetCondition>, most: u32) {
        let ground = self.family.ground.clone();
        self.family = family(ground, shape, conditions);
        for (k, (i, j)) in self.pairs.clone().into_iter().enumerate() {
            let coefficient = 1 + i64::from(below(&mut self.random, most));
            self.term(k, coefficient, (shape.scope)(LabelId(i), LabelId(j)));
        }
    }

    fn term(&mut self, column: usize, coefficient: i64, scope: Scope) {
        let column = ColumnId::from_index(column);
        self.family.terms.push(SubsetTerm { column, coefficient: coefficient.into(), scope });
    }

    /// A column more for each node, which stands in the family where its node does.
    fn node_terms(&mut self, coefficient: i64) {
        for node in 0..self.nodes {
            self.term(self.columns, coefficient, Scope::Element(LabelId(node)));
            self.columns += 1;
        }
    }

    /// Rows that have every node left and entered once.
    fn degrees(&mut self) {
        for node in 0..self.nodes {
            for tail in [true, false] {
                let at = |&(_, &(i, j)): &(usize, &(u32, u32))| node == if tail { i } else { j };
                let here = self.pairs.iter().enumerate().filter(at);
                let columns: Vec<_> = here.map(|(k, _)| ColumnId::from_index(k)).collect();
                self.rows.push(row(columns, Some(1), Some(1)));
            }
        }
    }

    fn whole(&mut self, most: u32) -> i64 {
        i64::from(below(&mut self.random, most))
    }

    fn model(&self) -> Model {
        let mut b = ModelBuilder::new("drawn", Sense::Minimise);
        for k in 0..self.nodes + self.ghosts {
            b.label(&format!("v{k}"));
        }
        b.variable("x", true);
        for _ in 0..self.columns {
            b.column(&[], &whole(1)).unwrap();
        }
        b.family("beside", model::FamilyState::In, false);
        for row in &self.rows {
            b.row(&[], row.clone()).unwrap();
        }
        let on_demand = b.family("subsets", model::FamilyState::OnDemand, false);
        let mut family = self.family.clone();
        family.family = on_demand;
        for ghost in self.nodes..self.nodes + self.ghosts {
            family.ground.push(LabelId(ghost));
            family.weights.push(Number::ZERO);
            if let Some(rounded) = &mut family.rounded {
                rounded.weights.push(Number::ZERO);
            }
        }
        b.subset_family(family).unwrap();
        b.build()
    }

    /// All members, but for those that differ by ghosts alone.
    fn members(&self, model: &Model) -> Vec<Row> {
        let whole = model.subset_family(SubsetFamilyId(0));
        let sets = (0..1_usize << self.family.ground.len()).map(|mask| {
            let places = (0..self.family.ground.len()).filter(|place| mask >> place & 1 == 1);
            places.map(|place| self.family.ground[place]).collect::<BTreeSet<LabelId>>()
        });
        sets.filter(|set| whole.admits(set)).map(|set| whole.member(&set)).collect()
    }
}

fn meets(row: &Row, x: &[f64]) -> bool {
    violation(row, x) <= 1e-9
}

/// What was seen on all models.
#[derive(Debug, Default)]
struct Seen {
    points: u32,
    broken: u32,
    cuts: u32,
    exactness: BTreeSet<String>,
}

/// Two hundred models: what the rounds find at random points and at whole points that break a member.
fn verified(draw: impl Fn(u32) -> Draw) -> Seen {
    let mut seen = Seen::default();
    for seed in 0..MODELS {
        let mut drawn = draw(seed);
        let model = drawn.model();
        let members = drawn.members(&model);
        let beside: Vec<Row> =
            (0..model.row_count()).map(|at| model.row(RowId::from_index(at))).collect();
        let points = (0..1_u32 << drawn.columns).map(|mask| {
            (0..drawn.columns).map(|at| f64::from(mask >> at & 1)).collect::<Vec<f64>>()
        });
        let points = points.filter(|x| beside.iter().all(|row| meets(row, x)));
        let (good, bad): (Vec<_>, Vec<_>) =
            points.partition(|x| members.iter().all(|member| meets(member, x)));
        let mut separator = Separator::new(&model, SubsetFamilyId(0));
        seen.exactness.insert(format!("{:?}", separator.exactness()));
        let some = |points: &[Vec<f64>], random: &mut Pcg64Mcg| {
            let count = u32::try_from(points.len()).unwrap();
            let places = (0..count.min(8)).map(|_| below(random, count) as usize);
            places.map(|place| points[place].clone()).collect::<Vec<_>>()
        };
        for x in some(&good, &mut drawn.random) {
            let found = separator.membership(&x);
            assert!(!matches!(found, Membership::Violated(_)), "seed {seed}: {x:?} {found:?}");
        }
        let broken = some(&bad, &mut drawn.random);
        for x in &broken {
            let found = separator.membership(x);
            assert!(!matches!(found, Membership::Satisfied), "seed {seed}: {x:?}");
        }
        let mixed = (0..4).map(|_| {
            let random = &mut drawn.random;
            (0..drawn.columns).map(|_| f64::from(below(random, 9)) / 8.0).collect::<Vec<_>>()
        });
        for x in mixed.collect::<Vec<_>>().iter().chain(&broken) {
            for cut in round(&mut separator, x) {
                assert!(cut.violation > 1e-6);
                let off = good.iter().find(|point| !meets(&cut.row, point));
                assert_eq!(off, None, "seed {seed}: {:?} found at {x:?}", cut.row);
                seen.cuts += 1;
            }
        }
        seen.points += u32::try_from(good.len()).unwrap();
        seen.broken += u32::try_from(bad.len()).unwrap();
    }
    assert!(seen.points > MODELS && seen.broken > MODELS && seen.cuts > MODELS, "{seen:?}");
    seen
}

/// Of a method that is exact whatever the model.
fn exactly(draw: impl Fn(u32) -> Draw) {
    let seen = verified(draw);
    let exact = format!("{:?}", Some(Exactness::Exact));
    assert_eq!(seen.exactness.into_iter().collect::<Vec<_>>(), [exact]);
}

/// Σ leaving (or entering, or crossing) ≥ a constant, S free, or with or without a root.
#[test]
fn cuts() {
    exactly(|seed| {
        let mut draw = Draw::new(seed, 4, seed % 3 != 2);
        let shape = [LEAVING, ENTERING, CROSSING];
        let shape = &shape[(seed % 3) as usize];
        let mut conditions = vec![size(1, 3)];
        match seed / 3 % 3 {
            0 => conditions.push(SubsetCondition::Contains(LabelId(0))),
            1 => conditions.push(SubsetCondition::Avoids(LabelId(0))),
            _ => {}
        }
        draw.shaped(shape, conditions, 2);
        draw
    });
}

/// Inside ≤ |S| − 1 with the degree equations, which make it a cut, and without them.
#[test]
fn subtours() {
    let seen = verified(|seed| {
        let mut draw = Draw::new(seed, 4, true);
        draw.shaped(&INSIDE, vec![size(2, 3)], 1);
        if seed % 2 == 0 {
            draw.degrees();
        }
        draw
    });
    assert!(seen.exactness.contains(&format!("{:?}", Some(Exactness::Exact))), "{seen:?}");
}

/// Inside and node terms: forests, packings and generalised subtours, each a closure.
#[test]
fn closures() {
    exactly(|seed| {
        let mut draw = Draw::new(seed, 4, false);
        let weight = -draw.whole(2);
        let shape = Shape { weight, constant: 1, ..INSIDE };
        draw.shaped(&shape, vec![SubsetCondition::Contains(LabelId(1)), size(1, 4)], 2);
        draw.node_terms(-1);
        draw
    });
}

/// Leaving ≥ Σ d / Q over the customers.
#[test]
fn fractional_capacities() {
    exactly(|seed| {
        let mut draw = Draw::new(seed, 4, true);
        draw.family.ground.remove(0);
        draw.shaped(&Shape { constant: 0, ..LEAVING }, vec![size(1, 3)], 1);
        let load = |_| Number::from_parts((-draw.whole(5)).into(), 4_u32.into());
        draw.family.weights = (0..3).map(load).collect();
        draw
    });
}

/// Leaving ≥ ⌈Σ d / Q⌉ (twice that undirected): listed where there are few members, by cuts and
/// growth where there are many.
#[test]
fn rounded_capacities() {
    let seen = verified(|seed| {
        let directed = seed % 2 == 0;
        let mut draw = Draw::new(seed, 4, directed);
        draw.ghosts = if seed % 4 < 2 { 0 } else { 12 };
        draw.family.ground.remove(0);
        let shape = if directed { LEAVING } else { CROSSING };
        draw.shaped(&Shape { constant: 0, ..shape }, vec![size(1, 16)], 1);
        let load = |_| Number::from_parts((1 + draw.whole(4)).into(), 5_u32.into());
        let weights = (0..3).map(load).collect();
        let factor = Number::from(if directed { -1 } else { -2 });
        draw.family.rounded = Some(RoundedUp { factor, weights, constant: Number::ZERO });
        draw
    });
    let kinds =
        [Exactness::Enumerated, Exactness::Heuristic].map(|kind| format!("{:?}", Some(kind)));
    assert_eq!(seen.exactness, kinds.into_iter().collect());
}

/// |S| odd and crossing ≥ 1 (perfect matchings), and |S| odd and inside ≤ (|S| − 1)/2 (matchings).
#[test]
fn odd_sets() {
    exactly(|seed| {
        let mut draw = Draw::new(seed, 5, false);
        let odd = SubsetCondition::Odd(true);
        if seed % 2 == 0 {
            draw.shaped(&Shape { constant: -1, ..CROSSING }, vec![odd, size(1, 4)], 2);
        } else {
            draw.shaped(&INSIDE, vec![odd, size(3, 5)], 1);
            let half = |n: i32| Number::from(n) / Number::from(2);
            draw.family.weights = vec![half(-1); 5];
            draw.family.constant = half(1);
        }
        draw
    });
}

/// Σ_{t ∈ S} x_t + Σ_{t ∉ S} a_t y_t ≥ d over S ⊆ {1 … l}.
#[test]
fn lot_sizing() {
    exactly(|seed| {
        let mut draw = Draw::new(seed, 5, false);
        let constant = -1 - draw.whole(4);
        let relation = Relation::AtLeast;
        let shape = Shape { scope: Scope::Inside, weight: 0, constant, relation };
        draw.family = family(draw.family.ground.clone(), &shape, Vec::new());
        draw.columns = 10;
        for place in 0..5_u32 {
            let (made, open) = (1 + draw.whole(2), 1 + draw.whole(3));
            draw.term(2 * place as usize, made, Scope::Element(LabelId(place)));
            draw.term(2 * place as usize + 1, open, Scope::Outside(LabelId(place)));
        }
        draw
    });
}

/// Σ_{i ∈ C} z_i ≤ |C| − 1 for C over a weight: exactly, and greedily where the weights are large and
/// the members too many to list.
#[test]
fn covers() {
    let seen = verified(|seed| {
        let mut draw = Draw::new(seed, 6, false);
        draw.columns = 0;
        let large = seed % 4 == 3;
        let unit = if large { 70_000_001 } else { 1 };
        let weights =
            (0..6).map(|k| (LabelId(k), Number::from(unit * (2 + draw.whole(9)) + i64::from(k))));
        let weights = weights.collect();
        let over = Number::from(unit * (8 + draw.whole(12)));
        let conditions = vec![SubsetCondition::WeightOver { weights, over }];
        draw.family = family(draw.family.ground.clone(), &INSIDE, conditions);
        draw.node_terms(1);
        draw.ghosts = if large { 8 } else { 0 };
        draw
    });
    assert!(seen.exactness.len() == 2, "{seen:?}");
}

/// Σ_{i ∈ C} z_i ≤ 1 for cliques C of a graph.
#[test]
fn cliques() {
    exactly(|seed| {
        let mut draw = Draw::new(seed, 7, false);
        let edges = draw.pairs.iter().map(|&(i, j)| (LabelId(i), LabelId(j))).collect();
        draw.columns = 0;
        let shape = Shape { weight: 0, constant: -1, ..INSIDE };
        let conditions = vec![SubsetCondition::Clique(edges), size(1, 7)];
        draw.family = family(draw.family.ground.clone(), &shape, conditions);
        draw.node_terms(1);
        draw
    });
}

/// What no shape recognises and has few members: terms of both signs.
#[test]
fn listed_members() {
    let seen = verified(|seed| {
        let mut draw = Draw::new(seed, 5, false);
        let constant = -draw.whole(2);
        let shape = Shape { weight: 0, constant, ..INSIDE };
        draw.shaped(&shape, vec![size(2, 4)], 1);
        for place in 0..draw.family.terms.len() {
            if draw.whole(3) == 0 {
                draw.family.terms[place].coefficient = Number::from(-1);
            }
        }
        draw
    });
    assert!(seen.exactness.contains(&format!("{:?}", Some(Exactness::Enumerated))), "{seen:?}");
}
