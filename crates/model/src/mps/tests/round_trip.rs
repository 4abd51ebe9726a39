//! Written and read again: the same model.

use std::fmt::Write as _;

use proptest::prelude::*;

use super::{meaning, model};
use crate::mps::{WriteError, write};
use crate::{ColumnId, ColumnSpec, FamilyState, Model, ModelBuilder, Number, Row, RowId, Sense};

fn number(value: i32) -> Number {
    Number::from_parts(value.into(), 1000_u16.into())
}

/// A column: lower and upper bound, cost, whether it is whole; a row: two sides and entries.
type Sides = (Option<i32>, Option<i32>);
type Shape = (Vec<(Sides, i32, bool)>, Vec<(Sides, Vec<(usize, i32)>)>);

fn shape() -> impl Strategy<Value = Shape> {
    let side = || prop_oneof![Just(None), Just(Some(0)), (-9000..9000).prop_map(Some)];
    let sides = move || (side(), side());
    let columns = prop::collection::vec((sides(), -5000..5000_i32, any::<bool>()), 1..12);
    let entries = prop::collection::vec((0..12_usize, -5000..5000_i32), 0..6);
    (columns, prop::collection::vec((sides(), entries), 0..8))
}

/// A model in which variables and families have one to three members.
fn built((columns, rows): &Shape, sense: Sense, offset: i32) -> Model {
    let mut builder = ModelBuilder::new("a model", sense);
    builder.offset(number(offset));
    for (at, &((lower, upper), cost, integer)) in columns.iter().enumerate() {
        if at % 3 == 0 {
            builder.variable(&format!("x{at}"), at % 2 == 0);
        }
        let tuple = [builder.label(&format!("a{at}")), builder.label("b")];
        let spec = ColumnSpec {
            lower: lower.map(number),
            upper: upper.map(number),
            cost: number(cost),
            integer,
        };
        builder.column(&tuple[..at % 3], &spec).unwrap();
    }
    for (at, ((lower, upper), entries)) in rows.iter().enumerate() {
        if at % 2 == 0 {
            builder.family(&format!("f{at}"), FamilyState::In, false);
        }
        let tuple = [builder.label(&format!("r{at}"))];
        let inside = entries.iter().filter(|entry| entry.0 < columns.len());
        let entries = inside.map(|&(c, a)| (ColumnId::from_index(c), number(a))).collect();
        let (lower, upper) = match (lower, upper) {
            (None, None) => (Some(0), None),
            (Some(l), Some(u)) if l > u => (Some(*u), Some(*l)),
            (lower, upper) => (*lower, *upper),
        };
        let row = Row { entries, lower: lower.map(number), upper: upper.map(number) };
        builder.row(&tuple[..at % 2], row).unwrap();
    }
    builder.build()
}

proptest! {
    #[test]
    fn written_and_read_is_the_same(shape in shape(), maximise in any::<bool>(), offset in -3..3_i32) {
        let sense = if maximise { Sense::Maximise } else { Sense::Minimise };
        let before = built(&shape, sense, offset);
        let written = write(&before).unwrap();
        let (after, codes) = model(&written.text);
        prop_assert_eq!(meaning(&after), meaning(&before));
        let warned = codes.iter().filter(|c| !["crossed-bounds", "objective-constant"].contains(c));
        prop_assert_eq!(warned.count(), 0, "{:?}", codes);
        let again = write(&after).unwrap();
        prop_assert_eq!(again.text.lines().skip(2).collect::<Vec<_>>(), written.text.lines().skip(2).collect::<Vec<_>>());
    }
}

fn one_column(name: &str, lower: Number, cost: Number) -> ModelBuilder {
    let mut builder = ModelBuilder::new("t", Sense::Minimise);
    builder.variable(name, false);
    let spec = ColumnSpec { lower: Some(lower), upper: None, cost, integer: false };
    builder.column(&[], &spec).unwrap();
    builder
}

#[test]
fn what_does_not_end_is_counted() {
    let third = Number::from_parts(1.into(), 3_u8.into());
    let written = write(&one_column("x", third.clone(), third.clone()).build()).unwrap();
    assert_eq!(
        written.notes,
        [
            "1 coefficient is rounded to 17 significant digits",
            "1 bound or side is rounded to 17 significant digits"
        ]
    );
    let (after, _) = model(&written.text);
    let off = after.numbers().exact(after.columns()[0].cost) - third;
    assert!(off < Number::ZERO && -off < Number::from_parts(1.into(), 10_u128.pow(17).into()));
}

#[test]
fn families_on_demand_are_named_and_lacking() {
    let mut builder = one_column("x", Number::ZERO, Number::ONE);
    for (name, state) in
        [("keep", FamilyState::In), ("subtour", FamilyState::OnDemand), ("off", FamilyState::Out)]
    {
        builder.family(name, state, false);
        let row = Row {
            entries: vec![(ColumnId(0), Number::ONE)],
            lower: Some(Number::ONE),
            upper: None,
        };
        builder.row(&[], row).unwrap();
    }
    let written = write(&builder.build()).unwrap();
    let note = "subtour is on demand: its rows are not in the file";
    assert_eq!(written.notes, [note]);
    assert!(written.text.contains(&format!("* {note}\n")));
    let (after, _) = model(&written.text);
    assert_eq!(after.families().iter().map(|f| f.name.as_str()).collect::<Vec<_>>(), ["keep"]);
}

#[test]
fn names_are_made_safe_and_stay_apart() {
    let mut builder = ModelBuilder::new("two words", Sense::Minimise);
    let spec = ColumnSpec { lower: None, upper: None, cost: Number::ONE, integer: false };
    builder.variable("x", false);
    for label in ["New York", "New_York", "a,b", "", "[1]", "Zürich"] {
        let label = builder.label(label);
        builder.column(&[label], &spec).unwrap();
    }
    for name in ["\\bar d", "x[1]", "*", "'MARKER'", "x"] {
        builder.variable(name, false);
        builder.column(&[], &spec).unwrap();
    }
    builder.family("objective", FamilyState::In, false);
    builder.row(&[], Row { entries: vec![], lower: None, upper: None }).unwrap();
    let written = write(&builder.build()).unwrap();
    let (after, codes) = model(&written.text);
    let mut names = String::new();
    for at in 0..11 {
        let _ = write!(names, "{} ", after.column_name(ColumnId(at)));
    }
    assert_eq!(
        names,
        "x[New_York] x[New_York~2] x[a_b] x[_] x[_1_] x[Zürich] \\bar_d x_1_ _ _MARKER_ x~2 "
    );
    assert_eq!(codes, ["free-row"]);
    assert!(written.text.contains("NAME two_words\nROWS\n N objective~2\n N objective\n"));
    assert_eq!(written.notes.len(), 2);
    assert!(written.notes[0].starts_with("10 names were changed"), "{}", written.notes[0]);
    assert!(written.notes[1].starts_with("1 row has no side"));
}

#[test]
fn what_mps_cannot_say_is_refused() {
    let mut builder = one_column("x", Number::ZERO, Number::ONE);
    builder.family("f", FamilyState::In, false);
    let row = Row { entries: vec![], lower: Some(Number::ONE), upper: Some(Number::ZERO) };
    builder.row(&[], row).unwrap();
    assert_eq!(write(&builder.build()), Err(WriteError::CrossedSides("f".to_owned())));
    let huge = Number::from(10_u128.pow(20));
    let refused = Err(WriteError::OutOfRange("x".to_owned()));
    assert_eq!(write(&one_column("x", huge.clone(), Number::ONE).build()), refused);
    assert!(write(&one_column("x", Number::ZERO, huge).build()).is_ok());
}

#[test]
fn members_without_labels_are_numbered() {
    let mut builder = one_column("x[1]", Number::ZERO, Number::ONE);
    let spec = ColumnSpec { lower: None, upper: None, cost: Number::ONE, integer: true };
    builder.column(&[], &spec).unwrap();
    builder.family("rows", FamilyState::In, false);
    for at in 0..3_u8 {
        let entries = vec![(ColumnId(u32::from(at % 2)), Number::from(at + 1))];
        builder.row(&[], Row { entries, lower: None, upper: Some(Number::from(at)) }).unwrap();
    }
    let before = builder.build();
    let written = write(&before).unwrap();
    let (after, _) = model(&written.text);
    let names: Vec<_> = (0..3).map(|r| after.row_name(RowId(r))).collect();
    assert_eq!(names, ["rows", "rows[2]", "rows[3]"]);
    assert_eq!(after.column_name(ColumnId(1)), "x_1_[2]");
    for row in (0..3).map(RowId) {
        assert_eq!(after.row(row), before.row(row));
    }
    assert!(written.notes[0].starts_with("4 names were changed"), "{:?}", written.notes);
}
