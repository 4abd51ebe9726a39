//! Every shipped formulation as it is set in MathML, against a file that a person can read as the
//! page shows it.

#![allow(clippy::unwrap_used, reason = "a test ends where it fails")]

use std::fmt::Write as _;
use std::path::Path;

use hullward_catalogue::entries;
use notation::mathml::{Element, Tag, TypesetRow};

/// An element in one line: `x_[i , j]`, `∑_[i ∈ V]`, `[n]/[2]`; `*` is the invisible product.
fn line(element: &Element) -> String {
    let part = |place: usize| element.children.get(place).map(line).unwrap_or_default();
    let grouped = |place: usize| match element.children.get(place) {
        Some(child) if child.children.is_empty() => line(child),
        _ => format!("[{}]", part(place)),
    };
    match element.tag {
        Tag::Sub | Tag::Under => format!("{}_{}", part(0), grouped(1)),
        Tag::Sup | Tag::Accent => format!("{}^{}", part(0), grouped(1)),
        Tag::SubSup | Tag::UnderOver => format!("{}_{}^{}", part(0), grouped(1), grouped(2)),
        Tag::Fraction => format!("{}/{}", grouped(0), grouped(1)),
        Tag::Thin => String::new(),
        Tag::Table => element.children.iter().map(line).collect::<Vec<_>>().join(" ⏎ "),
        Tag::Row | Tag::TableRow | Tag::Cell => {
            element.children.iter().map(line).collect::<Vec<_>>().join(" ")
        }
        _ => element.text.replace('\u{2062}', "*"),
    }
}

fn row(row: &TypesetRow) -> String {
    let cell = |cell: &[Element]| cell.iter().map(line).collect::<Vec<_>>().join(" ");
    let cells = [
        row.head.to_owned(),
        cell(&row.left),
        cell(&row.right),
        cell(&row.quantifier),
        row.words.clone(),
    ];
    cells.join(" ¦ ").trim_end_matches([' ', '¦']).to_owned()
}

#[test]
fn shipped_formulations_are_set_as_the_file_says() {
    let mut set = String::new();
    for entry in entries() {
        let parsed = notation::parse(entry.text);
        let typeset = notation::typeset(&parsed.tree, entry.text);
        assert_eq!(typeset.further, 0);
        assert!(typeset.rows.iter().all(|row| row.unread.is_empty()), "{}", entry.id);
        let _ = writeln!(set, "== {}", entry.id);
        for one in &typeset.rows {
            let _ = writeln!(set, "{}", row(one));
        }
    }
    let wanted = include_str!("typeset.txt");
    if set != wanted {
        let found = Path::new(env!("CARGO_TARGET_TMPDIR")).join("typeset.txt");
        std::fs::write(&found, &set).unwrap();
        let differs = set.lines().zip(wanted.lines()).find(|(new, old)| new != old);
        assert_eq!(set, wanted, "first {differs:?}; all of it is in {}", found.display());
    }
}
