//! Linear forms: terms on columns and constants, each with the guard under which it counts.

use model::Number;

use super::{Environment, Evaluated, Evaluator, Guard, fail, moderate};
use crate::diagnostic::{shapes, subsets};
use crate::place::Span;
use crate::plan::Node;

/// A linear form over the columns of a model.
#[derive(Debug, Default)]
pub(crate) struct Linear {
    /// Column, guard, coefficient.
    pub(crate) terms: Vec<(u32, Guard, Number)>,
    /// What always counts.
    pub(crate) constant: Number,
    /// Constants that depend on the subset.
    pub(crate) loose: Vec<(Guard, Number)>,
    /// Rounded sums of constants that depend on the subset.
    pub(crate) rounded: Vec<Rounded>,
}

/// `factor · ⌈constant + Σ loose⌉`.
#[derive(Debug, Clone)]
pub(crate) struct Rounded {
    pub(crate) factor: Number,
    pub(crate) constant: Number,
    pub(crate) loose: Vec<(Guard, Number)>,
}

/// What a piece of a form is multiplied by, and when it counts.
#[derive(Debug, Clone)]
pub(crate) struct Scale {
    factor: Number,
    guard: Guard,
}

impl Scale {
    /// As it stands.
    pub(crate) fn one() -> Self {
        Self { factor: Number::ONE, guard: Guard::ALWAYS }
    }

    pub(crate) fn minus_one() -> Self {
        Self::one().negative()
    }

    fn negative(&self) -> Self {
        Self { factor: -self.factor.clone(), guard: self.guard }
    }

    fn times(&self, factor: &Number) -> Self {
        let one = self.factor == Number::ONE;
        let factor = if one { factor.clone() } else { &self.factor * factor };
        Self { factor, guard: self.guard }
    }

    /// Also where `guard` holds.
    fn when(&self, guard: Guard) -> Option<Self> {
        Some(Self { factor: self.factor.clone(), guard: self.guard.and(guard)? })
    }
}

impl Evaluator {
    /// Adds `scale · node` to `into`.
    pub(crate) fn linear(
        &self,
        node: &Node,
        scale: &Scale,
        env: &mut Environment,
        into: &mut Linear,
    ) -> Evaluated<()> {
        match node {
            Node::Variable(number, indices, span) => {
                let column = self.column(*number, indices, *span, env)?;
                into.terms.push((column, scale.guard, scale.factor.clone()));
            }
            Node::Negative(inner) => self.linear(inner, &scale.negative(), env, into)?,
            Node::Add(terms) => {
                let negative = scale.negative();
                for (minus, term) in terms {
                    self.linear(term, if *minus { &negative } else { scale }, env, into)?;
                }
            }
            Node::Multiply(factors) => self.product(factors, scale, env, into)?,
            Node::Divide(over, under, span) => {
                let under = self.number(under, env)?;
                if under.is_zero() {
                    return fail(shapes::division_by_zero(*span));
                }
                self.linear(over, &scale.times(&(Number::ONE / under)), env, into)?;
            }
            Node::Over(crate::syntax::Big::Sum, steps, body, span) => {
                self.each(steps, env, |this, env, inner| match scale.when(inner) {
                    Some(scale) if scale.guard.value() == Some(false) => Ok(()),
                    Some(scale) => this.linear(body, &scale, env, into),
                    None => fail(subsets::nonlinear(*span)),
                })?;
            }
            Node::Size(set) if self.depends_on_subset(set) => self.size(set, scale, env, into)?,
            Node::Ceiling(inner) => self.ceiling(inner, (scale, &Scale::one()), env, into)?,
            Node::Floor(inner) => {
                self.ceiling(inner, (&scale.negative(), &Scale::minus_one()), env, into)?;
            }
            _ => {
                let value = self.number(node, env)? * &scale.factor;
                into.add(scale.guard, value);
                into.constant = moderate(std::mem::take(&mut into.constant))?;
            }
        }
        Ok(())
    }

    /// Adds `outer · ⌈inner · node⌉` to `into`.
    fn ceiling(
        &self,
        node: &Node,
        (outer, inner): (&Scale, &Scale),
        env: &mut Environment,
        into: &mut Linear,
    ) -> Evaluated<()> {
        let mut sum = Linear::default();
        self.linear(node, inner, env, &mut sum)?;
        let always = outer.guard.value() == Some(true);
        let additive = sum.terms.is_empty() && sum.rounded.is_empty();
        if sum.loose.is_empty() && additive {
            into.add(outer.guard, &outer.factor * Number::from(sum.constant.ceil()));
        } else if additive && always {
            let (constant, loose) = (sum.constant, sum.loose);
            into.rounded.push(Rounded { factor: outer.factor.clone(), constant, loose });
        } else {
            return fail(subsets::nonlinear(Span::default()));
        }
        Ok(())
    }

    /// A product has one factor at most that holds variables or depends on the subset, or
    /// guarded constants times terms.
    fn product(
        &self,
        factors: &[Node],
        scale: &Scale,
        env: &mut Environment,
        into: &mut Linear,
    ) -> Evaluated<()> {
        let (constant, open): (Vec<&Node>, Vec<&Node>) =
            factors.iter().partition(|f| self.is_plain(f));
        let mut scale = scale.clone();
        for node in constant {
            scale.factor = moderate(scale.factor * self.number(node, env)?)?;
        }
        match open[..] {
            [] => into.add(scale.guard, scale.factor),
            [only] => self.linear(only, &scale, env, into)?,
            [first, ref rest @ ..] => {
                let mut product = Linear::default();
                self.linear(first, &scale, env, &mut product)?;
                for node in rest {
                    let mut next = Linear::default();
                    self.linear(node, &Scale::one(), env, &mut next)?;
                    product = multiply(&product, &next)?;
                }
                into.terms.extend(product.terms);
                into.constant += product.constant;
                into.loose.extend(product.loose);
            }
        }
        Ok(())
    }

    /// Whether a factor is a number that neither variables nor the subset change.
    fn is_plain(&self, node: &Node) -> bool {
        match node {
            Node::Number(_)
            | Node::Slot(_)
            | Node::Symbol(..)
            | Node::Once(..)
            | Node::AsElement(..) => true,
            Node::Add(terms) => terms.iter().all(|(_, term)| self.is_plain(term)),
            Node::Multiply(factors) => factors.iter().all(|f| self.is_plain(f)),
            Node::Negative(inner) => self.is_plain(inner),
            Node::Divide(a, _, _) => self.is_plain(a),
            Node::Size(set) => !self.depends_on_subset(set),
            Node::Variable(..) | Node::Ceiling(_) | Node::Floor(_) => false,
            Node::Over(big, ..) => *big != crate::syntax::Big::Sum,
            _ => true,
        }
    }

    /// `|S|`, `|S ∩ T|`, `|S ∖ T|`, `|T ∖ S|`: one for each element that counts.
    fn size(
        &self,
        set: &Node,
        scale: &Scale,
        env: &mut Environment,
        into: &mut Linear,
    ) -> Evaluated<()> {
        for (element, inside) in self.members_by_subset(set, env)? {
            match scale.when(Guard::member(element, inside)) {
                Some(scale) => into.add(scale.guard, scale.factor),
                None => return fail(subsets::nonlinear(Span::default())),
            }
        }
        Ok(())
    }

    /// The elements that belong to a set made from `S` when they are in `S` (`true`) or not.
    pub(crate) fn members_by_subset(
        &self,
        set: &Node,
        env: &mut Environment,
    ) -> Evaluated<Vec<(super::Element, bool)>> {
        use crate::plan::SetOperator::{Difference, Intersection};
        let Some(ground) = &self.ground else { return fail(subsets::nonlinear(Span::default())) };
        let all = || ground.iter().map(|member| member[0]);
        match set {
            Node::Subset => Ok(all().map(|e| (e, true)).collect()),
            Node::SetOperation(operator @ (Difference | Intersection), a, b) => {
                let other = |node: &Node, env: &mut Environment| match self.depends_on_subset(node)
                {
                    true => fail(subsets::nonlinear(Span::default())),
                    false => self.set(node, env),
                };
                let within = *operator == Intersection;
                match (a.as_ref(), b.as_ref()) {
                    (Node::Subset, b) => {
                        let b = other(b, env)?;
                        Ok(all()
                            .filter(|&e| b.contains(&[e]) == within)
                            .map(|e| (e, true))
                            .collect())
                    }
                    (a, Node::Subset) => {
                        let a = other(a, env)?;
                        let a = a.iter().map(|member| member[0]);
                        Ok(a.map(|e| (e, within)).collect())
                    }
                    _ => fail(subsets::nonlinear(Span::default())),
                }
            }
            _ => fail(subsets::nonlinear(Span::default())),
        }
    }
}

impl Linear {
    pub(crate) fn add(&mut self, guard: Guard, value: Number) {
        match guard.value() {
            Some(true) => self.constant += value,
            Some(false) => {}
            None => self.loose.push((guard, value)),
        }
    }

    fn constants(&self) -> Vec<(Guard, Number)> {
        let mut all = self.loose.clone();
        if !self.constant.is_zero() {
            all.push((Guard::ALWAYS, self.constant.clone()));
        }
        all
    }
}

/// The product of two forms of which one holds no column.
fn multiply(a: &Linear, b: &Linear) -> Evaluated<Linear> {
    if !a.rounded.is_empty() || !b.rounded.is_empty() {
        return fail(subsets::nonlinear(Span::default()));
    }
    let mut product = Linear::default();
    let both =
        |p: Guard, q: Guard| p.and(q).map_or_else(|| fail(subsets::nonlinear(Span::default())), Ok);
    for (one, other) in [(a, b), (b, a)] {
        for (column, guard, coefficient) in &one.terms {
            for (when, value) in other.constants() {
                product.terms.push((*column, both(*guard, when)?, coefficient * value));
            }
        }
    }
    for (p, x) in a.constants() {
        for (q, y) in b.constants() {
            product.add(both(p, q)?, &x * y);
        }
    }
    Ok(product)
}
