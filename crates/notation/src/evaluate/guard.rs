//! Guards: conditions on a subset `S` that hangs over a row, as a truth table over the
//! membership of at most two elements.

use super::value::Element;

/// A truth table over "is in S" of `atoms`: bit `a + 2b` tells what holds when the first
/// atom's membership is `a` and the second's is `b`.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) struct Guard {
    atoms: [Element; 2],
    count: u8,
    table: u8,
}

impl Guard {
    pub(crate) const ALWAYS: Self = Self::known(true);

    pub(crate) const fn known(value: bool) -> Self {
        Self { atoms: [Element(0); 2], count: 0, table: if value { 1 } else { 0 } }
    }

    /// "The element is in S", or not.
    pub(crate) fn member(element: Element, inside: bool) -> Self {
        Self { atoms: [element, Element(0)], count: 1, table: if inside { 0b10 } else { 0b01 } }
    }

    /// The value, where the table does not depend on S.
    pub(crate) fn value(self) -> Option<bool> {
        let all = (1_u8 << (1 << self.count)) - 1;
        match self.table & all {
            0 => Some(false),
            t if t == all => Some(true),
            _ => None,
        }
    }

    pub(crate) fn not(self) -> Self {
        let all = (1_u8 << (1 << self.count)) - 1;
        Self { table: !self.table & all, ..self }
    }

    /// Both hold; `None` when more than two elements decide.
    pub(crate) fn and(self, other: Self) -> Option<Self> {
        if self.value() == Some(false) || other.value() == Some(true) {
            return Some(self);
        }
        if other.value() == Some(false) || self.value() == Some(true) {
            return Some(other);
        }
        let mut atoms = self.atoms[..usize::from(self.count)].to_vec();
        for &atom in &other.atoms[..usize::from(other.count)] {
            if !atoms.contains(&atom) {
                atoms.push(atom);
            }
        }
        if atoms.len() > 2 {
            return None;
        }
        let mut table = 0;
        for row in 0..1_u8 << atoms.len() {
            let inside =
                |e: Element| atoms.iter().position(|&a| a == e).is_some_and(|i| row >> i & 1 == 1);
            if self.holds(inside) && other.holds(inside) {
                table |= 1 << row;
            }
        }
        let mut pair = [Element(0); 2];
        pair[..atoms.len()].copy_from_slice(&atoms);
        Some(Self { atoms: pair, count: u8::try_from(atoms.len()).unwrap_or(2), table })
    }

    /// One or both hold.
    pub(crate) fn or(self, other: Self) -> Option<Self> {
        self.not().and(other.not()).map(Self::not)
    }

    pub(crate) fn holds(self, inside: impl Fn(Element) -> bool) -> bool {
        let bit = |i: usize| u8::from(usize::from(self.count) > i && inside(self.atoms[i])) << i;
        self.table >> (bit(0) | bit(1)) & 1 == 1
    }

    pub(crate) fn atoms(&self) -> &[Element] {
        &self.atoms[..usize::from(self.count)]
    }

    pub(crate) fn table(self) -> u8 {
        self.table
    }
}

#[cfg(test)]
mod tests {
    use super::{Element, Guard};

    #[test]
    fn tables_agree_with_logic() {
        let (a, b, c) = (Element(1), Element(2), Element(3));
        let leaving = Guard::member(a, true).and(Guard::member(b, false)).unwrap();
        let crossing =
            leaving.or(Guard::member(a, false).and(Guard::member(b, true)).unwrap()).unwrap();
        for (x, y) in [(false, false), (false, true), (true, false), (true, true)] {
            let inside = |e: Element| if e == a { x } else { y };
            assert_eq!(leaving.holds(inside), x && !y);
            assert_eq!(crossing.holds(inside), x != y);
            assert_eq!(leaving.not().holds(inside), !x || y);
        }
        assert_eq!(
            Guard::member(a, true).and(Guard::member(a, false)).unwrap().value(),
            Some(false)
        );
        assert_eq!(leaving.and(Guard::member(c, true)), None);
        assert_eq!(Guard::ALWAYS.and(leaving), Some(leaving));
    }
}
