//! The strength order: which of two relaxations is never weaker, and how far that is known.
//!
//! A theorem is taken from the catalogue, along chains of them, where both rivals are as published.
//! Else it is certified on this instance where every row and bound of one rival, in the shared
//! variables, holds over the whole relaxation of the other: one linear program a row, whose bound
//! is proved by exact multipliers, which are handed out. A row that does not hold is an objective on
//! which the other rival is weaker. A rival with variables of its own is held to its rows in the
//! shared ones and, where these hold, to an affine map from the other's variables to its own. What is
//! not refuted by a row may be by an objective: the one of the instance, or a random one, under which
//! the other bound is better. Else the bounds are what was observed.

mod affine;
mod certificate;
mod objective;

use std::collections::{BTreeMap, VecDeque};
use std::rc::Rc;

use model::nearest_f64;
use record::study::{Certificate, Order, OrderLevel, Relation};

use crate::claims::{Claim, claims, incomparable};
use crate::desk::Desk;
use crate::maximise::Maximiser;
use crate::plan::Plan;
use crate::shared::{Shared, shared};
use crate::subject::Subject;
use crate::words::{direction, of, same};
use affine::{Between, Map};

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

    /// Whether the relaxation of `inner`, in the shared variables, lies within that of `outer`, in
    /// these too: row by row, by a map where that one has variables of its own, and by objectives.
    async fn within(&self, inner: &Subject, outer: &Subject, shared: &Shared) -> Certificate {
        let refused = |why| Certificate { why, ..Certificate::default() };
        if let Some(why) = incomparable(inner, outer, shared) {
            return refused(why);
        }
        let rivals = [inner, outer];
        let found = if shared.pairs.len() == outer.model.columns().len() {
            match claims(outer, shared, &inner.model, self.plan.rows) {
                Ok(claims) => self.rows_hold(rivals, &claims).await,
                Err(why) => refused(why),
            }
        } else {
            self.mapped(rivals, shared).await
        };
        if found.holds.is_some() {
            return found;
        }
        objective::apart(self.desk, self.plan.seed, rivals, shared).await.unwrap_or(found)
    }

    /// The same where `outer` has variables of its own.
    async fn mapped(&self, rivals: [&Subject; 2], shared: &Shared) -> Certificate {
        let between = Between::new(rivals, shared, self.plan.rows);
        let refused = |why| Certificate { why, ..Certificate::default() };
        let (plain, own) = match between.rows() {
            Ok(rows) => rows,
            Err(why) => return refused(why),
        };
        let put_in = |claims: &[Claim], map: &Map| -> Vec<Claim> {
            claims.iter().map(|claim| between.put_in(claim, map)).collect()
        };
        let mut claims = put_in(&plain, &Map::new());
        let shared_rows = self.rows_hold(rivals, &claims).await;
        if shared_rows.holds != Some(true) {
            return shared_rows;
        }
        let [inner, outer] = rivals;
        self.desk.say(format!("an affine map from {} to {}", inner.letter, outer.letter));
        let map = match between.map(self.desk, &own).await {
            Ok(map) => map,
            Err(why) => return refused(why),
        };
        claims.extend(put_in(&own, &map));
        let mut found = self.rows_hold(rivals, &claims).await;
        if found.holds == Some(true) {
            certificate::put_map(&mut found, rivals, &map);
            return found;
        }
        // A row that does not hold with this map refutes the map and not the order.
        refused("the affine map does not meet every row in exact arithmetic".to_owned())
    }

    async fn rows_hold(&self, [inner, outer]: [&Subject; 2], claims: &[Claim]) -> Certificate {
        let mut out = Certificate {
            rows: u32::try_from(claims.len()).unwrap_or(u32::MAX),
            ..Certificate::default()
        };
        let mut maximiser = Maximiser::new(self.desk, &inner.model);
        let mut proofs = Vec::new();
        for (place, claim) in claims.iter().enumerate() {
            self.desk.say(format!(
                "row {} of {} of {} over the relaxation of {}",
                place + 1,
                claims.len(),
                outer.letter,
                inner.letter
            ));
            let most = match maximiser.as_written(&claim.entries, &claim.side) {
                Some(most) => most,
                None => maximiser.most(&claim.entries, &claim.side).await,
            };
            let over = most.value.map(|value| value - nearest_f64(&claim.side));
            let proof = most.proof.filter(|(_, bound)| *bound <= claim.side);
            if proof.is_none() && over.is_none_or(|over| over > VIOLATED) && !most.nothing {
                out.holds = Some(false);
                out.witness.clone_from(&claim.name);
                out.violation = over;
                certificate::witness(&mut out, &inner.model, (claim, &most.point));
                return out;
            }
            if proof.is_none() && out.why.is_empty() {
                out.why = format!("exact arithmetic did not prove {}", claim.name);
            }
            out.proved += u32::from(proof.is_some());
            proofs.extend(proof.map(|(multipliers, _)| (claim, multipliers)));
        }
        out.holds = (out.proved == out.rows).then_some(true);
        if out.holds.is_some() {
            certificate::put(&mut out, &inner.model, (&maximiser, &proofs));
            out.why.clear();
        }
        out
    }
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
        let by = if certificate.map.is_empty() { "" } else { ", by an affine map" };
        format!("{} proved over the other's relaxation{by}", of(certificate.rows, "row"))
    };
    (order.relation, order.source) = match (forth.holds, back.holds) {
        (Some(true), Some(true)) => {
            (Relation::Equal, format!("{}; {}", sentence(forth), sentence(back)))
        }
        (Some(true), _) => (Relation::NeverWeaker, sentence(forth)),
        (_, Some(true)) => (Relation::NeverStronger, sentence(back)),
        (Some(false), Some(false)) => {
            let source = format!(
                "{} for one, {} for the other: each is an objective on which the other is stronger",
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
