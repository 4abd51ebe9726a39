//! `u_{ij} ≥ 0, v_j ∈ {0,1}.` without a quantifier: the indices run where the same variable has
//! them elsewhere, below a sum or a quantifier.

use std::collections::{BTreeMap, BTreeSet};

use super::Parser;
use super::compound::needed;
use crate::check::{children, words};
use crate::diagnostic::names as message;
use crate::syntax::{Clause, Expression, Formulation, Kind, Line, Name, Relation};

/// How many different index tuples of one variable are sought.
const KINDS: usize = 4;

/// What is sought, and where each was found first.
#[derive(Default)]
struct Uses {
    wanted: BTreeMap<String, Vec<(Name, Vec<Clause>)>>,
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
        let mut statements = std::mem::take(&mut tree.statements);
        for line in &mut statements {
            let found = self.without_quantifier(line).iter().find_map(|name| uses.of(name));
            let Some(clauses) = found.map(|context| needed(line, context)) else { continue };
            if self.binds_all(line, &clauses) {
                self.tell(&clauses, line);
                line.clauses = clauses;
            }
        }
        tree.statements = statements;
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
    fn of(&self, name: &Name) -> Option<&[Clause]> {
        let kinds = self.wanted.get(&name.text)?;
        let (_, context) = kinds.iter().find(|(known, _)| known == name)?;
        (!context.is_empty()).then_some(context)
    }

    fn walk(&mut self, expression: &Expression, context: &mut Vec<Clause>) {
        if let Kind::Name(name) = &expression.kind
            && let Some(kinds) = self.wanted.get_mut(&name.text)
            && let Some((_, found)) = kinds.iter_mut().find(|(known, _)| known == name)
            && found.is_empty()
        {
            found.clone_from(context);
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
