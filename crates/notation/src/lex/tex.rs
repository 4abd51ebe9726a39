//! What begins with a backslash.

use super::phrase::{is_distinct, phrase};
use super::table;
use super::token::{Gap, Kind};
use super::{Lexer, Start, lex, lex_from};
use crate::latex::{read_verbatim, unescaped};

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
            '[' | ']' => self.displayed(c == '[', 2),
            '(' | ')' => {
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
        self.distribute();
        let start = self.at;
        let starred = usize::from(self.text[start + 2..].starts_with('*'));
        self.take(Kind::Break, 2 + starred);
        let rest = self.rest();
        // `\\[2pt]`
        if rest.starts_with('[')
            && let Some(end) = rest.bytes().take(40).position(|b| b == b']')
            && rest[1..end].ends_with(|c: char| c.is_ascii_alphabetic())
        {
            self.at += end + 1;
        }
        debug_assert!(self.at > start);
    }

    /// `V \ {r}` is a set difference; `\ ` elsewhere is a space.
    fn difference_or_space(&mut self, rest: &str) {
        let after = rest.trim_start_matches([' ', '\t']);
        // x_j ∈ {0,1}\ (j = 1,…,n)
        let quantifier = after.starts_with('(')
            && after
                .split(')')
                .next()
                .is_some_and(|inner| ["=", "\\in", "∈"].iter().any(|sign| inner.contains(sign)));
        let set =
            after.chars().next().filter(|_| !quantifier).is_some_and(|c| {
                c == '{' || self.environment == 0 && (c == '(' || c.is_uppercase())
            });
        let last = |back: usize| self.tokens.iter().rev().nth(back).map(|t| t.kind);
        let behind = match last(0) {
            // V_0 \ {r}
            Some(Kind::Number) => last(1) == Some(Kind::Underscore),
            Some(kind) => {
                matches!(kind, Kind::Word | Kind::RightParen | Kind::RightBrace | Kind::EmptySet)
            }
            None => false,
        };
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
        if self.expands(name, start, start + whole) || self.defines(name, start + whole + starred) {
            return;
        }
        if let Some(kind) = table::command(name) {
            self.take(kind, whole);
            if kind == Kind::Fraction {
                self.digits_of_fraction();
            }
            return;
        }
        if let Some(letter) = table::letter(name) {
            self.at += whole;
            return self.push_text(Kind::Word, start, start + whole, letter.to_owned());
        }
        if table::vanishes(name) {
            self.at += whole;
            // the size of a bracket is no space before it
            if !name.to_ascii_lowercase().starts_with("big") {
                self.gap.add(Gap::SPACE);
            }
            return;
        }
        match name {
            // how a character is set
            "expandafter" => self.comment(),
            "left" => self.left(whole),
            "right" => self.right(whole),
            "hskip" | "kern" | "mkern" | "mskip" => {
                self.at += whole + self.length_of_skip(start + whole);
                self.gap.add(Gap::SPACE);
            }
            "not" => self.negated(start + whole),
            "rm" | "it" | "bf" | "sf" | "tt" | "cal" | "sl" | "normalfont" => {
                self.switch(name, start, whole);
            }
            _ if table::spaces(name) => {
                self.at += whole + starred;
                self.gap.add(Gap::QUAD);
                self.gap.add(Gap::SPACE);
            }
            _ => self.with_argument(name, start, start + whole + starred),
        }
    }

    /// `\tfrac12` is a half: each argument without braces is one digit.
    fn digits_of_fraction(&mut self) {
        for _ in 0..2 {
            let rest = self.rest();
            let digit = rest.trim_start().starts_with(|c: char| c.is_ascii_digit());
            if !digit {
                return;
            }
            self.at = self.text.len() - rest.trim_start().len();
            self.take(Kind::Number, 1);
        }
    }

    /// `\\not\\in`, `\\not=`.
    fn negated(&mut self, after: usize) {
        let start = self.at;
        let rest = self.text[after..].trim_start();
        let found = [("\\in", Kind::NotIn), ("=", Kind::NotEqual)];
        let found = found.iter().find(|(sign, _)| rest.starts_with(sign));
        let Some((sign, kind)) = found else { return self.take(Kind::Unknown, after - start) };
        self.at = self.text.len() - rest.len() + sign.len();
        self.push(*kind, start, self.at);
    }

    /// `1em`, `3mu plus 1fil`: the length of what follows `\hskip`.
    fn length_of_skip(&self, after: usize) -> usize {
        let rest = &self.text[after..];
        let number = |c: char| c.is_ascii_digit() || " .-+".contains(c);
        let unit = rest.trim_start_matches(number);
        let end = unit.find(|c: char| !c.is_ascii_alphabetic()).unwrap_or(unit.len());
        rest.len() - unit.len() + end.min(2)
    }

    /// `{\rm s.t.}`, `{\cal N}`: a switch of the letters up to the end of its group.
    fn switch(&mut self, name: &str, start: usize, whole: usize) {
        let grouped = self
            .tokens
            .last()
            .is_some_and(|t| t.kind == Kind::LeftBrace && t.span.end - t.span.start == 1);
        let opened = self.tokens.last().map_or(0, |t| t.span.start as usize);
        let Some((_, end)) = self.argument(opened).filter(|_| grouped) else {
            self.at += whole;
            return self.gap.add(Gap::SPACE);
        };
        let inner = self.text[start + whole..end - 1].trim();
        if let Some(brace) = self.tokens.pop() {
            self.gap = brace.gap;
        }
        self.at = end;
        match name {
            "cal" => self.decorated("mathcal", inner, start),
            "bf" if phrase(inner).is_none() => self.decorated("mathbf", inner, start),
            _ => self.upright(inner, start),
        }
    }

    fn with_argument(&mut self, name: &str, start: usize, after: usize) {
        let argument = self.argument(after);
        let text = self.text;
        let (inner, end) = argument.map_or(("", after), |(range, end)| (&text[range], end));
        self.at = end;
        match name {
            "texttt" if !self.is_raised() => {
                self.push_text(Kind::Text, start, end, read_verbatim(inner.trim()));
            }
            "text" | "mbox" | "textrm" | "textit" | "textup" | "textbf" | "textsf" | "textsc"
            | "hbox" | "emph" | "textnormal" | "texttt" => self.text_argument(inner, start),
            "intertext" | "shortintertext" => {
                self.push(Kind::Break, start, end);
                if phrase(inner).is_some_and(|kind| kind != Kind::And) {
                    self.text_argument(inner, start);
                }
                self.push(Kind::Break, start, end);
            }
            "underset" | "stackrel" => self.stacked(name, inner, start),
            "mathrm" | "operatorname" => self.upright(inner.trim(), start),
            "mathit" | "mathsf" | "mathtt" | "mathnormal" => self.name_or_text(inner.trim(), start),
            "tag" => {
                let text =
                    inner.trim_matches(|c: char| c.is_whitespace() || "()$".contains(c)).to_owned();
                self.push_text(Kind::Tag, start, end, text);
            }
            "begin" if matches!(inner, "cases" | "dcases") => self.cases(inner, start),
            "begin" => {
                self.begin(inner);
                self.push_text(Kind::Break, start, self.at, "display".to_owned());
            }
            "end" => {
                self.distribute();
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
            _ => self.other_command(name, start, after),
        }
    }

    /// A command whose arguments say nothing, or all but the last of them.
    fn other_command(&mut self, name: &str, start: usize, after: usize) {
        self.at = after;
        let before = table::dropped(name);
        let Some(count) = before.or_else(|| table::sets_last(name)) else {
            return self.push(Kind::Unknown, start, after);
        };
        for _ in 0..count {
            if let Some((_, end)) = self.argument(self.at) {
                self.at = end;
            }
        }
        if before.is_some() {
            return self.gap.add(Gap::SPACE);
        }
        if let Some((range, end)) = self.argument(self.at) {
            self.at = end;
            let (text, offset) = (self.text, range.start);
            match text[range.clone()].trim().strip_prefix("\\rm") {
                Some(words) => self.upright(words.trim(), start),
                None => self.relex(&text[range], offset),
            }
        }
    }

    /// `\underset{x}{\min}`, `\stackrel{a}{b}`: what stands below an operator is its index, two
    /// conditions one over the other are both meant, and a decoration of anything else is not.
    fn stacked(&mut self, name: &str, first: &str, start: usize) {
        let text = self.text;
        let Some((range, end)) = self.argument(self.at) else { return };
        let base = &text[range.clone()];
        self.at = end;
        let big = ["\\sum", "\\prod", "\\min", "\\max"];
        let related = lex(first, 0).iter().any(|t| t.kind.is_relation());
        let sense =
            lex(base, 0).first().is_some_and(|t| matches!(t.kind, Kind::Minimise | Kind::Maximise));
        if name == "underset" && (sense || big.contains(&base.trim())) && related {
            self.stand_for(&format!("{base}_{{{first}}}"), start, end);
        } else if name == "stackrel" && related && base.trim().len() > 1 {
            self.stand_for(&format!("{first}, {base}"), start, end);
        } else {
            self.relex(base, range.start);
        }
    }

    /// The argument at `after`: in braces, or one letter or command. Range of its inside, and
    /// where it ends.
    pub(super) fn argument(&self, after: usize) -> Option<(std::ops::Range<usize>, usize)> {
        let text = self.text;
        let at = after + text[after..].len()
            - text[after..].trim_start_matches([' ', '\t', '\n', '\r']).len();
        let rest = &text[at..];
        let first = rest.chars().next()?;
        if first == '{' {
            let close = self.closer(at).filter(|close| close - at < 20_000)?;
            return Some((at + 1..close, close + 1));
        }
        if first == '\\' {
            let letters =
                rest[1..].find(|c: char| !c.is_ascii_alphabetic()).unwrap_or(rest.len() - 1);
            return (letters > 0).then(|| (at..at + 1 + letters, at + 1 + letters));
        }
        first.is_alphanumeric().then(|| (at..at + first.len_utf8(), at + first.len_utf8()))
    }

    /// Where a brace is closed. O(text) once, then O(log braces).
    fn closer(&self, open: usize) -> Option<usize> {
        let closers = self.closers.get_or_init(|| {
            let (mut open, mut found) = (Vec::new(), Vec::new());
            let mut escaped = false;
            for (at, byte) in self.text.bytes().enumerate() {
                let literal = escaped;
                escaped = byte == b'\\' && !literal;
                match byte {
                    _ if literal => {}
                    b'{' => open.push(at),
                    b'}' => found.extend(open.pop().map(|from| (from, at))),
                    _ => {}
                }
            }
            found.sort_unstable();
            found
        });
        let at = closers.binary_search_by_key(&open, |(from, _)| *from).ok()?;
        closers.get(at).map(|(_, to)| *to)
    }

    /// Whether the next token is an index or a power, alone or first in its group.
    fn is_raised(&self) -> bool {
        let mut last = self.tokens.iter().rev().map(|t| t.kind);
        let first = last.next();
        let first = if first == Some(Kind::LeftBrace) { last.next() } else { first };
        matches!(first, Some(Kind::Underscore | Kind::Caret))
    }

    /// `\text{…}`: a word of the language, or text.
    fn text_argument(&mut self, inner: &str, start: usize) {
        if inner.trim().is_empty() {
            return self.gap.add(Gap::SPACE);
        }
        let end = self.at;
        let own = inner.trim().trim_matches('$').trim();
        if self.is_raised() && !own.chars().all(|c| c.is_ascii_digit()) {
            return self.push_text(Kind::Text, start, end, unescaped(own));
        }
        let worded = inner.split('$').step_by(2).any(|piece| phrase(piece).is_some());
        if inner.contains('$') && worded {
            return self.mixed_text(inner, start);
        }
        let kind = phrase(inner);
        self.push_text(kind.unwrap_or(Kind::Text), start, end, unescaped(inner.trim()));
        if kind == Some(Kind::ForAll) && is_distinct(inner) {
            self.push_text(Kind::Word, start, end, "distinct".to_owned());
        }
    }

    /// `\text{for all $i \in I$}`: the words and the mathematics in turn.
    fn mixed_text(&mut self, inner: &str, start: usize) {
        let end = self.at;
        for (turn, piece) in inner.split('$').enumerate() {
            let piece = piece.trim();
            if turn % 2 == 1 {
                self.stand_for(piece, start, end);
            } else if let Some(kind) = phrase(piece) {
                self.push_text(kind, start, end, piece.to_owned());
            } else if !piece.is_empty() && piece.chars().any(char::is_alphabetic) {
                self.push_text(Kind::Text, start, end, piece.to_owned());
            } else if piece.starts_with(',') {
                self.push(Kind::Comma, start, end);
            }
        }
    }

    /// `\mathrm{dist}` is the name `dist`; one that is no plain name counts as text.
    fn upright(&mut self, inner: &str, start: usize) {
        let end = self.at;
        let several = inner.chars().count() > 1;
        let plain =
            inner.starts_with(char::is_alphabetic) && inner.chars().all(char::is_alphanumeric);
        if self.is_raised() && several && plain {
            return self.push_text(Kind::Text, start, end, inner.to_owned());
        }
        let words = inner.replace(['~', '\\'], " ");
        let part = |kind: &Kind| matches!(kind, Kind::Data | Kind::Definitions);
        if let Some(kind) = phrase(&words).filter(|kind| several && !part(kind)) {
            return self.push_text(kind, start, end, words.trim().to_owned());
        }
        if inner.starts_with('\\') {
            return self.stand_for(inner, start, end);
        }
        self.name_or_text(inner, start);
    }

    /// A plain name, else text.
    fn name_or_text(&mut self, inner: &str, start: usize) {
        let end = self.at;
        let plain =
            inner.starts_with(char::is_alphabetic) && inner.chars().all(char::is_alphanumeric);
        let plain = plain && table::word(inner).is_none();
        self.push_text(if plain { Kind::Word } else { Kind::Text }, start, end, inner.to_owned());
    }

    fn begin(&mut self, name: &str) {
        self.environment += 1;
        let optional = self.rest().trim_start();
        if optional.starts_with('[')
            && let Some(end) = optional.bytes().take(12).position(|b| b == b']')
            && optional[1..end].chars().all(|c| c.is_ascii_lowercase())
        {
            self.at = self.text.len() - optional.len() + end + 1;
        }
        let arguments = match name.trim_end_matches('*') {
            "array" | "tabular" | "alignat" | "alignedat" | "xalignat" | "xxalignat"
            | "IEEEeqnarray" | "IEEEeqnarraybox" | "minipage" | "multicols" => 1,
            "tabularx" | "tabular*" => 2,
            _ => 0,
        };
        for _ in 0..arguments {
            if let Some((_, end)) = self.argument(self.at) {
                self.at = end;
            }
        }
    }

    /// The tokens of an argument; a line break in it separates as a comma does.
    pub(super) fn relex(&mut self, inner: &str, offset: usize) {
        if self.depth > 8 {
            return self.push(Kind::Unknown, offset, offset + inner.len());
        }
        let shift = u32::try_from(offset).unwrap_or(u32::MAX);
        let from = Start { depth: self.depth + 1, environment: self.environment, at: 0 };
        let macros = std::mem::take(&mut self.macros);
        let (tokens, _, macros) = lex_from(inner, from, macros);
        self.macros = macros;
        for mut token in tokens {
            if token.kind == Kind::End {
                continue;
            }
            token.span.start = token.span.start.saturating_add(shift);
            token.span.end = token.span.end.saturating_add(shift);
            if token.kind == Kind::Break {
                token.kind = Kind::Comma;
            }
            self.gap.add(token.gap.without_lines());
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
