//! The tree as a list of rows in reading order, for its text twin: children under their parent,
//! those of a folded node left out.

use std::collections::BTreeSet;

use crate::state::tree::Tree;

/// A row of the list.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) struct Row {
    /// The node, by place.
    pub(crate) place: usize,
    /// Its rank among the children of its parent, from 1.
    pub(crate) rank: u32,
    /// How many children its parent has.
    pub(crate) siblings: u32,
}

/// The rows in reading order. O(nodes), without recursion.
pub(crate) fn rows(tree: &Tree, folded: &BTreeSet<usize>) -> Vec<Row> {
    let mut rows = Vec::with_capacity(tree.nodes().len());
    let mut waiting = Vec::new();
    if !tree.nodes().is_empty() {
        waiting.push(Row { place: 0, rank: 1, siblings: 1 });
    }
    while let Some(row) = waiting.pop() {
        rows.push(row);
        if !folded.contains(&row.place) {
            let from = waiting.len();
            push_children(tree, row.place, &mut waiting);
            waiting[from..].reverse();
        }
    }
    rows
}

fn push_children(tree: &Tree, parent: usize, rows: &mut Vec<Row>) {
    let from = rows.len();
    let mut child = tree.first_child(parent);
    while let Some(place) = child {
        rows.push(Row { place, rank: (rows.len() - from) as u32 + 1, siblings: 0 });
        child = tree.next_sibling(place);
    }
    let siblings = (rows.len() - from) as u32;
    for row in &mut rows[from..] {
        row.siblings = siblings;
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::state::tree::tests::{created, small};

    #[test]
    fn children_follow_their_parent() {
        let mut tree = small();
        tree.grow(&[created(4, 2), created(5, 2)]);
        let places = |folded: &[usize]| -> Vec<usize> {
            rows(&tree, &folded.iter().copied().collect()).iter().map(|row| row.place).collect()
        };
        assert_eq!(places(&[]), [0, 1, 3, 4, 2]);
        assert_eq!(places(&[1]), [0, 1, 2]);
        assert_eq!(places(&[0]), [0]);
        let all = rows(&tree, &BTreeSet::new());
        assert_eq!((all[3].rank, all[3].siblings), (2, 2));
    }

    #[test]
    fn no_tree_has_no_rows() {
        assert!(rows(&Tree::default(), &BTreeSet::new()).is_empty());
    }
}
