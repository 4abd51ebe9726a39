//! What the checker hands on: names resolved to numbers, indices to slots, every family and
//! domain line as steps that can be walked on an instance.

use model::Number;

use crate::place::Span;
use crate::syntax::{Big, NumberSet, Relation};

/// The number of a datum or definition.
pub(crate) type SymbolId = usize;
/// The number of a variable.
pub(crate) type VariableNumber = usize;
/// The place of a bound index in the environment.
pub(crate) type Slot = usize;

/// The set that an index comes from, as far as the text tells.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Root {
    /// Members of this set, which is contained in no other.
    Set(SymbolId),
    /// Whole numbers.
    Integer,
    /// Not known.
    Unknown,
}

/// What a datum or definition gives once its indices are given.
#[derive(Debug, Clone, PartialEq)]
pub(crate) enum Shape {
    Number,
    Element(Root),
    Set(Vec<Root>),
}

/// A datum or a definition.
#[derive(Debug, Clone)]
pub(crate) struct Symbol {
    pub(crate) name: String,
    pub(crate) span: Span,
    pub(crate) datum: bool,
    pub(crate) shape: Shape,
    /// The sets of its indices.
    pub(crate) roots: Vec<Root>,
    /// The set over which it is indexed as a whole: `A` in `∀ (i,j) ∈ A`.
    pub(crate) tuples: Option<SymbolId>,
    pub(crate) steps: Vec<Step>,
    pub(crate) indices: Vec<Node>,
    /// The definition, or the default of a datum.
    pub(crate) value: Option<Node>,
    /// The set that must contain it.
    pub(crate) parent: Option<Node>,
    /// Conditions on its number: `≥ 0`.
    pub(crate) range: Vec<(Relation, Node)>,
    pub(crate) whole: bool,
    pub(crate) used: bool,
}

impl Symbol {
    /// Whether a datum over so many places gives it: one for each index, or for each that is no
    /// number (`I_{k0}` may be given over `k` alone).
    pub(crate) fn has_places(&self, places: usize) -> bool {
        let free = self.indices.iter().filter(|index| index.constant().is_none()).count();
        places == self.indices.len() || places == free
    }

    /// A key with the indices that are numbers put in, where it lacks them.
    pub(crate) fn whole_key(&self, key: &[String]) -> Vec<String> {
        if key.len() == self.indices.len() {
            return key.to_vec();
        }
        let mut given = key.iter().cloned();
        let places = self.indices.iter();
        places.map(|index| index.constant().or_else(|| given.next()).unwrap_or_default()).collect()
    }
}

/// A variable with its domain lines.
#[derive(Debug, Clone)]
pub(crate) struct Variable {
    pub(crate) name: String,
    pub(crate) span: Span,
    pub(crate) roots: Vec<Root>,
    pub(crate) tuples: Option<SymbolId>,
    pub(crate) domains: Vec<Domain>,
    pub(crate) used: bool,
}

/// One domain line of one variable.
#[derive(Debug, Clone)]
pub(crate) struct Domain {
    pub(crate) steps: Vec<Step>,
    pub(crate) indices: Vec<Node>,
    pub(crate) bounds: Vec<Bounding>,
    pub(crate) span: Span,
}

/// What a domain line says of its variable.
#[derive(Debug, Clone)]
pub(crate) enum Bounding {
    Lower(Node),
    Upper(Node),
    Fixed(Node),
    /// Whole numbers between two.
    Whole(Node, Node),
    Numbers(NumberSet),
}

/// A constraint family.
#[derive(Debug, Clone)]
pub(crate) struct FamilyPlan {
    pub(crate) name: String,
    pub(crate) span: Span,
    pub(crate) steps: Vec<Step>,
    /// The slots of its index tuple.
    pub(crate) tuple: Vec<Slot>,
    pub(crate) arrow: bool,
    pub(crate) subset: Option<SubsetPlan>,
    pub(crate) rows: Vec<RowPlan>,
}

/// The subset that a family is quantified over.
#[derive(Debug, Clone)]
pub(crate) struct SubsetPlan {
    pub(crate) name: String,
    pub(crate) ground: Node,
    pub(crate) proper: bool,
    /// Conditions that mention the subset.
    pub(crate) conditions: Vec<(Node, Span)>,
    pub(crate) span: Span,
}

/// One row of each member of a family.
#[derive(Debug, Clone)]
pub(crate) enum RowPlan {
    Link(Node, Relation, Node),
    Ranged(Node, Node, Node),
}

/// One step of a walk over index tuples.
#[derive(Debug, Clone)]
pub(crate) enum Step {
    /// The members of a set that fit a pattern.
    Over { pattern: Vec<Pattern>, set: Node, span: Span },
    /// Only where a condition holds.
    When(Node, Span),
}

/// One place of a pattern.
#[derive(Debug, Clone)]
pub(crate) enum Pattern {
    /// A new index.
    Bind(Slot),
    /// An index bound earlier in the same pattern.
    Same(Slot),
    /// A value that is known before.
    Match(Node),
}

/// Operators on sets.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum SetOperator {
    Union,
    Difference,
    Intersection,
}

/// A resolved expression.
#[derive(Debug, Clone)]
pub(crate) enum Node {
    Number(Number),
    /// A bound index.
    Slot(Slot),
    Symbol(SymbolId, Vec<Node>, Span),
    Variable(VariableNumber, Vec<Node>, Span),
    /// A whole number as an element.
    AsElement(Box<Node>, Span),
    /// A closed expression, evaluated once.
    Once(usize, Box<Node>),
    Negative(Box<Node>),
    /// Terms, `true` when subtracted.
    Add(Vec<(bool, Node)>),
    Multiply(Vec<Node>),
    Divide(Box<Node>, Box<Node>, Span),
    Modulo(Box<Node>, Box<Node>, Span),
    Power(Box<Node>, Box<Node>, Span),
    Floor(Box<Node>),
    Ceiling(Box<Node>),
    Absolute(Box<Node>),
    Least(Vec<Node>),
    Greatest(Vec<Node>),
    Size(Box<Node>),
    Over(Big, Vec<Step>, Box<Node>, Span),
    /// Listed members.
    Members(usize, Vec<Vec<Node>>),
    Range(Box<Node>, Box<Node>, Span),
    Builder(Vec<Step>, Vec<Node>, Span),
    SetOperation(SetOperator, Box<Node>, Box<Node>),
    Cross(Vec<Node>, Span),
    /// The subset of the family.
    Subset,
    /// Two numbers.
    Compare(Relation, Box<Node>, Box<Node>),
    /// Two elements, equal or not.
    Same(bool, Box<Node>, Box<Node>),
    /// Two elements by the order of a set.
    Ordered(Relation, Box<Node>, Box<Node>, SymbolId, Span),
    /// A tuple in a set (`true`) or not.
    Member(bool, Vec<Node>, Box<Node>),
    /// Two sets: equal, not equal, contained.
    Sets(Relation, Box<Node>, Box<Node>),
    All(Vec<Node>),
    Any(Vec<Node>),
    Not(Box<Node>),
    Parity(bool, Box<Node>, Span),
    Clique(Box<Node>, Box<Node>),
}

impl Node {
    /// The label of an index that is a whole number.
    pub(crate) fn constant(&self) -> Option<String> {
        match self {
            Self::AsElement(inner, _) => inner.constant(),
            Self::Number(value) if value.is_int() => Some(value.numerator().to_string()),
            _ => None,
        }
    }
}

/// All of a checked formulation.
#[derive(Debug, Clone, Default)]
pub(crate) struct Plan {
    pub(crate) title: String,
    pub(crate) maximise: bool,
    pub(crate) symbols: Vec<Symbol>,
    /// The symbols in an order in which each comes after those that it needs.
    pub(crate) order: Vec<SymbolId>,
    pub(crate) variables: Vec<Variable>,
    pub(crate) objective: Vec<(bool, Node)>,
    pub(crate) objective_span: Span,
    pub(crate) families: Vec<FamilyPlan>,
    pub(crate) slots: usize,
    pub(crate) cells: usize,
}
