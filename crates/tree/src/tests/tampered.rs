//! Every field of every leaf's record changed in every way that matters: the log is refused, or not
//! proved, with the leaf's number; what is still accepted is shown to be true by other means. Small
//! searches by every rule of branching and selection, with cuts, tightened bounds, heuristics,
//! families on demand, in both directions of the objective.

use std::collections::BTreeMap;
use std::rc::Rc;

use lp::{Limits, Outcome};
use model::{ColumnId, Model, Number};
use separate::general::GeneralCut;

use super::audit::{audited, holds_nothing, models, names, searched};
use super::support::{random_model, rules, working};
use crate::relaxation::{Relaxation, direction};
use crate::{
    Branch, Branching, Claim, Classes, Cuts, Derivation, Judgement, NodeId, NodeState, Selection,
    Settings, Side, Testimony,
};

/// A change of one leaf.
struct Change {
    what: String,
    node: NodeId,
    told: Testimony,
    /// Whether the log may still be true.
    may_hold: bool,
}

/// Settings under which a search is small and differs from the others.
fn settings() -> Vec<Settings> {
    let cuts = Cuts { classes: Classes::all(), every: 2, rounds: 1 };
    let plain = Settings::default();
    let mut all: Vec<Settings> = rules().into_iter().step_by(4).collect();
    all.extend(working().into_iter().step_by(3));
    all.push(Settings { cuts, ..plain.clone() });
    all.push(Settings { heuristics: Settings::production().heuristics, ..plain.clone() });
    all.push(Settings {
        cuts,
        heuristics: Settings::production().heuristics,
        branching: Branching::Reliability,
        selection: Selection::BestEstimate,
        ..working().remove(4)
    });
    all
}

fn searches() -> Vec<(String, Rc<Model>, Testimony)> {
    let more = [("mixed again", random_model(8, 9, 2)), ("whole again", random_model(55, 11, 0))];
    let models: Vec<_> = models().into_iter().chain(more).collect();
    let mut all = Vec::new();
    for (place, settings) in settings().iter().enumerate() {
        let (name, model) = &models[place % models.len()];
        let (_, told) = searched(model, settings);
        all.push((format!("{name} by {settings:?}"), Rc::clone(model), told));
    }
    all
}

/// What a bound may be changed to.
fn bounds(bound: f64, worse: f64) -> Vec<f64> {
    let size = 1.0 + bound.abs();
    let steps = [1e-5, 0.1, 1e9].map(|step| bound + worse * step * size);
    let back = [0.6, 1e9].map(|step| bound - worse * step * size);
    let none = [f64::NAN, f64::INFINITY, f64::NEG_INFINITY];
    steps.into_iter().chain(back).chain(none).collect()
}

/// Every change of one leaf's record.
fn changes(model: &Model, told: &Testimony, place: usize) -> Vec<Change> {
    let claim = &told.claims[place];
    let node = NodeId(u32::try_from(place + 1).unwrap());
    let mut all = Vec::new();
    let mut add = |what: String, may_hold: bool, change: &dyn Fn(&mut Claim)| {
        let mut other = told.clone();
        change(&mut other.claims[place]);
        let what = format!("{what} at {node:?} ({:?}, {:?})", claim.state, claim.bound);
        all.push(Change { what, node, told: other, may_hold });
    };
    for bound in claim.bound.into_iter().flat_map(|bound| bounds(bound, direction(model))) {
        add(format!("bound {bound}"), true, &|claim| claim.bound = Some(bound));
    }
    for state in [NodeState::Open, NodeState::Branched, NodeState::Unbounded] {
        add(format!("{state:?}"), false, &|claim| claim.state = state);
    }
    for state in [NodeState::Infeasible, NodeState::Integer, NodeState::Pruned] {
        if state != claim.state {
            add(format!("{state:?}"), true, &|claim| claim.state = state);
        }
    }
    if let Some(branch) = claim.branching {
        for other in branches(model, branch) {
            add(format!("{other:?}"), false, &|claim| claim.branching = Some(other));
        }
        add("no branching".to_owned(), false, &|claim| claim.branching = None);
        for parent in (0..told.claims.len() as u32).map(|place| NodeId(place + 1)) {
            if Some(parent) != claim.parent && parent < node {
                add(format!("parent {parent:?}"), false, &|claim| claim.parent = Some(parent));
            }
        }
    }
    for (after, bound) in tightenings(model, told, node) {
        let whole = model.columns()[bound.column.index()].integer && bound.bound.fract() == 0.0;
        add(format!("tightened {bound:?} {after}"), whole, &|claim| {
            (if after { &mut claim.after } else { &mut claim.before }).push(bound);
        });
    }
    all
}

/// Other branchings in the place of one.
fn branches(model: &Model, branch: Branch) -> Vec<Branch> {
    let steps = [-1.0, 1.0, 0.5, -0.5, f64::NAN, f64::INFINITY, f64::NEG_INFINITY];
    let side = if branch.side == Side::AtMost { Side::AtLeast } else { Side::AtMost };
    let mut all: Vec<_> =
        steps.iter().map(|step| Branch { bound: branch.bound + step, ..branch }).collect();
    all.push(Branch { side, ..branch });
    let columns = (0..model.columns().len()).map(ColumnId::from_index);
    all.extend(columns.filter(|c| *c != branch.column).map(|column| Branch { column, ..branch }));
    all
}

/// Bounds said to be tightened at the leaf: of a column that need not be whole, of a whole one to half,
/// and of some whole ones past the plan, which nothing better forbids.
fn tightenings(model: &Model, told: &Testimony, node: NodeId) -> Vec<(bool, Branch)> {
    let turn = node.0 as usize;
    let columns = model.columns().iter().enumerate();
    let (whole, free): (Vec<_>, Vec<_>) = columns.partition(|(_, column)| column.integer);
    let half = Branch { column: ColumnId(0), side: Side::AtMost, bound: 0.5 };
    let mut all = vec![(turn.is_multiple_of(2), half)];
    for columns in [whole, free] {
        let Some((place, _)) = columns.get(turn % columns.len().max(1)) else { continue };
        let column = ColumnId::from_index(*place);
        let value = told.plan[*place];
        all.push((false, Branch { column, side: Side::AtMost, bound: value.floor() - 1.0 }));
        all.push((true, Branch { column, side: Side::AtLeast, bound: value.ceil() + 1.0 }));
    }
    all
}

/// Whether what a log says of a leaf is true: its bound by a relaxation with all rows in hand, that
/// it is empty by a search of its own.
fn is_true(model: &Rc<Model>, told: &Testimony, node: NodeId) -> bool {
    let claim = &told.claims[node.0 as usize - 1];
    if claim.state == NodeState::Infeasible {
        return holds_nothing(model, told, &told.path(node));
    }
    let Some(said) = claim.bound else { return true };
    let mut relaxation = Relaxation::new(model).unwrap();
    let rows: Vec<_> = told.rows.iter().map(|row| row.addition(model).unwrap()).collect();
    relaxation.add(rows).unwrap();
    let cuts: Vec<_> = told.cuts.iter().cloned().enumerate().collect();
    relaxation.add_cuts(&cuts).unwrap();
    relaxation.enter(&told.path(node));
    relaxation.simplex.start(Limits::default());
    while relaxation.simplex.advance(u64::MAX) == lp::Progress::Working {}
    let sign = direction(model);
    let (_, best) = told.incumbent.unwrap();
    let slack = 1e-6 * (1.0 + best.abs());
    match relaxation.simplex.outcome() {
        // no bound is too high for what is empty
        Some(Outcome::Infeasible(_)) => true,
        Some(Outcome::Optimal(solution)) => {
            let bound = relaxation.internal(solution.objective);
            // what closed the root may have come after its bound
            let closes = node == NodeId::ROOT || sign * said > sign * best - 1.0 - slack;
            sign * said <= bound + slack && closes
        }
        _ => false,
    }
}

#[test]
fn every_field_of_every_leaf_is_held_to() {
    let mut kinds: BTreeMap<String, (u32, u32)> = BTreeMap::new();
    let mut seen = [0_u32; 2];
    for (name, model, told) in searches() {
        assert_eq!(audited(&model, told.clone(), u64::MAX).judgement, Judgement::Proved, "{name}");
        for place in (0..told.claims.len()).filter(|&place| told.claims[place].children == 0) {
            for change in changes(&model, &told, place) {
                let result = audited(&model, change.told.clone(), u64::MAX);
                let what = format!("{name}: {}: {result:?}", change.what);
                let proved = result.judgement == Judgement::Proved;
                let of = format!("{:?}", told.claims[place].state);
                let kind = kinds.entry(of).or_default();
                (kind.0, kind.1) = (kind.0 + 1, kind.1 + u32::from(proved));
                seen[usize::from(proved)] += 1;
                if proved {
                    assert!(
                        change.may_hold && is_true(&model, &change.told, change.node),
                        "{what}"
                    );
                } else {
                    let moved = change.told.claims[place].parent;
                    let near = [Some(change.node), told.claims[place].parent, moved];
                    assert!(near.into_iter().flatten().any(|node| names(&result, node)), "{what}");
                }
            }
        }
    }
    for kind in ["Infeasible", "Integer", "Pruned"] {
        let (changed, held) = kinds[kind];
        assert!(changed > 30 && held * 5 < changed, "{kind}: {changed} changes, {held} true");
    }
}

/// Every field of one cut in a few ways: its row, and each number and place of its derivation.
fn cut_changes(cut: &GeneralCut) -> Vec<GeneralCut> {
    let mut all = Vec::new();
    let mut add = |change: &dyn Fn(&mut GeneralCut)| {
        let mut other = cut.clone();
        change(&mut other);
        all.push(other);
    };
    for entry in 0..cut.row.entries.len() {
        add(&|cut| cut.row.entries[entry].1 += Number::ONE);
        add(&|cut| cut.row.entries[entry].1 -= Number::ONE);
        add(&|cut| drop(cut.row.entries.remove(entry)));
    }
    for step in [Number::ONE, Number::ONE / Number::from(1000)] {
        add(&|cut| cut.row.upper = cut.row.upper.take().map(|side| side - step.clone()));
    }
    add(&|cut| cut.row.lower = cut.row.upper.clone());
    for place in 0..8 {
        add(&|cut| derived_otherwise(&mut cut.derivation, place));
    }
    all.retain(|other| other != cut);
    all
}

/// The derivation with what stands at a place left out, turned round or moved by one.
fn derived_otherwise(derivation: &mut Derivation, place: usize) {
    match derivation {
        Derivation::Rounding { sum, divisor, upper } => match place {
            0 => *divisor *= Number::from(2),
            1 => *divisor = -divisor.clone(),
            2 => drop(sum.pop()),
            3 => upper.clear(),
            4 => drop(upper.insert(ColumnId(1))),
            _ => {
                let place = place % sum.len();
                sum[place].0.upper ^= true;
                sum[place].1 += Number::ONE;
            }
        },
        Derivation::Knapsack(used) => used.upper ^= true,
        Derivation::Conflicts { cycle, hubs, witnesses } => match place {
            0 => drop(witnesses.pop()),
            1 => drop(hubs.pop()),
            2 => drop(cycle.pop()),
            _ if hubs.is_empty() => witnesses.rotate_left(1),
            _ => {
                let place = place % hubs.len();
                hubs[place].plain ^= true;
            }
        },
        Derivation::Cases { split, proofs } => match place {
            0 => drop(split.pop()),
            1 => proofs.rotate_left(1),
            2 => split.reverse(),
            _ => {
                let place = place % proofs.len();
                drop(proofs[place].pop());
            }
        },
        Derivation::Paths { arcs, pairs, cycles } => match place % 3 {
            0 => drop(arcs.pop()),
            1 => drop(pairs.pop()),
            _ => drop(cycles.pop()),
        },
    }
}

/// Whole models whose points can all be tried, with the points that meet every row.
fn enumerable() -> Vec<(Testimony, Rc<Model>, Vec<Vec<Number>>)> {
    let cuts = Cuts { classes: Classes::all(), every: 2, rounds: 1 };
    let mut all = Vec::new();
    for seed in [4, 20, 26, 55, 90] {
        let model = random_model(seed, 8, 0);
        let (_, told) = searched(&model, &Settings { cuts, ..Settings::default() });
        let point = |bits: usize| -> Vec<f64> {
            (0..8).map(|column| f64::from(u8::from(bits >> column & 1 == 1))).collect()
        };
        let meets = |x: &Vec<f64>| proof::Point::new(&model, x).violations.is_empty();
        let points = (0..256).map(point).filter(meets);
        let exact = points.map(|x| x.into_iter().map(|v| Number::from(v as i64)).collect());
        let exact = exact.collect();
        all.push((told, model, exact));
    }
    all
}

/// A cut that was changed is refused, or it still holds at every plan.
#[test]
fn every_field_of_every_cut_is_held_to() {
    let (mut refused, mut held) = (0, 0);
    for (told, model, points) in enumerable() {
        for (place, cut) in told.cuts.iter().enumerate() {
            for other in cut_changes(cut) {
                let mut changed = told.clone();
                changed.cuts[place] = other.clone();
                let result = audited(&model, changed, u64::MAX);
                let named = |why: &str| why.contains(&format!("cut {} ", place + 1));
                if result.faults.iter().any(|fault| named(&fault.why)) {
                    assert_eq!(result.judgement, Judgement::Refused);
                    refused += 1;
                    continue;
                }
                held += 1;
                for point in &points {
                    let sum =
                        |sum, (column, a): &(ColumnId, Number)| sum + a * &point[column.index()];
                    let activity = other.row.entries.iter().fold(Number::ZERO, sum);
                    let side = other.row.upper.clone().unwrap();
                    assert!(activity <= side, "{other:?} takes {point:?} away");
                }
            }
        }
    }
    assert!(refused > 200 && held > 20, "{refused} refused, {held} true");
}
