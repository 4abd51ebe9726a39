//! Each reading on which programs disagree, by a little file: what comes out, and that it is
//! warned of. The readings are those of the module's table.

use super::{bounds, model, sides, small};
use crate::{ColumnId, Number, RowId, Sense};

const X: &str = "    x cost 1 r 1\n";
const WHOLE_X: &str = "    M 'MARKER' 'INTORG'\n    x cost 1 r 1\n    M 'MARKER' 'INTEND'\n";

fn bound_case(columns: &str, lines: &str) -> (String, Vec<&'static str>) {
    let (model, codes) = model(&small(columns, &format!("BOUNDS\n{lines}")));
    (bounds(&model, 0), codes)
}

#[test]
fn bounds_by_what_is_given() {
    let none: &[&str] = &[];
    let cases: [(&str, &str, &str, &[&str]); 19] = [
        (X, "", "0 inf", none),
        (X, " UP B x 4\n", "0 4", none),
        (X, " UP x 4\n", "0 4", none),
        (X, " LO B x -2\n", "-2 inf", none),
        (X, " FX B x 3\n", "3 3", none),
        (X, " FR B x\n", "-inf inf", none),
        (X, " FR x\n", "-inf inf", none),
        (X, " PL B x\n", "0 inf", none),
        (X, " BV B x\n", "0 1 *", none),
        (X, " BV B x 1\n", "0 1 *", none),
        (X, " LI B x 2\n", "2 inf *", none),
        (X, " UI B x 7\n", "0 7 *", none),
        (X, " MI B x\n UP B x 4\n", "-inf 4", none),
        (X, " UP B x 4\n MI B x\n", "-inf 4", none),
        (X, " UP B x -4\n LO B x -9\n", "-9 -4", none),
        (X, " up B x inf\n", "0 inf", none),
        (WHOLE_X, " PL B x\n", "0 inf *", none),
        (WHOLE_X, " LO B x 2\n", "2 inf *", none),
        (WHOLE_X, " UP B x 5\n", "0 5 *", none),
    ];
    for (columns, lines, wanted, codes) in cases {
        assert_eq!(bound_case(columns, lines), (wanted.to_owned(), codes.to_vec()), "{lines}");
    }
}

#[test]
fn disputed_bounds_are_warned_of() {
    let cases = [
        (X, " UP B x -4\n", "-inf -4", "negative-upper"),
        (X, " UP B x 0\n", "0 0", "zero-upper"),
        (X, " MI B x\n", "-inf inf", "minus-infinity"),
        (X, " UP B x 1e20\n", "0 inf", "large-is-infinite"),
        (X, " LO B x -1e30\n", "-inf inf", "large-is-infinite"),
        (X, " UP B x 4\n UP B x 5\n", "0 5", "value-again"),
        (X, " UP B x 4\n UP C x 5\n", "0 4", "further-set"),
        (X, " LO B x 4\n UP B x 3\n", "4 3", "crossed-bounds"),
        (WHOLE_X, "", "0 1 *", "unbounded-integer"),
    ];
    for (columns, lines, wanted, code) in cases {
        assert_eq!(bound_case(columns, lines), (wanted.to_owned(), vec![code]), "{lines}");
    }
}

#[test]
fn a_trap_is_warned_of_once_with_a_count() {
    let columns = "    x cost 1\n    y cost 1\n    z cost 1\n";
    let text = small(columns, "BOUNDS\n UP B x -1\n UP B y -2\n LO B z 1\n UP B z 2\n");
    let (_, complaints) = super::read(&text).unwrap();
    let [complaint] = complaints.as_slice() else { panic!("{complaints:?}") };
    assert!(complaint.message.starts_with("2 columns with a negative upper bound"));
    assert_eq!((complaint.line, complaint.column), (6, 5));
    assert_eq!(&text[complaint.span.clone()], "x");
}

fn range_case(kind: &str, range: &str) -> (String, Vec<&'static str>) {
    let text = format!(
        "NAME\nROWS\n N cost\n {kind} r\nCOLUMNS\n    x cost 1 r 1\nRHS\n    RHS r 10\nRANGES\n    RNG r {range}\nENDATA\n"
    );
    let (model, codes) = model(&text);
    (sides(&model, 0), codes)
}

#[test]
fn ranges_by_type_and_sign() {
    for (kind, range, wanted) in
        [("L", "4", "6 10"), ("L", "-4", "6 10"), ("G", "4", "10 14"), ("G", "-4", "10 14")]
    {
        assert_eq!(range_case(kind, range), (wanted.to_owned(), vec![]), "{kind} {range}");
    }
    for (range, wanted) in [("4", "10 14"), ("-4", "6 10"), ("0", "10 10")] {
        assert_eq!(range_case("E", range), (wanted.to_owned(), vec!["range-on-equation"]));
    }
    assert_eq!(range_case("G", "inf"), ("10 inf".to_owned(), vec![]));
}

#[test]
fn the_constant_is_minus_the_right_hand_side() {
    let (model, codes) = model(&small(X, " RHS cost -7.113\n"));
    assert_eq!(*model.offset(), Number::from_parts(7113.into(), 1000_u16.into()));
    assert_eq!(codes, ["objective-constant"]);
}

#[test]
fn directions_of_the_objective() {
    for (lines, sense) in [
        ("OBJSENSE\n    MAX\n", Sense::Maximise),
        ("OBJSENSE MAX\n", Sense::Maximise),
        ("OBJSENSE\n MAXIMIZE\n", Sense::Maximise),
        ("OBJSENSE MINIMISE\n", Sense::Minimise),
        ("", Sense::Minimise),
    ] {
        let text = small(X, "").replace("ROWS\n", &format!("{lines}ROWS\n"));
        assert_eq!(model(&text).0.sense(), sense, "{lines}");
    }
}

#[test]
fn what_is_left_out_is_said() {
    let text = "NAME\nROWS\n N cost\n N other\n L r\nCOLUMNS\n x cost 1 other 5\n x r 1 r 2\nRHS\n A r 3\n A other 4\n B r 9\nENDATA\nmore\n";
    let (model, codes) = model(text);
    assert_eq!(codes, ["free-row", "entry-again", "free-row-value", "further-set", "after-end"]);
    assert_eq!(model.row_count(), 1);
    assert_eq!(sides(&model, 0), "-inf 3");
    assert_eq!(model.row(RowId(0)).entries, [(ColumnId(0), Number::from(3))]);
    let (_, codes) = super::model("ROWS\n L r\nCOLUMNS\n x r 1\nENDATA\n");
    assert_eq!(codes, ["no-objective"]);
}

#[test]
fn cards_may_hold_blanks_in_names() {
    let text = "\
NAME          CARDS
ROWS
 N  COST
 L  ROW 1
 G  ROW 2
COLUMNS
    COL A     COST                1.   ROW 1              2.5
    COL A     ROW 2               1.
    COL B     COST               -1.   ROW 1               1.
RHS
              ROW 1               4.   ROW 2               1.
BOUNDS
 UP           COL B               3.
ENDATA
";
    let (model, codes) = model(text);
    assert_eq!(codes, ["fixed-columns"]);
    let all: Vec<_> = (0..2).map(|c| (model.column_name(ColumnId(c)), bounds(&model, c))).collect();
    assert_eq!(all[0], ("COL A".to_owned(), "0 inf".to_owned()));
    assert_eq!(all[1], ("COL B".to_owned(), "0 3".to_owned()));
    assert_eq!((sides(&model, 0), sides(&model, 1)), ("-inf 4".to_owned(), "1 inf".to_owned()));
    let five_halves = Number::from_parts(5.into(), 2_u8.into());
    let entries = [(ColumnId(0), five_halves), (ColumnId(1), Number::ONE)];
    assert_eq!(model.row(RowId(0)).entries, entries);
    assert_eq!(model.row_name(RowId(1)), "ROW 2");
}

#[test]
fn sets_may_lack_and_names_may_be_numbers() {
    let text = "NAME\nROWS\n N cost\n L 71\n G 72\nCOLUMNS\n x cost 1 71 1\n x 72 1\nRHS\n    71 10. 72 5.\nENDATA\n";
    let (model, codes) = model(text);
    assert_eq!(codes, [""; 0]);
    assert_eq!((sides(&model, 0), sides(&model, 1)), ("-inf 10".to_owned(), "5 inf".to_owned()));
}

#[test]
fn indexed_names_become_variables_and_families() {
    let text = "NAME\nROWS\n N cost\n L cap(1)\n E one\n L cap(2)\nCOLUMNS\n x[a,b] cap(1) 1 one 1\n y one 1\n x[b,a] cap(2) 1\nENDATA\n";
    let (model, _) = model(text);
    let variables: Vec<_> =
        model.variables().iter().map(|v| (v.name.as_str(), v.columns.clone())).collect();
    assert_eq!(variables, [("x", 0..2), ("y", 2..3)]);
    assert_eq!(model.find_column("x", &["b", "a"]), Some(ColumnId(1)));
    let names: Vec<_> = (0..3).map(|r| model.row_name(RowId(r))).collect();
    assert_eq!(names, ["cap[1]", "cap[2]", "one"]);
    assert_eq!(model.row(RowId(1)).entries, [(ColumnId(1), Number::ONE)]);
}

/// A transport of goods from two works to two depots, the smallest example of its kind: ship
/// all at least cost. The optimum, 46, is easily seen: x11 = 5, x12 = 3, x22 = 4.
const TRANSPORT: &str = "\
* a transport of goods
NAME          TRANSPORT
ROWS
 N  COST
 L  SUPPLY1
 L  SUPPLY2
 G  NEED1
 G  NEED2
COLUMNS
    X11       COST                3.   SUPPLY1             1.
    X11       NEED1               1.
    X12       COST                5.   SUPPLY1             1.
    X12       NEED2               1.
    X21       COST                6.   SUPPLY2             1.
    X21       NEED1               1.
    X22       COST                4.   SUPPLY2             1.
    X22       NEED2               1.
RHS
    RHS       SUPPLY1             8.   SUPPLY2             4.
    RHS       NEED1               5.   NEED2               7.
ENDATA
";

#[test]
fn a_whole_file_is_read() {
    let (model, codes) = model(TRANSPORT);
    assert_eq!(codes, [""; 0]);
    assert_eq!(model.title(), "TRANSPORT");
    let x = [5.0, 3.0, 0.0, 4.0];
    let activity: Vec<f64> = (0..4).map(|r| model.row(RowId(r)).activity(&x)).collect();
    assert_eq!(activity, [8.0, 4.0, 5.0, 7.0]);
    let cost: f64 =
        model.columns().iter().zip(x).map(|(c, x)| model.numbers().float(c.cost) * x).sum();
    assert_eq!(cost, 46.0);
    let all: Vec<_> = (0..4).map(|r| sides(&model, r)).collect();
    assert_eq!(all, ["-inf 8", "-inf 4", "5 inf", "7 inf"]);
}
