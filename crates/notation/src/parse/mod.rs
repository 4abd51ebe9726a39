//! The parser: tokens to a tree, by recursive descent. It never fails: a line that cannot be
//! read gives a diagnostic with its place and is skipped to its end.

mod document;
mod expression;
mod line;
mod name;
mod number;
mod primary;
mod quantifier;

use crate::diagnostic::{Diagnostic, syntax as message, tidy};
use crate::lex::lex;
use crate::lex::token::{Gap, Kind as T, Token};
use crate::place::Span;
use crate::syntax::Formulation;

/// How deep brackets, sums and powers may nest.
pub const NESTING_LIMIT: u32 = 100;
/// The longest text that is read, in bytes.
pub const TEXT_LIMIT: usize = 2_000_000;
/// How many diagnostics of one text are kept.
const DIAGNOSTIC_LIMIT: usize = 200;

/// What a text says, and what in it could not be read.
#[derive(Debug, Clone, PartialEq)]
pub struct Parse {
    /// The tree of all that could be read.
    pub tree: Formulation,
    /// What could not, in the order of the text.
    pub diagnostics: Vec<Diagnostic>,
}

/// Reads a text. `O(bytes)`.
#[must_use]
pub fn parse(text: &str) -> Parse {
    if text.len() > TEXT_LIMIT {
        let diagnostics = vec![message::too_long(text.len())];
        return Parse { tree: Formulation::default(), diagnostics };
    }
    let (title, start) = document::title(text);
    let mut parser = Parser {
        text,
        tokens: lex(text, start),
        at: 0,
        end: 0,
        depth: 0,
        place: Surroundings::default(),
        diagnostics: Vec::new(),
    };
    let mut tree = parser.document();
    tree.title = title;
    Parse { tree, diagnostics: tidy(parser.diagnostics) }
}

/// The value of a word that is all digits.
pub(crate) fn number_text(word: &str) -> Option<model::Number> {
    word.starts_with(|c: char| c.is_ascii_digit()).then(|| number::number(word)).flatten()
}

/// A line cannot be read; the reason has been reported.
#[derive(Debug)]
struct Unread;

type Read<T> = Result<T, Unread>;

/// What the surroundings of an expression forbid.
#[derive(Debug, Clone, Copy, Default)]
struct Surroundings {
    /// Inside `|…|`: a bar closes.
    bars: bool,
    /// Not inside brackets, after a relation: `\quad` ends the expression.
    quad_ends: bool,
    /// In `data` and `definitions`: two spaces end the expression.
    wide_ends: bool,
    /// In a set: a bar separates, as a colon does.
    bar_separates: bool,
}

struct Parser<'t> {
    text: &'t str,
    tokens: Vec<Token>,
    at: usize,
    /// The end of the line that is being read: a token there counts as the end.
    end: usize,
    depth: u32,
    place: Surroundings,
    diagnostics: Vec<Diagnostic>,
}

impl Parser<'_> {
    fn peek(&self) -> T {
        self.ahead(0)
    }

    fn ahead(&self, by: usize) -> T {
        if self.at + by >= self.end { T::End } else { self.tokens[self.at + by].kind }
    }

    /// What stands before the next token.
    fn gap(&self) -> Gap {
        if self.at >= self.end { Gap::default() } else { self.tokens[self.at].gap }
    }

    fn bump(&mut self) {
        if self.at < self.end {
            self.at += 1;
        }
    }

    fn eat(&mut self, kind: T) -> bool {
        let found = self.peek() == kind;
        if found {
            self.bump();
        }
        found
    }

    fn expect(&mut self, kind: T, wanted: &str) -> Read<()> {
        if self.eat(kind) { Ok(()) } else { Err(self.expected(wanted)) }
    }

    /// The place of the next token; at the end of a line the place just behind it.
    fn here(&self) -> Span {
        if self.at < self.end {
            return self.tokens[self.at].span;
        }
        let at = self.at.checked_sub(1).map_or(0, |i| self.tokens[i].span.end);
        Span { start: at, end: at }
    }

    /// From `start` to the last token that was read.
    fn since(&self, start: Span) -> Span {
        let last = self.at.checked_sub(1).map_or(start, |i| self.tokens[i].span);
        if last.end < start.start { start } else { start.to(last) }
    }

    fn report(&mut self, diagnostic: Diagnostic) -> Unread {
        if self.diagnostics.len() < DIAGNOSTIC_LIMIT {
            self.diagnostics.push(diagnostic);
        }
        Unread
    }

    fn expected(&mut self, wanted: &str) -> Unread {
        let (kind, span) = (self.peek(), self.here());
        let found = kind
            .noun()
            .map_or_else(|| format!("“{}”", message::short(span.of(self.text))), str::to_owned);
        self.report(message::expected(span, wanted, &found))
    }

    /// Runs a rule that may nest; refuses to nest too deep.
    fn nested<V>(&mut self, rule: impl FnOnce(&mut Self) -> Read<V>) -> Read<V> {
        if self.depth >= NESTING_LIMIT {
            let span = self.here();
            return Err(self.report(message::too_deep(span, NESTING_LIMIT)));
        }
        self.depth += 1;
        let result = rule(self);
        self.depth -= 1;
        result
    }

    /// Runs a rule in other surroundings.
    fn within<V>(
        &mut self,
        place: Surroundings,
        rule: impl FnOnce(&mut Self) -> Read<V>,
    ) -> Read<V> {
        let before = std::mem::replace(&mut self.place, place);
        let result = rule(self);
        self.place = before;
        result
    }
}
