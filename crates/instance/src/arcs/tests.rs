//! Lists of drives: what is read, what is said, and the places of what is not.

use super::*;
use crate::number::number_text;
use crate::{Reading, read};
use proptest::prelude::*;

fn arcs(text: &str) -> Reading {
    read(text, Some(Reader::Arcs))
}

/// A table as `from to value` texts, in the order of its keys.
fn cells(instance: &Instance, name: &str) -> Vec<String> {
    let Some(Datum::Table { cells, .. }) = instance.get(name) else { return Vec::new() };
    cells.iter().map(|(key, value)| format!("{} {}", key.join(" "), number_text(value))).collect()
}

fn tuples(instance: &Instance, name: &str) -> Vec<String> {
    let Some(Datum::Tuples { rows, .. }) = instance.get(name) else { return Vec::new() };
    rows.iter().map(|row| row.join(" ")).collect()
}

fn places(reading: &Reading) -> Vec<(u32, u32, &'static str)> {
    reading.complaints.iter().map(|c| (c.line, c.column, c.code)).collect()
}

#[test]
fn one_list_in_many_spellings() {
    for text in [
        "Ash Birch 12\nBirch Cedar 7.5\nCedar Ash 3\nBirch Ash 4\n",
        "from,to,minutes\nAsh,Birch,12\nBirch,Cedar,7.5\nCedar,Ash,3\nBirch,Ash,4\n",
        "von;end;km\nAsh;Birch;12\nBirch;Cedar;7,5\nCedar;Ash;3\nBirch;Ash;4;\n",
        "Streets\n\ndirected:\nAsh\tBirch\t12\nBirch\tCedar\t7,5\nCedar\tAsh\t3\nBirch\tAsh\t4",
        "no from to street cost\n1 Ash Birch x 12\n2 Birch Cedar y 7.5\n3 Cedar Ash z 3\n\
         4 Birch Ash x 4",
    ] {
        let reading = read(text, None);
        assert_eq!((reading.reader, places(&reading)), (Reader::Arcs, vec![]), "{text}");
        let instance = reading.instance.unwrap();
        assert_eq!(instance.stops(), ["Ash", "Birch", "Cedar"]);
        let drives = ["Ash Birch", "Birch Cedar", "Cedar Ash", "Birch Ash"];
        assert_eq!(tuples(&instance, "A"), drives);
        let costs = ["Ash Birch 12", "Birch Ash 4", "Birch Cedar 7.5", "Cedar Ash 3"];
        assert_eq!(cells(&instance, "c"), costs);
        let element = |label: &str| Some(Datum::Element(label.to_owned()));
        let ends = ["r", "s", "t"].map(|name| instance.get(name).cloned());
        assert_eq!(ends, [element("Ash"), element("Ash"), element("Cedar")]);
        assert_eq!(instance.assumed.iter().collect::<Vec<_>>(), ["r", "s", "t"]);
    }
}

#[test]
fn units_and_columns_that_are_no_costs_are_said() {
    let reading = arcs("no from to street minutes\n1 a b x 12\n2 b a y 7");
    assert_eq!(reading.instance.unwrap().unit, "minutes");
    for said in [
        "2 stops, 2 drives, minutes.",
        "The column `no` holds no costs and was not read.",
        "The column `street` holds no costs and was not read.",
        "c holds the column `minutes`.",
        "s is a and t is b: the first and the last stop named.",
    ] {
        assert!(reading.facts.contains(&said.to_owned()), "{said}: {:?}", reading.facts);
    }
    assert_eq!(arcs("from,to,cost (EUR)\na,b,1\nb,a,2").instance.unwrap().unit, "EUR");
}

#[test]
fn several_cost_columns_are_several_tables() {
    let reading = read("from;to;travel time (min);t\na;b;3;9\nb;a;4;8", None);
    let instance = reading.instance.unwrap();
    assert_eq!(cells(&instance, "travelTime"), ["a b 3", "b a 4"]);
    assert_eq!(cells(&instance, "c"), cells(&instance, "travelTime"));
    assert_eq!(cells(&instance, "t"), ["a b 9", "b a 8"]);
    assert_eq!((instance.unit.as_str(), instance.units["travelTime"].as_str()), ("min", "min"));
    assert_eq!(instance.assumed.iter().collect::<Vec<_>>(), ["c", "r", "s"]);
    let said = "The heading `travel time (min)` became the name travelTime, in min.";
    assert!(reading.facts.contains(&said.to_owned()), "{:?}", reading.facts);
    let plain = arcs("a b 3 9\nb a 4 8").instance.unwrap();
    assert_eq!(
        (cells(&plain, "c")[0].as_str(), cells(&plain, "c2")[0].as_str()),
        ("a b 3", "a b 9")
    );
    let named = arcs("from to d c\na b 3 9\nb a 4 9").instance.unwrap();
    assert!(!named.assumed.contains("c") && named.assumed.contains("E"));
}

#[test]
fn one_way_lists_are_asked_about() {
    let list = "a b 5\nb c 7\n";
    let reading = arcs(list);
    assert_eq!(places(&reading), [(1, 1, "one-way")]);
    assert_eq!(reading.complaints[0].mend, BOTH_MEND);
    assert_eq!(tuples(&reading.instance.unwrap(), "A"), ["a b", "b c"]);
    let directed = arcs(&format!("Directed\n{list}"));
    assert_eq!((places(&directed), directed.instance.is_some()), (vec![], true));
    for line in ["both directions", "undirected:", "Both  ways"] {
        let both = read(&format!("{line}\n{list}"), None);
        assert_eq!(places(&both), []);
        let instance = both.instance.unwrap();
        assert_eq!(tuples(&instance, "A"), ["a b", "b c", "b a", "c b"]);
        assert_eq!(tuples(&instance, "E"), ["a b", "b c"]);
        assert_eq!(cells(&instance, "c"), ["a b 5", "b a 5", "b c 7", "c b 7"]);
    }
    let twice = arcs("undirected\na b 5\nb a 5");
    assert_eq!(places(&twice), [(3, 1, "drive-twice")]);
}

#[test]
fn a_list_may_have_no_costs() {
    let reading = read("a b\nb c\nc a\n", None);
    let instance = reading.instance.unwrap();
    assert_eq!((reading.reader, instance.get("c")), (Reader::Arcs, None));
    assert_eq!(tuples(&instance, "A"), ["a b", "b c", "c a"]);
    let said = "The list gives no costs, so there is no c.".to_owned();
    assert!(reading.facts.contains(&said));
}

#[test]
fn broken_lines_are_all_named() {
    let text = "from to minutes\nAsh Birch 1O\nBirch Birch 4\nBirch Ash\nAsh - 3\nBirch Cedar -\n\
        Birch Ash 5\nBirch Ash 6\n";
    let reading = read(text, None);
    assert!(reading.instance.is_none());
    assert_eq!(
        places(&reading),
        [
            (2, 11, "not-a-number"),
            (3, 1, "loop"),
            (4, 1, "row-length"),
            (5, 5, "label-missing"),
            (6, 13, "blank"),
            (8, 1, "drive-twice"),
        ]
    );
    assert_eq!(reading.complaints[5].mend, "Keep one of the lines; the first is line 7.");
    let names = arcs("from,to,V,(EUR),d,d\na,b,1,2,3,4\n");
    assert_eq!(places(&names), [(1, 9, "name-twice"), (1, 11, "no-name"), (1, 19, "name-twice")]);
    assert_eq!(places(&arcs("from to cost\n")), [(1, 1, "nothing-to-read")]);
}

#[test]
fn thousands_of_stops_are_refused() {
    let list = |n: usize| (1..n).map(|i| format!("n{i} n{} 1\n", i + 1)).collect::<String>();
    assert_eq!(places(&arcs(&list(1_002))), [(1_000, 1, "too-large")]);
    assert_eq!(arcs(&list(1_000)).instance.unwrap().stops().len(), 1_000);
}

proptest! {
    #[test]
    fn printed_lists_read_back(
        drives in prop::collection::btree_map((0_usize..6, 0_usize..6), 0_u32..9_999, 1..20),
        mark in prop_oneof![Just('\t'), Just(';'), Just(','), Just(' ')],
        head in any::<bool>(),
    ) {
        let drives: Vec<_> = drives.into_iter().filter(|((i, j), _)| i != j).collect();
        prop_assume!(!drives.is_empty());
        let mut text = String::new();
        if head {
            text.push_str(&format!("from{mark}to{mark}cost\n"));
        }
        for ((i, j), value) in &drives {
            text.push_str(&format!("Stop{i}{mark}Stop{j}{mark}{value}\n"));
        }
        let reading = read(&text, None);
        prop_assert_eq!(reading.reader, Reader::Arcs);
        let instance = reading.instance.unwrap();
        let wanted: Vec<_> =
            drives.iter().map(|((i, j), value)| format!("Stop{i} Stop{j} {value}")).collect();
        prop_assert_eq!(cells(&instance, "c"), wanted);
        prop_assert_eq!(tuples(&instance, "A").len(), drives.len());
    }
}
