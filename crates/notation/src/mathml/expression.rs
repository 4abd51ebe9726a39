//! Expressions as MathML, by how tightly they bind.

use std::cell::Cell;
use std::collections::BTreeSet;

use super::element::{Element, Tag};
use super::name::{Decorated, decorated};
use crate::latex::{FACTOR, PRIMARY, PRODUCT, RANGE, SUM, level, whole_names};
use crate::print;
use crate::syntax::{
    Additive, Big, Clause, Expression, Formulation, Function, Kind, Multiplicative, Name,
    NumberSet, Relation,
};

const ANY: u8 = 0;
const AND: u8 = 1;
const NOT: u8 = 2;

/// How deep an expression is set; what lies deeper is an ellipsis.
pub(super) const DEPTH: u32 = 40;
/// Expressions set of one formulation; what follows is an ellipsis.
pub(super) const MOST: u32 = 6_000;
/// Letters under a sum from which on its conditions stand in a line of their own.
const WIDE: usize = 14;

/// Sets expressions of one formulation.
pub(super) struct Printer<'t> {
    whole: BTreeSet<&'t str>,
    /// Whether what is set is small: a subscript, or what stands under a sum.
    small: Cell<bool>,
    depth: Cell<u32>,
    left: Cell<u32>,
}

impl<'t> Printer<'t> {
    pub(super) fn new(tree: &'t Formulation) -> Self {
        let whole = whole_names(tree);
        Self { whole, small: Cell::new(false), depth: Cell::new(0), left: Cell::new(MOST) }
    }

    /// Whether there is room for more.
    pub(super) fn has_room(&self) -> bool {
        self.left.get() > 0
    }

    /// Ends a list with an ellipsis where there is no room for more of it.
    fn is_full(&self, out: &mut Vec<Element>) -> bool {
        let full = !self.has_room();
        if full {
            out.push(Element::words("…"));
        }
        full
    }

    pub(super) fn expression(&self, expression: &Expression) -> Element {
        self.at(expression, ANY)
    }

    pub(super) fn list(&self, items: &[Expression]) -> Vec<Element> {
        self.joined(items, ",", ANY)
    }

    /// A relation with its right operand.
    pub(super) fn link(&self, relation: Relation, operand: &Expression) -> [Element; 2] {
        [self.operator(print::sign(relation)), self.at(operand, RANGE)]
    }

    /// A clause of a quantifier.
    pub(super) fn clause(&self, clause: &Clause) -> Vec<Element> {
        let mut out = self.list(&clause.items);
        if !clause.such_that.is_empty() {
            out.extend(colon());
            out.extend(self.list(&clause.such_that));
        }
        out
    }

    pub(super) fn operator(&self, sign: &str) -> Element {
        Element::leaf(if self.small.get() { Tag::Tight } else { Tag::Operator }, sign)
    }

    /// Runs a rule for what is set small.
    fn small<V>(&self, rule: impl FnOnce() -> V) -> V {
        let before = self.small.replace(true);
        let out = rule();
        self.small.set(before);
        out
    }

    fn joined(&self, items: &[Expression], between: &str, least: u8) -> Vec<Element> {
        let mut out = Vec::with_capacity(2 * items.len());
        for (at, item) in items.iter().enumerate() {
            if at > 0 {
                out.push(self.operator(between));
            }
            if self.is_full(&mut out) {
                break;
            }
            out.push(self.at(item, least));
        }
        out
    }

    /// The expression where one that binds at least as tightly as `least` is wanted.
    fn at(&self, expression: &Expression, least: u8) -> Element {
        let (depth, left) = (self.depth.get(), self.left.get());
        if depth >= DEPTH || left == 0 {
            return Element::words("…");
        }
        self.depth.set(depth + 1);
        self.left.set(left - 1);
        let set = self.plain(&expression.kind);
        self.depth.set(depth);
        if level(&expression.kind) < least { bracketed("(", vec![set], ")") } else { set }
    }

    fn plain(&self, kind: &Kind) -> Element {
        match kind {
            Kind::Number(value) => number(&print::number(value)),
            Kind::Infinity => Element::leaf(Tag::Number, "∞"),
            Kind::EmptySet => Element::leaf(Tag::Number, "∅"),
            Kind::NumberSet(set) => number_set(*set),
            Kind::Name(one) => self.name(one),
            Kind::Call(callee, arguments) => {
                Element::row(vec![self.name(callee), bracketed("(", self.list(arguments), ")")])
            }
            Kind::Negative(inner) => {
                Element::row(vec![self.operator("−"), self.at(inner, PRODUCT)])
            }
            Kind::Additive(first, rest) => self.additive(first, rest),
            Kind::Multiplicative(first, rest) => self.product(first, rest),
            Kind::Power(base, exponent) => {
                let base = self.base(base);
                base.sup(self.small(|| self.at(exponent, SUM)))
            }
            Kind::Big(big, under, body) => self.big(*big, under, body),
            Kind::Function(function, arguments) => self.call(*function, arguments),
            Kind::Chain(first, links) => {
                let mut out = vec![self.at(first, RANGE)];
                out.extend(links.iter().flat_map(|(sign, operand)| self.link(*sign, operand)));
                Element::row(out)
            }
            Kind::Tuple(items) => bracketed("(", self.list(items), ")"),
            Kind::Interval(from, to) => {
                let ends = [self.expression(from), self.operator(","), self.expression(to)];
                bracketed("[", ends.into(), "]")
            }
            Kind::Set(_) | Kind::Range(..) | Kind::Builder(..) => self.set(kind),
            _ => self.condition(kind),
        }
    }

    fn condition(&self, kind: &Kind) -> Element {
        Element::row(match kind {
            Kind::Parity(inner, odd) => {
                let word = if *odd { " odd" } else { " even" };
                vec![self.at(inner, RANGE), Element::words(word)]
            }
            Kind::Clique(inner, edges) => {
                let (inner, edges) = (self.at(inner, RANGE), self.at(edges, RANGE));
                vec![inner, Element::words(" clique in "), edges]
            }
            Kind::All(items) => self.joined(items, "∧", NOT),
            Kind::Any(items) => self.joined(items, "∨", AND),
            Kind::Not(inner) => vec![self.operator("¬"), self.at(inner, NOT)],
            _ => Vec::new(),
        })
    }

    fn set(&self, kind: &Kind) -> Element {
        let inner = match kind {
            Kind::Set(items) => self.list(items),
            Kind::Range(from, to) => {
                let (from, to) = (self.at(from, SUM), self.at(to, SUM));
                let comma = || self.operator(",");
                vec![from, comma(), Element::name("…"), comma(), to]
            }
            Kind::Builder(member, conditions) => {
                let mut inner = vec![self.expression(member)];
                inner.extend(colon());
                inner.extend(self.list(conditions));
                inner
            }
            _ => Vec::new(),
        };
        bracketed("{", inner, "}")
    }

    /// A sum over one index from a number to another has both as limits, else all of it stands
    /// below.
    fn big(&self, big: Big, under: &Clause, body: &Expression) -> Element {
        let (sign, tag) = match big {
            Big::Sum => ("∑", Tag::Operator),
            Big::Product => ("∏", Tag::Operator),
            Big::Least => ("min", Tag::Identifier),
            Big::Greatest => ("max", Tag::Identifier),
            Big::Union => ("⋃", Tag::Operator),
            Big::Intersection => ("⋂", Tag::Operator),
        };
        let sign = Element::leaf(tag, sign);
        let limits = match (&under.items[..], under.such_that.is_empty()) {
            ([only], true) => self.two_limits(only),
            _ => None,
        };
        let sign = match limits {
            Some([from, to]) => Element::of(Tag::UnderOver, vec![sign, from, to]),
            None => Element::of(Tag::Under, vec![sign, self.small(|| self.below(under))]),
        };
        let thin = (tag == Tag::Identifier).then(|| Element::leaf(Tag::Thin, ""));
        let parts = [Some(sign), thin, Some(self.at(body, PRODUCT))];
        Element::row(parts.into_iter().flatten().collect())
    }

    fn two_limits(&self, item: &Expression) -> Option<[Element; 2]> {
        let Kind::Chain(index, links) = &item.kind else { return None };
        let [(Relation::In, range)] = &links[..] else { return None };
        let (Kind::Name(index), Kind::Range(from, to)) = (&index.kind, &range.kind) else {
            return None;
        };
        Some(self.small(|| {
            let from = vec![self.name(index), self.operator("="), self.at(from, SUM)];
            [Element::row(from), self.at(to, SUM)]
        }))
    }

    /// What stands under a sum, in two lines where it is wide: the members, then what they must
    /// satisfy; a bare index takes its first condition, which says what it runs over, along.
    fn below(&self, under: &Clause) -> Element {
        let bare = under.items.iter().all(|item| matches!(item.kind, Kind::Name(_)));
        let along = usize::from(bare).min(under.such_that.len());
        let (first, second) = under.such_that.split_at(along);
        let mut upper = self.list(&under.items);
        if !under.items.is_empty() && !under.such_that.is_empty() {
            upper.push(self.operator(":"));
        }
        upper.extend(self.list(first));
        if !first.is_empty() && !second.is_empty() {
            upper.push(self.operator(","));
        }
        let lower = self.list(second);
        let letters: usize = upper.iter().chain(&lower).map(Element::letters).sum();
        if lower.is_empty() || letters < WIDE {
            upper.extend(lower);
            return Element::row(upper);
        }
        let line = |inner: Vec<Element>| {
            Element::of(Tag::TableRow, vec![Element::of(Tag::Cell, vec![Element::row(inner)])])
        };
        Element::of(Tag::Table, vec![line(upper), line(lower)])
    }

    fn base(&self, base: &Expression) -> Element {
        match &base.kind {
            Kind::Name(name) if name.superscript.is_some() => {
                bracketed("(", vec![self.name(name)], ")")
            }
            _ => self.at(base, PRIMARY),
        }
    }

    fn additive(&self, first: &Expression, rest: &[(Additive, Expression)]) -> Element {
        let mut out = vec![self.at(first, PRODUCT)];
        for (operator, operand) in rest {
            out.push(self.operator(match operator {
                Additive::Plus => "+",
                Additive::Minus => "−",
                Additive::Union => "∪",
                Additive::Difference => "∖",
            }));
            if self.is_full(&mut out) {
                break;
            }
            out.push(self.at(operand, PRODUCT));
        }
        Element::row(out)
    }

    fn product(&self, first: &Expression, rest: &[(Multiplicative, Expression)]) -> Element {
        if let [(Multiplicative::Over, under)] = rest {
            let parts = vec![self.at(first, SUM), self.at(under, SUM)];
            return Element::of(Tag::Fraction, parts);
        }
        let mut out = vec![self.factor(first, false)];
        let mut before = first;
        for (i, (operator, operand)) in rest.iter().enumerate() {
            out.push(match operator {
                Multiplicative::Times => self.times(before, operand),
                Multiplicative::Over => self.operator("/"),
                Multiplicative::Cross => self.operator("×"),
                Multiplicative::Intersection => self.operator("∩"),
                Multiplicative::Modulo => self.operator("mod"),
            });
            if self.is_full(&mut out) {
                break;
            }
            out.push(self.factor(operand, i + 1 == rest.len()));
            before = operand;
        }
        Element::row(out)
    }

    /// What stands between two factors: a dot before a number, a little space beside words and
    /// sums, else nothing that is seen.
    fn times(&self, before: &Expression, after: &Expression) -> Element {
        let spaced = |one: &Expression| match &one.kind {
            Kind::Name(name) | Kind::Call(name, _) => {
                let word = name.text.split(['_', '^']).next().unwrap_or("");
                let letters = word.chars().filter(|c| c.is_alphabetic()).count();
                !word.starts_with('\\') && letters > 1
            }
            Kind::Big(..) => true,
            _ => false,
        };
        if matches!(after.kind, Kind::Number(_)) {
            self.operator("⋅")
        } else if spaced(before) || spaced(after) {
            Element::leaf(Tag::Thin, "")
        } else {
            Element::leaf(Tag::Tight, "\u{2062}")
        }
    }

    /// A factor; a sum may stand bare only at the end, for its body reaches that far.
    fn factor(&self, operand: &Expression, last: bool) -> Element {
        let bare = last && matches!(operand.kind, Kind::Big(..));
        self.at(operand, if bare { PRODUCT } else { FACTOR })
    }

    fn call(&self, function: Function, arguments: &[Expression]) -> Element {
        let inner = self.list(arguments);
        match function {
            Function::Floor => bracketed("⌊", inner, "⌋"),
            Function::Ceiling => bracketed("⌈", inner, "⌉"),
            Function::Bars => bracketed("|", inner, "|"),
            Function::Minimum | Function::Maximum => {
                let word = if function == Function::Minimum { "min" } else { "max" };
                Element::row(vec![Element::name(word), bracketed("(", inner, ")")])
            }
        }
    }

    fn name(&self, name: &Name) -> Element {
        let whole = self.whole.contains(name.text.as_str());
        let Decorated { base, below, above } = decorated(name.shown(), whole);
        let mut under: Vec<Element> = below.into_iter().collect();
        if !name.indices.is_empty() {
            if !under.is_empty() {
                under.push(Element::leaf(Tag::Tight, ","));
            }
            under.extend(self.small(|| self.list(&name.indices)));
        }
        let mut over: Vec<Element> = above.into_iter().collect();
        over.extend(name.superscript.as_ref().map(|one| self.small(|| self.at(one, SUM))));
        match (under.is_empty(), over.is_empty()) {
            (true, true) => base,
            (false, true) => base.sub(Element::row(under)),
            (true, false) => base.sup(Element::row(over)),
            (false, false) => {
                Element::of(Tag::SubSup, vec![base, Element::row(under), Element::row(over)])
            }
        }
    }
}

/// A colon between what is chosen and its conditions, with space on both sides.
fn colon() -> [Element; 2] {
    [Element::leaf(Tag::Thin, ""), Element::leaf(Tag::Operator, ":")]
}

/// Something in brackets, which grow only with a fraction.
fn bracketed(open: &str, inner: Vec<Element>, close: &str) -> Element {
    let tall = inner.iter().any(Element::is_tall);
    let tag = if tall { Tag::Operator } else { Tag::Bracket };
    let mut parts = vec![Element::leaf(tag, open)];
    parts.extend(inner);
    parts.push(Element::leaf(tag, close));
    Element::of(Tag::Row, parts)
}

/// A number as it is printed: `−0.5`, `1/3`.
fn number(printed: &str) -> Element {
    let digits = |text: &str| Element::leaf(Tag::Number, text);
    let unsigned = printed.trim_start_matches('−');
    let value = match unsigned.split_once('/') {
        Some((above, below)) => Element::of(Tag::Fraction, vec![digits(above), digits(below)]),
        None => digits(unsigned),
    };
    if unsigned.len() == printed.len() {
        return value;
    }
    Element::row(vec![Element::leaf(Tag::Operator, "−"), value])
}

fn number_set(set: NumberSet) -> Element {
    let tight = |sign: &str| Element::leaf(Tag::Tight, sign);
    let (letter, below) = match set {
        NumberSet::Real => ("ℝ", None),
        NumberSet::RealNonNegative => ("ℝ", Some(tight("+"))),
        NumberSet::Integer => ("ℤ", None),
        NumberSet::IntegerNonNegative => ("ℤ", Some(tight("+"))),
        NumberSet::IntegerPositive => {
            let zero = Element::leaf(Tag::Number, "0");
            ("ℤ", Some(Element::row(vec![tight(">"), zero])))
        }
        NumberSet::Binary => ("𝔹", None),
    };
    let letter = Element::name(letter);
    match below {
        Some(below) => letter.sub(below),
        None => letter,
    }
}
