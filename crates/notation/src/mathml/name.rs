//! Names as mathematics sets them: one letter italic, a word upright, decorations where they
//! belong.

use super::element::{Element, Tag};

/// A name without its indices, what stands below it, and what above: `c_{\max}` has "max" below.
#[derive(Debug)]
pub(super) struct Decorated {
    pub(super) base: Element,
    pub(super) below: Option<Element>,
    pub(super) above: Option<Element>,
}

/// A name's text as the tree holds it; `whole` says that its letters are one name.
pub(super) fn decorated(name: &str, whole: bool) -> Decorated {
    let end = name.find(['_', '^']).unwrap_or(name.len());
    let (word, mut rest) = name.split_at(end);
    let mut out = Decorated { base: base(word, whole), below: None, above: None };
    while let Some(marker) = rest.chars().next() {
        let (inner, after) = group(&rest[marker.len_utf8()..]);
        let place = if marker == '_' { &mut out.below } else { &mut out.above };
        *place = Some(decoration(inner));
        rest = after;
    }
    out
}

/// What a decoration holds, and what follows it.
fn group(text: &str) -> (&str, &str) {
    let mut depth = 0_u32;
    for (at, c) in text.char_indices() {
        match c {
            '{' => depth += 1,
            '}' => depth = depth.saturating_sub(1),
            _ => {}
        }
        if depth == 0 {
            let (group, after) = text.split_at(at + c.len_utf8());
            let inner = group.strip_prefix('{').and_then(|group| group.strip_suffix('}'));
            return (inner.unwrap_or(group), after);
        }
    }
    (text, "")
}

fn decoration(inner: &str) -> Element {
    let text = inner.strip_prefix("\\text{").and_then(|text| text.strip_suffix('}'));
    match (text, inner) {
        (Some(text), _) => Element::words(text),
        (None, "+") => Element::leaf(Tag::Tight, "+"),
        (None, "-") => Element::leaf(Tag::Tight, "−"),
        (None, "*") => Element::leaf(Tag::Tight, "∗"),
        (None, word) => Element::name(word.trim_start_matches('\\')),
    }
}

fn base(word: &str, whole: bool) -> Element {
    if let Some(rest) = word.strip_prefix('\\') {
        return commanded(rest);
    }
    let letters = word.trim_end_matches('\'');
    let primes = word.len() - letters.len();
    let inner = if whole || letters.chars().count() < 2 {
        Element::name(letters)
    } else {
        Element::row(letters.chars().map(letter).collect())
    };
    if primes == 0 { inner } else { inner.sup(Element::leaf(Tag::Tight, "′".repeat(primes))) }
}

/// A letter of letters side by side.
fn letter(c: char) -> Element {
    let tag = if c.is_ascii_digit() { Tag::Number } else { Tag::Identifier };
    Element::leaf(tag, c)
}

/// `bar d`, `mathcal A`, `hat{ab}`.
fn commanded(rest: &str) -> Element {
    let (command, letters) = rest.split_once([' ', '{']).unwrap_or(("", rest));
    let letters = letters.trim_end_matches('}');
    let accent = match command {
        "bar" | "overline" | "underline" => "¯",
        "hat" | "widehat" => "^",
        "tilde" | "widetilde" => "~",
        "vec" => "→",
        "dot" => "˙",
        _ => {
            let styled: String = letters.chars().map(|c| styled(command, c)).collect();
            return Element::name(styled);
        }
    };
    let (base, accent) = (Element::name(letters), Element::leaf(Tag::Operator, accent));
    let tag = if command == "underline" { Tag::Under } else { Tag::Accent };
    Element::of(tag, vec![base, accent])
}

/// A letter in the alphabet of a command, from Unicode's mathematical letters.
fn styled(command: &str, c: char) -> char {
    const SCRIPT: &str = "BℬEℰFℱHℋIℐLℒMℳRℛ";
    const STRUCK: &str = "CℂHℍNℕPℙQℚRℝZℤ";
    let (start, small, apart) = match command {
        "mathcal" | "mathscr" => (0x1d49c, None, SCRIPT),
        "mathbb" | "mathds" => (0x1d538, None, STRUCK),
        "mathbf" | "boldsymbol" | "bm" => (0x1d400, Some(0x1d41a), ""),
        _ => return c,
    };
    let mut pairs = apart.chars();
    while let (Some(plain), Some(other)) = (pairs.next(), pairs.next()) {
        if plain == c {
            return other;
        }
    }
    let from = match c {
        'A'..='Z' => Some((start, 'A')),
        'a'..='z' => small.map(|small| (small, 'a')),
        _ => None,
    };
    from.and_then(|(start, first)| char::from_u32(start + (c as u32 - first as u32))).unwrap_or(c)
}
