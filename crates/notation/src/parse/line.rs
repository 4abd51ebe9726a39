//! Data lines, objectives and statements, and the labels at their ends.

use super::{Parser, Read};
use crate::diagnostic::syntax as message;
use crate::lex::token::{Gap, Kind as T};
use crate::place::Span;
use crate::syntax::{Expression, Kind, Label, Line, Relation};

/// The relations of a line, each with its right operand.
type Links = Vec<(Relation, Expression)>;

impl Parser<'_> {
    /// `c_{i,j} ≥ 0 ∀ (i,j) ∈ A`, `V`, `s, t ∈ V`.
    pub(super) fn data_line(&mut self) -> Read<Line> {
        let start = self.here();
        let signed = self.peek() == T::Minus;
        let place = super::Surroundings { counts: true, ..self.place };
        let (left, links) = self.within(place, Self::operands)?;
        if signed && links.is_empty() {
            let span = self.since(start);
            return Err(self.report(message::no_relation(span)));
        }
        let clauses = self.clauses()?;
        if self.peek() != T::End {
            return Err(self.expected("a relation, a quantifier or two spaces before the remark"));
        }
        Ok(Line { left, links, clauses, label: None, remark: None, span: self.since(start) })
    }

    pub(super) fn objective(&mut self) -> Read<Expression> {
        let _ = self.label();
        let start = self.here();
        let (mut left, mut links) = self.operands()?;
        self.stray_punctuation();
        if self.peek() != T::End {
            return Err(self.expected("an operator or the end of the objective"));
        }
        // "min z = …" names the objective
        if left.len() == 1 && links.len() == 1 && links[0].0 == Relation::Equal {
            return Ok(links.remove(0).1);
        }
        match left.pop() {
            Some(expression) if left.is_empty() && links.is_empty() => Ok(expression),
            _ => {
                let span = self.since(start);
                Err(self.report(message::expected(
                    span,
                    "one linear expression",
                    "a relation or a list",
                )))
            }
        }
    }

    /// One statement; `x ≥ 0 and integer` is two.
    pub(super) fn one_statement(&mut self) -> Read<Vec<Line>> {
        let start = self.here();
        self.cases.clear();
        let (left, links) = self.operands()?;
        if links.is_empty() {
            let at_end = matches!(self.peek(), T::End | T::ForAll);
            let span = self.since(start);
            return Err(if at_end {
                self.report(message::no_relation(span))
            } else {
                self.expected("a relation such as ≤ or ∈")
            });
        }
        let clauses = self.clauses()?;
        let span = self.since(start);
        let line = |links| Line {
            left: left.clone(),
            links,
            clauses: clauses.clone(),
            label: None,
            remark: None,
            span,
        };
        let worded = |link: &(Relation, Expression)| matches!(link.1.kind, Kind::NumberSet(_));
        let named = left.iter().all(|e| matches!(e.kind, Kind::Name(_)));
        let last = links.iter().rposition(|link| !worded(link)).map_or(1, |at| at + 1);
        if named && last < links.len() {
            let (before, sets) = links.split_at(last);
            let sets = sets.iter().map(|set| vec![set.clone()]);
            return Ok(std::iter::once(before.to_vec()).chain(sets).map(line).collect());
        }
        // s_0 = s_n = 0 is one domain line for each
        let constant = |e: &Expression| matches!(e.kind, Kind::Number(_));
        let operands = links[..links.len() - 1].iter().map(|(_, e)| e);
        let equal = links.iter().all(|(relation, _)| *relation == Relation::Equal);
        let one = matches!(&left[..], [one] if is_indexed(one));
        if let Some((_, last)) = links.last().filter(|(_, last)| constant(last))
            && links.len() > 1
            && equal
            && one
            && operands.clone().all(is_indexed)
        {
            let each = left.iter().chain(operands);
            let links = vec![(Relation::Equal, last.clone())];
            let own = |e: &Expression| Line { left: vec![e.clone()], ..line(links.clone()) };
            return Ok(each.map(own).collect());
        }
        let line = line(links);
        Ok(self.split_by_cases(line))
    }

    fn stray_punctuation(&mut self) {
        while matches!(self.peek(), T::Comma | T::Period) {
            self.bump();
        }
    }

    /// Operands and relations up to the quantifier.
    fn operands(&mut self) -> Read<(Vec<Expression>, Links)> {
        let mut left = vec![self.range()?];
        while self.peek() == T::Comma
            && !self.ahead(1).continues()
            && self.ahead(1) != T::End
            && !self.at_index_of_described()
        {
            self.bump();
            left.push(self.range()?);
        }
        let mut links = Vec::new();
        if left.len() == 1
            && let Some(turned) = self.turned()
        {
            let whole = std::mem::replace(&mut left[0], self.range()?);
            links.push((turned, whole));
        }
        loop {
            let place = super::Surroundings { quad_ends: true, ..self.place };
            let link = self.within(place, Self::link)?;
            match link {
                Some(link) => links.push(link),
                None => return Ok((left, links)),
            }
        }
    }

    /// Whether behind a comma among the data an index of the name before is bound:
    /// `p_{ij}, i ∈ I, j ∈ J`.
    fn at_index_of_described(&self) -> bool {
        let Some(next) = self.tokens.get(self.at + 1).filter(|_| self.place.counts) else {
            return false;
        };
        next.kind == T::Word
            && self
                .is_index_since(&next.text, (self.first.max(self.at.saturating_sub(100)), self.at))
    }

    /// A relation with its right operand; `free` is `∈ ℝ`.
    pub(super) fn link(&mut self) -> Read<Option<(Relation, Expression)>> {
        if let Some(domain) = self.domain_in_words() {
            return Ok(Some(domain));
        }
        let Some(relation) = relation(self.peek()) else { return Ok(None) };
        self.bump();
        let operand = self.related(relation)?;
        self.zero_or_one(relation, operand).map(Some)
    }

    /// Takes the label off the end of the line.
    pub(super) fn label(&mut self) -> Option<Label> {
        let leading = self.leading_label();
        let tagged = self.tagged_label();
        let written = self.bracketed_label();
        tagged.or(written).or(leading)
    }

    /// `(3)` or `(3a)` before a row, set apart from it: nobody begins a row with such a factor, and
    /// `(3 a)` is one.
    fn leading_label(&mut self) -> Option<Label> {
        if self.peek() != T::LeftParen || self.ahead(1) != T::Number {
            return None;
        }
        let letter = self.ahead(2) == T::Word && {
            let word = &self.tokens[self.at + 2];
            word.text.len() == 1 && !word.gap.has(Gap::SPACE)
        };
        let close = self.at + 2 + usize::from(letter);
        let next = self.tokens.get(close + 1).filter(|_| close + 1 < self.end)?;
        if self.tokens[close].kind != T::RightParen || !next.gap.has(Gap::SPACE) {
            return None;
        }
        let first = self.tokens[self.at].span;
        let span = first.to(self.tokens[close].span);
        let text = span.of(self.text).trim_matches(['(', ')', ' ']).to_owned();
        self.at = close + 1;
        Some(Label { text, span })
    }

    /// Moves the tags behind the end of the line; the last one is the label.
    fn tagged_label(&mut self) -> Option<Label> {
        let line = &mut self.tokens[self.at..self.end];
        let tag = line.iter().rfind(|t| t.kind == T::Tag)?;
        let label = Label { text: tag.text.clone(), span: tag.span };
        line.sort_by_key(|t| t.kind == T::Tag);
        self.end = self.at + line.iter().filter(|t| t.kind != T::Tag).count();
        Some(label)
    }

    /// A final `(…)` after white space.
    fn bracketed_label(&mut self) -> Option<Label> {
        let mut last = self.end.checked_sub(1)?;
        while last > self.at && matches!(self.tokens[last].kind, T::Comma | T::Period) {
            last -= 1;
        }
        if last <= self.at || self.tokens[last].kind != T::RightParen {
            return None;
        }
        let mut open = last;
        while open > self.at && self.tokens[open].kind != T::LeftParen {
            open -= 1;
            if last - open > 12 {
                return None;
            }
        }
        let gap = self.tokens[open].gap;
        let computes = |t: &crate::lex::token::Token| {
            t.kind.is_operator() && !matches!(t.kind, T::Minus | T::Slash | T::And | T::Or)
        };
        if self.tokens[open..last].iter().any(computes) {
            return None;
        }
        if open == self.at || !gap.has(Gap::SPACE) || wants_operand(self.tokens[open - 1].kind) {
            return None;
        }
        let span = Span { start: self.tokens[open].span.start, end: self.tokens[last].span.end };
        let inner = span.of(self.text).strip_prefix('(').and_then(|t| t.strip_suffix(')'));
        let inner = inner?.trim();
        let apart = gap.has(Gap::WIDE) || gap.has(Gap::NEWLINE) || gap.has(Gap::QUAD);
        let quantified = self.tokens[self.at..open].iter().any(|t| t.kind == T::ForAll);
        let sure = apart && quantified && is_plain(inner);
        if !sure && !is_label(inner, apart || quantified) {
            return None;
        }
        self.end = open;
        Some(Label { text: inner.to_owned(), span })
    }
}

fn is_indexed(expression: &Expression) -> bool {
    matches!(&expression.kind, Kind::Name(name) if !name.indices.is_empty())
}

/// Whether an operand must follow, so that what stands in brackets is one and no label. A sign
/// may end a domain: `ℤ_+ (whole)`.
fn wants_operand(kind: T) -> bool {
    kind.is_operator() && !matches!(kind, T::Plus | T::Minus)
}

/// Letters, digits and the marks of names. Set apart behind a quantifier, where nothing can be
/// multiplied, that makes a label: `(l,S)`.
fn is_plain(inner: &str) -> bool {
    let plain = |c: char| c.is_alphanumeric() || " -'.’/:,".contains(c);
    inner.chars().all(plain) && inner.starts_with(char::is_alphanumeric)
}

/// Words, numbers, spaces and hyphens. A single letter counts only where it cannot be meant
/// as a factor, a difference such as `n-1` never.
fn is_label(inner: &str, alone: bool) -> bool {
    if !is_plain(inner) || inner.contains(',') {
        return false;
    }
    let number = inner.chars().all(|c| c.is_ascii_digit() || c == '.');
    let word = inner.split(['-', '/', ' ']).any(|piece| piece.chars().count() > 1);
    let letters = inner.contains(char::is_alphabetic);
    let single = alone && inner.chars().count() == 1;
    number || letters && (word && !inner.contains(" - ") || single)
}

/// The relation that a token stands for.
pub(super) fn relation(kind: T) -> Option<Relation> {
    Some(match kind {
        T::Equal | T::Congruent => Relation::Equal,
        T::NotEqual => Relation::NotEqual,
        T::Less => Relation::Less,
        T::AtMost => Relation::AtMost,
        T::Greater => Relation::Greater,
        T::AtLeast => Relation::AtLeast,
        T::In => Relation::In,
        T::NotIn => Relation::NotIn,
        T::Subset => Relation::Subset,
        T::SubsetOrEqual => Relation::SubsetOrEqual,
        _ => return None,
    })
}
