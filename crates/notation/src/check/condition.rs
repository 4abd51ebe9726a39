//! Conditions: relations between numbers, elements, tuples and sets.

use super::{Checker, Form, Typed};
use crate::diagnostic::shapes as message;
use crate::place::Span;
use crate::plan::{Node, Root};
use crate::syntax::{Expression, Kind, Relation};

impl Checker<'_> {
    pub(super) fn truth(&mut self, expression: &Expression) -> Option<Node> {
        let span = expression.span;
        match &expression.kind {
            Kind::Chain(first, links) => {
                let mut left: &Expression = first;
                let mut all = Vec::with_capacity(links.len());
                for (relation, right) in links {
                    all.push(self.pair(left, *relation, right));
                    left = right;
                }
                let mut all: Vec<Node> = all.into_iter().collect::<Option<_>>()?;
                Some(if all.len() == 1 { all.remove(0) } else { Node::All(all) })
            }
            Kind::All(items) => self.truths(items).map(Node::All),
            Kind::Any(items) => self.truths(items).map(Node::Any),
            Kind::Not(inner) => Some(Node::Not(Box::new(self.truth(inner)?))),
            Kind::Parity(inner, odd) => {
                let node = self.data(inner, "a condition")?;
                Some(Node::Parity(*odd, Box::new(node), inner.span))
            }
            Kind::Clique(inner, edges) => {
                let (set, roots) = self.set(inner)?;
                let (edges, pairs) = self.set(edges)?;
                if roots.len() != 1 || pairs.len() != 2 {
                    return self.report(message::expected(
                        "a set and a set of pairs",
                        "other sets",
                        span,
                    ));
                }
                Some(Node::Clique(Box::new(set), Box::new(edges)))
            }
            _ => {
                let found = self.expression(expression)?.form.noun();
                self.report(message::expected("a condition", found, span))
            }
        }
    }

    fn truths(&mut self, items: &[Expression]) -> Option<Vec<Node>> {
        let nodes: Vec<Option<Node>> = items.iter().map(|item| self.truth(item)).collect();
        nodes.into_iter().collect()
    }

    /// One relation between two operands.
    pub(super) fn pair(
        &mut self,
        left: &Expression,
        relation: Relation,
        right: &Expression,
    ) -> Option<Node> {
        match relation {
            Relation::In | Relation::NotIn => {
                self.membership(left, relation == Relation::In, right)
            }
            Relation::Subset | Relation::SubsetOrEqual => {
                let (a, _) = self.set(left)?;
                let (b, _) = self.set(right)?;
                Some(Node::Sets(relation, Box::new(a), Box::new(b)))
            }
            _ => self.comparison(left, relation, right),
        }
    }

    fn membership(&mut self, left: &Expression, inside: bool, right: &Expression) -> Option<Node> {
        let tuple = match &left.kind {
            Kind::Set(ends) if ends.len() == 2 => {
                self.tuple(&Expression { kind: Kind::Tuple(ends.clone()), span: left.span })
            }
            _ => self.tuple(left),
        };
        let (set, roots) = self.set(right)?;
        let (nodes, found) = tuple?;
        if roots.is_empty() {
            return Some(if inside { Node::Any(Vec::new()) } else { Node::All(Vec::new()) });
        }
        if roots.len() != found.len() {
            return self.report(message::tuple_size(roots.len(), found.len(), left.span));
        }
        // an edge is in the set whichever of its ends that names first
        let set = if matches!(left.kind, Kind::Set(_)) && roots.len() == 2 {
            self.both_ways(set, &roots, left.span)
        } else {
            set
        };
        Some(Node::Member(inside, nodes, Box::new(set)))
    }

    fn comparison(
        &mut self,
        left: &Expression,
        relation: Relation,
        right: &Expression,
    ) -> Option<Node> {
        let equality = matches!(relation, Relation::Equal | Relation::NotEqual);
        if let (Kind::Tuple(a), Kind::Tuple(b)) = (&left.kind, &right.kind)
            && equality
            && a.len() == b.len()
        {
            let (a, _) = self.tuple(left)?;
            let (b, _) = self.tuple(right)?;
            let same = |(a, b)| Node::Same(true, Box::new(a), Box::new(b));
            let all = Node::All(a.into_iter().zip(b).map(same).collect());
            return Some(if relation == Relation::Equal { all } else { Node::Not(Box::new(all)) });
        }
        let a = self.expression(left);
        let b = self.expression(right);
        let (a, b) = (a?, b?);
        // i ≠ 0 asks for the label 0, also where the other labels are no numbers
        for (element, other, written) in [(&a, &b, right), (&b, &a, left)] {
            if let (Form::Element(_), Kind::Number(value), true) =
                (&element.form, &written.kind, equality)
                && value.is_int()
            {
                let label = Node::AsElement(Box::new(other.node.clone()), other.span);
                let is = relation == Relation::Equal;
                return Some(Node::Same(is, Box::new(element.node.clone()), Box::new(label)));
            }
        }
        let set = |form: &Form| matches!(form, Form::Set(_) | Form::Empty);
        if set(&a.form) && set(&b.form) && equality {
            return Some(Node::Sets(relation, Box::new(a.node), Box::new(b.node)));
        }
        if let (Form::Element(p), Form::Element(q)) = (&a.form, &b.form) {
            let (p, q) = (*p, *q);
            return self.elements((a, p), relation, (b, q), left.span.to(right.span));
        }
        let a = self.plain_number(a)?;
        let b = self.plain_number(b)?;
        Some(Node::Compare(relation, Box::new(a), Box::new(b)))
    }

    fn plain_number(&mut self, typed: Typed) -> Option<Node> {
        let typed = self.as_number(typed)?;
        match typed.variable {
            Some(span) => self.report(message::not_constant("a condition", span)),
            None => Some(typed.node),
        }
    }

    /// Elements are equal or not by name; the order is that of their set.
    fn elements(
        &mut self,
        a: (Typed, Root),
        relation: Relation,
        b: (Typed, Root),
        span: Span,
    ) -> Option<Node> {
        let ((a, p), (b, q)) = (a, b);
        let (a, b) = (Box::new(a.node), Box::new(b.node));
        match relation {
            Relation::Equal => return Some(Node::Same(true, a, b)),
            Relation::NotEqual => return Some(Node::Same(false, a, b)),
            _ => {}
        }
        match (p, q) {
            (Root::Set(p), Root::Set(q)) if p == q => {
                self.symbols[p].used = true;
                Some(Node::Ordered(relation, a, b, p, span))
            }
            (Root::Set(_), Root::Set(_)) => self.report(message::not_comparable(span)),
            _ => Some(Node::Compare(relation, a, b)),
        }
    }
}
