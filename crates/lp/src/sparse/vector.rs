//! A work vector: dense values and a list of the places that may be nonzero.
//!
//! Every nonzero place is in the list once; clearing costs the length of the list.

/// A vector whose touched places are listed.
#[derive(Clone, Debug, Default)]
pub(crate) struct SparseVector {
    value: Vec<f64>,
    index: Vec<u32>,
    listed: Vec<bool>,
}

impl SparseVector {
    /// Empties the vector and gives it a length.
    pub(crate) fn reset(&mut self, len: usize) {
        self.clear();
        self.value.resize(len, 0.0);
        self.listed.resize(len, false);
    }

    /// Sets every listed place to zero and empties the list.
    pub(crate) fn clear(&mut self) {
        for &i in &self.index {
            self.value[i as usize] = 0.0;
            self.listed[i as usize] = false;
        }
        self.index.clear();
    }

    /// Length of the vector.
    pub(crate) fn len(&self) -> usize {
        self.value.len()
    }

    /// Number of listed places.
    pub(crate) fn count(&self) -> usize {
        self.index.len()
    }

    /// The value at a place.
    pub(crate) fn get(&self, place: u32) -> f64 {
        self.value[place as usize]
    }

    /// Lists a place, if it is not listed yet.
    pub(crate) fn list(&mut self, place: u32) {
        if !self.listed[place as usize] {
            self.listed[place as usize] = true;
            self.index.push(place);
        }
    }

    /// Sets the value at a place and lists it.
    pub(crate) fn set(&mut self, place: u32, value: f64) {
        self.list(place);
        self.value[place as usize] = value;
    }

    /// Adds to the value at a place and lists it.
    pub(crate) fn add(&mut self, place: u32, value: f64) {
        self.list(place);
        self.value[place as usize] += value;
    }

    /// Adds a multiple of many entries without listing them; [`list_below`](Self::list_below) must
    /// follow.
    pub(crate) fn add_unlisted(&mut self, places: &[u32], values: &[f64], multiplier: f64) {
        for (&place, &value) in places.iter().zip(values) {
            self.value[place as usize] += multiplier * value;
        }
    }

    /// Lists the nonzero places below `end`, ascending.
    pub(crate) fn list_below(&mut self, end: u32) {
        for place in 0..end {
            if self.value[place as usize] != 0.0 {
                self.list(place);
            }
        }
    }

    /// The listed places, in order of listing.
    pub(crate) fn indices(&self) -> &[u32] {
        &self.index
    }

    /// The listed places with their values.
    pub(crate) fn iter(&self) -> impl Iterator<Item = (u32, f64)> + '_ {
        self.index.iter().map(|&i| (i, self.value[i as usize]))
    }

    /// Copies another vector of the same length.
    pub(crate) fn copy_from(&mut self, other: &Self) {
        self.reset(other.len());
        for (i, value) in other.iter() {
            self.set(i, value);
        }
    }

    /// Calls `visit` with every nonzero value and empties the vector.
    pub(crate) fn drain(&mut self, mut visit: impl FnMut(u32, f64)) {
        for &i in &self.index {
            let value = std::mem::take(&mut self.value[i as usize]);
            self.listed[i as usize] = false;
            if value != 0.0 {
                visit(i, value);
            }
        }
        self.index.clear();
    }

    /// The largest size of a value.
    pub(crate) fn largest(&self) -> f64 {
        super::largest(self.iter().map(|(_, value)| value))
    }

    /// The sum of squares.
    pub(crate) fn norm_squared(&self) -> f64 {
        self.iter().map(|(_, value)| value * value).sum()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn places_are_listed_once_and_cleared() {
        let mut v = SparseVector::default();
        v.reset(4);
        v.add(2, 1.5);
        v.add(2, -1.5);
        v.add(2, 1.0);
        v.set(0, 2.0);
        assert_eq!(v.indices(), &[2, 0]);
        assert_eq!(v.norm_squared(), 5.0);
        v.add_unlisted(&[1, 3], &[1.0, 2.0], 3.0);
        v.list_below(4);
        assert_eq!((v.indices(), v.get(1), v.get(3)), (&[2, 0, 1, 3][..], 3.0, 6.0));
        v.clear();
        assert_eq!((v.count(), v.get(2), v.len()), (0, 0.0, 4));
    }
}
