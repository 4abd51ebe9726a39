//! What notation sets as mathematics, as the page is told it.

use notation::mathml as set;
use notation::syntax::Section;
use notation::{Checked, utf16_offset};
use record::typeset::{Element, Tag, Typeset, TypesetRow};

/// A formulation read from `text`, set. A constraint without a label has the name that its family
/// goes by.
pub(crate) fn of_typeset(text: &str, set: &set::Typeset, checked: &Checked) -> Typeset {
    let mut units = Units { text, byte: 0, unit: 0 };
    let rows = set.rows.iter().map(|row| {
        let words = match checked.family_at(row.span) {
            Some(family) if row.words.is_empty() => family.to_owned(),
            _ => row.words.clone(),
        };
        TypesetRow {
            describes: matches!(row.section, Section::Data | Section::Definitions),
            head: row.head.to_owned(),
            start: units.at(row.span.start as usize),
            end: units.at(row.span.end as usize),
            left: elements(&row.left),
            right: elements(&row.right),
            quantifier: elements(&row.quantifier),
            words,
            unread: row.unread.clone(),
        }
    });
    let rows = rows.collect();
    Typeset { rows, further: u32::try_from(set.further).unwrap_or(u32::MAX) }
}

/// Counts UTF-16 units along a text; places asked for in rising order cost one pass together.
struct Units<'t> {
    text: &'t str,
    byte: usize,
    unit: u32,
}

impl Units<'_> {
    fn at(&mut self, byte: usize) -> u32 {
        if byte < self.byte {
            (self.byte, self.unit) = (0, 0);
        }
        let rest = self.text.get(self.byte..).unwrap_or_default();
        self.unit += utf16_offset(rest, byte - self.byte);
        self.byte = byte;
        self.unit
    }
}

fn elements(elements: &[set::Element]) -> Vec<Element> {
    let one = |element: &set::Element| Element {
        tag: tag(element.tag),
        text: element.text.clone(),
        children: self::elements(&element.children),
    };
    elements.iter().map(one).collect()
}

fn tag(tag: set::Tag) -> Tag {
    match tag {
        set::Tag::Identifier => Tag::Identifier,
        set::Tag::Number => Tag::Number,
        set::Tag::Operator => Tag::Operator,
        set::Tag::Tight => Tag::Tight,
        set::Tag::Bracket => Tag::Bracket,
        set::Tag::Text => Tag::Text,
        set::Tag::Thin => Tag::Thin,
        set::Tag::Sub => Tag::Sub,
        set::Tag::Sup => Tag::Sup,
        set::Tag::SubSup => Tag::SubSup,
        set::Tag::Under => Tag::Under,
        set::Tag::UnderOver => Tag::UnderOver,
        set::Tag::Accent => Tag::Accent,
        set::Tag::Fraction => Tag::Fraction,
        set::Tag::Row => Tag::Row,
        set::Tag::Table => Tag::Table,
        set::Tag::TableRow => Tag::TableRow,
        set::Tag::Cell => Tag::Cell,
    }
}
