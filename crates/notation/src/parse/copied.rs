//! Sums and subscripts as a PDF's text layer gives them: `n∑j=1`, `∑nj=1`, `∑n` with `j=1` on
//! the next line, `xij` for `x_{ij}`.
//!
//! A sum that has `j = 1` but no limit above it says nothing, so what touches it is that limit.
//! Words are taken apart only where the whole model has no subscript, and only into a name
//! followed by letters that are indices: `cjxj` is `c_j x_j` where `j` is bound.

use std::collections::BTreeSet;

use crate::lex::token::{Gap, Kind as T, Token};

/// How many tokens one limit of a sum may have.
const REACH: usize = 12;
/// The most indices that one name is given.
const INDICES: usize = 4;

/// The tokens with limits and subscripts where they belong. `O(tokens · reach)`.
pub(super) fn settled(tokens: &[Token]) -> Vec<Token> {
    let start = tokens.iter().position(opens_model).unwrap_or(tokens.len());
    // a model without a sum, dots or a quantifier has no indices to lose
    let model = &tokens[start..];
    let indexed = model.iter().any(|t| matches!(t.kind, T::Sum | T::Dots | T::ForAll));
    let flat = indexed && !model.iter().any(|t| t.kind == T::Underscore);
    let words = tokens[..start].iter().filter(|t| t.kind == T::Word);
    let declared: BTreeSet<String> = words.map(|t| t.text.clone()).collect();
    let tokens = limits(tokens, &declared);
    if flat { subscripts(tokens, start, &declared) } else { tokens }
}

/// The objective or the constraints begin.
fn opens_model(token: &Token) -> bool {
    let line = token.gap.has(Gap::NEWLINE);
    token.kind.is_part() && !matches!(token.kind, T::Data | T::Definitions)
        || line && matches!(token.kind, T::Min | T::Max | T::SuchThat)
}

/// A sum found without `_` or `^`.
struct Plain {
    /// Where the tokens above the sum begin, before it.
    above: Option<usize>,
    /// The index, and what of its word is the limit above.
    index: usize,
    split: usize,
    /// One past the last token of the first value.
    end: usize,
    /// Whether the limit above is found here; else `^` says it.
    limit: bool,
}

fn limits(tokens: &[Token], declared: &BTreeSet<String>) -> Vec<Token> {
    let mut out: Vec<Token> = Vec::with_capacity(tokens.len());
    let mut next = 0;
    while next < tokens.len() {
        let token = &tokens[next];
        let sum = matches!(token.kind, T::Sum | T::Product);
        match sum.then(|| plain(tokens, next, &out, declared)).flatten() {
            Some(found) => {
                let rest = write(tokens, next, &found, &mut out);
                next = rest;
            }
            None => {
                out.push(token.clone());
                next += 1;
            }
        }
    }
    out
}

/// The limits of the sum at `at`; `out` holds what stands before it.
fn plain(tokens: &[Token], at: usize, out: &[Token], declared: &BTreeSet<String>) -> Option<Plain> {
    let kind = |i: usize| tokens.get(i).map_or(T::End, |t| t.kind);
    let last = (at + 1..at + REACH).find(|&i| kind(i + 1) == T::Equal && kind(i) == T::Word)?;
    let between = &tokens[at + 1..last];
    if !between.iter().all(|t| is_limit(t.kind)) {
        return None;
    }
    let end = end_of_first_value(tokens, last + 2)?;
    if kind(end) == T::Dots || kind(end) == T::Comma && kind(end + 1) == T::Dots {
        return None;
    }
    let limit = kind(end) != T::Caret;
    let mut found = Plain { above: None, index: last, split: 0, end, limit };
    if !limit {
        return between.is_empty().then_some(found);
    }
    if !between.is_empty() {
        return Some(found);
    }
    found.above = run_before(out, &tokens[at]);
    if found.above.is_none() {
        let text = &tokens[last].text;
        let (split, _) = text.char_indices().next_back()?;
        let above = &text[..split];
        let one = above.chars().count() == 1;
        if split == 0 || declared.contains(text) || !(one || declared.contains(above)) {
            return None;
        }
        found.split = split;
    }
    Some(found)
}

/// What may stand above a sum.
fn is_limit(kind: T) -> bool {
    let value = matches!(kind, T::Word | T::Number | T::Bar | T::Min | T::Max);
    let sign = matches!(kind, T::Plus | T::Minus | T::Slash | T::LeftParen | T::RightParen);
    value || sign
}

/// One past `1`, `t+1` or `max(1,t−p+1)`, written without a space.
fn end_of_first_value(tokens: &[Token], start: usize) -> Option<usize> {
    let first = tokens.get(start)?;
    if matches!(first.kind, T::Min | T::Max) {
        let close = |i: &usize| tokens.get(*i).is_some_and(|t| t.kind == T::RightParen);
        return (start + 1..start + 2 * REACH).find(close).map(|i| i + 1);
    }
    if !matches!(first.kind, T::Word | T::Number) {
        return None;
    }
    let mut end = start + 1;
    while let [sign, value, ..] = tokens.get(end..)? {
        let touches = sign.gap == Gap::default() && value.gap == Gap::default();
        let sign = matches!(sign.kind, T::Plus | T::Minus);
        if !(touches && sign && matches!(value.kind, T::Word | T::Number)) {
            break;
        }
        end += 2;
    }
    Some(end)
}

/// Where the limit that stands before a sum begins: what touches it, or a single name or number
/// before it that nothing else wants.
fn run_before(out: &[Token], sum: &Token) -> Option<usize> {
    let last = out.last().filter(|t| is_limit(t.kind))?;
    if sum.gap == Gap::default() {
        let mut from = out.len() - 1;
        let mut depth = 0_i32;
        loop {
            let token = &out[from];
            depth += i32::from(token.kind == T::RightParen) - i32::from(token.kind == T::LeftParen);
            let inner = depth > 0;
            let more = from > 0
                && out.len() - from < 2 * REACH
                && (inner || token.gap == Gap::default())
                && (inner || is_limit(out[from - 1].kind));
            if !more {
                return (depth == 0).then_some(from);
            }
            from -= 1;
        }
    }
    if !matches!(last.kind, T::Word | T::Number) || sum.gap.has(Gap::BLANK_LINE) {
        return None;
    }
    let before = out.len().checked_sub(2).map(|i| &out[i]);
    let free = before.is_none_or(|t| {
        t.kind.is_relation()
            || t.kind.is_part()
            || t.kind.continues()
            || matches!(t.kind, T::Break | T::Min | T::Max | T::SuchThat | T::LeftParen)
    });
    free.then(|| out.len() - 1)
}

/// Writes `Σ_{j = 1}^{n}`; the token with which to go on.
fn write(tokens: &[Token], at: usize, found: &Plain, out: &mut Vec<Token>) -> usize {
    let mut above: Vec<Token> = match found.above {
        Some(from) => out.split_off(from),
        None => tokens[at + 1..found.index].to_vec(),
    };
    let mut sum = tokens[at].clone();
    if let (Some(first), true) = (above.first_mut(), found.above.is_some()) {
        sum.gap = first.gap;
    }
    let mut index = tokens[found.index].clone();
    if found.split > 0 {
        let rest = index.text.split_off(found.split);
        let text = std::mem::replace(&mut index.text, rest);
        above = vec![Token { text, ..index.clone() }];
    }
    let mark =
        |kind: T| Token { kind, span: tokens[at].span, gap: Gap::default(), text: String::new() };
    let tight = |mut token: Token| {
        token.gap = Gap::default();
        token
    };
    out.push(sum);
    out.extend([mark(T::Underscore), mark(T::LeftBrace), tight(index)]);
    out.extend(tokens[found.index + 1..found.end].iter().cloned().map(tight));
    out.push(mark(T::RightBrace));
    if !found.limit {
        return found.end;
    }
    out.extend([mark(T::Caret), mark(T::LeftBrace)]);
    out.extend(above.into_iter().map(tight));
    out.push(mark(T::RightBrace));
    if let Some(next) = tokens.get(found.end).filter(|t| t.kind != T::End) {
        // the body may stand on the next line
        let body = !next.kind.is_part() && !next.gap.has(Gap::BLANK_LINE);
        let mut next = next.clone();
        if body {
            next.gap = next.gap.without_lines();
        }
        // another sum reads its own limits
        if !matches!(next.kind, T::Sum | T::Product) {
            out.push(next);
            return found.end + 1;
        }
    }
    found.end
}

/// `xij` as `x_{i,j}`.
fn subscripts(tokens: Vec<Token>, start: usize, declared: &BTreeSet<String>) -> Vec<Token> {
    let bound = indices(&tokens, start);
    if bound.is_empty() {
        return tokens;
    }
    let mut out = Vec::with_capacity(tokens.len());
    for (at, token) in tokens.into_iter().enumerate() {
        let whole = token.kind != T::Word || declared.contains(&token.text);
        let pieces = if at < start || whole { None } else { apart(&token.text, &bound, declared) };
        match pieces {
            Some(pieces) => written(&token, &pieces, &mut out),
            None => out.push(token),
        }
    }
    out
}

/// The single letters that the model binds: `i = 1,…,n`, `∀ i`, `i ∈ I`, `(i,j) ∈ A`.
fn indices(tokens: &[Token], start: usize) -> BTreeSet<char> {
    let mut found = BTreeSet::new();
    let kind = |i: usize| tokens.get(i).map_or(T::End, |t| t.kind);
    for (i, token) in tokens.iter().enumerate().skip(start) {
        let mut chars = token.text.chars();
        let (Some(letter), None, T::Word) = (chars.next(), chars.next(), token.kind) else {
            continue;
        };
        // x ∈ X on a line of its own is a domain
        let before = kind(i.wrapping_sub(1));
        let domain = matches!(before, T::Break | T::In) || before.is_part();
        if token.gap.has(Gap::NEWLINE) || domain {
            continue;
        }
        let limit =
            kind(i.wrapping_sub(1)) == T::LeftBrace && kind(i.wrapping_sub(2)) == T::Underscore;
        let quantified = kind(i.wrapping_sub(1)) == T::ForAll;
        let counted = kind(i + 1) == T::Equal && (i + 2..i + 8).any(|k| kind(k) == T::Dots);
        let drawn = |k: usize| kind(k) == T::In && matches!(kind(k + 1), T::Word);
        let pair = kind(i + 1) == T::Comma && kind(i + 2) == T::Word;
        let in_pair = |k: usize| kind(k) == T::RightParen && drawn(k + 1);
        let listed = pair && (in_pair(i + 3) || drawn(i + 3)) || in_pair(i + 1);
        if limit || quantified || counted || drawn(i + 1) || listed {
            found.insert(letter);
        }
    }
    found
}

/// The names of a word, each with its indices: `cjxj` is `c j`, `x j`.
fn apart(
    word: &str,
    bound: &BTreeSet<char>,
    declared: &BTreeSet<String>,
) -> Option<Vec<(usize, usize, usize)>> {
    if word.chars().count() < 2 || !word.chars().all(char::is_alphabetic) {
        return None;
    }
    let mut pieces = Vec::new();
    let mut at = 0;
    while at < word.len() {
        let rest = &word[at..];
        let first = rest.chars().next()?;
        let ends = rest.char_indices().map(|(i, c)| i + c.len_utf8());
        let known = ends.filter(|&end| declared.contains(&rest[..end])).max();
        let base = known.filter(|&end| end > first.len_utf8() || !bound.contains(&first));
        let base = base.or_else(|| (!bound.contains(&first)).then(|| first.len_utf8()))?;
        let run = rest[base..].find(|c: char| !bound.contains(&c)).unwrap_or(rest.len() - base);
        let count = rest[base..base + run].chars().count();
        if !(1..=INDICES).contains(&count) {
            return None;
        }
        pieces.push((at, at + base, at + base + run));
        at += base + run;
    }
    Some(pieces)
}

fn written(token: &Token, pieces: &[(usize, usize, usize)], out: &mut Vec<Token>) {
    for (number, &(from, base, end)) in pieces.iter().enumerate() {
        let part = |kind: T, text: &str, gap: Gap| Token {
            kind,
            span: token.span,
            gap,
            text: text.to_owned(),
        };
        let gap = if number == 0 { token.gap } else { Gap::SPACE };
        out.push(part(T::Word, &token.text[from..base], gap));
        out.push(part(T::Underscore, "", Gap::default()));
        out.push(part(T::LeftBrace, "", Gap::default()));
        for (k, letter) in token.text[base..end].chars().enumerate() {
            if k > 0 {
                out.push(part(T::Comma, "", Gap::default()));
            }
            out.push(part(T::Word, &letter.to_string(), Gap::default()));
        }
        out.push(part(T::RightBrace, "", Gap::default()));
    }
}
