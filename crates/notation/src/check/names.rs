//! Looking names up, and splitting words that are several names side by side.

use super::{Bound, Checker, Form, Global, Typed};
use crate::diagnostic::names as message;
use crate::place::Span;
use crate::plan::{Node, Shape};
use crate::syntax::{Clause, Expression, Formulation, Kind, Name};
use model::Number;

/// The longest word that is split.
const SPLIT_LIMIT: usize = 20;

/// A piece of a word.
#[derive(Debug, Clone, PartialEq)]
pub(super) enum Piece {
    Name(String),
    Number(Number),
}

impl Checker<'_> {
    pub(super) fn local(&self, name: &str) -> Option<usize> {
        self.locals.iter().rposition(|l| l.name == name)
    }

    pub(super) fn is_known(&self, name: &str) -> bool {
        self.local(name).is_some() || self.names.contains_key(name)
    }

    /// The names that a word is made of; `None` (and a complaint) when there is no reading or
    /// more than one.
    pub(super) fn pieces(&mut self, word: &str, span: Span) -> Option<Vec<Piece>> {
        if self.is_known(word) {
            return Some(vec![Piece::Name(word.to_owned())]);
        }
        let known = |name: &str| self.is_known(name);
        let mut readings = splits(word, &known);
        if readings.len() > 1 {
            let shown = |pieces: &[Piece]| {
                let parts: Vec<String> = pieces.iter().map(text).collect();
                parts.join(" ")
            };
            let diagnostic =
                message::ambiguous(word, &shown(&readings[0]), &shown(&readings[1]), span);
            return self.report(diagnostic);
        }
        if let Some(only) = readings.pop() {
            return Some(only);
        }
        self.undeclared(word, span)
    }

    pub(super) fn undeclared<T>(&mut self, name: &str, span: Span) -> Option<T> {
        // once is enough, and a line that was not read may have declared it
        if !self.complained.insert(name.to_owned()) {
            return None;
        }
        let additions = self.additions(name);
        self.report(message::undeclared(name, span, additions))
    }

    fn additions(&self, name: &str) -> message::Additions {
        let after = |span: Span| Span { start: span.end, end: span.end };
        let used = first_use(self.tree, name);
        let shown =
            used.map_or_else(|| name.to_owned(), |(used, clauses)| with_clauses(used, &clauses));
        let variable = self.tree.ends.statements.map(after);
        let variable = variable.map(|at| (at, format!("\n  {}", not_negative(&shown))));
        let datum = self.tree.ends.data.map(|at| (after(at), format!("\n  {shown}")));
        message::Additions { variable, datum }
    }

    /// A name with its indices.
    pub(super) fn name(&mut self, name: &Name, span: Span) -> Option<Typed> {
        let mut pieces = self.pieces(&name.text, span)?;
        let last = match pieces.pop() {
            Some(Piece::Name(last)) => last,
            Some(Piece::Number(_)) | None => return self.undeclared(&name.text, span),
        };
        let last = Name { text: last, ..name.clone() };
        let mut factors: Vec<Typed> = Vec::with_capacity(pieces.len() + 1);
        for piece in pieces {
            factors.push(match piece {
                Piece::Number(value) => {
                    Typed { node: Node::Number(value), form: Form::Number, variable: None, span }
                }
                Piece::Name(text) => {
                    let bare = Name { text, indices: Vec::new(), superscript: None };
                    self.single(&bare, span)?
                }
            });
        }
        let last = self.single(&last, span)?;
        if factors.is_empty() {
            return Some(last);
        }
        factors.push(last);
        self.multiply(factors, span)
    }

    /// A name that is one name.
    fn single(&mut self, name: &Name, span: Span) -> Option<Typed> {
        let shadowed = !name.indices.is_empty() && self.names.contains_key(&name.text);
        if let Some(at) = self.local(&name.text).filter(|_| !shadowed) {
            self.lowest = self.lowest.min(at);
            let what = self.locals[at].what;
            if !name.indices.is_empty() {
                return self.report(crate::diagnostic::shapes::indices(
                    &name.text,
                    0,
                    name.indices.len(),
                    span,
                ));
            }
            let (node, form) = match what {
                Bound::Element(slot, root) => (Node::Slot(slot), Form::Element(root)),
                Bound::Subset(root) => {
                    self.subset_uses += 1;
                    (Node::Subset, Form::Set(vec![root]))
                }
                Bound::Tuple(_) => {
                    let wanted = "an element or a number";
                    return self
                        .report(crate::diagnostic::shapes::expected(wanted, "a tuple", span));
                }
            };
            let typed = Typed { node, form, variable: None, span };
            return self.raised(typed, name.superscript.as_deref());
        }
        let global = self.names.get(&name.text).copied();
        match global {
            Some(Global::Symbol(id)) => {
                self.symbols[id].used = true;
                let roots = self.symbols[id].roots.clone();
                let (nodes, power) = self.indices_of(name, &roots, span)?;
                let form = match &self.symbols[id].shape {
                    Shape::Number => Form::Number,
                    Shape::Element(root) => Form::Element(*root),
                    Shape::Set(roots) => Form::Set(roots.clone()),
                };
                let typed =
                    Typed { node: Node::Symbol(id, nodes, span), form, variable: None, span };
                self.raised(typed, power)
            }
            Some(Global::Variable(number)) => {
                self.variables[number].used = true;
                let roots = self.variables[number].roots.clone();
                let (nodes, power) = self.indices_of(name, &roots, span)?;
                let node = Node::Variable(number, nodes, span);
                let typed = Typed { node, form: Form::Number, variable: Some(span), span };
                self.raised(typed, power)
            }
            None => self.undeclared(&name.text, span),
        }
    }

    fn raised(&mut self, base: Typed, power: Option<&Expression>) -> Option<Typed> {
        match power {
            Some(exponent) => self.power(base, exponent),
            None => Some(base),
        }
    }
}

/// The first use of a name in the statements and the objective, with its indices and the
/// clauses around it.
fn first_use<'t>(tree: &'t Formulation, name: &str) -> Option<(&'t Expression, Vec<&'t Clause>)> {
    let lines = tree.statements.iter().flat_map(|line| {
        let links = line.links.iter().map(|(_, operand)| operand);
        line.left.iter().chain(links).map(|operand| (operand, line.clauses.iter().collect()))
    });
    let objective = tree.objective.iter().map(|o| (&o.expression, Vec::new()));
    lines.chain(objective).find_map(|(operand, clauses)| find_name(operand, name, clauses))
}

fn find_name<'t>(
    expression: &'t Expression,
    name: &str,
    mut clauses: Vec<&'t Clause>,
) -> Option<(&'t Expression, Vec<&'t Clause>)> {
    if let Kind::Name(found) = &expression.kind
        && found.text == name
    {
        return Some((expression, clauses));
    }
    if let Kind::Big(_, clause, _) = &expression.kind {
        clauses.push(clause);
    }
    let children = super::usage::children(expression);
    children.into_iter().find_map(|child| find_name(child, name, clauses.clone()))
}

/// `w_{i,j}  ∀ i ∈ V  ∀ j : (i,j) ∈ A`: a use as a declaration.
fn with_clauses(used: &Expression, clauses: &[&Clause]) -> String {
    let mut out = crate::print::expression(used);
    let Kind::Name(name) = &used.kind else { return out };
    let mentions = |clause: &Clause| {
        let mut items = clause.items.iter().chain(&clause.such_that);
        name.indices.iter().any(|index| items.any(|item| holds_word(item, index)))
    };
    for clause in clauses.iter().filter(|clause| mentions(clause)) {
        out += &format!("  ∀ {}", crate::print::clause(clause));
    }
    out
}

/// Whether a name of one letter or more in `index` stands somewhere in `item`.
fn holds_word(item: &Expression, index: &Expression) -> bool {
    let mut words = std::collections::BTreeSet::new();
    super::usage::words(item, &mut words);
    let mut wanted = std::collections::BTreeSet::new();
    super::usage::words(index, &mut wanted);
    wanted.iter().any(|w| words.contains(w) || words.iter().any(|word| w.contains(word)))
}

fn text(piece: &Piece) -> String {
    match piece {
        Piece::Name(name) => name.clone(),
        Piece::Number(value) => crate::print::number(value),
    }
}

/// At most two ways to read a word as known names and numbers side by side.
pub(super) fn splits(word: &str, known: &dyn Fn(&str) -> bool) -> Vec<Vec<Piece>> {
    let ends: Vec<usize> = word.char_indices().map(|(i, _)| i).chain([word.len()]).collect();
    let n = ends.len() - 1;
    if !(2..=SPLIT_LIMIT).contains(&n) {
        return Vec::new();
    }
    // readable[i]: the rest from character i can be read
    let mut readable = vec![false; n + 1];
    readable[n] = true;
    for i in (0..n).rev() {
        readable[i] = (i + 1..=n).any(|j| readable[j] && is_piece(word, ends[i], ends[j], known));
    }
    let mut found = Vec::new();
    let mut stack = vec![(0, Vec::new())];
    while let Some((i, pieces)) = stack.pop() {
        if i == n {
            found.push(pieces);
            if found.len() == 2 {
                break;
            }
            continue;
        }
        // shortest last, so that the longest first piece is tried first
        for j in i + 1..=n {
            if readable[i] && readable[j] && is_piece(word, ends[i], ends[j], known) {
                let piece = &word[ends[i]..ends[j]];
                let mut next: Vec<Piece> = pieces.clone();
                next.push(match crate::parse::number_text(piece) {
                    Some(value) => Piece::Number(value),
                    None => Piece::Name(piece.to_owned()),
                });
                stack.push((j, next));
            }
        }
    }
    found
}

fn is_piece(word: &str, from: usize, to: usize, known: &dyn Fn(&str) -> bool) -> bool {
    let piece = &word[from..to];
    let digits = |s: &str| s.chars().all(|c| c.is_ascii_digit());
    let beside = word[..from].ends_with(|c: char| c.is_ascii_digit())
        || word[to..].starts_with(|c: char| c.is_ascii_digit());
    known(piece) || digits(piece) && !beside
}

/// The domain line of a new variable: its name with indices, then its quantifier if it has one.
fn not_negative(shown: &str) -> String {
    match shown.split_once("  ∀") {
        Some((name, quantifier)) => format!("{name} ≥ 0  ∀{quantifier}"),
        None => format!("{shown} ≥ 0"),
    }
}
#[cfg(test)]
mod tests {
    use super::{Piece, splits};

    fn read(word: &str, names: &[&str]) -> usize {
        splits(word, &|name| names.contains(&name)).len()
    }

    #[test]
    fn words_split_into_names_in_one_way_or_are_ambiguous() {
        assert_eq!(read("cx", &["c", "x"]), 1);
        assert_eq!(read("i0", &["i"]), 1);
        assert_eq!(read("i12", &["i"]), 1, "twelve stays twelve");
        assert_eq!(read("abc", &["ab", "c", "a", "bc"]), 2);
        assert_eq!(read("zz", &["c"]), 0);
        let long = "a".repeat(1_000_000);
        assert_eq!(read(&long, &["a"]), 0, "no long word is split");
        let found = splits("cx", &|name| name == "c" || name == "x");
        assert_eq!(found[0], [Piece::Name("c".into()), Piece::Name("x".into())]);
    }
}
