//! The lexer: text to tokens. It never fails; what it does not know becomes
//! [`Kind::Unknown`], which the parser names in its message.

mod braced;
pub(crate) mod cases;
mod foreign;
mod macros;
mod phrase;
pub(crate) mod prose;
mod rows;
mod table;
mod tex;
pub(crate) mod token;

use std::cell::OnceCell;

use crate::place::Span;
use macros::Macros;
pub(crate) use table::letter_command;
use token::{Gap, Kind, Token};

/// All tokens of `text` from byte `start` on, ending with one of kind `End`. `O(bytes)`.
pub(crate) fn lex(text: &str, start: usize) -> Vec<Token> {
    lex_from(text, Start { at: start, ..Start::default() }, Macros::default()).0
}

/// In what state a lexer begins.
#[derive(Debug, Clone, Copy, Default)]
struct Start {
    at: usize,
    /// How many arguments and macros it stands in.
    depth: u32,
    environment: u32,
}

/// The tokens of a text that may stand inside another, with the state that it leaves behind.
fn lex_from(text: &str, from: Start, macros: Macros) -> (Vec<Token>, u32, Macros) {
    let mut lexer = Lexer {
        text,
        at: from.at,
        gap: Gap::default(),
        tokens: Vec::new(),
        environment: from.environment,
        display: false,
        depth: from.depth,
        macros,
        closers: OnceCell::new(),
        endless: Vec::new(),
        lefts: Vec::new(),
        braced: None,
    };
    lexer.gap.add(Gap::NEWLINE);
    while lexer.at < text.len() {
        let before = lexer.at;
        lexer.step();
        debug_assert!(lexer.at > before, "the lexer must move on");
    }
    lexer.distribute();
    lexer.gap.add(Gap::NEWLINE);
    lexer.push(Kind::End, text.len(), text.len());
    settle_braces(&mut lexer.tokens);
    if from.depth == 0 {
        lexer.tokens = rows::joined(lexer.tokens, text);
        settle_semicolons(&mut lexer.tokens, text);
    }
    (lexer.tokens, lexer.environment, lexer.macros)
}

struct Lexer<'t> {
    text: &'t str,
    at: usize,
    gap: Gap,
    tokens: Vec<Token>,
    /// How many TeX environments are open, in which a line break ends nothing.
    environment: u32,
    /// Whether `$$` has been opened.
    display: bool,
    depth: u32,
    macros: Macros,
    /// Each brace with the one that closes it, found when they are first asked for.
    closers: OnceCell<Vec<(usize, usize)>>,
    /// Environments of cases that do not end behind here.
    endless: Vec<String>,
    /// For each open `\left`, where its content begins if it is an empty one: `\left.`.
    lefts: Vec<Option<usize>>,
    /// The rows between `\left.` and `\right\}`, whose quantifier follows.
    braced: Option<(usize, usize)>,
}

impl Lexer<'_> {
    fn rest(&self) -> &str {
        &self.text[self.at..]
    }

    fn push(&mut self, kind: Kind, start: usize, end: usize) {
        self.push_text(kind, start, end, String::new());
    }

    fn push_text(&mut self, kind: Kind, start: usize, end: usize, text: String) {
        let gap = std::mem::take(&mut self.gap);
        self.tokens.push(Token { kind, span: Span::new(start, end), gap, text });
    }

    fn take(&mut self, kind: Kind, length: usize) {
        let start = self.at;
        self.at += length;
        self.push(kind, start, self.at);
    }

    fn step(&mut self) {
        let Some(c) = self.rest().chars().next() else { return };
        if (c.is_alphabetic() || c == '\\') && self.sentence() {
            return;
        }
        match c {
            _ if foreign::is_white(c) => self.white(),
            '#' | '%' => self.comment(),
            '$' => self.dollar(),
            '\'' | '′' | '’' => self.prime(c),
            '\\' => self.backslash(),
            '{' if self.is_empty_group() => self.at += 2,
            '&' => self.ampersand(),
            '0'..='9' => self.number(),
            '.' if self.rest()[1..].starts_with(|d: char| d.is_ascii_digit()) => self.number(),
            '.' if spaced_dots(self.rest()).is_some() => {
                self.take(Kind::Dots, spaced_dots(self.rest()).unwrap_or(1));
            }
            _ => self.sign_or_word(c),
        }
    }

    fn white(&mut self) {
        let rest = self.rest();
        let length = rest.find(|c: char| !foreign::is_white(c)).unwrap_or(rest.len());
        let piece = &rest[..length];
        let lines = piece.bytes().filter(|&b| b == b'\n').count();
        let mut gap = Gap::SPACE;
        if length > 1 || piece.contains('\t') {
            gap.add(Gap::WIDE);
        }
        if lines > 0 && self.environment == 0 {
            gap.add(Gap::NEWLINE);
            // a comment line between two breaks is no blank line
            if lines > 1 {
                gap.add(Gap::BLANK_LINE);
            }
        }
        self.gap.add(gap);
        self.at += length;
    }

    fn comment(&mut self) {
        let rest = self.rest();
        self.at += rest.find('\n').unwrap_or(rest.len());
    }

    fn ampersand(&mut self) {
        let length = self.rest().bytes().take_while(|&b| b == b'&').count();
        self.gap.add(Gap::QUAD);
        self.gap.add(Gap::SPACE);
        self.at += length;
    }

    /// `$` says nothing; what stands between two `$$` is displayed, and lines do not end there.
    fn dollar(&mut self) {
        if !self.rest().starts_with("$$") {
            self.at += 1;
            return;
        }
        self.display = !self.display;
        self.displayed(self.display, 2);
    }

    /// A display begins or ends.
    fn displayed(&mut self, begins: bool, length: usize) {
        let start = self.at;
        self.at += length;
        self.environment =
            if begins { self.environment + 1 } else { self.environment.saturating_sub(1) };
        self.push_text(Kind::Break, start, self.at, "display".to_owned());
    }

    /// `x'` is a name; `x_i'` and `x_i^{\prime}` are the name `x'` with an index.
    fn prime(&mut self, c: char) {
        let (start, end) = (self.at, self.at + c.len_utf8());
        self.at = end;
        if let Some(last) = self.tokens.last_mut()
            && last.kind == Kind::Word
            && self.gap == Gap::default()
        {
            last.text.push('\'');
            last.span.end = Span::new(start, end).end;
            return;
        }
        self.push(Kind::Caret, start, end);
        self.push_text(Kind::Word, start, end, "'".to_owned());
    }

    fn number(&mut self) {
        let bytes = self.text.as_bytes();
        let digits = |mut i: usize| {
            while bytes.get(i).is_some_and(u8::is_ascii_digit) {
                i += 1;
            }
            i
        };
        let mut end = digits(self.at);
        if bytes.get(end) == Some(&b'.') && bytes.get(end + 1).is_some_and(u8::is_ascii_digit) {
            end = digits(end + 1);
        }
        if matches!(bytes.get(end), Some(b'e' | b'E')) {
            let sign = usize::from(matches!(bytes.get(end + 1), Some(b'+' | b'-')));
            if bytes.get(end + 1 + sign).is_some_and(u8::is_ascii_digit) {
                end = digits(end + 1 + sign);
            }
        }
        self.take(Kind::Number, end - self.at);
    }

    fn sign_or_word(&mut self, c: char) {
        if let Some(&(sign, kind)) =
            table::LONG_SIGNS.iter().find(|(s, _)| self.rest().starts_with(s))
        {
            return self.take(kind, sign.len());
        }
        if let Some(kind) = table::sign(c) {
            return self.take(kind, c.len_utf8());
        }
        if table::small(c).is_some() {
            return self.small();
        }
        if c.is_alphabetic() {
            return self.word();
        }
        self.take(Kind::Unknown, c.len_utf8());
    }

    /// A run of small raised or lowered characters: `xᵢⱼ` is `x_{ij}`, `y²` is `y^{2}`.
    fn small(&mut self) {
        let start = self.at;
        let mut raised = None;
        let mut plain = String::new();
        for c in self.text[start..].chars() {
            match table::small(c) {
                Some((up, to)) if raised.is_none_or(|r| r == up) => {
                    raised = Some(up);
                    plain.push(to);
                    self.at += c.len_utf8();
                }
                _ => break,
            }
        }
        let end = self.at;
        self.push(if raised == Some(true) { Kind::Caret } else { Kind::Underscore }, start, end);
        self.push(Kind::LeftBrace, start, end);
        let inner = lex(&plain, 0);
        for token in inner.iter().filter(|t| t.kind != Kind::End) {
            let text = if token.kind == Kind::Number {
                token.span.of(&plain).to_owned()
            } else {
                token.text.clone()
            };
            self.push_text(token.kind, start, end, text);
        }
        self.push(Kind::RightBrace, start, end);
    }

    fn word(&mut self) {
        let start = self.at;
        if let Some(length) = self.foreign_word() {
            self.at += length;
            return;
        }
        let rest = self.rest();
        if let Some(length) = such_that_short(rest) {
            return self.take(Kind::SuchThat, length);
        }
        let belongs = |c: char| {
            (c.is_alphabetic()
                && table::sign(c).is_none()
                && table::small(c).is_none()
                && foreign::plain(c).is_none())
                || c.is_ascii_digit()
                || c == '\''
        };
        let mut length = rest.find(|c: char| !belongs(c)).unwrap_or(rest.len());
        if self.is_index_alone(&rest[length..]) {
            length = rest.chars().next().map_or(0, char::len_utf8);
        }
        let word = &rest[..length];
        if let Some((kind, length)) = pair(word, rest) {
            return self.take(kind, length);
        }
        let line_start =
            self.gap.has(Gap::NEWLINE) || self.tokens.last().is_none_or(|t| t.kind == Kind::Break);
        let lower = if length <= 16 { word.to_lowercase() } else { String::new() };
        let kind = match lower.as_str() {
            "data" if line_start => Some(Kind::Data),
            "definitions" | "define" if line_start => Some(Kind::Definitions),
            "minimise" | "minimize" | "maximise" | "maximize" => table::word(&lower),
            "min" | "max" if line_start => table::word(&lower),
            _ => table::word(word).or_else(|| self.condition_word(word)),
        };
        match kind {
            Some(kind) => self.take(kind, length),
            None => {
                let text = word.to_owned();
                self.at += length;
                self.push_text(Kind::Word, start, start + length, text);
            }
        }
    }
}

/// How a small, scripted or otherwise set letter is written in TeX: the command around it, and the
/// plain letter.
pub(crate) fn plain_letter(c: char) -> Option<(&'static str, String)> {
    if let Some((up, plain)) = table::small(c) {
        return Some((if up { "{}^" } else { "{}_" }, plain.to_string()));
    }
    if let Some(letter) = foreign::script(c) {
        return Some(("\\mathcal", letter.to_string()));
    }
    if let Some(accent) = foreign::accent(c) {
        return Some((accent_command(accent), String::new()));
    }
    let plain = foreign::plain(c)?.to_string();
    let command = letter_command(&plain).map(|command| format!("\\{command}"));
    Some(("", command.unwrap_or(plain)))
}

/// An accent that stands alone, behind its letter.
fn accent_command(accent: &str) -> &'static str {
    match accent {
        "hat" => "\\hat",
        "tilde" => "\\tilde",
        "dot" => "\\dot",
        "vec" => "\\vec",
        _ => "\\bar",
    }
}

/// The length of `. . .` at the start of `rest`.
fn spaced_dots(rest: &str) -> Option<usize> {
    let mut at = 0;
    for _ in 0..3 {
        let dot = rest[at..].strip_prefix('.')?;
        at = rest.len() - dot.trim_start_matches(foreign::is_white).len();
    }
    Some(rest[..at].trim_end_matches(foreign::is_white).len())
}

impl Lexer<'_> {
    /// Whether `_` or `^` before a word takes its first letter alone, as in TeX: `f_iy_i`. In
    /// plain text `x_ij` has two indices.
    fn is_index_alone(&self, after: &str) -> bool {
        let raised = self.tokens.last().map(|t| t.kind);
        let raised = matches!(raised, Some(Kind::Underscore | Kind::Caret));
        let follows = after.starts_with('_');
        raised && self.gap == Gap::default() && (self.environment > 0 || follows)
    }

    /// A letter with an accent after it or from another alphabet, as a name; its length.
    fn foreign_word(&mut self) -> Option<usize> {
        let mut chars = self.rest().chars();
        let first = chars.next()?;
        let length = first.len_utf8();
        let start = self.at;
        if let Some(letter) = foreign::script(first) {
            let text = format!("\\mathcal {letter}");
            self.push_text(Kind::Word, start, start + length, text);
            return Some(length);
        }
        let plain = foreign::plain(first);
        let next = chars.next();
        if let Some(accent) = next.and_then(foreign::accent) {
            let length = length + next.map_or(0, char::len_utf8);
            let text = format!("\\{accent} {}", plain.unwrap_or(first));
            self.push_text(Kind::Word, start, start + length, text);
            return Some(length);
        }
        let plain = plain?;
        if plain.is_ascii_digit() {
            self.push_text(Kind::Number, start, start + length, plain.to_string());
        } else {
            self.push_text(Kind::Word, start, start + length, plain.to_string());
        }
        Some(length)
    }
}

/// The length of `s.t.` and its variants at the start of `rest`.
fn such_that_short(rest: &str) -> Option<usize> {
    let found = ["s.t.", "S.t.", "S.T.", "s. t.", "s.t"].iter().find(|s| rest.starts_with(**s))?;
    Some(found.len())
}

/// Whether the end of one text and the beginning of another, a space between, make one sign.
pub(crate) fn is_word_pair(before: &str, after: &str) -> bool {
    let start = before
        .rfind(|c: char| !c.is_alphanumeric())
        .map_or(0, |at| at + before[at..].chars().next().map_or(0, char::len_utf8));
    let word = &before[start..];
    pair(word, &format!("{word} {after}")).is_some()
}

/// A word that makes one sign with the word after it on the same line.
fn pair(word: &str, rest: &str) -> Option<(Kind, usize)> {
    if word.len() > 8 {
        return None;
    }
    let lower = word.to_lowercase();
    let after = &rest[word.len()..];
    let spaces = after.len() - after.trim_start_matches([' ', '\t', '~']).len();
    if spaces == 0 {
        return None;
    }
    let next = &after[spaces..];
    let belongs = |c: char| c.is_alphanumeric() && table::sign(c).is_none();
    // no second word is longer
    let end = next.char_indices().take(8).find(|(_, c)| !belongs(*c));
    let end = end.or_else(|| next.char_indices().nth(8)).map_or(next.len(), |(at, _)| at);
    let next = &next[..end];
    let &(_, second, kind) =
        table::WORD_PAIRS.iter().find(|(a, b, _)| *a == lower && *b == next)?;
    Some((kind, word.len() + spaces + second.len()))
}

/// `V\{r}` is `V ∖ {r}`: a TeX brace that a plain one closes was a set difference.
fn settle_braces(tokens: &mut Vec<Token>) {
    let mut open: Vec<usize> = Vec::new();
    let mut split: Vec<usize> = Vec::new();
    for (i, token) in tokens.iter().enumerate() {
        let tex = token.span.end - token.span.start == 2;
        match token.kind {
            Kind::LeftBrace => open.push(i),
            Kind::RightBrace => {
                if let Some(start) = open.pop() {
                    let span = tokens[start].span;
                    if span.end - span.start == 2 && !tex && tokens[start].text.is_empty() {
                        split.push(start);
                    }
                }
            }
            _ => {}
        }
    }
    if split.is_empty() {
        return;
    }
    split.sort_unstable();
    let mut out = Vec::with_capacity(tokens.len() + split.len());
    let mut next = split.iter().copied().peekable();
    for (i, mut token) in tokens.drain(..).enumerate() {
        if next.peek() == Some(&i) {
            next.next();
            let middle = token.span.start + 1;
            let first = Span { start: token.span.start, end: middle };
            out.push(Token {
                kind: Kind::Difference,
                span: first,
                gap: token.gap,
                text: String::new(),
            });
            token.span.start = middle;
            token.gap = Gap::default();
        }
        out.push(token);
    }
    *tokens = out;
}

/// A semicolon inside brackets, or between the parts of a quantifier
/// (`i = 1,…,n; j = 1,…,m`), is a comma.
fn settle_semicolons(tokens: &mut [Token], text: &str) {
    let mut depth = 0_u32;
    let mut quantified = false;
    for i in 0..tokens.len() {
        let kind = tokens[i].kind;
        if kind.opens() {
            depth += 1;
        } else if kind.closes() {
            depth = depth.saturating_sub(1);
        }
        quantified &= !tokens[i].gap.has(Gap::NEWLINE);
        let pairs = kind == Kind::In && i > 0 && tokens[i - 1].kind == Kind::RightParen;
        quantified |= pairs || matches!(kind, Kind::ForAll | Kind::Dots);
        if kind != Kind::Break {
            continue;
        }
        let semicolon = tokens[i].span.of(text) == ";";
        let inside = depth > 0 || quantified && goes_on(&tokens[i + 1..]);
        let shares = !quantified && shares_quantifier(&tokens[..i], &tokens[i + 1..]);
        if semicolon && (inside || shares) {
            tokens[i].kind = Kind::Comma;
        } else {
            depth = if semicolon { depth } else { 0 };
            quantified = false;
        }
    }
}

/// Whether what follows a semicolon on the same line goes on with a quantifier.
fn goes_on(rest: &[Token]) -> bool {
    let Some(first) = rest.first() else { return false };
    if first.gap.has(Gap::NEWLINE) {
        return false;
    }
    if first.kind == Kind::ForAll {
        return true;
    }
    let after = match first.kind {
        Kind::Word => 1,
        Kind::LeftParen => rest.iter().position(|t| t.kind == Kind::RightParen).unwrap_or(0) + 1,
        _ => return false,
    };
    let line = || rest.iter().take_while(|t| t.kind != Kind::Break);
    match rest.get(after).map(|t| t.kind) {
        Some(Kind::Equal) => line().any(|t| t.kind == Kind::Dots),
        Some(Kind::In) => {
            let set = rest.get(after + 1).map(|t| t.kind);
            set == Some(Kind::Word) || line().any(|t| t.kind == Kind::Dots)
        }
        _ => false,
    }
}

/// Whether what follows a semicolon is another domain of the same line, and has the quantifier of
/// both: `x_i ≥ 0; y_i ∈ {0,1} ∀ i`.
fn shares_quantifier(before: &[Token], rest: &[Token]) -> bool {
    let indexed = before.iter().rev().take_while(|t| t.kind != Kind::Break && !t.kind.is_part());
    let indexed = indexed.take(40).any(|t| t.kind == Kind::Underscore);
    let named = before.last().is_some_and(|t| !matches!(t.kind, Kind::RightParen | Kind::Tag));
    let line = rest.iter().take_while(|t| t.kind != Kind::Break && !t.gap.has(Gap::NEWLINE));
    let line: Vec<Kind> = line.map(|t| t.kind).take(80).collect();
    let next = line.first() == Some(&Kind::Word) && line.get(1) == Some(&Kind::Underscore);
    indexed && named && next && line.contains(&Kind::ForAll)
}

#[cfg(test)]
mod tests {
    use super::lex;
    use super::token::Kind;

    fn kinds(text: &str) -> Vec<Kind> {
        lex(text, 0).iter().map(|token| token.kind).filter(|&kind| kind != Kind::End).collect()
    }

    fn same(spellings: &[&str]) {
        for spelling in spellings {
            assert_eq!(kinds(spelling), kinds(spellings[0]), "{spelling}");
        }
    }

    #[test]
    fn signs_have_three_spellings() {
        same(&["Σ", "∑", "sum", "\\sum"]);
        same(&["∀", "forall", "for", "for all", "for each", "\\forall", "\\text{for all }"]);
        same(&["≤", "<=", "\\le", "\\leq", "\\leqslant"]);
        same(&["⊆", "subseteq", "\\subseteq"]);
        same(&["∉", "notin", "not in", "\\notin"]);
        same(&["V ∖ {r}", "V \\ {r}", "V\\{r}", "V setminus {r}", "V \\setminus \\{r\\}"]);
        same(&["x_{ij}", "xᵢⱼ"]);
        same(&["2^{2}", "2²"]);
        same(&["ℝ", "\\mathbb{R}", "\\mathbb R"]);
        same(&["∅", "\\emptyset", "emptyset", "\\varnothing"]);
        same(&["|S|", "\\lvert S \\rvert", "\\left| S \\right|", "\\vert S\\vert"]);
        same(&["{1..T}", "{1 .. T}", "\\{1 \\ldots T\\}", "{1…T}"]);
    }

    #[test]
    fn names_keep_their_decorations_and_letters() {
        let text = |source: &str| lex(source, 0)[0].text.clone();
        assert_eq!(text("\\bar d_t"), "\\bar d");
        assert_eq!(text("\\bar{d}_t"), "\\bar d");
        assert_eq!(text("\\mathcal{A}"), "\\mathcal A");
        assert_eq!(text("\\lambda_{ij}"), "λ");
        assert_eq!(text("\\mathrm{dist}"), "dist");
        assert_eq!(text("dist2'"), "dist2'");
    }

    #[test]
    fn numbers_stop_before_dots() {
        assert_eq!(kinds("1..3"), [Kind::Number, Kind::Dots, Kind::Number]);
        assert_eq!(kinds("1.5e-3"), [Kind::Number]);
        assert_eq!(kinds("2e"), [Kind::Number, Kind::Word]);
    }

    #[test]
    fn what_says_nothing_vanishes() {
        same(&[
            "x ≤ 1",
            "x & \\le \\; 1 \\nonumber",
            "$x \\leq 1$ % remark",
            "x ≤ 1 # remark",
            "x \\label{q} ≤ 1",
        ]);
    }
}
