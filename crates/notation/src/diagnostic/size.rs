//! Limits of expansion.

use super::Diagnostic;
use super::syntax::short;
use crate::place::Span;

pub(crate) fn nonzeros(family: &str, limit: usize, span: Span) -> Diagnostic {
    let message = format!("with ({}) the model has more than {limit} non-zeros", short(family));
    Diagnostic::error("size.nonzeros", span, message)
        .mend("leave the family out, or take a smaller instance")
}

pub(crate) fn rows(family: &str, rows: u128, limit: usize, span: Span) -> Diagnostic {
    let message =
        format!("({}) would have {rows} rows, more than {limit} non-zeros allow", short(family));
    Diagnostic::error("size.rows", span, message)
        .mend("leave the family out, or take a smaller instance")
}

pub(crate) fn steps(family: &str, limit: u64, span: Span) -> Diagnostic {
    let message = format!("({}) walks through more than {limit} index tuples", short(family));
    Diagnostic::error("size.steps", span, message)
}

pub(crate) fn work(limit: u64, span: Span) -> Diagnostic {
    let message = format!("the value of one expression takes more than {limit} steps");
    Diagnostic::error("size.work", span, message)
}

pub(crate) fn number(bits: usize, span: Span) -> Diagnostic {
    let message = format!("the number needs more than {bits} binary digits");
    Diagnostic::error("size.number", span, message)
}

pub(crate) fn indices(limit: usize, span: Span) -> Diagnostic {
    let message = format!("more than {limit} indices are bound on one line");
    Diagnostic::error("size.indices", span, message)
}

pub(crate) fn set(members: u128, limit: usize, span: Span) -> Diagnostic {
    Diagnostic::error("size.set", span, format!("the set has {members} members, more than {limit}"))
}

pub(crate) fn model(message: String, span: Span) -> Diagnostic {
    Diagnostic::error("size.model", span, message)
}
