//! How many index tuples a quantifier has, before any of them is visited: a product of the sizes
//! of its sets, less what its conditions `i ≠ j` and `i < j` take away.
//!
//! The indices are taken in their order. One that must differ from `d` earlier ones (or from named
//! elements) has at least |V| − d values for each choice of those; `k` indices in a common order
//! have at least as many choices as there are sets of `k` elements. So the product is a count that
//! is never too high. It is the exact one where the earlier indices that an index must differ from
//! differ from each other and come from its own set.

use crate::evaluate::{Environment, Evaluator};
use crate::plan::{Node, Pattern, Slot, Step};
use crate::syntax::Relation;

/// The number of tuples in closed form.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct ClosedForm {
    /// The count: exactly, or at least.
    pub(super) count: u128,
    /// Whether it is exact.
    pub(super) exact: bool,
    /// The product in words: `|V|·(|V| − 1)`.
    pub(super) words: String,
}

/// Indices bound by one step, or several that a common order ties together.
#[derive(Debug)]
struct Factor {
    slots: Vec<Slot>,
    set: String,
    size: u128,
    /// Single index that can be compared.
    single: bool,
    /// Earlier indices and named elements that it must differ from.
    differs: Vec<Option<Slot>>,
}

/// The closed form of the steps; `None` where a set depends on an earlier index or a condition is
/// of another kind, so that only walking tells.
pub(super) fn closed_form(
    steps: &[Step],
    evaluator: &Evaluator,
    env: &mut Environment,
) -> Option<ClosedForm> {
    let mut factors: Vec<Factor> = Vec::new();
    for step in steps {
        match step {
            Step::Over { pattern, set, .. } => factors.push(factor(pattern, set, evaluator, env)?),
            Step::When(condition, _) => take_in(condition, &mut factors)?,
        }
    }
    let count = factors.iter().try_fold(1_u128, |product, factor| {
        product.checked_mul(factor.values()).or(Some(u128::MAX))
    })?;
    let exact = factors.iter().all(|factor| factor.is_exact(&factors));
    let words: Vec<String> = factors.iter().map(Factor::words).collect();
    Some(ClosedForm { count, exact, words: words.join("·") })
}

fn factor(
    pattern: &[Pattern],
    set: &Node,
    evaluator: &Evaluator,
    env: &mut Environment,
) -> Option<Factor> {
    let slots: Option<Vec<Slot>> = pattern
        .iter()
        .map(|one| if let Pattern::Bind(slot) = one { Some(*slot) } else { None })
        .collect();
    let named = match set {
        Node::Once(_, inner) => inner,
        other => other,
    };
    let name = match named {
        Node::Symbol(id, indices, _) if indices.is_empty() => {
            Some(evaluator.plan.symbols[*id].name.clone())
        }
        _ => None,
    };
    if name.is_none() && !matches!(set, Node::Once(..)) {
        return None;
    }
    let size = evaluator.set(set, env).ok()?.len() as u128;
    let set = name.map_or_else(|| super::grouped(size), |name| format!("|{name}|"));
    let slots = slots?;
    Some(Factor { single: slots.len() == 1, slots, set, size, differs: Vec::new() })
}

/// Takes a condition in; `None` where it is of another kind.
fn take_in(condition: &Node, factors: &mut Vec<Factor>) -> Option<()> {
    match condition {
        Node::All(all) => all.iter().try_for_each(|one| take_in(one, factors)),
        Node::Same(false, a, b) => differ(slot(a), slot(b), factors),
        Node::Ordered(Relation::AtMost | Relation::Less, a, b, ..)
        | Node::Ordered(Relation::AtLeast | Relation::Greater, b, a, ..) => {
            ordered(slot(a)?, slot(b)?, factors)
        }
        _ => None,
    }
}

fn slot(node: &Node) -> Option<Slot> {
    if let Node::Slot(slot) = node { Some(*slot) } else { None }
}

fn place(slot: Slot, factors: &[Factor]) -> Option<usize> {
    factors.iter().position(|factor| factor.single && factor.slots.contains(&slot))
}

/// Two indices, or an index and a named element, differ.
fn differ(a: Option<Slot>, b: Option<Slot>, factors: &mut [Factor]) -> Option<()> {
    let at = |slot: Option<Slot>| slot.and_then(|slot| place(slot, factors));
    let (at, other) = match (at(a), at(b)) {
        (Some(x), Some(y)) if x == y => return Some(()),
        (Some(x), Some(y)) if x < y => (y, a),
        (Some(x), Some(_)) => (x, b),
        (Some(x), None) if b.is_none() => (x, None),
        (None, Some(y)) if a.is_none() => (y, None),
        _ => return None,
    };
    factors[at].differs.push(other);
    Some(())
}

/// Two indices of one set in an order: the later joins the earlier.
fn ordered(a: Slot, b: Slot, factors: &mut Vec<Factor>) -> Option<()> {
    let (at, other) = (place(a, factors)?, place(b, factors)?);
    if at == other {
        // a third index between two: a circle of orders has no closed form
        let slots = &factors[at].slots;
        let rises = slots.iter().position(|s| *s == a) < slots.iter().position(|s| *s == b);
        return rises.then_some(());
    }
    if at > other || factors[at].set != factors[other].set {
        return None;
    }
    let later = factors.remove(other);
    let first = &mut factors[at];
    first.slots.extend(later.slots);
    first.differs.extend(later.differs);
    Some(())
}

impl Factor {
    /// Different values that the indices cannot take.
    fn taken(&self) -> usize {
        let mut differs = self.differs.clone();
        differs.retain(|other| other.is_none_or(|slot| !self.slots.contains(&slot)));
        differs.sort_unstable();
        let named = differs.iter().filter(|other| other.is_none()).count();
        differs.dedup();
        named + differs.iter().filter(|other| other.is_some()).count()
    }

    fn values(&self) -> u128 {
        let free = self.size.saturating_sub(self.taken() as u128);
        let together = self.slots.len() as u128;
        if !self.single || together == 1 {
            return free;
        }
        // The number of sets of so many elements, which is whole at every step.
        (0..together).fold(1_u128, |sets, k| sets.saturating_mul(free.saturating_sub(k)) / (k + 1))
    }

    /// Whether the values that it cannot take are as many, whatever the earlier indices are.
    fn is_exact(&self, factors: &[Self]) -> bool {
        if self.slots.len() > 1 && self.single {
            return false;
        }
        let others: Option<Vec<Slot>> = self.differs.iter().copied().collect();
        let Some(others) = others else { return false };
        let of = |slot: Slot| factors.iter().find(|factor| factor.slots == [slot]);
        others.iter().all(|&one| {
            of(one).is_some_and(|factor| factor.set == self.set)
                && others.iter().all(|&two| {
                    one == two
                        || of(one).is_some_and(|factor| factor.differs.contains(&Some(two)))
                        || of(two).is_some_and(|factor| factor.differs.contains(&Some(one)))
                })
        })
    }

    fn words(&self) -> String {
        let free = match self.taken() {
            0 => self.set.clone(),
            taken => format!("({} − {taken})", self.set),
        };
        match self.slots.len() {
            together if self.single && together > 1 => format!("C({free}, {together})"),
            _ => free,
        }
    }
}
