//! `u_{ij} ≥ 0, v_j ∈ {0,1}.` without a quantifier: the indices run where the same variable has
//! them elsewhere, below a sum or a quantifier.

use std::collections::{BTreeMap, BTreeSet};

use super::Parser;
use super::compound::needed;
use crate::check::{children, words};
use crate::diagnostic::names as message;
use crate::place::Span;
use crate::syntax::{Clause, Expression, Formulation, Kind, Line, Name, Relation};

/// How many different index tuples of one variable are sought.
const KINDS: usize = 4;

/// How many places of one variable are compared.
const PLACES: usize = 16;

/// A variable with its indices, and the quantifiers around it in each place.
type Sought = (Name, Vec<Vec<Clause>>);

/// What is sought, and where it was found.
#[derive(Default)]
struct Uses {
    wanted: BTreeMap<String, Vec<Sought>>,
}

impl Parser<'_> {
    /// Gives such domain lines their quantifier, and tells of it. `O(tree)`.
    pub(super) fn imply_quantifiers(&mut self, tree: &mut Formulation) {
        let mut uses = Uses::default();
        for line in &tree.statements {
            for name in self.without_quantifier(line) {
                let kinds = uses.wanted.entry(name.text.clone()).or_default();
                if kinds.len() < KINDS && kinds.iter().all(|(known, _)| known != name) {
                    kinds.push((name.clone(), Vec::new()));
                }
            }
        }
        if uses.wanted.is_empty() {
            return;
        }
        if let Some(objective) = &tree.objective {
            uses.walk(&objective.expression, &mut Vec::new());
        }
        for line in &tree.statements {
            let mut context = line.clauses.clone();
            let operands = line.left.iter().chain(line.links.iter().map(|(_, operand)| operand));
            operands.for_each(|operand| uses.walk(operand, &mut context));
        }
        for line in std::mem::take(&mut tree.statements) {
            let lines = match self.quantified(&line, &uses) {
                Some(whole) => vec![whole],
                None => self.quantified_apart(&line, &uses).unwrap_or_else(|| vec![line]),
            };
            tree.statements.extend(lines);
        }
    }

    /// A domain line with the quantifier of one of its variables that binds the indices of all.
    fn quantified(&mut self, line: &Line, uses: &Uses) -> Option<Line> {
        let contexts = self.without_quantifier(line).into_iter().filter_map(|name| uses.of(name));
        let mut found = contexts.map(|context| needed(line, context));
        let clauses = found.find(|clauses| self.binds_all(line, clauses))?;
        self.tell(&clauses, line);
        Some(Line { clauses, ..line.clone() })
    }

    /// `u_i, v_j ≥ 0`: no one place binds the indices of all, so each variable has its own line.
    fn quantified_apart(&mut self, line: &Line, uses: &Uses) -> Option<Vec<Line>> {
        let names = self.without_quantifier(line).len();
        if names < 2 || names != line.left.len() || line.label.is_some() {
            return None;
        }
        let own = |left: &Expression| Line { left: vec![left.clone()], ..line.clone() };
        let quantified = |left| {
            let alone = own(left);
            let bound = self.without_quantifier(&alone).is_empty();
            if bound { Some(alone) } else { self.quantified(&alone, uses) }
        };
        line.left.iter().map(quantified).collect()
    }

    /// The variables of a domain line that has indices and no quantifier.
    fn without_quantifier<'l>(&self, line: &'l Line) -> Vec<&'l Name> {
        let constant = |(_, operand): &(Relation, Expression)| {
            matches!(
                operand.kind,
                Kind::Number(_)
                    | Kind::NumberSet(_)
                    | Kind::Set(_)
                    | Kind::Range(..)
                    | Kind::Interval(..)
            )
        };
        let single = line.clauses.is_empty() && line.links.iter().all(constant);
        let names = line.left.iter().map(|one| match &one.kind {
            Kind::Name(name) if !name.indices.is_empty() => Some(name),
            _ => None,
        });
        let names: Option<Vec<&Name>> = names.collect();
        let names = names.filter(|names| single && names.len() <= 8).unwrap_or_default();
        if names.iter().any(|name| !self.open_letters(name).is_empty()) {
            names
        } else {
            Vec::new()
        }
    }

    /// The indices of a name that nothing declares; letters side by side are one each.
    fn open_letters(&self, name: &Name) -> BTreeSet<String> {
        let mut found = BTreeSet::new();
        let mut inner = BTreeSet::new();
        name.indices.iter().for_each(|index| words(index, &mut inner));
        for word in inner.into_iter().filter(|word| !self.declared.contains(*word)) {
            let plain = word.chars().all(char::is_alphabetic);
            if plain {
                let letters = word.chars().map(String::from);
                found.extend(letters.filter(|letter| !self.declared.contains(letter)));
            } else {
                found.insert(word.to_owned());
            }
        }
        found
    }

    fn binds_all(&self, line: &Line, clauses: &[Clause]) -> bool {
        let items = clauses.iter().flat_map(|clause| &clause.items);
        let mut bound = BTreeSet::new();
        for item in items {
            if let Kind::Chain(first, links) = &item.kind
                && matches!(links.first(), Some((Relation::In, _)))
            {
                let mut names = BTreeSet::new();
                words(first, &mut names);
                bound.extend(
                    names.iter().flat_map(|name| {
                        name.chars().map(String::from).chain([(*name).to_owned()])
                    }),
                );
            }
        }
        self.without_quantifier(line)
            .iter()
            .all(|name| self.open_letters(name).iter().all(|letter| bound.contains(letter)))
    }

    fn tell(&mut self, clauses: &[Clause], line: &Line) {
        for item in clauses.iter().flat_map(|clause| &clause.items) {
            if let Kind::Chain(first, links) = &item.kind
                && let Some((Relation::In, set)) = links.first()
            {
                let told = crate::print::expression(first);
                let set = crate::print::expression(set);
                self.report(message::inferred(&told, &set, line.span));
            }
        }
    }
}

impl Uses {
    /// The quantifiers around the first place that asks least of the indices.
    fn of(&self, name: &Name) -> Option<&[Clause]> {
        let kinds = self.wanted.get(&name.text)?;
        let (_, places) = kinds.iter().find(|(known, _)| known == name)?;
        let least = places.iter().min_by_key(|place| asked(name, place))?;
        Some(least)
    }

    fn walk(&mut self, expression: &Expression, context: &mut Vec<Clause>) {
        if let Kind::Name(name) = &expression.kind
            && let Some(kinds) = self.wanted.get_mut(&name.text)
            && let Some((_, found)) = kinds.iter_mut().find(|(known, _)| known == name)
            && found.len() < PLACES
            && !context.is_empty()
        {
            found.push(context.clone());
        }
        let Kind::Big(_, clause, body) = &expression.kind else {
            for child in children(expression) {
                self.walk(child, context);
            }
            return;
        };
        context.push(clause.clone());
        self.walk(body, context);
        context.pop();
    }
}

/// How much a place asks of a variable's indices: the conditions on them, and the tuples that hold
/// further indices (`(j,m,k) ∈ P` around `s_{jm}`).
fn asked(name: &Name, context: &[Clause]) -> usize {
    let line = Line {
        left: vec![Expression { kind: Kind::Name(name.clone()), span: Span::default() }],
        links: Vec::new(),
        clauses: Vec::new(),
        label: None,
        remark: None,
        span: Span::default(),
    };
    let mut own = BTreeSet::new();
    name.indices.iter().for_each(|index| words(index, &mut own));
    let letter = |word: &str| own.iter().any(|index| *index == word || index.contains(word));
    let foreign = |item: &Expression| {
        let Kind::Chain(first, links) = &item.kind else { return true };
        let mut bound = BTreeSet::new();
        words(first, &mut bound);
        links.len() != 1 || links[0].0 != Relation::In || !bound.into_iter().all(letter)
    };
    let clauses = needed(&line, context);
    let asks = |clause: &Clause| {
        clause.such_that.len() + clause.items.iter().filter(|item| foreign(item)).count()
    };
    clauses.iter().map(asks).sum()
}
