//! Items grouped by a small count: doubly linked lists, so that an item moves in constant time.

/// No item.
pub(crate) const NONE: u32 = u32::MAX;

/// Items 0..size, each in at most one list; list k holds the items of count k.
#[derive(Clone, Debug, Default)]
pub(crate) struct Buckets {
    first: Vec<u32>,
    next: Vec<u32>,
    previous: Vec<u32>,
    count: Vec<u32>,
}

impl Buckets {
    /// Makes the lists empty, for `size` items with counts up to `size`.
    pub(crate) fn reset(&mut self, size: usize) {
        self.first.clear();
        self.first.resize(size + 1, NONE);
        for list in [&mut self.next, &mut self.previous, &mut self.count] {
            list.clear();
            list.resize(size, NONE);
        }
    }

    /// The first item of a list, or [`NONE`].
    pub(crate) fn first(&self, count: usize) -> u32 {
        self.first.get(count).copied().unwrap_or(NONE)
    }

    /// The item after this one, or [`NONE`].
    pub(crate) fn next(&self, item: u32) -> u32 {
        self.next[item as usize]
    }

    /// Puts an item that is in no list into the list of its count.
    pub(crate) fn insert(&mut self, item: u32, count: usize) {
        let head = self.first[count];
        self.next[item as usize] = head;
        self.previous[item as usize] = NONE;
        if head != NONE {
            self.previous[head as usize] = item;
        }
        self.first[count] = item;
        self.count[item as usize] = count as u32;
    }

    /// Takes an item out of its list, if it is in one.
    pub(crate) fn remove(&mut self, item: u32) {
        let count = self.count[item as usize];
        if count == NONE {
            return;
        }
        let (previous, next) = (self.previous[item as usize], self.next[item as usize]);
        if previous == NONE {
            self.first[count as usize] = next;
        } else {
            self.next[previous as usize] = next;
        }
        if next != NONE {
            self.previous[next as usize] = previous;
        }
        self.count[item as usize] = NONE;
    }

    /// Moves an item to the list of a new count.
    pub(crate) fn relocate(&mut self, item: u32, count: usize) {
        self.remove(item);
        self.insert(item, count);
    }
}
