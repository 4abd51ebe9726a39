//! What the instance supplies, and what it does not.

use super::Diagnostic;
use super::syntax::short;
use crate::place::Span;

pub(crate) fn lacks(name: &str, key: &str, offers: &[String], span: Span) -> Diagnostic {
    let known = if offers.is_empty() { "nothing".to_owned() } else { offers.join(", ") };
    let named =
        if name == key { short(name) } else { format!("{} (as {})", short(name), short(key)) };
    Diagnostic::error("data.lacks", span, format!("the instance lacks {named}; it offers {known}"))
        .mend(format!(
            "add {} to the instance, bind it to one of these, or give a default",
            short(name)
        ))
}

pub(crate) fn shape(name: &str, wanted: &str, found: &str, span: Span) -> Diagnostic {
    let message = format!("{} is {wanted}, but the instance gives {found}", short(name));
    let diagnostic = Diagnostic::error("data.shape", span, message);
    if wanted == "a set" && found == "a set of tuples" {
        return diagnostic.mend(format!("declare {0} with its places: {0} ⊆ V × V", short(name)));
    }
    diagnostic
}

pub(crate) fn cell(what: &str, span: Span) -> Diagnostic {
    Diagnostic::error("data.cell", span, format!("the instance has no value for {what}"))
        .mend("add the value, or give a default")
}

pub(crate) fn not_contained(member: &str, name: &str, span: Span) -> Diagnostic {
    let message =
        format!("{member} in {} is not a member of the set that must contain it", short(name));
    Diagnostic::error("data.not-contained", span, message)
}

pub(crate) fn assumed(name: &str, what: &str, span: Span) -> Diagnostic {
    Diagnostic::info(
        "data.assumed",
        span,
        format!("{} is taken as {what}, for the instance does not say", short(name)),
    )
}

pub(crate) fn turned(name: &str, span: Span) -> Diagnostic {
    let message = format!("the table of {name} is turned round: its labels fit the sets only so");
    Diagnostic::info("data.turned", span, message)
}

pub(crate) fn either_way(name: &str, table: &str, span: Span) -> Diagnostic {
    let message = format!(
        "the table of {name} fits its sets both ways; its rows are taken for the first index"
    );
    let mark = crate::turned::MARK;
    Diagnostic::info("data.either-way", span, message)
        .mend(format!("if its columns are, bind {name} to \u{201c}{table}{mark}\u{201d}"))
}

pub(crate) fn matched(name: &str, taken: &str, span: Span) -> Diagnostic {
    let message = format!(
        "{} is taken from {}, which suits it; the instance has no {0}",
        short(name),
        short(taken)
    );
    Diagnostic::info("data.matched", span, message)
}

pub(crate) fn out_of_range(what: &str, span: Span) -> Diagnostic {
    Diagnostic::warning("data.range", span, format!("{what} breaks the condition on its line"))
}

pub(crate) fn not_whole(what: &str, span: Span) -> Diagnostic {
    Diagnostic::warning("data.whole", span, format!("{what} is not a whole number"))
}

/// What is needed could not be supplied; there is an error about it already.
pub(crate) fn unavailable(name: &str, span: Span) -> Diagnostic {
    Diagnostic::error(UNAVAILABLE, span, format!("{} has no value", short(name)))
}

pub(crate) const UNAVAILABLE: &str = "data.unavailable";

pub(crate) fn unsound() -> Diagnostic {
    Diagnostic::error(
        "data.unsound",
        Span::default(),
        "the formulation has errors, so it cannot be bound",
    )
}

pub(crate) fn no_such_family(name: &str) -> Diagnostic {
    Diagnostic::warning(
        "data.no-family",
        Span::default(),
        format!("the formulation has no family ({})", short(name)),
    )
}
