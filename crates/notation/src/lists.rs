//! Lists of a line, printed so that what stands behind a comma is read as part of the list.

use std::collections::BTreeSet;

use crate::check::children;
use crate::lex::lex;
use crate::lex::token::Kind as Token;
use crate::syntax::{Clause, Expression, Kind, Relation};

/// Where a line stands: what may begin behind a comma in it.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Place {
    /// In `data` and `definitions`: a remark, with a word of several letters.
    Described,
    /// Under `subject to`: another statement.
    Statement,
}

impl Place {
    /// The printed items of a list, in brackets where they would be read as something else;
    /// `before` are the items of the list that this one goes on with, `followed` says that a
    /// relation follows the last.
    pub(crate) fn apart(
        self,
        before: &[Expression],
        items: &[Expression],
        printed: Vec<String>,
        followed: bool,
    ) -> Vec<String> {
        let count = printed.len();
        let guarded = |(k, text): (usize, String)| {
            let taken = k > 0
                && match self {
                    Self::Described => begins_remark(&text, k + 1 == count && !followed),
                    Self::Statement => begins_statement(&items[k], [before, &items[..k]]),
                };
            if taken { format!("({text})") } else { text }
        };
        printed.into_iter().enumerate().map(guarded).collect()
    }

    /// A clause whose items `print` prints, its conditions behind `colon`.
    pub(crate) fn clause(
        self,
        clause: &Clause,
        print: &dyn Fn(&[Expression]) -> Vec<String>,
        colon: &str,
    ) -> String {
        let part = |before: &[Expression], items: &[Expression]| {
            self.apart(before, items, print(items), false).join(", ")
        };
        let items = part(&[], &clause.items);
        let conditions = part(&clause.items, &clause.such_that);
        if clause.such_that.is_empty() { items } else { format!("{items}{colon}{conditions}") }
    }
}

/// Whether what stands behind a comma is read as the words of a remark.
fn begins_remark(text: &str, last: bool) -> bool {
    let tokens = lex(text, 0);
    let [first, second, ..] = &tokens[..] else { return false };
    let word = first.kind == Token::Word && first.text.chars().count() > 1;
    let ends = second.kind == Token::End;
    word && (ends && last
        || !ends && second.kind != Token::Underscore && !second.kind.is_relation())
}

/// Whether a condition behind a comma reads as a statement of its own: a relation over what has
/// indices, or over a name that nothing before it in the list binds.
fn begins_statement(item: &Expression, before: [&[Expression]; 2]) -> bool {
    if let Kind::All(items) | Kind::Any(items) = &item.kind {
        return items.first().is_some_and(|first| begins_statement(first, before));
    }
    let Kind::Chain(first, links) = &item.kind else { return false };
    let relation = links.first().map(|(relation, _)| *relation);
    if matches!(relation, Some(Relation::In | Relation::Subset | Relation::SubsetOrEqual)) {
        return false;
    }
    if has_indices(item) {
        return true;
    }
    let assigns = matches!(relation, Some(Relation::Equal | Relation::AtMost | Relation::AtLeast));
    let Kind::Name(name) = &first.kind else { return false };
    let mut bound = BTreeSet::new();
    before.into_iter().flatten().for_each(|one| bare_names(one, &mut bound));
    assigns && !bound.contains(name.text.as_str())
}

/// The names that stand without indices.
fn bare_names<'e>(expression: &'e Expression, found: &mut BTreeSet<&'e str>) {
    if let Kind::Name(name) = &expression.kind
        && name.indices.is_empty()
    {
        found.insert(&name.text);
    }
    children(expression).into_iter().for_each(|child| bare_names(child, found));
}

fn has_indices(expression: &Expression) -> bool {
    let own = match &expression.kind {
        Kind::Name(name) => !name.indices.is_empty() || name.superscript.is_some(),
        Kind::Call(..) => true,
        _ => false,
    };
    own || children(expression).into_iter().any(has_indices)
}
