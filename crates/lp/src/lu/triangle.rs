//! Solves with a sparse triangular matrix whose unknowns are numbered by pivot step.
//!
//! Node k lists the places its value is subtracted from: x_i ← x_i − t_ik x_k, after
//! x_k ← x_k / d_k where there is a diagonal. With few nonzeros on the right the nodes that
//! can become nonzero are found first by depth-first search (Gilbert, Peierls 1988) and taken in
//! the order of steps, so that both ways give the same bits.

use crate::sparse::SparseVector;
use crate::tolerances::HYPERSPARSE;

/// Which way the steps are taken.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Direction {
    Forward,
    Backward,
}

/// A triangular matrix without its diagonal.
#[derive(Clone, Debug, Default)]
pub(crate) struct Triangle {
    start: Vec<usize>,
    index: Vec<u32>,
    value: Vec<f64>,
}

/// Scratch of the search for reachable steps.
#[derive(Clone, Debug, Default)]
pub(crate) struct Reach {
    stack: Vec<u32>,
    seen: Vec<bool>,
}

impl Reach {
    /// Scratch for this many steps.
    pub(crate) fn new(size: usize) -> Self {
        Self { stack: Vec::new(), seen: vec![false; size] }
    }
}

impl Triangle {
    /// A triangle from its three arrays.
    pub(crate) fn new(start: Vec<usize>, index: Vec<u32>, value: Vec<f64>) -> Self {
        Self { start, index, value }
    }

    /// Number of nonzeros beside the diagonal.
    pub(crate) fn nonzeros(&self) -> usize {
        self.index.len()
    }

    /// The same entries listed from the other side.
    pub(crate) fn transposed(&self) -> Self {
        let size = self.start.len() - 1;
        let mut start = vec![0usize; size + 1];
        for &i in &self.index {
            start[i as usize + 1] += 1;
        }
        for k in 0..size {
            start[k + 1] += start[k];
        }
        let mut next = start.clone();
        let mut index = vec![0u32; self.index.len()];
        let mut value = vec![0.0; self.index.len()];
        for k in 0..size {
            for e in self.start[k]..self.start[k + 1] {
                let place = &mut next[self.index[e] as usize];
                index[*place] = k as u32;
                value[*place] = self.value[e];
                *place += 1;
            }
        }
        Self { start, index, value }
    }

    /// Solves in place. Returns the nonzeros touched.
    pub(crate) fn solve(
        &self,
        diagonal: Option<&[f64]>,
        x: &mut SparseVector,
        direction: Direction,
        reach: &mut Reach,
    ) -> u64 {
        let size = x.len();
        if (x.count() as f64) < HYPERSPARSE * size as f64 {
            let searched = self.list_reach(x, reach);
            if (x.count() as f64) < HYPERSPARSE * 4.0 * size as f64 {
                x.sort();
                return searched + self.solve_listed(diagonal, x, direction);
            }
        }
        self.solve_all(diagonal, x, direction)
    }

    /// Lists every step that the listed ones can reach.
    fn list_reach(&self, x: &mut SparseVector, reach: &mut Reach) -> u64 {
        reach.stack.extend_from_slice(x.indices());
        for &k in x.indices() {
            reach.seen[k as usize] = true;
        }
        let mut ticks = 0;
        while let Some(k) = reach.stack.pop() {
            for &i in &self.index[self.start[k as usize]..self.start[k as usize + 1]] {
                ticks += 1;
                if !reach.seen[i as usize] {
                    reach.seen[i as usize] = true;
                    x.list(i);
                    reach.stack.push(i);
                }
            }
        }
        for &k in x.indices() {
            reach.seen[k as usize] = false;
        }
        ticks
    }

    /// Takes the listed steps only; the list is sorted and closed.
    fn solve_listed(
        &self,
        diagonal: Option<&[f64]>,
        x: &mut SparseVector,
        direction: Direction,
    ) -> u64 {
        let mut ticks = 0;
        for at in 0..x.count() {
            let at = if direction == Direction::Forward { at } else { x.count() - 1 - at };
            ticks += self.step(x.indices()[at], diagonal, x);
        }
        ticks
    }

    /// Takes every step.
    fn solve_all(
        &self,
        diagonal: Option<&[f64]>,
        x: &mut SparseVector,
        direction: Direction,
    ) -> u64 {
        let size = x.len() as u32;
        let mut ticks = u64::from(size) / 8;
        for k in 0..size {
            let k = if direction == Direction::Forward { k } else { size - 1 - k };
            ticks += self.step(k, diagonal, x);
        }
        ticks
    }

    /// One step: settles x_k and subtracts it where it stands.
    fn step(&self, k: u32, diagonal: Option<&[f64]>, x: &mut SparseVector) -> u64 {
        let mut pivot = x.get(k);
        if pivot == 0.0 {
            return 0;
        }
        if let Some(diagonal) = diagonal {
            pivot /= diagonal[k as usize];
            x.set(k, pivot);
        }
        let range = self.start[k as usize]..self.start[k as usize + 1];
        for (&i, &t) in self.index[range.clone()].iter().zip(&self.value[range.clone()]) {
            x.add(i, -t * pivot);
        }
        1 + range.len() as u64
    }
}
