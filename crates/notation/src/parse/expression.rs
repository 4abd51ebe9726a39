//! Expressions by rising precedence: ∨, ∧, ¬, relations, `..`, `+ − ∪ ∖`, products, sign, power.

use super::line::relation;
use super::{Parser, Read, Surroundings};
use crate::lex::token::{Gap, Kind as T};
use crate::syntax::{Additive, Expression, Kind, Multiplicative, Relation};

impl Parser<'_> {
    pub(super) fn make(&self, kind: Kind, start: crate::place::Span) -> Expression {
        Expression { kind, span: self.since(start) }
    }

    pub(super) fn condition(&mut self) -> Read<Expression> {
        self.nested(|p| {
            let start = p.here();
            let first = p.conjunction()?;
            let mut all = vec![first];
            while p.eat(T::Or) {
                all.push(p.conjunction()?);
            }
            Ok(match all.len() {
                1 => all.remove(0),
                _ => p.make(Kind::Any(all), start),
            })
        })
    }

    fn conjunction(&mut self) -> Read<Expression> {
        let start = self.here();
        let mut all = vec![self.negation()?];
        while self.eat(T::And) {
            all.push(self.negation()?);
        }
        Ok(match all.len() {
            1 => all.remove(0),
            _ => self.make(Kind::All(all), start),
        })
    }

    fn negation(&mut self) -> Read<Expression> {
        let start = self.here();
        if self.eat(T::Not) {
            let inner = self.nested(Self::negation)?;
            return Ok(self.make(Kind::Not(Box::new(inner)), start));
        }
        self.chain()
    }

    /// `a ≤ b < c`, `|S| odd`, `C clique in E`.
    fn chain(&mut self) -> Read<Expression> {
        let start = self.here();
        let first = self.range()?;
        let parity = match self.peek() {
            T::Odd => Some(true),
            T::Even => Some(false),
            T::Clique => return self.clique(first, start),
            _ => None,
        };
        if let Some(odd) = parity {
            self.bump();
            return Ok(self.make(Kind::Parity(Box::new(first), odd), start));
        }
        if self.peek() == T::Congruent {
            return self.congruence(first, start);
        }
        let mut links = Vec::new();
        if let Some(turned) = self.turned() {
            let whole = self.range()?;
            links.push((turned, first));
            return Ok(self.make(Kind::Chain(Box::new(whole), links), start));
        }
        while let Some(relation) = relation(self.peek()) {
            self.bump();
            links.push((relation, self.related(relation)?));
        }
        let first = match links.first() {
            Some((Relation::In, _)) => pair_of_edge(first),
            None => return Ok(first),
            _ => first,
        };
        let odd = match self.peek() {
            T::Odd => true,
            T::Even => false,
            _ => return Ok(self.make(Kind::Chain(Box::new(first), links), start)),
        };
        // |S| ≥ 3 odd
        let chain = self.make(Kind::Chain(Box::new(first.clone()), links), start);
        self.bump();
        let parity = self.make(Kind::Parity(Box::new(first), odd), start);
        Ok(self.make(Kind::All(vec![chain, parity]), start))
    }

    /// `⊇` and `⊃`, which are read from right to left.
    pub(super) fn turned(&mut self) -> Option<Relation> {
        let relation = match self.peek() {
            T::Superset => Relation::Subset,
            T::SupersetOrEqual => Relation::SubsetOrEqual,
            _ => return None,
        };
        self.bump();
        Some(relation)
    }

    /// The operand behind a relation; behind ∈ and ⊆, `[n]` is `{1..n}`.
    pub(super) fn related(&mut self, relation: Relation) -> Read<Expression> {
        let sets = matches!(
            relation,
            Relation::In | Relation::NotIn | Relation::Subset | Relation::SubsetOrEqual
        );
        let place = Surroundings { counts: sets || self.place.counts, ..self.place };
        self.within(place, Self::range)
    }

    fn clique(&mut self, first: Expression, start: crate::place::Span) -> Read<Expression> {
        self.bump();
        if self.tokens[self.at - 1].text.is_empty() {
            self.expect(T::In, "“in” and the graph")?;
        }
        let edges = self.range()?;
        Ok(self.make(Kind::Clique(Box::new(first), Box::new(edges)), start))
    }

    /// `a ≡ b (mod m)` is `a mod m = b`.
    fn congruence(&mut self, first: Expression, start: crate::place::Span) -> Read<Expression> {
        self.bump();
        let rest = self.unary()?;
        let bracket = self.eat(T::LeftParen);
        self.expect(T::Modulo, "“(mod m)”")?;
        let modulus = self.unary()?;
        if bracket {
            self.expect(T::RightParen, "“)”")?;
        }
        let parts = vec![(Multiplicative::Modulo, modulus)];
        let left = self.make(Kind::Multiplicative(Box::new(first), parts), start);
        Ok(self.make(Kind::Chain(Box::new(left), vec![(Relation::Equal, rest)]), start))
    }

    /// `a..b`.
    pub(super) fn range(&mut self) -> Read<Expression> {
        let start = self.here();
        let from = self.additive()?;
        if self.peek() == T::Dots && !matches!(self.ahead(1), T::Comma | T::End) {
            self.bump();
            let to = self.additive()?;
            return Ok(self.make(Kind::Range(Box::new(from), Box::new(to)), start));
        }
        Ok(from)
    }

    pub(super) fn additive(&mut self) -> Read<Expression> {
        let start = self.here();
        self.eat(T::Plus);
        let first = self.product()?;
        let mut rest = Vec::new();
        loop {
            let operator = match self.peek() {
                T::Plus => Additive::Plus,
                T::Minus => Additive::Minus,
                T::Union => Additive::Union,
                T::Difference => Additive::Difference,
                _ => break,
            };
            self.bump();
            rest.push((operator, self.product()?));
        }
        if rest.is_empty() {
            return Ok(first);
        }
        Ok(self.make(Kind::Additive(Box::new(first), rest), start))
    }

    /// A product up to the next `+`, `−` or relation; the body of a sum is one.
    pub(super) fn product(&mut self) -> Read<Expression> {
        let start = self.here();
        if self.eat(T::Minus) {
            let inner = self.nested(Self::product)?;
            return Ok(self.make(Kind::Negative(Box::new(inner)), start));
        }
        let first = self.unary()?;
        let mut rest = Vec::new();
        loop {
            let before = self.at;
            let operator = match self.peek() {
                T::Dot => Multiplicative::Times,
                T::Cross => Multiplicative::Cross,
                T::Slash => Multiplicative::Over,
                T::Intersection => Multiplicative::Intersection,
                T::Modulo => Multiplicative::Modulo,
                _ if self.juxtaposed() => {
                    rest.push((Multiplicative::Times, self.power()?));
                    debug_assert!(self.at > before, "a factor must move on");
                    continue;
                }
                _ => break,
            };
            self.bump();
            rest.push((operator, self.unary()?));
        }
        if rest.is_empty() {
            return Ok(first);
        }
        Ok(self.make(Kind::Multiplicative(Box::new(first), rest), start))
    }

    /// Whether the next token begins a factor without an operator.
    pub(super) fn juxtaposed(&self) -> bool {
        let gap = self.gap();
        if self.place.quad_ends && gap.has(Gap::QUAD) || self.place.wide_ends && gap.has(Gap::WIDE)
        {
            return false;
        }
        if self.place.quad_ends && self.at_wide_membership() {
            return false;
        }
        if self.at_number_word() || self.place.quad_ends && self.at_bracketed_clause() {
            return false;
        }
        match self.peek() {
            T::Bar => !self.place.bars && !self.place.bar_separates,
            T::LeftBrace => self.at_group(),
            T::Word
            | T::Number
            | T::LeftParen
            | T::LeftFloor
            | T::LeftCeiling
            | T::Sum
            | T::Product
            | T::Min
            | T::Max
            | T::Floor
            | T::Ceiling
            | T::Infinity
            | T::Fraction => true,
            _ => false,
        }
    }

    pub(super) fn unary(&mut self) -> Read<Expression> {
        let start = self.here();
        if self.eat(T::Minus) {
            let inner = self.nested(Self::unary)?;
            return Ok(self.make(Kind::Negative(Box::new(inner)), start));
        }
        self.power()
    }

    fn power(&mut self) -> Read<Expression> {
        let start = self.here();
        let base = self.primary()?;
        // a prime belongs to a name, and there it has been read
        if self.peek() == T::Caret && self.at_prime(1) {
            return Err(self.expected("an operator, and no prime behind what is no name"));
        }
        if self.eat(T::Caret) {
            // {0,1}^n, ℝ^{I × J}: how many there are is told by the indices
            if matches!(base.kind, Kind::Set(_) | Kind::Interval(..) | Kind::NumberSet(_))
                && self.peek() == T::LeftBrace
                && let Some(close) = self.closing(self.at).filter(|close| *close < self.end)
            {
                self.at = close + 1;
                return Ok(base);
            }
            let exponent = self.grouped(Self::additive)?;
            if matches!(base.kind, Kind::Set(_) | Kind::Interval(..) | Kind::NumberSet(_)) {
                return Ok(base);
            }
            return Ok(self.make(Kind::Power(Box::new(base), Box::new(exponent)), start));
        }
        Ok(base)
    }
}

/// `{i,j,k} ∈ H` is `(i,j,k) ∈ H`; of a pair either order may stand in the set.
fn pair_of_edge(left: Expression) -> Expression {
    match left.kind {
        Kind::Set(items)
            if items.len() > 2 && items.iter().all(|i| matches!(i.kind, Kind::Name(_))) =>
        {
            Expression { kind: Kind::Tuple(items), span: left.span }
        }
        _ => left,
    }
}
