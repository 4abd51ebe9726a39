//! A formulation in the record as a paper sets it: lines that align at the relation, in presentation
//! MathML, which browsers set and print by themselves. Every text is escaped.

use record::typeset::{Element, Tag, Typeset, TypesetRow};

use super::escaped;
use crate::number::of;

/// A formulation as HTML for [`super::Evidence::typeset`]; empty where there is no line.
#[must_use]
pub fn mathml(typeset: &Typeset) -> String {
    if typeset.rows.is_empty() {
        return String::new();
    }
    let rows: String = typeset.rows.iter().map(row).collect();
    let more = if typeset.further > 0 {
        format!(
            "<p>and {}, which are not set</p>\n",
            of(u64::from(typeset.further), "further line")
        )
    } else {
        String::new()
    };
    format!("<div class=\"scroll\"><table class=\"set\">\n{rows}</table></div>\n{more}")
}

fn row(row: &TypesetRow) -> String {
    let head = escaped(&row.head);
    if !row.unread.is_empty() {
        let unread = escaped(&row.unread);
        return format!("<tr><td>{head}</td><td colspan=\"4\"><code>{unread}</code></td></tr>\n");
    }
    let words = match (row.describes, row.words.is_empty()) {
        (_, true) => String::new(),
        (true, false) => escaped(&row.words),
        (false, false) => format!("({})", escaped(&row.words)),
    };
    let (quantifier, right) = (math(&row.quantifier), math(&row.right));
    let cells = if row.describes || row.left.is_empty() {
        format!("<td colspan=\"2\">{}{right}</td>", math(&row.left))
    } else {
        format!("<td class=\"l\">{}</td><td>{right}</td>", math(&row.left))
    };
    format!("<tr><td>{head}</td>{cells}<td>{quantifier}</td><td>{words}</td></tr>\n")
}

/// A cell; nothing where it is empty.
fn math(cell: &[Element]) -> String {
    if cell.is_empty() {
        return String::new();
    }
    let inside: String = cell.iter().map(element).collect();
    format!("<math displaystyle=\"true\">{inside}</math>")
}

fn element(element: &Element) -> String {
    let (name, attributes) = named(element.tag);
    let inside: String = element.children.iter().map(self::element).collect();
    format!("<{name}{attributes}>{}{inside}</{name}>", escaped(&element.text))
}

/// The name and the attributes of an element.
fn named(tag: Tag) -> (&'static str, &'static str) {
    match tag {
        Tag::Identifier => ("mi", ""),
        Tag::Number => ("mn", ""),
        Tag::Operator => ("mo", ""),
        Tag::Tight => ("mo", " lspace=\"0\" rspace=\"0\""),
        Tag::Bracket => ("mo", " stretchy=\"false\""),
        Tag::Text => ("mtext", ""),
        Tag::Thin => ("mspace", " width=\"0.167em\""),
        Tag::Sub => ("msub", ""),
        Tag::Sup => ("msup", ""),
        Tag::SubSup => ("msubsup", ""),
        Tag::Under => ("munder", ""),
        Tag::UnderOver => ("munderover", ""),
        Tag::Accent => ("mover", " accent=\"true\""),
        Tag::Fraction => ("mfrac", ""),
        Tag::Row => ("mrow", ""),
        Tag::Table => ("mtable", ""),
        Tag::TableRow => ("mtr", ""),
        Tag::Cell => ("mtd", ""),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_row_aligns_at_its_relation_and_text_stays_text() {
        let leaf = |text: &str| Element {
            tag: Tag::Identifier,
            text: text.to_owned(),
            children: Vec::new(),
        };
        let row = TypesetRow {
            left: vec![leaf("x<y")],
            right: vec![leaf("1")],
            words: "some".to_owned(),
            ..TypesetRow::default()
        };
        let text = mathml(&Typeset { rows: vec![row], further: 2 });
        let left = "<td class=\"l\"><math displaystyle=\"true\"><mi>x&lt;y</mi></math></td>";
        assert!(text.contains(left), "{text}");
        assert!(text.contains("<td>(some)</td>") && text.contains("and 2 further lines"), "{text}");
    }
}
