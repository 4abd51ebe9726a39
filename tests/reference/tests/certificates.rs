//! Certificates of the strength order, checked again from their JSON alone: fractions of our own in
//! 128 bits, no code of the studies. What they rest on is compared with the rows of the model. Where a
//! rival has variables of its own, what is proved is compared with its rows after the affine map was put
//! in for them.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use std::collections::{BTreeMap, BTreeSet};
use std::rc::Rc;

use catalogue::{Class, find, generate};
use instance::{Instance, read};
use model::{ColumnId, Model, RowId};
use record::study::Report;
use serde_json::Value;
use study::{Plan, Running, Source, Subject, model_of};

/// A fraction in lowest terms with a positive denominator.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
struct Fraction(i128, i128);

impl Fraction {
    fn new(top: i128, bottom: i128) -> Self {
        let (mut a, mut b) = (top.abs(), bottom.abs());
        while b != 0 {
            (a, b) = (b, a % b);
        }
        let sign = if bottom < 0 { -1 } else { 1 };
        let divisor = if a == 0 { 1 } else { a };
        Self(sign * top / divisor, sign * bottom / divisor)
    }

    fn read(text: &str) -> Self {
        let (top, bottom) = text.split_once('/').unwrap_or((text, "1"));
        Self::new(top.trim().parse().unwrap(), bottom.trim().parse().unwrap())
    }

    fn plus(self, other: Self) -> Self {
        let left = self.0.checked_mul(other.1).unwrap();
        let right = other.0.checked_mul(self.1).unwrap();
        Self::new(left.checked_add(right).unwrap(), self.1.checked_mul(other.1).unwrap())
    }

    fn times(self, other: Self) -> Self {
        Self::new(self.0.checked_mul(other.0).unwrap(), self.1.checked_mul(other.1).unwrap())
    }

    fn minus(self, other: Self) -> Self {
        self.plus(Self(-other.0, other.1))
    }
}

fn words(value: &Value) -> Vec<String> {
    value.as_array().unwrap().iter().map(|word| word.as_str().unwrap().to_owned()).collect()
}

fn entries(value: &Value) -> BTreeMap<String, Fraction> {
    let pairs = value.as_array().unwrap().iter().map(words);
    pairs.map(|pair| (pair[0].clone(), Fraction::read(&pair[1]))).collect()
}

/// Forms the sum of each proof; how many rows hold by it.
fn checked(certificate: &Value) -> usize {
    let system: BTreeMap<String, &Value> = certificate["system"]
        .as_array()
        .unwrap()
        .iter()
        .map(|row| (row["row"].as_str().unwrap().to_owned(), row))
        .collect();
    let bounds: BTreeMap<String, [String; 2]> = certificate["bounds"]
        .as_array()
        .unwrap()
        .iter()
        .map(words)
        .map(|one| (one[0].clone(), [one[1].clone(), one[2].clone()]))
        .collect();
    let proofs = certificate["proofs"].as_array().unwrap();
    for proof in proofs {
        let mut rest = entries(&proof["entries"]);
        let mut total = Fraction(0, 1);
        for (row, y) in entries(&proof["multipliers"]) {
            let row = system[&row];
            let side = if y.0 > 0 { &row["upper"] } else { &row["lower"] };
            total = total.plus(y.times(Fraction::read(side.as_str().unwrap())));
            for (column, a) in entries(&row["entries"]) {
                let d = rest.entry(column).or_insert(Fraction(0, 1));
                *d = d.minus(y.times(a));
            }
        }
        for (column, d) in rest.into_iter().filter(|(_, d)| d.0 != 0) {
            let side = usize::from(d.0 > 0);
            total = total.plus(d.times(Fraction::read(&bounds[&column][side])));
        }
        let over = total.minus(Fraction::read(proof["side"].as_str().unwrap()));
        assert!(over.0 <= 0, "{}: over its side by {over:?}", proof["row"]);
    }
    proofs.len()
}

/// Whether a row that a proof rests on is one of the model: written, or a subtour row (the drives
/// within a set of stops, at most one less than there are stops) by its definition.
fn is_row_of(model: &Model, row: &Value) -> bool {
    let (name, found) = (row["row"].as_str().unwrap(), entries(&row["entries"]));
    let written = (0..model.row_count()).map(RowId::from_index);
    if let Some(id) = written.into_iter().find(|&id| model.row_name(id) == name) {
        let own = model.row(id);
        let side = |side: Option<model::Number>| side.map_or_else(String::new, |n| n.to_string());
        let own_entries: BTreeMap<String, Fraction> = own
            .entries
            .iter()
            .map(|(column, a)| (model.column_name(*column), Fraction::read(&a.to_string())))
            .collect();
        return found == own_entries
            && row["lower"] == side(own.lower).as_str()
            && row["upper"] == side(own.upper).as_str();
    }
    let Some(set) = name.strip_prefix("subtour{").and_then(|rest| rest.strip_suffix('}')) else {
        return false;
    };
    let set: BTreeSet<&str> = set.split(", ").collect();
    let within = set.iter().flat_map(|i| set.iter().map(move |j| (*i, *j)));
    let drives = within.filter(|(i, j)| i != j);
    let expected: BTreeMap<String, Fraction> =
        drives.map(|(i, j)| (format!("x[{i} → {j}]"), Fraction(1, 1))).collect();
    found == expected && row["upper"] == (set.len() - 1).to_string().as_str()
}

fn subject(letter: &str, id: &str, data: &Instance) -> Subject {
    let entry = find(id).unwrap();
    let states = BTreeMap::new();
    let model = model_of(entry.text, data, &BTreeMap::new(), &states).unwrap();
    let source = Source {
        text: Rc::from(entry.text),
        instance: Rc::new(data.clone()),
        bind: BTreeMap::new(),
        states,
    };
    Subject {
        letter: letter.to_owned(),
        title: model.title().to_owned(),
        model: Rc::new(model),
        relaxation: entry.relaxation,
        source: Some(source),
        entry: Some(entry),
    }
}

#[test]
fn what_is_certified_holds_by_the_multipliers_that_are_handed_out() {
    let mut rows = 0;
    // The stronger first. Splitting a link; flows of many commodities over every subtour row (their
    // projection is that polytope: Wong 1980); subtours over the assignment alone.
    for (stronger, weaker, family, size) in [
        ("ufl/split", "ufl/joined", "ufl", 4),
        ("atsp/multi-commodity", "atsp/subtours", "atsp", 5),
        ("atsp/subtours", "atsp/assignment", "atsp", 6),
    ] {
        for seed in [1, 2] {
            let text = generate(family, size, Class::Uniform, seed).unwrap();
            let data = read(&text, None).instance.unwrap();
            let subjects = vec![subject("A", stronger, &data), subject("B", weaker, &data)];
            let model = Rc::clone(&subjects[0].model);
            let mut running =
                Running::new(|desk| study::order::order(desk, subjects, Plan::default()));
            while !running.advance(100_000) {}
            let order = running.take().unwrap().remove(0);
            let certificate = &order.certificates[0];
            assert_eq!(certificate.holds, Some(true), "{stronger} {weaker}: {}", certificate.why);
            let count = certificate.rows;
            let text = report::certificate::json(&[Report::Order(Box::new(order))]).unwrap();
            let all: Value = serde_json::from_str(&text).unwrap();
            let found = &all[0];
            assert_eq!(found["relaxation_of"], "A");
            for row in found["system"].as_array().unwrap() {
                assert!(is_row_of(&model, row), "{stronger}: {row}");
            }
            assert_eq!(checked(found), count as usize, "{stronger} {weaker}");
            rows += count;
        }
    }
    assert!(rows > 50, "{rows}");
}

/// The rows of a rival as they must be proved: with the affine map put in for its own variables, each side
/// as `Σ a x ≤ side`, by the columns of the other.
fn put_in(model: &Model, map: &Value) -> Vec<(BTreeMap<String, Fraction>, Fraction)> {
    let map: BTreeMap<String, &Value> = map
        .as_array()
        .unwrap()
        .iter()
        .map(|one| (one["column"].as_str().unwrap().to_owned(), one))
        .collect();
    let mut out = Vec::new();
    let mut put = |own: Vec<(String, Fraction)>, side: Option<Fraction>, sign: i128| {
        let Some(side) = side else { return };
        let sign = Fraction(sign, 1);
        let (mut entries, mut rest) = (BTreeMap::new(), side.times(sign));
        for (column, a) in own {
            let a = a.times(sign);
            let Some(one) = map.get(&column) else {
                let at = entries.entry(column).or_insert(Fraction(0, 1));
                *at = at.plus(a);
                continue;
            };
            rest = rest.minus(a.times(Fraction::read(one["constant"].as_str().unwrap())));
            for (through, b) in self::entries(&one["entries"]) {
                let at = entries.entry(through).or_insert(Fraction(0, 1));
                *at = at.plus(a.times(b));
            }
        }
        entries.retain(|_, a| a.0 != 0);
        out.push((entries, rest));
    };
    let read = |number: &model::Number| Fraction::read(&number.to_string());
    for id in (0..model.row_count()).map(RowId::from_index) {
        let row = model.row(id);
        let own: Vec<(String, Fraction)> =
            row.entries.iter().map(|(c, a)| (model.column_name(*c), read(a))).collect();
        put(own.clone(), row.upper.as_ref().map(read), 1);
        put(own, row.lower.as_ref().map(read), -1);
    }
    for (place, column) in model.columns().iter().enumerate() {
        let own = vec![(model.column_name(ColumnId::from_index(place)), Fraction(1, 1))];
        let side = |id: Option<model::NumberId>| id.map(|id| read(model.numbers().exact(id)));
        put(own.clone(), side(column.upper), 1);
        put(own, side(column.lower), -1);
    }
    out
}

/// Rivals that have variables of their own: labels from a flow of one commodity (Gouveia & Pires 1999,
/// European Journal of Operational Research 112), and that flow from one of many commodities, added up.
#[test]
fn an_affine_map_carries_one_relaxation_into_another_with_variables_of_its_own() {
    for (stronger, weaker, size) in [
        ("atsp/one-commodity", "atsp/labels", 5),
        ("atsp/multi-commodity", "atsp/one-commodity", 4),
    ] {
        let text = generate("atsp", size, Class::Uniform, 1).unwrap();
        let data = read(&text, None).instance.unwrap();
        let subjects = vec![subject("A", stronger, &data), subject("B", weaker, &data)];
        let [inner, outer] = [0, 1].map(|place| Rc::clone(&subjects[place].model));
        let mut running = Running::new(|desk| study::order::order(desk, subjects, Plan::default()));
        while !running.advance(100_000) {}
        let order = running.take().unwrap().remove(0);
        let certificate = &order.certificates[0];
        assert_eq!(certificate.holds, Some(true), "{stronger} {weaker}: {certificate:?}");
        assert!(!certificate.map.is_empty(), "{stronger} {weaker}");
        let text = report::certificate::json(&[Report::Order(Box::new(order))]).unwrap();
        let all: Value = serde_json::from_str(&text).unwrap();
        let found = &all[0];
        for row in found["system"].as_array().unwrap() {
            assert!(is_row_of(&inner, row), "{stronger}: {row}");
        }
        checked(found);
        // Every row and bound of the weaker one is among what is proved.
        let proofs = found["proofs"].as_array().unwrap();
        let proved: Vec<(BTreeMap<String, Fraction>, Fraction)> = proofs
            .iter()
            .map(|one| (entries(&one["entries"]), Fraction::read(one["side"].as_str().unwrap())))
            .collect();
        for needed in put_in(&outer, &found["map"]) {
            assert!(proved.contains(&needed), "{stronger} {weaker}: {needed:?}");
        }
    }
}

#[test]
#[should_panic(expected = "over its side")]
fn a_multiplier_that_is_changed_is_noticed() {
    let text = generate("ufl", 4, Class::Uniform, 1).unwrap();
    let data = read(&text, None).instance.unwrap();
    let subjects = vec![subject("A", "ufl/split", &data), subject("B", "ufl/joined", &data)];
    let mut running = Running::new(|desk| study::order::order(desk, subjects, Plan::default()));
    while !running.advance(100_000) {}
    let order = running.take().unwrap().remove(0);
    let text = report::certificate::json(&[Report::Order(Box::new(order))]).unwrap();
    let mut all: Value = serde_json::from_str(&text).unwrap();
    for proof in all[0]["proofs"].as_array_mut().unwrap() {
        proof["side"] = Value::from("-1000000");
    }
    checked(&all[0]);
}
