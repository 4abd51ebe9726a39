//! Values: elements, sets, numbers.

use std::cell::RefCell;
use std::collections::BTreeMap;
use std::rc::Rc;

use super::TupleMap;
use model::Number;

/// An element of a set: the number of its name in the [`Pool`].
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Default)]
pub(crate) struct Element(pub(crate) u32);

/// The names of all elements. A whole number and a label with the same digits are one element.
#[derive(Debug, Default)]
pub(crate) struct Pool {
    names: Vec<String>,
    whole: Vec<Option<i64>>,
    ids: BTreeMap<String, Element>,
}

impl Pool {
    pub(crate) fn intern(&mut self, name: &str) -> Element {
        if let Some(&id) = self.ids.get(name) {
            return id;
        }
        let id = Element(u32::try_from(self.names.len()).unwrap_or(u32::MAX));
        let whole = name.parse::<i64>().ok().filter(|n| n.to_string() == name);
        self.names.push(name.to_owned());
        self.whole.push(whole);
        self.ids.insert(name.to_owned(), id);
        id
    }

    pub(crate) fn name(&self, element: Element) -> &str {
        self.names.get(element.0 as usize).map_or("", String::as_str)
    }

    /// The value of an element that is a whole number.
    pub(crate) fn whole(&self, element: Element) -> Option<i64> {
        self.whole.get(element.0 as usize).copied().flatten()
    }

    /// `Ash, Birch`, for messages.
    pub(crate) fn tuple(&self, tuple: &[Element]) -> String {
        let names: Vec<&str> = tuple.iter().map(|&e| self.name(e)).collect();
        names.join(", ")
    }
}

/// Members that agree with a tuple in some places: their numbers, by the values there.
type Slice = BTreeMap<Vec<Element>, Rc<Vec<u32>>>;

/// A set of tuples in the order of their listing.
#[derive(Debug, Default)]
pub(crate) struct Set {
    pub(crate) arity: usize,
    /// Whether its members are compared by value, not by their place in the listing.
    pub(crate) by_value: bool,
    flat: Vec<Element>,
    lookup: TupleMap<u32>,
    slices: RefCell<BTreeMap<u32, Rc<Slice>>>,
}

impl Set {
    /// The set of `tuples`, each once.
    pub(crate) fn new(arity: usize, tuples: impl IntoIterator<Item = Vec<Element>>) -> Self {
        let mut set = Self { arity, ..Self::default() };
        for tuple in tuples {
            let next = u32::try_from(set.lookup.len()).unwrap_or(u32::MAX);
            if !set.lookup.contains(&tuple) {
                set.flat.extend_from_slice(&tuple);
                set.lookup.insert(&tuple, next);
            }
        }
        set
    }

    pub(crate) fn len(&self) -> usize {
        self.lookup.len()
    }

    pub(crate) fn is_empty(&self) -> bool {
        self.len() == 0
    }

    pub(crate) fn get(&self, index: usize) -> &[Element] {
        &self.flat[index * self.arity..(index + 1) * self.arity]
    }

    pub(crate) fn iter(&self) -> impl Iterator<Item = &[Element]> {
        (0..self.len()).map(|i| self.get(i))
    }

    pub(crate) fn position(&self, tuple: &[Element]) -> Option<u32> {
        self.lookup.get(tuple).copied()
    }

    pub(crate) fn contains(&self, tuple: &[Element]) -> bool {
        self.lookup.contains(tuple)
    }

    /// The members whose places in `mask` (bit 0 is the first) hold `key`, in order. The first
    /// call for a mask is `O(members · log)`, the others `O(log)`.
    pub(crate) fn slice(&self, mask: u32, key: &[Element]) -> Option<Rc<Vec<u32>>> {
        if let Some(slice) = self.slices.borrow().get(&mask) {
            return slice.get(key).cloned();
        }
        let mut slice: BTreeMap<Vec<Element>, Vec<u32>> = BTreeMap::new();
        for (i, tuple) in self.iter().enumerate() {
            let at = |place: &usize| mask & (1 << place) != 0;
            let key: Vec<Element> = (0..self.arity).filter(at).map(|place| tuple[place]).collect();
            slice.entry(key).or_default().push(u32::try_from(i).unwrap_or(u32::MAX));
        }
        let slice: Slice = slice.into_iter().map(|(k, v)| (k, Rc::new(v))).collect();
        let found = slice.get(key).cloned();
        self.slices.borrow_mut().insert(mask, Rc::new(slice));
        found
    }
}

/// What an expression without variables gives.
#[derive(Debug, Clone)]
pub(crate) enum Value {
    Number(Number),
    Element(Element),
    Set(Rc<Set>),
}
