//! The printer to Unicode text: the inverse of the parser. What it prints reads back as the
//! same tree.

use std::fmt::Write as _;

use dashu_int::{IBig, UBig};
use model::Number;

use crate::lex::prose::is_sentence;
use crate::lex::token::Kind as Token;
use crate::lex::{is_word_pair, lex};
use crate::lists::Place;
use crate::syntax::{
    Additive, Big, Clause, Expression, Formulation, Function, Kind, Line, Multiplicative, Name,
    NumberSet, Relation,
};

/// The whole text, parts in their usual order. `O(tree)`.
#[must_use]
pub fn print(tree: &Formulation) -> String {
    let mut out = String::new();
    if let Some(title) = &tree.title {
        let _ = write!(out, "{}\n\n", no_comment(title));
    }
    part(&mut out, "data", &tree.data);
    part(&mut out, "definitions", &tree.definitions);
    if let Some(objective) = &tree.objective {
        let sense = if objective.maximise { "maximise" } else { "minimise" };
        let _ = writeln!(out, "{sense}\n  {}", no_part(at(&objective.expression, RANGE)));
    }
    part(&mut out, "subject to", &tree.statements);
    out
}

fn part(out: &mut String, word: &str, lines: &[Line]) {
    if lines.is_empty() {
        return;
    }
    let _ = writeln!(out, "{word}");
    for (i, one) in lines.iter().enumerate() {
        let place = if word == "subject to" { Place::Statement } else { Place::Described };
        let printed = no_part(line(one, place, word == "data"));
        // a line that begins with an operator would go on with the one before
        if i > 0 && printed.starts_with(['−', '¬']) {
            out.push('\n');
        }
        let _ = writeln!(out, "  {printed}");
    }
}

/// A title that begins with the sign of a comment stands behind a backslash.
pub(crate) fn no_comment(title: &str) -> String {
    if title.starts_with(['#', '%']) { format!("\\{title}") } else { title.to_owned() }
}

/// A line whose first name would open a part, with that name as TeX sets it.
fn no_part(printed: String) -> String {
    let tokens = lex(&printed, 0);
    match tokens.first() {
        Some(first)
            if matches!(first.kind, Token::Data | Token::Definitions)
                || first.kind == Token::Word && is_sentence(&printed) =>
        {
            let (word, rest) = printed.split_at(first.span.end as usize);
            format!("\\mathit{{{word}}}{rest}")
        }
        _ => printed,
    }
}

/// One line with its quantifier, label and remark; `wide` says that two spaces begin a remark.
fn line(line: &Line, place: Place, wide: bool) -> String {
    let left = line.left.iter().map(|one| at(one, RANGE)).collect();
    let mut out = place.apart(&[], &line.left, left, !line.links.is_empty()).join(", ");
    for (relation, operand) in &line.links {
        let _ = write!(out, " {} {}", sign(*relation), at(operand, RANGE));
    }
    for one in &line.clauses {
        let _ = write!(out, "  ∀ {}", quantifier(one, place));
    }
    if let Some(label) = &line.label {
        let _ = write!(out, "  \\tag{{{}}}", label.text);
    }
    if let Some(remark) = &line.remark {
        let printed = remark_text(&out, remark, wide);
        out.push_str(&printed);
    }
    out
}

/// A remark in a spelling that reads back as one.
fn remark_text(before: &str, remark: &str, wide: bool) -> String {
    let word = lex(remark, 0).first().is_some_and(|t| t.kind == Token::Word && t.span.start == 0);
    let plain = wide
        && word
        && !is_word_pair(before, remark)
        && !remark.contains(['#', '%', '\\', '$', '\'']);
    if plain { format!("  {remark}") } else { format!("  {}", crate::latex::remark(remark)) }
}

fn quantifier(clause: &Clause, place: Place) -> String {
    let printed = |items: &[Expression]| items.iter().map(expression).collect();
    place.clause(clause, &printed, " : ")
}

/// A clause of a quantifier: `(i,j) ∈ A : i ≠ r`.
#[must_use]
pub fn clause(clause: &Clause) -> String {
    let mut out = list(&clause.items);
    if !clause.such_that.is_empty() {
        let _ = write!(out, " : {}", list(&clause.such_that));
    }
    out
}

/// An expression.
#[must_use]
pub fn expression(expression: &Expression) -> String {
    at(expression, ANY)
}

fn list(items: &[Expression]) -> String {
    let printed: Vec<String> = items.iter().map(expression).collect();
    printed.join(", ")
}

/// Indices stand close together: `x_{i,j}`.
fn indices(items: &[Expression]) -> String {
    let printed: Vec<String> = items.iter().map(expression).collect();
    printed.join(",")
}

const ANY: u8 = 0;
const AND: u8 = 1;
const NOT: u8 = 2;
const RANGE: u8 = 4;
const SUM: u8 = 5;
const PRODUCT: u8 = 6;
const FACTOR: u8 = 7;
const PRIMARY: u8 = 9;

/// How tightly an expression binds.
fn level(kind: &Kind) -> u8 {
    match kind {
        Kind::Any(_) => ANY,
        Kind::All(_) => AND,
        Kind::Not(_) => NOT,
        Kind::Chain(..) | Kind::Parity(..) | Kind::Clique(..) => NOT + 1,
        Kind::Additive(..) => SUM,
        Kind::Multiplicative(..) | Kind::Negative(_) | Kind::Big(..) => PRODUCT,
        Kind::Power(..) => FACTOR + 1,
        Kind::Name(name) if name.superscript.is_some() => FACTOR + 1,
        _ => PRIMARY,
    }
}

/// The expression where one that binds at least as tightly as `least` is wanted.
fn at(expression: &Expression, least: u8) -> String {
    let text = plain(&expression.kind);
    if level(&expression.kind) < least { format!("({text})") } else { text }
}

fn plain(kind: &Kind) -> String {
    match kind {
        Kind::Number(value) => number(value),
        Kind::Infinity => "∞".to_owned(),
        Kind::Name(one) => name(one),
        Kind::Call(callee, arguments) => format!("{}({})", name(callee), list(arguments)),
        Kind::Negative(inner) => format!("−{}", at(inner, PRODUCT)),
        Kind::Additive(first, rest) => additive(first, rest),
        Kind::Multiplicative(first, rest) => product(first, rest),
        Kind::Power(base, exponent) => format!("{}^{{{}}}", base_of_power(base), at(exponent, SUM)),
        Kind::Big(big, under, body) => {
            format!("{}_{{{}}} {}", big_sign(*big), clause(under), at(body, PRODUCT))
        }
        Kind::Function(function, arguments) => call(*function, arguments),
        Kind::Tuple(items) => format!("({})", indices(items)),
        Kind::Set(items) => format!("{{{}}}", list(items)),
        Kind::Range(from, to) => format!("{{{}..{}}}", at(from, SUM), at(to, SUM)),
        Kind::Builder(member, conditions) => {
            format!("{{{} : {}}}", expression(member), list(conditions))
        }
        Kind::Interval(from, to) => format!("[{}, {}]", expression(from), expression(to)),
        Kind::EmptySet => "∅".to_owned(),
        Kind::NumberSet(set) => number_set(*set).to_owned(),
        Kind::Chain(first, links) => chain(first, links),
        Kind::Parity(inner, odd) => {
            format!("{} {}", at(inner, RANGE), if *odd { "odd" } else { "even" })
        }
        Kind::Clique(inner, edges) => {
            format!("{} clique in {}", at(inner, RANGE), at(edges, RANGE))
        }
        Kind::All(items) => joined(items, " ∧ ", NOT),
        Kind::Any(items) => joined(items, " ∨ ", AND),
        Kind::Not(inner) => format!("¬{}", at(inner, NOT)),
    }
}

fn joined(items: &[Expression], between: &str, least: u8) -> String {
    let printed: Vec<String> = items.iter().map(|item| at(item, least)).collect();
    printed.join(between)
}

fn chain(first: &Expression, links: &[(Relation, Expression)]) -> String {
    let mut out = at(first, RANGE);
    for (relation, operand) in links {
        let _ = write!(out, " {} {}", sign(*relation), at(operand, RANGE));
    }
    out
}

/// A name with a superscript before `^` would take the exponent for a second superscript.
fn base_of_power(base: &Expression) -> String {
    match &base.kind {
        Kind::Name(_) => format!("({})", plain(&base.kind)),
        _ => at(base, PRIMARY),
    }
}

fn additive(first: &Expression, rest: &[(Additive, Expression)]) -> String {
    let mut out = at(first, PRODUCT);
    for (operator, operand) in rest {
        let sign = match operator {
            Additive::Plus => '+',
            Additive::Minus => '−',
            Additive::Union => '∪',
            Additive::Difference => '∖',
        };
        let _ = write!(out, " {sign} {}", at(operand, PRODUCT));
    }
    out
}

fn product(first: &Expression, rest: &[(Multiplicative, Expression)]) -> String {
    let mut out = factor(first, rest.is_empty());
    for (i, (operator, operand)) in rest.iter().enumerate() {
        let printed = factor(operand, i + 1 == rest.len());
        let close = matches!(operand.kind, Kind::Name(_) | Kind::Call(..) | Kind::Big(..));
        let close = close && !is_word_pair(&out, &printed);
        let gap = if reads_as_a_label(&printed) { "" } else { " " };
        let _ = match operator {
            Multiplicative::Times if close => write!(out, " {printed}"),
            Multiplicative::Times => write!(out, " ·{gap}{printed}"),
            Multiplicative::Over => write!(out, " /{gap}{printed}"),
            Multiplicative::Cross => write!(out, " × {printed}"),
            Multiplicative::Intersection => write!(out, " ∩ {printed}"),
            Multiplicative::Modulo => write!(out, " mod {printed}"),
        };
    }
    out
}

/// Whether a factor in brackets would be taken for the label of its line behind white space:
/// `(ab cd)`.
fn reads_as_a_label(printed: &str) -> bool {
    let plain = |c: char| c.is_alphanumeric() || " -'.’/:,".contains(c);
    printed.strip_prefix('(').is_some_and(|rest| rest.trim_end_matches(')').chars().all(plain))
}

/// A factor; a sum may stand bare only at the end, for its body reaches that far.
fn factor(operand: &Expression, last: bool) -> String {
    match &operand.kind {
        Kind::Big(..) if last => plain(&operand.kind),
        _ => at(operand, FACTOR),
    }
}

fn call(function: Function, arguments: &[Expression]) -> String {
    let inner = list(arguments);
    match function {
        Function::Floor => format!("⌊{inner}⌋"),
        Function::Ceiling => format!("⌈{inner}⌉"),
        Function::Minimum => format!("min({inner})"),
        Function::Maximum => format!("max({inner})"),
        Function::Bars => format!("|{inner}|"),
    }
}

fn name(name: &Name) -> String {
    let mut out = name.shown().to_owned();
    if !name.indices.is_empty() {
        let _ = write!(out, "_{{{}}}", indices(&name.indices));
    }
    if let Some(superscript) = &name.superscript {
        let _ = write!(out, "^{{{}}}", at(superscript, SUM));
    }
    out
}

fn big_sign(big: Big) -> &'static str {
    match big {
        Big::Sum => "Σ",
        Big::Product => "∏",
        Big::Least => "min",
        Big::Greatest => "max",
        Big::Union => "⋃",
        Big::Intersection => "⋂",
    }
}

fn number_set(set: NumberSet) -> &'static str {
    match set {
        NumberSet::Real => "ℝ",
        NumberSet::RealNonNegative => "ℝ_+",
        NumberSet::Integer => "ℤ",
        NumberSet::IntegerNonNegative => "ℤ_+",
        NumberSet::IntegerPositive => "ℤ_{>0}",
        NumberSet::Binary => "𝔹",
    }
}

/// The sign of a relation.
#[must_use]
pub fn sign(relation: Relation) -> &'static str {
    match relation {
        Relation::Equal => "=",
        Relation::NotEqual => "≠",
        Relation::Less => "<",
        Relation::AtMost => "≤",
        Relation::Greater => ">",
        Relation::AtLeast => "≥",
        Relation::In => "∈",
        Relation::NotIn => "∉",
        Relation::Subset => "⊂",
        Relation::SubsetOrEqual => "⊆",
    }
}

/// A number as a decimal where it is one, else as a fraction.
#[must_use]
pub fn number(value: &Number) -> String {
    let bottom = value.denominator();
    if *bottom == UBig::ONE {
        return value.numerator().to_string().replace('-', "−");
    }
    let mut power = UBig::ONE;
    for digits in 1..=400_usize {
        power *= 10_u32;
        if &power % bottom == UBig::ZERO {
            let scaled: IBig = value.numerator() * IBig::from(&power / bottom);
            let negative = scaled < IBig::ZERO;
            let text = scaled.to_string();
            let text = format!("{:0>width$}", text.trim_start_matches('-'), width = digits + 1);
            let (whole, fraction) = text.split_at(text.len() - digits);
            return format!("{}{whole}.{fraction}", if negative { "−" } else { "" });
        }
        if digits > 4 && bottom % 2_u32 != 0 && bottom % 5_u32 != 0 {
            break;
        }
    }
    format!("{}/{bottom}", value.numerator().to_string().replace('-', "−"))
}
