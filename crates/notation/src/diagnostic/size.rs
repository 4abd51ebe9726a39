//! Limits of expansion.

use super::Diagnostic;
use super::syntax::short;
use crate::place::Span;

pub(crate) fn nonzeros(family: &str, limit: usize, span: Span) -> Diagnostic {
    let message = format!("with ({}) the model has more than {limit} non-zeros", short(family));
    Diagnostic::error("size.nonzeros", span, message)
        .mend("set the family to out, or quantify it over fewer indices")
        .mend("take a smaller instance")
}

/// More index tuples than may be written: `size` is their number in closed form, with its noun.
pub(crate) fn tuples(name: &str, size: &str, limit: &str, span: Span) -> Diagnostic {
    let message = format!("({}) would have {size}; {limit} can be written", short(name));
    Diagnostic::error("size.rows", span, message)
        .mend("quantify it over fewer indices or a smaller set (such as the drives that exist)")
        .mend("quantify it over subsets S ⊂ V, which stay on demand")
        .mend("take a smaller instance")
}

pub(crate) fn steps(family: &str, limit: u64, span: Span) -> Diagnostic {
    let message = format!("({}) walks through more than {limit} index tuples", short(family));
    Diagnostic::error("size.steps", span, message).mend(
        "let the sets do what its conditions do, such as (i,j) ∈ A, or quantify it over fewer \
         indices",
    )
}

pub(crate) fn work(limit: u64, span: Span) -> Diagnostic {
    let message = format!("the value of one expression takes more than {limit} steps");
    Diagnostic::error("size.work", span, message)
        .mend("sum over fewer indices, or over a set that holds only what counts")
}

pub(crate) fn number(bits: usize, span: Span) -> Diagnostic {
    let message = format!("the number needs more than {bits} binary digits");
    Diagnostic::error("size.number", span, message).mend("take smaller exponents or numbers")
}

pub(crate) fn indices(limit: usize, span: Span) -> Diagnostic {
    let message = format!("more than {limit} indices are bound on one line");
    Diagnostic::error("size.indices", span, message).mend("split the line, or index it by tuples")
}

pub(crate) fn set(members: u128, limit: usize, span: Span) -> Diagnostic {
    Diagnostic::error("size.set", span, format!("the set has {members} members, more than {limit}"))
        .mend("build it from fewer sets, or from tuples that the instance lists")
}

pub(crate) fn model(message: String, span: Span) -> Diagnostic {
    Diagnostic::error("size.model", span, message).mend("take a smaller instance")
}
