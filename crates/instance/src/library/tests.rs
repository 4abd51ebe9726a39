//! Small files of each kind, guessed and read, and what is said where their counts do not fit.

use crate::instance::{Datum, Reader};
use crate::number::number_text;
use crate::{Reading, read, read_part};

fn well(text: &str, reader: Reader) -> Reading {
    let reading = read(text, None);
    assert_eq!((reading.reader, reading.complaints.as_slice()), (reader, &[][..]), "{text}");
    assert!(reading.instance.is_some());
    reading
}

fn cell(reading: &Reading, name: &str, key: &[&str]) -> String {
    let key: Vec<String> = key.iter().map(|&label| label.to_owned()).collect();
    match reading.instance.as_ref().and_then(|instance| instance.get(name)) {
        Some(Datum::Table { cells, .. }) => cells.get(&key).map(number_text).unwrap_or_default(),
        Some(Datum::Number(number)) => number_text(number),
        Some(Datum::Element(label)) => label.clone(),
        _ => String::new(),
    }
}

#[test]
fn knapsacks() {
    let pairs = well("3 10\n7 4\n8 5\n9 6\n", Reader::Knapsack);
    assert_eq!(
        [cell(&pairs, "p", &["2"]), cell(&pairs, "a", &["2"]), cell(&pairs, "b", &[])],
        ["8", "5", "10"]
    );
    let numbered = well("3\n1 7 4\n2 8 5\n3 9 6\n10\n", Reader::Knapsack);
    assert_eq!(
        numbered.instance.map(|i| i.data().count()),
        pairs.instance.map(|i| i.data().count())
    );
    // The first and the last instance are of different size, as in mknap1.
    let text = "2\n2 2 9\n5 6\n1 2\n3 4\n10 11\n1 1 0\n7\n8\n9\n";
    let first = well(text, Reader::MultiKnapsack);
    assert_eq!(first.parts, ["1 – 2 items, 2 resources", "2 – 1 item, 1 resource"]);
    assert_eq!([cell(&first, "a", &["2", "1"]), cell(&first, "b", &["2"])], ["3", "11"]);
    assert!(
        first.facts.iter().any(|fact| fact.contains("gives 9 as the best")),
        "{:?}",
        first.facts
    );
    let second = read_part(text, None, Some(2));
    assert_eq!(cell(&second, "p", &["1"]), "7");
    let third = read_part(text, None, Some(3));
    assert_eq!(third.complaints[0].code, "no-such-part");
}

#[test]
fn assignment_and_sites() {
    let gap = well("1\n2 3\n1 2 3\n4 5 6\n7 8 9\n1 2 3\n20 30\n", Reader::Assignment);
    assert_eq!(
        [cell(&gap, "c", &["2", "1"]), cell(&gap, "a", &["1", "3"]), cell(&gap, "b", &["2"])],
        ["4", "9", "30"]
    );
    let cap = well("2 3\n100 7.5\n200 8\n10\n1 2\n20\n3 4\n30\n5 6.25\n", Reader::Sites);
    assert_eq!(
        [cell(&cap, "c", &["2", "3"]), cell(&cap, "f", &["1"]), cell(&cap, "d", &["3"])],
        ["6.25", "7.5", "30"]
    );
    let open = well("2 3\ncapacity 7.5\ncapacity 8\n10\n1 2\n20\n3 4\n30\n5 6.25\n", Reader::Sites);
    assert!(open.instance.is_some_and(|instance| instance.get("q").is_none()));
}

#[test]
fn medians_lie_on_shortest_paths_and_the_last_length_counts() {
    let text = "4 4 2\n1 2 9\n2 3 4\n1 3 2\n2 1 5\n";
    let found = well(text, Reader::Medians);
    assert_eq!([cell(&found, "d", &["1", "2"]), cell(&found, "d", &["1", "4"])], ["5", ""]);
    assert!(found.facts.iter().any(|fact| fact.contains("the last length counts")));
    assert!(
        found.facts.iter().any(|fact| fact.starts_with("6 pairs have no path")),
        "{:?}",
        found.facts
    );
}

#[test]
fn job_shops_alone_and_together() {
    let body = "2 3\n0 5 1 6 2 7\n2 1 0 2 1 3\n";
    let one = well(&format!("# instance tiny\n{body}"), Reader::JobShop);
    assert_eq!(one.instance.as_ref().map(|i| i.title.as_str()), Some("tiny"));
    // Job 2 goes from machine 3 by 1 to 2; its second operation stands on machine 1.
    assert_eq!([cell(&one, "p", &["2", "1"]), cell(&one, "p", &["1", "3"])], ["2", "7"]);
    let step = |from: &str, to: &str| vec!["2".to_owned(), from.to_owned(), to.to_owned()];
    assert!(
        matches!(one.instance.as_ref().and_then(|i| i.get("N")), Some(Datum::Tuples { rows, .. })
        if rows[2..] == [step("3", "1"), step("1", "2")])
    );
    let twice = read("2 2\n0 5 0 6\n1 7 0 8\n", Some(Reader::JobShop));
    assert_eq!([cell(&twice, "m", &["1", "2"]), cell(&twice, "p", &["1", "2"])], ["1", "6"]);
    assert!(one.facts.iter().any(|fact| fact.contains("longest job takes 18, the busiest machine is at work for 9")), "{:?}", one.facts);
    let two = read_part(
        &format!(" instance a\n+++\nmade up\n{body} instance b\n{body}"),
        Some(Reader::JobShop),
        Some(2),
    );
    assert_eq!((two.parts.len(), two.instance.map(|i| i.title)), (2, Some("b".to_owned())));
    let wrong = read("2 2\n0 5 1 6\n1 7 4 8\n", Some(Reader::JobShop));
    assert_eq!((wrong.complaints[0].line, wrong.complaints[0].column), (3, 5));
}

#[test]
fn tardiness_counts_its_jobs() {
    let text = "2\n5 6\n1 2\n10 20\n7 8\n3 4\n30 40\n";
    let found = read_part(text, Some(Reader::Tardiness), Some(2));
    assert_eq!(
        [cell(&found, "p", &["2"]), cell(&found, "w", &["1"]), cell(&found, "d", &["1"])],
        ["8", "3", "30"]
    );
    let unknown = read("5 6\n1 2\n10 20\n", Some(Reader::Tardiness));
    assert_eq!(unknown.complaints[0].code, "count-missing");
}

#[test]
fn graphs() {
    let graph = well("c FILE: tri.col\np edge 3 6\ne 1 2\ne 2 1\ne 2 3\n", Reader::Graph);
    assert!(
        matches!(graph.instance.as_ref().and_then(|i| i.get("E")), Some(Datum::Tuples { rows, .. }) if rows.len() == 2)
    );
    assert!(graph.facts.iter().any(|fact| fact.contains("announces 6")), "{:?}", graph.facts);
    let steiner = well(
        "33D32945 STP File\nSECTION Comment\nName \"B\"\nEND\nSECTION Graph\nNodes 3\nEdges 2\nE 1 2 5\nE 2 3 7\nEND\nSECTION Terminals\nTerminals 2\nT 3\nT 1\nEND\nEOF\n",
        Reader::Steiner,
    );
    assert_eq!([cell(&steiner, "c", &["3", "2"]), cell(&steiner, "r", &[])], ["7", "3"]);
    let wrong = read("p edge 3 1\ne 1 4\n", None);
    assert_eq!((wrong.complaints[0].line, wrong.complaints[0].column), (2, 5));
}

#[test]
fn the_older_routing_form_and_two_matrices() {
    let trip = well("3 2 50\n0 0 0\n20 3 4\n30 6 8\n", Reader::Routing);
    assert_eq!(
        [cell(&trip, "c", &["1", "3"]), cell(&trip, "q", &["3"]), cell(&trip, "Q", &[])],
        ["10", "30", "50"]
    );
    let qap = well("2\n0 1\n2 0\n\n0 3\n4 0\n", Reader::Quadratic);
    assert_eq!([cell(&qap, "f", &["2", "1"]), cell(&qap, "d", &["2", "1"])], ["2", "4"]);
}

#[test]
fn a_square_of_numbers_stays_a_matrix() {
    assert_eq!(read("3 2 1\n1 2 5\n2 3 7\n", None).reader, Reader::Matrix);
}

#[test]
fn what_is_cut_off_or_left_over_has_its_place() {
    let short = read("3 10\n7 4\n8 5\n", Some(Reader::Knapsack));
    assert_eq!((short.complaints[0].code, short.complaints[0].line), ("text-ends", 3));
    let long = read("2 10\n7 4\n8 5\n9 6\n", Some(Reader::Knapsack));
    assert_eq!((long.complaints[0].code, long.complaints[0].line), ("left-over", 4));
    let word = read("2 10\n7 x\n8 5\n", Some(Reader::Knapsack));
    assert_eq!((word.complaints[0].line, word.complaints[0].column), (2, 3));
}

#[test]
fn solutions_and_other_files_are_called_what_they_are() {
    let solution = read("Route #1: 2 3\nRoute #2: 4\nCost 12\n", None);
    assert_eq!(solution.complaints[0].message, "this is a solution, no instance");
    let json = read("[\n  {\n    \"name\" : \"abz5\" } ]", None);
    assert_eq!(json.complaints[0].message, "this is JSON, no table");
}
