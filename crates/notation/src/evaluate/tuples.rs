//! Maps by index tuple. Tuples of up to three places, which nearly all are, are packed into one
//! number, so that a look-up takes no memory and follows no pointer but those of the tree.

use std::collections::BTreeMap;

use super::Element;

/// The longest tuple that is packed.
const PACKED: usize = 3;

/// Values by tuple, in the order of the tuples where all are of one length.
#[derive(Debug, Clone)]
pub(crate) struct TupleMap<V> {
    packed: BTreeMap<u128, V>,
    long: BTreeMap<Vec<Element>, V>,
}

impl<V> Default for TupleMap<V> {
    fn default() -> Self {
        Self { packed: BTreeMap::new(), long: BTreeMap::new() }
    }
}

/// The length and the places, 32 bits each.
fn pack(tuple: &[Element]) -> Option<u128> {
    (tuple.len() <= PACKED).then(|| {
        tuple.iter().fold(tuple.len() as u128, |key, element| key << 32 | u128::from(element.0))
    })
}

impl<V> TupleMap<V> {
    /// `O(log values)`.
    pub(crate) fn get(&self, tuple: &[Element]) -> Option<&V> {
        match pack(tuple) {
            Some(key) => self.packed.get(&key),
            None => self.long.get(tuple),
        }
    }

    /// Puts a value at a tuple; what stood there before. `O(log values)`.
    pub(crate) fn insert(&mut self, tuple: &[Element], value: V) -> Option<V> {
        match pack(tuple) {
            Some(key) => self.packed.insert(key, value),
            None => self.long.insert(tuple.to_vec(), value),
        }
    }

    pub(crate) fn len(&self) -> usize {
        self.packed.len() + self.long.len()
    }

    pub(crate) fn contains(&self, tuple: &[Element]) -> bool {
        self.get(tuple).is_some()
    }
}

#[cfg(test)]
mod tests {
    use super::{Element, TupleMap};

    #[test]
    fn tuples_of_every_length_are_told_apart() {
        let mut map = TupleMap::default();
        let tuple = |places: &[u32]| places.iter().map(|&n| Element(n)).collect::<Vec<_>>();
        let all =
            [&[][..], &[0], &[0, 0], &[0, 0, 0], &[0, 0, 0, 0], &[1, u32::MAX], &[u32::MAX, 1]];
        for (value, places) in all.iter().enumerate() {
            assert_eq!(map.insert(&tuple(places), value), None);
        }
        assert_eq!(map.len(), all.len());
        for (value, places) in all.iter().enumerate() {
            assert_eq!(map.get(&tuple(places)), Some(&value));
        }
        assert!(!map.contains(&tuple(&[1, 1])));
        assert_eq!(map.insert(&tuple(&[0]), 9), Some(1));
    }
}
