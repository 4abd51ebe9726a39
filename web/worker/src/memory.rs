//! The memory of the module: told as it grows, and a search stands still before it runs out.
//!
//! A wasm module of 32 bits addresses 4 GiB; what asks for more ends it, and its tree with it.

/// Bytes of a page of memory, as the standard has it.
const PAGE: u64 = 65_536;
/// It is told each time it has grown by so much.
const STEP: u64 = 64 << 20;
/// The most that a module can have.
pub(crate) const MOST: u64 = 1 << 32;
/// With so much taken, a search stands still once.
const FULL: u64 = MOST / 8 * 7;

/// What is to be done about it.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) struct Word {
    /// Bytes taken.
    pub(crate) bytes: u64,
    /// Whether the search is to stand still.
    pub(crate) full: bool,
}

/// What was told of it.
#[derive(Debug, Clone, Default)]
pub(crate) struct Memory {
    told: u64,
    full: bool,
}

impl Memory {
    /// What to tell now, if anything, with so many bytes taken.
    pub(crate) fn look(&mut self, bytes: u64) -> Option<Word> {
        let full = bytes >= FULL && !self.full;
        if bytes < self.told + STEP && !full {
            return None;
        }
        self.told = bytes;
        self.full |= full;
        Some(Word { bytes, full })
    }
}

/// Bytes taken by this module.
#[cfg(target_arch = "wasm32")]
pub(crate) fn taken() -> u64 {
    core::arch::wasm32::memory_size(0) as u64 * PAGE
}

/// Nothing is known of the memory of other machines.
#[cfg(not(target_arch = "wasm32"))]
pub(crate) fn taken() -> u64 {
    PAGE
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn it_is_told_in_steps_and_stops_once() {
        let mut memory = Memory::default();
        assert_eq!(memory.look(STEP / 2), None);
        assert_eq!(memory.look(STEP), Some(Word { bytes: STEP, full: false }));
        assert_eq!(memory.look(STEP + 1), None);
        assert_eq!(memory.look(FULL), Some(Word { bytes: FULL, full: true }));
        assert_eq!(memory.look(FULL + 1), None);
        assert_eq!(memory.look(FULL + STEP), Some(Word { bytes: FULL + STEP, full: false }));
    }
}
