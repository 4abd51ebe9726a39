//! `c^{\top} x`, `c^T x`: the inner product of a datum and a variable, written out as the sum
//! over the indices that the line of the datum gives it.

use std::collections::BTreeMap;

use crate::syntax::{
    Big, Clause, Expression, Formulation, Kind, Multiplicative, Name, children_mut, each_outermost,
};

/// The data that have indices, with their quantifier; `None` for names that are declared bare.
type Data = BTreeMap<String, Option<(Vec<Expression>, Vec<Clause>)>>;

/// Writes out the inner products of objective and statements. `O(tree)`.
pub(super) fn summed(tree: &mut Formulation) {
    let mut data = Data::new();
    for line in tree.data.iter().chain(&tree.definitions) {
        for expression in &line.left {
            let Kind::Name(name) = &expression.kind else { continue };
            let indexed = !name.indices.is_empty() && name.superscript.is_none();
            let over = indexed.then(|| (name.indices.clone(), line.clauses.clone()));
            data.insert(name.text.clone(), over);
        }
    }
    each_outermost(tree, &mut |expression| sum_within(expression, &data));
}

fn sum_within(expression: &mut Expression, data: &Data) {
    if let Some(sum) = inner_product(expression, data) {
        *expression = sum;
        return;
    }
    children_mut(&mut expression.kind).into_iter().for_each(|child| sum_within(child, data));
}

/// The sum that a product `c^{\top} x` means.
fn inner_product(expression: &Expression, data: &Data) -> Option<Expression> {
    let Kind::Multiplicative(first, rest) = &expression.kind else { return None };
    let [(Multiplicative::Times, second)] = &rest[..] else { return None };
    let (Kind::Name(turned), Kind::Name(vector)) = (&first.kind, &second.kind) else { return None };
    let bare = turned.indices.is_empty() && vector.indices.is_empty();
    if !bare || vector.superscript.is_some() || !is_turned(turned, data) {
        return None;
    }
    let (indices, clauses) = data.get(&turned.text)?.as_ref()?;
    let element = |name: &Name, span| Expression {
        kind: Kind::Name(Name {
            text: name.text.clone(),
            indices: indices.clone(),
            superscript: None,
        }),
        span,
    };
    let factor = (Multiplicative::Times, element(vector, second.span));
    let product = Kind::Multiplicative(Box::new(element(turned, first.span)), vec![factor]);
    let body = Expression { kind: product, span: expression.span };
    let sum = |body: Expression, clause: &Clause| Expression {
        kind: Kind::Big(Big::Sum, clause.clone(), Box::new(body)),
        span: expression.span,
    };
    (!clauses.is_empty()).then(|| clauses.iter().rev().fold(body, sum))
}

/// Whether a name has a sign of transposition above it; `T` is one where nothing declares it.
fn is_turned(name: &Name, data: &Data) -> bool {
    let Some(Kind::Name(raised)) = name.superscript.as_deref().map(|raised| &raised.kind) else {
        return false;
    };
    let letter = matches!(raised.text.as_str(), "T" | "t" | "\\mathsf T" | "\\mathbf T");
    raised.indices.is_empty() && (raised.text == "⊤" || letter && !data.contains_key(&raised.text))
}
