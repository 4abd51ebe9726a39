//! Quantifiers: `∀ i ∈ I, j ∈ J : i ≠ j`, the subscripts of sums, and lists with dots.

use super::{Parser, Read, Surroundings};
use crate::diagnostic::syntax as message;
use crate::lex::token::{Gap, Kind as T};
use crate::syntax::{Clause, Expression, Kind, Relation};
use model::Number;

impl Parser<'_> {
    /// The clauses at the end of a line: after `∀`, a comma or `\quad`.
    pub(super) fn clauses(&mut self) -> Read<Vec<Clause>> {
        let mut clauses = Vec::new();
        let place = Surroundings { quad_ends: true, ..self.place };
        loop {
            let before = self.at;
            let comma = self.eat(T::Comma);
            let all = self.eat(T::ForAll);
            let quad = self.gap().has(Gap::QUAD);
            if matches!(self.peek(), T::End | T::Period) || !(comma || all || quad) {
                return Ok(clauses);
            }
            clauses.push(self.within(place, Self::clause)?);
            debug_assert!(self.at > before, "a clause must move on");
        }
    }

    /// Items, then perhaps a colon and conditions.
    pub(super) fn clause(&mut self) -> Read<Clause> {
        let start = self.here();
        let items = self.items()?;
        let mut such_that = Vec::new();
        if matches!(self.peek(), T::Colon | T::SuchThat) || self.separating_bar() {
            self.bump();
            such_that = self.items()?;
        }
        Ok(Clause { items, such_that, span: self.since(start) })
    }

    pub(super) fn separating_bar(&self) -> bool {
        self.place.bar_separates && self.peek() == T::Bar
    }

    /// Conditions separated by commas (or `\quad`), dots folded.
    pub(super) fn items(&mut self) -> Read<Vec<Expression>> {
        let mut items = Vec::new();
        loop {
            let before = self.at;
            if self.eat(T::Dots) {
                self.eat(T::Comma);
                let last = self.range()?;
                self.fold_dots(&mut items, last)?;
            } else {
                items.push(self.condition()?);
            }
            debug_assert!(self.at > before, "an item must move on");
            let comma = self.eat(T::Comma);
            let more = !matches!(self.peek(), T::End | T::ForAll | T::Period)
                && !self.peek().closes()
                && (comma
                    || self.place.quad_ends
                        && self.gap().has(Gap::QUAD)
                        && self.peek() != T::Colon);
            if !more {
                return Ok(items);
            }
        }
    }

    /// `i = 1, …, n` is `i ∈ {1..n}`; `{1, …, n}` is `{1..n}`; a second number must be the next.
    fn fold_dots(&mut self, items: &mut Vec<Expression>, last: Expression) -> Read<()> {
        let second = if items.len() > 1 && matches!(items[items.len() - 1].kind, Kind::Number(_)) {
            items.pop()
        } else {
            None
        };
        let Some(first) = items.pop() else {
            return Err(self.expected("a number before the dots"));
        };
        let span = first.span.to(last.span);
        let (index, from) = match first.kind {
            Kind::Chain(index, mut links) if links.len() == 1 && links[0].0 == Relation::Equal => {
                (Some(index), links.remove(0).1)
            }
            kind => (None, Expression { kind, span: first.span }),
        };
        if let Some(second) = second
            && !follows(&from, &second)
        {
            return Err(self.report(message::not_consecutive(second.span)));
        }
        let range = Expression { kind: Kind::Range(Box::new(from), Box::new(last)), span };
        items.push(match index {
            Some(index) => {
                Expression { kind: Kind::Chain(index, vec![(Relation::In, range)]), span }
            }
            None => range,
        });
        Ok(())
    }

    /// The clause under a sum, with its upper limit folded in.
    pub(super) fn limits(&mut self) -> Read<Clause> {
        let start = self.here();
        let mut lower = None;
        let mut upper = None;
        for _ in 0..2 {
            if lower.is_none() && self.eat(T::Underscore) {
                lower = Some(self.grouped(Self::clause)?);
            } else if upper.is_none() && self.eat(T::Caret) {
                upper = Some(self.grouped(Self::additive)?);
            }
        }
        let Some(mut clause) = lower else {
            return Err(self.expected("“_” and the index of the sum"));
        };
        if let Some(upper) = upper {
            let last = clause.items.pop();
            match last.map(|e| e.kind) {
                Some(Kind::Chain(index, mut links))
                    if links.len() == 1 && links[0].0 == Relation::Equal =>
                {
                    let span = self.since(start);
                    let from = links.remove(0).1;
                    let range =
                        Expression { kind: Kind::Range(Box::new(from), Box::new(upper)), span };
                    let kind = Kind::Chain(index, vec![(Relation::In, range)]);
                    clause.items.push(Expression { kind, span });
                }
                _ => return Err(self.report(message::lower_limit(clause.span))),
            }
        }
        Ok(clause)
    }

    /// A braced group, or the single thing after `_` or `^`.
    pub(super) fn grouped<V>(&mut self, rule: impl Fn(&mut Self) -> Read<V>) -> Read<V> {
        if !self.eat(T::LeftBrace) {
            return self.single(rule);
        }
        let place = Surroundings { bar_separates: true, ..Surroundings::default() };
        let value = self.within(place, |p| p.nested(&rule))?;
        self.expect(T::RightBrace, "“}”")?;
        Ok(value)
    }

    /// One token as a whole group.
    fn single<V>(&mut self, rule: impl Fn(&mut Self) -> Read<V>) -> Read<V> {
        if !matches!(self.peek(), T::Word | T::Number) {
            return Err(self.expected("an index"));
        }
        let end = std::mem::replace(&mut self.end, self.at + 1);
        let value = self.within(Surroundings::default(), |p| p.nested(&rule));
        self.end = end;
        value
    }
}

fn follows(first: &Expression, second: &Expression) -> bool {
    match (&first.kind, &second.kind) {
        (Kind::Number(a), Kind::Number(b)) => a + Number::ONE == *b,
        _ => false,
    }
}
