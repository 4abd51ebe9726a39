//! Exact evaluation on an instance: numbers in rationals, sets in the order of their listing.

mod columns;
mod guard;
mod linear;
mod number;
mod sets;
mod truth;
mod tuples;
mod value;
mod walk;

use std::cell::{Cell, RefCell};
use std::rc::Rc;

pub(crate) use columns::Columns;
pub(crate) use guard::Guard;
pub(crate) use linear::{Linear, Rounded, Scale};
pub(crate) use tuples::TupleMap;
pub(crate) use value::{Element, Pool, Set, Value};
pub(crate) use walk::{Found, Walk, placed};

use crate::diagnostic::{Diagnostic, data, rows, shapes, size};
use crate::place::Span;
use crate::plan::{Node, Plan, SymbolId, VariableNumber};
use model::Number;

pub(crate) type Evaluated<T> = Result<T, Box<Diagnostic>>;

pub(crate) fn fail<T>(diagnostic: Diagnostic) -> Evaluated<T> {
    Err(Box::new(diagnostic))
}

/// The most members that a set may have.
pub(crate) const SET_LIMIT: usize = 2_000_000;

/// The most steps that one value of a symbol, or one row, may take.
const WORK_LIMIT: u64 = 20_000_000;

/// The most binary digits of a numerator or denominator.
pub(crate) const NUMBER_BITS: usize = 1 << 13;

/// A number of moderate size.
pub(crate) fn moderate(number: Number) -> Evaluated<Number> {
    use dashu_int::ops::BitTest;
    let bits = number.numerator().bit_len().max(number.denominator().bit_len());
    if bits > NUMBER_BITS { fail(size::number(NUMBER_BITS, Span::default())) } else { Ok(number) }
}

/// The values of a symbol: one, or one for each index tuple.
#[derive(Debug, Clone)]
pub(crate) enum Values {
    Single(Value),
    Indexed(TupleMap<Value>),
}

/// A plan with the values of its symbols on an instance.
#[derive(Debug)]
pub(crate) struct Evaluator {
    pub(crate) plan: Rc<Plan>,
    pub(crate) pool: RefCell<Pool>,
    pub(crate) values: Vec<Option<Values>>,
    pub(crate) columns: Vec<Columns>,
    once: RefCell<Vec<Option<Value>>>,
    /// Steps since the value or row at hand was begun.
    work: Cell<u64>,
    /// The ground set, while a row over subsets is evaluated.
    pub(crate) ground: Option<Rc<Set>>,
}

/// The elements bound so far.
pub(crate) type Environment = Vec<Element>;

impl Evaluator {
    pub(crate) fn new(plan: Rc<Plan>) -> Self {
        let (symbols, variables, cells) = (plan.symbols.len(), plan.variables.len(), plan.cells);
        Self {
            plan,
            pool: RefCell::default(),
            values: vec![None; symbols],
            columns: (0..variables).map(|_| Columns::default()).collect(),
            once: RefCell::new(vec![None; cells]),
            work: Cell::new(0),
            ground: None,
        }
    }

    /// Begins a value or a row.
    pub(crate) fn start_work(&self) {
        self.work.set(0);
    }

    /// Takes `steps` from what one value or row may cost.
    fn spend(&self, steps: usize) -> Evaluated<()> {
        let work = self.work.get().saturating_add(steps as u64);
        self.work.set(work);
        if work > WORK_LIMIT { fail(size::work(WORK_LIMIT, Span::default())) } else { Ok(()) }
    }

    pub(crate) fn environment(&self) -> Environment {
        vec![Element::default(); self.plan.slots]
    }

    /// The element that an index stands for.
    pub(crate) fn element(&self, node: &Node, env: &mut Environment) -> Evaluated<Element> {
        match node {
            Node::Slot(slot) => Ok(env[*slot]),
            Node::AsElement(inner, span) => {
                let number = self.number(inner, env)?;
                if !number.is_int() {
                    return fail(shapes::whole(*span));
                }
                Ok(self.pool.borrow_mut().intern(&number.numerator().to_string()))
            }
            Node::Symbol(id, indices, span) => match self.symbol(*id, indices, *span, env)? {
                Value::Element(element) => Ok(element),
                _ => fail(shapes::expected("an element", "another value", *span)),
            },
            Node::Once(cell, inner) => match self.once_value(*cell, inner, env)? {
                Value::Element(element) => Ok(element),
                _ => fail(shapes::expected("an element", "another value", Span::default())),
            },
            _ => fail(shapes::expected("an element", "another value", Span::default())),
        }
    }

    pub(crate) fn tuple(&self, nodes: &[Node], env: &mut Environment) -> Evaluated<Vec<Element>> {
        nodes.iter().map(|node| self.element(node, env)).collect()
    }

    /// What is found at the tuple that the indices make.
    fn at_key<V>(
        &self,
        indices: &[Node],
        env: &mut Environment,
        find: impl Fn(&[Element]) -> V,
    ) -> Evaluated<V> {
        let mut few = [Element::default(); 4];
        if indices.len() > few.len() {
            return Ok(find(&self.tuple(indices, env)?));
        }
        for (place, node) in few.iter_mut().zip(indices) {
            *place = self.element(node, env)?;
        }
        Ok(find(&few[..indices.len()]))
    }

    /// The value of a symbol at its indices.
    pub(crate) fn symbol(
        &self,
        id: SymbolId,
        indices: &[Node],
        span: Span,
        env: &mut Environment,
    ) -> Evaluated<Value> {
        let name = || self.plan.symbols[id].name.clone();
        match &self.values[id] {
            Some(Values::Single(value)) => Ok(value.clone()),
            Some(Values::Indexed(values)) => {
                match self.at_key(indices, env, |key| values.get(key))? {
                    Some(value) => Ok(value.clone()),
                    None => {
                        let key = self.tuple(indices, env)?;
                        fail(rows::outside(&self.shown(&name(), &key, false), span))
                    }
                }
            }
            None => fail(data::unavailable(&name(), span)),
        }
    }

    /// `c[Ash → Birch]`, `u[Ash]`.
    pub(crate) fn shown(&self, name: &str, tuple: &[Element], arrow: bool) -> String {
        let name = crate::syntax::plain(name);
        if tuple.is_empty() {
            return name.to_owned();
        }
        let pool = self.pool.borrow();
        let names: Vec<&str> = tuple.iter().map(|&e| pool.name(e)).collect();
        format!("{name}[{}]", names.join(if arrow && tuple.len() == 2 { " → " } else { ", " }))
    }

    /// The column of a variable at its indices.
    pub(crate) fn column(
        &self,
        number: VariableNumber,
        indices: &[Node],
        span: Span,
        env: &mut Environment,
    ) -> Evaluated<u32> {
        match self.at_key(indices, env, |key| self.columns[number].get(key))? {
            Some(column) => Ok(column),
            None => {
                let key = self.tuple(indices, env)?;
                let variable = &self.plan.variables[number];
                let arrow = crate::expand::is_arrow(&variable.roots);
                fail(rows::outside(&self.shown(&variable.name, &key, arrow), span))
            }
        }
    }

    /// The value of a closed expression, evaluated at the first use.
    fn once_value(&self, cell: usize, inner: &Node, env: &mut Environment) -> Evaluated<Value> {
        if let Some(value) = &self.once.borrow()[cell] {
            return Ok(value.clone());
        }
        let value = self.value(inner, env)?;
        self.once.borrow_mut()[cell] = Some(value.clone());
        Ok(value)
    }

    /// A value without variables.
    pub(crate) fn value(&self, node: &Node, env: &mut Environment) -> Evaluated<Value> {
        match node {
            Node::Slot(_) | Node::AsElement(..) => self.element(node, env).map(Value::Element),
            Node::Symbol(id, indices, span) => self.symbol(*id, indices, *span, env),
            Node::Once(cell, inner) => self.once_value(*cell, inner, env),
            Node::Members(..)
            | Node::Range(..)
            | Node::Builder(..)
            | Node::SetOperation(..)
            | Node::Cross(..)
            | Node::Subset => self.set(node, env).map(Value::Set),
            _ => self.number(node, env).map(Value::Number),
        }
    }
}
