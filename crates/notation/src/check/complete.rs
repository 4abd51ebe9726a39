//! What papers leave unsaid, filled in before the check: a set written `\mathcal{N}` that is
//! declared as `N`, a domain `x ≥ 0` of a variable with indices, the set over which an index
//! runs everywhere else.

use std::collections::{BTreeMap, BTreeSet};

use super::usage::{children, of_clause, words};
use crate::diagnostic::{Diagnostic, names as message};
use crate::parse::needed;
use crate::place::Span;
use crate::syntax::{Additive, Clause, Expression, Formulation, Kind, Line, Name, Relation};
use model::Number;

/// A tree with nothing left unsaid, and what was assumed.
pub(super) struct Completed {
    pub(super) tree: Formulation,
    /// The set of each index that runs over one set wherever it has one.
    pub(super) habits: BTreeMap<String, Expression>,
    pub(super) notes: Vec<Diagnostic>,
}

/// `O(tree · log names)`, and for each bare domain another walk.
pub(super) fn completed(tree: &Formulation) -> Completed {
    let mut out = Completed { tree: tree.clone(), habits: BTreeMap::new(), notes: Vec::new() };
    super::raised::join(&mut out.tree);
    let mut declared = declared(&out.tree);
    super::initial::part(&mut out.tree, &declared, &mut out.notes);
    declared = self::declared(&out.tree);
    let aliases = aliases(&out.tree, &declared, &mut out.notes);
    if !aliases.is_empty() {
        rename(&mut out.tree, &aliases);
    }
    out.statements(&declared);
    out.habits = habits(&out.tree, &declared);
    out.definitions(&declared);
    out
}

/// The names of data and definitions.
fn declared(tree: &Formulation) -> BTreeSet<String> {
    let mut found = BTreeSet::new();
    for line in tree.data.iter().chain(&tree.definitions) {
        let operands = line.left.iter().chain(line.links.first().map(|(_, e)| e));
        for expression in operands {
            if let Kind::Name(name) = &expression.kind {
                found.insert(name.text.clone());
            }
            if let Kind::Interval(a, b) = &expression.kind {
                for end in [a, b] {
                    if let Kind::Name(name) = &end.kind {
                        found.insert(name.text.clone());
                    }
                }
            }
        }
    }
    found
}

/// Every expression of the objective and the statements, with the quantifiers around it.
fn each<'t>(tree: &'t Formulation, visit: &mut dyn FnMut(&'t Expression, &[&'t Clause])) {
    if let Some(objective) = &tree.objective {
        walk(&objective.expression, &mut Vec::new(), visit);
    }
    for line in &tree.statements {
        let mut scope: Vec<&Clause> = line.clauses.iter().collect();
        for expression in super::usage::of_line(line) {
            walk(expression, &mut scope, visit);
        }
    }
}

fn walk<'t>(
    expression: &'t Expression,
    scope: &mut Vec<&'t Clause>,
    visit: &mut dyn FnMut(&'t Expression, &[&'t Clause]),
) {
    visit(expression, scope);
    let inside = matches!(&expression.kind, Kind::Big(..));
    if let Kind::Big(_, clause, _) = &expression.kind {
        scope.push(clause);
    }
    for child in children(expression) {
        walk(child, scope, visit);
    }
    if inside {
        scope.pop();
    }
}

/// `\mathcal F` where only `F` is declared; `\mathbf x` where `x` is what has indices.
fn aliases(
    tree: &Formulation,
    declared: &BTreeSet<String>,
    notes: &mut Vec<Diagnostic>,
) -> BTreeMap<String, String> {
    let mut found: BTreeMap<String, (String, Span)> = BTreeMap::new();
    let mut indexed = BTreeSet::new();
    let mut see = |expression: &Expression| {
        let (Kind::Name(name) | Kind::Call(name, _)) = &expression.kind else { return };
        if !name.indices.is_empty() {
            indexed.insert(name.text.clone());
        }
        if let Some(plain) = undecorated(&name.text)
            && !declared.contains(&name.text)
        {
            found.entry(name.text.clone()).or_insert_with(|| (plain, expression.span));
        }
    };
    each(tree, &mut |expression, _| see(expression));
    for line in tree.data.iter().chain(&tree.definitions) {
        let mut work = super::usage::of_line(line);
        while let Some(expression) = work.pop() {
            see(expression);
            work.extend(children(expression));
        }
    }
    found.retain(|text, (plain, _)| {
        declared.contains(plain) || indexed.contains(plain) && !indexed.contains(text)
    });
    let tell = |(text, (plain, span)): (String, (String, Span))| {
        notes.push(message::taken_for(&text, &plain, span));
        (text, plain)
    };
    found.into_iter().map(tell).collect()
}

/// The letters of a name whose decoration is only a way to set it.
fn undecorated(text: &str) -> Option<String> {
    let (command, rest) = text.strip_prefix('\\')?.split_at(text.find([' ', '{'])? - 1);
    let typeface =
        matches!(command, "mathcal" | "mathscr" | "mathbf" | "boldsymbol" | "bm" | "mathbb");
    let plain = rest.trim_matches([' ', '{', '}']);
    (typeface && !plain.is_empty()).then(|| plain.to_owned())
}

fn rename(tree: &mut Formulation, aliases: &BTreeMap<String, String>) {
    let mut rename = |name: &mut Name| {
        if let Some(plain) = aliases.get(&name.text) {
            name.text.clone_from(plain);
        }
    };
    each_name_of(tree, &mut rename);
}

/// Every name of a tree, to be changed.
pub(super) fn each_name_of(tree: &mut Formulation, rename: &mut dyn FnMut(&mut Name)) {
    if let Some(objective) = &mut tree.objective {
        crate::syntax::each_name(&mut objective.expression, rename);
    }
    let lines = tree.data.iter_mut().chain(&mut tree.definitions).chain(&mut tree.statements);
    for line in lines {
        let links = line.links.iter_mut().map(|(_, operand)| operand);
        let clauses = line.clauses.iter_mut();
        let clauses = clauses.flat_map(|c| c.items.iter_mut().chain(&mut c.such_that));
        for expression in line.left.iter_mut().chain(links).chain(clauses) {
            crate::syntax::each_name(expression, rename);
        }
    }
}

impl Completed {
    /// `N_i = {…}` without a quantifier holds for every `i` of the set over which `i` runs
    /// elsewhere.
    fn definitions(&mut self, declared: &BTreeSet<String>) {
        for line in &mut self.tree.definitions {
            let [left] = &line.left[..] else { continue };
            let Kind::Name(name) = &left.kind else { continue };
            let free = |index: &Expression| {
                bare_name(index).filter(|n| !declared.contains(&n.text)).map(|n| n.text.clone())
            };
            let known = |word: &String| self.habits.contains_key(word);
            let indices: Option<Vec<(String, Span)>> = name
                .indices
                .iter()
                .map(|index| Some(letters(free(index)?, index.span, &known)))
                .collect::<Option<Vec<_>>>()
                .map(|words| words.concat());
            let Some(indices) = indices.filter(|all| !all.is_empty()) else { continue };
            if !line.clauses.is_empty() || !indices.iter().all(|(index, _)| known(index)) {
                continue;
            }
            let mut items = Vec::new();
            for (text, span) in indices {
                let Some(set) = self.habits.get(&text).cloned() else { continue };
                let said = crate::print::expression(&set);
                self.notes.push(message::inferred(&text, &said, span));
                let links = vec![(Relation::In, Expression { span, ..set })];
                let own = Name { text, indices: Vec::new(), superscript: None };
                let index = Expression { kind: Kind::Name(own), span };
                items.push(Expression { kind: Kind::Chain(Box::new(index), links), span });
            }
            line.clauses.push(Clause { items, such_that: Vec::new(), span: left.span });
        }
    }

    /// Domain lines of variables without their indices become one for each way in which the
    /// variable is used.
    fn statements(&mut self, declared: &BTreeSet<String>) {
        let bare: BTreeSet<String> = self
            .tree
            .statements
            .iter()
            .filter(|line| is_bare_domain(line, declared))
            .flat_map(|line| line.left.iter().filter_map(bare_name).map(|n| n.text.clone()))
            .collect();
        if bare.is_empty() {
            return;
        }
        let uses = uses(&self.tree, &bare);
        let mut statements = Vec::with_capacity(self.tree.statements.len());
        for line in std::mem::take(&mut self.tree.statements) {
            if !is_bare_domain(&line, declared) {
                statements.push(line);
                continue;
            }
            for operand in &line.left {
                let found = bare_name(operand).and_then(|name| uses.get(&name.text));
                let own = Line { left: vec![operand.clone()], ..line.clone() };
                match found {
                    None => statements.push(own),
                    Some(found) => {
                        statements.extend(found.iter().map(|(left, clauses)| Line {
                            left: vec![left.clone()],
                            clauses: clauses.clone(),
                            ..own.clone()
                        }));
                    }
                }
            }
        }
        self.tree.statements = statements;
    }
}

/// The word `kt` as `k` and `t`, where these are indices and it is none.
fn letters(word: String, span: Span, known: &dyn Fn(&String) -> bool) -> Vec<(String, Span)> {
    let single: Vec<String> = word.chars().map(String::from).collect();
    if known(&word) || !single.iter().all(known) {
        return vec![(word, span)];
    }
    single.into_iter().map(|letter| (letter, span)).collect()
}

fn bare_name(expression: &Expression) -> Option<&Name> {
    match &expression.kind {
        Kind::Name(name) if name.indices.is_empty() && name.superscript.is_none() => Some(name),
        _ => None,
    }
}

/// `x, y ≥ 0`, `x ∈ {0,1}^n`: names without indices and constants.
fn is_bare_domain(line: &Line, declared: &BTreeSet<String>) -> bool {
    let own = |e: &Expression| bare_name(e).is_some_and(|n| !declared.contains(&n.text));
    let constant = |e: &Expression| match &e.kind {
        Kind::Number(_)
        | Kind::NumberSet(_)
        | Kind::Set(_)
        | Kind::Interval(..)
        | Kind::Range(..)
        | Kind::Infinity => true,
        Kind::Name(name) => declared.contains(&name.text) && name.indices.is_empty(),
        _ => false,
    };
    line.clauses.is_empty()
        && !line.links.is_empty()
        && line.left.iter().all(own)
        && line.links.iter().all(|(_, e)| constant(e))
}

type Uses = BTreeMap<String, Vec<(Expression, Vec<Clause>)>>;

/// Every way in which the names carry indices, with the part of the quantifiers around that
/// binds them.
fn uses(tree: &Formulation, names: &BTreeSet<String>) -> Uses {
    let mut found: Uses = BTreeMap::new();
    each(tree, &mut |expression, scope| {
        let Kind::Name(name) = &expression.kind else { return };
        if name.indices.is_empty() || !names.contains(&name.text) {
            return;
        }
        let line = Line {
            left: vec![expression.clone()],
            links: Vec::new(),
            clauses: Vec::new(),
            label: None,
            remark: None,
            span: expression.span,
        };
        let scope: Vec<Clause> = scope.iter().map(|c| (*c).clone()).collect();
        let clauses = needed(&line, &scope);
        let over_subsets = clauses.iter().flat_map(of_clause).any(|item| {
            matches!(&item.kind, Kind::Chain(_, links)
                if links.iter().any(|(r, _)| matches!(r, Relation::Subset | Relation::SubsetOrEqual)))
        });
        let known = found.entry(name.text.clone()).or_default();
        let one = (expression.clone(), clauses);
        if !over_subsets && known.len() < 64 && !known.contains(&one) {
            known.push(one);
        }
    });
    found.retain(|_, uses| !uses.is_empty());
    found
}

/// Of two sets the one that holds the other; none where neither is the other less some elements.
fn wider(one: Expression, other: &Expression) -> Option<Expression> {
    if let Some(range) = wider_range(&one, other) {
        return Some(range);
    }
    if one.kind == other.kind || without(other).is_some_and(|whole| whole.kind == one.kind) {
        return Some(one);
    }
    without(&one).is_some_and(|whole| whole.kind == other.kind).then(|| other.clone())
}

/// Of `{1..n}` and `{2..n−1}` the one that holds the other. Which of `{0..n}` and `{1..n}` is
/// meant, nobody can tell.
fn wider_range(one: &Expression, other: &Expression) -> Option<Expression> {
    let (Kind::Range(a, b), Kind::Range(c, d)) = (&one.kind, &other.kind) else { return None };
    let [(p, a), (q, b), (r, c), (s, d)] = [a, b, c, d].map(|e| shifted(e));
    let zero = |n: &Number| *n == Number::ZERO;
    let same = |x: Option<&Expression>, y: Option<&Expression>| match (x, y) {
        (Some(x), Some(y)) => x.kind == y.kind,
        (None, None) => true,
        _ => false,
    };
    if !same(p, r) || !same(q, s) || a != c && p.is_none() && (zero(&a) || zero(&c)) {
        return None;
    }
    match (a <= c && b >= d, c <= a && d >= b) {
        (true, _) => Some(one.clone()),
        (_, true) => Some(other.clone()),
        _ => None,
    }
}

/// An end of a range as what it begins with and a number: `n − 1` is `n` and −1.
fn shifted(end: &Expression) -> (Option<&Expression>, Number) {
    match &end.kind {
        Kind::Number(value) => (None, value.clone()),
        Kind::Additive(first, rest) => match (&rest[..], &first.kind) {
            ([(Additive::Plus, by)], Kind::Name(_)) if number(by).is_some() => {
                (Some(first), number(by).unwrap_or_default())
            }
            ([(Additive::Minus, by)], Kind::Name(_)) if number(by).is_some() => {
                (Some(first), Number::ZERO - number(by).unwrap_or_default())
            }
            _ => (Some(end), Number::ZERO),
        },
        _ => (Some(end), Number::ZERO),
    }
}

fn number(expression: &Expression) -> Option<Number> {
    match &expression.kind {
        Kind::Number(value) => Some(value.clone()),
        _ => None,
    }
}

/// `T` of `T ∖ S`.
fn without(set: &Expression) -> Option<&Expression> {
    match &set.kind {
        Kind::Additive(whole, less)
            if less.iter().all(|(sign, _)| *sign == Additive::Difference) =>
        {
            Some(whole)
        }
        _ => None,
    }
}

/// The one set over which an index runs wherever its set is said. Where it runs over all of a set
/// in one place and over `T ∖ {1}` in another, that is the whole set.
fn habits(tree: &Formulation, declared: &BTreeSet<String>) -> BTreeMap<String, Expression> {
    let mut found: BTreeMap<String, Option<Expression>> = BTreeMap::new();
    let mut see = |item: &Expression| {
        let Kind::Chain(first, links) = &item.kind else { return };
        let (Some(name), [(Relation::In, set)]) = (bare_name(first), &links[..]) else { return };
        let mut mentioned = BTreeSet::new();
        words(set, &mut mentioned);
        if !mentioned.iter().all(|word| declared.contains(*word)) {
            return;
        }
        let known = found.entry(name.text.clone()).or_insert_with(|| Some(set.clone()));
        *known = known.take().and_then(|one| wider(one, set));
    };
    let lines = tree.data.iter().chain(&tree.definitions).chain(&tree.statements);
    lines.flat_map(|line| &line.clauses).flat_map(of_clause).for_each(&mut see);
    each(tree, &mut |expression, _| {
        if let Kind::Big(_, clause, _) = &expression.kind {
            of_clause(clause).for_each(&mut see);
        }
    });
    found.into_iter().filter_map(|(name, set)| Some((name, set?))).collect()
}
