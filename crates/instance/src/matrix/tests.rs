//! Distance tables in all their forms, and the places of broken lines.

use super::*;
use crate::complaint::Complaint;
use crate::number::number_text;
use crate::{Instance, Reader, Reading, read};
use proptest::prelude::*;

fn matrix(text: &str) -> Reading {
    read(text, Some(Reader::Matrix))
}

/// The labels, and the cells as text with `-` for none.
fn square(text: &str) -> (String, String) {
    let reading = matrix(text);
    assert_eq!(reading.complaints, [], "{text}");
    parts(&reading.instance.unwrap())
}

fn parts(instance: &Instance) -> (String, String) {
    let text = |number: Option<&Number>| number.map_or("-".to_owned(), number_text);
    let cells: Vec<_> = instance.matrix().into_iter().map(text).collect();
    (instance.stops().join(" "), cells.join(" "))
}

fn places(complaints: &[Complaint]) -> Vec<(u32, u32, &'static str)> {
    complaints.iter().map(|c| (c.line, c.column, c.code)).collect()
}

const NAMED: &str = "Ash Birch Cedar";
const CELLS: &str = "- 5 7.5 4 - 3 8 2 -";

#[test]
fn whole_tables_in_many_spellings() {
    for text in [
        "0 5 7.5\n4 0 3\n8 2 0",
        "0,5,7.5\n4,0,3\n8,2,0\n",
        "0, 5, 7.5\r\n4, 0, 3\r\n8, 2, 0\r\n",
        "0;5;7,5\n4;0;3\n8;2;0",
        "0 5 7,5\n4 0 3\n8 2 0",
        "0\t5\t7.5\n4\t0\t3\n8\t2\t0",
        "\n  0  5 7.5\n\n# a remark\n4 0 3\n8 2 0\n\n",
        "0;5;7.5;\n4;0;3;\n8;2;0;\n",
        "\u{feff}0;5;7.5\r4;0;3\r8;2;0",
    ] {
        assert_eq!(square(text), ("1 2 3".to_owned(), CELLS.to_owned()), "{text}");
    }
}

#[test]
fn labels_in_many_places() {
    for text in [
        "Ash Birch Cedar\n0 5 7.5\n4 0 3\n8 2 0",
        "Ash 0 5 7.5\nBirch 4 0 3\nCedar 8 2 0",
        "Ash Birch Cedar\nAsh 0 5 7.5\nBirch 4 0 3\nCedar 8 2 0",
        "from Ash Birch Cedar\nAsh 0 5 7.5\nBirch 4 0 3\nCedar 8 2 0",
        ";Ash;Birch;Cedar\nAsh;0;5;7.5\nBirch;4;0;3\nCedar;8;2;0",
        ";Ash;Birch;Cedar;\nAsh;0;5;7,5;\nBirch;4;0;3;\nCedar;8;2;0;",
        ",\"Ash\",Birch,Cedar\n\"Ash\",0,5,7.5\nBirch,4,0,3\nCedar,8,2,0",
        "\tAsh\tBirch\tCedar\nAsh\t-\t5\t7.5\nBirch\t4\t-\t3\nCedar\t8\t2\t-",
        // Columns in another order than rows.
        ";Cedar;Ash;Birch\nAsh;7.5;0;5\nBirch;3;4;0\nCedar;0;8;2",
    ] {
        assert_eq!(square(text), (NAMED.to_owned(), CELLS.to_owned()), "{text}");
    }
}

#[test]
fn numbers_may_be_labels() {
    for text in [
        ";10;20;30\n10;0;5;7.5\n20;4;0;3\n30;8;2;0",
        "stop 10 20 30\n10 0 5 7.5\n20 4 0 3\n30 8 2 0",
        "10 20 30\n10 0 5 7.5\n20 4 0 3\n30 8 2 0",
    ] {
        assert_eq!(square(text), ("10 20 30".to_owned(), CELLS.to_owned()), "{text}");
    }
    for counted in ["1 0 5 7.5\n2 4 0 3\n3 8 2 0", "1 2 3\n0 5 7.5\n4 0 3\n8 2 0"] {
        assert_eq!(square(counted), ("1 2 3".to_owned(), CELLS.to_owned()), "{counted}");
    }
}

#[test]
fn a_list_of_drives_is_told_from_a_table() {
    let text = "A,B,5\nA,C,7\nB,C,9\n";
    assert_eq!(places(&matrix(text).complaints), [(1, 1, "drive-list")]);
    let mended = read(text, None);
    assert_eq!((mended.reader, mended.instance.is_some()), (Reader::Arcs, true));
}

#[test]
fn labels_with_blanks_need_another_separator() {
    let (labels, _) = square(";New Town;Old Mill\nNew Town;0;1\nOld Mill;2;0");
    assert_eq!(labels, "New Town Old Mill");
    let reading = matrix("New Town 0 1\nOld Mill 2 0");
    assert!(reading.complaints[0].mend.contains("double quotes"), "{:?}", reading.complaints);
    let (labels, _) = square("\"New Town\" 0 1\n\"Old Mill\" 2 0");
    assert_eq!(labels, "New Town Old Mill");
}

#[test]
fn the_diagonal_may_be_missing() {
    for text in [
        "5 7.5\n4 3\n8 2",
        ";5;7.5\n4;;3\n8;2;",
        "- 5 7.5\n4 - 3\n8 2 -",
        "99 5 7.5\n4 99 3\n8 2 99",
    ] {
        assert_eq!(square(text).1, CELLS, "{text}");
    }
    let placeholder = matrix("99 5 7.5\n4 99 3\n8 2 99").facts;
    assert!(placeholder.contains(&"The diagonal was not read (it holds 99).".to_owned()));
}

#[test]
fn half_tables_hold_both_directions() {
    let cells = "- 5 7 6 5 - 3 4 7 3 - 2 6 4 2 -";
    for text in [
        "0\n5 0\n7 3 0\n6 4 2 0",
        "5\n7 3\n6 4 2",
        "0 5 7 6\n0 3 4\n0 2\n0",
        "5 7 6\n3 4\n2",
        "0;5;7;6\n;0;3;4\n;;0;2\n;;;0",
        "0;;;\n5;0;;\n7;3;0;\n6;4;2;0",
        ";;;\n5;;;\n7;3;;\n6;4;2;",
        "5,7,6\n3,4\n2",
    ] {
        assert_eq!(square(text), ("1 2 3 4".to_owned(), cells.to_owned()), "{text}");
    }
    let named = "a b c d";
    for text in [
        "a\nb 5\nc 7 3\nd 6 4 2",
        "a 0\nb 5 0\nc 7 3 0\nd 6 4 2 0",
        "a b c d\na 0 5 7 6\nb 0 3 4\nc 0 2\nd 0",
        "a b c d\nb 5\nc 7 3\nd 6 4 2",
        "x a b c d\na 0\nb 5 0\nc 7 3 0\nd 6 4 2 0",
        "a 5 7 6\nb 3 4\nc 2\nd",
        ";a;b;c;d\na;0;5;7;6\nb;;0;3;4\nc;;;0;2\nd;;;;0",
    ] {
        assert_eq!(square(text), (named.to_owned(), cells.to_owned()), "{text}");
    }
    let facts = matrix("5\n7 3\n6 4 2").facts;
    let half = "Only the lower half without its diagonal is written: each distance was taken for \
        both directions.";
    assert!(facts.contains(&half.to_owned()), "{facts:?}");
}

#[test]
fn a_half_without_its_first_label_says_which() {
    let reading = matrix("b 5\nc 7 3\nd 6 4 2");
    assert_eq!(places(&reading.complaints), [(1, 1, "label-missing")]);
    assert_eq!(reading.complaints[0].mend, "Put its label alone on a line before `b`.");
}

#[test]
fn units_come_from_the_corner_or_the_title() {
    let unit = |text: &str| matrix(text).instance.unwrap().unit;
    assert_eq!(unit("minutes;a;b\na;0;1\nb;2;0"), "minutes");
    assert_eq!(unit("from/to (km);a;b\na;0;1\nb;2;0"), "km");
    assert_eq!(unit("from;a;b\na;0;1\nb;2;0"), "");
    let titled = matrix("Round of the library, in minutes\n\n0 1\n2 0").instance.unwrap();
    assert_eq!(titled.unit, "minutes");
    assert_eq!(titled.title, "Round of the library, in minutes");
}

#[test]
fn blanks_are_missing_drives() {
    let text = ";a;b;c\na;0;;7\nb;4;0;x1\nc;8;-;0";
    let reading = matrix(text);
    assert_eq!(places(&reading.complaints), [(3, 7, "not-a-number")]);
    let (_, cells) = square(&text.replace("x1", "3"));
    assert_eq!(cells, "- - 7 4 - 3 8 - -");
}

#[test]
fn all_complaints_are_shown_with_exact_places() {
    let text = "min;Ash;Birch;Cedar;Dell\nAsh;0;5;7O;1\nBirch;4;0;3\nCedar;8;2;0;1;9\nDale;1:75;1;12 min;0\n";
    let reading = matrix(text);
    assert!(reading.instance.is_none());
    assert_eq!(
        places(&reading.complaints),
        [
            (2, 9, "not-a-number"),
            (3, 12, "row-length"),
            (4, 15, "row-length"),
            (5, 1, "label-differs"),
            (5, 6, "not-a-number"),
            (5, 13, "not-a-number"),
        ]
    );
    let spans: Vec<_> = reading.complaints.iter().map(|c| &text[c.span.clone()]).collect();
    assert_eq!(spans, ["7O", "", "9", "Dale", "1:75", "12 min"]);
    assert_eq!(reading.complaints[1].message, "row 2 has 3 values, where 4 are expected");
    assert_eq!(
        reading.complaints[4].mend,
        "Write a time as hours and minutes, 07:45, or as one number."
    );
    assert_eq!(
        reading.facts.last().unwrap(),
        "6 places could not be read, so there is no instance yet."
    );
}

#[test]
fn labels_must_tell_stops_apart() {
    let reading = matrix(";a;b;a\na;0;1;2\nb;1;0;3\na;2;3;0");
    assert_eq!(places(&reading.complaints), [(1, 6, "label-twice"), (4, 1, "label-twice")]);
    let reading = matrix(";a;b;c\na;0;1;2\nb;1;0;3\n;2;3;0");
    assert_eq!(places(&reading.complaints), [(4, 1, "label-missing"), (4, 1, "label-differs")]);
}

#[test]
fn rows_may_lack_or_be_too_many() {
    assert_eq!(places(&matrix("0 1 2\n1 0 3\n").complaints), [(2, 6, "row-count")]);
    let more = matrix("a b c\n0 1 2\n1 0 3\n2 3 0\n7 8 9\n");
    assert_eq!(places(&more.complaints), [(5, 1, "row-count")]);
    assert_eq!(places(&matrix("").complaints), [(1, 1, "nothing-to-read")]);
    assert_eq!(places(&matrix("7").complaints), [(1, 2, "too-few-stops")]);
    assert_eq!(places(&matrix("0 1\n").complaints)[0].2, "row-count");
}

#[test]
fn thousands_marks_are_doubted() {
    let reading = matrix("0;1,500\n2,250;0");
    assert_eq!(places(&reading.complaints), [(1, 3, "perhaps-thousands")]);
    assert!(reading.instance.is_some());
    assert_eq!(matrix("0;1,5\n2,250;0").complaints, []);
}

#[test]
fn noise_is_refused_quickly() {
    let long_line = "5 ".repeat(2_500_000);
    let many_lines = "é;x\n".repeat(1_000_000);
    let words = ("nothing of the kind ".repeat(125) + "\n").repeat(1_990);
    let many_blocks: String = (0..400_000).map(|name| format!("a{name}\n\n")).collect();
    let keywords = "AB:1\nCOMMENT: 2\nTYPE: 3\n".repeat(200_000);
    for text in [long_line, many_lines, words, many_blocks, keywords] {
        for reader in [None, Some(Reader::Points), Some(Reader::Tsplib), Some(Reader::Blocks)] {
            let reading = read(&text, reader);
            assert!(reading.instance.is_none() && !reading.complaints.is_empty());
            assert!(reading.complaints.len() <= 202);
        }
    }
    assert_eq!(read("a\0b", None).complaints[0].code, "binary");
    assert_eq!(read(&"x".repeat(9 << 20), None).complaints[0].code, "too-long");
}

#[test]
fn a_guess_is_said_and_can_be_overridden() {
    let text = "1 2\n3 4\n5 6";
    let guessed = read(text, None);
    assert_eq!(guessed.reader, Reader::Matrix);
    let said = "Taken for a distance matrix (`matrix`); name another reader if it is not.";
    assert_eq!(guessed.facts.last().unwrap(), said);
    let named = read(text, Some(Reader::Points));
    assert_eq!(named.instance.unwrap().points.unwrap().places[1], (3.0, 4.0));
    assert!(!named.facts.iter().any(|fact| fact.starts_with("Taken for")));
}

fn printed(cells: &[Vec<Option<u32>>], labels: bool, mark: char, comma: bool) -> String {
    let mut text = String::new();
    if labels {
        text.push_str("from");
        for j in 0..cells.len() {
            text.push_str(&format!("{mark}Stop{j}"));
        }
        text.push('\n');
    }
    for (i, row) in cells.iter().enumerate() {
        let cell = |value: &Option<u32>| match value {
            Some(value) if comma => format!("{},{:02}", value / 100, value % 100),
            Some(value) => format!("{}.{:02}", value / 100, value % 100),
            None => "-".to_owned(),
        };
        let mut row: Vec<_> = row.iter().map(cell).collect();
        if labels {
            row.insert(0, format!("Stop{i}"));
        }
        text.push_str(&row.join(&mark.to_string()));
        text.push('\n');
    }
    text
}

fn table_cells() -> impl Strategy<Value = Vec<Vec<Option<u32>>>> {
    (3_usize..8).prop_flat_map(|n| {
        let cell = prop_oneof![9 => (1_u32..100_000).prop_map(Some), 1 => Just(None)];
        prop::collection::vec(prop::collection::vec(cell, n), n)
    })
}

proptest! {
    #[test]
    fn printed_tables_read_back(
        cells in table_cells(),
        labels in any::<bool>(),
        mark in prop_oneof![Just('\t'), Just(';'), Just(','), Just(' ')],
        comma in any::<bool>(),
    ) {
        let comma = comma && mark != ',';
        let reading = matrix(&printed(&cells, labels, mark, comma));
        let instance = reading.instance.unwrap();
        let halves = |cells: &[Vec<Option<u32>>]| {
            let n = cells.len();
            let pairs = || (0..n).flat_map(|i| (0..i).map(move |j| (i, j)));
            (pairs().all(|(i, j)| cells[i][j].is_none()), pairs().all(|(i, j)| cells[j][i].is_none()))
        };
        prop_assume!(halves(&cells) == (false, false));
        for (i, row) in cells.iter().enumerate() {
            for (j, value) in row.iter().enumerate() {
                let found = instance.matrix()[i * cells.len() + j].cloned();
                let value = value.filter(|_| i != j);
                prop_assert_eq!(found, value.map(|v| Number::from_parts(v.into(), 100_u8.into())));
            }
        }
    }

    #[test]
    fn noise_never_panics(
        text in "[0-9a-cé→\"#=:;,.\t \n-]{0,120}",
        reader in prop_oneof![
            Just(None),
            Just(Some(Reader::Matrix)),
            Just(Some(Reader::Points)),
            Just(Some(Reader::Tsplib)),
            Just(Some(Reader::Blocks)),
        ],
    ) {
        check_reading(&text, reader)?;
    }

    #[test]
    fn damaged_files_never_panic(cut in 0_usize..400, put in "[\\PC\n]{0,6}", which in 0_usize..4) {
        let base = [
            "min;Ash;Bö;Cedar\nAsh;0;5;7\nBö;4;0;3\nCedar;8;2;0\n",
            "NAME: x\nTYPE: TSP\nDIMENSION: 3\nEDGE_WEIGHT_TYPE: GEO\nNODE_COORD_SECTION\n\
             1 2.3 4.5\n2 3.4 5\n3 4 5\nEOF\n",
            "V\nAsh Bö\n\nc by i, j\nAsh Bö 12\nBö Ash 7\n\nQ = 40\n",
            "DIMENSION: 3\nEDGE_WEIGHT_TYPE: EXPLICIT\nEDGE_WEIGHT_FORMAT: LOWER_ROW\n\
             EDGE_WEIGHT_SECTION\n1 2\n3\nDISPLAY_DATA_SECTION\n1 1 1\n2 2 2\n3 3 3\n",
        ][which];
        let at = cut % base.len();
        prop_assume!(base.is_char_boundary(at));
        check_reading(&format!("{}{put}{}", &base[..at], &base[at..]), None)?;
        check_reading(&format!("{}{put}", &base[..at]), None)?;
    }
}

/// What holds for every text: places are inside and on character boundaries, an error means no
/// instance, and the layout has a place for each stop.
fn check_reading(text: &str, reader: Option<Reader>) -> Result<(), TestCaseError> {
    let reading = read(text, reader);
    for complaint in &reading.complaints {
        prop_assert!(text.get(complaint.span.clone()).is_some(), "{:?}", complaint);
        prop_assert!(complaint.line > 0 && complaint.column > 0 && !complaint.message.is_empty());
    }
    let error = reading.complaints.iter().any(|c| c.severity == crate::Severity::Error);
    prop_assert_eq!(error, reading.instance.is_none());
    if let Some(instance) = reading.instance {
        prop_assert_eq!(crate::layout(&instance).places.len(), instance.matrix().len().isqrt());
    }
    Ok(())
}
