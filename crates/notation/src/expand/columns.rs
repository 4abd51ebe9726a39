//! Columns: the index set of a variable is the union over its domain lines; several lines
//! about one tuple intersect their bounds.

use model::{ColumnSpec, Number};

use super::{Counted, Expansion, Stage, is_arrow};
use crate::diagnostic::{rows as message, size};
use crate::evaluate::{Element, Evaluated, Found, TupleMap, fail};
use crate::plan::{Bounding, Domain, Variable};
use crate::syntax::NumberSet;

/// The columns of the variable at hand.
#[derive(Debug, Default)]
pub(super) struct Draft {
    tuples: Vec<Vec<Element>>,
    columns: Vec<DraftColumn>,
    at: TupleMap<usize>,
}

#[derive(Debug, Clone, Default)]
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
                    self.start_walk();
                    self.stage = Stage::Columns { variable, domain: domain + 1 };
                    return Ok(());
                }
            }
            if self.bounds.len() + self.draft.tuples.len() > self.limits.nonzeros {
                return fail(size::nonzeros(&found.name, self.limits.nonzeros, line.span));
            }
        }
        Ok(())
    }

    fn draft_column(&mut self, line: &Domain) -> Evaluated<()> {
        let tuple = self.evaluator.tuple(&line.indices, &mut self.env)?;
        let at = match self.draft.at.get(&tuple) {
            Some(&at) => at,
            None => {
                let at = self.draft.tuples.len();
                self.draft.at.insert(&tuple, at);
                self.draft.tuples.push(tuple);
                self.draft.columns.push(DraftColumn::default());
                at
            }
        };
        let mut column = self.draft.columns[at].clone();
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
        self.draft.columns[at] = column;
        Ok(())
    }

    /// Writes the drafted columns.
    fn flush(&mut self, number: usize, variable: &Variable) -> Evaluated<()> {
        let draft = std::mem::take(&mut self.draft);
        let arrow = is_arrow(&variable.roots);
        self.builder.variable(&variable.name, arrow);
        let open =
            |column: &DraftColumn| column.lower.is_none() && column.upper.is_some() && !column.free;
        if draft.columns.iter().any(open) {
            let domains = self.evaluator.plan.variables.iter().flat_map(|other| &other.domains);
            let line = domains.filter(|domain| domain.span.start == variable.span.start);
            let alone = line.count() == 1;
            self.warnings.push(message::no_lower(&variable.name, variable.span, alone));
        }
        for (tuple, column) in draft.tuples.into_iter().zip(draft.columns) {
            if let (Some(lower), Some(upper)) = (&column.lower, &column.upper)
                && lower > upper
                && self.warnings.len() < 100
            {
                let name = self.evaluator.shown(&variable.name, &tuple, arrow);
                self.warnings.push(message::empty_domain(&name, variable.span));
            }
            let labels = self.label_tuple(&tuple);
            self.bounds.push((column.lower.clone(), column.upper.clone()));
            let spec = ColumnSpec {
                lower: column.lower,
                upper: column.upper,
                cost: Number::ZERO,
                integer: column.integer,
            };
            match self.builder.column(&labels, &spec) {
                Ok(id) => {
                    self.evaluator.columns[number].at.insert(&tuple, id.0);
                }
                Err(error) => return fail(size::model(error.to_string(), variable.span)),
            }
        }
        Ok(())
    }
}
