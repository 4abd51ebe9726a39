//! Data and definitions: their names, shapes and index sets, each after those it needs.

use std::collections::BTreeSet;

use super::{Checker, Form, Global, usage};
use crate::diagnostic::{names as message, rows, shapes};
use crate::place::Span;
use crate::plan::{Node, Pattern, Root, Shape, Step, Symbol, SymbolId};
use crate::syntax::{Expression, Kind, Line, Multiplicative, Name, NumberSet, Relation};

/// A name that a line declares.
struct Declared<'t> {
    name: &'t Name,
    span: Span,
    line: &'t Line,
    /// The relations as seen from the name.
    links: Vec<(Relation, &'t Expression)>,
}

impl<'t> Checker<'t> {
    /// Declares everything; the order in which the symbols can be evaluated.
    pub(super) fn declarations(&mut self) -> Vec<SymbolId> {
        let tree = self.tree;
        let mut declared = Vec::new();
        for (lines, datum) in [(&tree.data, true), (&tree.definitions, false)] {
            for line in lines {
                self.names_of(line, datum, &mut declared);
            }
        }
        let order = self.sorted(&declared);
        let sets = usage::sets(tree);
        for &id in &order {
            let size = sets.get(declared[id].name.text.as_str()).copied();
            self.declare(id, &declared[id], size);
        }
        order
    }

    fn names_of(&mut self, line: &'t Line, datum: bool, declared: &mut Vec<Declared<'t>>) {
        if is_remark_on_a_label(line) {
            return;
        }
        // 0 ≤ c_{i,j} declares c as well
        let flipped = line.left.len() == 1 && !matches!(line.left[0].kind, Kind::Name(_));
        let (names, links) = match (flipped, line.links.first()) {
            (true, Some((relation, name))) if matches!(name.kind, Kind::Name(_)) => {
                let mut links = vec![(relation.turned(), &line.left[0])];
                links.extend(line.links[1..].iter().map(|(r, e)| (*r, e)));
                (vec![name], links)
            }
            _ => {
                // [e_i, l_i] declares both
                let ends = line.left.iter().flat_map(|e| match &e.kind {
                    Kind::Interval(a, b) => vec![a.as_ref(), b.as_ref()],
                    Kind::Tuple(items) => items.iter().collect(),
                    _ => vec![e],
                });
                (ends.collect(), line.links.iter().map(|(r, e)| (*r, e)).collect())
            }
        };
        for expression in names {
            let Kind::Name(name) = &expression.kind else {
                let _: Option<()> = self.report(message::not_a_name(expression.span));
                continue;
            };
            if let Some(Global::Symbol(first)) = self.names.get(&name.text) {
                let first = self.symbols[*first].span;
                let _: Option<()> = self.report(message::twice(&name.text, expression.span, first));
                continue;
            }
            let id = self.symbols.len();
            self.names.insert(name.text.clone(), Global::Symbol(id));
            let mut symbol = blank(&name.text, expression.span, datum);
            // until it is declared, which it never is when it is defined by itself
            let raised = usize::from(name.superscript.is_some());
            symbol.roots = vec![Root::Unknown; name.indices.len() + raised];
            self.symbols.push(symbol);
            declared.push(Declared { name, span: expression.span, line, links: links.clone() });
        }
    }

    /// Depth-first order, without recursion; what is defined by itself is reported.
    fn sorted(&mut self, declared: &[Declared<'t>]) -> Vec<SymbolId> {
        let needs: Vec<Vec<SymbolId>> = declared.iter().map(|d| self.needs(d)).collect();
        let mut state = vec![0_u8; declared.len()];
        let mut order = Vec::with_capacity(declared.len());
        for start in 0..declared.len() {
            let mut stack = vec![(start, 0)];
            while let Some((id, next)) = stack.pop() {
                if state[id] == 2 {
                    continue;
                }
                state[id] = 1;
                let Some(&need) = needs[id].get(next) else {
                    state[id] = 2;
                    order.push(id);
                    continue;
                };
                stack.push((id, next + 1));
                match state[need] {
                    0 => stack.push((need, 0)),
                    1 => {
                        let (name, span) = (&declared[id].name.text, declared[id].span);
                        let _: Option<()> = self.report(message::circular(name, span));
                    }
                    _ => {}
                }
            }
        }
        order
    }

    /// The symbols that a declaration mentions. A word that is no name may be several.
    fn needs(&self, declared: &Declared<'t>) -> Vec<SymbolId> {
        let mut words = BTreeSet::new();
        for expression in usage::of_line(declared.line) {
            usage::words(expression, &mut words);
        }
        let mut found = BTreeSet::new();
        for word in words {
            if let Some(Global::Symbol(id)) = self.names.get(word) {
                found.insert(*id);
                continue;
            }
            let known = |name: &str| self.names.contains_key(name) || name.chars().count() == 1;
            for reading in super::names::splits(word, &known) {
                for piece in reading {
                    if let super::names::Piece::Name(name) = piece
                        && let Some(Global::Symbol(id)) = self.names.get(&name)
                    {
                        found.insert(*id);
                    }
                }
            }
        }
        let left = declared.line.left.iter().flat_map(|e| match &e.kind {
            Kind::Interval(a, b) => vec![a.as_ref(), b.as_ref()],
            Kind::Tuple(items) => items.iter().collect(),
            _ => vec![e],
        });
        let several = left.clone().count() > 1;
        let own: Vec<SymbolId> = left
            .chain(declared.line.links.first().map(|(_, e)| e))
            .filter_map(|e| match &e.kind {
                Kind::Name(name) if name.text == declared.name.text || several => {
                    match self.names.get(&name.text) {
                        Some(Global::Symbol(id)) => Some(*id),
                        _ => None,
                    }
                }
                _ => None,
            })
            .collect();
        // a name counts among its own needs only when it stands again on the right
        let again = declared.links.iter().any(|(_, e)| mentions(e, &declared.name.text));
        found
            .into_iter()
            .filter(|id| again && self.symbols[*id].name == declared.name.text || !own.contains(id))
            .collect()
    }

    fn declare(&mut self, id: SymbolId, declared: &Declared<'t>, used_as_set: Option<usize>) {
        self.fresh_line();
        let mut carriers: Vec<&Expression> = declared.links.iter().map(|(_, e)| *e).collect();
        carriers.extend(declared.name.indices.iter());
        let Some(steps) = self.quantify(&declared.line.clauses, &carriers, false) else { return };
        let mut written = self.spread(&declared.name.indices, usize::MAX);
        if let Some(raised) = &declared.name.superscript {
            written.extend(self.spread(std::slice::from_ref(raised), usize::MAX));
        }
        let mut indices = Vec::with_capacity(written.len());
        let mut roots = Vec::with_capacity(written.len());
        for index in &written {
            let Some((node, root)) = self.index(index) else { return };
            indices.push(node);
            roots.push(root);
        }
        self.symbols[id].tuples = whole_set(&steps, &indices);
        self.symbols[id].steps = steps;
        self.symbols[id].indices = indices;
        self.symbols[id].roots = roots;
        let shape = self.shape(id, declared, used_as_set);
        self.symbols[id].shape = shape;
    }

    /// The shape that the relations give, else the one that the value has, else the use.
    fn shape(
        &mut self,
        id: SymbolId,
        declared: &Declared<'t>,
        used_as_set: Option<usize>,
    ) -> Shape {
        let mut shape = None;
        for (relation, operand) in &declared.links {
            let told = match relation {
                Relation::In => self.element_of(id, operand),
                Relation::Subset | Relation::SubsetOrEqual => self.contained_in(id, operand),
                Relation::Equal => self.valued(id, operand),
                Relation::AtMost | Relation::AtLeast | Relation::Less | Relation::Greater => {
                    if let Some(node) = self.data(operand, "a condition on data") {
                        self.symbols[id].range.push((*relation, node));
                    }
                    Some(Shape::Number)
                }
                Relation::NotEqual | Relation::NotIn => self.report(rows::relation(operand.span)),
            };
            shape = shape.or(told);
        }
        let datum = self.symbols[id].datum;
        if !datum && self.symbols[id].value.is_none() {
            let _: Option<()> =
                self.report(shapes::expected("“=” and a value", "none", declared.span));
        }
        let bare = declared.links.is_empty() && declared.name.indices.is_empty();
        match (shape, used_as_set) {
            (Some(shape), _) => shape,
            (None, Some(1)) if bare => Shape::Set(vec![Root::Set(id)]),
            (None, Some(size)) if bare => Shape::Set(vec![Root::Unknown; size]),
            _ => Shape::Number,
        }
    }

    /// `r ∈ V`, `Q ∈ ℤ_+`.
    fn element_of(&mut self, id: SymbolId, set: &Expression) -> Option<Shape> {
        if let Kind::NumberSet(numbers) = &set.kind {
            let (whole, least) = match numbers {
                NumberSet::Real => (false, None),
                NumberSet::RealNonNegative => (false, Some(0)),
                NumberSet::Integer => (true, None),
                NumberSet::IntegerNonNegative | NumberSet::Binary => (true, Some(0)),
                NumberSet::IntegerPositive => (true, Some(1)),
            };
            self.symbols[id].whole = whole;
            if let Some(least) = least {
                let node = Node::Number(model::Number::from(least));
                self.symbols[id].range.push((Relation::AtLeast, node));
            }
            if *numbers == NumberSet::Binary {
                self.symbols[id].range.push((Relation::AtMost, Node::Number(model::Number::ONE)));
            }
            return Some(Shape::Number);
        }
        let (node, roots) = self.set(set)?;
        let [root] = roots[..] else {
            return self.report(shapes::tuple_size(roots.len(), 1, set.span));
        };
        self.symbols[id].parent = Some(node);
        Some(Shape::Element(root))
    }

    /// `A ⊆ V × V`, `T ⊆ ℤ`.
    fn contained_in(&mut self, id: SymbolId, set: &Expression) -> Option<Shape> {
        if matches!(set.kind, Kind::NumberSet(_)) {
            return Some(Shape::Set(vec![Root::Integer]));
        }
        if let Kind::Multiplicative(first, rest) = &set.kind
            && rest.iter().all(|(operator, _)| *operator == Multiplicative::Cross)
            && rest.iter().map(|(_, e)| e).chain([first.as_ref()]).all(whole_numbers)
        {
            return Some(Shape::Set(vec![Root::Integer; rest.len() + 1]));
        }
        let (node, roots) = self.set(set)?;
        self.symbols[id].parent = Some(node);
        Some(Shape::Set(roots))
    }

    fn valued(&mut self, id: SymbolId, value: &Expression) -> Option<Shape> {
        let typed = self.expression(value)?;
        if let Some(variable) = typed.variable {
            return self.report(shapes::not_constant("a definition", variable));
        }
        let shape = match typed.form {
            Form::Number => Shape::Number,
            Form::Element(root) => Shape::Element(root),
            Form::Set(roots) => Shape::Set(roots),
            Form::Empty => Shape::Set(vec![Root::Unknown]),
            Form::Truth => {
                return self.report(shapes::expected(
                    "a number, a set or an element",
                    "a condition",
                    value.span,
                ));
            }
        };
        self.symbols[id].value = Some(typed.node);
        Some(shape)
    }
}

/// `ℤ`, `ℤ_+`.
fn whole_numbers(set: &Expression) -> bool {
    use NumberSet::{Integer, IntegerNonNegative, IntegerPositive};
    matches!(&set.kind, Kind::NumberSet(Integer | IntegerNonNegative | IntegerPositive))
}

/// `0 ∈ V` says that the instance has a label 0, and declares nothing; so does `0` alone.
fn is_remark_on_a_label(line: &Line) -> bool {
    let [only] = &line.left[..] else { return false };
    let member = line.links.iter().all(|(relation, _)| *relation == Relation::In);
    matches!(only.kind, Kind::Number(_)) && member
}

fn blank(name: &str, span: Span, datum: bool) -> Symbol {
    Symbol {
        name: name.to_owned(),
        span,
        datum,
        shape: Shape::Number,
        roots: Vec::new(),
        tuples: None,
        steps: Vec::new(),
        indices: Vec::new(),
        value: None,
        parent: None,
        range: Vec::new(),
        whole: false,
        used: false,
    }
}

/// The set when the indices are exactly its tuples.
pub(super) fn whole_set(steps: &[Step], indices: &[Node]) -> Option<SymbolId> {
    let [Step::Over { pattern, set: Node::Symbol(set, none, _), .. }] = steps else { return None };
    let same =
        |(p, n): (&Pattern, &Node)| matches!((p, n), (Pattern::Bind(a), Node::Slot(b)) if a == b);
    let all = pattern.len() == indices.len() && pattern.iter().zip(indices).all(same);
    (all && none.is_empty() && !indices.is_empty()).then_some(*set)
}

fn mentions(expression: &Expression, name: &str) -> bool {
    let own = matches!(&expression.kind, Kind::Name(n) if n.text == name);
    own || usage::children(expression).into_iter().any(|child| mentions(child, name))
}
