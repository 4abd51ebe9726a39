//! Sums whose index does not stand in braces, as a PDF gives them: `∑ i ∈ I  a_i y_i`.

use super::{Parser, Read};
use crate::lex::token::Kind as T;
use crate::syntax::{Additive, Clause, Expression, Kind, Relation};

impl Parser<'_> {
    /// Whether the index of a sum stands here without braces.
    pub(super) fn at_plain_limits(&self) -> bool {
        let start = usize::from(self.peek() == T::Underscore);
        let after = match self.ahead(start) {
            T::Word => start + 1,
            T::LeftParen => {
                let close = (start..start + 12).find(|&k| self.ahead(k) == T::RightParen);
                close.map_or(start, |k| k + 1)
            }
            _ => return false,
        };
        matches!(self.ahead(after), T::In | T::Equal)
    }

    /// `i ∈ I ∖ {0}`, `(i,j) ∈ A`, `i = 1` before `^n`.
    pub(super) fn plain_limits(&mut self) -> Read<Clause> {
        let start = self.here();
        self.eat(T::Underscore);
        let left = if self.peek() == T::Word { self.bare_word() } else { self.primary()? };
        let relation = if self.peek() == T::In { Relation::In } else { Relation::Equal };
        self.bump();
        let mut right = self.primary()?;
        while self.peek() == T::Difference {
            self.bump();
            let other = self.primary()?;
            let span = right.span.to(other.span);
            let kind = Kind::Additive(Box::new(right), vec![(Additive::Difference, other)]);
            right = Expression { kind, span };
        }
        let kind = Kind::Chain(Box::new(left), vec![(relation, right)]);
        let item = self.make(kind, start);
        Ok(Clause { items: vec![item], such_that: Vec::new(), span: self.since(start) })
    }
}
