//! Names that are not declared, declared twice, or cannot be told apart.

use super::Diagnostic;
use super::syntax::short;
use crate::place::Span;

/// Where and what a mend would add.
pub(crate) struct Additions {
    pub(crate) variable: Option<(Span, String)>,
    pub(crate) datum: Option<(Span, String)>,
}

pub(crate) fn undeclared(name: &str, span: Span, additions: Additions) -> Diagnostic {
    let message = format!("{} is not declared", short(name));
    let mut diagnostic = Diagnostic::error("name.undeclared", span, message);
    diagnostic = match additions.variable {
        Some((at, line)) => diagnostic.mend_by("make it a variable", at, line),
        None => diagnostic.mend("make it a variable"),
    };
    match additions.datum {
        Some((at, line)) => diagnostic.mend_by("make it a datum", at, line),
        None => diagnostic.mend("make it a datum"),
    }
}

pub(crate) fn twice(name: &str, span: Span, first: Span) -> Diagnostic {
    Diagnostic::error("name.twice", span, format!("{} is declared twice", short(name)))
        .also(first, "the first declaration stands here")
}

pub(crate) fn ambiguous(word: &str, one: &str, other: &str, span: Span) -> Diagnostic {
    let message = format!("{} can be read as {one} and as {other}", short(word));
    let diagnostic = Diagnostic::error("name.ambiguous", span, message);
    if span.range().len() != word.len() {
        return diagnostic.mend("put spaces between the names");
    }
    diagnostic.mend_by(format!("read {}", short(one)), span, one).mend_by(
        format!("read {}", short(other)),
        span,
        other,
    )
}

pub(crate) fn circular(name: &str, span: Span) -> Diagnostic {
    Diagnostic::error("name.circular", span, format!("{} is defined by itself", short(name)))
}

pub(crate) fn not_a_name(span: Span) -> Diagnostic {
    Diagnostic::error("name.expected", span, "expected a single name to declare")
        .mend("put two spaces before a remark")
}

pub(crate) fn taken(name: &str, span: Span, what: &str) -> Diagnostic {
    let message = format!("the index {} has the name of a {what}", short(name));
    Diagnostic::error("name.taken", span, message).mend("give the index another name")
}

pub(crate) fn bound_already(name: &str, span: Span) -> Diagnostic {
    let message = format!("{} has a meaning already, so this is a condition on it", short(name));
    Diagnostic::warning("name.bound", span, message)
        .mend("if a new index is meant, give it another name")
}

pub(crate) fn no_index(span: Span) -> Diagnostic {
    Diagnostic::error("name.no-index", span, "nothing new is bound here to sum over")
        .mend("give the index a name that has no meaning yet")
}

pub(crate) fn label_twice(label: &str, span: Span, first: Span) -> Diagnostic {
    Diagnostic::error(
        "name.label-twice",
        span,
        format!("a second family has the label ({})", short(label)),
    )
    .also(first, "the first stands here")
    .mend("give it a label of its own")
}

pub(crate) fn unused(name: &str, span: Span, line: Option<Span>) -> Diagnostic {
    let found = Diagnostic::warning("name.unused", span, format!("{} is never used", short(name)));
    match line {
        Some(line) => found.mend_by("delete the line", line, ""),
        None => found.mend("delete the line"),
    }
}

pub(crate) fn variable_in_no_row(name: &str, span: Span, line: Option<Span>) -> Diagnostic {
    let message =
        format!("the variable {} stands in no constraint and not in the objective", short(name));
    let found = Diagnostic::warning("name.variable-unused", span, message);
    match line {
        Some(line) => found.mend_by("delete its domain line", line, ""),
        None => found,
    }
}

pub(crate) fn inferred(index: &str, set: &str, span: Span) -> Diagnostic {
    Diagnostic::info("name.inferred", span, format!("{} is taken from {set}", short(index)))
}

pub(crate) fn objective_is_free(name: &str, span: Span) -> Diagnostic {
    let message = format!("{} is taken for a variable that its rows bound", short(name));
    Diagnostic::info("name.objective-free", span, message)
}

pub(crate) fn no_set(index: &str, span: Span) -> Diagnostic {
    Diagnostic::error(
        "name.no-set",
        span,
        format!("the set of the index {} is missing", short(index)),
    )
    .mend(format!("write {} ∈ and its set", short(index)))
}

pub(crate) fn initial(datum: &str, variable: &str, span: Span) -> Diagnostic {
    let message = format!("{datum} is given: the variable {variable} has that value there");
    Diagnostic::info("name.initial", span, message)
}

pub(crate) fn taken_for(name: &str, plain: &str, span: Span) -> Diagnostic {
    Diagnostic::info("name.taken-for", span, format!("{name} is taken for {plain}"))
}
