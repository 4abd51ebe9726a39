//! Expansion: a bound formulation to a [`Model`], in slices, with limits.
//!
//! Columns first, variable by variable; then the objective; then the rows, family by family.
//! Every column and row keeps its index tuple.

mod closed_form;
mod columns;
mod conditions;
mod costs;
mod rows;
mod subsets;

use std::collections::BTreeMap;

use model::{FamilyState, LabelId, Model, ModelBuilder, Number, Sense};

use crate::bind::Bound;
use crate::diagnostic::{Diagnostic, data, size, tidy};
use crate::evaluate::{Element, Environment, Evaluated, Evaluator, Found, Linear, Scale, Walk};
use crate::plan::{Node, Step};
use crate::syntax::Big;
use columns::Draft;

pub(crate) use crate::check::is_arrow;

/// The state of each family that is not in its default one, by its name.
pub type States = BTreeMap<String, FamilyState>;

/// Limits of an expansion.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Limits {
    /// The most entries of rows and of families over subsets.
    pub nonzeros: usize,
}

impl Default for Limits {
    fn default() -> Self {
        Self { nonzeros: 2_000_000 }
    }
}

/// Index tuples that may be looked at for each non-zero that is allowed.
const STEPS_PER_NONZERO: u64 = 50;

/// Whether an expansion has come to its end.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Progress {
    /// Call again.
    Working,
    /// Ready for [`Expansion::finish`].
    Finished,
}

/// What is counted before it is written.
#[derive(Debug, Clone, Copy)]
struct Counted<'n> {
    name: &'n str,
    /// "rows", "columns", "terms".
    noun: &'static str,
    limit: usize,
    span: crate::place::Span,
}

/// What is being written.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Stage {
    Columns { variable: usize, domain: usize },
    Objective { term: usize },
    Rows { family: usize },
    Done,
}

/// An expansion under way.
#[derive(Debug)]
pub struct Expansion {
    evaluator: Evaluator,
    builder: ModelBuilder,
    states: States,
    limits: Limits,
    stage: Stage,
    walk: Walk,
    env: Environment,
    labels: Vec<Option<LabelId>>,
    draft: Draft,
    /// The bounds of each column so far, among those that occur.
    bounds: Vec<u32>,
    ends: Vec<(Option<Number>, Option<Number>)>,
    /// Whether each column stands in a row.
    in_rows: Vec<bool>,
    costs: costs::Costs,
    offset: Number,
    nonzeros: usize,
    /// Index tuples looked at in the stage at hand.
    steps: u64,
    family: rows::Progress,
    warnings: Vec<Diagnostic>,
    errors: Vec<Diagnostic>,
}

impl Expansion {
    /// Begins an expansion. `states` says which families are written, on demand or left out;
    /// one over subsets is on demand unless told otherwise, every other is written.
    #[must_use]
    pub fn new(bound: Bound, states: &States, limits: Limits) -> Self {
        let Bound { evaluator, notes } = bound;
        let plan = &evaluator.plan;
        let sense = if plan.maximise { Sense::Maximise } else { Sense::Minimise };
        let mut expansion = Self {
            builder: ModelBuilder::new(&plan.title, sense),
            states: states.clone(),
            limits,
            stage: Stage::Columns { variable: 0, domain: 0 },
            walk: Walk::default(),
            env: evaluator.environment(),
            labels: Vec::new(),
            draft: Draft::default(),
            bounds: Vec::new(),
            ends: Vec::new(),
            in_rows: Vec::new(),
            costs: costs::Costs::default(),
            offset: Number::ZERO,
            nonzeros: 0,
            steps: 0,
            family: rows::Progress::default(),
            warnings: notes,
            errors: Vec::new(),
            evaluator,
        };
        expansion.label_sets();
        expansion.check_states();
        expansion
    }

    /// Works until about `ticks` non-zeros have been touched, or to the end. The model does not
    /// depend on how the work is sliced.
    pub fn advance(&mut self, ticks: u64) -> Progress {
        let mut budget = ticks.max(1);
        while budget > 0 && self.stage != Stage::Done {
            let before = self.stage;
            let step = match self.stage {
                Stage::Columns { variable, domain } => self.columns(variable, domain, &mut budget),
                Stage::Objective { term } => self.objective(term, &mut budget),
                Stage::Rows { family } => self.rows(family, &mut budget),
                Stage::Done => Ok(()),
            };
            if let Err(diagnostic) = step {
                self.fail(*diagnostic, before);
            }
        }
        if self.stage == Stage::Done { Progress::Finished } else { Progress::Working }
    }

    /// The model with its warnings. Runs to the end first, if it is not there yet.
    ///
    /// # Errors
    /// All that stands in the way of a model, with its places.
    pub fn finish(mut self) -> Result<(Model, Vec<Diagnostic>), Vec<Diagnostic>> {
        while self.advance(u64::MAX) == Progress::Working {}
        if !self.errors.is_empty() {
            return Err(tidy(self.errors));
        }
        self.offset_and_costs();
        let warnings = tidy(self.warnings);
        if self.errors.is_empty() {
            Ok((self.builder.build(), warnings))
        } else {
            Err(tidy(self.errors))
        }
    }

    /// An error ends its family; what follows is still looked at, so that all errors come out.
    fn fail(&mut self, diagnostic: Diagnostic, stage: Stage) {
        let fatal = diagnostic.code.starts_with("size.") || self.errors.len() > 50;
        let plan = std::rc::Rc::clone(&self.evaluator.plan);
        let span = match stage {
            Stage::Columns { variable, domain } => {
                plan.variables[variable].domains.get(domain).map(|d| d.span)
            }
            Stage::Objective { .. } => Some(plan.objective_span),
            Stage::Rows { family } => plan.families.get(family).map(|f| f.span),
            Stage::Done => None,
        };
        let placed = crate::evaluate::placed(Box::new(diagnostic), span.unwrap_or_default());
        self.errors.push(*placed);
        self.start_walk();
        self.stage = match stage {
            _ if fatal => Stage::Done,
            // rows without their columns would only repeat the complaint
            Stage::Columns { .. } | Stage::Done => Stage::Done,
            Stage::Objective { term } => self.objective_stage(term + 1),
            Stage::Rows { family } => self.rows_stage(family + 1),
        };
    }

    fn start_walk(&mut self) {
        self.walk = Walk::default();
        self.evaluator.ground = None;
        self.steps = 0;
    }

    fn objective_stage(&mut self, term: usize) -> Stage {
        if term < self.evaluator.plan.objective.len() {
            Stage::Objective { term }
        } else {
            self.rows_stage(0)
        }
    }

    fn rows_stage(&mut self, family: usize) -> Stage {
        self.family = rows::Progress::default();
        if family < self.evaluator.plan.families.len() {
            Stage::Rows { family }
        } else {
            Stage::Done
        }
    }

    /// The members of every set of labels get their ids in the order of listing.
    fn label_sets(&mut self) {
        let sets: Vec<Vec<Element>> = self.evaluator.values.iter().filter_map(single_set).collect();
        for element in sets.into_iter().flatten() {
            self.label(element);
        }
    }

    fn check_states(&mut self) {
        for name in self.states.keys() {
            if !self.evaluator.plan.families.iter().any(|f| f.name == *name) {
                self.warnings.push(data::no_such_family(name));
            }
        }
    }

    fn label(&mut self, element: Element) -> LabelId {
        let at = element.0 as usize;
        if self.labels.len() <= at {
            self.labels.resize(at + 1, None);
        }
        if let Some(label) = self.labels[at] {
            return label;
        }
        let label = self.builder.label(self.evaluator.pool.borrow().name(element));
        self.labels[at] = Some(label);
        label
    }

    fn label_tuple(&mut self, tuple: &[Element]) -> Vec<LabelId> {
        tuple.iter().map(|&element| self.label(element)).collect()
    }

    /// One more tuple of a walk, within the budget and the limit on steps.
    fn next_tuple(&mut self, steps: &[Step], name: &str, budget: &mut u64) -> Evaluated<Found> {
        let before = *budget;
        self.evaluator.start_work();
        let found = self.walk.next(steps, &self.evaluator, &mut self.env, budget)?;
        self.steps += before - *budget;
        let limit = self.limits.nonzeros as u64 * STEPS_PER_NONZERO;
        if self.steps > limit {
            return crate::evaluate::fail(size::steps(name, limit, crate::place::Span::default()));
        }
        Ok(found)
    }

    /// Refuses what has more index tuples than may be written, before any is visited.
    fn refuse_too_many(&mut self, steps: &[Step], what: Counted<'_>) -> Evaluated<()> {
        self.evaluator.start_work();
        let form = closed_form::closed_form(steps, &self.evaluator, &mut self.env);
        match form {
            Some(form) if form.count > what.limit as u128 => {
                let exactly = if form.exact { "" } else { "at least " };
                crate::evaluate::fail(size::tuples(
                    what.name,
                    &format!("{exactly}{} = {} {}", form.words, grouped(form.count), what.noun),
                    &grouped(what.limit as u128),
                    what.span,
                ))
            }
            _ => Ok(()),
        }
    }

    /// One piece of one term of the objective.
    fn objective(&mut self, term: usize, budget: &mut u64) -> Evaluated<()> {
        let plan = std::rc::Rc::clone(&self.evaluator.plan);
        let Some((minus, node)) = plan.objective.get(term) else {
            self.stage = self.rows_stage(0);
            return Ok(());
        };
        let sign = if *minus { Scale::minus_one() } else { Scale::one() };
        let Node::Over(Big::Sum, steps, body, _) = node else {
            self.add_costs(node, &sign, budget)?;
            self.stage = self.objective_stage(term + 1);
            return Ok(());
        };
        if self.steps == 0 {
            let limit = self.limits.nonzeros * STEPS_PER_NONZERO as usize;
            let span = plan.objective_span;
            self.refuse_too_many(steps, Counted { name: "objective", noun: "terms", limit, span })?;
        }
        while *budget > 0 {
            match self.next_tuple(steps, "objective", budget)? {
                Found::Tuple(_) => self.add_costs(body, &sign, budget)?,
                Found::Paused => return Ok(()),
                Found::Done => {
                    self.start_walk();
                    self.stage = self.objective_stage(term + 1);
                    return Ok(());
                }
            }
        }
        Ok(())
    }

    fn add_costs(&mut self, node: &Node, sign: &Scale, budget: &mut u64) -> Evaluated<()> {
        let mut linear = Linear::default();
        self.evaluator.linear(node, sign, &mut self.env, &mut linear)?;
        *budget = budget.saturating_sub(linear.terms.len() as u64);
        let offset = std::mem::take(&mut self.offset);
        self.offset = crate::evaluate::moderate(offset + linear.constant)?;
        for (column, _, coefficient) in linear.terms {
            self.costs.add(column, coefficient)?;
        }
        Ok(())
    }

    fn offset_and_costs(&mut self) {
        self.builder.offset(std::mem::take(&mut self.offset));
        self.unbounded_columns();
        for (column, cost) in std::mem::take(&mut self.costs).iter() {
            if let Err(error) = self.builder.cost(model::ColumnId(column), cost) {
                self.errors.push(size::model(error.to_string(), crate::place::Span::default()));
            }
        }
    }

    /// The bounds of a column.
    fn ends_of(&self, column: usize) -> &(Option<Number>, Option<Number>) {
        &self.ends[self.bounds[column] as usize]
    }

    fn mark_columns(&mut self, columns: impl Iterator<Item = usize>) {
        self.in_rows.resize(self.bounds.len(), false);
        for column in columns {
            self.in_rows[column] = true;
        }
    }

    /// A column in no row along which the objective has no end; one of each variable is told.
    fn unbounded_columns(&mut self) {
        let plan = std::rc::Rc::clone(&self.evaluator.plan);
        self.mark_columns(std::iter::empty());
        for (number, variable) in plan.variables.iter().enumerate() {
            let endless = |column: u32| {
                let index = column as usize;
                let cost = self.costs.get(column).filter(|cost| !cost.is_zero())?;
                let falls = (*cost > Number::ZERO) != plan.maximise;
                let (lower, upper) = self.ends_of(index);
                let open = if falls { lower.is_none() } else { upper.is_none() };
                (open && !self.in_rows[index]).then_some(())
            };
            let columns = &self.evaluator.columns[number];
            let Some((tuple, _)) = columns.iter().find(|(_, column)| endless(*column).is_some())
            else {
                continue;
            };
            let name = self.evaluator.shown(&variable.name, tuple, is_arrow(&variable.roots));
            self.warnings.push(crate::diagnostic::rows::unbounded(&name, variable.span));
        }
    }
}

fn single_set(values: &Option<crate::evaluate::Values>) -> Option<Vec<Element>> {
    match values {
        Some(crate::evaluate::Values::Single(crate::evaluate::Value::Set(set)))
            if set.arity == 1 =>
        {
            Some(set.iter().map(|member| member[0]).collect())
        }
        _ => None,
    }
}

/// A count with its thousands apart.
fn grouped(count: u128) -> String {
    if count == u128::MAX {
        return "more than 10^38".to_owned();
    }
    let digits = count.to_string();
    let mut text = String::new();
    for (place, digit) in digits.chars().enumerate() {
        if place > 0 && (digits.len() - place).is_multiple_of(3) {
            text.push(',');
        }
        text.push(digit);
    }
    text
}
