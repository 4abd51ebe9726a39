//! Products of a binary with a binary, or with an expression between two bounds (McCormick 1976):
//! exact where the binary is whole.

use model::Number;

use super::ranges::Ranges;
use super::site::Site;
use super::{Rows, complement, relation};
use crate::rewrite::{self, add, times};
use crate::syntax::{Expression, Kind, Multiplicative, Relation};

pub(super) fn rows(site: &Site<'_>, ranges: &Ranges<'_>) -> Option<Rows> {
    let factors = factors(site.what)?;
    let holding: Vec<usize> =
        (0..factors.len()).filter(|&k| ranges.words.hold(&factors[k])).collect();
    let [first, second, ..] = holding[..] else { return None };
    let (binary, other) = if ranges.is_binary(&factors[second]) {
        (second, first)
    } else if ranges.is_binary(&factors[first]) {
        (first, second)
    } else {
        return None;
    };
    let rest = |new: Option<Expression>| {
        let kept = factors.iter().enumerate().filter(|(k, _)| *k != binary && *k != other);
        let all: Vec<Expression> = kept.map(|(_, f)| f.clone()).chain(new).collect();
        together(all)
    };
    let (y, e) = (&factors[binary], &factors[other]);
    if crate::print::expression(y) == crate::print::expression(e) {
        // y² = y
        return Some(Rows { new: rest(Some(y.clone())), rows: vec![], domains: vec![], label: "" });
    }
    let w = site.indexed(&ranges.words.quantity()?);
    let mut made = if ranges.is_binary(e) { both(&w, y, e) } else { bounded(&w, y, e, ranges)? };
    made.new = rest(Some(w));
    for (_, clauses) in made.rows.iter_mut().chain(&mut made.domains) {
        clauses.clone_from(&site.clauses);
    }
    Some(made)
}

/// The factors of a product; a square is two.
fn factors(what: &Expression) -> Option<Vec<Expression>> {
    match &what.kind {
        Kind::Multiplicative(first, rest) => {
            let rest = rest.iter().map(|(_, factor)| factor.clone());
            Some(std::iter::once(Expression::clone(first)).chain(rest).collect())
        }
        Kind::Power(base, exponent) if is_two(exponent) => {
            Some(vec![Expression::clone(base), Expression::clone(base)])
        }
        Kind::Name(name) if name.superscript.as_deref().is_some_and(is_two) => {
            let bare = rewrite::name(&name.text, name.indices.clone());
            Some(vec![bare.clone(), bare])
        }
        _ => None,
    }
}

fn is_two(exponent: &Expression) -> bool {
    rewrite::value(exponent) == Some(Number::from(2))
}

fn together(mut factors: Vec<Expression>) -> Expression {
    let first = factors.remove(0);
    if factors.is_empty() {
        return first;
    }
    let span = first.span;
    let rest = factors.into_iter().map(|factor| (Multiplicative::Times, factor)).collect();
    Expression { kind: Kind::Multiplicative(Box::new(first), rest), span }
}

/// `w ≤ y`, `w ≤ e`, `w ≥ y + e − 1`, `0 ≤ w ≤ 1`.
fn both(w: &Expression, y: &Expression, e: &Expression) -> Rows {
    let sum = add(add(y.clone(), false, e.clone()), true, rewrite::number(&Number::ONE));
    let rows = [
        relation(w, Relation::AtMost, y),
        relation(w, Relation::AtMost, e),
        relation(w, Relation::AtLeast, &sum),
    ];
    let domain = format!("0 ≤ {} ≤ 1", crate::print::expression(w));
    Rows {
        new: w.clone(),
        rows: rows.into_iter().map(|row| (row, Vec::new())).collect(),
        domains: vec![(domain, Vec::new())],
        label: "product",
    }
}

/// With `L ≤ e ≤ U`: `L y ≤ w ≤ U y` and `e − U (1 − y) ≤ w ≤ e − L (1 − y)`.
fn bounded(w: &Expression, y: &Expression, e: &Expression, ranges: &Ranges<'_>) -> Option<Rows> {
    let (low, high) = ranges.of(e)?;
    let from = |end: &Expression| add(e.clone(), true, times(end.clone(), complement(y)));
    let mut rows = vec![
        relation(w, Relation::AtMost, &times(high.clone(), y.clone())),
        relation(w, Relation::AtLeast, &from(&high)),
        relation(w, Relation::AtMost, &from(&low)),
    ];
    let shown = crate::print::expression(w);
    let domain = if rewrite::value(&low).is_some_and(|low| low.is_zero()) {
        format!("{shown} ≥ 0")
    } else {
        rows.insert(0, relation(w, Relation::AtLeast, &times(low, y.clone())));
        format!("{shown} ∈ ℝ")
    };
    Some(Rows {
        new: w.clone(),
        rows: rows.into_iter().map(|row| (row, Vec::new())).collect(),
        domains: vec![(domain, Vec::new())],
        label: "product",
    })
}
