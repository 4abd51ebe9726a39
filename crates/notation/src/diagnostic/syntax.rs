//! What the parser says.

use super::Diagnostic;
use crate::place::Span;

/// At most 24 characters of a piece of text, for a message.
pub(crate) fn short(text: &str) -> String {
    let text = crate::syntax::plain(text);
    let mut out: String = text.chars().take(24).collect();
    if out.len() < text.len() {
        out.push('…');
    }
    out
}

pub(crate) fn expected(span: Span, wanted: &str, found: &str) -> Diagnostic {
    Diagnostic::error("syntax.expected", span, format!("expected {wanted}, found {found}"))
}

pub(crate) fn too_deep(span: Span, limit: u32) -> Diagnostic {
    Diagnostic::error(
        "syntax.too-deep",
        span,
        format!("brackets, sums and powers nest deeper than {limit}"),
    )
}

pub(crate) fn too_long(bytes: usize) -> Diagnostic {
    let limit = crate::parse::TEXT_LIMIT;
    let message =
        format!("the text has {bytes} bytes, more than the {limit} that a formulation may have");
    Diagnostic::error("syntax.too-long", Span::default(), message)
}

pub(crate) fn number_too_long(span: Span) -> Diagnostic {
    Diagnostic::error("syntax.number-too-long", span, "the number has more than 400 digits")
}

pub(crate) fn outside_parts(span: Span) -> Diagnostic {
    Diagnostic::error("syntax.outside-parts", span, "the line stands before any part")
        .mend("begin with “data”, “minimise” or “subject to”")
}

pub(crate) fn prose(span: Span) -> Diagnostic {
    Diagnostic::info("syntax.sentence", span, "a sentence: nothing of it becomes part of the model")
}

pub(crate) fn no_relation(span: Span) -> Diagnostic {
    Diagnostic::error(
        "syntax.no-relation",
        span,
        "expected a relation such as ≤ or ∈, found the end of the line",
    )
}

pub(crate) fn second_objective(span: Span, first: Span) -> Diagnostic {
    Diagnostic::error("syntax.second-objective", span, "the formulation has a second objective")
        .also(first, "the first stands here")
}

pub(crate) fn no_objective() -> Diagnostic {
    Diagnostic::error("syntax.no-objective", Span::default(), "the formulation has no objective")
        .mend("add a line “minimise” and the objective")
}

pub(crate) fn not_consecutive(span: Span) -> Diagnostic {
    Diagnostic::error("syntax.dots", span, "the dots stand for whole numbers one apart only")
        .mend("write {a..b}")
}

pub(crate) fn lower_limit(span: Span) -> Diagnostic {
    Diagnostic::error(
        "syntax.lower-limit",
        span,
        "a sum with an upper limit needs “index = first” below it",
    )
}

pub(crate) fn upper_limit(span: Span) -> Diagnostic {
    Diagnostic::error(
        "syntax.upper-limit",
        span,
        "the sum says where it begins and not where it ends",
    )
    .mend("put its last value behind it: ∑_{j=1}^{n}")
}

pub(crate) fn joined(span: Span) -> Diagnostic {
    Diagnostic::error(
        "syntax.joined",
        span,
        "the minus can begin a new line or go on with the one before",
    )
    .mend_by("put “;” before it for a new line", Span { start: span.start, end: span.start }, "; ")
    .mend("end the line before with the minus")
}
