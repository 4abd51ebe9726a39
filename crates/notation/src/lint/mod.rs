//! Pitfalls of published formulations, found in the rows that a text gives on an instance.
//!
//! | file | finds |
//! |---|---|
//! | `order.rs` | labels that rise along the depot's drives too; an M too small by one |
//! | `pairs.rs` | data in one direction only; two orders that nothing chooses between |
//! | `big_m.rs` | rows switched by a constant over 10⁴, with the smallest that bounds prove |
//! | `columns.rs` | variables bounded nowhere; directions without end |
//! | `twins.rs` | duplicate rows and columns |
//! | `cliques.rs` | rows of an edge within the row of a clique |
//! | `needless.rs` | variables that are whole by themselves |
//! | `empty.rs` | rows without entries, which only a file can hold |
//!
//! A pitfall is told only where the rows prove what is said of it. What the expansion sees by
//! itself (families that are empty, that never bind, rows that cannot hold) it tells itself.

mod big_m;
mod bounds;
mod cliques;
mod columns;
mod empty;
mod facts;
mod needless;
mod order;
mod pairs;
mod twins;

use model::Model;

use crate::check::Checked;
use crate::diagnostic::{Diagnostic, tidy};
use crate::place::Span;
use crate::plan::Plan;
use crate::syntax::{Formulation, Line};
use facts::Facts;

/// Entries of a model up to which it is looked at: the same on every machine.
const LIMIT: u64 = 60_000;

/// What the pitfalls are told about: the tree for mends, the plan for places, the rows.
struct Subject<'s> {
    tree: &'s Formulation,
    plan: &'s Plan,
    facts: Facts<'s>,
}

impl<'s> Subject<'s> {
    fn model(&self) -> &'s Model {
        self.facts.model
    }

    /// Where a family stands.
    fn family_span(&self, family: usize) -> Span {
        self.plan.families.get(family).map_or_else(Span::default, |family| family.span)
    }

    /// Where a variable is declared.
    fn variable_span(&self, variable: usize) -> Span {
        self.plan.variables.get(variable).map_or_else(Span::default, |variable| variable.span)
    }

    /// The line of a family.
    fn line(&self, family: usize) -> Option<&'s Line> {
        let start = self.plan.families.get(family)?.span.start;
        self.tree.statements.iter().find(|line| line.span.start == start)
    }
}

/// The pitfalls of a model that a tree gave on an instance, each with the figures it rests on and
/// a mend where one is known. Of models with more than 60,000 entries it is said that they were
/// not looked at. `O(entries · log entries)` exact operations.
#[must_use]
pub fn lint(tree: &Formulation, checked: &Checked, model: &Model) -> Vec<Diagnostic> {
    if let Some(told) = too_large(model) {
        return vec![told];
    }
    let subject = Subject { tree, plan: &checked.plan, facts: Facts::new(model) };
    let found = [
        order::lint(&subject),
        pairs::lint(&subject),
        big_m::lint(&subject),
        columns::lint(&subject),
        twins::lint(&subject),
        cliques::lint(&subject),
        needless::lint(&subject),
    ];
    tidy(found.concat())
}

/// The pitfalls of a model without a text, such as one in MPS: constants, variables and
/// directions without an end, empty rows, twins. Places and mends in a text it has none.
#[must_use]
pub fn lint_rows(model: &Model) -> Vec<Diagnostic> {
    if let Some(told) = too_large(model) {
        return vec![told];
    }
    let (tree, plan) = (Formulation::default(), Plan::default());
    let subject = Subject { tree: &tree, plan: &plan, facts: Facts::new(model) };
    let found = [
        big_m::lint(&subject),
        columns::lint(&subject),
        twins::lint(&subject),
        cliques::lint(&subject),
        empty::lint(&subject),
    ];
    tidy(found.concat())
}

fn too_large(model: &Model) -> Option<Diagnostic> {
    let (entries, columns) = (model.statistics().nonzeros, model.columns().len());
    let large = entries > LIMIT || columns as u64 > LIMIT;
    large.then(|| crate::diagnostic::lints::not_looked_at(entries, columns, LIMIT))
}
