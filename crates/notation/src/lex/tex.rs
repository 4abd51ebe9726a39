//! What begins with a backslash.

use super::table;
use super::token::{Gap, Kind};
use super::{Lexer, lex_nested};
use crate::latex::unescaped;

impl Lexer<'_> {
    pub(super) fn backslash(&mut self) {
        let start = self.at;
        let rest = &self.text[start + 1..];
        let Some(c) = rest.chars().next() else { return self.take(Kind::Unknown, 1) };
        match c {
            '\\' => self.line_break(),
            '{' => self.take(Kind::LeftBrace, 2),
            '}' => self.take(Kind::RightBrace, 2),
            '|' => self.take(Kind::Bar, 2),
            ',' | ';' | ':' | '!' | '>' => {
                self.at += 2;
                self.gap.add(Gap::SPACE);
            }
            '[' | ']' | '(' | ')' => {
                self.at += 2;
                self.gap.add(Gap::SPACE);
            }
            '%' | '#' | '$' | '&' | '_' => self.take(Kind::Unknown, 2),
            _ if c.is_whitespace() => self.difference_or_space(rest),
            _ if c.is_ascii_alphabetic() => self.command(rest),
            _ => self.take(Kind::Unknown, 1 + c.len_utf8()),
        }
    }

    fn line_break(&mut self) {
        let start = self.at;
        self.take(Kind::Break, 2);
        let rest = self.rest();
        // `\\[2pt]`
        if rest.starts_with('[')
            && let Some(end) = rest.bytes().take(16).position(|b| b == b']')
            && rest[1..end].ends_with(|c: char| c.is_ascii_alphabetic())
        {
            self.at += end + 1;
        }
        debug_assert!(self.at > start);
    }

    /// `V \ {r}` is a set difference; `\ ` elsewhere is a space.
    fn difference_or_space(&mut self, rest: &str) {
        let next = rest.trim_start_matches([' ', '\t']).chars().next();
        let set = next.is_some_and(|c| matches!(c, '{' | '(') || c.is_uppercase());
        let behind = self.tokens.last().is_some_and(|t| {
            matches!(t.kind, Kind::Word | Kind::RightParen | Kind::RightBrace | Kind::EmptySet)
        });
        if set && behind {
            self.take(Kind::Difference, 1);
        } else {
            self.at += 1;
            self.gap.add(Gap::SPACE);
        }
    }

    fn command(&mut self, rest: &str) {
        let length = rest.find(|c: char| !c.is_ascii_alphabetic()).unwrap_or(rest.len());
        let name = &rest[..length];
        let starred = usize::from(rest[length..].starts_with('*'));
        let start = self.at;
        let whole = 1 + length;
        if let Some(kind) = table::command(name) {
            return self.take(kind, whole);
        }
        if let Some(letter) = table::letter(name) {
            self.at += whole;
            return self.push_text(Kind::Word, start, start + whole, letter.to_owned());
        }
        if table::vanishes(name) {
            self.at += whole;
            return self.gap.add(Gap::SPACE);
        }
        if table::spaces(name) {
            self.at += whole + starred;
            self.gap.add(Gap::QUAD);
            return self.gap.add(Gap::SPACE);
        }
        self.with_argument(name, start, start + whole + starred);
    }

    fn with_argument(&mut self, name: &str, start: usize, after: usize) {
        let argument = self.argument(after);
        let text = self.text;
        let (inner, end) = argument.map_or(("", after), |(range, end)| (&text[range], end));
        self.at = end;
        match name {
            "text" | "mbox" | "textrm" | "textit" | "textup" => self.text_argument(inner, start),
            "mathrm" | "mathit" | "operatorname" | "mathsf" | "texttt" | "mathtt" => {
                self.upright(inner.trim(), start);
            }
            "tag" => {
                let text =
                    inner.trim_matches(|c: char| c.is_whitespace() || "()$".contains(c)).to_owned();
                self.push_text(Kind::Tag, start, end, text);
            }
            "label" | "hspace" | "vspace" | "phantom" | "hphantom" | "vphantom" => {
                self.gap.add(Gap::SPACE);
            }
            "begin" => {
                self.begin(inner);
                self.push(Kind::Break, start, self.at);
            }
            "end" => {
                self.environment = self.environment.saturating_sub(1);
                self.push(Kind::Break, start, end);
            }
            "substack" => self.relex(inner, end - 1 - inner.len()),
            "pmod" => {
                self.push(Kind::Modulo, start, end);
                self.relex(inner, end - 1 - inner.len());
            }
            "mathbb" | "mathds" | "mathbf" | "boldsymbol" | "bm" | "mathcal" | "bar" | "hat"
            | "tilde" | "vec" | "overline" | "underline" | "dot" | "widehat" | "widetilde"
            | "mathscr" => {
                self.decorated(name, inner.trim(), start);
            }
            _ => {
                self.at = after;
                self.push(Kind::Unknown, start, after);
            }
        }
    }

    /// The argument at `after`: in braces, or one letter or command. Range of its inside, and
    /// where it ends.
    fn argument(&self, after: usize) -> Option<(std::ops::Range<usize>, usize)> {
        let text = self.text;
        let at = after + text[after..].len() - text[after..].trim_start_matches([' ', '\t']).len();
        let rest = &text[at..];
        let first = rest.chars().next()?;
        if first == '{' {
            let mut depth = 0_u32;
            for (i, b) in rest.bytes().enumerate().take(4096) {
                match b {
                    b'{' => depth += 1,
                    b'}' => depth -= 1,
                    _ => {}
                }
                if depth == 0 {
                    return Some((at + 1..at + i, at + i + 1));
                }
            }
            return None;
        }
        if first == '\\' {
            let letters =
                rest[1..].find(|c: char| !c.is_ascii_alphabetic()).unwrap_or(rest.len() - 1);
            return (letters > 0).then(|| (at..at + 1 + letters, at + 1 + letters));
        }
        first.is_alphanumeric().then(|| (at..at + first.len_utf8(), at + first.len_utf8()))
    }

    /// `\text{…}`: a word of the language, or text.
    fn text_argument(&mut self, inner: &str, start: usize) {
        let words: Vec<&str> = inner.split_whitespace().collect();
        let lower = words.join(" ").to_lowercase();
        let kind = match lower.trim_matches([',', ':']) {
            "s.t." | "s. t." | "st" | "such that" | "with" | "if" | "where" => Some(Kind::SuchThat),
            "subject to" => Some(Kind::SubjectTo),
            "minimise" | "minimize" | "min" => Some(Kind::Minimise),
            "maximise" | "maximize" | "max" => Some(Kind::Maximise),
            "for all" | "for each" | "for every" | "for" => Some(Kind::ForAll),
            "and" => Some(Kind::And),
            "or" => Some(Kind::Or),
            "odd" | "is odd" => Some(Kind::Odd),
            "even" | "is even" => Some(Kind::Even),
            "free" | "unrestricted" | "is free" => Some(Kind::Free),
            "clique in" | "is a clique in" => Some(Kind::Clique),
            "data" => Some(Kind::Data),
            "definitions" => Some(Kind::Definitions),
            "" => {
                self.gap.add(Gap::SPACE);
                return;
            }
            _ => None,
        };
        let end = self.at;
        self.push_text(kind.unwrap_or(Kind::Text), start, end, unescaped(inner.trim()));
    }

    /// `\mathrm{dist}` is the name `dist`; one that is no plain name counts as text.
    fn upright(&mut self, inner: &str, start: usize) {
        let plain =
            inner.starts_with(char::is_alphabetic) && inner.chars().all(char::is_alphanumeric);
        let plain = plain && table::word(inner).is_none();
        let end = self.at;
        self.push_text(if plain { Kind::Word } else { Kind::Text }, start, end, inner.to_owned());
    }

    fn begin(&mut self, name: &str) {
        self.environment += 1;
        if matches!(name, "array" | "tabular" | "alignat" | "alignat*")
            && let Some((_, end)) = self.argument(self.at)
        {
            self.at = end;
        }
    }

    /// The tokens of an argument; a line break in it separates as a comma does.
    fn relex(&mut self, inner: &str, offset: usize) {
        if self.depth > 4 {
            return self.push(Kind::Unknown, offset, offset + inner.len());
        }
        let shift = u32::try_from(offset).unwrap_or(u32::MAX);
        for mut token in lex_nested(inner, 0, self.depth + 1) {
            if token.kind == Kind::End {
                continue;
            }
            token.span.start = token.span.start.saturating_add(shift);
            token.span.end = token.span.end.saturating_add(shift);
            if token.kind == Kind::Break {
                token.kind = Kind::Comma;
            }

            token.gap = std::mem::take(&mut self.gap);
            self.tokens.push(token);
        }
    }

    /// `\mathbb{R}`, `\bar d`, `\mathcal{A}`.
    fn decorated(&mut self, name: &str, inner: &str, start: usize) {
        let end = self.at;
        if matches!(name, "mathbb" | "mathds" | "mathbf") {
            let kind = match inner {
                "R" if name != "mathbf" => Some(Kind::Reals),
                "Z" if name != "mathbf" => Some(Kind::Integers),
                "N" if name != "mathbf" => Some(Kind::Naturals),
                "B" if name != "mathbf" => Some(Kind::Binaries),
                _ => None,
            };
            if let Some(kind) = kind {
                return self.push(kind, start, end);
            }
        }
        let letter: Option<&str> = inner.strip_prefix('\\').and_then(table::letter);
        let plain = if inner.starts_with('\\') { letter } else { Some(inner) };
        let Some(plain) = plain.filter(|p| !p.is_empty() && p.chars().all(char::is_alphanumeric))
        else {
            return self.push(Kind::Unknown, start, end);
        };
        let one = plain.chars().count() == 1;
        let text = if one { format!("\\{name} {plain}") } else { format!("\\{name}{{{plain}}}") };
        self.push_text(Kind::Word, start, end, text);
    }
}
