//! Conditions on the subset of a family: sizes, members, parity, weights, cliques.

use dashu_int::{IBig, UBig};
use model::{LabelId, Number, SubsetCondition};

use super::Expansion;
use super::subsets::weights;
use crate::diagnostic::subsets as message;
use crate::evaluate::{Element, Evaluated, Linear, Scale, Set, fail};
use crate::place::Span;
use crate::plan::{Node, SubsetPlan};
use crate::syntax::Relation;

/// What is gathered of one quantifier.
struct Gathered<'g> {
    ground: &'g Set,
    /// The condition at hand.
    span: Span,
    at_least: u32,
    at_most: u32,
    others: Vec<SubsetCondition>,
    /// A condition that no subset meets.
    impossible: bool,
}

impl Expansion {
    /// The conditions on the subset; `None` when none can meet them.
    pub(super) fn conditions(
        &mut self,
        subset: &SubsetPlan,
        ground: &Set,
    ) -> Evaluated<Option<Vec<SubsetCondition>>> {
        let all = u32::try_from(ground.len()).unwrap_or(u32::MAX);
        let mut gathered = Gathered {
            ground,
            span: subset.span,
            at_least: 0,
            at_most: if subset.proper { all.saturating_sub(1) } else { all },
            others: Vec::new(),
            impossible: subset.proper && all == 0,
        };
        for (node, span) in &subset.conditions {
            gathered.span = *span;
            let read = self.condition(node, &mut gathered);
            read.map_err(|d| crate::evaluate::placed(d, *span))?;
        }
        if gathered.impossible || gathered.at_least > gathered.at_most {
            return Ok(None);
        }
        let mut conditions = gathered.others;
        if gathered.at_least > 0 || gathered.at_most < all {
            let (at_least, at_most) = (gathered.at_least, gathered.at_most);
            conditions.insert(0, SubsetCondition::Size { at_least, at_most });
        }
        Ok(Some(conditions))
    }

    fn condition(&mut self, node: &Node, into: &mut Gathered<'_>) -> Evaluated<()> {
        match node {
            Node::All(items) => {
                for item in items {
                    self.condition(item, into)?;
                }
                Ok(())
            }
            Node::Not(inner) => self.negated(inner, into),
            Node::Compare(relation, a, b) => match (a.as_ref(), b.as_ref()) {
                (Node::Modulo(inner, two, _), rest) | (rest, Node::Modulo(inner, two, _)) => {
                    self.remainder((*relation, rest), inner, two, into)
                }
                _ => self.comparison(*relation, a, b, into),
            },
            Node::Parity(odd, inner, _) => self.parity(*odd, inner, into),
            Node::Member(inside, tuple, set) if matches!(**set, Node::Subset) => {
                let element = self.evaluator.tuple(tuple, &mut self.env)?[0];
                self.belongs(element, *inside, into);
                Ok(())
            }
            Node::Sets(relation, a, b) => self.sets(*relation, a, b, into),
            Node::Clique(set, edges) if matches!(**set, Node::Subset) => {
                let edges = self.evaluator.set(edges, &mut self.env)?;
                let pairs = edges.iter().map(|pair| (self.label(pair[0]), self.label(pair[1])));
                into.others.push(SubsetCondition::Clique(pairs.collect()));
                Ok(())
            }
            Node::Any(items) => self.meets_one(items, into),
            _ => fail(message::condition(into.span)),
        }
    }

    fn negated(&mut self, inner: &Node, into: &mut Gathered<'_>) -> Evaluated<()> {
        let turned = match inner {
            Node::Member(inside, tuple, set) => Node::Member(!inside, tuple.clone(), set.clone()),
            Node::Parity(odd, inner, span) => Node::Parity(!odd, inner.clone(), *span),
            Node::Sets(Relation::Equal, a, b) => {
                Node::Sets(Relation::NotEqual, a.clone(), b.clone())
            }
            _ => return fail(message::condition(into.span)),
        };
        self.condition(&turned, into)
    }

    fn belongs(&mut self, element: Element, inside: bool, into: &mut Gathered<'_>) {
        match (into.ground.contains(&[element]), inside) {
            (true, true) => into.others.push(SubsetCondition::Contains(self.label(element))),
            (true, false) => into.others.push(SubsetCondition::Avoids(self.label(element))),
            (false, true) => into.impossible = true,
            (false, false) => {}
        }
    }

    /// `i ∈ S ∨ j ∈ S`.
    fn meets_one(&mut self, items: &[Node], into: &mut Gathered<'_>) -> Evaluated<()> {
        let mut elements = Vec::with_capacity(items.len());
        for item in items {
            let Node::Member(true, tuple, set) = item else {
                return fail(message::condition(into.span));
            };
            if !matches!(**set, Node::Subset) {
                return fail(message::condition(into.span));
            }
            elements.push(self.evaluator.tuple(tuple, &mut self.env)?[0]);
        }
        self.meets(&elements, into);
        Ok(())
    }

    fn meets(&mut self, elements: &[Element], into: &mut Gathered<'_>) {
        let known = elements.iter().filter(|&&e| into.ground.contains(&[e]));
        let labels: Vec<LabelId> = known.map(|&e| self.label(e)).collect();
        if labels.is_empty() {
            into.impossible = true;
        } else {
            into.others.push(SubsetCondition::Meets(labels));
        }
    }

    /// The weights and the constant of a number that depends on the subset.
    fn additive(&mut self, node: &Node, into: &Gathered<'_>) -> Evaluated<(Vec<Number>, Number)> {
        let mut form = Linear::default();
        self.evaluator.linear(node, &Scale::one(), &mut self.env, &mut form)?;
        if !form.rounded.is_empty() {
            return fail(message::condition(into.span));
        }
        weights(&form.loose, form.constant, into.ground)
            .map_or_else(|| fail(message::condition(into.span)), Ok)
    }

    /// `a mod 2 = 1`.
    fn remainder(
        &mut self,
        (relation, rest): (Relation, &Node),
        inner: &Node,
        two: &Node,
        into: &mut Gathered<'_>,
    ) -> Evaluated<()> {
        let two = self.evaluator.number(two, &mut self.env)?;
        let rest = self.evaluator.number(rest, &mut self.env)?;
        let bit = [Number::ZERO, Number::ONE].iter().position(|n| *n == rest);
        let equal = match relation {
            Relation::Equal => true,
            Relation::NotEqual => false,
            _ => return fail(message::condition(into.span)),
        };
        match bit {
            Some(bit) if two == Number::from(2) => self.parity((bit == 1) == equal, inner, into),
            _ => fail(message::condition(into.span)),
        }
    }

    fn parity(&mut self, odd: bool, inner: &Node, into: &mut Gathered<'_>) -> Evaluated<()> {
        let (weights, constant) = self.additive(inner, into)?;
        if weights.iter().any(|w| *w != Number::ONE) || !constant.is_int() {
            return fail(message::condition(into.span));
        }
        let shifted = constant.numerator() % 2_u8 != 0_u8;
        into.others.push(SubsetCondition::Odd(odd != shifted));
        Ok(())
    }

    fn comparison(
        &mut self,
        relation: Relation,
        a: &Node,
        b: &Node,
        into: &mut Gathered<'_>,
    ) -> Evaluated<()> {
        let difference = Node::Add(vec![(false, a.clone()), (true, b.clone())]);
        let (weights, constant) = self.additive(&difference, into)?;
        let first = weights.first().cloned().unwrap_or_default();
        let uniform = weights.iter().all(|w| *w == first) && !first.is_zero();
        if uniform || into.ground.is_empty() {
            let scale = if first.is_zero() { Number::ONE } else { first };
            let relation = if scale < Number::ZERO { relation.turned() } else { relation };
            return size(relation, &(-constant / scale), into);
        }
        // Σ w + constant ⋛ 0
        let negative = || weights.iter().map(|w| -w.clone()).collect::<Vec<_>>();
        let (weights, over) = match relation {
            Relation::Greater => (weights, -constant),
            Relation::AtLeast => {
                let over = just_below(&weights, &-constant);
                (weights, over)
            }
            Relation::Less => (negative(), constant),
            Relation::AtMost => {
                let weights = negative();
                let over = just_below(&weights, &constant);
                (weights, over)
            }
            _ => return fail(message::condition(into.span)),
        };
        let labels = into.ground.iter().map(|member| self.label(member[0])).collect::<Vec<_>>();
        let weights = labels.into_iter().zip(weights).collect();
        into.others.push(SubsetCondition::WeightOver { weights, over });
        Ok(())
    }

    /// `S ≠ ∅`, `S ∩ T ≠ ∅`, `T ⊆ S`, and their like.
    fn sets(
        &mut self,
        relation: Relation,
        a: &Node,
        b: &Node,
        into: &mut Gathered<'_>,
    ) -> Evaluated<()> {
        let (own, other, on_left) =
            match (self.evaluator.depends_on_subset(a), self.evaluator.depends_on_subset(b)) {
                (true, false) => (a, b, true),
                (false, true) => (b, a, false),
                _ => return fail(message::condition(into.span)),
            };
        let other = self.evaluator.set(other, &mut self.env)?;
        let own_bare = matches!(own, Node::Subset);
        let all: Vec<Element> = into.ground.iter().map(|member| member[0]).collect();
        match (relation, on_left) {
            (Relation::Equal | Relation::NotEqual, _) if other.is_empty() => {
                let members = self.evaluator.members_by_subset(own, &mut self.env)?;
                self.emptiness(&members, relation == Relation::NotEqual, into);
            }
            (Relation::NotEqual, _) if own_bare => {
                let whole =
                    other.len() == into.ground.len() && all.iter().all(|&e| other.contains(&[e]));
                if !whole {
                    return fail(message::condition(into.span));
                }
                into.at_most = into
                    .at_most
                    .min(u32::try_from(all.len()).unwrap_or(u32::MAX).saturating_sub(1));
            }
            (Relation::SubsetOrEqual, true) if own_bare => {
                for &element in all.iter().filter(|&&e| !other.contains(&[e])) {
                    self.belongs(element, false, into);
                }
            }
            (Relation::SubsetOrEqual, false) if own_bare => {
                for member in other.iter() {
                    self.belongs(member[0], true, into);
                }
            }
            _ => return fail(message::condition(into.span)),
        }
        Ok(())
    }

    /// A set whose members are in it by their membership in S is empty, or is not.
    fn emptiness(&mut self, members: &[(Element, bool)], wanted: bool, into: &mut Gathered<'_>) {
        if !wanted {
            for &(element, inside) in members {
                self.belongs(element, !inside, into);
            }
            return;
        }
        let in_s: Vec<Element> =
            members.iter().filter(|(_, inside)| *inside).map(|(e, _)| *e).collect();
        if in_s.len() == into.ground.len() && !into.ground.is_empty() {
            into.at_least = into.at_least.max(1);
        } else if in_s.len() == members.len() {
            self.meets(&in_s, into);
        } else if members.iter().all(|(e, _)| into.ground.contains(&[*e])) {
            // T ∖ S ≠ ∅: fewer than |T| of T are in S
            let weights: Vec<_> =
                members.iter().map(|&(e, _)| (self.label(e), -Number::ONE)).collect();
            let over = -Number::from(weights.len());
            into.others.push(SubsetCondition::WeightOver { weights, over });
        }
    }
}

/// `|S| ⋛ k`.
fn size(relation: Relation, bound: &Number, into: &mut Gathered<'_>) -> Evaluated<()> {
    let all = u32::try_from(into.ground.len()).unwrap_or(u32::MAX);
    let narrow =
        |n: IBig| if n < IBig::ZERO { None } else { Some(u32::try_from(n).unwrap_or(u32::MAX)) };
    let whole = bound.is_int();
    let (floor, ceiling) = (narrow(bound.floor()), narrow(bound.ceil()));
    let mut at_least = |n: Option<u32>| into.at_least = into.at_least.max(n.unwrap_or(0));
    match relation {
        Relation::AtLeast => at_least(ceiling),
        Relation::Greater => at_least(floor.map(|n| n.saturating_add(1))),
        Relation::AtMost | Relation::Less | Relation::Equal => {
            if relation == Relation::Equal {
                at_least(ceiling);
                into.impossible |= !whole;
            }
            let less = relation == Relation::Less && whole;
            match floor.and_then(|n| if less { n.checked_sub(1) } else { Some(n) }) {
                Some(n) => into.at_most = into.at_most.min(n),
                None => into.impossible = true,
            }
        }
        Relation::NotEqual => {
            let zero = *bound == Number::ZERO;
            if zero {
                at_least(Some(1));
            } else if *bound == Number::from(all) {
                into.at_most = into.at_most.min(all.saturating_sub(1));
            } else {
                return fail(message::condition(into.span));
            }
        }
        _ => return fail(message::condition(into.span)),
    }
    Ok(())
}

/// The greatest multiple of the weights' common step that is less than `bound`: a sum of
/// weights is at least `bound` exactly when it is more than that.
fn just_below(weights: &[Number], bound: &Number) -> Number {
    use dashu_int::ops::Gcd;
    let mut step = UBig::ONE;
    for weight in weights {
        let bottom = weight.denominator();
        step = &step / (&step).gcd(bottom) * bottom;
    }
    let scaled = (bound * Number::from(step.clone())).ceil() - IBig::ONE;
    Number::from_parts(scaled, step)
}
