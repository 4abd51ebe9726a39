//! Columns: the index set of a variable is the union over its domain lines; several lines
//! about one tuple intersect their bounds.

use std::collections::BTreeMap;

use model::{ColumnSpec, Number};

use super::{Counted, Expansion, Stage, is_arrow};
use crate::diagnostic::{rows as message, size};
use crate::evaluate::{Columns, Evaluated, Found, fail};
use crate::plan::{Bounding, Domain, Variable};
use crate::syntax::NumberSet;

/// The columns of the variable at hand.
#[derive(Debug, Default)]
pub(super) struct Draft {
    tuples: Columns,
    /// What is known of each, as a number among the kinds.
    columns: Vec<u32>,
    kinds: Vec<DraftColumn>,
    known: BTreeMap<DraftColumn, u32>,
}

impl Draft {
    /// The number of what is known of a column.
    fn kind(&mut self, column: DraftColumn) -> u32 {
        if let Some(&kind) = self.known.get(&column) {
            return kind;
        }
        let kind = u32::try_from(self.kinds.len()).unwrap_or(u32::MAX);
        self.kinds.push(column.clone());
        self.known.insert(column, kind);
        kind
    }

    /// Finds the tuples that were drafted more than once; all that was said of one holds.
    fn settle(&mut self) {
        let mut tuples = std::mem::take(&mut self.tuples);
        let mut columns = std::mem::take(&mut self.columns);
        tuples.settle(|from, to, first| {
            let kind = columns[from];
            columns[to] = if first { kind } else { self.joined(columns[to], kind) };
        });
        columns.truncate(tuples.len());
        (self.tuples, self.columns) = (tuples, columns);
    }

    fn joined(&mut self, one: u32, other: u32) -> u32 {
        if one == other {
            return one;
        }
        let mut column = self.kinds[one as usize].clone();
        let other = self.kinds[other as usize].clone();
        other.lower.into_iter().for_each(|value| column.at_least(value));
        other.upper.into_iter().for_each(|value| column.at_most(value));
        column.free |= other.free;
        column.integer |= other.integer;
        self.kind(column)
    }
}

#[derive(Debug, Clone, Default, PartialEq, Eq, PartialOrd, Ord)]
struct DraftColumn {
    lower: Option<Number>,
    upper: Option<Number>,
    /// "free" or a set of numbers says that −∞ is meant.
    free: bool,
    integer: bool,
}

impl DraftColumn {
    fn at_least(&mut self, value: Number) {
        if self.lower.as_ref().is_none_or(|lower| value > *lower) {
            self.lower = Some(value);
        }
    }

    fn at_most(&mut self, value: Number) {
        if self.upper.as_ref().is_none_or(|upper| value < *upper) {
            self.upper = Some(value);
        }
    }

    fn numbers(&mut self, set: NumberSet) {
        match set {
            NumberSet::Real | NumberSet::Integer => self.free = true,
            NumberSet::RealNonNegative | NumberSet::IntegerNonNegative => {
                self.at_least(Number::ZERO);
            }
            NumberSet::IntegerPositive => self.at_least(Number::ONE),
            NumberSet::Binary => {
                self.at_least(Number::ZERO);
                self.at_most(Number::ONE);
            }
        }
        self.integer |= !matches!(set, NumberSet::Real | NumberSet::RealNonNegative);
    }
}

impl Expansion {
    /// One piece of one domain line.
    pub(super) fn columns(
        &mut self,
        variable: usize,
        domain: usize,
        budget: &mut u64,
    ) -> Evaluated<()> {
        let plan = std::rc::Rc::clone(&self.evaluator.plan);
        let Some(found) = plan.variables.get(variable) else {
            self.stage = self.objective_stage(0);
            return Ok(());
        };
        let Some(line) = found.domains.get(domain) else {
            self.flush(variable, found)?;
            self.stage = Stage::Columns { variable: variable + 1, domain: 0 };
            return Ok(());
        };
        if self.steps == 0 {
            let (limit, span) = (self.limits.nonzeros, line.span);
            let counted = Counted { name: &found.name, noun: "columns", limit, span };
            self.refuse_too_many(&line.steps, counted)?;
        }
        while *budget > 0 {
            match self.next_tuple(&line.steps, &found.name, budget)? {
                Found::Tuple(_) => self.draft_column(line)?,
                Found::Paused => return Ok(()),
                Found::Done => {
                    self.draft.settle();
                    self.start_walk();
                    self.stage = Stage::Columns { variable, domain: domain + 1 };
                    return Ok(());
                }
            }
            let room = self.limits.nonzeros.saturating_sub(self.bounds.len());
            if self.draft.tuples.len() > room {
                // what is drafted twice counts once
                self.draft.settle();
            }
            if self.draft.tuples.len() > room {
                return fail(size::nonzeros(&found.name, self.limits.nonzeros, line.span));
            }
        }
        Ok(())
    }

    fn draft_column(&mut self, line: &Domain) -> Evaluated<()> {
        let tuple = self.evaluator.tuple(&line.indices, &mut self.env)?;
        let earlier = self.draft.tuples.position(&tuple);
        let mut column = match earlier {
            Some(at) => self.draft.kinds[self.draft.columns[at] as usize].clone(),
            None => DraftColumn::default(),
        };
        let mut number = |node| self.evaluator.number(node, &mut self.env);
        for bounding in &line.bounds {
            match bounding {
                Bounding::Lower(node) => column.at_least(number(node)?),
                Bounding::Upper(node) => column.at_most(number(node)?),
                Bounding::Fixed(node) => {
                    let value = number(node)?;
                    column.at_least(value.clone());
                    column.at_most(value);
                }
                Bounding::Whole(from, to) => {
                    column.at_least(number(from)?);
                    column.at_most(number(to)?);
                    column.integer = true;
                }
                Bounding::Numbers(set) => column.numbers(*set),
            }
        }
        let kind = self.draft.kind(column);
        if let Some(at) = earlier {
            self.draft.columns[at] = kind;
        } else {
            self.draft.tuples.push(&tuple);
            self.draft.columns.push(kind);
        }
        Ok(())
    }

    /// Writes the drafted columns.
    fn flush(&mut self, number: usize, variable: &Variable) -> Evaluated<()> {
        let draft = std::mem::take(&mut self.draft);
        let arrow = is_arrow(&variable.roots);
        self.builder.variable(crate::syntax::plain(&variable.name), arrow);
        let open =
            |column: &DraftColumn| column.lower.is_none() && column.upper.is_some() && !column.free;
        if draft.columns.iter().any(|&kind| open(&draft.kinds[kind as usize])) {
            let domains = self.evaluator.plan.variables.iter().flat_map(|other| &other.domains);
            let line = domains.filter(|domain| domain.span.start == variable.span.start);
            let alone = line.count() == 1;
            self.warnings.push(message::no_lower(&variable.name, variable.span, alone));
        }
        let first = u32::try_from(self.ends.len()).unwrap_or(u32::MAX);
        self.ends.extend(draft.kinds.iter().map(|kind| (kind.lower.clone(), kind.upper.clone())));
        self.bounds.reserve_exact(draft.columns.len());
        self.builder.reserve_columns(draft.tuples.len(), variable.roots.len());
        let mut tuples = draft.tuples;
        for (position, &kind) in draft.columns.iter().enumerate() {
            let (tuple, column) = (tuples.tuple(position), &draft.kinds[kind as usize]);
            if let (Some(lower), Some(upper)) = (&column.lower, &column.upper)
                && lower > upper
                && self.warnings.len() < 100
            {
                let name = self.evaluator.shown(&variable.name, tuple, arrow);
                self.warnings.push(message::empty_domain(&name, variable.span));
            }
            let labels = self.label_tuple(tuple);
            self.bounds.push(first + kind);
            let spec = ColumnSpec {
                lower: column.lower.clone(),
                upper: column.upper.clone(),
                cost: Number::ZERO,
                integer: column.integer,
            };
            match self.builder.column(&labels, &spec) {
                Ok(id) if position == 0 => tuples.begin_at(id.0),
                Ok(_) => {}
                Err(error) => return fail(size::model(error.to_string(), variable.span)),
            }
        }
        self.evaluator.columns[number] = tuples;
        Ok(())
    }
}
