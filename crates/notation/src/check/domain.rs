//! Domain lines: which lines declare variables, and the bounds they give.

use std::collections::BTreeSet;

use super::{Checker, Global, usage};
use crate::diagnostic::{names, rows as message, shapes};
use crate::plan::{Bounding, Domain, Node, Root, Variable};
use crate::syntax::{Expression, Kind, Line, Name, Relation};

/// Which part of a line is a domain.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) enum Role {
    /// All of it: a list of variables with constants.
    Domain,
    /// The links of these numbers; the others are rows.
    Links(Vec<usize>),
    /// None of it.
    Row,
}

impl<'t> Checker<'t> {
    /// The role of each statement; the variables that they declare become known.
    pub(super) fn find_domains(&mut self) -> Vec<Role> {
        let tree = self.tree;
        let mut roles: Vec<Role> = tree.statements.iter().map(|line| self.role(line)).collect();
        let labelled: Vec<bool> =
            tree.statements.iter().map(|l| l.label.is_some() && self.is_domain(l)).collect();
        let mut unlabelled = BTreeSet::new();
        for (line, role) in tree.statements.iter().zip(&roles) {
            unlabelled.extend(self.declared(line, role).into_iter().filter_map(text_of));
        }
        for ((line, role), labelled) in tree.statements.iter().zip(&mut roles).zip(labelled) {
            if labelled && self.is_numbered_domain(line, &unlabelled) {
                *role = Role::Domain;
            }
        }
        for (line, role) in tree.statements.iter().zip(&roles) {
            for operand in self.declared(line, role) {
                self.new_variable(operand);
            }
        }
        roles
    }

    /// `min z` where rows hold `z` and nothing declares it: papers leave out that such a name is
    /// free, for the rows bound it.
    pub(super) fn name_of_objective(&mut self) {
        let Some(objective) = &self.tree.objective else { return };
        let expression = &objective.expression;
        let Kind::Name(name) = &expression.kind else { return };
        let bare = name.indices.is_empty() && name.superscript.is_none();
        let mut words = BTreeSet::new();
        let rows = self.tree.statements.iter().flat_map(usage::of_line);
        rows.for_each(|operand| usage::words(operand, &mut words));
        let known = self.names.contains_key(&name.text)
            || self.splits_into_known(&name.text, &BTreeSet::new());
        if !bare || known || !words.contains(name.text.as_str()) {
            return;
        }
        self.new_variable(expression);
        let bounds = vec![Bounding::Numbers(crate::syntax::NumberSet::Real)];
        let span = expression.span;
        let free = Domain { steps: Vec::new(), indices: Vec::new(), bounds, span };
        if let Some(variable) = self.variables.last_mut() {
            variable.tuples = super::declare::whole_set(&[], &[]);
            variable.domains.push(free);
        }
        let _: Option<()> = self.report(names::objective_is_free(&name.text, span));
    }

    fn new_variable(&mut self, operand: &Expression) {
        let Kind::Name(name) = &operand.kind else { return };
        if self.names.contains_key(&name.text) {
            return;
        }
        self.names.insert(name.text.clone(), Global::Variable(self.variables.len()));
        self.variables.push(Variable {
            name: name.text.clone(),
            span: operand.span,
            roots: Vec::new(),
            tuples: None,
            domains: Vec::new(),
            used: false,
        });
    }

    /// The operands of a line that declare a variable: data and bound indices do not.
    fn declared<'l>(&self, line: &'l Line, role: &Role) -> Vec<&'l Expression> {
        let bound = bound_names(line);
        let names = declared(line, role).into_iter();
        names.filter(|operand| self.is_candidate(operand, &bound)).collect()
    }

    /// A domain line stays one with a label that only numbers it, with a membership, or where no
    /// other line declares its variables.
    fn is_numbered_domain(&self, line: &Line, unlabelled: &BTreeSet<String>) -> bool {
        let number = |label: &str| {
            let letters = label.chars().filter(|c| c.is_alphabetic()).count();
            label.starts_with(|c: char| c.is_ascii_digit()) && letters <= 1
        };
        let numbered = line.label.as_ref().is_some_and(|label| number(&label.text));
        let member = line.links.iter().any(|(relation, _)| *relation == Relation::In);
        let all = self.declared(line, &Role::Domain);
        let alone = all.into_iter().filter_map(text_of).any(|name| !unlabelled.contains(&name));
        numbered || member || alone
    }

    /// Whether a line holds one variable, or a list, and constants.
    fn is_domain(&self, line: &Line) -> bool {
        self.role(&Line { label: None, ..line.clone() }) == Role::Domain
    }

    fn role(&self, line: &Line) -> Role {
        let bound = bound_names(line);
        let candidate = |e: &Expression| self.is_candidate(e, &bound);
        let constant = |e: &Expression| self.is_constant(e, &bound);
        let operands = operands(line);
        let names = line.left.iter().all(candidate);
        let list = names && line.links.iter().all(|(_, e)| constant(e));
        let single = line.left.len() == 1
            && operands.iter().filter(|e| candidate(e)).count() == 1
            && operands.iter().all(|e| candidate(e) || constant(e));
        if list || single {
            return if line.label.is_some() { Role::Row } else { Role::Domain };
        }
        if line.left.len() > 1 || line.links.len() < 2 {
            return Role::Row;
        }
        let bounds = |k: usize| {
            let (a, b) = (operands[k], operands[k + 1]);
            candidate(a) && constant(b) || constant(a) && candidate(b)
        };
        let links: Vec<usize> = (0..line.links.len()).filter(|&k| bounds(k)).collect();
        if links.is_empty() { Role::Row } else { Role::Links(links) }
    }

    /// A single name that is not declared and not bound.
    fn is_candidate(&self, expression: &Expression, bound: &BTreeSet<&str>) -> bool {
        match &expression.kind {
            Kind::Name(name) => {
                let known = matches!(self.names.get(&name.text), Some(Global::Symbol(_)));
                !known
                    && !bound.contains(name.text.as_str())
                    && !self.splits_into_known(&name.text, bound)
            }
            _ => false,
        }
    }

    fn splits_into_known(&self, word: &str, bound: &BTreeSet<&str>) -> bool {
        let known = |name: &str| {
            bound.contains(name) || matches!(self.names.get(name), Some(Global::Symbol(_)))
        };
        !super::names::splits(word, &known).is_empty()
    }

    /// Whether an expression mentions only data, definitions and bound names.
    fn is_constant(&self, expression: &Expression, bound: &BTreeSet<&str>) -> bool {
        match &expression.kind {
            Kind::Big(_, clause, body) => {
                let mut inner = bound.clone();
                usage::of_clause(clause).for_each(|item| bare_names(item, &mut inner));
                usage::of_clause(clause).chain([body.as_ref()]).all(|e| self.is_constant(e, &inner))
            }
            Kind::Name(name) | Kind::Call(name, _) => {
                let inner = match &expression.kind {
                    Kind::Call(_, arguments) => &arguments[..],
                    _ => &[],
                };
                inner.iter().all(|e| self.is_constant(e, bound))
                    && (bound.contains(name.text.as_str())
                        || matches!(self.names.get(&name.text), Some(Global::Symbol(_)))
                        || self.splits_into_known(&name.text, bound))
            }
            _ => {
                usage::children(expression).into_iter().all(|child| self.is_constant(child, bound))
            }
        }
    }

    /// Reads the domain lines.
    pub(super) fn domains(&mut self, roles: &[Role]) {
        let tree = self.tree;
        for (line, role) in tree.statements.iter().zip(roles) {
            match role {
                Role::Row => {}
                Role::Domain => {
                    for (name, bounds) in line_bounds(line) {
                        self.domain(line, name, &bounds);
                    }
                }
                Role::Links(links) => {
                    let operands = operands(line);
                    for &k in links {
                        let (left, right, relation) =
                            (operands[k], operands[k + 1], line.links[k].0);
                        let bound = match self.variable_of(left) {
                            true => (left, vec![(relation, right)]),
                            false => (right, vec![(relation.turned(), left)]),
                        };
                        self.domain(line, bound.0, &bound.1);
                    }
                }
            }
        }
    }

    fn variable_of(&self, expression: &Expression) -> bool {
        match &expression.kind {
            Kind::Name(name) => matches!(self.names.get(&name.text), Some(Global::Variable(_))),
            _ => false,
        }
    }

    fn domain(
        &mut self,
        line: &'t Line,
        operand: &Expression,
        bounds: &[(Relation, &Expression)],
    ) -> Option<()> {
        let Kind::Name(name) = &operand.kind else { return None };
        let Some(Global::Variable(number)) = self.names.get(&name.text).copied() else {
            return None;
        };
        self.fresh_line();
        let mut carriers: Vec<&Expression> = bounds.iter().map(|(_, e)| *e).collect();
        carriers.push(operand);
        let steps = self.quantify(&line.clauses, &carriers, false)?;
        let (indices, roots) = self.own_indices(name)?;
        let first = self.variables[number].domains.is_empty();
        if !first && self.variables[number].roots.len() != roots.len() {
            let wanted = self.variables[number].roots.len();
            return self.report(shapes::indices(&name.text, wanted, roots.len(), operand.span));
        }
        let variable = &mut self.variables[number];
        if first {
            variable.tuples = super::declare::whole_set(&steps, &indices);
            variable.roots = roots;
        } else {
            for (known, found) in variable.roots.iter_mut().zip(roots) {
                // x_{r} = 0 adds nothing to what is known of the index set
                if *known != found && matches!(found, Root::Set(_)) {
                    *known = Root::Unknown;
                }
            }
        }
        let mut found = Vec::new();
        for (relation, operand) in bounds {
            found.extend(self.bounding(*relation, operand)?);
        }
        self.variables[number].domains.push(Domain {
            steps,
            indices,
            bounds: found,
            span: line.span,
        });
        Some(())
    }

    fn own_indices(&mut self, name: &Name) -> Option<(Vec<Node>, Vec<Root>)> {
        let mut written = self.spread(&name.indices, usize::MAX);
        if let Some(raised) = &name.superscript {
            written.extend(self.spread(std::slice::from_ref(raised), usize::MAX));
        }
        let read: Vec<Option<(Node, Root)>> =
            written.iter().map(|index| self.index(index)).collect();
        let read: Vec<(Node, Root)> = read.into_iter().collect::<Option<_>>()?;
        Some(read.into_iter().unzip())
    }

    fn bounding(&mut self, relation: Relation, operand: &Expression) -> Option<Vec<Bounding>> {
        if let Kind::Infinity = operand.kind {
            let upper = matches!(relation, Relation::AtMost | Relation::Less);
            return if upper {
                Some(Vec::new())
            } else {
                self.report(message::objective_infinite(operand.span))
            };
        }
        if let (Kind::Negative(inner), Relation::AtLeast) = (&operand.kind, relation)
            && inner.kind == Kind::Infinity
        {
            return Some(vec![Bounding::Numbers(crate::syntax::NumberSet::Real)]);
        }
        match relation {
            Relation::In => self.values(operand),
            Relation::AtMost => Some(vec![Bounding::Upper(self.data(operand, "a bound")?)]),
            Relation::AtLeast => Some(vec![Bounding::Lower(self.data(operand, "a bound")?)]),
            Relation::Equal => Some(vec![Bounding::Fixed(self.data(operand, "a bound")?)]),
            Relation::Less | Relation::Greater | Relation::NotEqual => {
                self.report(message::strict(operand.span, None))
            }
            _ => self.report(message::domain(operand.span)),
        }
    }

    /// `∈ {0,1}`, `∈ ℤ_+`, `∈ [a,b]`, `∈ {0..k}`.
    fn values(&mut self, operand: &Expression) -> Option<Vec<Bounding>> {
        match &operand.kind {
            Kind::NumberSet(set) => Some(vec![Bounding::Numbers(*set)]),
            Kind::Interval(from, to) => {
                let mut bounds = Vec::new();
                if !matches!(&from.kind, Kind::Negative(inner) if inner.kind == Kind::Infinity) {
                    bounds.push(Bounding::Lower(self.data(from, "a bound")?));
                } else {
                    bounds.push(Bounding::Numbers(crate::syntax::NumberSet::Real));
                }
                if to.kind != Kind::Infinity {
                    bounds.push(Bounding::Upper(self.data(to, "a bound")?));
                }
                Some(bounds)
            }
            Kind::Range(from, to) => {
                let (from, to) = (self.data(from, "a bound")?, self.data(to, "a bound")?);
                Some(vec![Bounding::Whole(from, to)])
            }
            Kind::Set(items) => {
                let numbers: Option<Vec<&model::Number>> = items
                    .iter()
                    .map(
                        |item| {
                            if let Kind::Number(value) = &item.kind { Some(value) } else { None }
                        },
                    )
                    .collect();
                let Some(mut numbers) = numbers else {
                    return self.report(message::domain(operand.span));
                };
                numbers.sort();
                let consecutive = numbers.windows(2).all(|w| w[0] + model::Number::ONE == *w[1]);
                let whole = numbers.iter().all(|n| n.is_int());
                match (numbers.first(), numbers.last(), consecutive && whole) {
                    (Some(&from), Some(&to), true) => Some(vec![Bounding::Whole(
                        Node::Number(from.clone()),
                        Node::Number(to.clone()),
                    )]),
                    _ => self.report(message::not_consecutive(operand.span)),
                }
            }
            _ => self.report(message::domain(operand.span)),
        }
    }
}

fn text_of(operand: &Expression) -> Option<String> {
    match &operand.kind {
        Kind::Name(name) => Some(name.text.clone()),
        _ => None,
    }
}

/// All operands of a chain in order.
pub(super) fn operands(line: &Line) -> Vec<&Expression> {
    line.left.iter().chain(line.links.iter().map(|(_, operand)| operand)).collect()
}

/// The operands of a line that declare a variable.
fn declared<'t>(line: &'t Line, role: &Role) -> Vec<&'t Expression> {
    let all = operands(line);
    let is_name = |e: &&Expression| matches!(e.kind, Kind::Name(_));
    match role {
        Role::Row => Vec::new(),
        Role::Domain
            if line.left.len() > 1
                || is_name(&all[0]) && line.links.iter().all(|(_, e)| !is_name(&e)) =>
        {
            line.left.iter().collect()
        }
        Role::Domain => all.into_iter().filter(is_name).collect(),
        Role::Links(links) => {
            links.iter().flat_map(|&k| [all[k], all[k + 1]]).filter(is_name).collect()
        }
    }
}

/// The names of a line with the bounds that it gives them.
pub(crate) fn line_bounds(line: &Line) -> Bounds<'_> {
    if line.left.len() == 1 { single_bounds(line) } else { listed_bounds(line) }
}

pub(crate) type Bounds<'t> = Vec<(&'t Expression, Vec<(Relation, &'t Expression)>)>;

/// `a ≤ x ≤ b`: the name is the one operand that is no symbol.
fn single_bounds(line: &Line) -> Bounds<'_> {
    let all = operands(line);
    let mut found = Vec::new();
    for (k, operand) in all.iter().enumerate() {
        if !matches!(operand.kind, Kind::Name(_)) {
            continue;
        }
        let mut bounds = Vec::new();
        if k > 0 {
            bounds.push((line.links[k - 1].0.turned(), all[k - 1]));
        }
        if let Some((relation, right)) = line.links.get(k) {
            bounds.push((*relation, right));
        }
        found.push((*operand, bounds));
    }
    found
}

/// `x, y ≥ 0`: every name on the left has every bound.
fn listed_bounds(line: &Line) -> Bounds<'_> {
    let bounds: Vec<_> =
        line.links.iter().map(|(relation, operand)| (*relation, operand)).collect();
    line.left.iter().map(|name| (name, bounds.clone())).collect()
}

/// The bare names of a line's quantifier.
fn bound_names(line: &Line) -> BTreeSet<&str> {
    let mut bound = BTreeSet::new();
    for clause in &line.clauses {
        usage::of_clause(clause).for_each(|item| bare_names(item, &mut bound));
    }
    bound
}

/// Every bare name in a quantifier: those it binds, and more.
fn bare_names<'e>(expression: &'e Expression, names: &mut BTreeSet<&'e str>) {
    if let Kind::Name(name) = &expression.kind
        && name.indices.is_empty()
    {
        names.insert(&name.text);
    }
    for child in usage::children(expression) {
        bare_names(child, names);
    }
}
