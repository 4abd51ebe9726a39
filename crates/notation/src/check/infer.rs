//! Sets that are left out (`Σ_j x_{ij}`, `∀ i`): told from the index sets of what carries the
//! index, where they all say the same.

use super::binders::Quantifier;
use super::{Checker, Global};
use crate::diagnostic::names as message;
use crate::place::Span;
use crate::plan::{Node, Pattern, Root, Step, SymbolId};
use crate::syntax::{Expression, Kind, Name};

/// Where an index may come from.
#[derive(Debug, Clone, PartialEq)]
enum Source {
    /// A place of the tuples of a set, the other places being known.
    Tuples(SymbolId, usize, Vec<Expression>),
    /// All of a set.
    Whole(SymbolId),
    /// Somewhere that has no name.
    Unknown,
}

impl Checker<'_> {
    /// Gives every pending name its set.
    pub(super) fn infer(&mut self, work: &mut Quantifier<'_>) -> Option<()> {
        let mut sound = true;
        while let Some((name, span)) = (!work.pending.is_empty()).then(|| work.pending.remove(0)) {
            if self.local(&name).is_some() {
                continue;
            }
            sound &= self.infer_one(&name, span, work).is_some();
        }
        sound.then_some(())
    }

    fn infer_one(&mut self, name: &str, span: Span, work: &mut Quantifier<'_>) -> Option<()> {
        if let Some(set) = self.set_of_equal(name, work) {
            let own = Name { text: name.to_owned(), indices: Vec::new(), superscript: None };
            let own = Expression { kind: Kind::Name(own), span };
            return self.membership_step(&own, &set, work);
        }
        let mut sources = Vec::new();
        for carrier in &work.carriers {
            self.collect(carrier, name, &mut sources);
        }
        let letters = name.chars().count();
        if sources.is_empty() && (2..=4).contains(&letters) {
            // Σ_{ij} has two indices
            work.pending.splice(0..0, name.chars().map(|c| (c.to_string(), span)));
            return Some(());
        }
        let only = if sources.len() == 1 { sources.pop() } else { None };
        if let (None | Some(Source::Unknown), Some(set)) = (&only, self.habits.get(name).cloned()) {
            let own = Name { text: name.to_owned(), indices: Vec::new(), superscript: None };
            let own = Expression { kind: Kind::Name(own), span };
            self.tell(name, &crate::print::expression(&set), span);
            return self.membership_step(&own, &Expression { span, ..set }, work);
        }
        match only {
            None | Some(Source::Unknown) => return self.report(message::no_set(name, span)),
            Some(Source::Whole(set)) => {
                self.symbols[set].used = true;
                let root = self.set_root(set, 0);
                let slot = self.bind(name, root);
                let node = Node::Symbol(set, Vec::new(), span);
                work.steps.push(Step::Over { pattern: vec![Pattern::Bind(slot)], set: node, span });
                self.tell(name, &self.symbols[set].name.clone(), span);
            }
            Some(Source::Tuples(set, place, others)) => {
                self.symbols[set].used = true;
                let mut pattern = Vec::with_capacity(others.len());
                let mut known = Vec::new();
                for (i, other) in others.iter().enumerate() {
                    known.push(if i == place { None } else { Some(self.index(other)?.0) });
                }
                let root = self.set_root(set, place);
                let slot = self.bind(name, root);
                for node in known {
                    pattern.push(node.map_or(Pattern::Bind(slot), Pattern::Match));
                }
                let node = Node::Symbol(set, Vec::new(), span);
                work.steps.push(Step::Over { pattern, set: node, span });
                self.tell(name, &self.symbols[set].name.clone(), span);
            }
        }
        Some(())
    }

    /// `i = o_p` with an element on the right: the set from which that is.
    fn set_of_equal(&mut self, name: &str, work: &Quantifier<'_>) -> Option<Expression> {
        let is = |e: &Expression| matches!(&e.kind, Kind::Name(n) if n.text == name && n.indices.is_empty());
        let other = work.deferred.iter().find_map(|condition| {
            let Kind::Chain(first, links) = &condition.kind else { return None };
            let [(crate::syntax::Relation::Equal, last)] = &links[..] else { return None };
            match (is(first), is(last)) {
                (true, false) => Some(last.clone()),
                (false, true) => Some(first.as_ref().clone()),
                _ => None,
            }
        })?;
        let Kind::Name(element) = &other.kind else { return None };
        let Some(Global::Symbol(id)) = self.names.get(&element.text) else { return None };
        let crate::plan::Shape::Element(Root::Set(set)) = self.symbols[*id].shape else {
            return None;
        };
        let text = self.symbols[set].name.clone();
        let set = Name { text, indices: Vec::new(), superscript: None };
        Some(Expression { kind: Kind::Name(set), span: other.span })
    }

    fn set_root(&self, set: SymbolId, place: usize) -> Root {
        match &self.symbols[set].shape {
            crate::plan::Shape::Set(roots) => roots.get(place).copied().unwrap_or(Root::Unknown),
            _ => Root::Unknown,
        }
    }

    fn tell(&mut self, index: &str, set: &str, span: Span) {
        let _: Option<()> = self.report(message::inferred(index, set, span));
    }

    /// Every place where a name carries `index`.
    fn collect(&self, expression: &Expression, index: &str, sources: &mut Vec<Source>) {
        if let Kind::Name(name) = &expression.kind
            && let Some(source) = self.source(name, index)
            && !sources.contains(&source)
        {
            sources.push(source);
        }
        for child in super::usage::children(expression) {
            self.collect(child, index, sources);
        }
    }

    fn source(&self, name: &Name, index: &str) -> Option<Source> {
        let (roots, tuples) = match self.names.get(&name.text)? {
            Global::Symbol(id) => (&self.symbols[*id].roots, self.symbols[*id].tuples),
            Global::Variable(v) => (&self.variables[*v].roots, self.variables[*v].tuples),
        };
        let raised = usize::from(name.superscript.is_some());
        let mut written =
            self.letters_with(&name.indices, index, roots.len().saturating_sub(raised));
        written.extend(name.superscript.as_deref().cloned());
        let is_index = |e: &Expression| matches!(&e.kind, Kind::Name(n) if n.text == index && n.indices.is_empty());
        let place = written.iter().position(is_index)?;
        let known = |(i, e): (usize, &Expression)| i == place || self.expression_known(e);
        let others_known = written.iter().enumerate().all(known);
        Some(match (tuples, roots.get(place)) {
            (Some(set), _) if roots.len() == 1 => Source::Whole(set),
            (Some(set), _) if others_known && written.len() == roots.len() => {
                Source::Tuples(set, place, written)
            }
            (_, Some(Root::Set(set))) => Source::Whole(*set),
            _ => Source::Unknown,
        })
    }

    /// Subscripts with letters split, `index` counting as a name.
    fn letters_with(&self, written: &[Expression], index: &str, wanted: usize) -> Vec<Expression> {
        if written.len() >= wanted {
            return written.to_vec();
        }
        let split = |e: &Expression| match &e.kind {
            Kind::Name(n) if n.text.chars().count() == wanted && n.text.contains(index) => n
                .text
                .chars()
                .map(|c| Expression {
                    kind: Kind::Name(Name {
                        text: c.to_string(),
                        indices: Vec::new(),
                        superscript: None,
                    }),
                    span: e.span,
                })
                .collect(),
            _ => vec![e.clone()],
        };
        written.iter().flat_map(split).collect()
    }

    fn expression_known(&self, expression: &Expression) -> bool {
        let own = match &expression.kind {
            Kind::Name(name) => self.is_known(&name.text),
            _ => true,
        };
        own && super::usage::children(expression)
            .into_iter()
            .all(|child| self.expression_known(child))
    }
}
