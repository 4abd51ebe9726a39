//! What an expression is made of: numbers, names, brackets, sets, sums, functions.

use super::number::number;
use super::{Parser, Read, Surroundings};
use crate::diagnostic::syntax as message;
use crate::lex::token::Kind as T;
use crate::syntax::{Big, Expression, Function, Kind, Multiplicative, NumberSet};

impl Parser<'_> {
    pub(super) fn primary(&mut self) -> Read<Expression> {
        let start = self.here();
        match self.peek() {
            T::Number => self.number(),
            T::Word if !self.at_prime(0) => self.name(),
            T::LeftParen => self.parenthesis(),
            T::LeftBracket => self.interval(),
            T::LeftWhole => self.whole_numbers(),
            T::Bar => self.bars(),
            T::LeftFloor => self.between(Function::Floor, T::RightFloor, "“⌋”"),
            T::LeftCeiling => self.between(Function::Ceiling, T::RightCeiling, "“⌉”"),
            T::Floor => self.function(Function::Floor),
            T::Ceiling => self.function(Function::Ceiling),
            T::Min if self.ahead(1) != T::Underscore => self.function(Function::Minimum),
            T::Max if self.ahead(1) != T::Underscore => self.function(Function::Maximum),
            T::Min => self.big(Big::Least),
            T::Max => self.big(Big::Greatest),
            T::Sum => self.big(Big::Sum),
            T::Product => self.big(Big::Product),
            T::BigUnion => self.big(Big::Union),
            T::BigIntersection => self.big(Big::Intersection),
            T::LeftBrace if self.at_group() => self.group(),
            T::LeftBrace if self.at_cases() => self.cases(),
            T::Fraction => self.fraction(),
            T::EmptySet => {
                self.bump();
                Ok(self.make(Kind::EmptySet, start))
            }
            T::Infinity => {
                self.bump();
                Ok(self.make(Kind::Infinity, start))
            }
            T::Naturals | T::Integers | T::Reals | T::Binaries => self.number_set(),
            T::LeftBrace => self.braces(),
            _ => Err(self.expected("an expression")),
        }
    }

    fn number(&mut self) -> Read<Expression> {
        let token = &self.tokens[self.at];
        let span = token.span;
        let text = if token.text.is_empty() { span.of(self.text) } else { &token.text };
        let Some(value) = number(text) else {
            return Err(self.report(message::number_too_long(span)));
        };
        self.bump();
        Ok(Expression { kind: Kind::Number(value), span })
    }

    fn parenthesis(&mut self) -> Read<Expression> {
        let start = self.here();
        self.bump();
        let mut items = self.bracketed(T::RightParen, "“)”")?;
        Ok(match items.len() {
            1 => Expression { span: self.since(start), ..items.remove(0) },
            _ => self.make(Kind::Tuple(items), start),
        })
    }

    /// Whether a name in braces of TeX stands here, with what hangs on it: `{x}_{ij}`.
    pub(super) fn at_group(&self) -> bool {
        self.peek() == T::LeftBrace
            && self.ahead(1) == T::Word
            && self.ahead(2) == T::RightBrace
            && matches!(self.ahead(3), T::Underscore | T::Caret)
    }

    fn group(&mut self) -> Read<Expression> {
        let word = self.tokens[self.at + 1].clone();
        self.at += 2;
        // the name is read as if it stood where its group ends
        let brace = std::mem::replace(&mut self.tokens[self.at], word);
        let name = self.name();
        debug_assert!(brace.kind == T::RightBrace, "it closes the group");
        name
    }

    /// `{a, b}`, `{a..b}`, `{i ∈ V : cond}`.
    fn braces(&mut self) -> Read<Expression> {
        let start = self.here();
        self.bump();
        if self.eat(T::RightBrace) {
            return Ok(self.make(Kind::EmptySet, start));
        }
        let place = Surroundings { bar_separates: true, ..Surroundings::default() };
        let clause = self.within(place, |p| p.nested(Self::clause))?;
        self.expect(T::RightBrace, "“}”")?;
        let mut items = clause.items;
        if !clause.such_that.is_empty() {
            if items.len() != 1 {
                return Err(self.report(message::expected(
                    clause.span,
                    "one member before the colon",
                    "several",
                )));
            }
            let kind = Kind::Builder(Box::new(items.remove(0)), clause.such_that);
            return Ok(self.make(kind, start));
        }
        if items.len() == 1 && matches!(items[0].kind, Kind::Range(..)) {
            return Ok(Expression { span: self.since(start), ..items.remove(0) });
        }
        Ok(self.make(Kind::Set(items), start))
    }

    fn interval(&mut self) -> Read<Expression> {
        let start = self.here();
        let operand = self.at > 0 && wants_set(self.tokens[self.at - 1].kind);
        self.bump();
        let mut ends = self.bracketed(T::RightBracket, "“]”")?;
        if let ([_], true) = (&ends[..], self.place.counts && operand && self.ends_set())
            && let Some(last) = ends.pop()
        {
            let one = Expression { kind: Kind::Number(model::Number::ONE), span: start };
            return Ok(self.make(Kind::Range(Box::new(one), Box::new(last)), start));
        }
        match (ends.pop(), ends.pop(), ends.is_empty()) {
            (Some(b), Some(a), true) => {
                Ok(self.make(Kind::Interval(Box::new(a), Box::new(b)), start))
            }
            (Some(only), None, true) => Ok(Expression { span: self.since(start), ..only }),
            _ => {
                let span = self.since(start);
                Err(self.report(message::expected(span, "two ends of an interval", "more")))
            }
        }
    }

    /// `⟦1,n⟧` is `{1..n}`, as is `⟦n⟧`.
    fn whole_numbers(&mut self) -> Read<Expression> {
        let start = self.here();
        self.bump();
        let mut ends = self.bracketed(T::RightWhole, "“⟧”")?;
        let one = || Expression { kind: Kind::Number(model::Number::ONE), span: start };
        match (ends.pop(), ends.pop(), ends.is_empty()) {
            (Some(range), None, true) if matches!(range.kind, Kind::Range(..)) => {
                Ok(Expression { span: self.since(start), ..range })
            }
            (Some(last), first, true) => {
                let first = first.unwrap_or_else(one);
                Ok(self.make(Kind::Range(Box::new(first), Box::new(last)), start))
            }
            _ => {
                let span = self.since(start);
                Err(self.report(message::expected(span, "two ends of a range", "more")))
            }
        }
    }

    /// Whether a set may end here: what follows computes nothing with it.
    fn ends_set(&self) -> bool {
        let numbers = matches!(self.peek(), T::Plus | T::Minus | T::Dot | T::Slash | T::Caret);
        !numbers && !self.juxtaposed()
    }

    fn bars(&mut self) -> Read<Expression> {
        let start = self.here();
        self.bump();
        let place = Surroundings { bars: true, ..Surroundings::default() };
        let inner = self.within(place, |p| p.nested(Self::additive))?;
        self.expect(T::Bar, "“|”")?;
        Ok(self.make(Kind::Function(Function::Bars, vec![inner]), start))
    }

    fn between(&mut self, function: Function, close: T, wanted: &str) -> Read<Expression> {
        let start = self.here();
        self.bump();
        let inner = self.within(Surroundings::default(), |p| p.nested(Self::additive))?;
        self.expect(close, wanted)?;
        Ok(self.make(Kind::Function(function, vec![inner]), start))
    }

    /// `max(a, b)`, `max{a, b}`, `floor(a)`.
    fn function(&mut self, function: Function) -> Read<Expression> {
        let start = self.here();
        self.bump();
        let (close, wanted) = match self.peek() {
            T::LeftParen => (T::RightParen, "“)”"),
            T::LeftBrace => (T::RightBrace, "“}”"),
            _ => return Err(self.expected("“(”")),
        };
        self.bump();
        let items = self.bracketed(close, wanted)?;
        let one = matches!(function, Function::Floor | Function::Ceiling);
        if one && items.len() != 1 {
            let span = self.since(start);
            return Err(self.report(message::expected(span, "one number", "several")));
        }
        Ok(self.make(Kind::Function(function, items), start))
    }

    fn big(&mut self, big: Big) -> Read<Expression> {
        let start = self.here();
        self.bump();
        let clause = self.within(Surroundings::default(), |p| p.nested(Self::limits))?;
        let body = self.nested(Self::product)?;
        Ok(self.make(Kind::Big(big, clause, Box::new(body)), start))
    }

    fn fraction(&mut self) -> Read<Expression> {
        let start = self.here();
        self.bump();
        let over = self.grouped(Self::additive)?;
        let under = self.grouped(Self::additive)?;
        Ok(self
            .make(Kind::Multiplicative(Box::new(over), vec![(Multiplicative::Over, under)]), start))
    }

    /// `ℝ`, `ℤ_+`, `ℤ_{≥0}`, `ℕ`.
    fn number_set(&mut self) -> Read<Expression> {
        let start = self.here();
        let kind = self.peek();
        self.bump();
        let mut sign = None;
        while matches!(self.peek(), T::Underscore | T::Caret) {
            let braced = usize::from(self.ahead(1) == T::LeftBrace);
            let [first, second] = [self.ahead(1 + braced), self.ahead(2 + braced)];
            let found = match [first, second] {
                [T::Plus, _] => Some(T::Plus),
                [T::AtLeast | T::Greater, T::Number] => Some(first),
                [T::Number, _] if kind == T::Naturals => Some(T::Number),
                _ => None,
            };
            let raised = self.peek() == T::Caret;
            let close = if braced == 1 { self.closing(self.at + 1) } else { Some(self.at + 1) };
            let Some(close) = close.filter(|close| *close < self.end) else {
                return Err(self.expected("“+”, “≥0” or “>0”"));
            };
            if found.is_none() && !raised {
                self.bump();
                return Err(self.expected("“+”, “≥0” or “>0”"));
            }
            if matches!(found, Some(T::AtLeast | T::Greater | T::Number)) {
                let at = self.at + 1 + braced + usize::from(found != Some(T::Number));
                let token = &self.tokens[at];
                let text =
                    if token.text.is_empty() { token.span.of(self.text) } else { &token.text };
                if text != "0" {
                    self.at = at;
                    return Err(self.expected("0 as the bound"));
                }
            }
            // a dimension (ℝ^n) says nothing that the indices do not say
            sign = found.or(sign);
            self.at = close + 1;
        }
        let set = match (kind, sign) {
            (T::Binaries, None) => NumberSet::Binary,
            (T::Naturals, _) | (T::Integers, Some(T::Plus | T::AtLeast)) => {
                NumberSet::IntegerNonNegative
            }
            (T::Integers, Some(T::Greater)) => NumberSet::IntegerPositive,
            (T::Integers, _) => NumberSet::Integer,
            (T::Reals, Some(T::Plus | T::AtLeast)) => NumberSet::RealNonNegative,
            (T::Reals, None) => NumberSet::Real,
            _ => {
                let span = self.since(start);
                return Err(self.report(message::expected(
                    span,
                    "a closed set of numbers",
                    "an open one",
                )));
            }
        };
        Ok(self.make(Kind::NumberSet(set), start))
    }
}

/// Whether a set may stand behind a token of a membership.
fn wants_set(kind: T) -> bool {
    kind.is_relation()
        || matches!(kind, T::Cross | T::Union | T::Intersection | T::Difference | T::LeftBrace)
}
