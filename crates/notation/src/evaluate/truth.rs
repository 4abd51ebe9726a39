//! Conditions. What depends on the quantified subset gives a guard instead of yes or no.

use std::cmp::Ordering;

use super::walk::{Found, Walk};
use super::{Element, Environment, Evaluated, Evaluator, Guard, fail};
use crate::diagnostic::{shapes, subsets};
use crate::place::Span;
use crate::plan::Node;
use crate::syntax::Relation;

impl Evaluator {
    pub(crate) fn truth(&self, node: &Node, env: &mut Environment) -> Evaluated<Guard> {
        if let Some((equal, set)) = asks_emptiness(node)
            && !self.depends_on_subset(set)
        {
            return Ok(Guard::known(self.is_empty(set, env)? == equal));
        }
        match node {
            Node::Compare(relation, a, b) => {
                let (a, b) = (self.number(a, env)?, self.number(b, env)?);
                Ok(Guard::known(stands(*relation, a.cmp(&b))))
            }
            Node::Same(equal, a, b) => {
                Ok(Guard::known((self.element(a, env)? == self.element(b, env)?) == *equal))
            }
            Node::Ordered(relation, a, b, root, span) => {
                let (a, b) = (self.element(a, env)?, self.element(b, env)?);
                let Some(super::Values::Single(super::Value::Set(set))) = &self.values[*root]
                else {
                    return fail(shapes::not_comparable(*span));
                };
                let pool = self.pool.borrow();
                if let (true, Some(a), Some(b)) = (set.by_value, pool.whole(a), pool.whole(b)) {
                    return Ok(Guard::known(stands(*relation, a.cmp(&b))));
                }
                match (set.position(&[a]), set.position(&[b])) {
                    (Some(a), Some(b)) => Ok(Guard::known(stands(*relation, a.cmp(&b)))),
                    _ => fail(shapes::not_comparable(*span)),
                }
            }
            Node::Member(inside, tuple, set) => self.member(*inside, tuple, set, env),
            Node::Sets(relation, a, b) => self.compare_sets(*relation, a, b, env),
            Node::All(items) => {
                let mut all = Guard::ALWAYS;
                for item in items {
                    all = self.both(all, item, env)?;
                    if all.value() == Some(false) {
                        break;
                    }
                }
                Ok(all)
            }
            Node::Any(items) => {
                let mut any = Guard::known(false);
                for item in items {
                    let next = self.truth(item, env)?;
                    any = any
                        .or(next)
                        .map_or_else(|| fail(subsets::nonlinear(Span::default())), Ok)?;
                    if any.value() == Some(true) {
                        break;
                    }
                }
                Ok(any)
            }
            Node::Not(inner) => Ok(self.truth(inner, env)?.not()),
            Node::Parity(odd, inner, span) => self.parity(*odd, inner, *span, env),
            Node::Clique(set, edges) => self.clique(set, edges, env),
            _ => fail(shapes::expected("a condition", "another value", Span::default())),
        }
    }

    /// Whether a set has no member. What is built is walked to its first member only, so that
    /// "the first pair of its length" asks little of each pair.
    fn is_empty(&self, set: &Node, env: &mut Environment) -> Evaluated<bool> {
        let Node::Builder(steps, _, span) = set else { return Ok(self.set(set, env)?.is_empty()) };
        let (mut walk, mut budget) = (Walk::default(), u64::MAX);
        match walk.next(steps, self, env, &mut budget)? {
            Found::Tuple(guard) if guard.value() == Some(true) => Ok(false),
            Found::Tuple(_) => fail(subsets::nonlinear(*span)),
            Found::Paused | Found::Done => Ok(true),
        }
    }

    pub(super) fn both(
        &self,
        guard: Guard,
        node: &Node,
        env: &mut Environment,
    ) -> Evaluated<Guard> {
        let next = self.truth(node, env)?;
        guard.and(next).map_or_else(|| fail(subsets::nonlinear(Span::default())), Ok)
    }

    fn member(
        &self,
        inside: bool,
        tuple: &[Node],
        set: &Node,
        env: &mut Environment,
    ) -> Evaluated<Guard> {
        let key = self.tuple(tuple, env)?;
        if matches!(set, Node::Subset) {
            return Ok(Guard::member(key[0], inside));
        }
        if self.depends_on_subset(set) {
            let members = self.members_by_subset(set, env)?;
            let found = members.iter().find(|(element, _)| *element == key[0]);
            let guard = found.map_or(Guard::known(false), |&(e, within)| Guard::member(e, within));
            return Ok(if inside { guard } else { guard.not() });
        }
        if let Node::Members(_, members) = set {
            return Ok(Guard::known(self.is_listed(&key, members, env)? == inside));
        }
        Ok(Guard::known(self.set(set, env)?.contains(&key) == inside))
    }

    /// Whether a tuple is among these, without making a set of them: δ(i) asks this of every pair.
    fn is_listed(
        &self,
        key: &[Element],
        members: &[Vec<Node>],
        env: &mut Environment,
    ) -> Evaluated<bool> {
        let mut found = false;
        for member in members {
            found |= self.tuple(member, env)? == key;
        }
        Ok(found)
    }

    fn compare_sets(
        &self,
        relation: Relation,
        a: &Node,
        b: &Node,
        env: &mut Environment,
    ) -> Evaluated<Guard> {
        if self.depends_on_subset(a) || self.depends_on_subset(b) {
            return fail(subsets::nonlinear(Span::default()));
        }
        let (a, b) = (self.set(a, env)?, self.set(b, env)?);
        let contained = a.iter().all(|tuple| b.contains(tuple));
        let equal = contained && a.len() == b.len();
        Ok(Guard::known(match relation {
            Relation::Equal => equal,
            Relation::NotEqual => !equal,
            Relation::Subset => contained && !equal,
            _ => contained,
        }))
    }

    fn parity(
        &self,
        odd: bool,
        inner: &Node,
        span: Span,
        env: &mut Environment,
    ) -> Evaluated<Guard> {
        let value = self.number(inner, env)?;
        if !value.is_int() {
            return fail(shapes::whole(span));
        }
        let is_odd = value.numerator() % 2_u8 != 0_u8;
        Ok(Guard::known(is_odd == odd))
    }

    fn clique(&self, set: &Node, edges: &Node, env: &mut Environment) -> Evaluated<Guard> {
        if self.depends_on_subset(set) {
            return fail(subsets::nonlinear(Span::default()));
        }
        let (set, edges) = (self.set(set, env)?, self.set(edges, env)?);
        let joined = |a, b| a == b || edges.contains(&[a, b]) || edges.contains(&[b, a]);
        let all = set.iter().all(|a| set.iter().all(|b| joined(a[0], b[0])));
        Ok(Guard::known(all))
    }
}

/// `|S| = 0`, `S = ∅` (`true`), or the same with ≠, and the set.
fn asks_emptiness(node: &Node) -> Option<(bool, &Node)> {
    let (relation, set) = match node {
        Node::Compare(relation, size, zero) => match (size.as_ref(), zero.as_ref()) {
            (Node::Size(set), Node::Number(n)) if n.is_zero() => (relation, set.as_ref()),
            _ => return None,
        },
        Node::Sets(relation, set, nothing) => match nothing.as_ref() {
            Node::Members(_, members) if members.is_empty() => (relation, set.as_ref()),
            _ => return None,
        },
        _ => return None,
    };
    match relation {
        Relation::Equal => Some((true, set)),
        Relation::NotEqual => Some((false, set)),
        _ => None,
    }
}

/// Whether two things in this order stand in the relation.
fn stands(relation: Relation, order: Ordering) -> bool {
    match relation {
        Relation::Equal => order == Ordering::Equal,
        Relation::NotEqual => order != Ordering::Equal,
        Relation::Less => order == Ordering::Less,
        Relation::AtMost => order != Ordering::Greater,
        Relation::Greater => order == Ordering::Greater,
        Relation::AtLeast => order != Ordering::Less,
        _ => false,
    }
}
