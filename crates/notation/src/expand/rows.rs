//! Rows of ordinary families.

use model::{ColumnId, FamilyState, Number, Row};

use super::{Counted, Expansion};
use crate::diagnostic::{rows as message, size};
use crate::evaluate::{Evaluated, Evaluator, Found, Guard, Linear, Scale, fail};
use crate::plan::{FamilyPlan, Node, RowPlan};
use crate::syntax::Relation;

/// How far the family at hand is.
#[derive(Debug, Default)]
pub(super) struct Progress {
    pub(super) opened: bool,
    /// Rows seen, those that say nothing included.
    pub(super) seen: u64,
    /// Whether one of them can bind.
    pub(super) binds: bool,
    /// Families over subsets that are to be written out.
    pub(super) waiting: Vec<model::SubsetFamily>,
}

impl Expansion {
    /// One piece of one family.
    pub(super) fn rows(&mut self, number: usize, budget: &mut u64) -> Evaluated<()> {
        let plan = std::rc::Rc::clone(&self.evaluator.plan);
        let Some(family) = plan.families.get(number) else {
            self.stage = super::Stage::Done;
            return Ok(());
        };
        if !self.family.opened {
            self.family.opened = true;
            if !self.open_family(family)? {
                self.next_family(number);
                return Ok(());
            }
        }
        while *budget > 0 {
            match self.next_tuple(&family.steps, &family.name, budget)? {
                Found::Tuple(_) if family.subset.is_some() => self.subset_member(family, budget)?,
                Found::Tuple(_) => self.member(family, budget)?,
                Found::Paused => return Ok(()),
                Found::Done => {
                    self.settle_subset_family(family)?;
                    self.close_family(family);
                    self.next_family(number);
                    return Ok(());
                }
            }
            if self.nonzeros > self.limits.nonzeros {
                return fail(size::nonzeros(&family.name, self.limits.nonzeros, family.span));
            }
        }
        Ok(())
    }

    fn next_family(&mut self, number: usize) {
        self.start_walk();
        self.stage = self.rows_stage(number + 1);
    }

    /// The state that was asked for, or the default one.
    pub(super) fn state(&self, family: &FamilyPlan) -> FamilyState {
        let usual = if family.subset.is_some() { FamilyState::OnDemand } else { FamilyState::In };
        self.states.get(&family.name).copied().unwrap_or(usual)
    }

    /// Starts the family in the model; whether it is to be expanded.
    fn open_family(&mut self, family: &FamilyPlan) -> Evaluated<bool> {
        let state = self.state(family);
        if family.subset.is_some() {
            return Ok(self.open_subset_family(family, state));
        }
        self.builder.family(&family.name, state, family.arrow);
        if state == FamilyState::Out {
            return Ok(false);
        }
        let (limit, span) = (self.limits.nonzeros, family.span);
        let counted = Counted { name: &family.name, noun: "rows", limit, span };
        self.refuse_too_many(&family.steps, counted)?;
        Ok(true)
    }

    fn close_family(&mut self, family: &FamilyPlan) {
        if self.family.seen == 0 {
            self.warnings.push(message::empty_family(&family.name, family.span));
        } else if family.subset.is_none() && !self.family.binds {
            self.warnings.push(message::never_binds(&family.name, family.span));
        }
    }

    fn member(&mut self, family: &FamilyPlan, budget: &mut u64) -> Evaluated<()> {
        for plan in &family.rows {
            let row = match plan {
                RowPlan::Link(left, relation, right) => self.link(left, *relation, right)?,
                RowPlan::Ranged(low, middle, high) => self.ranged(low, middle, high)?,
            };
            *budget = budget.saturating_sub(row.entries.len() as u64);
            self.add_row(family, row)?;
        }
        Ok(())
    }

    fn form(&mut self, node: &Node) -> Evaluated<Linear> {
        let mut linear = Linear::default();
        self.evaluator.linear(node, &Scale::one(), &mut self.env, &mut linear)?;
        Ok(linear)
    }

    /// All terms on the side on which the text has them; the left where both sides have some.
    fn link(&mut self, left: &Node, relation: Relation, right: &Node) -> Evaluated<Row> {
        let (left, right) = (self.form(left)?, self.form(right)?);
        let turned = left.terms.is_empty() && !right.terms.is_empty();
        let (own, other) = if turned { (right, left) } else { (left, right) };
        let side = &other.constant - &own.constant;
        let mut entries: Vec<(ColumnId, Number)> = own.terms.into_iter().map(entry).collect();
        entries.extend(other.terms.into_iter().map(entry).map(|(column, a)| (column, -a)));
        let (lower, upper) = match (relation, turned) {
            (Relation::AtMost, false) | (Relation::AtLeast, true) => (None, Some(side)),
            (Relation::AtLeast, false) | (Relation::AtMost, true) => (Some(side), None),
            _ => (Some(side.clone()), Some(side)),
        };
        Ok(Row { entries: merged(entries), lower, upper })
    }

    fn ranged(&mut self, low: &Node, middle: &Node, high: &Node) -> Evaluated<Row> {
        let low = self.evaluator.number(low, &mut self.env)?;
        let high = self.evaluator.number(high, &mut self.env)?;
        let middle = self.form(middle)?;
        let entries = merged(middle.terms.into_iter().map(entry).collect());
        let (lower, upper) = (Some(low - &middle.constant), Some(high - middle.constant));
        Ok(Row { entries, lower, upper })
    }

    /// Writes a row; one without entries only where it is false.
    pub(super) fn add_row(&mut self, family: &FamilyPlan, row: Row) -> Evaluated<()> {
        self.family.seen += 1;
        let (least, most) = self.activity(&row);
        let below =
            |a: &Option<Number>, b: &Option<Number>| matches!((a, b), (Some(a), Some(b)) if a < b);
        let false_row = below(&row.upper, &least) || below(&most, &row.lower);
        let idle = (row.upper.is_none() || below(&most, &row.upper))
            && (row.lower.is_none() || below(&row.lower, &least));
        self.family.binds |= !idle;
        let tuple = Evaluator::bound(&family.tuple, &self.env);
        if false_row && self.warnings.len() < 100 {
            let name = self.evaluator.shown(&family.name, &tuple, family.arrow);
            self.warnings.push(message::never_holds(&name, family.span));
        }
        if row.entries.is_empty() && !false_row {
            return Ok(());
        }
        self.nonzeros += row.entries.len();
        self.mark_columns(row.entries.iter().map(|(column, _)| column.index()));
        let labels = self.label_tuple(&tuple);
        match self.builder.row(&labels, row) {
            Ok(_) => Ok(()),
            Err(error) => fail(size::model(error.to_string(), family.span)),
        }
    }

    /// The least and the greatest value of a row's left-hand side within the bounds.
    fn activity(&self, row: &Row) -> (Option<Number>, Option<Number>) {
        let (mut least, mut most) = (Some(Number::ZERO), Some(Number::ZERO));
        for (column, a) in &row.entries {
            let (lower, upper) = self.ends_of(column.index());
            let (low, high) = if *a > Number::ZERO { (lower, upper) } else { (upper, lower) };
            let one = *a == Number::ONE;
            let add = |sum: Option<Number>, x: &Option<Number>| match (sum, x) {
                (Some(sum), Some(x)) if x.is_zero() => Some(sum),
                (Some(sum), Some(x)) if one => Some(sum + x),
                (Some(sum), Some(x)) => Some(sum + a * x),
                _ => None,
            };
            least = add(least, low);
            most = add(most, high);
        }
        (least, most)
    }
}

fn entry((column, _, coefficient): (u32, Guard, Number)) -> (ColumnId, Number) {
    (ColumnId(column), coefficient)
}

/// Entries by rising column, those on one column added up, zeros dropped.
fn merged(mut entries: Vec<(ColumnId, Number)>) -> Vec<(ColumnId, Number)> {
    entries.sort_by_key(|(column, _)| *column);
    let mut out: Vec<(ColumnId, Number)> = Vec::with_capacity(entries.len());
    for (column, a) in entries {
        match out.last_mut() {
            Some((last, sum)) if *last == column => *sum += a,
            _ => out.push((column, a)),
        }
    }
    out.retain(|(_, a)| !a.is_zero());
    out
}
