//! Sets.

use std::rc::Rc;

use model::Number;

use super::{Element, Environment, Evaluated, Evaluator, SET_LIMIT, Set, Value, fail};
use crate::diagnostic::{shapes, size, subsets};
use crate::place::Span;
use crate::plan::{Node, SetOperator};

impl Evaluator {
    /// Whether a set is, or is made from, the quantified subset.
    pub(crate) fn depends_on_subset(&self, node: &Node) -> bool {
        match node {
            Node::Subset => true,
            Node::SetOperation(_, a, b) => self.depends_on_subset(a) || self.depends_on_subset(b),
            Node::Cross(items, _) => items.iter().any(|item| self.depends_on_subset(item)),
            _ => false,
        }
    }

    pub(crate) fn set(&self, node: &Node, env: &mut Environment) -> Evaluated<Rc<Set>> {
        match node {
            Node::Symbol(id, indices, span) => match self.symbol(*id, indices, *span, env)? {
                Value::Set(set) => Ok(set),
                _ => fail(shapes::expected("a set", "another value", *span)),
            },
            Node::Once(cell, inner) => match self.once_value(*cell, inner, env)? {
                Value::Set(set) => Ok(set),
                _ => fail(shapes::expected("a set", "another value", Span::default())),
            },
            Node::Members(arity, members) => {
                let tuples: Vec<_> =
                    members.iter().map(|m| self.tuple(m, env)).collect::<Evaluated<_>>()?;
                Ok(Rc::new(Set::new(*arity, tuples)))
            }
            Node::Range(from, to, span) => self.range(from, to, *span, env),
            Node::Builder(steps, nodes, span) => {
                let mut tuples = Vec::new();
                self.each(steps, env, |this, env, guard| {
                    if guard.value() != Some(true) {
                        return fail(subsets::nonlinear(*span));
                    }
                    if tuples.len() >= SET_LIMIT {
                        return fail(size::set(SET_LIMIT as u128 + 1, SET_LIMIT, *span));
                    }
                    tuples.push(this.tuple(nodes, env)?);
                    Ok(())
                })?;
                Ok(Rc::new(Set::new(nodes.len(), tuples)))
            }
            Node::SetOperation(operator, a, b) => {
                let (a, b) = (self.set(a, env)?, self.set(b, env)?);
                self.spend(a.len() + b.len())?;
                Ok(Rc::new(operate(*operator, &a, &b)))
            }
            Node::Cross(factors, span) => self.cross(factors, *span, env),
            Node::Subset => fail(subsets::nonlinear(Span::default())),
            _ => fail(shapes::expected("a set", "another value", Span::default())),
        }
    }

    fn range(
        &self,
        from: &Node,
        to: &Node,
        span: Span,
        env: &mut Environment,
    ) -> Evaluated<Rc<Set>> {
        let (from, to) = (self.number(from, env)?, self.number(to, env)?);
        if !from.is_int() || !to.is_int() {
            return fail(shapes::whole(span));
        }
        let whole = |n: &Number| i64::try_from(n.numerator().clone()).ok();
        let (Some(from), Some(to)) = (whole(&from), whole(&to)) else {
            return fail(size::set(u128::from(u64::MAX), SET_LIMIT, span));
        };
        let members = i128::from(to) - i128::from(from) + 1;
        if members > SET_LIMIT as i128 {
            return fail(size::set(members.unsigned_abs(), SET_LIMIT, span));
        }
        self.spend(usize::try_from(members).unwrap_or(0))?;
        let mut pool = self.pool.borrow_mut();
        let tuples: Vec<Vec<Element>> =
            (from..=to).map(|n| vec![pool.intern(&n.to_string())]).collect();
        Ok(Rc::new(Set::new(1, tuples)))
    }

    fn cross(&self, factors: &[Node], span: Span, env: &mut Environment) -> Evaluated<Rc<Set>> {
        let sets: Vec<Rc<Set>> =
            factors.iter().map(|f| self.set(f, env)).collect::<Evaluated<_>>()?;
        let members = sets.iter().fold(1_u128, |n, set| n.saturating_mul(set.len() as u128));
        if members > SET_LIMIT as u128 {
            return fail(size::set(members, SET_LIMIT, span));
        }
        self.spend(usize::try_from(members).unwrap_or(0))?;
        let mut tuples: Vec<Vec<Element>> = vec![Vec::new()];
        for set in &sets {
            let longer = |tuple: &Vec<Element>| {
                set.iter().map(|more| [tuple.as_slice(), more].concat()).collect::<Vec<_>>()
            };
            tuples = tuples.iter().flat_map(longer).collect();
        }
        Ok(Rc::new(Set::new(sets.iter().map(|s| s.arity).sum(), tuples)))
    }
}

fn operate(operator: SetOperator, a: &Set, b: &Set) -> Set {
    let arity = if a.is_empty() { b.arity } else { a.arity };
    let own = a.iter().map(<[Element]>::to_vec);
    match operator {
        SetOperator::Union => Set::new(arity, own.chain(b.iter().map(<[Element]>::to_vec))),
        SetOperator::Difference => Set::new(arity, own.filter(|tuple| !b.contains(tuple))),
        SetOperator::Intersection => Set::new(arity, own.filter(|tuple| b.contains(tuple))),
    }
}
