//! Tables of a spreadsheet, wide and long, and the places of broken lines.

use super::*;
use crate::number::number_text;
use crate::{Reading, read};
use proptest::prelude::*;

fn table(text: &str) -> Reading {
    read(text, Some(Reader::Table))
}

/// Everything an instance holds, one line each.
fn shown(instance: &Instance) -> Vec<String> {
    let show = |(name, datum): (&str, &Datum)| match datum {
        Datum::Labels(labels) => format!("{name} = {}", labels.join(" ")),
        Datum::Integers(values) => format!("{name} = {values:?}"),
        Datum::Tuples { rows, .. } => {
            format!(
                "{name} = {}",
                rows.iter().map(|row| row.join("-")).collect::<Vec<_>>().join(" ")
            )
        }
        Datum::Number(number) => format!("{name} = {}", number_text(number)),
        Datum::Element(label) => format!("{name} = {label}"),
        Datum::Table { cells, .. } => {
            let cells = cells
                .iter()
                .map(|(key, number)| format!("{}:{}", key.join("-"), number_text(number)));
            format!("{name} = {}", cells.collect::<Vec<_>>().join(" "))
        }
    };
    instance.data().map(show).collect()
}

fn read_well(text: &str) -> Vec<String> {
    let reading = read(text, None);
    assert_eq!((reading.reader, reading.complaints.len()), (Reader::Table, 0), "{reading:?}");
    shown(&reading.instance.unwrap())
}

/// Sheets written down before any was tried (invented data): clock times, decimal commas, units in
/// headings, thousands, quoted labels, and a row of totals that stood as a label of its set.
#[test]
fn sheets_that_end_in_totals() {
    let sheet = "Kunde\tBedarf [t]\tKosten [EUR]\tvon\tbis\nAltdorf\t1.250,5\t12,40\t07:45\t12:00\n\
        Burg\t980\t9,10\t08:00\t16:30\nCelle\t2.400,25\t101,75\t6:15\t10:00\nSumme\t4.630,75\t123,25\t\t\n";
    assert_eq!(
        read_well(sheet),
        [
            "Kunde = Altdorf Burg Celle",
            "Bedarf = Altdorf:1250.5 Burg:980 Celle:2400.25",
            "Kosten = Altdorf:12.4 Burg:9.1 Celle:101.75",
            "von = Altdorf:465 Burg:480 Celle:375",
            "bis = Altdorf:720 Burg:990 Celle:600",
        ]
    );
    let quoted = "Stop,Earliest,Latest,Service (min),Demand\nDepot,06:00,20:00,0,0\n\
        \"Mill Lane, 4\",07:30,09:15,15,3\n\"High Street, 12\",08:00,11:45,10,5\n\"Quay\",6:45,10:00,20,2\n\
        Total,,,45,10\n";
    let found = read_well(quoted);
    assert_eq!(found[0], "Stop = Depot Mill Lane, 4 High Street, 12 Quay");
    assert_eq!(found[3], "Service = Depot:0 High Street, 12:10 Mill Lane, 4:15 Quay:20");
    let said = |text: &str| {
        let facts = read(text, None).facts;
        facts.into_iter().filter(|fact| fact.contains("last row")).collect::<Vec<_>>()
    };
    assert_eq!(
        said(quoted),
        ["The last row, `Total`, was left out: it holds the sums of those above."]
    );
    // one that is no sum stays, and so does a label of another name
    let other = quoted.replace("45,10\n", "45,11\n");
    assert!(read_well(&other)[0].ends_with("Quay Total"), "{:?}", read_well(&other));
    assert!(said(&other)[0].contains("is not the sum"), "{:?}", said(&other));
    let named = quoted.replace("Total", "Towton");
    assert!(read_well(&named)[0].ends_with("Quay Towton") && said(&named).is_empty());
    let needed = quoted.replace("Total,,,45,10", "Demand (t),1,2,3,4");
    assert!(
        said(&needed)[0].contains("`Demand (t)` and was read like the others"),
        "{:?}",
        said(&needed)
    );
    let two = "Unit;p_min (MW);start-up (EUR);ramp\nG1;50;1 500,00;35,5\nG2;20;400,00;20\n\n\
        Hour;Load (MW)\n00:00;120\n01:00;110,5\n";
    assert_eq!(
        read_well(two),
        [
            "Unit = G1 G2",
            "Hour = 00:00 01:00",
            "pMin = G1:50 G2:20",
            "startUp = G1:1500 G2:400",
            "ramp = G1:35.5 G2:20",
            "Load = 00:00:120 01:00:110.5",
        ]
    );
}

fn places(reading: &Reading) -> Vec<(u32, u32, &'static str)> {
    reading.complaints.iter().map(|c| (c.line, c.column, c.code)).collect()
}

#[test]
fn several_columns_over_one_index() {
    for text in [
        "period demand setup holding\n1 10 50 2\n2 20 50 2.5\n3 30 60 -\n",
        "period\tdemand\tsetup\tholding\n1\t10\t50\t2\n2\t20\t50\t2,5\n3\t30\t60\t\n",
        "period,demand,setup,holding,\n1,10,50,2,\n2,20,50,2.5,\n3,30,60,,\n",
    ] {
        assert_eq!(
            read_well(text),
            [
                "period = [1, 2, 3]",
                "demand = 1:10 2:20 3:30",
                "setup = 1:50 2:50 3:60",
                "holding = 1:2 2:2.5"
            ]
        );
    }
    // A row given twice makes no index of its numbers.
    let twice = table("client cost km\na 1 5\nb 2 6\nc 3 7\nd 4 5\na 9 8");
    assert_eq!(places(&twice), [(6, 1, "tuple-twice")]);
    let facts = table("client demand\na 3\nb -\n").facts;
    assert!(facts.contains(&"1 cell of demand left blank: no number there.".to_owned()));
}

#[test]
fn long_tables_over_several_indices() {
    assert_eq!(
        read_well("client, depot, cost (EUR)\nAsh, P, 12\nAsh, Q, 7\nBirch, P, 3.5\n"),
        ["client = Ash Birch", "depot = P Q", "cost = Ash-P:12 Ash-Q:7 Birch-P:3.5"]
    );
    // The whole numbers of the period are needed to tell the rows apart.
    assert_eq!(
        read_well("client;period;demand\na;1;5\na;2;6\nb;1;7"),
        ["client = a b", "period = [1, 2]", "demand = a-1:5 a-2:6 b-1:7"]
    );
    assert_eq!(
        shown(&table("i j d\n1 1 5\n1 2 6\n2 1 7").instance.unwrap()),
        ["i = [1, 2]", "j = [1, 2]", "d = 1-1:5 1-2:6 2-1:7"]
    );
}

#[test]
fn wide_tables() {
    let cells = "Ash-P:12 Ash-Q:7 Birch-P:3 Birch-Q:4 Cedar-P:1 Cedar-Q:2";
    let body = "\nAsh;12;7\nBirch;3;4\nCedar;1;2\n";
    for (corner, rows, columns, name) in [
        ("client \\ depot", "client", "depot", "c"),
        ("price: client/depot", "client", "depot", "price"),
        ("cost (EUR/t)", "I", "J", "cost"),
        ("c", "I", "J", "c"),
        ("", "I", "J", "c"),
    ] {
        let text = format!("{corner};P;Q{body}");
        assert_eq!(
            read_well(&text),
            [
                format!("{rows} = Ash Birch Cedar"),
                format!("{columns} = P Q"),
                format!("{name} = {cells}")
            ]
        );
    }
    // A noun in the corner heads a column, unless the columns are counted.
    assert_eq!(read_well("client;load;fee\na;1;2\nb;3;4")[0], "client = a b");
    assert_eq!(read_well("client;load;fee\na;1;2\nb;3;4")[1], "load = a:1 b:3");
    assert_eq!(read_well("need;D1;D2\na;1;2\nb;3;4")[2], "need = a-D1:1 a-D2:2 b-D1:3 b-D2:4");
    assert_eq!(
        read_well("client\\period;1;2;3\nA;1;2;3\nB;3;4;5")[..2],
        ["client = A B", "period = [1, 2, 3]"]
    );
}

#[test]
fn units_are_kept() {
    let reading = table("client;depot;unit cost (EUR)\nA;P;3\nB;Q;4");
    let instance = reading.instance.unwrap();
    assert_eq!(instance.units["unitCost"], "EUR");
    let said = "The heading `unit cost (EUR)` became the name unitCost, in EUR.".to_owned();
    assert!(reading.facts.contains(&said));
    assert!(reading.facts.contains(&"unitCost holds 2 numbers over client, depot.".to_owned()));
}

#[test]
fn several_tables_in_a_paste() {
    let text = "Clients\n\nclient demand\nAsh 3\nBirch 4\nCedar 5\n\n\
        depot opening size\nP 100 9\nQ 120 8\n\n\
        Transport (EUR)\n x P Q\nAsh 1 2\nBirch 3 4\nCedar 5 6\n\ncapacity 40\nvans 3\n";
    let wanted = [
        "client = Ash Birch Cedar",
        "depot = P Q",
        "demand = Ash:3 Birch:4 Cedar:5",
        "opening = P:100 Q:120",
        "size = P:9 Q:8",
        "capacity = 40",
        "vans = 3",
    ];
    let found = read_well(text);
    assert_eq!(found[..7], wanted);
    assert_eq!(found[7], "x = Ash-P:1 Ash-Q:2 Birch-P:3 Birch-Q:4 Cedar-P:5 Cedar-Q:6");
    // Titles without blank lines, and blank lines as a spreadsheet exports them.
    for between in ["\n", "\n;;;\n"] {
        let text = format!(
            "Demand;;;\nclient;demand\nAsh;3\nBirch;4{between}Transport (EUR);;\n;P;Q\nAsh;1;2\nBirch;3;4\n"
        );
        let found = read_well(&text);
        assert_eq!(found[..3], ["client = Ash Birch", "I = P Q", "demand = Ash:3 Birch:4"]);
        assert_eq!(found[3], "Transport = Ash-P:1 Ash-Q:2 Birch-P:3 Birch-Q:4");
    }
}

#[test]
fn tables_that_make_a_round_trip_have_its_habits() {
    let text = "stop demand\na 1\nb 2\n\nc a b\na 0 5\nb 6 0\n";
    let reading = table(text);
    let instance = reading.instance.unwrap();
    assert_eq!(shown(&instance), ["stop = a b", "demand = a:1 b:2", "c = a-a:0 a-b:5 b-a:6 b-b:0"]);
    let square = table(";a;b\na;0;5\nb;6;0").instance.unwrap();
    assert_eq!(square.stops(), ["a", "b"]);
    assert_eq!(square.assumed.iter().collect::<Vec<_>>(), ["A", "r"]);
}

#[test]
fn sets_of_tuples_take_their_title() {
    let reading = table("Conflicts\njob rival\na b\nb c\n\njob hours\na 1\nb 2\nc 3\n");
    assert_eq!(reading.complaints, []);
    assert_eq!(
        shown(&reading.instance.unwrap()),
        ["job = a b c", "rival = b c", "Conflicts = a-b b-c", "hours = a:1 b:2 c:3"]
    );
    assert_eq!(places(&table("job rival\na b\nb c\n")), [(1, 1, "no-title")]);
}

#[test]
fn broken_cells_are_all_named() {
    let text =
        "client;depot;cost;(EUR)\nAsh;P;1O;1\nAsh;;2;1\nBirch;P;3\nBirch;Q;3;1\nBirch;Q;4;1\n";
    let reading = table(text);
    assert!(reading.instance.is_none());
    assert_eq!(
        places(&reading),
        [
            (1, 19, "no-name"),
            (2, 7, "not-a-number"),
            (3, 5, "label-missing"),
            (4, 1, "row-length"),
            (6, 1, "tuple-twice"),
        ]
    );
    let wide = table("client\\depot;P;Q\nAsh;1;2;3\nBirch;x1;2\n;4;5\nAsh;1:75\n");
    assert_eq!(
        places(&wide),
        [(2, 9, "row-length"), (4, 1, "label-missing"), (5, 9, "row-length")]
    );
    let wide = table("client\\depot;P;Q\nAsh;1;2\nBirch;7O;2\n");
    assert_eq!(places(&wide), [(3, 7, "not-a-number")]);
    let twice = table("client fee\na 1\n\nclient fee\nb 2\n");
    assert_eq!(places(&twice), [(4, 8, "name-twice")]);
    let both = table("client fee\na 1\n\nfee client\nx 2\n");
    assert_eq!(places(&both), [(1, 8, "name-twice"), (4, 5, "name-twice")]);
    assert_eq!(places(&table("client fee\n\n")), [(1, 1, "nothing-to-read")]);
    assert_eq!(places(&table("load 3\nfee 4 5\n")), [(2, 1, "row-length")]);
}

#[test]
fn thousands_of_labels_are_refused() {
    let rows: String = (0..1_500).map(|i| format!("a{i} {i}\n")).collect();
    assert_eq!(places(&table(&format!("client demand\n{rows}"))), [(1, 1, "too-large")]);
    let columns = (0..10).map(|i| format!("k{i}")).collect::<Vec<_>>().join(" ");
    let labels = "a ".repeat(10);
    let found = places(&table(&format!("{columns} cost\n{labels} 1\n")));
    assert_eq!(found, [(1, 1, "too-large")]);
}

#[test]
fn noise_is_refused_quickly() {
    let long_line = "5 ".repeat(2_500_000);
    let many_lines = "é;x\n".repeat(1_000_000);
    let many_blocks: String = (0..400_000).map(|name| format!("a{name}\n\n")).collect();
    let many_tables = "a b\nc d 5\n\n".repeat(400_000);
    for text in [long_line, many_lines, many_blocks, many_tables] {
        for reader in [Reader::Arcs, Reader::Table, Reader::Geographic] {
            let reading = read(&text, Some(reader));
            assert!(reading.instance.is_none() && !reading.complaints.is_empty());
            assert!(reading.complaints.len() <= 202);
        }
    }
}

proptest! {
    #[test]
    fn printed_tables_read_back(
        cells in prop::collection::vec(prop::collection::vec(1_u32..9_999, 3), 2..7),
        mark in prop_oneof![Just('\t'), Just(';'), Just(','), Just(' ')],
        long in any::<bool>(),
    ) {
        let mut text = if long {
            format!("client{mark}depot{mark}cost\n")
        } else {
            format!("client/depot{mark}P{mark}Q{mark}R\n")
        };
        let mut wanted = Vec::new();
        for (i, row) in cells.iter().enumerate() {
            for (depot, value) in ["P", "Q", "R"].iter().zip(row) {
                wanted.push(format!("C{i}-{depot}:{value}"));
                if long {
                    text.push_str(&format!("C{i}{mark}{depot}{mark}{value}\n"));
                }
            }
            if !long {
                let row: Vec<_> = row.iter().map(ToString::to_string).collect();
                text.push_str(&format!("C{i}{mark}{}\n", row.join(&mark.to_string())));
            }
        }
        let reading = read(&text, None);
        prop_assert_eq!(reading.reader, Reader::Table);
        let shown = shown(&reading.instance.unwrap());
        let name = if long { "cost" } else { "c" };
        prop_assert_eq!(&shown[1], "depot = P Q R");
        prop_assert_eq!(&shown[2], &format!("{name} = {}", wanted.join(" ")));
    }

    #[test]
    fn noise_never_panics(
        text in "[0-9a-dé→\"#=:;,.\\\\/()\t \n-]{0,120}",
        reader in prop_oneof![
            Just(None), Just(Some(Reader::Arcs)), Just(Some(Reader::Table)),
            Just(Some(Reader::Geographic)),
        ],
    ) {
        check(&text, reader)?;
    }

    #[test]
    fn damaged_tables_never_panic(cut in 0_usize..400, put in "[\\PC\n]{0,6}", which in 0_usize..3) {
        let base = [
            "Kosten\n\nclient\\depot;P;Ö\nAsh;1;2\nBirch;3;4\n\nclient;demand\nAsh;3\nBirch;4\n",
            "undirected\nfrom to minutes\nAsh Bö 12\nBö Cedar 7\nCedar Ash 3\n",
            "stop lat lon\nAsh 48.2 16.4\nBö 47.1 15.4\nCedar 48.3 14.3\n",
        ][which];
        let at = cut % base.len();
        prop_assume!(base.is_char_boundary(at));
        check(&format!("{}{put}{}", &base[..at], &base[at..]), None)?;
        check(&format!("{}{put}", &base[..at]), None)?;
    }
}

/// What holds for every text: places are on character boundaries, an error means no instance,
/// and the layout has as many places as there are stops in a matrix.
fn check(text: &str, reader: Option<Reader>) -> Result<(), TestCaseError> {
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

/// Arrival times and thousands as a spreadsheet shows them.
#[test]
fn clock_times_and_thousands_are_read_and_said() {
    let text = "stop\tarrival\tservice (h)\tfee (EUR)\nAsh\t07:45\t0:30\t1 234,50\nBirch\t8:05\t1:15\t12,00\n";
    let reading = read(text, None);
    assert_eq!(reading.complaints, [], "{reading:?}");
    let instance = reading.instance.as_ref().unwrap();
    assert_eq!(
        shown(instance)[1..],
        [
            "arrival = Ash:465 Birch:485",
            "service = Ash:0.5 Birch:1.25",
            "fee = Ash:1234.5 Birch:12"
        ]
    );
    for said in [
        "Clock times count in minutes: `07:45` is 465.",
        "Marks between thousands were read: `1 234,50` is 1234.5.",
        "The clock times of service were turned into h.",
    ] {
        assert!(reading.facts.iter().any(|fact| fact == said), "{said}: {:?}", reading.facts);
    }
    assert_eq!(instance.units["fee"], "EUR");
}
