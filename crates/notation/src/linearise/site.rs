//! The place of what is not linear: the expression, the quantifiers that bind its indices, and the
//! way in which it counts.

use std::collections::BTreeSet;

use super::Words;
use crate::diagnostic::Diagnostic;
use crate::rewrite;
use crate::syntax::{
    Additive, Big, Clause, Expression, Formulation, Function, Kind, Multiplicative, Relation,
};

/// An expression that is not linear, in its surroundings.
pub(super) struct Site<'t> {
    pub(super) what: &'t Expression,
    /// The quantifiers that it needs, from the outside in, and the names that they bind.
    pub(super) clauses: Vec<Clause>,
    pub(super) indices: Vec<String>,
    /// `Some(true)` where the model only gains by it being small, `Some(false)` by it being large.
    pub(super) small: Option<bool>,
    labels: BTreeSet<&'t str>,
}

impl Site<'_> {
    /// A new name with the indices of the site.
    pub(super) fn indexed(&self, name: &str) -> Expression {
        rewrite::name(name, self.indices.iter().map(|i| rewrite::name(i, Vec::new())).collect())
    }

    /// Labels that the text does not use: `product 1`, `product 2`, …
    pub(super) fn labels(&self, word: &'static str) -> impl Iterator<Item = String> {
        let taken: Vec<String> = self.labels.iter().map(|label| (*label).to_owned()).collect();
        (1..).map(move |k| format!("{word} {k}")).filter(move |label| !taken.contains(label))
    }
}

/// What is walked down to a site.
struct Walk<'t, 'w> {
    words: &'w Words,
    place: std::ops::Range<usize>,
    product: bool,
    clauses: Vec<&'t Clause>,
    found: Option<(&'t Expression, Vec<&'t Clause>, Option<bool>)>,
}

/// The site that a diagnostic is about.
pub(super) fn find<'t>(
    tree: &'t Formulation,
    words: &Words,
    diagnostic: &Diagnostic,
) -> Option<Site<'t>> {
    let product = diagnostic.code == "shape.product";
    let place = diagnostic.span.clone();
    let mut walk = Walk { words, place, product, clauses: Vec::new(), found: None };
    if let Some(objective) = &tree.objective {
        walk.down(&objective.expression, Some(!objective.maximise));
    }
    for line in &tree.statements {
        walk.clauses = line.clauses.iter().collect();
        let operands: Vec<&Expression> =
            line.left.iter().chain(line.links.iter().map(|(_, operand)| operand)).collect();
        for (k, operand) in operands.iter().enumerate() {
            let before = k.checked_sub(1).and_then(|k| line.links.get(k)).map(|l| l.0.turned());
            let after = line.links.get(k).map(|link| link.0);
            let sides: Vec<Relation> = before.into_iter().chain(after).collect();
            let small = match sides[..] {
                [Relation::AtMost] => Some(true),
                [Relation::AtLeast] => Some(false),
                _ => None,
            };
            walk.down(operand, small);
        }
    }
    let (what, around, small) = walk.found?;
    let (clauses, indices) = needed(words, what, &around)?;
    let labels = tree.statements.iter().filter_map(|line| line.label.as_ref());
    let labels = labels.map(|label| label.text.as_str()).collect();
    Some(Site { what, clauses, indices, small, labels })
}

impl<'t> Walk<'t, '_> {
    fn down(&mut self, e: &'t Expression, small: Option<bool>) {
        let own = e.span.range();
        if own.start > self.place.start || own.end < self.place.end {
            return;
        }
        if self.fits(e) {
            self.found = Some((e, self.clauses.clone(), small));
        }
        match &e.kind {
            Kind::Negative(inner) => self.down(inner, small.map(|small| !small)),
            Kind::Additive(first, rest) => {
                self.down(first, small);
                for (operator, operand) in rest {
                    let turned = *operator == Additive::Minus;
                    self.down(operand, small.map(|small| small != turned));
                }
            }
            Kind::Multiplicative(first, rest) => {
                let factors: Vec<&Expression> =
                    std::iter::once(first.as_ref()).chain(rest.iter().map(|(_, f)| f)).collect();
                for (k, factor) in factors.iter().enumerate() {
                    let others = factors.iter().enumerate().filter(|(other, _)| *other != k);
                    let sign = others.map(|(_, other)| sign(other)).reduce(|a, b| Some(a? == b?));
                    let small =
                        small.zip(sign.unwrap_or(Some(true))).map(|(small, sign)| small == sign);
                    self.down(factor, small);
                }
            }
            Kind::Big(big, clause, body) => {
                self.clauses.push(clause);
                self.down(body, small.filter(|_| *big == Big::Sum));
                self.clauses.pop();
            }
            _ => {
                for child in crate::check::children(e) {
                    self.down(child, None);
                }
            }
        }
    }

    /// Whether this is what cannot stand in a linear model.
    fn fits(&self, e: &Expression) -> bool {
        let holds = |e: &Expression| self.words.hold(e);
        match &e.kind {
            Kind::Multiplicative(first, rest) if self.product => {
                let times = rest.iter().all(|(operator, _)| *operator == Multiplicative::Times);
                let factors = std::iter::once(first.as_ref()).chain(rest.iter().map(|(_, f)| f));
                times && factors.filter(|factor| holds(factor)).count() >= 2
            }
            Kind::Name(name) if self.product => {
                name.superscript.is_some() && self.words.variables.contains(&name.text)
            }
            Kind::Power(base, _) if self.product => holds(base),
            Kind::Function(Function::Bars | Function::Minimum | Function::Maximum, items)
                if !self.product =>
            {
                items.iter().any(holds)
            }
            Kind::Big(Big::Least | Big::Greatest, _, body) if !self.product => holds(body),
            _ => false,
        }
    }
}

/// The sign of a factor, where it is written.
fn sign(factor: &Expression) -> Option<bool> {
    rewrite::value(factor).map(|value| value > model::Number::ZERO)
}

/// The clauses that bind the names in an expression, and those that their conditions need.
fn needed(
    words: &Words,
    what: &Expression,
    around: &[&Clause],
) -> Option<(Vec<Clause>, Vec<String>)> {
    let mut bound: Vec<(usize, Vec<String>)> = Vec::new();
    let mut known: BTreeSet<String> = words.data.union(&words.variables).cloned().collect();
    for (k, clause) in around.iter().enumerate() {
        let mut names = Vec::new();
        clause.items.iter().chain(&clause.such_that).for_each(|e| bare(e, &mut names));
        names.retain(|name| !known.contains(name));
        known.extend(names.iter().cloned());
        bound.push((k, names));
    }
    let mut wanted = BTreeSet::new();
    super::words(what, &mut wanted);
    let mut kept: Vec<usize> = Vec::new();
    for (k, names) in bound.iter().rev() {
        // letters of a joined word are indices too
        let used =
            |name: &String| wanted.iter().any(|word| word == name || word.contains(name.as_str()));
        if names.iter().any(used) {
            if around[*k].items.iter().chain(&around[*k].such_that).any(over_subsets) {
                return None;
            }
            for e in around[*k].items.iter().chain(&around[*k].such_that) {
                super::words(e, &mut wanted);
            }
            kept.push(*k);
        }
    }
    kept.reverse();
    let indices = kept.iter().flat_map(|k| bound[*k].1.clone()).collect();
    Some((kept.into_iter().map(|k| around[k].clone()).collect(), indices))
}

/// Names without indices, each once, in order.
fn bare(expression: &Expression, found: &mut Vec<String>) {
    if let Kind::Name(name) = &expression.kind
        && name.indices.is_empty()
        && !found.contains(&name.text)
    {
        found.push(name.text.clone());
    }
    for child in crate::check::children(expression) {
        bare(child, found);
    }
}

fn over_subsets(item: &Expression) -> bool {
    matches!(&item.kind, Kind::Chain(_, links)
        if links.iter().any(|(r, _)| matches!(r, Relation::Subset | Relation::SubsetOrEqual)))
}
