//! The checker: resolves names, shapes and scopes, and turns lines into plans.
//!
//! All that can be said without an instance is said here, for the whole text at once.

mod binders;
mod complete;
mod condition;
mod declare;
mod domain;
mod edges;
mod expression;
mod family;
mod indices;
mod infer;
mod initial;
mod names;
mod order;
mod raised;
mod sets;
mod usage;

pub(crate) use domain::line_bounds;
pub(crate) use family::is_arrow;
pub(crate) use usage::{children, words};

use std::collections::{BTreeMap, BTreeSet};
use std::rc::Rc;

use crate::diagnostic::{Diagnostic, names as message, syntax, tidy};
use crate::place::Span;
use crate::plan::{Node, Plan, Root, Slot, SubsetPlan, Symbol, SymbolId, Variable, VariableNumber};
use crate::syntax::{Expression, Formulation, plain};

/// A formulation whose names and shapes are in order, as far as its diagnostics do not say
/// otherwise.
#[derive(Debug, Clone)]
pub struct Checked {
    pub(crate) plan: Rc<Plan>,
    pub(crate) sound: bool,
}

impl Checked {
    /// Whether nothing stands in the way of binding it to an instance.
    #[must_use]
    pub fn is_sound(&self) -> bool {
        self.sound
    }

    /// The names of the data that an instance must supply, in order.
    #[must_use]
    pub fn data(&self) -> Vec<&str> {
        let data = self.plan.symbols.iter().filter(|s| s.datum);
        data.map(|s| plain(&s.name)).collect()
    }

    /// The names of its definitions, in order.
    #[must_use]
    pub fn definitions(&self) -> Vec<&str> {
        let defined = self.plan.symbols.iter().filter(|s| !s.datum);
        defined.map(|s| plain(&s.name)).collect()
    }

    /// The names of its variables, in order.
    #[must_use]
    pub fn variables(&self) -> Vec<&str> {
        self.plan.variables.iter().map(|variable| plain(&variable.name)).collect()
    }

    /// The names of its constraint families, in order.
    #[must_use]
    pub fn families(&self) -> Vec<&str> {
        self.plan.families.iter().map(|family| family.name.as_str()).collect()
    }

    /// The name of the constraint family whose line begins at a place.
    #[must_use]
    pub fn family_at(&self, place: Span) -> Option<&str> {
        let family = self.plan.families.iter().find(|one| one.span.start == place.start);
        family.map(|family| family.name.as_str())
    }

    /// Its title; empty when it has none.
    #[must_use]
    pub fn title(&self) -> &str {
        &self.plan.title
    }
}

/// Checks a tree. `O(tree · log names)`.
#[must_use]
pub fn check(tree: &Formulation) -> (Checked, Vec<Diagnostic>) {
    let completed = complete::completed(tree);
    let mut checker = Checker::new(&completed.tree);
    checker.habits = completed.habits;
    let plan = checker.formulation();
    let mut diagnostics = checker.diagnostics;
    diagnostics.extend(completed.notes);
    let diagnostics = tidy(diagnostics);
    let sound = tree.complete && !diagnostics.iter().any(Diagnostic::is_error);
    (Checked { plan: Rc::new(plan), sound }, diagnostics)
}

/// What a name outside binders stands for.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Global {
    Symbol(SymbolId),
    Variable(VariableNumber),
}

/// A bound name.
#[derive(Debug, Clone)]
struct Local {
    name: String,
    what: Bound,
}

#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Bound {
    Element(Slot, Root),
    Subset(Root),
    /// A name for a tuple (`e ∈ E`), whose places are the locals `e.1`, `e.2`, …
    Tuple(usize),
}

/// What kind of value an expression has.
#[derive(Debug, Clone, PartialEq)]
enum Form {
    Number,
    Element(Root),
    Set(Vec<Root>),
    /// `∅`, which fits every set.
    Empty,
    Truth,
}

impl Form {
    fn noun(&self) -> &'static str {
        match self {
            Self::Number => "a number",
            Self::Element(_) => "an element",
            Self::Set(_) | Self::Empty => "a set",
            Self::Truth => "a condition",
        }
    }
}

/// A resolved expression with what is known of it.
#[derive(Debug, Clone)]
struct Typed {
    node: Node,
    form: Form,
    /// A variable term in it.
    variable: Option<Span>,
    span: Span,
}

struct Checker<'t> {
    tree: &'t Formulation,
    symbols: Vec<Symbol>,
    variables: Vec<Variable>,
    names: BTreeMap<String, Global>,
    /// The set of each index that runs over one set wherever it has one.
    habits: BTreeMap<String, Expression>,
    locals: Vec<Local>,
    /// The smallest number of a local that was used since this was last set.
    lowest: usize,
    next_slot: Slot,
    slots: usize,
    cells: usize,
    /// The subset that the line at hand is quantified over.
    subset: Option<SubsetPlan>,
    subset_uses: usize,
    complained: BTreeSet<String>,
    diagnostics: Vec<Diagnostic>,
}

impl<'t> Checker<'t> {
    fn new(tree: &'t Formulation) -> Self {
        Self {
            tree,
            symbols: Vec::new(),
            variables: Vec::new(),
            names: BTreeMap::new(),
            habits: BTreeMap::new(),
            locals: Vec::new(),
            lowest: usize::MAX,
            next_slot: 0,
            slots: 0,
            cells: 0,
            subset: None,
            subset_uses: 0,
            complained: tree.unread.iter().cloned().collect(),
            diagnostics: Vec::new(),
        }
    }

    fn formulation(&mut self) -> Plan {
        let order = self.declarations();
        let domains = self.find_domains();
        self.name_of_objective();
        self.domains(&domains);
        let families = self.families(&domains);
        let (objective, span) = self.objective();
        self.unused();
        Plan {
            title: self.tree.title.clone().unwrap_or_default(),
            maximise: self.tree.objective.as_ref().is_some_and(|o| o.maximise),
            symbols: std::mem::take(&mut self.symbols),
            order,
            variables: std::mem::take(&mut self.variables),
            objective,
            objective_span: span,
            families,
            slots: self.slots,
            cells: self.cells,
        }
    }

    fn objective(&mut self) -> (Vec<(bool, Node)>, Span) {
        let Some(objective) = &self.tree.objective else {
            if self.tree.unread.is_empty() {
                self.report::<()>(syntax::no_objective());
            }
            return (Vec::new(), Span::default());
        };
        self.fresh_line();
        let terms = self.linear(&objective.expression).map(|typed| match typed.node {
            Node::Add(terms) => terms,
            node => vec![(false, node)],
        });
        (terms.unwrap_or_default(), objective.span)
    }

    fn unused(&mut self) {
        let symbols = self.symbols.iter().filter(|s| s.datum && !s.used);
        let line = |start: u32| {
            let lines = self.tree.data.iter().chain(&self.tree.statements);
            lines.map(|line| line.span).find(|span| span.start == start)
        };
        let mut found: Vec<Diagnostic> =
            symbols.map(|s| message::unused(&s.name, s.span, line(s.span.start))).collect();
        // a line of its own, of which nothing else is declared
        let own = |v: &Variable| match &v.domains[..] {
            [only] => {
                let sharing = self.variables.iter().flat_map(|other| &other.domains);
                let alone = sharing.filter(|d| d.span.start == only.span.start).count() == 1;
                line(only.span.start).filter(|_| alone)
            }
            _ => None,
        };
        let variables = self.variables.iter().filter(|v| !v.used);
        found.extend(variables.map(|v| message::variable_in_no_row(&v.name, v.span, own(v))));
        let unread = self.tree.unread.is_empty();
        if unread && !self.diagnostics.iter().any(Diagnostic::is_error) {
            self.diagnostics.extend(found);
        }
    }

    /// Complains; the answer is always nothing, so that it can end a rule.
    fn report<T>(&mut self, diagnostic: Diagnostic) -> Option<T> {
        if self.diagnostics.len() < 200 {
            self.diagnostics.push(diagnostic);
        }
        None
    }

    /// Forgets what was bound on the line before.
    fn fresh_line(&mut self) {
        self.locals.clear();
        self.next_slot = 0;
        self.lowest = usize::MAX;
        self.subset = None;
        self.subset_uses = 0;
    }

    fn bind(&mut self, name: &str, root: Root) -> Slot {
        let slot = self.next_slot;
        self.next_slot += 1;
        self.slots = self.slots.max(self.next_slot);
        self.locals.push(Local { name: name.to_owned(), what: Bound::Element(slot, root) });
        slot
    }

    fn root_name(&self, root: Root) -> String {
        match root {
            Root::Set(id) => self.symbols[id].name.clone(),
            Root::Integer => "the whole numbers".to_owned(),
            Root::Unknown => "another set".to_owned(),
        }
    }
}
