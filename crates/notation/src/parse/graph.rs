//! `G = (V, A)` among the data: a set of nodes and a set of pairs of them.

use crate::syntax::{Expression, Kind, Line, Multiplicative, Name, Relation};

fn bare(expression: &Expression) -> Option<&Name> {
    match &expression.kind {
        Kind::Name(name) if name.indices.is_empty() && name.superscript.is_none() => Some(name),
        _ => None,
    }
}

/// Whether `line` is `G = (V, A)`; then `V` and `A ⊆ V × V` are put where they are not declared.
pub(super) fn put(data: &mut Vec<Line>, line: &Line, declared: impl Fn(&str) -> bool) -> bool {
    let ([graph], [(Relation::Equal, pair)], []) =
        (&line.left[..], &line.links[..], &line.clauses[..])
    else {
        return false;
    };
    let Kind::Tuple(items) = &pair.kind else { return false };
    let [nodes, arcs] = &items[..] else { return false };
    let (Some(_), Some(node_name), Some(arc_name)) = (bare(graph), bare(nodes), bare(arcs)) else {
        return false;
    };
    if !declared(&node_name.text) {
        data.push(Line { left: vec![nodes.clone()], links: Vec::new(), ..line.clone() });
    }
    if !declared(&arc_name.text) {
        let factors = vec![(Multiplicative::Cross, nodes.clone())];
        let square = Kind::Multiplicative(Box::new(nodes.clone()), factors);
        let square = Expression { kind: square, span: nodes.span };
        let links = vec![(Relation::SubsetOrEqual, square)];
        data.push(Line { left: vec![arcs.clone()], links, remark: None, ..line.clone() });
    }
    true
}
