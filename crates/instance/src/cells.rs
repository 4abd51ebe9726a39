//! Lines split into cells: which mark separates them, and whether decimals have a comma.

use std::borrow::Cow;
use std::ops::Range;

use crate::MAX_STOPS;
use crate::complaint::{Complaints, excerpt};
use crate::number::{Number, parse};
use crate::pace::{Pace, Slices};
use crate::text::Line;

/// What stands between cells.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Separator {
    Tab,
    Semicolon,
    Comma,
    Space,
}

impl Separator {
    pub(crate) fn name(self) -> &'static str {
        match self {
            Self::Tab => "tabs",
            Self::Semicolon => "semicolons",
            Self::Comma => "commas",
            Self::Space => "spaces",
        }
    }

    fn mark(self) -> char {
        match self {
            Self::Tab => '\t',
            Self::Semicolon => ';',
            Self::Comma => ',',
            Self::Space => ' ',
        }
    }
}

/// How the cells of a text are written.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) struct Style {
    pub(crate) separator: Separator,
    pub(crate) decimal_comma: bool,
}

/// One cell: its text without surrounding blanks and quotes, and its place.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Cell<'a> {
    pub(crate) text: Cow<'a, str>,
    pub(crate) span: Range<usize>,
}

/// No line is split into more cells than this.
pub(crate) const MAX_CELLS: usize = MAX_STOPS + 3;

/// Finds the style of lines. Tabs win over semicolons, these over commas, these over spaces; a
/// comma is a decimal comma where blanks separate cells that all read as numbers with one comma.
pub(crate) fn style(lines: &[Line]) -> Style {
    Slices::whole(async |pace| style_in_slices(lines, &pace).await)
}

/// As [`style`], in the slices of a pace.
pub(crate) async fn style_in_slices(lines: &[Line<'_>], pace: &Pace) -> Style {
    let separator = separator(lines);
    let decimal_comma =
        separator != Separator::Comma && commas_prevail(lines, separator, pace).await;
    Style { separator, decimal_comma }
}

fn separator(lines: &[Line]) -> Separator {
    let any = |mark: char| lines.iter().any(|line| line.text.contains(mark));
    if any('\t') && !tabs_align_only(lines) {
        Separator::Tab
    } else if any(';') {
        Separator::Semicolon
    } else if any(',') && commas_separate(lines) {
        Separator::Comma
    } else {
        Separator::Space
    }
}

/// Whether tabs stand among blanks between numbers, so that any white space separates. Where
/// every line has the same number of tabs they separate, whatever the cells hold.
fn tabs_align_only(lines: &[Line]) -> bool {
    let tabs = |line: &Line| line.text.matches('\t').count();
    if lines.len() > 1 && lines.iter().all(|line| tabs(line) == tabs(&lines[0])) {
        return false;
    }
    let spaced = |cell: &str| {
        let mut words = cell.split_whitespace();
        words.clone().count() > 1 && words.all(|word| parse(word, false).is_ok())
    };
    lines.iter().any(|line| line.text.split('\t').any(spaced))
}

fn is_comma_decimal(word: &str) -> bool {
    word.matches(',').count() == 1
        && !word.starts_with(',')
        && !word.ends_with(',')
        && parse(word, true).is_ok()
}

/// Whether the commas of a text without tabs and semicolons separate cells.
fn commas_separate(lines: &[Line]) -> bool {
    let mut some_row_has_words = false;
    for line in lines {
        let mut words = 0;
        for word in line.text.split_whitespace() {
            words += 1;
            let grouped = word.contains('.') && parse(word, false).is_ok();
            if word.contains(',') && !is_comma_decimal(word) && !grouped {
                return true;
            }
        }
        some_row_has_words |= words > 1;
    }
    !some_row_has_words
}

async fn commas_prevail(lines: &[Line<'_>], separator: Separator, pace: &Pace) -> bool {
    let (mut commas, mut points) = (0_usize, 0_usize);
    for line in lines.iter().filter(|line| line.text.contains([',', '.'])) {
        pace.spend(line.text.len()).await;
        for cell in split(line, separator) {
            commas += usize::from(is_comma_decimal(&cell.text));
            let pointed = cell.text.matches('.').count() == 1;
            points += usize::from(pointed && parse(&cell.text, false).is_ok());
        }
    }
    commas > points
}

/// Splits a line into at most [`MAX_CELLS`] cells. A cell may stand in double quotes, with `""`
/// for a quote in it. Blanks at a line's ends separate nothing.
pub(crate) fn split<'a>(line: &Line<'a>, separator: Separator) -> Vec<Cell<'a>> {
    let mut cells = Vec::new();
    let mut rest = line.text;
    if separator == Separator::Space {
        rest = rest.trim_start();
    }
    loop {
        let start = line.end() - rest.len();
        if separator == Separator::Space && rest.is_empty() {
            return cells;
        }
        let (cell, after) = match quoted(rest, separator) {
            Some((text, length)) => (Cell { text, span: start..start + length }, &rest[length..]),
            None => plain(rest, start, separator),
        };
        cells.push(cell);
        if cells.len() == MAX_CELLS {
            return cells;
        }
        rest = if separator == Separator::Space {
            after.trim_start()
        } else {
            match after.find(separator.mark()) {
                Some(at) => &after[at + 1..],
                None => return cells,
            }
        };
    }
}

fn plain<'a>(rest: &'a str, start: usize, separator: Separator) -> (Cell<'a>, &'a str) {
    let ends = |c: char| match separator {
        Separator::Space => c.is_whitespace(),
        _ => c == separator.mark(),
    };
    let length = rest.find(ends).unwrap_or(rest.len());
    let text = rest[..length].trim();
    let first = start + (rest[..length].len() - rest[..length].trim_start().len());
    let first = if text.is_empty() { start } else { first };
    let cell = Cell { text: Cow::Borrowed(text), span: first..first + text.len() };
    (cell, &rest[length..])
}

/// A quoted cell at the start of `rest` and its length with leading blanks and quotes, if there
/// is one and nothing but blanks stands before the next separator.
fn quoted(rest: &str, separator: Separator) -> Option<(Cow<'_, str>, usize)> {
    let lead = rest.len() - rest.trim_start_matches(' ').len();
    let body = rest[lead..].strip_prefix('"')?;
    let mut from = 0;
    loop {
        let close = from + body[from..].find('"')?;
        if body[close + 1..].starts_with('"') {
            from = close + 2;
            continue;
        }
        let inner = &body[..close];
        let after = body[close + 1..].trim_start_matches(' ');
        let ends = match separator {
            Separator::Space => body[close + 1..].chars().next().is_none_or(char::is_whitespace),
            _ => after.is_empty() || after.starts_with(separator.mark()),
        };
        let text = if inner.contains('"') {
            Cow::Owned(inner.replace("\"\"", "\""))
        } else {
            Cow::Borrowed(inner)
        };
        return ends.then_some((text, lead + 1 + close + 1));
    }
}

/// The number of a cell, or a complaint; what was read by habit is remembered.
pub(crate) fn number(cell: &Cell, decimal_comma: bool, sink: &mut Complaints) -> Option<Number> {
    match parse(&cell.text, decimal_comma) {
        Ok(number) => {
            sink.met(cell, decimal_comma, &number);
            Some(number)
        }
        Err(_) if sink.is_full() => {
            sink.count_error();
            None
        }
        Err(why) => {
            let message = format!("`{}` is not a number", excerpt(&cell.text));
            sink.error(cell.span.clone(), "not-a-number", message, why.mend());
            None
        }
    }
}

/// Whether a cell says that there is no value.
pub(crate) fn is_blank(text: &str) -> bool {
    const MARKS: [&str; 10] = ["", "-", "–", "—", "−", ".", "*", "∞", "inf", "na"];
    MARKS.contains(&text) || ["n/a", "nan", "INF", "NA", "N/A", "NaN", "Inf"].contains(&text)
}

/// Whether a cell is a word: neither a number nor blank. A cell that begins like a number is
/// taken for a broken number.
pub(crate) fn is_word(text: &str, decimal_comma: bool) -> bool {
    !is_blank(text) && parse(text, decimal_comma).is_err() && !text.starts_with(begins_number)
}

fn begins_number(c: char) -> bool {
    c.is_ascii_digit() || matches!(c, '-' | '+' | '.' | ',' | '\u{2212}')
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::text::lines;
    use proptest::prelude::*;

    fn style_of(text: &str) -> (Separator, bool) {
        let style = style(&lines(text));
        (style.separator, style.decimal_comma)
    }

    fn cells(text: &str, separator: Separator) -> Vec<String> {
        let line = Line { text, start: 0 };
        split(&line, separator).into_iter().map(|cell| cell.text.into_owned()).collect()
    }

    #[test]
    fn separators_are_found() {
        assert_eq!(style_of("0 1\n2 0"), (Separator::Space, false));
        assert_eq!(style_of("0,1\n2,0"), (Separator::Comma, false));
        assert_eq!(style_of("0,5 1,2\n2,5 0"), (Separator::Space, true));
        assert_eq!(style_of("0, 5, 1\n2, 5, 0"), (Separator::Comma, false));
        assert_eq!(style_of("Ash,3\nBirch,4"), (Separator::Comma, false));
        assert_eq!(style_of("0;1,5\n1,5;0"), (Separator::Semicolon, true));
        assert_eq!(style_of("0\t1.5\n1.5\t0"), (Separator::Tab, false));
        assert_eq!(style_of("0 1\t2\n1\t0\t3"), (Separator::Space, false));
        assert_eq!(style_of("a\t1 234\nb\t5"), (Separator::Tab, false));
        assert_eq!(style_of("0,5,7\n5,0,2"), (Separator::Comma, false));
        assert_eq!(style_of("a 1,234.5 2,345.6\nb 3.5 7,000.1"), (Separator::Space, false));
        assert_eq!(style_of("1.234,5;2\n3;4,25"), (Separator::Semicolon, true));
        assert_eq!(style_of("1,234,567;2.5\n3;4"), (Separator::Semicolon, false));
    }

    #[test]
    fn cells_are_split() {
        assert_eq!(cells(";a; b ;", Separator::Semicolon), ["", "a", "b", ""]);
        assert_eq!(cells("  1   2\t3 ", Separator::Space), ["1", "2", "3"]);
        assert_eq!(cells("\"New, Town\",3", Separator::Comma), ["New, Town", "3"]);
        assert_eq!(cells("\"New Town\" 3", Separator::Space), ["New Town", "3"]);
        assert_eq!(cells("\"a \"\"b\"\"\" , 3", Separator::Comma), ["a \"b\"", "3"]);
        assert_eq!(cells("\"open,3", Separator::Comma), ["\"open", "3"]);
        assert_eq!(cells("a\"b,3", Separator::Comma), ["a\"b", "3"]);
        assert!(cells("", Separator::Space).is_empty());
    }

    proptest! {
        #[test]
        fn spans_are_inside(text in "[a-zé\"; ,\t0-9]{0,40}") {
            for separator in
                [Separator::Tab, Separator::Semicolon, Separator::Comma, Separator::Space]
            {
                let line = Line { text: &text, start: 0 };
                for cell in split(&line, separator) {
                    prop_assert!(text.get(cell.span.clone()).is_some());
                    if !cell.text.contains('"') {
                        prop_assert!(text[cell.span].contains(&*cell.text));
                    }
                }
            }
        }
    }
}
