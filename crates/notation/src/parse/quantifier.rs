//! Quantifiers: `∀ i ∈ I, j ∈ J : i ≠ j`, the subscripts of sums, and lists with dots.

use super::{Parser, Read, Surroundings};
use crate::diagnostic::syntax as message;
use crate::lex::token::{Gap, Kind as T};
use crate::syntax::{Clause, Expression, Kind, Line, Relation};
use model::Number;

impl Parser<'_> {
    /// The clauses at the end of a line: after `∀`, a comma or `\quad`.
    pub(super) fn clauses(&mut self) -> Read<Vec<Clause>> {
        let mut clauses = Vec::new();
        let place = Surroundings { quad_ends: true, ..self.place };
        loop {
            let before = self.at;
            if self.statement_at(self.at + self.joint()) {
                return Ok(clauses);
            }
            let comma = usize::from(self.eat(T::Comma));
            let all = self.eat(T::ForAll);
            let quad = self.gap().has(Gap::QUAD) || self.at_wide_membership();
            let condition = self.peek() == T::SuchThat;
            let bracketed = self.at_bracketed_clause();
            let opens = comma == 1 || all || quad || condition || bracketed;
            if matches!(self.peek(), T::End | T::Period) || !opens {
                return Ok(clauses);
            }
            if condition || bracketed {
                self.bump();
            }
            let inner = if bracketed { Surroundings::default() } else { place };
            clauses.push(self.within(inner, Self::clause)?);
            if bracketed {
                self.expect(T::RightParen, "“)”")?;
            }
            debug_assert!(self.at > before, "a clause must move on");
        }
    }

    /// Whether a membership stands here behind a relation, set apart by spaces alone:
    /// `x_i ≥ 0      i ∈ I`, `i = 1,…,n`, `(i,j) ∈ A`.
    pub(super) fn at_wide_membership(&self) -> bool {
        if !self.place.splits || !self.gap().has(Gap::WIDE) {
            return false;
        }
        let mut after = match self.peek() {
            T::Word => 1,
            T::LeftParen => match self.closing(self.at) {
                Some(close) => close + 1 - self.at,
                None => return false,
            },
            _ => return false,
        };
        while self.ahead(after) == T::Comma && self.ahead(after + 1) == T::Word {
            after += 2;
        }
        match self.ahead(after) {
            T::In => true,
            T::Equal => (after + 1..after + 10).any(|k| self.ahead(k) == T::Dots),
            _ => false,
        }
    }

    /// Whether a whole quantifier in brackets stands here: `(i ∈ I; j ∈ J)`, not `(i,j) ∈ A`.
    pub(super) fn at_bracketed_clause(&self) -> bool {
        if self.peek() != T::LeftParen {
            return false;
        }
        let mut depth = 0_u32;
        let mut found = false;
        for (i, token) in self.tokens[self.at..self.end].iter().enumerate() {
            if token.kind.opens() {
                depth += 1;
            } else if token.kind.closes() {
                depth = depth.saturating_sub(1);
            }
            let binds = token.kind.is_relation() || matches!(token.kind, T::Dots | T::ForAll);
            found |= depth == 1 && binds;
            if depth == 0 {
                // (a ∨ b) ∧ c is one condition
                let next = self.ahead(i + 1);
                return found && !next.is_operator() && !next.is_relation();
            }
        }
        false
    }

    /// Items, then perhaps a colon and conditions.
    pub(super) fn clause(&mut self) -> Read<Clause> {
        let start = self.here();
        if self.eat(T::ForAll) || self.at > 0 && self.tokens[self.at - 1].kind == T::ForAll {
            self.skip_nouns();
        }
        let mut distinct = self.eat_distinct();
        let items = self.items()?;
        distinct |= self.eat_distinct();
        let mut such_that = if distinct { pairwise_different(&items) } else { Vec::new() };
        if matches!(self.peek(), T::Colon | T::SuchThat) || self.separating_bar() {
            self.bump();
            such_that.extend(self.items()?);
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
                let item = self.condition()?;
                items.push(self.without_definition(item));
            }
            debug_assert!(self.at > before, "an item must move on");
            if self.statement_at(self.at + self.joint()) {
                return Ok(items);
            }
            // i = 1,…,m and k = 1,…,n
            let and = self.place.splits && self.peek() == T::And && self.at_binder(1);
            let comma = self.eat(T::Comma) || and && self.eat(T::And);
            let ends = matches!(self.peek(), T::End | T::ForAll | T::Period)
                || self.peek().closes()
                || self.at_mark(T::SuchThat)
                || !comma && self.place.splits && self.at_bracketed_clause();
            let more = !ends
                && (comma
                    || self.place.quad_ends
                        && self.gap().has(Gap::QUAD)
                        && self.peek() != T::Colon);
            if !more {
                return Ok(items);
            }
        }
    }

    /// How many tokens `,` or `, and` has here.
    fn joint(&self) -> usize {
        let comma = self.peek() == T::Comma;
        usize::from(comma) + usize::from(comma && self.ahead(1) == T::And)
    }

    /// Whether `i =` or `i ∈` stands so many tokens ahead.
    fn at_binder(&self, by: usize) -> bool {
        self.ahead(by) == T::Word && matches!(self.ahead(by + 1), T::Equal | T::In)
    }

    /// Passes over the words of `for each ground arc g ∈ G`, `for every pair (i,j) ∈ A`.
    fn skip_nouns(&mut self) {
        let noun = |token: &crate::lex::token::Token| {
            let plain = token.text.len() > 2 && token.text.chars().all(char::is_lowercase);
            plain && !self.declared.contains(&token.text)
        };
        let rest = &self.tokens[self.at..self.end];
        let words = rest.iter().take_while(|t| t.kind == T::Word).count();
        let nouns = rest[..words].iter().take_while(|t| noun(t)).count();
        let next = |i: usize| rest.get(i).map_or(T::End, |t| t.kind);
        let pair = nouns == words && next(words) == T::LeftParen && rest[words].gap.has(Gap::SPACE);
        let single = nouns + 1 == words && matches!(next(words), T::In | T::Comma | T::Equal);
        if nouns > 0
            && (pair || single)
            && rest[0].text != "distinct"
            && rest[0].text != "different"
        {
            self.at += nouns;
        }
    }

    fn eat_distinct(&mut self) -> bool {
        let token = &self.tokens[self.at];
        let word = matches!(self.peek(), T::Word | T::Text);
        let found = word && matches!(token.text.as_str(), "distinct" | "different");
        if found {
            self.bump();
        }
        found
    }

    /// `i ∈ M = {1,…,m}` where nothing else says what `M` is: the set is noted.
    fn without_definition(&mut self, item: Expression) -> Expression {
        if !self.place.splits {
            return item;
        }
        let Kind::Chain(first, mut links) = item.kind else { return item };
        if let [(Relation::In, set), (Relation::Equal, value)] = &links[..]
            && let Kind::Name(name) = &set.kind
            && matches!(value.kind, Kind::Range(..) | Kind::Set(_) | Kind::Builder(..))
        {
            if self.declared.insert(name.text.clone()) {
                self.passing.push(Line {
                    left: vec![set.clone()],
                    links: vec![(Relation::Equal, value.clone())],
                    clauses: Vec::new(),
                    label: None,
                    remark: None,
                    span: set.span.to(value.span),
                });
            }
            links.truncate(1);
        }
        Expression { kind: Kind::Chain(first, links), span: item.span }
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
        let plain = self.at_plain_limits();
        let mut lower = if plain { Some(self.plain_limits()?) } else { None };
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
        let first = clause.items.first().map(|item| &item.kind);
        let counts = matches!(first, Some(Kind::Chain(_, links))
            if matches!(links[..], [(Relation::Equal, _)]));
        if plain && upper.is_none() && counts {
            return Err(self.report(message::upper_limit(clause.span)));
        }
        if let Some(upper) = upper {
            let begins = |item: &Expression| {
                matches!(&item.kind, Kind::Chain(_, links)
                    if matches!(&links[..], [(Relation::Equal, _)]))
            };
            let Some(at) = clause.items.iter().position(begins) else {
                return Err(self.report(message::lower_limit(clause.span)));
            };
            let span = self.since(start);
            let first = clause.items.remove(at);
            if let Kind::Chain(index, mut links) = first.kind {
                let from = links.remove(0).1;
                let kind = Kind::Range(Box::new(from), Box::new(upper));
                let kind = Kind::Chain(index, vec![(Relation::In, Expression { kind, span })]);
                clause.items.insert(at, Expression { kind, span });
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
        if self.peek() == T::LeftParen {
            let close = self.closing(self.at).filter(|close| *close < self.end);
            let Some(close) = close else { return Err(self.expected("“)”")) };
            return self.only(close + 1, rule);
        }
        if !matches!(self.peek(), T::Word | T::Number) {
            return Err(self.expected("an index"));
        }
        self.only(self.at + 1, rule)
    }

    /// What stands before a token, as a whole group.
    fn only<V>(&mut self, end: usize, rule: impl Fn(&mut Self) -> Read<V>) -> Read<V> {
        let outer = std::mem::replace(&mut self.end, end);
        let value = self.within(Surroundings::default(), |p| p.nested(&rule));
        let rest = self.at < self.end;
        self.end = outer;
        if rest { Err(self.expected("an operator")) } else { value }
    }
}

/// `i ≠ j, i ≠ k, j ≠ k` for the names of a quantifier.
fn pairwise_different(items: &[Expression]) -> Vec<Expression> {
    let name = |item: &Expression| match &item.kind {
        Kind::Name(_) => Some(item.clone()),
        Kind::Chain(first, links) if matches!(links[..], [(Relation::In, _)]) => {
            matches!(first.kind, Kind::Name(_)).then(|| first.as_ref().clone())
        }
        _ => None,
    };
    let names: Vec<Expression> = items.iter().filter_map(name).collect();
    let mut pairs = Vec::new();
    for (i, one) in names.iter().enumerate() {
        for other in &names[i + 1..] {
            let kind =
                Kind::Chain(Box::new(one.clone()), vec![(Relation::NotEqual, other.clone())]);
            pairs.push(Expression { kind, span: one.span.to(other.span) });
        }
    }
    pairs
}

fn follows(first: &Expression, second: &Expression) -> bool {
    match (&first.kind, &second.kind) {
        (Kind::Number(a), Kind::Number(b)) => a + Number::ONE == *b,
        _ => false,
    }
}
