//! Several statements on one line: `x ≥ 0, y ∈ {0,1} ∀ i ∈ I, j ∈ J`. Each becomes a line of
//! its own with the part of the quantifier that it needs.

use std::collections::BTreeSet;

use super::{Parser, Read};
use crate::check::{children, words};
use crate::lex::token::{Gap, Kind as T};
use crate::syntax::{Clause, Expression, Kind, Label, Line, Relation};

/// How far back a use as an index is sought.
const WINDOW: usize = 500;

impl Parser<'_> {
    /// Whether another statement begins at token `at`: a name that is no datum, with indices or
    /// without use as one, and a relation (or a list of such names).
    pub(super) fn statement_at(&self, at: usize) -> bool {
        if !self.place.splits || at >= self.end {
            return false;
        }
        let kind = |i: usize| if i < self.end { self.tokens[i].kind } else { T::End };
        if self.has_variable(at) {
            return true;
        }
        let Some((text, false, after)) = self.name_at(at) else { return false };
        let before = &self.tokens[self.first.max(at.saturating_sub(WINDOW))..at];
        // a name that has been seen with indices only is a variable, and no index
        let bare = |(i, t): (usize, &crate::lex::token::Token)| {
            let next = before.get(i + 1).map(|t| t.kind);
            t.kind == T::Word && t.text == text && next != Some(T::Underscore)
        };
        // nor is what the statement at hand is about: `x = Σ_k B_k λ_k, x ≥ D`
        let own = before.first().is_some_and(|t| t.text == text)
            && self.tokens.get(self.first + 1).is_some_and(|t| t.kind.is_relation());
        let seen = !own && before.iter().enumerate().any(bare);
        if seen || self.is_declared(text) || self.is_index(text, at) {
            return false;
        }
        let quantified = before.iter().any(|t| t.kind == T::ForAll);
        let range = kind(after + 1) == T::LeftBrace
            && self.ends_of_group(after + 1).is_some_and(|close| {
                self.tokens[after + 1..close].iter().any(|t| t.kind == T::Dots)
            });
        match kind(after) {
            T::In if quantified && range => false,
            T::In => matches!(
                kind(after + 1),
                T::Reals | T::Integers | T::Naturals | T::Binaries | T::LeftBrace | T::LeftBracket
            ),
            T::Equal => kind(after + 2) != T::Dots && kind(after + 3) != T::Dots,
            T::AtMost | T::AtLeast | T::Free => true,
            _ => false,
        }
    }

    /// Whether what begins at token `at` holds an indexed name that is no datum, and then a
    /// relation, before the next comma (but for the commas of a list of names).
    fn has_variable(&self, at: usize) -> bool {
        let (mut i, mut depth, mut found) = (at, 0_u32, false);
        let mut listed = true;
        while i < self.end && i < at + WINDOW {
            let kind = self.tokens[i].kind;
            match kind {
                T::Word => {
                    let Some((text, indexed, after)) = self.name_at(i) else { return false };
                    // one is enough, and looking for an index walks back
                    if !found {
                        found = indexed && !self.is_indexed_datum(text) && !self.is_index(text, i);
                    }
                    if found && depth == 0 && self.number_word_at(after) {
                        return true;
                    }
                    i = after;
                    continue;
                }
                T::Underscore | T::Caret if self.ends_of_group(i + 1).is_some() => {
                    listed = false;
                    i = self.ends_of_group(i + 1).unwrap_or(i) + 1;
                    continue;
                }
                T::Comma if depth == 0 && !(listed && found) => return false,
                T::ForAll | T::Colon | T::SuchThat | T::Dots | T::Break | T::Or | T::Not => {
                    return false;
                }
                // a relation in brackets is a condition
                _ if kind.is_relation() && depth > 0 => return false,
                T::Free if depth == 0 => return found,
                _ if kind.is_relation()
                    && depth == 0
                    && (found || i > at + 1 || self.tokens[at].kind != T::Number) =>
                {
                    return found;
                }
                _ if kind.opens() => depth += 1,
                _ if kind.closes() => {
                    let Some(up) = depth.checked_sub(1) else { return false };
                    depth = up;
                }
                _ => {}
            }
            listed &= kind == T::Comma;
            i += 1;
        }
        false
    }

    /// The last token of the group (or the single token) that begins at a place.
    fn ends_of_group(&self, at: usize) -> Option<usize> {
        match self.tokens.get(at)?.kind {
            T::LeftBrace => self.closing(at),
            _ => Some(at),
        }
    }

    fn is_declared(&self, name: &str) -> bool {
        let plain = name.rsplit([' ', '{']).next().unwrap_or(name).trim_end_matches('}');
        self.declared.contains(name) || self.declared.contains(plain)
    }

    /// Whether a name is declared with indices; `I_{it}` beside a set `I` is another name.
    fn is_indexed_datum(&self, name: &str) -> bool {
        let alone = self.declared.contains(name) && !self.declared.contains(&format!("{name}_"));
        !alone && self.is_declared(name)
    }

    /// A name at token `at`, whether it carries something, and the token after it.
    fn name_at(&self, at: usize) -> Option<(&str, bool, usize)> {
        let token = self.tokens.get(at).filter(|t| at < self.end && t.kind == T::Word)?;
        let mut i = at + 1;
        while i < self.end && matches!(self.tokens[i].kind, T::Underscore | T::Caret) {
            let braced = self.tokens.get(i + 1)?.kind == T::LeftBrace;
            i = if braced { self.closing(i + 1)? + 1 } else { i + 2 };
        }
        if i == at + 1
            && self.tokens.get(i)?.kind == T::LeftParen
            && self.tokens[i].gap == Gap::default()
        {
            i = self.closing(i)? + 1;
        }
        Some((&token.text, i > at + 1, i))
    }

    /// Whether a name stands in a subscript, a superscript or the limits of a sum before `at`
    /// on this line, or is bound by its quantifier.
    fn is_index(&self, name: &str, at: usize) -> bool {
        self.is_index_since(name, (self.first.max(at.saturating_sub(WINDOW)), at))
    }

    /// Whether a name stands in a subscript or a superscript between two tokens.
    pub(super) fn is_index_since(&self, name: &str, (from, to): (usize, usize)) -> bool {
        let mut depth = 0_u32;
        for i in from..to {
            let token = &self.tokens[i];
            let raised = i > 0 && matches!(self.tokens[i - 1].kind, T::Underscore | T::Caret);
            if token.kind == T::LeftBrace && (raised || depth > 0) {
                depth += 1;
            } else if token.kind == T::RightBrace {
                depth = depth.saturating_sub(1);
            } else if token.kind == T::Word
                && (depth > 0 || raised)
                && (token.text == name || name.chars().count() == 1 && token.text.contains(name))
            {
                return true;
            }
        }
        false
    }

    /// All statements of a line.
    pub(super) fn statements(&mut self) -> Read<Vec<Line>> {
        let label = self.label();
        let mut lines = Vec::new();
        self.place.splits = true;
        loop {
            let before = self.at;
            lines.extend(self.one_statement()?);
            while matches!(self.peek(), T::Comma | T::Period | T::And) {
                self.bump();
            }
            if self.peek() == T::End {
                break;
            }
            if self.at == before || !self.statement_at(self.at) {
                return Err(self.expected("an operator, a quantifier or the end of the line"));
            }
        }
        share_clauses(&mut lines);
        put_label(&mut lines, label);
        Ok(lines)
    }
}

/// Gives each line without a quantifier what it needs of the next one that has one, else of
/// the one before.
fn share_clauses(lines: &mut [Line]) {
    let clauses: Vec<Vec<Clause>> = lines.iter().map(|line| line.clauses.clone()).collect();
    let quantified = |i: &usize| !clauses[*i].is_empty();
    for (i, line) in lines.iter_mut().enumerate() {
        if !line.clauses.is_empty() {
            continue;
        }
        let after = (i..clauses.len()).find(quantified);
        if let Some(from) = after.or_else(|| (0..i).rev().find(quantified)) {
            line.clauses = needed(line, &clauses[from]);
        }
    }
}

/// The part of a quantifier that binds what a line mentions.
pub(crate) fn needed(line: &Line, clauses: &[Clause]) -> Vec<Clause> {
    let mut wanted = BTreeSet::new();
    let operands = line.left.iter().chain(line.links.iter().map(|(_, operand)| operand));
    operands.for_each(|operand| free_words(operand, &mut Vec::new(), &mut wanted));
    let clauses: Vec<Clause> = clauses.iter().map(with_own_sets).collect();
    let items: Vec<&Expression> =
        clauses.iter().flat_map(|c| c.items.iter().chain(&c.such_that)).collect();
    let mut all: BTreeSet<&str> = BTreeSet::new();
    items.iter().for_each(|item| bound(item, &mut all));
    let joined: BTreeSet<&str> = items.iter().flat_map(|item| members(item)).collect();
    // the set of one index may hold another
    let mut kept = BTreeSet::new();
    loop {
        let more: Vec<&str> =
            all.iter().copied().filter(|n| !kept.contains(n) && wanted.contains(n)).collect();
        if more.is_empty() {
            break;
        }
        kept.extend(more);
        for item in &items {
            let mut binds = BTreeSet::new();
            bound(item, &mut binds);
            // i < j only asks something of what is bound elsewhere
            let mut own = binds.iter().filter(|name| !joined.contains(*name));
            if members(item).is_empty() && own.next().is_none() {
                continue;
            }
            if binds.iter().any(|name| kept.contains(name)) {
                free_words(item, &mut Vec::new(), &mut wanted);
            }
        }
    }
    let stays = |item: &Expression| {
        let mut mentioned = BTreeSet::new();
        words(item, &mut mentioned);
        mentioned.iter().all(|word| !all.contains(word) || kept.contains(word))
    };
    let part = |items: &[Expression]| items.iter().filter(|i| stays(i)).cloned().collect();
    let mut out: Vec<Clause> = clauses
        .iter()
        .map(|c| Clause { items: part(&c.items), such_that: part(&c.such_that), span: c.span })
        .collect();
    out.retain(|clause| !clause.items.is_empty());
    out
}

/// `i, j ∈ V` as `i ∈ V, j ∈ V`, so that each can stand alone.
fn with_own_sets(clause: &Clause) -> Clause {
    let mut clause = clause.clone();
    for at in (1..clause.items.len()).rev() {
        let Kind::Chain(first, links) = &clause.items[at].kind else { continue };
        let member = matches!(links[..], [(Relation::In, _)]);
        let pair = [&first.kind, &clause.items[at - 1].kind];
        if member && pair.iter().all(|kind| matches!(kind, Kind::Name(_))) {
            let kind = Kind::Chain(Box::new(clause.items[at - 1].clone()), links.clone());
            clause.items[at - 1].kind = kind;
        }
    }
    clause
}

/// The names that an item of a quantifier binds, and those that wait for their set.
fn bound<'e>(item: &'e Expression, names: &mut BTreeSet<&'e str>) {
    match &item.kind {
        Kind::Name(name) if name.indices.is_empty() => {
            names.insert(&name.text);
        }
        Kind::Tuple(items) | Kind::Set(items) | Kind::All(items) => {
            items.iter().for_each(|i| bound(i, names));
        }
        Kind::Chain(first, links) => {
            bound(first, names);
            let member = matches!(links.first(), Some((Relation::In, _)));
            if !member {
                links.iter().for_each(|(_, operand)| bound(operand, names));
            }
        }
        _ => {}
    }
}

/// The names that a membership binds, or that wait for one in the same list.
fn members(item: &Expression) -> BTreeSet<&str> {
    let mut names = BTreeSet::new();
    match &item.kind {
        Kind::Name(_) => bound(item, &mut names),
        Kind::Chain(_, links) if matches!(links.first(), Some((Relation::In, _))) => {
            bound(item, &mut names);
        }
        _ => {}
    }
    names
}

/// The words of an expression and their letters (`kj` is k and j) but those that its own sums bind.
fn free_words<'e>(
    expression: &'e Expression,
    bound: &mut Vec<&'e str>,
    found: &mut BTreeSet<&'e str>,
) {
    let outside = bound.len();
    if let Kind::Big(_, clause, _) = &expression.kind {
        let mut own = BTreeSet::new();
        clause.items.iter().chain(&clause.such_that).for_each(|item| own.extend(members(item)));
        bound.extend(own);
    }
    if let Kind::Name(name) | Kind::Call(name, _) = &expression.kind {
        let letters = name.text.char_indices().map(|(at, c)| &name.text[at..at + c.len_utf8()]);
        found.extend(letters.chain([name.text.as_str()]).filter(|word| !bound.contains(word)));
    }
    children(expression).into_iter().for_each(|child| free_words(child, bound, found));
    bound.truncate(outside);
}

/// The label of a line of several statements is that of its first row.
fn put_label(lines: &mut [Line], label: Option<Label>) {
    let Some(label) = label else { return };
    let single = |line: &Line| {
        let name = |e: &Expression| matches!(e.kind, Kind::Name(_));
        let row = |e: &Expression| {
            matches!(e.kind, Kind::Additive(..) | Kind::Multiplicative(..) | Kind::Big(..))
        };
        line.left.iter().all(name) && !line.links.iter().any(|(_, e)| row(e))
    };
    let several = lines.len() > 1;
    let Some(line) = lines.iter_mut().find(|line| !several || !single(line)) else { return };
    line.span = line.span.to(label.span);
    line.label = Some(label);
}
