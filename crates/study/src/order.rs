//! The strength order: which of two relaxations is never weaker, and how far that is known.
//!
//! A theorem is taken from the catalogue, along chains of them, where both rivals are as published.
//! Else it is certified on this instance where every row and bound of one rival, in the shared
//! variables, holds over the whole relaxation of the other: one linear program a row, whose bound
//! is proved in exact arithmetic. A row that does not hold is an objective on which the other rival
//! is weaker. Else the bounds are what was observed.

use std::collections::{BTreeMap, VecDeque};
use std::rc::Rc;

use model::{ColumnId, Model, Number, NumberId, RowId, Sense, nearest_f64};
use record::study::{Certificate, Order, OrderLevel, Relation};

use crate::desk::Desk;
use crate::plan::Plan;
use crate::propagate::sides;
use crate::shared::{Shared, shared};
use crate::subject::Subject;
use crate::words::{direction, of, same};

/// A row is violated from here on.
const VIOLATED: f64 = 1e-6;

/// The order of every pair of rivals.
pub async fn order(desk: Rc<Desk>, subjects: Vec<Subject>, plan: Plan) -> Vec<Order> {
    let mut bounds = Vec::new();
    for subject in &subjects {
        desk.say(format!("{}: its relaxation", subject.letter));
        bounds.push(desk.relax(&subject.model).await.bound);
    }
    let mut orders = Vec::new();
    for (place, a) in subjects.iter().enumerate() {
        for (other, b) in subjects.iter().enumerate().skip(place + 1) {
            let pair = Pair { desk: &desk, plan: &plan, rivals: [a, b] };
            orders.push(pair.order([bounds[place], bounds[other]]).await);
        }
    }
    orders
}

struct Pair<'s> {
    desk: &'s Desk,
    plan: &'s Plan,
    rivals: [&'s Subject; 2],
}

impl Pair<'_> {
    async fn order(&self, bounds: [Option<f64>; 2]) -> Order {
        let [a, b] = self.rivals;
        let shared = shared(a, b, &self.plan.shared);
        let turned = Shared {
            pairs: shared.pairs.iter().map(|&(left, right)| (right, left)).collect(),
            only: [shared.only[1].clone(), shared.only[0].clone()],
            variables: shared.variables.clone(),
        };
        let forth = self.within(a, b, &shared).await;
        let back = self.within(b, a, &turned).await;
        let mut order = Order {
            rivals: [a.letter.clone(), b.letter.clone()],
            bounds,
            certificates: [forth, back],
            ..Order::default()
        };
        if !theorem(&mut order, a, b) && !certified(&mut order) {
            observed(&mut order, direction(&a.model));
        }
        order
    }

    /// Whether the relaxation of `inner`, in the shared variables, lies within that of `outer`.
    async fn within(&self, inner: &Subject, outer: &Subject, shared: &Shared) -> Certificate {
        let why = match obstacle(inner, outer, shared) {
            Some(why) => why,
            None => return self.rows_hold(inner, outer, shared).await,
        };
        Certificate { why, ..Certificate::default() }
    }

    async fn rows_hold(&self, inner: &Subject, outer: &Subject, shared: &Shared) -> Certificate {
        let back: BTreeMap<ColumnId, ColumnId> =
            shared.pairs.iter().map(|&(inner, outer)| (outer, inner)).collect();
        let claims = claims(&outer.model, &back, &inner.model);
        let mut out = Certificate::default();
        if claims.len() > self.plan.rows as usize {
            out.why = format!("more than {} to maximise", of(self.plan.rows, "row"));
            return out;
        }
        out.rows = u32::try_from(claims.len()).unwrap_or(u32::MAX);
        for (place, claim) in claims.iter().enumerate() {
            let (inner_letter, outer_letter) = (&inner.letter, &outer.letter);
            self.desk.say(format!(
                "row {} of {} of {outer_letter} over the relaxation of {inner_letter}",
                place + 1,
                claims.len()
            ));
            let priced = inner.model.priced(Sense::Maximise, &claim.entries);
            let solved = self.desk.relax(&Rc::new(priced)).await;
            let over = solved.bound.map(|bound| bound - nearest_f64(&claim.side));
            if over.is_none_or(|over| over > VIOLATED) && !solved.is_infeasible() {
                out.holds = Some(false);
                out.witness.clone_from(&claim.name);
                out.violation = over;
                return out;
            }
            let proved = solved.checked_bound.as_ref().is_some_and(|bound| *bound <= claim.side);
            out.proved += u32::from(proved || solved.is_infeasible());
        }
        out.holds = (out.proved == out.rows).then_some(true);
        if out.holds.is_none() {
            out.why = "exact arithmetic did not prove every row".to_owned();
        }
        out
    }
}

/// Why one relaxation cannot be held against the rows of the other.
fn obstacle(inner: &Subject, outer: &Subject, shared: &Shared) -> Option<String> {
    if shared.pairs.is_empty() {
        return Some("they share no variable".to_owned());
    }
    if !outer.model.subset_families().is_empty() {
        return Some(format!("{} has rows on demand, which cannot all be written", outer.letter));
    }
    if shared.pairs.len() < outer.model.columns().len() {
        return Some(format!("{} has variables of its own", outer.letter));
    }
    if inner.model.sense() != outer.model.sense() || !same_costs(inner, outer, shared) {
        return Some("their objectives differ in the shared variables".to_owned());
    }
    None
}

/// Whether both have the same objective, and it is in the shared variables alone.
fn same_costs(inner: &Subject, outer: &Subject, shared: &Shared) -> bool {
    let cost = |model: &Model, column: ColumnId| -> Number {
        model.numbers().exact(model.columns()[column.index()].cost).clone()
    };
    let equal = shared
        .pairs
        .iter()
        .all(|&(left, right)| cost(&inner.model, left) == cost(&outer.model, right));
    let paired: std::collections::BTreeSet<ColumnId> =
        shared.pairs.iter().map(|&(left, _)| left).collect();
    let columns = (0..inner.model.columns().len()).map(ColumnId::from_index);
    let mut rest = columns.filter(|column| !paired.contains(column));
    equal
        && rest
            .all(|column| cost(&inner.model, column).is_zero() || shared.only[0].contains(&column))
}

/// A row or bound of one rival in the columns of the other: `Σ a x ≤ side`.
struct Claim {
    name: String,
    entries: Vec<(ColumnId, Number)>,
    side: Number,
}

fn claims(outer: &Model, to: &BTreeMap<ColumnId, ColumnId>, inner: &Model) -> Vec<Claim> {
    let mut out = Vec::new();
    let rows = (0..outer.row_count()).map(RowId::from_index).filter(|&row| outer.row_is_in(row));
    for row in rows {
        for (half, _) in sides(outer, row) {
            let entries = half.entries.into_iter().filter_map(|(c, a)| Some((*to.get(&c)?, a)));
            let (name, entries) = (outer.row_name(row), entries.collect());
            out.push(Claim { name, entries, side: half.side });
        }
    }
    for (index, column) in outer.columns().iter().enumerate() {
        let id = ColumnId::from_index(index);
        let Some(&own) = to.get(&id) else { continue };
        let exact = |model: &Model, id: NumberId| model.numbers().exact(id).clone();
        let mine = &inner.columns()[own.index()];
        let name = outer.column_name(id);
        if let Some(upper) = column.upper.map(|id| exact(outer, id))
            && mine.upper.is_none_or(|id| exact(inner, id) > upper)
        {
            let entries = vec![(own, Number::ONE)];
            out.push(Claim { name: format!("upper bound of {name}"), entries, side: upper });
        }
        if let Some(lower) = column.lower.map(|id| exact(outer, id))
            && mine.lower.is_none_or(|id| exact(inner, id) < lower)
        {
            let entries = vec![(own, -Number::ONE)];
            out.push(Claim { name: format!("lower bound of {name}"), entries, side: -lower });
        }
    }
    out
}

/// Takes what is published, where both are as published.
fn theorem(order: &mut Order, a: &Subject, b: &Subject) -> bool {
    let as_published = |subject: &Subject| {
        let plain = subject.source.as_ref().is_some_and(|source| source.states.is_empty());
        subject
            .entry
            .as_ref()
            .filter(|_| plain)
            .map(|entry| (entry.family.clone(), entry.id.clone()))
    };
    let (Some((family, left)), Some((other, right))) = (as_published(a), as_published(b)) else {
        return false;
    };
    if family != other {
        return false;
    }
    let known: Vec<catalogue::Relation> = catalogue::relations(&family)
        .into_iter()
        .filter(|relation| relation.level == catalogue::Level::Theorem)
        .collect();
    let incomparable = known.iter().find(|relation| {
        let ends = [&relation.left, &relation.right];
        relation.order == catalogue::Order::Incomparable
            && (ends == [&left, &right] || ends == [&right, &left])
    });
    let (forth, back) = (chain(&known, &left, &right), chain(&known, &right, &left));
    (order.relation, order.source) = match (forth, back, incomparable) {
        (Some(forth), Some(back), _) => {
            (Relation::Equal, if forth == back { forth } else { format!("{forth}; {back}") })
        }
        (Some(source), None, _) => (Relation::NeverWeaker, source),
        (None, Some(source), _) => (Relation::NeverStronger, source),
        (None, None, Some(relation)) => (Relation::Incomparable, relation.source.clone()),
        (None, None, None) => return false,
    };
    order.level = OrderLevel::Theorem;
    true
}

/// The sources of a chain of theorems by which `from` is never weaker than `to`.
fn chain(known: &[catalogue::Relation], from: &str, to: &str) -> Option<String> {
    let mut reached: BTreeMap<&str, Vec<&str>> = BTreeMap::from([(from, Vec::new())]);
    let mut queue = VecDeque::from([from]);
    while let Some(at) = queue.pop_front() {
        let sources = reached[at].clone();
        if at == to {
            return Some(sources.join("; "));
        }
        for relation in known {
            let next = match relation.order {
                _ if relation.order == catalogue::Order::Incomparable => continue,
                _ if relation.left == at => relation.right.as_str(),
                catalogue::Order::Equal if relation.right == at => relation.left.as_str(),
                _ => continue,
            };
            if !reached.contains_key(next) {
                let mut further = sources.clone();
                for source in relation.source.split("; ") {
                    if !further.contains(&source) {
                        further.push(source);
                    }
                }
                reached.insert(next, further);
                queue.push_back(next);
            }
        }
    }
    None
}

/// Takes what was proved row by row on this instance.
fn certified(order: &mut Order) -> bool {
    let [forth, back] = &order.certificates;
    let sentence = |certificate: &Certificate| {
        format!("{} proved over the other's relaxation", of(certificate.rows, "row"))
    };
    (order.relation, order.source) = match (forth.holds, back.holds) {
        (Some(true), Some(true)) => {
            (Relation::Equal, format!("{}; {}", sentence(forth), sentence(back)))
        }
        (Some(true), _) => (Relation::NeverWeaker, sentence(forth)),
        (_, Some(true)) => (Relation::NeverStronger, sentence(back)),
        (Some(false), Some(false)) => {
            let source = format!(
                "{} can be violated by one, {} by the other: each is an objective on which the \
                 other is stronger",
                forth.witness, back.witness
            );
            (Relation::Incomparable, source)
        }
        _ => return false,
    };
    order.level = OrderLevel::Certified;
    true
}

/// What the bounds say on this instance and objective.
fn observed(order: &mut Order, sign: f64) {
    let [Some(left), Some(right)] = order.bounds else { return };
    order.level = OrderLevel::Observed;
    order.source = "the bounds on this instance and objective".to_owned();
    order.relation = match () {
        () if same(left, right) => Relation::Equal,
        () if sign * left > sign * right => Relation::NeverWeaker,
        () => Relation::NeverStronger,
    };
}
