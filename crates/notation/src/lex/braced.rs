//! `\\left` and `\\right` with one bracket of two: the brace before cases, before a whole model, and
//! the one behind several rows that share what follows it.

use super::Lexer;
use super::token::{Gap, Kind, Token};

/// How many tokens the rows of one brace may become.
const LIMIT: usize = 20_000;

impl Lexer<'_> {
    /// Whether `{}` stands here as TeX has it, to space a sign as one between two operands.
    pub(super) fn is_empty_group(&self) -> bool {
        let Some(rest) = self.rest().strip_prefix("{}") else { return false };
        let raised = self.tokens.last().map(|t| t.kind);
        let raised = matches!(raised, Some(Kind::Underscore | Kind::Caret));
        let sign = rest.trim_start_matches(' ').starts_with(['+', '-', '−', '=']);
        !raised && (self.environment > 0 || sign)
    }

    /// `\\left.`, `\\left\\{` before an array, or a bracket that stands for itself.
    pub(super) fn left(&mut self, whole: usize) {
        let start = self.at;
        self.at += whole;
        self.gap.add(Gap::SPACE);
        let text = self.text;
        let rest = text[self.at..].trim_start();
        let at = text.len() - rest.len();
        if rest.starts_with('.') {
            self.at = at + 1;
            return self.lefts.push(Some(self.tokens.len()));
        }
        self.lefts.push(None);
        let brace = ["\\{", "\\lbrace"].into_iter().find(|sign| rest.starts_with(sign));
        let Some(brace) = brace else { return };
        let inner = rest[brace.len()..].trim_start();
        if !inner.starts_with("\\begin{") {
            return;
        }
        let last = self.tokens.last().map(|t| t.kind);
        let value = last.is_some_and(|kind| kind.is_relation() || kind.is_operator());
        let begun = inner.strip_prefix("\\begin{array}");
        self.at = text.len() - inner.len();
        if let (true, Some(rows)) = (value, begun) {
            self.at = text.len() - rows.len();
            if let Some((_, end)) = self.argument(self.at) {
                self.at = end;
            }
            self.cases("array", start);
        }
    }

    /// `\\right.`, `\\right\\}` of an empty left, or a bracket that stands for itself.
    pub(super) fn right(&mut self, whole: usize) {
        self.at += whole;
        self.gap.add(Gap::SPACE);
        let open = self.lefts.pop().flatten();
        let rest = self.rest().trim_start();
        let at = self.text.len() - rest.len();
        let signs = [".", "\\}", "\\rbrace"];
        let Some(sign) = signs.into_iter().find(|sign| rest.starts_with(sign)) else { return };
        match open {
            _ if sign == "." => self.at = at + 1,
            Some(from) => {
                self.at = at + sign.len();
                self.braced = Some((from, self.tokens.len()));
            }
            None => {}
        }
    }

    /// What follows a brace behind several rows is put behind each of them.
    pub(super) fn distribute(&mut self) {
        let Some((from, to)) = self.braced.take() else { return };
        if from > to || to > self.tokens.len() {
            return;
        }
        let tail = self.tokens.split_off(to);
        let rows = self.tokens.split_off(from);
        let rows: Vec<&[Token]> =
            rows.split(|t| t.kind == Kind::Break).filter(|row| !row.is_empty()).collect();
        if rows.len() * tail.len() > LIMIT {
            return;
        }
        for (number, row) in rows.iter().enumerate() {
            if number > 0 {
                let last = row[0].span;
                let (kind, gap, text) = (Kind::Break, Gap::default(), String::new());
                self.tokens.push(Token { kind, span: last, gap, text });
            }
            self.tokens.extend(row.iter().cloned());
            self.tokens.extend(tail.iter().cloned());
        }
    }
}
