//! What may stand before the objective: `Z^* = \\min`, `(P) max`, `\\min_{x,y}`, `max{… : …}`.

use std::collections::BTreeSet;

use super::called::is_domain;
use super::{Parser, Surroundings};
use crate::lex::token::{Gap, Kind as T, Token};
use crate::syntax::{Expression, Formulation, Kind, Line};

/// How far away the bracket that closes is sought.
const REACH: usize = 4_000;

/// How many tokens may stand between `Find` and `minimise`.
const SENTENCE: usize = 40;

impl Parser<'_> {
    /// The place of the word that opens the objective, where only its name stands before it on
    /// the line.
    pub(super) fn named_objective(&self) -> Option<usize> {
        let mut depth = 0_u32;
        for i in self.at..self.tokens.len() {
            let token = &self.tokens[i];
            if i > self.at && (token.kind == T::Break || token.gap.has(Gap::BLANK_LINE)) {
                return None;
            }
            if depth == 0 && i > self.at {
                let before = self.tokens[i - 1].kind;
                let next = self.tokens.get(i + 1).map_or(T::End, |t| t.kind);
                let opens = matches!(next, T::LeftParen | T::LeftBrace);
                let ends = matches!(before, T::Equal | T::Colon | T::RightParen)
                    || token.gap.has(Gap::QUAD);
                match token.kind {
                    T::Minimise | T::Maximise => return Some(i),
                    T::Min | T::Max if ends && (!opens || self.at_set_form(i + 1)) => {
                        return Some(i);
                    }
                    _ => {}
                }
                let relation = before.is_relation() || before == T::Comma;
                if relation && i > self.at + 1 || token.gap.has(Gap::NEWLINE) {
                    return None;
                }
            }
            if token.kind.opens() {
                depth += 1;
            } else if token.kind.closes() {
                depth = depth.saturating_sub(1);
            }
        }
        None
    }

    /// Passes over `_{x,y}` behind `\\min`: a list of variables with perhaps their domains.
    pub(super) fn skip_variables(&mut self) {
        if self.peek() != T::Underscore {
            return;
        }
        let braced = self.ahead(1) == T::LeftBrace;
        self.at += 1;
        if !braced {
            self.bump();
            return;
        }
        if let Some(close) = self.closing(self.at) {
            if self.says_domains(self.at + 1, close) {
                self.below = Some((self.at + 1, close));
            }
            self.at = close + 1;
        }
    }

    /// Whether tokens say `x ∈ {0,1}^n` or `y ≥ 0`, and not from which set `X` the plan is.
    fn says_domains(&self, from: usize, to: usize) -> bool {
        let inner = self.tokens.get(from..to).unwrap_or_default();
        let numbers = |kind: T| {
            let bracket = matches!(kind, T::LeftBrace | T::LeftBracket);
            bracket || matches!(kind, T::Reals | T::Integers | T::Naturals | T::Binaries)
        };
        let domain = |pair: &[Token]| match pair[0].kind {
            T::In => numbers(pair[1].kind),
            T::AtLeast | T::AtMost => pair[1].kind == T::Number,
            _ => false,
        };
        let variable =
            inner.first().is_some_and(|t| t.kind == T::Word && !self.declared.contains(&t.text));
        variable && inner.windows(2).any(domain)
    }

    /// Reads the domains below the objective's word as lines of their own, but those of variables
    /// that have one already.
    pub(super) fn read_domains_below(&mut self, tree: &mut Formulation) {
        let Some((from, to)) = self.below.take() else { return };
        (self.at, self.end, self.first) = (from, to, from);
        self.place = Surroundings::default();
        let lines = self.statements().unwrap_or_default();
        let named = |e: &Expression| match &e.kind {
            Kind::Name(name) => Some(name.text.clone()),
            _ => None,
        };
        let known: BTreeSet<String> = tree
            .statements
            .iter()
            .filter(|line| is_domain(line))
            .flat_map(|line| &line.left)
            .filter_map(named)
            .collect();
        let new =
            |line: &Line| !line.left.iter().filter_map(named).any(|name| known.contains(&name));
        tree.statements.extend(lines.into_iter().filter(new));
    }

    /// The place of the word in `Find x, y that minimise …`, where such a sentence begins here.
    pub(super) fn asked_objective(&self) -> Option<usize> {
        let first = &self.tokens[self.at];
        let asks = ["find", "determine", "choose"];
        if !first.gap.has(Gap::NEWLINE) || !asks.contains(&first.text.to_lowercase().as_str()) {
            return None;
        }
        let line = self.tokens.iter().enumerate().skip(self.at + 1).take(SENTENCE);
        let line = line.take_while(|(_, t)| !t.gap.has(Gap::NEWLINE) && t.kind != T::Break);
        let mut words = line.take_while(|(_, t)| !t.kind.is_relation());
        words.find(|(_, t)| matches!(t.kind, T::Minimise | T::Maximise)).map(|(at, _)| at)
    }

    /// Whether `\\min_{…}` at a place names variables and does not run over a set.
    pub(super) fn names_variables(&self) -> bool {
        if self.ahead(1) != T::Underscore {
            return false;
        }
        let Some(close) = self.closing(self.at + 2) else { return self.ahead(2) == T::Word };
        let inner = self.tokens.get(self.at + 3..close).unwrap_or_default();
        self.holds_vectors((self.at + 3, close)) || inner.iter().all(|t| !t.kind.is_relation())
    }

    /// Whether `x ∈ {0,1}^n` or `x ∈ ℝ^n` stands between two places: nothing runs over such a set.
    fn holds_vectors(&self, (from, to): (usize, usize)) -> bool {
        let Some(at) = (from..to).find(|&i| self.tokens[i].kind == T::In) else { return false };
        let end = match self.tokens[at + 1].kind {
            T::LeftBrace => self.closing(at + 1),
            T::Reals | T::Integers | T::Naturals | T::Binaries => Some(at + 1),
            _ => None,
        };
        end.and_then(|end| self.tokens.get(end + 1)).is_some_and(|t| t.kind == T::Caret)
    }

    /// The brace that closes the one at a place.
    pub(super) fn closing(&self, open: usize) -> Option<usize> {
        let mut depth = 0_u32;
        for (i, token) in self.tokens.iter().enumerate().skip(open).take(REACH) {
            if token.kind.opens() {
                depth += 1;
            } else if token.kind.closes() {
                depth = depth.saturating_sub(1);
            }
            if depth == 0 {
                return token.kind.closes().then_some(i);
            }
        }
        None
    }

    /// Whether braces with a colon and another relation stand at a place.
    fn at_set_form(&self, open: usize) -> bool {
        if self.tokens.get(open).is_none_or(|t| t.kind != T::LeftBrace) {
            return false;
        }
        let Some(close) = self.closing(open) else { return false };
        let inner = &self.tokens[open..close];
        inner.iter().any(|t| matches!(t.kind, T::Colon | T::SuchThat | T::Bar))
            && inner.iter().any(|t| t.kind.is_relation() && t.kind != T::In)
    }

    /// `z = min { … : … }`, `Find min { … : … }` behind the data: the place of the word.
    pub(super) fn set_form_behind_data(&self) -> Option<usize> {
        let first = &self.tokens[self.at];
        if first.kind != T::Word || !first.gap.has(Gap::NEWLINE) {
            return None;
        }
        let named = if self.ahead(1) == T::Equal { 2 } else { 1 };
        let sense = matches!(self.ahead(named), T::Min | T::Max);
        (sense && self.at_set_form(self.at + named + 1)).then_some(self.at + named)
    }

    /// `max { Σ p x : Σ w x ≤ c, x ∈ {0,1} }` as an objective and its constraints: the braces
    /// go and the colon becomes "subject to".
    pub(super) fn open_set_form(&mut self) {
        let open = self.at;
        if self.tokens[open].kind != T::LeftBrace {
            return;
        }
        let Some(close) = self.closing(open) else { return };
        let mut depth = 0_u32;
        let mut colon = None;
        for i in open..close {
            let kind = self.tokens[i].kind;
            if kind.opens() {
                depth += 1;
            } else if kind.closes() {
                depth -= 1;
            } else if depth == 1 && matches!(kind, T::Colon | T::SuchThat | T::Bar) {
                colon.get_or_insert(i);
            }
        }
        let Some(colon) = colon else { return };
        self.tokens[colon].kind = T::SubjectTo;
        self.tokens[close].kind = T::Break;
        self.at += 1;
    }
}
