//! Families over subsets.

use super::Diagnostic;
use super::syntax::short;
use crate::place::Span;

pub(crate) fn two(span: Span) -> Diagnostic {
    Diagnostic::error("subset.two", span, "a family is quantified over one subset at most")
}

pub(crate) fn misplaced(span: Span) -> Diagnostic {
    Diagnostic::error("subset.misplaced", span, "only a constraint can be quantified over subsets")
}

pub(crate) fn nonlinear(span: Span) -> Diagnostic {
    Diagnostic::error(
        "subset.not-additive",
        span,
        "the row does not split into terms that one or two elements decide",
    )
}

pub(crate) fn pair_constant(span: Span) -> Diagnostic {
    let message = "a constant that depends on two elements of the subset cannot be separated";
    Diagnostic::error("subset.pair-constant", span, message)
}

pub(crate) fn condition(span: Span) -> Diagnostic {
    Diagnostic::error("subset.condition", span, "no method for this condition on a subset")
        .mend("use |S|, i ∈ S, i ∉ S, S ∩ T ≠ ∅, |S| odd, or a sum of weights over S")
}

pub(crate) fn empty_member(name: &str, span: Span) -> Diagnostic {
    let message =
        format!("the empty set is one of the subsets {}, and its row is false", short(name));
    Diagnostic::error("subset.empty-member", span, message).mend_by(
        format!("add the condition |{}| ≥ 1", short(name)),
        Span { start: span.end, end: span.end },
        format!(", |{name}| ≥ 1"),
    )
}

pub(crate) fn ranged(span: Span) -> Diagnostic {
    Diagnostic::error("subset.ranged", span, "a row over subsets has one side")
        .mend("write the two sides as two families")
}

pub(crate) fn too_many_to_write(name: &str, span: Span) -> Diagnostic {
    let message = format!("({}) has more than 4096 members, so it stays on demand", short(name));
    Diagnostic::warning("subset.on-demand", span, message)
}

pub(crate) fn ground(span: Span) -> Diagnostic {
    Diagnostic::error(
        "subset.ground",
        span,
        "a subset can be taken of a set of single elements only",
    )
}
