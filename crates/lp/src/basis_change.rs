//! A basis as a difference to another: in a search tree few variables change their place from a
//! node to its child.
//!
//! The bytes of the packed basis that differ, each with its distance from the last one in a
//! variable number of bytes (seven bits a byte, as in LEB128).

use crate::basis::Basis;

/// What turns one basis into another. Some bytes for each variable that changed its place.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct BasisChange {
    columns: u32,
    rows: u32,
    bytes: Box<[u8]>,
}

impl BasisChange {
    /// Bytes that it holds beside its own size.
    #[must_use]
    pub fn len(&self) -> usize {
        self.bytes.len()
    }

    /// Whether nothing changed its place.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        self.bytes.is_empty()
    }
}

impl Basis {
    /// What turns `from` into this basis; rows that `from` lacks count as changed. `O(variables)`.
    #[must_use]
    pub fn change_from(&self, from: &Self) -> BasisChange {
        let mut bytes = Vec::new();
        let mut last = 0;
        for (place, &byte) in self.packed().iter().enumerate() {
            if from.packed().get(place).copied().unwrap_or(0) == byte {
                continue;
            }
            let mut gap = place - last;
            last = place;
            while gap >= 0x80 {
                bytes.push((gap & 0x7f) as u8 | 0x80);
                gap >>= 7;
            }
            bytes.push(gap as u8);
            bytes.push(byte);
        }
        let (columns, rows) = (self.column_count(), self.row_count());
        BasisChange { columns, rows, bytes: bytes.into_boxed_slice() }
    }

    /// The basis that a change turns this one into. `O(variables)`.
    #[must_use]
    pub fn changed(&self, change: &BasisChange) -> Self {
        let size = (change.columns as usize + change.rows as usize).div_ceil(4);
        let mut packed = self.packed().to_vec();
        packed.resize(size, 0);
        let mut place = 0;
        let mut bytes = change.bytes.iter();
        while let Some(&first) = bytes.next() {
            let (mut gap, mut shift, mut byte) = (usize::from(first & 0x7f), 7, first);
            while byte & 0x80 != 0 {
                byte = bytes.next().copied().unwrap_or(0);
                gap |= usize::from(byte & 0x7f) << shift;
                shift += 7;
            }
            place += gap;
            if let (Some(slot), Some(&new)) = (packed.get_mut(place), bytes.next()) {
                *slot = new;
            }
        }
        Self::of_packed(packed, change.columns, change.rows)
    }
}

#[cfg(test)]
mod tests {
    use proptest::collection::vec;
    use proptest::prelude::*;

    use crate::basis::{Basis, Status};

    fn basis(codes: &[u8], columns: usize) -> Basis {
        let of = |code: &u8| match code % 4 {
            0 => Status::Basic,
            1 => Status::Lower,
            2 => Status::Upper,
            _ => Status::Free,
        };
        let all: Vec<Status> = codes.iter().map(of).collect();
        Basis::pack(&all, columns)
    }

    proptest! {
        #[test]
        fn a_change_gives_the_basis_back(
            old in vec(any::<u8>(), 5..900), new in vec(any::<u8>(), 5..900), same in any::<bool>(),
        ) {
            let from = basis(&old, 5);
            let mut codes = if same { old } else { new };
            codes[3] ^= 1;
            let to = basis(&codes, 5);
            let change = to.change_from(&from);
            prop_assert_eq!(from.changed(&change), to.clone());
            prop_assert!(!same || change.len() == 2);
            prop_assert!(to.change_from(&to).is_empty());
        }
    }
}
