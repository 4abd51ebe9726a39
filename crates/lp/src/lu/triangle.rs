//! Solves with a sparse triangular matrix whose unknowns are numbered by slot.
//!
//! Slot k lists the places its value is subtracted from: x_i ← x_i − t_ik x_k, after
//! x_k ← x_k / d_k where there is a diagonal. With few nonzeros only the slots that become nonzero
//! are taken, in order, from the queue of the work vector; once many have been, the rest is walked
//! slot by slot. Both ways do the same operations in the same order and give the same bits.
//!
//! The lists can grow and shrink between solves (see `forrest_tomlin`).
//!
//! Source: Gilbert, Peierls 1988; Hall, McKinnon 2005 (when to look for sparsity).

use super::work::Work;
use crate::tolerances::HYPERSPARSE;

/// Which way the slots are taken.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Direction {
    Forward,
    Backward,
}

/// A triangular matrix without its diagonal, one list of entries a slot.
#[derive(Clone, Debug, Default)]
pub(crate) struct Triangle {
    start: Vec<u32>,
    end: Vec<u32>,
    /// Where the space of each list ends.
    room: Vec<u32>,
    index: Vec<u32>,
    value: Vec<f64>,
    nonzeros: usize,
}

impl Triangle {
    /// Empties the triangle, to be filled list by list.
    pub(crate) fn begin(&mut self) {
        self.end.clear();
        self.index.clear();
        self.value.clear();
    }

    /// Adds an entry to the list that is being filled.
    pub(crate) fn push(&mut self, index: u32, value: f64) {
        self.index.push(index);
        self.value.push(value);
    }

    /// Ends the list that is being filled.
    pub(crate) fn close_list(&mut self) {
        self.end.push(self.index.len() as u32);
    }

    /// Ends the filling.
    pub(crate) fn finish(&mut self) {
        self.nonzeros = self.index.len();
        self.start.clear();
        self.start.push(0);
        self.start.extend_from_slice(&self.end);
        self.start.pop();
        self.room.clone_from(&self.end);
    }

    /// Number of nonzeros beside the diagonal.
    pub(crate) fn nonzeros(&self) -> usize {
        self.nonzeros
    }

    /// Number of lists.
    fn slots(&self) -> usize {
        self.start.len()
    }

    fn range(&self, slot: usize) -> std::ops::Range<usize> {
        self.start[slot] as usize..self.end[slot] as usize
    }

    /// The entries (slot, value) of a list.
    pub(crate) fn list(&self, slot: u32) -> impl Iterator<Item = (u32, f64)> + '_ {
        let range = self.range(slot as usize);
        self.index[range.clone()].iter().copied().zip(self.value[range].iter().copied())
    }

    /// Takes the entries of another triangle, listed from the other side.
    pub(crate) fn transpose(&mut self, other: &Self) {
        let size = other.slots();
        self.end.clear();
        self.end.resize(size, 0);
        for slot in 0..size {
            for &i in &other.index[other.range(slot)] {
                self.end[i as usize] += 1;
            }
        }
        // The end of each list stands at its beginning while it is filled.
        let mut sum = 0;
        for end in &mut self.end {
            sum += *end;
            *end = sum - *end;
        }
        self.index.clear();
        self.index.resize(other.nonzeros, 0);
        self.value.clear();
        self.value.resize(other.nonzeros, 0.0);
        for slot in 0..size {
            for (i, entry) in other.list(slot as u32) {
                let place = &mut self.end[i as usize];
                self.index[*place as usize] = slot as u32;
                self.value[*place as usize] = entry;
                *place += 1;
            }
        }
        self.finish();
    }

    /// Appends an empty list.
    pub(crate) fn push_slot(&mut self) {
        let at = self.index.len() as u32;
        self.start.push(at);
        self.end.push(at);
        self.room.push(at);
    }

    /// Adds an entry to a list, which moves to the end of the store when its space is full.
    pub(crate) fn insert(&mut self, slot: u32, index: u32, value: f64) {
        let at = slot as usize;
        if self.end[at] == self.room[at] {
            let range = self.range(at);
            let (length, start) = (range.len(), self.index.len());
            self.index.extend_from_within(range.clone());
            self.value.extend_from_within(range);
            let room = start + 2 * length + 4;
            self.index.resize(room, 0);
            self.value.resize(room, 0.0);
            self.start[at] = start as u32;
            self.end[at] = (start + length) as u32;
            self.room[at] = room as u32;
        }
        let place = self.end[at] as usize;
        self.index[place] = index;
        self.value[place] = value;
        self.end[at] += 1;
        self.nonzeros += 1;
    }

    /// Removes the entry of a list with this index, if there is one.
    pub(crate) fn remove(&mut self, slot: u32, index: u32) {
        let range = self.range(slot as usize);
        if let Some(found) = self.index[range.clone()].iter().position(|&held| held == index) {
            let (place, last) = (range.start + found, range.end - 1);
            self.index[place] = self.index[last];
            self.value[place] = self.value[last];
            self.end[slot as usize] -= 1;
            self.nonzeros -= 1;
        }
    }

    /// Empties a list.
    pub(crate) fn clear(&mut self, slot: u32) {
        self.nonzeros -= self.range(slot as usize).len();
        self.end[slot as usize] = self.start[slot as usize];
    }

    /// Solves in place; the list of `x` is in the order of the solve afterwards. Returns the
    /// nonzeros touched.
    pub(crate) fn solve(
        &self,
        diagonal: Option<&[f64]>,
        x: &mut Work,
        direction: Direction,
    ) -> u64 {
        match (direction, diagonal) {
            (Direction::Forward, None) => self.forward::<false>(&[], x),
            (Direction::Forward, Some(diagonal)) => self.forward::<true>(diagonal, x),
            (Direction::Backward, None) => self.backward::<false>(&[], x),
            (Direction::Backward, Some(diagonal)) => self.backward::<true>(diagonal, x),
        }
    }

    /// Number of nonzeros from which every slot is walked.
    fn many(&self) -> usize {
        (HYPERSPARSE * self.slots() as f64) as usize
    }

    /// Slots ascending.
    fn forward<const DIAGONAL: bool>(&self, diagonal: &[f64], x: &mut Work) -> u64 {
        let (many, mut ticks, mut word) = (self.many(), 0, 0);
        let mut next = 0;
        if x.index.len() <= many {
            x.queue_listed();
            next = self.slots();
            while word < x.bits.len() {
                let set = x.bits[word];
                if set == 0 {
                    word += 1;
                    continue;
                }
                x.bits[word] = set & (set - 1);
                let k = word * 64 + set.trailing_zeros() as usize;
                ticks += self.step::<DIAGONAL, true>(k, diagonal, x);
                if x.index.len() > many {
                    x.bits[word..].fill(0);
                    next = k + 1;
                    break;
                }
            }
        } else {
            x.index.clear();
        }
        ticks += (self.slots() - next) as u64 / 8;
        for k in next..self.slots() {
            ticks += self.step::<DIAGONAL, false>(k, diagonal, x);
        }
        ticks
    }

    /// Slots descending.
    fn backward<const DIAGONAL: bool>(&self, diagonal: &[f64], x: &mut Work) -> u64 {
        let (many, mut ticks, mut word) = (self.many(), 0, x.bits.len());
        let mut next = self.slots();
        if x.index.len() <= many {
            x.queue_listed();
            next = 0;
            while word > 0 {
                let set = x.bits[word - 1];
                if set == 0 {
                    word -= 1;
                    continue;
                }
                let top = 63 - set.leading_zeros() as usize;
                x.bits[word - 1] = set & !(1 << top);
                let k = (word - 1) * 64 + top;
                ticks += self.step::<DIAGONAL, true>(k, diagonal, x);
                if x.index.len() > many {
                    x.bits[..word].fill(0);
                    next = k;
                    break;
                }
            }
        } else {
            x.index.clear();
        }
        ticks += next as u64 / 8;
        for k in (0..next).rev() {
            ticks += self.step::<DIAGONAL, false>(k, diagonal, x);
        }
        ticks
    }

    /// One step: settles x_k, lists it and subtracts it where it stands.
    #[inline]
    fn step<const DIAGONAL: bool, const QUEUE: bool>(
        &self,
        k: usize,
        diagonal: &[f64],
        x: &mut Work,
    ) -> u64 {
        let mut pivot = x.value[k];
        if pivot == 0.0 {
            return 0;
        }
        if pivot.abs() <= x.drop {
            x.value[k] = 0.0;
            return 0;
        }
        if DIAGONAL {
            pivot /= diagonal[k];
            x.value[k] = pivot;
        }
        x.index.push(k as u32);
        let range = self.range(k);
        let count = range.len() as u64;
        for (&i, &t) in self.index[range.clone()].iter().zip(&self.value[range]) {
            x.value[i as usize] -= t * pivot;
            if QUEUE {
                x.bits[i as usize / 64] |= 1 << (i % 64);
            }
        }
        1 + count
    }
}
