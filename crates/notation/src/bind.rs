//! Binding to an instance: every datum found, checked against its shape, and every definition
//! evaluated.

use std::collections::BTreeMap;
use std::ops::Bound::{Excluded, Unbounded};
use std::rc::Rc;

use instance::{Datum, Instance};
use model::Number;

use crate::check::Checked;
use crate::diagnostic::{Diagnostic, data as message, tidy};
use crate::evaluate::{
    Element, Environment, Evaluated, Evaluator, Found, Set, TupleMap, Value, Values, Walk, fail,
};
use crate::expand::Progress;
use crate::plan::{Node, Root, Shape, Symbol, SymbolId};
use crate::syntax::Relation;
use crate::turned::{self, Order};

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
    let mut binding = Binding::new(checked, names);
    while binding.advance(u64::MAX, instance) == Progress::Working {}
    binding.finish()
}

/// The same in slices, a tick being a cell of a table or an index tuple. A set is read, and a
/// definition without indices evaluated, in one go.
#[derive(Debug)]
pub struct Binding {
    evaluator: Evaluator,
    names: BTreeMap<String, String>,
    notes: Vec<Diagnostic>,
    errors: Vec<Diagnostic>,
    /// The place of the next symbol in the order of the plan.
    next: usize,
    open: Option<Indexed>,
}

/// A symbol with indices that is being bound.
#[derive(Debug)]
struct Indexed {
    id: SymbolId,
    /// The instance's values so far.
    cells: TupleMap<Value>,
    /// Whether cells of a table are still to come, and behind which.
    table: Option<Option<Vec<String>>>,
    /// Whether the places of the table's keys are exchanged.
    turned: bool,
    walk: Walk,
    env: Environment,
    values: TupleMap<Value>,
}

impl Binding {
    /// Begins. As for [`bind()`].
    #[must_use]
    pub fn new(checked: &Checked, names: &BTreeMap<String, String>) -> Self {
        let errors = if checked.sound { Vec::new() } else { vec![message::unsound()] };
        let evaluator = Evaluator::new(Rc::clone(&checked.plan));
        let next = if checked.sound { 0 } else { usize::MAX };
        let names = names.clone();
        Self { evaluator, names, notes: Vec::new(), errors, next, open: None }
    }

    /// Goes on for about so many ticks; `instance` must be the same each time.
    pub fn advance(&mut self, ticks: u64, instance: &Instance) -> Progress {
        let plan = Rc::clone(&self.evaluator.plan);
        let mut budget = ticks;
        let Self { evaluator, names, notes, errors, next, open } = self;
        let mut binder = Binder { evaluator, instance, names, notes, errors };
        loop {
            if let Some(one) = open {
                match binder.go_on(one, &mut budget) {
                    Ok(false) => return Progress::Working,
                    Ok(true) => {
                        let values = Values::Indexed(std::mem::take(&mut one.values));
                        binder.evaluator.values[one.id] = Some(values);
                    }
                    Err(diagnostic) => binder.failed(&plan.symbols[one.id], diagnostic),
                }
                *open = None;
            }
            let Some(&id) = plan.order.get(*next) else { return Progress::Finished };
            if budget == 0 {
                return Progress::Working;
            }
            budget -= 1;
            *next += 1;
            // nothing needs what is never used, and its shape may not be known
            if plan.symbols[id].used {
                *open = binder.begin(id);
            }
        }
    }

    /// All data and definitions.
    ///
    /// # Errors
    /// As for [`bind()`].
    pub fn finish(self) -> Result<Bound, Vec<Diagnostic>> {
        if self.errors.is_empty() {
            Ok(Bound { evaluator: self.evaluator, notes: self.notes })
        } else {
            Err(tidy(self.errors))
        }
    }
}

struct Binder<'i> {
    evaluator: &'i mut Evaluator,
    instance: &'i Instance,
    names: &'i BTreeMap<String, String>,
    notes: &'i mut Vec<Diagnostic>,
    errors: &'i mut Vec<Diagnostic>,
}

impl<'i> Binder<'i> {
    /// Binds a symbol, or begins with one that has indices.
    fn begin(&mut self, id: SymbolId) -> Option<Indexed> {
        let plan = Rc::clone(&self.evaluator.plan);
        self.evaluator.start_work();
        let symbol = &plan.symbols[id];
        let datum = if symbol.datum { self.supplied(symbol) } else { None };
        let lacks = symbol.datum && datum.is_none() && symbol.value.is_none();
        if lacks {
            let offers: Vec<String> =
                self.instance.data().map(|(name, _)| name.to_owned()).take(20).collect();
            let key = self.key(symbol).to_owned();
            self.errors.push(message::lacks(&symbol.name, &key, &offers, symbol.span));
            return None;
        }
        if symbol.indices.is_empty() {
            match self.single(symbol, datum) {
                Ok(value) => self.evaluator.values[id] = Some(Values::Single(value)),
                Err(diagnostic) => self.failed(symbol, diagnostic),
            }
            return None;
        }
        let table = datum.is_some_and(|datum| self.is_table(symbol, datum));
        let cells = match datum.filter(|_| !table).map(|datum| self.cells(symbol, datum)) {
            Some(Ok(cells)) => cells,
            Some(Err(diagnostic)) => {
                self.failed(symbol, diagnostic);
                return None;
            }
            None => TupleMap::default(),
        };
        let turned = match datum.filter(|_| table) {
            Some(Datum::Table { arity: 2, cells }) => self.is_turned(symbol, cells),
            _ => false,
        };
        Some(Indexed {
            id,
            cells,
            turned,
            table: table.then_some(None),
            walk: Walk::default(),
            env: self.evaluator.environment(),
            values: TupleMap::default(),
        })
    }

    fn failed(&mut self, symbol: &Symbol, diagnostic: Box<Diagnostic>) {
        let diagnostic = crate::evaluate::placed(diagnostic, symbol.span);
        // what it needs lacks: that has been said
        if self.errors.is_empty() || diagnostic.code != message::UNAVAILABLE {
            self.errors.push(*diagnostic);
        }
    }

    /// The name by which the instance holds a symbol.
    fn key<'s>(&'s self, symbol: &'s Symbol) -> &'s str {
        self.names.get(&symbol.name).map_or(symbol.name.as_str(), |given| turned::named(given).0)
    }

    /// Whether a table over two sets is to be turned round: where a person says so, or where its
    /// labels fit the sets only then, which is told, as it is where they fit both ways.
    fn is_turned(&mut self, symbol: &Symbol, cells: &BTreeMap<Vec<String>, Number>) -> bool {
        let given = self.names.get(&symbol.name);
        if given.is_some_and(|given| turned::named(given).1) {
            return true;
        }
        let mut pool = self.evaluator.pool.borrow_mut();
        let values = &self.evaluator.values;
        let holds = |root: Root, label: &str| match root {
            Root::Set(id) => match values.get(id) {
                Some(Some(Values::Single(Value::Set(set)))) => set.contains(&[pool.intern(label)]),
                _ => true,
            },
            Root::Integer => label.parse::<i64>().is_ok(),
            Root::Unknown => true,
        };
        let found = turned::order(&symbol.roots, cells, holds);
        match found {
            Order::Turned => self.notes.push(message::turned(&symbol.name, symbol.span)),
            Order::Either => {
                let key = self.key(symbol).to_owned();
                self.notes.push(message::either_way(&symbol.name, &key, symbol.span));
            }
            Order::Declared => {}
        }
        found == Order::Turned
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
        self.contained(symbol, &value, &[], &mut env)?;
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
        key: &[Element],
        env: &mut Environment,
    ) -> Evaluated<()> {
        if let Value::Number(number) = value {
            return self.in_range(symbol, number, key, env);
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
        key: &[Element],
        env: &mut Environment,
    ) -> Evaluated<()> {
        if symbol.whole && !number.is_int() && self.notes.len() < 50 {
            let what = self.evaluator.shown(&symbol.name, key, false);
            self.notes.push(message::not_whole(&what, symbol.span));
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
                let what = self.evaluator.shown(&symbol.name, key, false);
                self.notes.push(message::out_of_range(&what, symbol.span));
            }
        }
        Ok(())
    }

    /// One value for each index tuple: the instance's where it has one, else the default.
    /// Whether that was all within the budget.
    fn go_on(&mut self, open: &mut Indexed, budget: &mut u64) -> Evaluated<bool> {
        let plan = Rc::clone(&self.evaluator.plan);
        let symbol = &plan.symbols[open.id];
        if !self.table_cells(symbol, open, budget) {
            return Ok(false);
        }
        loop {
            match open.walk.next(&symbol.steps, self.evaluator, &mut open.env, budget)? {
                Found::Paused => return Ok(false),
                Found::Done => return Ok(true),
                Found::Tuple(_) => self.one_value(symbol, open)?,
            }
        }
    }

    fn one_value(&mut self, symbol: &Symbol, open: &mut Indexed) -> Evaluated<()> {
        let limit = crate::evaluate::SET_LIMIT;
        if open.values.len() >= limit {
            let span = crate::place::Span::default();
            return fail(crate::diagnostic::size::set(limit as u128 + 1, limit, span));
        }
        let env = &mut open.env;
        let key = self.evaluator.tuple(&symbol.indices, env)?;
        let value = match (open.cells.get(&key), &symbol.value, &symbol.shape) {
            (Some(value), ..) => value.clone(),
            (None, Some(default), _) => self.evaluator.value(default, env)?,
            (None, None, Shape::Set(roots)) => {
                Value::Set(Rc::new(Set::new(roots.len(), std::iter::empty())))
            }
            (None, None, _) => {
                let named = self.key(symbol);
                let what = self.evaluator.shown(&symbol.name, &key, false);
                let what =
                    if named == symbol.name { what } else { format!("{what} (a cell of {named})") };
                return fail(message::cell(&what, symbol.span));
            }
        };
        let value = self.shaped(symbol, value)?;
        self.contained(symbol, &value, &key, env)?;
        open.values.insert(&key, value);
        Ok(())
    }

    /// Whether a datum is a table with the indices of a symbol, to be read cell by cell.
    fn is_table(&self, symbol: &Symbol, datum: &Datum) -> bool {
        let number = matches!(symbol.shape, Shape::Number | Shape::Element(_));
        number && matches!(datum, Datum::Table { arity, .. } if symbol.has_places(*arity))
    }

    /// Goes on with the cells of a table; whether all of them are read.
    fn table_cells(&mut self, symbol: &Symbol, open: &mut Indexed, budget: &mut u64) -> bool {
        let Some(behind) = open.table.take() else { return true };
        let Some(Datum::Table { cells, .. }) = self.instance.get(self.key(symbol)) else {
            return true;
        };
        let mut pool = self.evaluator.pool.borrow_mut();
        let from = behind.map_or(Unbounded, Excluded);
        for (key, value) in cells.range((from, Unbounded)) {
            let own = symbol.whole_key(key);
            let mut own: Vec<Element> = own.iter().map(|cell| pool.intern(cell)).collect();
            if open.turned {
                own.reverse();
            }
            open.cells.insert(&own, Value::Number(value.clone()));
            *budget = budget.saturating_sub(1);
            if *budget == 0 {
                open.table = Some(Some(key.clone()));
                return false;
            }
        }
        true
    }

    /// The cells of a datum that is no table: the last place of tuples as an element or as members
    /// of a set.
    fn cells(&self, symbol: &Symbol, datum: &Datum) -> Evaluated<TupleMap<Value>> {
        let places = symbol.indices.len();
        let mut pool = self.evaluator.pool.borrow_mut();
        let mut cells = TupleMap::default();
        match (datum, &symbol.shape) {
            (Datum::Number(value), Shape::Number) if symbol.has_places(0) => {
                let own = symbol.whole_key(&[]);
                let key: Vec<Element> = own.iter().map(|cell| pool.intern(cell)).collect();
                cells.insert(&key, Value::Number(value.clone()));
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
