//! Rows that a binary switches by a constant over 10⁴, and the smallest constant that the bounds
//! of the other columns prove to be enough (coefficient reduction: Savelsbergh 1994).

use model::{ColumnId, Number, RowId};

use super::Subject;
use super::bounds::Bounds;
use super::facts::Facts;
use crate::diagnostic::{Diagnostic, lints as message};
use crate::plan::Node;
use crate::print;
use crate::rewrite;
use crate::syntax::{Expression, Kind, Line};

/// A constant over this is told.
const LARGE: i32 = 10_000;

/// Index tuples of a family that are looked at.
const ROWS: usize = 5_000;

pub(super) fn lint(subject: &Subject<'_>) -> Vec<Diagnostic> {
    (0..subject.model().families().len()).filter_map(|family| large(subject, family)).collect()
}

/// A row `Σ a x + m y ≤ side` that the binary `y` switches.
struct Switched {
    others: Vec<(ColumnId, Number)>,
    m: Number,
    side: Number,
}

fn large(subject: &Subject<'_>, family: usize) -> Option<Diagnostic> {
    let facts = &subject.facts;
    let found = &subject.model().families()[family];
    if found.rows.is_empty() || found.rows.len() > ROWS || found.state == model::FamilyState::Out {
        return None;
    }
    let rows: Vec<Switched> =
        found.rows.clone().map(|row| switched(facts, RowId(row))).collect::<Option<_>>()?;
    let constant = absolute(&rows.first()?.m);
    if rows.iter().any(|row| absolute(&row.m) != constant) {
        return None;
    }
    let bounds = Bounds::implied(facts, Some(family));
    let needed: Option<Vec<Number>> = rows.iter().map(|row| needed(row, &bounds)).collect();
    let needed = needed.and_then(|all| all.into_iter().max());
    let line = subject.line(family);
    let written = line.and_then(|line| Written::of(subject, line, &constant));
    match &needed {
        Some(needed) if *needed >= constant || *needed <= Number::ZERO => return None,
        // a datum may be a capacity
        None if !written.as_ref().is_some_and(|written| written.own) => return None,
        _ => {}
    }
    let shown = needed.as_ref().map(print::number);
    let told = print::number(&constant);
    let mut found =
        message::big_m(&found.name, &told, shown.as_deref(), subject.family_span(family));
    if let (Some(needed), Some(shown)) = (&needed, &shown) {
        let label = format!("take {shown}");
        found = match written.and_then(|written| written.replaced(needed)) {
            Some((line, text)) => found.mend_by(label, line.span, text),
            None => found.mend(label),
        };
    }
    Some(found)
}

fn switched(facts: &Facts<'_>, row: RowId) -> Option<Switched> {
    let (entries, side) = facts.at_most(row)?;
    let limit = Number::from(LARGE);
    let is_m = |(column, a): &&(ColumnId, Number)| facts.is_binary(*column) && absolute(a) > limit;
    let mut large = entries.iter().filter(is_m);
    let (Some((switch, m)), None) = (large.next(), large.next()) else { return None };
    let others: Vec<_> = entries.iter().filter(|(column, _)| column != switch).cloned().collect();
    (!others.is_empty()).then(|| Switched { others, m: m.clone(), side })
}

/// The smallest |m| for which the row says the same of plans in which `y` is whole.
fn needed(row: &Switched, bounds: &Bounds) -> Option<Number> {
    let most = bounds.greatest(row.others.iter())?;
    // where the row is switched on it asks for this
    let asked = if row.m > Number::ZERO { &row.side - &row.m } else { row.side.clone() };
    Some(most - asked)
}

/// The one place of a line that holds the constant.
struct Written<'l> {
    line: &'l Line,
    place: std::ops::Range<usize>,
    /// Whether the text gives its value, not the instance.
    own: bool,
}

impl<'l> Written<'l> {
    fn of(subject: &Subject<'_>, line: &'l Line, constant: &Number) -> Option<Self> {
        let mut places = Vec::new();
        for operand in line.left.iter().chain(line.links.iter().map(|(_, operand)| operand)) {
            collect(subject, operand, constant, &mut places);
        }
        match places[..] {
            [(ref place, own)] => Some(Self { line, place: place.clone(), own }),
            _ => None,
        }
    }

    /// The line with another constant.
    fn replaced(&self, constant: &Number) -> Option<(&'l Line, String)> {
        let mut new = self.line.clone();
        let mut change =
            |e: &Expression| (e.span.range() == self.place).then(|| rewrite::number(constant));
        for operand in new.left.iter_mut().chain(new.links.iter_mut().map(|(_, operand)| operand)) {
            *operand = rewrite::map(operand, &mut change);
        }
        Some((self.line, rewrite::line(&new)))
    }
}

/// Where the constant stands: as a number, or as a name that the text or the instance gives it.
fn collect(
    subject: &Subject<'_>,
    expression: &Expression,
    constant: &Number,
    places: &mut Vec<(std::ops::Range<usize>, bool)>,
) {
    match &expression.kind {
        Kind::Number(value) if value == constant => places.push((expression.span.range(), true)),
        Kind::Name(name) if name.indices.is_empty() && name.superscript.is_none() => {
            let symbol = subject.plan.symbols.iter().find(|symbol| symbol.name == name.text);
            if let Some(symbol) = symbol.filter(|symbol| symbol.indices.is_empty()) {
                let own = symbol.value.as_ref().is_some_and(|value| is(value, constant));
                places.push((expression.span.range(), own && !symbol.datum));
            }
        }
        _ => {
            for child in crate::check::children(expression) {
                collect(subject, child, constant, places);
            }
        }
    }
}

/// Whether a definition is just this number.
fn is(node: &Node, constant: &Number) -> bool {
    match node {
        Node::Number(value) => value == constant,
        Node::Once(_, inner) => is(inner, constant),
        _ => false,
    }
}

fn absolute(number: &Number) -> Number {
    if *number < Number::ZERO { -number.clone() } else { number.clone() }
}
