//! Rows and domain lines.

use super::Diagnostic;
use super::syntax::short;
use crate::place::Span;

/// `weak` is the row with ≤ or ≥ in its place, where there is one.
pub(crate) fn strict(span: Span, weak: Option<String>) -> Diagnostic {
    let found =
        Diagnostic::error("row.strict", span, "a linear model has no strict inequality and no ≠");
    match weak {
        Some(weak) => found.mend_by("use ≤ or ≥", span, weak),
        None => found.mend("use ≤ or ≥"),
    }
}

pub(crate) fn relation(span: Span) -> Diagnostic {
    Diagnostic::error("row.relation", span, "expected ≤, = or ≥ between linear expressions")
}

pub(crate) fn domain(span: Span) -> Diagnostic {
    Diagnostic::error("row.domain", span, "expected a domain such as {0,1}, ℤ_+, [a,b] or {0..k}")
}

pub(crate) fn not_consecutive(span: Span) -> Diagnostic {
    Diagnostic::error(
        "row.domain-set",
        span,
        "a variable's set of values must be consecutive whole numbers",
    )
}

/// `alone` says that the line begins with this name and bounds no other.
pub(crate) fn no_lower(name: &str, span: Span, alone: bool) -> Diagnostic {
    let message = format!("{} has an upper bound only, so its lower bound is −∞", short(name));
    let found = Diagnostic::warning("row.no-lower", span, message);
    let label = "write 0 ≤ where it cannot be negative";
    if alone {
        found.mend_by(label, Span { start: span.start, end: span.start }, "0 ≤ ")
    } else {
        found.mend(label)
    }
}

pub(crate) fn outside(what: &str, span: Span) -> Diagnostic {
    Diagnostic::error(
        "row.outside",
        span,
        format!("{} is outside its index set", short_tuple(what)),
    )
    .mend("exclude it by a condition, or extend the domain line")
}

pub(crate) fn empty_family(name: &str, span: Span) -> Diagnostic {
    Diagnostic::warning(
        "row.empty-family",
        span,
        format!("({}) has no row on this instance", short(name)),
    )
}

pub(crate) fn never_holds(row: &str, span: Span) -> Diagnostic {
    Diagnostic::warning("row.never-holds", span, format!("{} can never hold", short_tuple(row)))
}

pub(crate) fn never_binds(name: &str, span: Span) -> Diagnostic {
    let message = format!("no row of ({}) can ever bind", short(name));
    Diagnostic::warning("row.never-binds", span, message)
}

pub(crate) fn empty_domain(name: &str, span: Span) -> Diagnostic {
    let message = format!("the lower bound of {} lies above its upper bound", short_tuple(name));
    Diagnostic::warning("row.empty-domain", span, message)
}

pub(crate) fn unbounded(column: &str, span: Span) -> Diagnostic {
    let message = format!(
        "{} stands in no row, and the objective improves without end along it",
        short_tuple(column)
    );
    Diagnostic::warning("row.unbounded", span, message).mend("give it a bound")
}

pub(crate) fn objective_infinite(span: Span) -> Diagnostic {
    Diagnostic::error("row.infinite", span, "∞ can stand only as a bound")
}

/// Up to 60 characters: a name with its index tuple.
fn short_tuple(text: &str) -> String {
    let mut out: String = text.chars().take(60).collect();
    if out.len() < text.len() {
        out.push('…');
    }
    out
}
