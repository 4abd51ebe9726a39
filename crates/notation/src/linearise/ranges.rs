//! The least and the greatest value of an expression, as expressions over the data, by the bounds
//! that the domain lines write.

use model::Number;

use super::Words;
use crate::check::line_bounds;
use crate::rewrite;
use crate::syntax::{
    Additive, Big, Expression, Formulation, Function, Kind, Line, Multiplicative, Name, NumberSet,
    Relation,
};

/// Least and greatest value.
pub(super) type Range = (Expression, Expression);

/// What the domain lines of a tree say.
pub(super) struct Ranges<'r> {
    pub(super) tree: &'r Formulation,
    pub(super) words: &'r Words,
}

/// What one line says of one variable.
struct Said<'t> {
    name: &'t Name,
    line: &'t Line,
    lower: Option<Expression>,
    upper: Option<Expression>,
    whole: bool,
}

impl Ranges<'_> {
    /// Whether an expression is a binary variable.
    pub(super) fn is_binary(&self, expression: &Expression) -> bool {
        let Kind::Name(name) = &expression.kind else { return false };
        let said = self.said(&name.text);
        let is = |end: &Option<Expression>, value: Number| {
            end.as_ref().and_then(rewrite::value) == Some(value)
        };
        let binary = |said: &Said<'_>| {
            said.whole && is(&said.lower, Number::ZERO) && is(&said.upper, Number::ONE)
        };
        name.superscript.is_none() && !said.is_empty() && said.iter().all(binary)
    }

    /// The range of a linear expression; `None` where a bound is missing.
    pub(super) fn of(&self, expression: &Expression) -> Option<Range> {
        if !self.words.hold(expression) {
            return Some((expression.clone(), expression.clone()));
        }
        match &expression.kind {
            Kind::Name(name) => self.variable(name),
            Kind::Negative(inner) => {
                let (low, high) = self.of(inner)?;
                Some((rewrite::negative(high), rewrite::negative(low)))
            }
            Kind::Additive(first, rest) => {
                let mut sum = self.of(first)?;
                for (operator, operand) in rest {
                    let (low, high) = self.of(operand)?;
                    sum = match operator {
                        Additive::Plus => {
                            (rewrite::add(sum.0, false, low), rewrite::add(sum.1, false, high))
                        }
                        Additive::Minus => {
                            (rewrite::add(sum.0, true, high), rewrite::add(sum.1, true, low))
                        }
                        Additive::Union | Additive::Difference => return None,
                    };
                }
                Some(sum)
            }
            Kind::Multiplicative(first, rest) => self.product(first, rest),
            Kind::Big(Big::Sum, clause, body) => {
                let (low, high) = self.of(body)?;
                let sum = |end: Expression| {
                    if rewrite::value(&end).is_some_and(|value| value.is_zero()) {
                        return end;
                    }
                    let kind = Kind::Big(Big::Sum, clause.clone(), Box::new(end));
                    Expression { kind, span: expression.span }
                };
                Some((sum(low), sum(high)))
            }
            _ => None,
        }
    }

    /// One factor with variables, the others data.
    fn product(&self, first: &Expression, rest: &[(Multiplicative, Expression)]) -> Option<Range> {
        let mut data = rewrite::number(&Number::ONE);
        let mut range = None;
        let all = std::iter::once((Multiplicative::Times, first))
            .chain(rest.iter().map(|(o, e)| (*o, e)));
        for (operator, factor) in all {
            if operator != Multiplicative::Times {
                return None;
            }
            if self.words.hold(factor) {
                if range.is_some() {
                    return None;
                }
                range = Some(self.of(factor)?);
            } else {
                data = rewrite::times(data, factor.clone());
            }
        }
        let (low, high) = range?;
        let (low, high) = (rewrite::times(data.clone(), low), rewrite::times(data.clone(), high));
        Some(match rewrite::value(&data) {
            Some(value) if value >= Number::ZERO => (low, high),
            Some(_) => (high, low),
            None => (least(vec![low.clone(), high.clone()]), greatest(vec![low, high])),
        })
    }

    /// The bounds of a variable at its indices.
    fn variable(&self, name: &Name) -> Option<Range> {
        if name.superscript.is_some() {
            return None;
        }
        let said = self.said(&name.text);
        let first = said.first()?;
        let same = |other: &Said<'_>| {
            rewrite::quantifier(&other.line.clauses) == rewrite::quantifier(&first.line.clauses)
                && other.name.indices == first.name.indices
        };
        if said.iter().all(same) {
            let low = said.iter().find_map(|one| one.lower.clone())?;
            let high = said.iter().find_map(|one| one.upper.clone())?;
            return Some((moved(&low, first.name, name)?, moved(&high, first.name, name)?));
        }
        let mut ends: (Vec<Expression>, Vec<Expression>) = Default::default();
        for one in said {
            let (low, high) = (one.lower.clone()?, one.upper.clone()?);
            let fixed = |e: &Expression| one.name.indices.iter().all(|i| !depends(e, i));
            if !fixed(&low) || !fixed(&high) {
                return None;
            }
            ends.0.push(low);
            ends.1.push(high);
        }
        Some((least(ends.0), greatest(ends.1)))
    }

    /// What each line without a label says of a variable's bounds.
    fn said(&self, variable: &str) -> Vec<Said<'_>> {
        let lines = self.tree.statements.iter().filter(|line| line.label.is_none());
        let mut found = Vec::new();
        for line in lines {
            for (operand, bounds) in line_bounds(line) {
                let Kind::Name(name) = &operand.kind else { continue };
                let foreign = bounds.iter().any(|(_, bound)| self.words.hold(bound));
                if name.text != variable || foreign {
                    continue;
                }
                let mut said = Said { name, line, lower: None, upper: None, whole: false };
                for (relation, bound) in bounds {
                    said.take(relation, bound);
                }
                found.push(said);
            }
        }
        found
    }
}

impl Said<'_> {
    fn take(&mut self, relation: Relation, bound: &Expression) {
        let zero = || rewrite::number(&Number::ZERO);
        match (relation, &bound.kind) {
            (Relation::AtMost, Kind::Infinity) => {}
            (Relation::AtMost, _) => self.upper = Some(bound.clone()),
            (Relation::AtLeast, Kind::Negative(inner)) if inner.kind == Kind::Infinity => {}
            (Relation::AtLeast, _) => self.lower = Some(bound.clone()),
            (Relation::Equal, _) => {
                self.lower = Some(bound.clone());
                self.upper = Some(bound.clone());
            }
            (Relation::In, Kind::Interval(from, to)) => {
                self.take(Relation::AtLeast, from);
                self.take(Relation::AtMost, to);
            }
            (Relation::In, Kind::Range(from, to)) => {
                self.whole = true;
                self.take(Relation::AtLeast, from);
                self.take(Relation::AtMost, to);
            }
            (Relation::In, Kind::Set(items)) => {
                let mut values: Vec<Number> = items.iter().filter_map(rewrite::value).collect();
                values.sort();
                self.whole = values.len() == items.len();
                self.lower = values.first().map(rewrite::number).filter(|_| self.whole);
                self.upper = values.last().map(rewrite::number).filter(|_| self.whole);
            }
            (Relation::In, Kind::NumberSet(set)) => match set {
                NumberSet::Binary => {
                    self.whole = true;
                    self.lower = Some(zero());
                    self.upper = Some(rewrite::number(&Number::ONE));
                }
                NumberSet::RealNonNegative | NumberSet::IntegerNonNegative => {
                    self.lower = Some(zero());
                }
                NumberSet::IntegerPositive => self.lower = Some(rewrite::number(&Number::ONE)),
                NumberSet::Real | NumberSet::Integer => {}
            },
            _ => {}
        }
    }
}

/// A bound with the indices of the use for those of the domain line.
fn moved(bound: &Expression, from: &Name, to: &Name) -> Option<Expression> {
    if from.indices == to.indices || from.indices.iter().all(|index| !depends(bound, index)) {
        return Some(bound.clone());
    }
    if from.indices.len() != to.indices.len() {
        return None;
    }
    Some(rewrite::map(bound, &mut |e| {
        let at = from.indices.iter().position(|index| index == e)?;
        Some(to.indices[at].clone())
    }))
}

/// Whether a bound mentions a letter of an index.
fn depends(bound: &Expression, index: &Expression) -> bool {
    match &index.kind {
        Kind::Name(name) => {
            let letters: Vec<String> = name.text.chars().map(String::from).collect();
            rewrite::mentions(bound, &name.text)
                || letters.iter().any(|l| rewrite::mentions(bound, l))
        }
        _ => false,
    }
}

fn ends(function: Function, mut items: Vec<Expression>, least: bool) -> Expression {
    items.dedup();
    let values: Option<Vec<Number>> = items.iter().map(rewrite::value).collect();
    if let Some(value) =
        values.and_then(|v| if least { v.into_iter().min() } else { v.into_iter().max() })
    {
        return rewrite::number(&value);
    }
    match items.pop() {
        Some(only) if items.is_empty() => only,
        Some(last) => {
            items.push(last);
            Expression {
                kind: Kind::Function(function, items),
                span: crate::place::Span::default(),
            }
        }
        None => rewrite::number(&Number::ZERO),
    }
}

/// `min(a, b)`.
pub(super) fn least(items: Vec<Expression>) -> Expression {
    ends(Function::Minimum, items, true)
}

/// `max(a, b)`.
pub(super) fn greatest(items: Vec<Expression>) -> Expression {
    ends(Function::Maximum, items, false)
}
