//! A row of a TeX environment that goes on with the row above it: `\nonumber \\ & \quad + …`.
//!
//! Nothing begins with a plus or a relation, so such a row belongs to the one above. One that
//! begins with a minus does where only one of the two has a relation, or neither has.

use super::token::{Gap, Kind, Token};

/// Joins such rows. `O(tokens)`.
pub(super) fn joined(tokens: Vec<Token>, text: &str) -> Vec<Token> {
    if !tokens.iter().any(|token| ends_row(token, text)) {
        return tokens;
    }
    let related = rows_related(&tokens, text);
    let mut kept: Vec<Token> = Vec::with_capacity(tokens.len());
    let mut row = 0;
    let mut above = related.first().copied().unwrap_or(false);
    let mut joins = false;
    let mut rest = tokens.into_iter().peekable();
    while let Some(mut token) = rest.next() {
        if ends_row(&token, text) {
            row += 1;
            let below = related.get(row).copied().unwrap_or(false);
            let first = rest.peek().map_or(Kind::End, |next| next.kind);
            let goes_on = match first {
                Kind::Minus => !(above && below),
                Kind::Plus | Kind::Dot | Kind::Cross => true,
                kind => kind.is_relation(),
            };
            joins = goes_on && !kept.is_empty();
            above = below || joins && above;
            if joins {
                continue;
            }
        } else if std::mem::take(&mut joins) {
            // what spaces the row is no end of the expression
            token.gap = Gap::SPACE;
        }
        kept.push(token);
    }
    kept
}

/// `\\`, and not `;`.
fn ends_row(token: &Token, text: &str) -> bool {
    token.kind == Kind::Break && token.span.of(text).starts_with("\\\\")
}

/// Of each row whether a relation stands in it, outside brackets and before a quantifier.
fn rows_related(tokens: &[Token], text: &str) -> Vec<bool> {
    let mut rows = vec![false];
    let (mut depth, mut quantified) = (0_u32, false);
    for token in tokens {
        if ends_row(token, text) {
            rows.push(false);
            (depth, quantified) = (0, false);
        } else if token.kind.opens() {
            depth += 1;
        } else if token.kind.closes() {
            depth = depth.saturating_sub(1);
        } else if token.kind == Kind::ForAll {
            quantified = true;
        } else if token.kind.is_relation()
            && depth == 0
            && !quantified
            && let Some(last) = rows.last_mut()
        {
            *last = true;
        }
    }
    rows
}
