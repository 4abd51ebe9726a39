//! Whatever is pasted: no reader panics, each answers soon, and every complaint has its place.

#![allow(clippy::unwrap_used, reason = "a test's own helpers")]
#![allow(clippy::disallowed_types, reason = "the time is what is tested")]

use std::time::{Duration, Instant};

use hullward_instance::{Reader, Reading, Severity, read, read_part};
use proptest::prelude::*;

/// What must hold of any reading.
fn is_sound(text: &str, reading: &Reading) {
    assert!(reading.complaints.len() <= 202);
    for complaint in &reading.complaints {
        assert!(text.get(complaint.span.clone()).is_some(), "{complaint:?}");
        assert!(complaint.line > 0 && complaint.column > 0, "{complaint:?}");
        assert!(!complaint.message.is_empty(), "{complaint:?}");
        assert!(
            complaint.severity == Severity::Warning || !complaint.mend.is_empty(),
            "{complaint:?}"
        );
    }
    let errors = reading.complaints.iter().any(|c| c.severity == Severity::Error);
    assert_eq!(
        reading.instance.is_none(),
        errors,
        "an error, or an instance: {:?}",
        reading.reader
    );
}

/// A megabyte of each of these, which set out to make a reader slow.
fn hostile() -> Vec<String> {
    const SIZE: usize = 1 << 20;
    let fill = |head: &str, piece: &str| format!("{head}{}", piece.repeat(SIZE / piece.len()));
    let counted = |head: &str, line: &dyn Fn(usize) -> String| {
        let mut text = head.to_owned();
        (0..)
            .map(line)
            .take_while(|piece| {
                text.push_str(piece);
                text.len() < SIZE
            })
            .for_each(drop);
        text
    };
    vec![
        fill("", "1 "),
        fill("", "1,"),
        fill("", "1;2,5\n"),
        fill("", "1'234 "),
        fill("", "07:45\t"),
        fill("", "((((((("),
        fill("", "\"\"\""),
        fill("", "ä b\n"),
        fill("2\n", "2 2 9\n5 6\n1 2\n3 4\n10 11\n"),
        fill("99999 99999 3\n", "1 2 3\n"),
        fill("1000 1000 7\n", "1 2 3\n"),
        fill("p edge 1000 99999\n", "e 1 2\n"),
        fill("p edge 1000 99999\n", "e 1 2000\n"),
        fill("33D32945\nSECTION Graph\nNodes 999\n", "E 1 2 1/3\n"),
        fill("33D32945\nSECTION Terminals\n", "T 1\n"),
        fill(
            "TYPE: CVRP\nDIMENSION: 1000\nCAPACITY: 5\nEDGE_WEIGHT_TYPE: EUC_2D\nDEMAND_SECTION\n",
            "1 2\n",
        ),
        fill("", "TOUR_SECTION\n"),
        fill("NAME: x\n", "DIMENSION: 5\n"),
        fill("", "instance a\n1 1\n0 5\n"),
        counted("600 60000 5\n", &|k| format!("{} {} {k}\n", k % 600 + 1, k / 7 % 600 + 1)),
        counted("c by i\n", &|k| format!("a{k} 1/{}\n", 2 * k + 1)),
        counted("client cost\n", &|k| format!("c{k} {}.{k}\n", k % 7)),
        counted("", &|k| format!("a{k} b{} {k}\n", k * 7 % 1000)),
        counted("", &|k| format!("h{k}\n{k} 1\n\n")),
    ]
}

/// A second in a release build; what is built for tests on a machine that does other things too
/// has ten. A reader that is quadratic takes minutes.
#[test]
fn a_hostile_megabyte_is_answered_soon() {
    for text in hostile() {
        for reader in std::iter::once(None).chain(Reader::all().map(Some)) {
            let begun = Instant::now();
            let reading = read(&text, reader);
            let took = begun.elapsed();
            let head: String = text.chars().take(40).collect();
            assert!(took < Duration::from_secs(10), "{head:?} by {reader:?}: {took:?}");
            is_sound(&text, &reading);
        }
    }
}

const FILES: [&str; 9] = [
    "3 10\n7 4\n8 5\n9 6\n",
    "2\n2 2 9\n5 6\n1 2\n3 4\n10 11\n1 1 0\n7\n8\n9\n",
    "1\n2 3\n1 2 3\n4 5 6\n7 8 9\n1 2 3\n20 30\n",
    "2 3\n100 7.5\n200 8\n10\n1 2\n20\n3 4\n30\n5 6.25\n",
    "4 4 2\n1 2 9\n2 3 4\n1 3 2\n2 1 5\n",
    "# instance tiny\n2 3\n0 5 1 6 2 7\n2 1 0 2 1 3\n",
    "c FILE: tri.col\np edge 3 3\ne 1 2\ne 2 1\ne 2 3\n",
    "33D32945 STP\nSECTION Graph\nNodes 3\nEdges 2\nE 1 2 5\nE 2 3 7\nEND\nSECTION Terminals\nTerminals 2\nT 3\nT 1\nEND\nEOF\n",
    "NAME: a-k2\nTYPE: CVRP\nDIMENSION: 2\nCAPACITY: 9\nEDGE_WEIGHT_TYPE: EUC_2D\nNODE_COORD_SECTION\n1 0 0\n2 3 4\nDEMAND_SECTION\n1 0\n2 7\nDEPOT_SECTION\n1\n-1\nEOF\n",
];

proptest! {
    #![proptest_config(ProptestConfig { cases: 400, failure_persistence: None, ..ProptestConfig::default() })]

    /// Files with a piece taken out and another put in.
    #[test]
    fn damaged_files_are_answered(
        which in 0..FILES.len(), place in 0.0..1.0_f64, length in 0_usize..12,
        put in "[0-9a-zE :.'\n\t-]{0,6}", part in 0_usize..4, as_reader in 0_usize..19,
    ) {
        let letters: Vec<char> = FILES[which].chars().collect();
        let start = (place * letters.len() as f64) as usize;
        let end = (start + length).min(letters.len());
        let text: String = letters[..start].iter().copied().chain(put.chars()).chain(letters[end..].iter().copied()).collect();
        let reader = Reader::all().nth(as_reader);
        is_sound(&text, &read_part(&text, reader, (part > 0).then_some(part)));
    }

    #[test]
    fn anything_at_all_is_answered(text in "\\PC{0,200}|[0-9 \n,.;:'-]{0,200}", as_reader in 0_usize..19) {
        is_sound(&text, &read(&text, Reader::all().nth(as_reader)));
    }
}
