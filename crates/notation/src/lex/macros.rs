//! Macros of the text itself: `\newcommand`, `\def`, `\let`, `\DeclareMathOperator`.

use std::collections::BTreeMap;

use super::token::Kind;
use super::{Lexer, Start, lex_from};

/// How deep macros may use one another.
const DEPTH_LIMIT: u32 = 12;
/// How many tokens may come from macros in one text.
const TOKEN_LIMIT: usize = 200_000;

/// The macros known so far, and what is left of the tokens that they may make.
#[derive(Debug, Default)]
pub(super) struct Macros {
    known: BTreeMap<String, (usize, String)>,
    made: usize,
}

impl Lexer<'_> {
    /// Whether `\name` defines a macro; then the definition is read.
    pub(super) fn defines(&mut self, name: &str, after: usize) -> bool {
        let operator = name == "DeclareMathOperator";
        let known =
            matches!(name, "newcommand" | "renewcommand" | "providecommand" | "def" | "let");
        if !known && !operator {
            return false;
        }
        self.at = after;
        let Some((own, mut end)) = self.macro_name(after) else { return true };
        if name == "let" {
            self.at = end + usize::from(self.text[end..].starts_with('='));
            let body = self.argument(self.at);
            if let Some((range, end)) = body {
                let body = self.text[range].to_owned();
                self.at = end;
                self.macros.known.insert(own, (0, body));
            }
            return true;
        }
        let mut parameters = 0;
        if let Some((count, next)) = parameters_of(&self.text[end..]) {
            (parameters, end) = (count, end + next);
        }
        self.at = end;
        if let Some((range, end)) = self.argument(end) {
            let body = &self.text[range];
            let body = if operator { format!("\\operatorname{{{body}}}") } else { body.to_owned() };
            self.at = end;
            self.macros.known.insert(own, (parameters, body));
        }
        true
    }

    /// `{\name}` or `\name`, and where it ends.
    fn macro_name(&self, after: usize) -> Option<(String, usize)> {
        let (range, end) = self.argument(after)?;
        let name = self.text[range].trim().strip_prefix('\\')?;
        Some((name.to_owned(), end))
    }

    /// Puts what a macro stands for in its place; whether there is such a macro.
    pub(super) fn expands(&mut self, name: &str, start: usize, after: usize) -> bool {
        let Some((parameters, body)) = self.macros.known.get(name).cloned() else { return false };
        let (mut body, mut end) = (body, after);
        for number in 1..=parameters {
            let argument = self.argument(end);
            let (text, next) = argument.map_or(("", end), |(r, e)| (&self.text[r], e));
            body = body.replace(&format!("#{number}"), text);
            end = next;
        }
        self.at = end;
        if self.depth >= DEPTH_LIMIT || self.macros.made > TOKEN_LIMIT || body.len() > 100_000 {
            self.push(Kind::Unknown, start, end);
            return true;
        }
        self.stand_for(&body, start, end);
        true
    }

    /// Tokens of another text, all of them at one place of this one.
    pub(super) fn stand_for(&mut self, body: &str, start: usize, end: usize) {
        let from = Start { depth: self.depth + 1, environment: self.environment, at: 0 };
        let macros = std::mem::take(&mut self.macros);
        let (tokens, environment, macros) = lex_from(body, from, macros);
        self.macros = macros;
        self.environment = environment;
        for token in tokens.into_iter().filter(|t| t.kind != Kind::End) {
            self.macros.made += 1;
            self.gap.add(token.gap.without_lines());
            let bare = token.text.is_empty() && token.kind == Kind::Number;
            let text = if bare { token.span.of(body).to_owned() } else { token.text };
            self.push_text(token.kind, start, end, text);
        }
    }
}

/// `[2]` or `#1#2` after the name of a macro: how many parameters, and how long that is.
fn parameters_of(rest: &str) -> Option<(usize, usize)> {
    if let Some(inner) = rest.strip_prefix('[') {
        let end = inner.find(']')?;
        return Some((inner[..end].trim().parse().ok().filter(|n| *n <= 9)?, end + 2));
    }
    let end = rest.find('{').filter(|_| rest.starts_with('#'))?;
    Some((rest[..end].matches('#').count().min(9), end))
}
