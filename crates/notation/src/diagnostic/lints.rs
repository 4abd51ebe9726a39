//! What a model does that nobody means: the pitfalls of published formulations, found in the
//! rows on an instance.

use super::Diagnostic;
use super::syntax::short;
use crate::place::Span;

/// Labels that must rise along every drive, the depot's included.
pub(crate) fn depot_order(family: &str, (nodes, example): (usize, &str), span: Span) -> Diagnostic {
    let message = format!(
        "({}) asks the labels to rise along every drive between {nodes} stops, each of which must \
         be left by one of them ({example}): no round trip can close",
        short(family)
    );
    Diagnostic::warning("lint.depot-order", span, message)
}

/// Rows that still bind when their drive is not used.
pub(crate) fn order_m(family: &str, figures: (&str, &str, &str), span: Span) -> Diagnostic {
    let (row, allowed, possible) = figures;
    let message = format!(
        "M in ({}) is too small by one: where the drive is not used, {row} still asks a difference of at \
         most {allowed}, and the bounds of the labels allow {possible}",
        short(family)
    );
    Diagnostic::warning("lint.order-m", span, message)
}

/// Rows that ask for no step.
pub(crate) fn order_step(family: &str, row: &str, span: Span) -> Diagnostic {
    let message = format!(
        "M in ({}) is too small by one: {row} lets the label stay the same along a drive that is used, so \
         circles remain",
        short(family)
    );
    Diagnostic::warning("lint.order-step", span, message)
}

/// Pairs that exist in one direction only, in rows that leave and enter each node.
pub(crate) fn one_way(name: &str, pairs: usize, families: (&str, &str), span: Span) -> Diagnostic {
    let (leave, enter) = families;
    let message = format!(
        "none of the {pairs} pairs of {} has its reverse, yet ({}) counts those that leave and ({}) \
         those that enter: data without direction are used in one direction only",
        short(name),
        short(leave),
        short(enter)
    );
    Diagnostic::warning("lint.one-way", span, message).mend(
        "list each pair in both directions, or count x_{i,j} and x_{j,i} in one row for each node",
    )
}

/// Two orders that nothing chooses between.
pub(crate) fn both_orders(
    name: &str,
    (pairs, one, other): (usize, &str, &str),
    span: Span,
) -> Diagnostic {
    let message = format!(
        "no row holds both orders of a pair of {} ({pairs} pairs, such as {one} and {other}), so both may \
         be 0 and their rows ask nothing",
        short(name)
    );
    Diagnostic::warning("lint.both-orders", span, message)
}

/// A constant that switches rows off by more than is needed.
pub(crate) fn big_m(family: &str, constant: &str, needed: Option<&str>, span: Span) -> Diagnostic {
    let known = match needed {
        Some(needed) => format!("; the bounds prove that {needed} is enough"),
        None => "; no bound tells how large it must be".to_owned(),
    };
    let message = format!(
        "({}) is switched by the constant {constant}: a relaxation pays almost nothing for it, and a \
         binary of 0.000001 lets {} through{known}",
        short(family),
        leak(constant)
    );
    Diagnostic::warning("lint.big-m", span, message)
}

/// A millionth of a whole number, as text.
fn leak(constant: &str) -> String {
    let digits: String = constant.chars().filter(char::is_ascii_digit).collect();
    let padded = format!("{digits:0>7}");
    let (whole, fraction) = padded.split_at(padded.len() - 6);
    let fraction = fraction.trim_end_matches('0');
    if fraction.is_empty() { whole.to_owned() } else { format!("{whole}.{fraction}") }
}

/// A variable that neither its domain nor any row holds.
pub(crate) fn free(name: &str, columns: usize, span: Span) -> Diagnostic {
    let counted = if columns == 1 {
        "its one column".to_owned()
    } else {
        format!("any of its {columns} columns")
    };
    let message = format!(
        "{} is bounded nowhere: neither its domain nor a row bounds {counted} on either side",
        short(name)
    );
    Diagnostic::warning("lint.free", span, message)
        .mend("give it a bound, or fix one of its values")
}

/// A column along which the objective improves and that no row stops.
pub(crate) fn endless(column: &str, (rows, up): (usize, bool), span: Span) -> Diagnostic {
    let direction = if up { "grows" } else { "falls" };
    let stops = if rows == 1 {
        "its one row does not stop it".to_owned()
    } else {
        format!("none of its {rows} rows stops it")
    };
    let message = format!(
        "the objective improves without end as {} {direction}: {stops}",
        short_tuple(column)
    );
    Diagnostic::warning("lint.endless", span, message)
        .mend("give it a bound, or look at the sign of its cost")
}

/// Rows that say what others say.
pub(crate) fn twin_rows(
    family: &str,
    (rows, one, other): (usize, &str, &str),
    span: Span,
) -> Diagnostic {
    let message = format!(
        "{rows} of the rows of ({}) say what another row says, such as {} and {}",
        short(family),
        short_tuple(one),
        short_tuple(other)
    );
    Diagnostic::warning("lint.twin-rows", span, message)
}

/// Rows of an edge within the row of a clique.
pub(crate) fn within_clique(
    family: &str,
    (rows, one, other): (&str, &str, &str),
    span: Span,
) -> Diagnostic {
    let message = format!(
        "{rows} of the rows of ({}) lie within a larger row, such as {} within {}: what they forbid is \
         forbidden already",
        short(family),
        short_tuple(one),
        short_tuple(other)
    );
    Diagnostic::info("lint.within-clique", span, message)
}

/// A variable that is whole by itself: how many columns, whether others must be whole, whether its
/// value follows from theirs.
pub(crate) fn needless(
    name: &str,
    (columns, others, follows): (usize, bool, bool),
    span: Span,
) -> Diagnostic {
    let name = short(name);
    let message = match (others, follows) {
        (true, true) => format!(
            "on this instance {name} need not be declared whole: where the other variables are whole, an equation makes each of \
             its {columns} columns so"
        ),
        (true, false) => format!(
            "on this instance {name} need not be declared whole: where the other variables are whole, the rows of its {columns} \
             columns are totally unimodular, and a best plan has them whole"
        ),
        (false, _) => format!(
            "on this instance {name} need not be declared whole: the rows of its {columns} columns are totally unimodular, and \
             the relaxation has a best plan with all of them whole"
        ),
    };
    Diagnostic::info("lint.needless-integrality", span, message).mend(
        "give it its range in place of whole numbers, and fewer variables are left to branch on",
    )
}

/// Rows without entries.
pub(crate) fn empty_rows(family: &str, (rows, example): (usize, &str)) -> Diagnostic {
    let message = if rows == 1 {
        format!("the row {} has no entry", short_tuple(example))
    } else {
        format!("{rows} rows of {} have no entry, such as {}", short(family), short_tuple(example))
    };
    Diagnostic::warning("lint.empty-rows", Span::default(), message)
}

/// A model that is too large to be looked at.
pub(crate) fn not_looked_at(entries: u64, columns: usize, limit: u64) -> Diagnostic {
    let message = format!(
        "pitfalls are sought in models of up to {limit} entries and columns; this one has {entries} entries \
         and {columns} columns, so nothing is said of them"
    );
    Diagnostic::info("lint.too-large", Span::default(), message)
}

/// Columns that the model cannot tell apart.
pub(crate) fn twin_columns(
    name: &str,
    (columns, one, other): (usize, &str, &str),
    span: Span,
) -> Diagnostic {
    let counted = if columns == 1 { "the column".to_owned() } else { format!("{columns} columns") };
    let have = if columns == 1 { "has" } else { "have" };
    let message = format!(
        "{counted} of {} {have} a twin with the same rows, cost and bounds, such as {} and {}: the \
         search tells them apart in vain",
        short(name),
        short_tuple(one),
        short_tuple(other)
    );
    Diagnostic::warning("lint.twin-columns", span, message)
        .mend("use one variable for both, or order them")
}

/// Up to 60 characters: a name with its index tuple.
fn short_tuple(text: &str) -> String {
    let mut out: String = text.chars().take(60).collect();
    if out.len() < text.len() {
        out.push('…');
    }
    out
}
