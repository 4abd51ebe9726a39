//! Heights of the nodes of a growing tree.
//!
//! Every node owns a slot, an interval of [0, 1]; a leaf stands in its middle, a parent midway
//! between its first and last child. While the tree grows a new child takes a part of its
//! parent's slot and nothing else moves; [`Layout::tidy`] deals the slots anew by the number of
//! leaves, so that leaves are evenly spread. Nodes are numbered so that parents come first,
//! which makes every pass a loop over the numbers, without recursion.

/// No node.
const NONE: u32 = u32::MAX;

/// Slots and heights, by node.
#[derive(Debug, Clone, Default)]
pub struct Layout {
    parent: Vec<u32>,
    has_child: Vec<bool>,
    low: Vec<f32>,
    high: Vec<f32>,
    height: Vec<f32>,
    tidied: usize,
}

impl Layout {
    /// An empty layout.
    #[must_use]
    pub fn new() -> Self {
        Self::default()
    }

    /// How many nodes there are.
    #[must_use]
    pub fn len(&self) -> usize {
        self.parent.len()
    }

    /// Whether there is no node.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        self.parent.is_empty()
    }

    /// Appends a node; a parent that is not there makes it a root. O(1).
    pub fn push(&mut self, parent: Option<usize>) {
        let parent = parent.filter(|&parent| parent < self.parent.len());
        let (low, high) = parent.map_or((0.0, 1.0), |parent| self.take_slot(parent));
        self.parent.push(parent.map_or(NONE, |parent| parent as u32));
        self.has_child.push(false);
        self.low.push(low);
        self.high.push(high);
        self.height.push((low + high) / 2.0);
    }

    /// The first child takes the first half of the slot, any later one the second half.
    fn take_slot(&mut self, parent: usize) -> (f32, f32) {
        let (low, high) = (self.low[parent], self.high[parent]);
        let middle = (low + high) / 2.0;
        let first = !self.has_child[parent];
        self.has_child[parent] = true;
        if first { (low, middle) } else { (middle, high) }
    }

    /// Whether so much has grown that dealing the slots anew pays: half as many nodes again.
    #[must_use]
    pub fn is_overgrown(&self) -> bool {
        self.len() >= self.tidied + self.tidied / 2 + 8
    }

    /// Whether a node came since the slots were dealt.
    #[must_use]
    pub fn is_tidy(&self) -> bool {
        self.tidied == self.len()
    }

    /// Deals the slots by the number of leaves. O(nodes).
    pub fn tidy(&mut self) {
        self.deal(&self.leaves());
        self.centre();
        self.tidied = self.len();
    }

    /// The number of leaves under each node.
    fn leaves(&self) -> Vec<u32> {
        let mut leaves = vec![0_u32; self.len()];
        for node in (0..self.len()).rev() {
            if leaves[node] == 0 {
                leaves[node] = 1;
            }
            let parent = self.parent[node];
            if parent != NONE {
                leaves[parent as usize] += leaves[node];
            }
        }
        leaves
    }

    fn deal(&mut self, leaves: &[u32]) {
        let mut next = vec![0.0_f32; self.len()];
        for node in 0..self.len() {
            let parent = self.parent[node];
            let (low, high) = if parent == NONE {
                (0.0, 1.0)
            } else {
                let parent = parent as usize;
                let share = leaves[node] as f32 / leaves[parent] as f32;
                let low = next[parent];
                let high = low + (self.high[parent] - self.low[parent]) * share;
                next[parent] = high;
                (low, high)
            };
            (self.low[node], self.high[node], next[node]) = (low, high, low);
        }
    }

    fn centre(&mut self) {
        let mut first = vec![0.0_f32; self.len()];
        let mut last = vec![f32::NEG_INFINITY; self.len()];
        for node in (0..self.len()).rev() {
            self.height[node] = if last[node] == f32::NEG_INFINITY {
                (self.low[node] + self.high[node]) / 2.0
            } else {
                (first[node] + last[node]) / 2.0
            };
            let parent = self.parent[node];
            if parent != NONE {
                let parent = parent as usize;
                if last[parent] == f32::NEG_INFINITY {
                    last[parent] = self.height[node];
                }
                first[parent] = self.height[node];
            }
        }
    }

    /// The slot of a node: all that grows from it stands in it.
    #[must_use]
    pub fn slot(&self, node: usize) -> (f32, f32) {
        let at = |bounds: &[f32], other: f32| bounds.get(node).copied().unwrap_or(other);
        (at(&self.low, 0.0), at(&self.high, 1.0))
    }

    /// The height of a node in [0, 1], 0 at the top.
    #[must_use]
    pub fn height(&self, node: usize) -> f32 {
        self.height.get(node).copied().unwrap_or(0.5)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn grown(parents: &[Option<usize>]) -> Layout {
        let mut layout = Layout::new();
        for &parent in parents {
            layout.push(parent);
        }
        layout
    }

    #[test]
    fn leaves_are_even_and_parents_centred() {
        // 0 ─ 1 ─ (3, 4), 0 ─ 2: three leaves.
        let mut layout = grown(&[None, Some(0), Some(0), Some(1), Some(1)]);
        layout.tidy();
        let heights: Vec<f32> =
            (0..5).map(|node| (layout.height(node) * 6.0 + 0.5).floor()).collect();
        assert_eq!(heights[3], 1.0);
        assert_eq!(heights[4], 3.0);
        assert_eq!(heights[2], 5.0);
        assert_eq!(heights[1], 2.0);
    }

    #[test]
    fn a_new_child_moves_nothing() {
        let mut layout = grown(&[None, Some(0), Some(0)]);
        layout.tidy();
        let before: Vec<f32> = (0..3).map(|node| layout.height(node)).collect();
        for parent in [1, 1, 3, 3, 2, 2, 1] {
            layout.push(Some(parent));
        }
        let after: Vec<f32> = (0..3).map(|node| layout.height(node)).collect();
        assert_eq!(before, after);
        assert!(!layout.is_tidy());
    }

    proptest! {
        #[test]
        fn tidy_spreads_the_leaves_evenly(seeds in proptest::collection::vec(0usize..1000, 0..80)) {
            let mut parents = vec![None];
            for (place, seed) in seeds.iter().enumerate() {
                parents.push(Some(seed % (place + 1)));
            }
            let mut layout = grown(&parents);
            layout.tidy();
            let mut leaf = vec![true; parents.len()];
            for parent in parents.iter().flatten() {
                leaf[*parent] = false;
            }
            let mut heights: Vec<f32> =
                (0..parents.len()).filter(|&node| leaf[node]).map(|node| layout.height(node)).collect();
            heights.sort_by(f32::total_cmp);
            let gap = 1.0 / heights.len() as f32;
            for (place, height) in heights.iter().enumerate() {
                prop_assert!((height - (place as f32 + 0.5) * gap).abs() < 1e-4);
            }
        }

        #[test]
        fn slots_stay_in_their_parent(seeds in proptest::collection::vec(0usize..1000, 0..60)) {
            let mut layout = grown(&[None]);
            for (place, seed) in seeds.iter().enumerate() {
                let parent = seed % (place + 1);
                layout.push(Some(parent));
                let node = layout.len() - 1;
                prop_assert!(layout.low[node] >= layout.low[parent]);
                prop_assert!(layout.high[node] <= layout.high[parent]);
            }
        }
    }
}
