//! Numbers in rationals.

use dashu_int::IBig;
use model::Number;

use super::{Environment, Evaluated, Evaluator, NUMBER_BITS, Value, fail, moderate};
use crate::diagnostic::{shapes, subsets};
use crate::place::Span;
use crate::plan::{Node, Step};
use crate::syntax::Big;

impl Evaluator {
    /// The value of a number without variables.
    pub(crate) fn number(&self, node: &Node, env: &mut Environment) -> Evaluated<Number> {
        match node {
            Node::Number(value) => Ok(value.clone()),
            Node::Negative(inner) => Ok(-self.number(inner, env)?),
            Node::Add(terms) => {
                let mut sum = Number::ZERO;
                for (minus, term) in terms {
                    let term = self.number(term, env)?;
                    sum = moderate(if *minus { sum - term } else { sum + term })?;
                }
                Ok(sum)
            }
            Node::Multiply(factors) => {
                let mut product = Number::ONE;
                for factor in factors {
                    product = moderate(product * self.number(factor, env)?)?;
                }
                Ok(product)
            }
            Node::Divide(a, b, span) => {
                let (a, b) = (self.number(a, env)?, self.number(b, env)?);
                if b.is_zero() { fail(shapes::division_by_zero(*span)) } else { Ok(a / b) }
            }
            Node::Modulo(a, b, span) => {
                let (a, b) = (self.number(a, env)?, self.number(b, env)?);
                if b.is_zero() {
                    return fail(shapes::division_by_zero(*span));
                }
                let whole = Number::from((&a / &b).floor());
                Ok(a - b * whole)
            }
            Node::Power(base, exponent, span) => {
                let (base, exponent) = (self.number(base, env)?, self.number(exponent, env)?);
                power(&base, &exponent, *span)
            }
            Node::Floor(inner) => Ok(Number::from(self.number(inner, env)?.floor())),
            Node::Ceiling(inner) => Ok(Number::from(self.number(inner, env)?.ceil())),
            Node::Absolute(inner) => {
                let value = self.number(inner, env)?;
                Ok(if value < Number::ZERO { -value } else { value })
            }
            Node::Least(items) => self.extreme(items, env, false),
            Node::Greatest(items) => self.extreme(items, env, true),
            Node::Size(set) => {
                if self.depends_on_subset(set) {
                    return fail(subsets::nonlinear(Span::default()));
                }
                Ok(Number::from(self.set(set, env)?.len()))
            }
            Node::Over(big, steps, body, span) => self.over((*big, *span), steps, body, env),
            _ => self.plain(node, env),
        }
    }

    /// Leaves: indices and symbols as numbers.
    fn plain(&self, node: &Node, env: &mut Environment) -> Evaluated<Number> {
        let (value, span) = match node {
            Node::Slot(slot) => (Value::Element(env[*slot]), Span::default()),
            Node::Symbol(id, indices, span) => (self.symbol(*id, indices, *span, env)?, *span),
            Node::Once(cell, inner) => (self.once_value(*cell, inner, env)?, Span::default()),
            Node::AsElement(inner, _) => return self.number(inner, env),
            Node::Variable(_, _, span) => return fail(shapes::not_constant("this", *span)),
            _ => return fail(shapes::expected("a number", "another value", Span::default())),
        };
        match value {
            Value::Number(number) => Ok(number),
            Value::Element(element) => {
                let pool = self.pool.borrow();
                match pool.whole(element) {
                    Some(whole) => Ok(Number::from(whole)),
                    None => fail(shapes::not_a_number(pool.name(element), span)),
                }
            }
            Value::Set(_) => fail(shapes::expected("a number", "a set", span)),
        }
    }

    fn extreme(&self, items: &[Node], env: &mut Environment, greatest: bool) -> Evaluated<Number> {
        let mut best: Option<Number> = None;
        for item in items {
            let value = self.number(item, env)?;
            let better =
                best.as_ref().is_none_or(|b| if greatest { value > *b } else { value < *b });
            if better {
                best = Some(value);
            }
        }
        best.map_or_else(|| fail(shapes::no_values(Span::default())), Ok)
    }

    fn over(
        &self,
        (big, span): (Big, Span),
        steps: &[Step],
        body: &Node,
        env: &mut Environment,
    ) -> Evaluated<Number> {
        let mut total: Option<Number> = None;
        self.each(steps, env, |this, env, guard| {
            if guard.value() != Some(true) {
                return fail(subsets::nonlinear(span));
            }
            let value = this.number(body, env)?;
            let next = match (total.take(), big) {
                (None, _) => value,
                (Some(sum), Big::Sum) => sum + value,
                (Some(product), Big::Product) => product * value,
                (Some(best), Big::Least) => best.min(value),
                // a union is a set, and never comes here
                (Some(best), Big::Greatest | Big::Union | Big::Intersection) => best.max(value),
            };
            total = Some(moderate(next)?);
            Ok(())
        })?;
        match (total, big) {
            (Some(total), _) => Ok(total),
            (None, Big::Sum) => Ok(Number::ZERO),
            (None, Big::Product) => Ok(Number::ONE),
            (None, _) => fail(shapes::no_values(span)),
        }
    }
}

fn power(base: &Number, exponent: &Number, span: Span) -> Evaluated<Number> {
    let whole = exponent.is_int();
    let size = i32::try_from(exponent.numerator().clone()).ok().filter(|_| whole);
    let Some(exponent) = size else { return fail(shapes::power(span)) };
    let steps = usize::try_from(exponent.unsigned_abs()).unwrap_or(usize::MAX);
    let bits =
        bit_length(base.numerator()).max(bit_length(&IBig::from(base.denominator().clone())));
    if bits.saturating_mul(steps) > NUMBER_BITS {
        return fail(shapes::power(span));
    }
    if exponent < 0 && base.is_zero() {
        return fail(shapes::division_by_zero(span));
    }
    let Ok(exponent) = isize::try_from(exponent) else { return fail(shapes::power(span)) };
    Ok(base.pow(exponent))
}

fn bit_length(number: &IBig) -> usize {
    use dashu_int::ops::BitTest;
    number.bit_len()
}
