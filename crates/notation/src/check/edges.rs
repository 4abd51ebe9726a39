//! Edges in braces: `{i,j} ∈ E` holds whichever of its ends the set names first.

use super::Checker;
use super::binders::Quantifier;
use super::indices::place_name;
use crate::place::Span;
use crate::plan::{Node, Pattern, Root, SetOperator, Step};
use crate::syntax::{Expression, Kind};

impl Checker<'_> {
    /// Whether one end of an edge is known and the other one is bound: `j : {i,j} ∈ E`. Where
    /// both are bound, each edge counts once, as its set names it.
    pub(super) fn is_half_edge(&self, left: &Expression, work: &Quantifier<'_>) -> bool {
        let Kind::Set(ends) = &left.kind else { return false };
        let new =
            |end: &Expression| matches!(&end.kind, Kind::Name(name) if self.is_new(name, work));
        ends.len() == 2 && ends.iter().filter(|end| new(end)).count() == 1
    }

    /// A set of pairs with each of them turned as well.
    pub(super) fn both_ways(&mut self, set: Node, roots: &[Root], span: Span) -> Node {
        let &[first, second] = roots else { return set };
        let before = self.locals.len();
        let [a, b] =
            [first, second].map(|root| self.bind(&place_name("end", self.locals.len()), root));
        self.locals.truncate(before);
        let pattern = vec![Pattern::Bind(a), Pattern::Bind(b)];
        let steps = vec![Step::Over { pattern, set: set.clone(), span }];
        let turned = Node::Builder(steps, vec![Node::Slot(b), Node::Slot(a)], span);
        Node::SetOperation(SetOperator::Union, Box::new(set), Box::new(turned))
    }
}
