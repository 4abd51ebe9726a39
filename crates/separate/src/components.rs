//! Cheap violated sets: the connected components of the graph of the pairs that carry
//! something at the point, and their complements.

use crate::conditions::{Conditions, Fixed};
use crate::quadratic::Quadratic;

/// The candidate sets, made to agree with what is fixed. None when there is one component
/// only. `O(n² + pairs)` at worst.
pub(crate) fn candidates(quadratic: &Quadratic, conditions: &Conditions) -> Vec<Vec<bool>> {
    let size = quadratic.linear.len();
    let component = components(size, quadratic.pairs.iter().map(|&(i, j, _, _)| (i, j)));
    let count = component.iter().copied().max().map_or(0, |last| last + 1);
    let mut out = Vec::new();
    if count < 2 {
        return out;
    }
    for wanted in 0..count {
        for inside in [true, false] {
            let chosen = |i: usize| match conditions.fixed[i] {
                Fixed::Free => (component[i] == wanted) == inside,
                Fixed::In => true,
                Fixed::Out => false,
            };
            out.push((0..size).map(chosen).collect());
        }
    }
    out
}

/// The component of each node, numbered in the order of their first nodes.
fn components(size: usize, pairs: impl Iterator<Item = (usize, usize)>) -> Vec<usize> {
    let mut parent: Vec<usize> = (0..size).collect();
    for (i, j) in pairs {
        let (a, b) = (root(&mut parent, i), root(&mut parent, j));
        if a < b {
            parent[b] = a;
        } else {
            parent[a] = b;
        }
    }
    let mut number = vec![usize::MAX; size];
    let mut count = 0;
    let mut out = Vec::with_capacity(size);
    for i in 0..size {
        let root = root(&mut parent, i);
        if number[root] == usize::MAX {
            number[root] = count;
            count += 1;
        }
        out.push(number[root]);
    }
    out
}

fn root(parent: &mut [usize], mut node: usize) -> usize {
    while parent[node] != node {
        parent[node] = parent[parent[node]];
        node = parent[node];
    }
    node
}
