//! Binding to an instance: every datum found, checked against its shape, and every definition
//! evaluated.

use std::collections::BTreeMap;
use std::rc::Rc;

use instance::{Datum, Instance};
use model::Number;

use crate::check::Checked;
use crate::diagnostic::{Diagnostic, data as message, tidy};
use crate::evaluate::{
    Element, Environment, Evaluated, Evaluator, Set, TupleMap, Value, Values, fail,
};
use crate::plan::{Node, Root, Shape, Step, Symbol, SymbolId};
use crate::syntax::Relation;

/// A formulation with the data of an instance.
#[derive(Debug)]
pub struct Bound {
    pub(crate) evaluator: Evaluator,
    pub(crate) notes: Vec<Diagnostic>,
}

/// Binds a checked formulation to an instance. `names` maps a name of the formulation to the
/// name under which the instance holds it, where they differ. All errors at once.
///
/// # Errors
/// Every datum that lacks or does not fit, and the first error of each definition.
pub fn bind(
    checked: &Checked,
    instance: &Instance,
    names: &BTreeMap<String, String>,
) -> Result<Bound, Vec<Diagnostic>> {
    if !checked.sound {
        return Err(vec![message::unsound()]);
    }
    let mut binder = Binder {
        evaluator: Evaluator::new(Rc::clone(&checked.plan)),
        instance,
        names,
        notes: Vec::new(),
        errors: Vec::new(),
    };
    let plan = Rc::clone(&checked.plan);
    for &id in &plan.order {
        // nothing needs what is never used, and its shape may not be known
        if plan.symbols[id].used {
            binder.symbol(id);
        }
    }
    if binder.errors.is_empty() {
        Ok(Bound { evaluator: binder.evaluator, notes: binder.notes })
    } else {
        Err(tidy(binder.errors))
    }
}

struct Binder<'i> {
    evaluator: Evaluator,
    instance: &'i Instance,
    names: &'i BTreeMap<String, String>,
    notes: Vec<Diagnostic>,
    errors: Vec<Diagnostic>,
}

impl<'i> Binder<'i> {
    fn symbol(&mut self, id: SymbolId) {
        let plan = Rc::clone(&self.evaluator.plan);
        self.evaluator.start_work();
        let symbol = &plan.symbols[id];
        let datum = if symbol.datum { self.supplied(symbol) } else { None };
        let lacks = symbol.datum && datum.is_none() && symbol.value.is_none();
        if lacks {
            let offers: Vec<String> =
                self.instance.data().map(|(name, _)| name.to_owned()).take(20).collect();
            self.errors.push(message::lacks(&symbol.name, self.key(symbol), &offers, symbol.span));
            return;
        }
        let values = if symbol.indices.is_empty() {
            self.single(symbol, datum).map(Values::Single)
        } else {
            self.indexed(symbol, datum).map(Values::Indexed)
        };
        match values {
            Ok(values) => self.evaluator.values[id] = Some(values),
            Err(diagnostic) => {
                let diagnostic = crate::evaluate::placed(diagnostic, symbol.span);
                // what it needs lacks: that has been said
                if self.errors.is_empty() || diagnostic.code != message::UNAVAILABLE {
                    self.errors.push(*diagnostic);
                }
            }
        }
    }

    fn key<'s>(&'s self, symbol: &'s Symbol) -> &'s str {
        self.names.get(&symbol.name).map_or(symbol.name.as_str(), String::as_str)
    }

    /// The name of a symbol, with the one it was given where that is another.
    fn called(&self, symbol: &Symbol) -> String {
        let key = self.key(symbol);
        if key == symbol.name { key.to_owned() } else { format!("{} (as {key})", symbol.name) }
    }

    fn supplied(&mut self, symbol: &Symbol) -> Option<&'i Datum> {
        let key = self.key(symbol).to_owned();
        let datum = self.instance.get(&key)?;
        if self.instance.assumed.contains(&key) {
            let what = match datum {
                Datum::Tuples { rows, .. } => format!("the {} pairs that have a value", rows.len()),
                Datum::Element(name) => name.clone(),
                _ => "usual".to_owned(),
            };
            self.notes.push(message::assumed(&symbol.name, &what, symbol.span));
        }
        Some(datum)
    }

    fn single(&mut self, symbol: &Symbol, datum: Option<&Datum>) -> Evaluated<Value> {
        let mut env = self.evaluator.environment();
        let value = match (datum, &symbol.value) {
            (Some(datum), _) => self.read(symbol, datum)?,
            (None, Some(default)) => self.evaluator.value(default, &mut env)?,
            (None, None) => return fail(message::cell(&symbol.name, symbol.span)),
        };
        let value = self.shaped(symbol, value)?;
        self.contained(symbol, &value, &symbol.name, &mut env)?;
        Ok(value)
    }

    /// A number where one is wanted may stand as an element, and the other way round.
    fn shaped(&self, symbol: &Symbol, value: Value) -> Evaluated<Value> {
        match (&symbol.shape, value) {
            (Shape::Element(_), Value::Number(n)) if n.is_int() => {
                let name = n.numerator().to_string();
                Ok(Value::Element(self.evaluator.pool.borrow_mut().intern(&name)))
            }
            (_, value) => Ok(value),
        }
    }

    /// A datum in the shape that the formulation wants.
    fn read(&self, symbol: &Symbol, datum: &Datum) -> Evaluated<Value> {
        let wrong = |wanted: &str| {
            fail(message::shape(&self.called(symbol), wanted, noun(datum), symbol.span))
        };
        match (&symbol.shape, datum) {
            (Shape::Number, Datum::Number(value)) => Ok(Value::Number(value.clone())),
            (Shape::Number, Datum::Element(text)) => match text.parse::<i64>() {
                Ok(whole) => Ok(Value::Number(Number::from(whole))),
                Err(_) => wrong("a number"),
            },
            (Shape::Number, _) => wrong("a number"),
            (Shape::Element(_), Datum::Element(name)) => {
                Ok(Value::Element(self.evaluator.pool.borrow_mut().intern(name)))
            }
            (Shape::Element(_), Datum::Number(n)) if n.is_int() => Ok(Value::Number(n.clone())),
            (Shape::Element(_), _) => wrong("an element"),
            (Shape::Set(roots), datum) => self.read_set(symbol, roots, datum),
        }
    }

    fn read_set(&self, symbol: &Symbol, roots: &[Root], datum: &Datum) -> Evaluated<Value> {
        let wanted = match roots.len() {
            1 => "a set".to_owned(),
            n => format!("a set of tuples of {n}"),
        };
        let mut pool = self.evaluator.pool.borrow_mut();
        let tuples: Vec<Vec<Element>> = match datum {
            Datum::Labels(labels) if roots.len() == 1 => {
                labels.iter().map(|l| vec![pool.intern(l)]).collect()
            }
            Datum::Integers(whole) if roots.len() == 1 => {
                whole.iter().map(|n| vec![pool.intern(&n.to_string())]).collect()
            }
            Datum::Tuples { arity, rows } if *arity == roots.len() => {
                rows.iter().map(|row| row.iter().map(|cell| pool.intern(cell)).collect()).collect()
            }
            Datum::Table { arity, cells } if *arity == roots.len() && roots.len() > 1 => {
                cells.keys().map(|key| key.iter().map(|cell| pool.intern(cell)).collect()).collect()
            }
            _ => {
                return fail(message::shape(
                    &self.called(symbol),
                    &wanted,
                    noun(datum),
                    symbol.span,
                ));
            }
        };
        let mut set = Set::new(roots.len(), tuples);
        set.by_value = matches!(datum, Datum::Integers(_));
        Ok(Value::Set(Rc::new(set)))
    }

    /// `A ⊆ V × V`, `r ∈ V`, `c ≥ 0`, `n ∈ ℤ`.
    fn contained(
        &mut self,
        symbol: &Symbol,
        value: &Value,
        what: &str,
        env: &mut Environment,
    ) -> Evaluated<()> {
        if let Value::Number(number) = value {
            return self.in_range(symbol, number, what, env);
        }
        let Some(parent) = &symbol.parent else { return Ok(()) };
        // V × V is not written out: each place is checked against its own set
        let factors: Vec<&Node> = match strip(parent) {
            Node::Cross(factors, _) => factors.iter().collect(),
            other => vec![other],
        };
        let factors: Vec<Rc<Set>> =
            factors.into_iter().map(|f| self.evaluator.set(f, env)).collect::<Evaluated<_>>()?;
        let fits = |tuple: &[Element]| {
            let mut from = 0;
            factors.iter().all(|factor| {
                let piece = tuple.get(from..from + factor.arity);
                from += factor.arity;
                piece.is_some_and(|piece| factor.contains(piece))
            })
        };
        let stray = match value {
            Value::Element(element) => (!fits(&[*element])).then(|| vec![*element]),
            Value::Set(set) => set.iter().find(|tuple| !fits(tuple)).map(<[Element]>::to_vec),
            Value::Number(_) => None,
        };
        match stray {
            None => Ok(()),
            Some(tuple) => {
                let member = format!("({})", self.evaluator.pool.borrow().tuple(&tuple));
                fail(message::not_contained(&member, &symbol.name, symbol.span))
            }
        }
    }

    fn in_range(
        &mut self,
        symbol: &Symbol,
        number: &Number,
        what: &str,
        env: &mut Environment,
    ) -> Evaluated<()> {
        if symbol.whole && !number.is_int() && self.notes.len() < 50 {
            self.notes.push(message::not_whole(what, symbol.span));
        }
        for (relation, bound) in &symbol.range {
            let bound = self.evaluator.number(bound, env)?;
            let holds = match relation {
                Relation::AtMost => *number <= bound,
                Relation::AtLeast => *number >= bound,
                Relation::Less => *number < bound,
                _ => *number > bound,
            };
            if !holds && self.notes.len() < 50 {
                self.notes.push(message::out_of_range(what, symbol.span));
            }
        }
        Ok(())
    }

    /// One value for each index tuple: the instance's where it has one, else the default.
    fn indexed(&mut self, symbol: &Symbol, datum: Option<&Datum>) -> Evaluated<TupleMap<Value>> {
        let cells = match datum {
            Some(datum) => self.cells(symbol, datum)?,
            None => TupleMap::default(),
        };
        let keys = self.keys(&symbol.steps, &symbol.indices)?;
        let mut values = TupleMap::default();
        for (key, mut env) in keys {
            let what = || self.evaluator.shown(&symbol.name, &key, false);
            let value = match (cells.get(&key), &symbol.value, &symbol.shape) {
                (Some(value), ..) => value.clone(),
                (None, Some(default), _) => self.evaluator.value(default, &mut env)?,
                (None, None, Shape::Set(roots)) => {
                    Value::Set(Rc::new(Set::new(roots.len(), std::iter::empty())))
                }
                (None, None, _) => {
                    let named = self.key(symbol);
                    let what = if named == symbol.name {
                        what()
                    } else {
                        format!("{} (a cell of {named})", what())
                    };
                    return fail(message::cell(&what, symbol.span));
                }
            };
            let value = self.shaped(symbol, value)?;
            let what = what();
            self.contained(symbol, &value, &what, &mut env)?;
            values.insert(&key, value);
        }
        Ok(values)
    }

    /// The index tuples of a symbol, each with its environment.
    fn keys(
        &self,
        steps: &[Step],
        indices: &[Node],
    ) -> Evaluated<Vec<(Vec<Element>, Environment)>> {
        let mut keys = Vec::new();
        let mut env = self.evaluator.environment();
        self.evaluator.each(steps, &mut env, |evaluator, env, _| {
            if keys.len() >= crate::evaluate::SET_LIMIT {
                let limit = crate::evaluate::SET_LIMIT;
                return fail(crate::diagnostic::size::set(
                    limit as u128 + 1,
                    limit,
                    crate::place::Span::default(),
                ));
            }
            keys.push((evaluator.tuple(indices, env)?, env.clone()));
            Ok(())
        })?;
        Ok(keys)
    }

    /// The cells of a datum: numbers of a table, or the last place of tuples as an element or
    /// as members of a set.
    fn cells(&self, symbol: &Symbol, datum: &Datum) -> Evaluated<TupleMap<Value>> {
        let places = symbol.indices.len();
        let mut pool = self.evaluator.pool.borrow_mut();
        let mut cells = TupleMap::default();
        match (datum, &symbol.shape) {
            (Datum::Table { arity, cells: table }, Shape::Number | Shape::Element(_))
                if *arity == places =>
            {
                for (key, value) in table {
                    let key: Vec<Element> = key.iter().map(|cell| pool.intern(cell)).collect();
                    cells.insert(&key, Value::Number(value.clone()));
                }
            }
            (Datum::Tuples { arity, rows }, Shape::Element(_)) if *arity == places + 1 => {
                for row in rows {
                    let mut key: Vec<Element> = row.iter().map(|cell| pool.intern(cell)).collect();
                    if let Some(last) = key.pop() {
                        cells.insert(&key, Value::Element(last));
                    }
                }
            }
            (Datum::Tuples { arity, rows }, Shape::Set(roots))
                if *arity == places + roots.len() =>
            {
                let mut groups: BTreeMap<Vec<Element>, Vec<Vec<Element>>> = BTreeMap::new();
                for row in rows {
                    let mut key: Vec<Element> = row.iter().map(|cell| pool.intern(cell)).collect();
                    let member = key.split_off(places);
                    groups.entry(key).or_default().push(member);
                }
                for (key, members) in groups {
                    let set = Set::new(roots.len(), members);
                    cells.insert(&key, Value::Set(Rc::new(set)));
                }
            }
            _ => {
                let wanted = format!("indexed by {places}");
                return fail(message::shape(
                    &self.called(symbol),
                    &wanted,
                    noun(datum),
                    symbol.span,
                ));
            }
        }
        Ok(cells)
    }
}

/// A closed expression without its mark.
fn strip(node: &Node) -> &Node {
    match node {
        Node::Once(_, inner) => inner,
        other => other,
    }
}

pub(crate) fn noun(datum: &Datum) -> &'static str {
    match datum {
        Datum::Labels(_) => "a set of labels",
        Datum::Integers(_) => "a set of whole numbers",
        Datum::Tuples { .. } => "a set of tuples",
        Datum::Number(_) => "a number",
        Datum::Element(_) => "an element",
        Datum::Table { .. } => "a table",
    }
}
