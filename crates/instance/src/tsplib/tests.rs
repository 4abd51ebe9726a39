//! TSPLIB files: one matrix in every layout, distances of points, and broken files.

use super::distance::Rule;
use crate::number::Number;
use crate::{Datum, Instance, Reader, Reading, read};

/// d(1,2) = 1, d(1,3) = 2, d(1,4) = 3, d(2,3) = 4, d(2,4) = 5, d(3,4) = 6.
const LAYOUTS: [(&str, &str); 9] = [
    ("FULL_MATRIX", "9999 1 2 3\n1 9999 4 5\n2 4 9999 6\n3 5 6 9999"),
    ("UPPER_ROW", "1 2 3\n4 5\n6"),
    ("LOWER_ROW", "1\n2 4\n3 5 6"),
    ("UPPER_DIAG_ROW", "0 1 2 3\n0 4 5\n0 6\n0"),
    ("LOWER_DIAG_ROW", "0\n1 0\n2 4 0\n3 5 6 0"),
    ("UPPER_COL", "1\n2 4\n3 5 6"),
    ("LOWER_COL", "1 2 3\n4 5\n6"),
    ("UPPER_DIAG_COL", "0\n1 0\n2 4 0\n3 5 6 0"),
    ("LOWER_DIAG_COL", "0 1 2 3\n0 4 5\n0 6\n0"),
];

fn explicit(format: &str, numbers: &str) -> Reading {
    read(
        &format!(
            "NAME : little\nTYPE: TSP\nDIMENSION :4\nEDGE_WEIGHT_TYPE: EXPLICIT\n\
             EDGE_WEIGHT_FORMAT: {format} \nEDGE_WEIGHT_SECTION\n{numbers}\nEOF\n"
        ),
        None,
    )
}

fn integers(instance: &Instance) -> Vec<i64> {
    let value = |number: Option<&Number>| {
        number.map_or(0, |number| i64::try_from(number.numerator().clone()).unwrap())
    };
    instance.matrix().into_iter().map(value).collect()
}

#[test]
fn every_explicit_layout_gives_the_same_matrix() {
    for (format, numbers) in LAYOUTS {
        for run_on in [false, true] {
            let numbers = if run_on { numbers.replace('\n', " ") } else { numbers.to_owned() };
            let reading = explicit(format, &numbers);
            assert_eq!(reading.reader, Reader::Tsplib);
            assert_eq!(reading.complaints, [], "{format}");
            let instance = reading.instance.unwrap();
            assert_eq!(instance.title, "little");
            assert_eq!(
                integers(&instance),
                [0, 1, 2, 3, 1, 0, 4, 5, 2, 4, 0, 6, 3, 5, 6, 0],
                "{format}"
            );
        }
    }
}

#[test]
fn a_list_of_the_wrong_length_is_refused() {
    for (format, numbers) in LAYOUTS {
        let more = explicit(format, &format!("{numbers} 7"));
        assert_eq!(more.complaints[0].code, "row-count", "{format}");
        let (fewer, _) = numbers.rsplit_once(char::is_whitespace).unwrap();
        let less = explicit(format, fewer);
        assert_eq!(less.complaints[0].code, "row-count", "{format}");
        assert!(more.instance.is_none() && less.instance.is_none());
    }
}

#[test]
fn rules_round_as_published() {
    let origin = (0.0, 0.0);
    // √2.25 = 1.5 goes up; √2 = 1.41 is 1, 2 or, by ATT from √0.2 = 0.447, 1.
    assert_eq!(Rule::Euclidean.between(origin, (1.5, 0.0)), 2);
    assert_eq!(Rule::Euclidean.between(origin, (1.0, 1.0)), 1);
    assert_eq!(Rule::Ceiling.between(origin, (1.0, 1.0)), 2);
    assert_eq!(Rule::Ceiling.between(origin, (3.0, 4.0)), 5);
    assert_eq!(Rule::Att.between(origin, (1.0, 1.0)), 1);
    assert_eq!(Rule::Att.between(origin, (10.0, 0.0)), 4);
    // The same place is at distance 1: the function adds 1 before it cuts off.
    assert_eq!(Rule::Geo.between((16.47, 96.1), (16.47, 96.1)), 1);
    // Cities 1 and 2 of burma14, as other readers of the file compute it.
    assert_eq!(Rule::Geo.between((16.47, 96.10), (16.47, 94.44)), 153);
}

#[test]
fn headers_may_be_written_in_many_ways() {
    let text = "NAME:a\r\nCOMMENT : x: y\r\nCOMMENT: z\r\nTYPE :ATSP\r\nDIMENSION:   2\r\n\
        EDGE_WEIGHT_TYPE :EXPLICIT\r\nEDGE_WEIGHT_FORMAT: FULL_MATRIX\r\n\
        EDGE_WEIGHT_SECTION  \r\n 0 7\r\n 8 0\r\n";
    let reading = read(text, None);
    assert_eq!(reading.complaints, []);
    assert_eq!(integers(&reading.instance.unwrap()), [0, 7, 8, 0]);
}

#[test]
fn display_data_give_places() {
    let text = "DIMENSION: 2\nEDGE_WEIGHT_TYPE: EXPLICIT\nEDGE_WEIGHT_FORMAT: UPPER_ROW\n\
        DISPLAY_DATA_TYPE: TWOD_DISPLAY\nEDGE_WEIGHT_SECTION\n5\nDISPLAY_DATA_SECTION\n\
        1 10.0 20\n2 30 4.5e1\nEOF";
    let points = read(text, None).instance.unwrap().points.unwrap();
    assert_eq!(
        (points.places.as_slice(), points.geographic),
        (&[(10.0, 20.0), (30.0, 45.0)][..], false)
    );
}

#[test]
fn geographic_places_are_longitude_and_latitude() {
    let text = "DIMENSION: 2\nEDGE_WEIGHT_TYPE: GEO\nNODE_COORD_SECTION\n1 16.30 -96.15\n2 0 1\n";
    let points = read(text, None).instance.unwrap().points.unwrap();
    assert!(points.geographic);
    let (longitude, latitude) = points.places[0];
    assert!((longitude + 96.25).abs() < 1e-9 && (latitude - 16.5).abs() < 1e-9);
}

#[test]
fn what_is_not_read_is_named_with_its_line() {
    let text =
        "NAME: x\nTYPE: HCP\nSERVICE_TIME: 5\nfoo\nDIMENSION: two\nEDGE_WEIGHT_TYPE: MAN_9D\n";
    let reading = read(text, None);
    assert!(reading.instance.is_none());
    let found: Vec<_> = reading.complaints.iter().map(|c| (c.line, c.code)).collect();
    assert_eq!(
        found,
        [
            (2, "type"),
            (3, "keyword-unread"),
            (4, "not-understood"),
            (5, "dimension"),
            (6, "weight-type")
        ]
    );
}

#[test]
fn broken_coordinates_are_all_named() {
    let text = "DIMENSION: 4\nEDGE_WEIGHT_TYPE: EUC_2D\nNODE_COORD_SECTION\n\
        1 0 0\n2 1o 5\n3 4\n1 6 6\nEOF\n";
    let reading = read(text, None);
    let found: Vec<_> = reading.complaints.iter().map(|c| (c.line, c.column, c.code)).collect();
    assert_eq!(found, [(5, 3, "not-a-number"), (6, 1, "row-length"), (7, 1, "label-twice")]);
    assert!(reading.instance.is_none());
}

#[test]
fn missing_parts_are_named() {
    for (text, code) in [
        ("DIMENSION: 3\n", "keyword-missing"),
        ("EDGE_WEIGHT_TYPE: EUC_2D\n", "keyword-missing"),
        ("DIMENSION: 3\nEDGE_WEIGHT_TYPE: EUC_2D\n", "section-missing"),
        ("DIMENSION: 3\nEDGE_WEIGHT_TYPE: EXPLICIT\n", "keyword-missing"),
        (
            "DIMENSION: 3\nEDGE_WEIGHT_TYPE: EXPLICIT\nEDGE_WEIGHT_FORMAT: UPPER_ROW\n",
            "section-missing",
        ),
        (
            "DIMENSION: 3\nEDGE_WEIGHT_TYPE: EXPLICIT\nEDGE_WEIGHT_FORMAT: FUNCTION\n",
            "weight-format",
        ),
    ] {
        let reading = read(text, Some(Reader::Tsplib));
        assert!(reading.instance.is_none());
        assert_eq!(reading.complaints[0].code, code, "{text}");
    }
}

/// Four stops of which the third is the depot, distances by hand.
const ROUTES: &str = "NAME: four-k2\nTYPE: CVRP\nDIMENSION: 4\nCAPACITY: 10\n\
    EDGE_WEIGHT_TYPE: EXPLICIT\nEDGE_WEIGHT_FORMAT: LOWER_ROW\nEDGE_WEIGHT_SECTION\n1\n2 3\n4 5 6\n\
    DEMAND_SECTION\n1 4\n2 5\n3 0\n4 6\nDEPOT_SECTION\n3\n-1\nEOF\n";

#[test]
fn routes_have_demands_capacity_depot_and_vehicles() {
    let reading = read(ROUTES, None);
    assert_eq!(reading.complaints, []);
    let instance = reading.instance.unwrap();
    assert_eq!(instance.get("r"), Some(&Datum::Element("3".to_owned())));
    assert!(!instance.assumed.contains("r") && instance.assumed.contains("A"));
    assert_eq!(instance.get("Q"), Some(&Datum::Number(10.into())));
    assert_eq!(instance.get("K"), Some(&Datum::Number(2.into())));
    let Some(Datum::Table { cells, .. }) = instance.get("q") else { panic!("no demands") };
    assert_eq!(cells[&vec!["4".to_owned()]], 6.into());
    assert!(reading.facts.contains(&"Capacity 10 a vehicle, for a demand of 15.".to_owned()));
}

#[test]
fn what_routes_lack_is_named() {
    for (from, to, code, line) in [
        ("CAPACITY: 10\n", "", "keyword-missing", 1),
        ("CAPACITY: 10", "CAPACITY: ten", "keyword-missing", 4),
        ("4 6\nDEPOT", "DEPOT", "row-count", 14),
        ("2 5\n", "9 5\n", "row-length", 13),
        ("\n3\n-1", "\n7\n-1", "depot", 17),
    ] {
        let reading = read(&ROUTES.replacen(from, to, 1), None);
        let found = &reading.complaints[0];
        assert_eq!((found.code, found.line), (code, line), "{from} -> {to}");
    }
    let tour = read("NAME: x\nTYPE: TOUR\nDIMENSION: 3\nTOUR_SECTION\n1\n2\n3\n-1\n", None);
    assert_eq!(tour.complaints[0].message, "this is a tour, no instance");
}
