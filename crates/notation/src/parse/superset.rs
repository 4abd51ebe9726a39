//! `V ⊇ N` among the data: what holds for `N` is said where `N` stands, and `V` is a set.

use crate::syntax::{Expression, Kind, Line, Relation};

fn bare(expression: &Expression) -> Option<&str> {
    match &expression.kind {
        Kind::Name(name) if name.indices.is_empty() && name.superscript.is_none() => {
            Some(&name.text)
        }
        _ => None,
    }
}

/// Whether `line`, read from `V ⊇ N` as `N ⊆ V`, has been put where `N` is declared already; `V`
/// is declared in its stead where it is not.
pub(super) fn put(data: &mut Vec<Line>, line: &Line) -> bool {
    let ([part], [(relation, whole)]) = (&line.left[..], &line.links[..]) else { return false };
    let subset = matches!(relation, Relation::Subset | Relation::SubsetOrEqual);
    let (Some(part), Some(name)) = (bare(part), bare(whole)) else { return false };
    // as it was written, the larger set stands first
    if !subset || whole.span.start > line.left[0].span.start {
        return false;
    }
    let known = |one: &Line, name: &str| matches!(&one.left[..], [e] if bare(e) == Some(name));
    let own = data.iter_mut().find(|one| one.links.is_empty() && known(one, part));
    let Some(own) = own else { return false };
    own.links.clone_from(&line.links);
    if !data.iter().any(|one| known(one, name)) {
        data.push(Line { left: vec![whole.clone()], links: Vec::new(), ..line.clone() });
    }
    true
}
