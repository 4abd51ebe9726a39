//! The syntax tree: what a text says, with places, before anything is looked up.
//!
//! Sums, products, chains and lists are flat (a vector, not nested pairs), so that a long
//! text never makes a deep tree; what can nest is limited by the parser.

use crate::place::Span;

/// A whole text.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Formulation {
    /// The title line.
    pub title: Option<String>,
    /// What the instance must supply.
    pub data: Vec<Line>,
    /// Derived sets and numbers.
    pub definitions: Vec<Line>,
    /// The objective.
    pub objective: Option<Objective>,
    /// Constraints and domain lines.
    pub statements: Vec<Line>,
    /// Words of the lines that could not be read, so that nobody complains about them twice.
    pub unread: Vec<String>,
    /// The lines that could not be read.
    pub unread_lines: Vec<Unread>,
    /// Where new lines can be put.
    pub ends: Ends,
    /// Whether every line could be read.
    pub complete: bool,
}

/// A part of a text.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Section {
    /// `data`
    Data,
    /// `definitions`
    Definitions,
    /// `minimise`, `maximise`
    Objective,
    /// `subject to`
    Statements,
}

/// A line that could not be read.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Unread {
    /// The part it stands in.
    pub section: Section,
    /// The whole line.
    pub span: Span,
}

/// The byte after the last line of a part, for mends that add a line.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub struct Ends {
    /// After the last `data` line.
    pub data: Option<Span>,
    /// After the last statement.
    pub statements: Option<Span>,
}

/// The objective.
#[derive(Debug, Clone, PartialEq)]
pub struct Objective {
    /// Whether larger is better.
    pub maximise: bool,
    /// The linear expression.
    pub expression: Expression,
    /// The whole objective.
    pub span: Span,
}

/// A line: what stands to the left, its relations, its quantifier, its label.
#[derive(Debug, Clone, PartialEq)]
pub struct Line {
    /// The first operand, or several separated by commas (`x, y ≥ 0`).
    pub left: Vec<Expression>,
    /// The relations that follow, each with its right operand.
    pub links: Vec<(Relation, Expression)>,
    /// The quantifier's clauses (`∀ i ∈ I, j ∈ J : i ≠ j` is one).
    pub clauses: Vec<Clause>,
    /// The label of a constraint.
    pub label: Option<Label>,
    /// The remark of a data line.
    pub remark: Option<String>,
    /// The whole line.
    pub span: Span,
}

/// A label with its place.
#[derive(Debug, Clone, PartialEq)]
pub struct Label {
    /// The text in the brackets.
    pub text: String,
    /// Where.
    pub span: Span,
}

/// What quantifies: memberships and conditions.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Clause {
    /// Before the colon.
    pub items: Vec<Expression>,
    /// After the colon.
    pub such_that: Vec<Expression>,
    /// The whole clause.
    pub span: Span,
}

/// How two operands stand to each other.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Relation {
    /// `=`
    Equal,
    /// `≠`
    NotEqual,
    /// `<`
    Less,
    /// `≤`
    AtMost,
    /// `>`
    Greater,
    /// `≥`
    AtLeast,
    /// `∈`
    In,
    /// `∉`
    NotIn,
    /// `⊂` or `⊊`: a proper subset
    Subset,
    /// `⊆`
    SubsetOrEqual,
}

impl Relation {
    /// The relation as it reads from the right: `a < b` is `b > a`.
    #[must_use]
    pub fn turned(self) -> Self {
        match self {
            Self::Less => Self::Greater,
            Self::AtMost => Self::AtLeast,
            Self::Greater => Self::Less,
            Self::AtLeast => Self::AtMost,
            other => other,
        }
    }
}

/// An expression with its place.
#[derive(Debug, Clone, PartialEq)]
pub struct Expression {
    /// What it is.
    pub kind: Kind,
    /// Where.
    pub span: Span,
}

/// A name with what hangs on it.
#[derive(Debug, Clone, PartialEq)]
pub struct Name {
    /// The name; decorations that belong to it (`\bar d`, `c_{\max}`, `x^+`) included.
    pub text: String,
    /// Subscripts.
    pub indices: Vec<Expression>,
    /// A superscript: an index or a power.
    pub superscript: Option<Box<Expression>>,
}

impl Name {
    /// The name as it is shown: without the mark of one that is also declared without indices.
    #[must_use]
    pub fn shown(&self) -> &str {
        plain(&self.text)
    }
}

/// A name without the mark that tells `K_i` from a set `K`, a datum `I_{k0}` from a variable `I_{kt}`.
pub(crate) fn plain(name: &str) -> &str {
    name.trim_end_matches('_')
}

/// Operators of the additive level.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Additive {
    /// `+`
    Plus,
    /// `−`
    Minus,
    /// `∪`
    Union,
    /// `∖`
    Difference,
}

/// Operators of the multiplicative level.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Multiplicative {
    /// Juxtaposition, `·`, `*`
    Times,
    /// `/`, `\frac`
    Over,
    /// `×`
    Cross,
    /// `∩`
    Intersection,
    /// `mod`
    Modulo,
}

/// What runs over an index.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Big {
    /// `Σ`
    Sum,
    /// `∏`
    Product,
    /// `min_{…}`
    Least,
    /// `max_{…}`
    Greatest,
    /// `⋃_{…}`
    Union,
    /// `⋂_{…}`
    Intersection,
}

/// Functions of numbers.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Function {
    /// `⌊a⌋`
    Floor,
    /// `⌈a⌉`
    Ceiling,
    /// `min(a, b)`
    Minimum,
    /// `max(a, b)`
    Maximum,
    /// `|a|`, `|S|`
    Bars,
}

/// The sets of numbers that have a sign of their own.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum NumberSet {
    /// `ℝ`
    Real,
    /// `ℝ_+`
    RealNonNegative,
    /// `ℤ`
    Integer,
    /// `ℤ_+`, `ℕ`
    IntegerNonNegative,
    /// `ℤ_{>0}`
    IntegerPositive,
    /// `𝔹`
    Binary,
}

/// What an expression is.
#[derive(Debug, Clone, PartialEq)]
pub enum Kind {
    /// A number as written.
    Number(model::Number),
    /// `∞`
    Infinity,
    /// A name with its indices.
    Name(Name),
    /// A name directly before a bracket: `x(F)`, `δ(S)`, or a product.
    Call(Name, Vec<Expression>),
    /// `−a`
    Negative(Box<Expression>),
    /// `a + b − c`, `A ∪ B ∖ C`
    Additive(Box<Expression>, Vec<(Additive, Expression)>),
    /// `a b / c`, `A × B`
    Multiplicative(Box<Expression>, Vec<(Multiplicative, Expression)>),
    /// `a^b`
    Power(Box<Expression>, Box<Expression>),
    /// `Σ_{…} a`
    Big(Big, Clause, Box<Expression>),
    /// `⌊a⌋`, `min(a, b)`
    Function(Function, Vec<Expression>),
    /// `(i, j)`
    Tuple(Vec<Expression>),
    /// `{a, b}`
    Set(Vec<Expression>),
    /// `{a..b}`
    Range(Box<Expression>, Box<Expression>),
    /// `{i ∈ V : i ≠ r}`: the member, then the conditions
    Builder(Box<Expression>, Vec<Expression>),
    /// `[a, b]`
    Interval(Box<Expression>, Box<Expression>),
    /// `∅`
    EmptySet,
    /// `ℤ_+` and its like
    NumberSet(NumberSet),
    /// `a ≤ b < c`
    Chain(Box<Expression>, Vec<(Relation, Expression)>),
    /// `a odd` (`true`) or `a even`
    Parity(Box<Expression>, bool),
    /// `C clique in E`
    Clique(Box<Expression>, Box<Expression>),
    /// `a ∧ b`
    All(Vec<Expression>),
    /// `a ∨ b`
    Any(Vec<Expression>),
    /// `¬a`
    Not(Box<Expression>),
}

/// Visits every name in an expression.
pub(crate) fn each_name(expression: &mut Expression, visit: &mut dyn FnMut(&mut Name)) {
    if let Kind::Name(name) | Kind::Call(name, _) = &mut expression.kind {
        visit(name);
    }
    for child in children_mut(&mut expression.kind) {
        each_name(child, visit);
    }
}

/// Visits the outermost expressions of all lines.
pub(crate) fn each_outermost(tree: &mut Formulation, visit: &mut dyn FnMut(&mut Expression)) {
    if let Some(objective) = &mut tree.objective {
        visit(&mut objective.expression);
    }
    let lines = tree.data.iter_mut().chain(&mut tree.definitions).chain(&mut tree.statements);
    for line in lines {
        line.left.iter_mut().for_each(&mut *visit);
        line.links.iter_mut().for_each(|(_, operand)| visit(operand));
        for clause in &mut line.clauses {
            clause.items.iter_mut().chain(&mut clause.such_that).for_each(&mut *visit);
        }
    }
}

/// All expressions directly inside one, to change them.
pub(crate) fn children_mut(kind: &mut Kind) -> Vec<&mut Expression> {
    match kind {
        Kind::Number(_) | Kind::Infinity | Kind::EmptySet | Kind::NumberSet(_) => Vec::new(),
        Kind::Name(name) => {
            name.indices.iter_mut().chain(name.superscript.as_deref_mut()).collect()
        }
        Kind::Call(_, items)
        | Kind::Function(_, items)
        | Kind::Tuple(items)
        | Kind::Set(items)
        | Kind::All(items)
        | Kind::Any(items) => items.iter_mut().collect(),
        Kind::Negative(inner) | Kind::Parity(inner, _) | Kind::Not(inner) => vec![inner],
        Kind::Additive(first, rest) => pairs_mut(first, rest),
        Kind::Multiplicative(first, rest) => pairs_mut(first, rest),
        Kind::Chain(first, rest) => pairs_mut(first, rest),
        Kind::Power(a, b) | Kind::Range(a, b) | Kind::Interval(a, b) | Kind::Clique(a, b) => {
            vec![a, b]
        }
        Kind::Big(_, clause, body) => {
            let clause = clause.items.iter_mut().chain(&mut clause.such_that);
            clause.chain([body.as_mut()]).collect()
        }
        Kind::Builder(member, conditions) => {
            [member.as_mut()].into_iter().chain(conditions).collect()
        }
    }
}

fn pairs_mut<'e, T>(
    first: &'e mut Expression,
    rest: &'e mut [(T, Expression)],
) -> Vec<&'e mut Expression> {
    [first].into_iter().chain(rest.iter_mut().map(|(_, operand)| operand)).collect()
}
