//! Pitfalls of published formulations, found in the rows that a text gives on an instance.
//!
//! | file | finds |
//! |---|---|
//! | `order.rs` | labels that rise along the depot's drives too; an M too small by one |
//! | `pairs.rs` | data in one direction only; two orders that nothing chooses between |
//! | `big_m.rs` | rows switched by a constant over 10⁴, with the smallest that bounds prove |
//! | `columns.rs` | variables bounded nowhere; directions without end |
//! | `twins.rs` | duplicate rows and columns |
//!
//! A pitfall is told only where the rows prove what is said of it. What the expansion sees by
//! itself (families that are empty, that never bind, rows that cannot hold) it tells itself.

mod big_m;
mod bounds;
mod columns;
mod facts;
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
/// a mend where one is known. Nothing is said of models with more than 60,000 entries.
/// `O(entries · log entries)` exact operations.
#[must_use]
pub fn lint(tree: &Formulation, checked: &Checked, model: &Model) -> Vec<Diagnostic> {
    if model.statistics().nonzeros > LIMIT || model.columns().len() as u64 > LIMIT {
        return Vec::new();
    }
    let subject = Subject { tree, plan: &checked.plan, facts: Facts::new(model) };
    let found = [
        order::lint(&subject),
        pairs::lint(&subject),
        big_m::lint(&subject),
        columns::lint(&subject),
        twins::lint(&subject),
    ];
    tidy(found.concat())
}
