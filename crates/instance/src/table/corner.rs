//! The corner of a wide table: its name, or the names of the sets at its sides.

use super::section::Section;

/// What a corner says.
#[derive(Debug, Default, PartialEq, Eq)]
pub(super) struct Corner {
    /// The heading that names the table.
    pub(super) table: Option<String>,
    /// The headings of the rows and the columns.
    pub(super) sets: Option<(String, String)>,
}

/// The corner of a section.
pub(super) fn of(section: &Section) -> Corner {
    let text =
        section.rows.first().and_then(|row| row.cells.first()).map_or("", |cell| &*cell.text);
    corner(text)
}

/// `name`, `rows \ columns` or `name: rows \ columns`; marks in brackets divide nothing.
fn corner(text: &str) -> Corner {
    let filled = |text: &str| Some(text.trim().to_owned()).filter(|text| !text.is_empty());
    let (table, sides) = match text.split_once(':') {
        Some((name, sides)) => (filled(name), sides),
        None => (None, text),
    };
    let mut depth = 0_usize;
    for (at, c) in sides.char_indices() {
        match c {
            '(' | '[' => depth += 1,
            ')' | ']' => depth = depth.saturating_sub(1),
            '\\' | '/' | '→' | '|' if depth == 0 => {
                let pair = (filled(&sides[..at]), filled(&sides[at + c.len_utf8()..]));
                if let (Some(rows), Some(columns)) = pair {
                    return Corner { table, sets: Some((rows, columns)) };
                }
            }
            _ => {}
        }
    }
    Corner { table: table.or_else(|| filled(text)), sets: None }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn corners() {
        let some = |text: &str| Some(text.to_owned());
        let pair = |rows: &str, columns: &str| Some((rows.to_owned(), columns.to_owned()));
        for (text, table, sets) in [
            ("", None, None),
            ("c", some("c"), None),
            ("cost (EUR/t)", some("cost (EUR/t)"), None),
            ("client \\ depot", None, pair("client", "depot")),
            ("client/depot", None, pair("client", "depot")),
            ("cost: client → depot", some("cost"), pair("client", "depot")),
            ("/depot", some("/depot"), None),
        ] {
            assert_eq!(corner(text), Corner { table, sets }, "{text}");
        }
    }
}
