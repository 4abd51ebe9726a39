//! Domains in words: `x_{ij}` binary, `y ≥ 0` and integer, `z = 0` or 1.

use super::{Parser, Read};
use crate::lex::token::Kind as T;
use crate::syntax::{Expression, Kind, NumberSet, Relation};
use model::Number;

impl Parser<'_> {
    /// The set of numbers that a word at a place names.
    fn number_word(&self, at: usize) -> Option<NumberSet> {
        let token = self.tokens.get(at).filter(|_| at < self.end)?;
        if !matches!(token.kind, T::Word | T::Text) {
            return None;
        }
        let lower = token.text.to_lowercase();
        let mut words: Vec<&str> = lower.split([' ', ',', '.', '~']).collect();
        words.retain(|w| !matches!(*w, "" | "and" | "is" | "are" | "a" | "variable" | "variables"));
        Some(match words.join(" ").replace('-', "").as_str() {
            "binary" | "binaries" | "01" | "0/1" | "boolean" => NumberSet::Binary,
            "integer" | "integers" | "integral" | "int" => NumberSet::Integer,
            "nonnegative" => NumberSet::RealNonNegative,
            "nonnegative integer"
            | "integer nonnegative"
            | "nonnegative integers"
            | "nonnegative integral" => NumberSet::IntegerNonNegative,
            "real" | "continuous" => NumberSet::Real,
            _ => return None,
        })
    }

    pub(super) fn number_word_at(&self, at: usize) -> bool {
        self.number_word(at).is_some()
    }

    /// Whether a domain in words stands here; it is no factor.
    pub(super) fn at_number_word(&self) -> bool {
        self.place.splits && self.number_word(self.at).is_some()
    }

    /// `binary`, `and integer`, `free` as memberships.
    pub(super) fn domain_in_words(&mut self) -> Option<(Relation, Expression)> {
        let span = self.here();
        if self.eat(T::Free) {
            let kind = Kind::NumberSet(NumberSet::Real);
            return Some((Relation::In, Expression { kind, span }));
        }
        if !self.place.splits {
            return None;
        }
        let joined = usize::from(matches!(self.peek(), T::And | T::Comma));
        let set = self.number_word(self.at + joined)?;
        self.at += joined + 1;
        let span = self.tokens[self.at - 1].span;
        Some((Relation::In, Expression { kind: Kind::NumberSet(set), span }))
    }

    /// `= 0 or 1`, `= 0, 1` and `= (0,1)` are `∈ {0,1}`.
    pub(super) fn zero_or_one(
        &mut self,
        relation: Relation,
        operand: Expression,
    ) -> Read<(Relation, Expression)> {
        let digit = |e: &Expression, n: u32| e.kind == Kind::Number(Number::from(n));
        let member = matches!(relation, Relation::Equal | Relation::In) && self.place.splits;
        let pair = |items: &[Expression]| matches!(items, [a, b] if digit(a, 0) && digit(b, 1));
        if let (true, Kind::Tuple(items)) = (member, &operand.kind)
            && pair(items)
        {
            let kind = Kind::Set(items.clone());
            return Ok((Relation::In, Expression { kind, span: operand.span }));
        }
        if !member || !digit(&operand, 0) || self.ahead(1) != T::Number {
            return Ok((relation, operand));
        }
        let ends = matches!(self.ahead(2), T::End | T::Comma | T::ForAll | T::Period)
            || self.tokens[self.at + 2].gap.has(crate::lex::token::Gap::QUAD);
        let one = self.tokens[self.at + 1].span.of(self.text) == "1";
        let joins = match self.peek() {
            T::Or => true,
            T::Comma => ends,
            _ => false,
        };
        if !one || !joins {
            return Ok((relation, operand));
        }
        self.bump();
        let one = self.range()?;
        let span = operand.span.to(one.span);
        Ok((Relation::In, Expression { kind: Kind::Set(vec![operand, one]), span }))
    }
}
