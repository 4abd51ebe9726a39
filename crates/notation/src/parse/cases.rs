//! A right-hand side by cases: `= 1 if i = s, −1 if i = t, 0 otherwise`. Each case becomes a
//! statement of its own whose quantifier has the condition.

use super::{Parser, Read, Surroundings};
use crate::lex::cases::MARK;
use crate::lex::token::Kind as T;
use crate::syntax::{Clause, Expression, Kind, Line, Name, children_mut};

/// A value and its conditions; those of "otherwise" are that no other holds.
pub(super) type Case = (Expression, Vec<Expression>);

impl Parser<'_> {
    pub(super) fn at_mark(&self, kind: T) -> bool {
        self.peek() == kind && self.tokens[self.at].text == MARK
    }

    pub(super) fn at_cases(&self) -> bool {
        self.place.splits && self.at_mark(T::LeftBrace)
    }

    /// All cases; a mark stands for them until the statement is split.
    pub(super) fn cases(&mut self) -> Read<Expression> {
        let start = self.here();
        self.bump();
        let place = Surroundings { quad_ends: true, ..Surroundings::default() };
        let cases = self.within(place, |p| p.nested(Self::rows_of_cases))?;
        if !self.cases.is_empty() || cases.is_empty() {
            return Err(self.expected("one bracket of cases"));
        }
        self.cases = cases;
        Ok(self.make(Kind::Name(mark()), start))
    }

    fn rows_of_cases(&mut self) -> Read<Vec<Case>> {
        let mut cases: Vec<Case> = Vec::new();
        loop {
            let value = self.additive()?;
            self.eat(T::Comma);
            let _ = self.eat(T::SuchThat) || self.eat(T::ForAll);
            let other = matches!(self.peek(), T::Text | T::Word)
                && matches!(
                    self.tokens[self.at].text.trim_matches(['.', ',']),
                    "otherwise" | "else"
                );
            let conditions = if other {
                self.bump();
                cases.iter().map(|(_, conditions)| none_of(conditions)).collect()
            } else {
                self.items()?
            };
            cases.push((value, conditions));
            while matches!(self.peek(), T::Comma | T::Period) {
                self.bump();
            }
            if self.at_mark(T::RightBrace) {
                self.bump();
                return Ok(cases);
            }
            if !self.at_mark(T::SuchThat) {
                return Err(self.expected("a condition, or the next case"));
            }
            self.bump();
        }
    }

    /// One line for each case.
    pub(super) fn split_by_cases(&mut self, line: Line) -> Vec<Line> {
        if self.cases.is_empty() {
            return vec![line];
        }
        let split = |(value, conditions): Case| {
            let mut line = line.clone();
            let links = line.links.iter_mut().map(|(_, operand)| operand);
            for operand in line.left.iter_mut().chain(links) {
                put(operand, &value);
            }
            match line.clauses.last_mut() {
                Some(clause) => clause.such_that.extend(conditions),
                None => line.clauses.push(Clause {
                    items: conditions,
                    such_that: Vec::new(),
                    span: line.span,
                }),
            }
            line
        };
        std::mem::take(&mut self.cases).into_iter().map(split).collect()
    }
}

/// The name that stands for the cases; no text can hold it.
fn mark() -> Name {
    Name { text: "\u{0}".to_owned(), indices: Vec::new(), superscript: None }
}

/// Puts the value of a case where its mark stands.
fn put(expression: &mut Expression, value: &Expression) {
    if matches!(&expression.kind, Kind::Name(name) if *name == mark()) {
        expression.kind = value.kind.clone();
        return;
    }
    children_mut(&mut expression.kind).into_iter().for_each(|child| put(child, value));
}

/// Not all of the conditions.
fn none_of(conditions: &[Expression]) -> Expression {
    let span = conditions.first().map(|c| c.span).unwrap_or_default();
    let all = match conditions {
        [only] => only.clone(),
        _ => Expression { kind: Kind::All(conditions.to_vec()), span },
    };
    Expression { kind: Kind::Not(Box::new(all)), span }
}
