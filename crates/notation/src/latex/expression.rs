//! Expressions in LaTeX, by how tightly they bind.

use std::collections::BTreeSet;
use std::fmt::Write as _;

use super::name;
use crate::lists::Place;
use crate::print;
use crate::syntax::{
    Additive, Big, Clause, Expression, Formulation, Function, Kind, Multiplicative, Name,
    NumberSet, Relation,
};

const ANY: u8 = 0;
const AND: u8 = 1;
const NOT: u8 = 2;
pub(crate) const RANGE: u8 = 4;
pub(crate) const SUM: u8 = 5;
pub(crate) const PRODUCT: u8 = 6;
pub(crate) const FACTOR: u8 = 7;
const POWER: u8 = 8;
pub(crate) const PRIMARY: u8 = 9;

/// Prints expressions of one formulation.
pub(super) struct Printer<'t> {
    whole: BTreeSet<&'t str>,
}

/// Signs around an expression, as tall as it where it holds a fraction or a sum.
fn fenced((open, close): (&str, &str), inner: &str) -> String {
    let tall = ["\\frac", "\\sum", "\\prod"].iter().any(|sign| inner.contains(sign));
    if tall {
        format!("\\left{open} {inner} \\right{close}")
    } else {
        format!("{open} {inner} {close}")
    }
}

impl<'t> Printer<'t> {
    pub(super) fn new(tree: &'t Formulation) -> Self {
        Self { whole: super::whole_names(tree) }
    }

    pub(super) fn expression(&self, expression: &Expression) -> String {
        self.at(expression, ANY)
    }

    /// What stands beside a relation, or alone as the objective.
    pub(super) fn operand(&self, operand: &Expression) -> String {
        self.at(operand, RANGE)
    }

    /// The operands to the left of a line.
    pub(super) fn operands(&self, items: &[Expression], place: Place, followed: bool) -> String {
        let printed = items.iter().map(|item| self.at(item, RANGE)).collect();
        place.apart(&[], items, printed, followed).join(", ")
    }

    /// A clause at the end of a line.
    pub(super) fn quantifier(&self, clause: &Clause, place: Place) -> String {
        let printed = |items: &[Expression]| items.iter().map(|item| self.at(item, ANY)).collect();
        place.clause(clause, &printed, " : ")
    }

    fn list(&self, items: &[Expression]) -> String {
        self.joined(items, ", ", ANY)
    }

    /// A relation with its right operand.
    pub(super) fn link(&self, relation: Relation, operand: &Expression) -> String {
        format!("{} {}", sign(relation), self.at(operand, RANGE))
    }

    /// A clause of a quantifier.
    fn clause(&self, clause: &Clause) -> String {
        let mut out = self.list(&clause.items);
        if !clause.such_that.is_empty() {
            let _ = write!(out, " : {}", self.list(&clause.such_that));
        }
        out
    }

    fn joined(&self, items: &[Expression], between: &str, least: u8) -> String {
        let printed: Vec<String> = items.iter().map(|item| self.at(item, least)).collect();
        printed.join(between)
    }

    /// The expression where one that binds at least as tightly as `least` is wanted.
    fn at(&self, expression: &Expression, least: u8) -> String {
        let text = self.plain(&expression.kind);
        if level(&expression.kind) < least { format!("({text})") } else { text }
    }

    fn plain(&self, kind: &Kind) -> String {
        match kind {
            Kind::Number(value) => print::number(value).replace('−', "-"),
            Kind::Infinity => "\\infty".to_owned(),
            Kind::EmptySet => "\\emptyset".to_owned(),
            Kind::NumberSet(set) => number_set(*set).to_owned(),
            Kind::Name(one) => self.name(one),
            Kind::Call(callee, arguments) => {
                format!("{}({})", self.name(callee), self.list(arguments))
            }
            Kind::Negative(inner) => format!("-{}", self.at(inner, PRODUCT)),
            Kind::Additive(first, rest) => self.additive(first, rest),
            Kind::Multiplicative(first, rest) => self.product(first, rest),
            Kind::Power(base, exponent) => {
                format!("{}^{{{}}}", self.base(base), self.at(exponent, SUM))
            }
            Kind::Big(big, under, body) => self.big(*big, under, body),
            Kind::Function(function, arguments) => self.call(*function, arguments),
            Kind::Chain(first, links) => self.chain(first, links),
            Kind::Parity(..) | Kind::Clique(..) | Kind::All(_) | Kind::Any(_) | Kind::Not(_) => {
                self.condition(kind)
            }
            Kind::Tuple(..) | Kind::Set(_) | Kind::Range(..) | Kind::Builder(..) => self.set(kind),
            Kind::Interval(from, to) => {
                format!("[{}, {}]", self.expression(from), self.expression(to))
            }
        }
    }

    fn condition(&self, kind: &Kind) -> String {
        match kind {
            Kind::Parity(inner, odd) => {
                let word = if *odd { "odd" } else { "even" };
                format!("{} \\text{{ {word}}}", self.at(inner, RANGE))
            }
            Kind::Clique(inner, edges) => {
                let (inner, edges) = (self.at(inner, RANGE), self.at(edges, RANGE));
                format!("{inner} \\text{{ is a clique in }} {edges}")
            }
            Kind::All(items) => self.joined(items, " \\land ", NOT),
            Kind::Any(items) => self.joined(items, " \\lor ", AND),
            Kind::Not(inner) => format!("\\lnot {}", self.at(inner, NOT)),
            _ => String::new(),
        }
    }

    fn set(&self, kind: &Kind) -> String {
        match kind {
            Kind::Tuple(items) => format!("({})", self.joined(items, ",", ANY)),
            Kind::Set(items) => format!("\\{{{}\\}}", self.list(items)),
            Kind::Range(from, to) => {
                let (from, to) = (self.at(from, SUM), self.at(to, SUM));
                format!("\\{{{from}, \\ldots, {to}\\}}")
            }
            Kind::Builder(member, conditions) => {
                format!("\\{{{} \\mid {}\\}}", self.expression(member), self.list(conditions))
            }
            _ => String::new(),
        }
    }

    fn chain(&self, first: &Expression, links: &[(Relation, Expression)]) -> String {
        let mut out = self.at(first, RANGE);
        for (relation, operand) in links {
            let _ = write!(out, " {}", self.link(*relation, operand));
        }
        out
    }

    /// `\sum_{i=1}^{n}` for one index over a range of numbers, else all of it below.
    fn big(&self, big: Big, under: &Clause, body: &Expression) -> String {
        let limits = match (&under.items[..], under.such_that.is_empty()) {
            ([only], true) => self.two_limits(only),
            _ => None,
        };
        let limits = limits.unwrap_or_else(|| format!("_{{{}}}", self.clause(under)));
        format!("{}{limits} {}", big_sign(big), self.at(body, PRODUCT))
    }

    fn two_limits(&self, item: &Expression) -> Option<String> {
        let Kind::Chain(index, links) = &item.kind else { return None };
        let [(Relation::In, range)] = &links[..] else { return None };
        let (Kind::Name(index), Kind::Range(from, to)) = (&index.kind, &range.kind) else {
            return None;
        };
        let (from, to) = (self.at(from, SUM), self.at(to, SUM));
        Some(format!("_{{{} = {from}}}^{{{to}}}", self.name(index)))
    }

    /// A name before `^` would take the exponent for a superscript of its own.
    fn base(&self, base: &Expression) -> String {
        match &base.kind {
            Kind::Name(_) => format!("({})", self.plain(&base.kind)),
            _ => self.at(base, PRIMARY),
        }
    }

    fn additive(&self, first: &Expression, rest: &[(Additive, Expression)]) -> String {
        let mut out = self.at(first, PRODUCT);
        for (operator, operand) in rest {
            let sign = match operator {
                Additive::Plus => "+",
                Additive::Minus => "-",
                Additive::Union => "\\cup",
                Additive::Difference => "\\setminus",
            };
            let _ = write!(out, " {sign} {}", self.at(operand, PRODUCT));
        }
        out
    }

    fn product(&self, first: &Expression, rest: &[(Multiplicative, Expression)]) -> String {
        if let [(Multiplicative::Over, under)] = rest {
            return format!("\\frac{{{}}}{{{}}}", self.at(first, SUM), self.at(under, SUM));
        }
        let mut out = self.factor(first, false);
        for (i, (operator, operand)) in rest.iter().enumerate() {
            let printed = self.factor(operand, i + 1 == rest.len());
            let operator = match operator {
                Multiplicative::Times if stands_close(operand, &printed) => "\\,",
                Multiplicative::Times => "\\cdot",
                Multiplicative::Over => "/",
                Multiplicative::Cross => "\\times",
                Multiplicative::Intersection => "\\cap",
                Multiplicative::Modulo => "\\bmod",
            };
            let _ = write!(out, " {operator} {printed}");
        }
        out
    }

    /// A factor; a sum may stand bare only at the end, for its body reaches that far.
    fn factor(&self, operand: &Expression, last: bool) -> String {
        match &operand.kind {
            Kind::Big(..) if last => self.plain(&operand.kind),
            _ => self.at(operand, FACTOR),
        }
    }

    fn call(&self, function: Function, arguments: &[Expression]) -> String {
        let one = || self.joined(arguments, ", ", SUM);
        match function {
            Function::Floor => fenced(("\\lfloor", "\\rfloor"), &one()),
            Function::Ceiling => fenced(("\\lceil", "\\rceil"), &one()),
            Function::Bars => fenced(("\\lvert", "\\rvert"), &one()),
            Function::Minimum => format!("\\min\\{{{}\\}}", self.list(arguments)),
            Function::Maximum => format!("\\max\\{{{}\\}}", self.list(arguments)),
        }
    }

    fn name(&self, name: &Name) -> String {
        let mut out = name::text(name.shown(), self.whole.contains(name.text.as_str()));
        if !name.indices.is_empty() {
            let _ = write!(out, "_{{{}}}", self.joined(&name.indices, ",", ANY));
        }
        if let Some(superscript) = &name.superscript {
            let _ = write!(out, "^{{{}}}", self.at(superscript, SUM));
        }
        out
    }
}

/// How tightly an expression binds.
pub(crate) fn level(kind: &Kind) -> u8 {
    match kind {
        Kind::Any(_) => ANY,
        Kind::All(_) => AND,
        Kind::Not(_) => NOT,
        Kind::Chain(..) | Kind::Parity(..) | Kind::Clique(..) => NOT + 1,
        Kind::Additive(..) => SUM,
        Kind::Multiplicative(_, rest) if matches!(&rest[..], [(Multiplicative::Over, _)]) => POWER,
        Kind::Multiplicative(..) | Kind::Negative(_) | Kind::Big(..) => PRODUCT,
        Kind::Power(..) => POWER,
        Kind::Name(name) if name.superscript.is_some() => POWER,
        _ => PRIMARY,
    }
}

/// Whether a factor needs no dot before it. A bracket of plain words at the end of a line could
/// be read as a label.
fn stands_close(operand: &Expression, printed: &str) -> bool {
    match operand.kind {
        Kind::Name(_) | Kind::Call(..) | Kind::Big(..) => true,
        Kind::Additive(..) => printed.contains(['_', '+', '\\']),
        _ => false,
    }
}

fn big_sign(big: Big) -> &'static str {
    match big {
        Big::Sum => "\\sum",
        Big::Product => "\\prod",
        Big::Least => "\\min",
        Big::Greatest => "\\max",
        Big::Union => "\\bigcup",
        Big::Intersection => "\\bigcap",
    }
}

fn number_set(set: NumberSet) -> &'static str {
    match set {
        NumberSet::Real => "\\mathbb{R}",
        NumberSet::RealNonNegative => "\\mathbb{R}_+",
        NumberSet::Integer => "\\mathbb{Z}",
        NumberSet::IntegerNonNegative => "\\mathbb{Z}_+",
        NumberSet::IntegerPositive => "\\mathbb{Z}_{>0}",
        NumberSet::Binary => "\\mathbb{B}",
    }
}

fn sign(relation: Relation) -> &'static str {
    match relation {
        Relation::Equal => "=",
        Relation::NotEqual => "\\neq",
        Relation::Less => "<",
        Relation::AtMost => "\\leq",
        Relation::Greater => ">",
        Relation::AtLeast => "\\geq",
        Relation::In => "\\in",
        Relation::NotIn => "\\notin",
        Relation::Subset => "\\subset",
        Relation::SubsetOrEqual => "\\subseteq",
    }
}
