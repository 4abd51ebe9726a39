//! What is refused: all complaints at once, each with its place, and never a panic.

use proptest::prelude::*;

use super::{read, refused, small};
use crate::mps::{MOST_BYTES, Severity};

/// The codes and places of the errors.
fn errors(text: &str) -> Vec<(&'static str, u32, u32)> {
    let complaints = refused(text);
    for complaint in &complaints {
        assert!(text.get(complaint.span.clone()).is_some());
        assert!(!complaint.message.is_empty() && !complaint.mend.is_empty());
    }
    let errors = complaints.iter().filter(|c| c.severity == Severity::Error);
    errors.map(|c| (c.code, c.line, c.column)).collect()
}

#[test]
fn all_errors_come_at_once() {
    let text = "\
NAME bad
ROWS
 N cost
 L r
 L r
 Q s
COLUMNS
    x cost one
    x t 1
    y cost
RHS
    RHS r 1e
BOUNDS
 SC B x 5
 UP B z 5
 XX B x
SOS
    anything
";
    let wanted = [
        ("row-again", 5, 4),
        ("row-type", 6, 2),
        ("not-a-number", 8, 12),
        ("unknown-row", 9, 7),
        ("line-shape", 10, 5),
        ("not-a-number", 12, 11),
        ("bound-type", 14, 2),
        ("unknown-column", 15, 7),
        ("bound-type", 16, 2),
        ("unknown-section", 17, 1),
        ("no-end", 19, 1),
    ];
    assert_eq!(errors(text), wanted);
}

#[test]
fn each_refusal_has_its_code() {
    let cases = [
        ("", "no-end"),
        (" x 1\nENDATA", "no-section"),
        ("OBJSENSE BEST\nENDATA", "sense"),
        ("ROWS\n N c\nCOLUMNS\n M 'MARKER' 'SOSORG'\nENDATA", "marker"),
        ("ROWS\n N c\nCOLUMNS\n x c 1\n y c 1\n x c 2\nENDATA", "column-again"),
        ("ROWS\n N c\nCOLUMNS\n x c inf\nENDATA", "infinite"),
        ("ROWS\n N c\n E r\nCOLUMNS\n x r 1\nRHS\n R r 1e30\nENDATA", "infinite"),
        ("ROWS\n N c\nCOLUMNS\n x c 1\nRHS\n R c inf\nENDATA", "infinite"),
        ("ROWS\n N c\nCOLUMNS\n x c 1\nBOUNDS\n FX B x inf\nENDATA", "infinite"),
        ("ROWS\n N c\nCOLUMNS\n x c 1e-300\nENDATA", "not-a-number"),
        ("ROWS\n N c\nCOLUMNS\n x c 1\nBOUNDS\n UP B x\nENDATA", "line-shape"),
    ];
    for (text, code) in cases {
        let codes: Vec<_> = errors(text).iter().map(|e| e.0).collect();
        assert_eq!(codes, [code], "{text}");
    }
}

#[test]
fn too_much_is_refused() {
    let complaints = refused(&"*".repeat(MOST_BYTES + 1));
    assert_eq!(complaints[0].code, "too-long");
    let many = " x c one\n".repeat(500);
    let complaints = refused(&format!("ROWS\n N c\nCOLUMNS\n{many}ENDATA"));
    assert_eq!(complaints.len(), 201);
    assert!(complaints.iter().all(|c| c.severity == Severity::Error));
    assert_eq!(complaints[200].message, "300 further places could not be read");
}

proptest! {
    #[test]
    fn nothing_panics(text in "\\PC{0,200}") {
        let _ = read(&text);
    }

    #[test]
    fn nothing_panics_on_pieces_of_files(
        pieces in prop::collection::vec(prop::sample::select(vec![
            "ROWS\n", "COLUMNS\n", "RHS\n", "RANGES\n", "BOUNDS\n", "ENDATA\n", " N c\n",
            " L r\n", " E e\n", " x r 1 c 2\n", " y e -1e5\n", " R r 1e30\n", " R c 5\n",
            " UP B x -3\n", " MI y\n", " M 'MARKER' 'INTORG'\n", "ü", "\t", "\n", " ", "OBJSENSE MAX\n",
            "    x         r                 1.   c                 2.\n", " UP           x                 3.\n",
        ]), 0..40),
    ) {
        let text = pieces.concat();
        let complaints = match read(&text) {
            Ok((_, complaints)) | Err(complaints) => complaints,
        };
        for complaint in complaints {
            prop_assert!(text.get(complaint.span).is_some());
        }
    }
}

#[test]
fn places_count_characters() {
    let text = small("    ä cost 1 ö 2\n", "");
    assert_eq!(errors(&text), [("unknown-row", 6, 14)]);
}
