//! The work vector of a solve with the factors, numbered by slot.
//!
//! Dense values, a list of the slots that may be nonzero, and a queue of the slots still to be
//! taken: one bit a slot. Taking the lowest (or highest) bit and setting bits above (below) it
//! walks a triangular system in order without searching for its reach or sorting it.

/// Values by slot with the nonzero ones listed.
#[derive(Clone, Debug, Default)]
pub(crate) struct Work {
    pub(super) value: Vec<f64>,
    /// Slots that may be nonzero; a slot may be listed more than once.
    pub(super) index: Vec<u32>,
    pub(super) bits: Vec<u64>,
    /// Values not larger than this are taken for cancelled.
    pub(super) drop: f64,
}

impl Work {
    /// All zero, for this many slots.
    pub(crate) fn reset(&mut self, slots: usize) {
        self.value.clear();
        self.value.resize(slots, 0.0);
        self.index.clear();
        self.bits.clear();
        self.bits.resize(slots.div_ceil(64), 0);
        self.drop = 0.0;
    }

    /// Sets a slot that is zero.
    pub(crate) fn set(&mut self, slot: u32, value: f64) {
        self.value[slot as usize] = value;
        self.index.push(slot);
    }

    /// The value of a slot.
    pub(crate) fn get(&self, slot: u32) -> f64 {
        self.value[slot as usize]
    }

    /// Subtracts from a slot and lists it.
    pub(crate) fn subtract(&mut self, slot: u32, value: f64) {
        self.value[slot as usize] -= value;
        self.index.push(slot);
    }

    /// Sets a slot to zero and returns what it was; it stays in the list.
    pub(crate) fn take(&mut self, slot: u32) -> f64 {
        std::mem::take(&mut self.value[slot as usize])
    }

    /// Queues the listed slots that are not zero and empties the list.
    pub(super) fn queue_listed(&mut self) {
        for &slot in &self.index {
            if self.value[slot as usize] != 0.0 {
                self.bits[slot as usize / 64] |= 1 << (slot % 64);
            }
        }
        self.index.clear();
    }

    /// Calls `visit` with every nonzero value once and sets all to zero.
    pub(crate) fn drain(&mut self, mut visit: impl FnMut(u32, f64)) {
        for &slot in &self.index {
            let value = std::mem::take(&mut self.value[slot as usize]);
            if value != 0.0 {
                visit(slot, value);
            }
        }
        self.index.clear();
    }
}
