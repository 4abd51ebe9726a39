//! Do equations of the model make a set and its complement equally violated?
//!
//! With the pairs inside a set taken by halves (see [`crate::quadratic`]) that is so when the
//! node terms cancel, and when as much leaves each node as enters it. Both are linear
//! in x, so it is enough that the sums of x at a node are fixed by rows that are in.

use std::collections::BTreeMap;

use model::{ColumnId, Model, Number, RowId, Scope, SubsetFamily};

/// A linear function of x, by column.
type Sum = BTreeMap<ColumnId, Number>;

/// The sums of the terms at one node.
#[derive(Debug, Default)]
struct Node {
    inside_first: Sum,
    inside_second: Sum,
    leaving: Sum,
    entering: Sum,
}

/// Whether the rows that are in make every set and its complement equally violated.
/// `O(non-zeros · log)` exact operations.
pub(crate) fn balances(model: &Model, family: &SubsetFamily) -> bool {
    if family.rounded.is_some() {
        return false;
    }
    let mut nodes: BTreeMap<_, Node> =
        family.ground.iter().map(|&label| (label, Node::default())).collect();
    for term in &family.terms {
        let a = &term.coefficient;
        let (i, j) = match term.scope {
            Scope::Always => continue,
            Scope::Inside(i, j) | Scope::Leaving(i, j) | Scope::Crossing(i, j) if i != j => (i, j),
            Scope::Leaving(..) | Scope::Crossing(..) => continue,
            Scope::Element(_) | Scope::Outside(_) | Scope::Inside(..) => return false,
        };
        if !nodes.contains_key(&i) || !nodes.contains_key(&j) {
            return false;
        }
        let mut add = |at, pick: fn(&mut Node) -> &mut Sum| {
            if let Some(node) = nodes.get_mut(&at) {
                *pick(node).entry(term.column).or_insert(Number::ZERO) += a;
            }
        };
        match term.scope {
            Scope::Inside(..) => {
                add(i, |node| &mut node.inside_first);
                add(j, |node| &mut node.inside_second);
            }
            Scope::Leaving(..) => {
                add(i, |node| &mut node.leaving);
                add(j, |node| &mut node.entering);
            }
            _ => {}
        }
    }
    let equations = Equations::new(model);
    let weights = family.ground.iter().zip(&family.weights);
    let mut fixed = weights.map(|(label, weight)| {
        let node = nodes.get(label)?;
        let inside = equations.inside(node)?;
        let cancels = weight + inside / Number::from(2) == Number::ZERO;
        Some(cancels && equations.value(&node.leaving)? == equations.value(&node.entering)?)
    });
    fixed.all(|holds| holds == Some(true))
}

/// The equations among the rows that are in, divided by their first coefficients.
struct Equations {
    right: BTreeMap<Vec<(ColumnId, Number)>, Number>,
}

impl Equations {
    fn new(model: &Model) -> Self {
        let mut right = BTreeMap::new();
        for row in (0..model.row_count()).map(RowId::from_index) {
            let (lower, upper) = model.row_sides(row);
            if lower.is_none() || lower != upper || !model.row_is_in(row) {
                continue;
            }
            let row = model.row(row);
            let (Some((_, first)), Some(side)) = (row.entries.first(), &row.lower) else {
                continue;
            };
            let key = row.entries.iter().map(|(column, a)| (*column, quotient(a, first))).collect();
            right.insert(key, side / first);
        }
        Self { right }
    }

    /// The value that the equations give a sum.
    fn value(&self, sum: &Sum) -> Option<Number> {
        let entries: Vec<(ColumnId, &Number)> =
            sum.iter().map(|(column, a)| (*column, a)).filter(|(_, a)| !a.is_zero()).collect();
        let Some((_, first)) = entries.first().copied() else { return Some(Number::ZERO) };
        let key: Vec<_> = entries.iter().map(|(column, a)| (*column, quotient(a, first))).collect();
        self.right.get(&key).map(|right| right * first)
    }

    /// The value of all terms inside at a node: by one equation (undirected degrees) or by two.
    fn inside(&self, node: &Node) -> Option<Number> {
        let mut all = node.inside_first.clone();
        for (column, a) in &node.inside_second {
            *all.entry(*column).or_insert(Number::ZERO) += a;
        }
        let split = || Some(self.value(&node.inside_first)? + self.value(&node.inside_second)?);
        self.value(&all).or_else(split)
    }
}

/// `a / b`, which is mostly a division by 1.
fn quotient(a: &Number, b: &Number) -> Number {
    if b.is_one() { a.clone() } else { a / b }
}
