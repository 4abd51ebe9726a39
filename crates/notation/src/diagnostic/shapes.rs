//! Shapes: how many indices, from which set, number or set, linear or not.

use super::Diagnostic;
use super::syntax::short;
use crate::place::Span;

pub(crate) fn indices(name: &str, wanted: usize, found: usize, span: Span) -> Diagnostic {
    let plural = if wanted == 1 { "index" } else { "indices" };
    let message = format!("{} takes {wanted} {plural}, found {found}", short(name));
    Diagnostic::error("shape.indices", span, message)
}

pub(crate) fn wrong_set(
    name: &str,
    place: usize,
    wanted: &str,
    found: &str,
    span: Span,
) -> Diagnostic {
    let message = format!(
        "index {place} of {} is from {}, found an index from {}",
        short(name),
        short(wanted),
        short(found)
    );
    Diagnostic::error("shape.wrong-set", span, message).mend(format!(
        "if every member of {0} is one of {1}, declare {0} ⊆ {1}",
        short(found),
        short(wanted)
    ))
}

pub(crate) fn expected(wanted: &str, found: &str, span: Span) -> Diagnostic {
    Diagnostic::error("shape.expected", span, format!("expected {wanted}, found {found}"))
}

pub(crate) fn product(span: Span, first: Span, second: Span) -> Diagnostic {
    Diagnostic::error("shape.product", span, "the product of two variable terms is not linear")
        .also(first, "the first variable term")
        .also(second, "the second variable term")
}

pub(crate) fn implication(span: Span) -> Diagnostic {
    Diagnostic::error(
        "shape.implication",
        span,
        "a row that holds only where a binary has a value is not linear",
    )
}

pub(crate) fn quotient(span: Span, under: Span) -> Diagnostic {
    Diagnostic::error("shape.quotient", span, "a quotient by a variable term is not linear")
        .also(under, "the variable term")
        .mend("multiply the row by the divisor where its sign is known")
}

pub(crate) fn not_constant(what: &str, span: Span) -> Diagnostic {
    Diagnostic::error(
        "shape.not-constant",
        span,
        format!("{what} takes data only, found a variable"),
    )
}

pub(crate) fn tuple_size(wanted: usize, found: usize, span: Span) -> Diagnostic {
    let message = format!("the set holds tuples of {wanted}, found a tuple of {found}");
    let diagnostic = Diagnostic::error("shape.tuple", span, message);
    let places: Vec<&str> = ["i", "j", "k", "l", "m"].into_iter().take(wanted).collect();
    if wanted > 1 && wanted == places.len() {
        return diagnostic.mend(format!("write ({})", places.join(",")));
    }
    diagnostic
}

pub(crate) fn not_comparable(span: Span) -> Diagnostic {
    Diagnostic::error("shape.order", span, "labels with no common set cannot be compared by order")
}

pub(crate) fn not_supported(what: &str, span: Span) -> Diagnostic {
    Diagnostic::error("shape.unsupported", span, format!("{what} cannot be used here"))
}

pub(crate) fn not_a_number(label: &str, span: Span) -> Diagnostic {
    Diagnostic::error(
        "shape.not-a-number",
        span,
        format!("{} is a label, not a number", short(label)),
    )
}

pub(crate) fn whole(span: Span) -> Diagnostic {
    Diagnostic::error("shape.whole", span, "expected a whole number")
}

pub(crate) fn division_by_zero(span: Span) -> Diagnostic {
    Diagnostic::error("shape.zero", span, "division by zero")
}

pub(crate) fn power(span: Span) -> Diagnostic {
    Diagnostic::error("shape.power", span, "the exponent must be a whole number of moderate size")
}

pub(crate) fn no_values(span: Span) -> Diagnostic {
    Diagnostic::error("shape.no-values", span, "min and max of nothing have no value")
}
