//! Colour refinement on the graph of columns and rows, and permutations by refining two copies in
//! step.

use std::collections::BTreeMap;

use model::{Model, NumberId};

use super::rows;
use crate::desk::Desk;

/// What a vertex is before anything else: whether a column, its two bounds, its cost, whether whole.
type Data = (bool, Option<NumberId>, Option<NumberId>, Option<NumberId>, bool);

/// Columns and then rows, each with its neighbours and the coefficients between.
pub(super) struct Graph {
    first: Vec<u32>,
    next: Vec<Vec<(NumberId, u32)>>,
    columns: usize,
}

/// Colours are ranks of what they stand for, so that equal structures get equal colours.
fn ranked<K: Ord + Clone>(keys: &[K]) -> Vec<u32> {
    let mut ranks: BTreeMap<K, u32> = keys.iter().cloned().map(|key| (key, 0)).collect();
    for (rank, place) in (0_u32..).zip(ranks.values_mut()) {
        *place = rank;
    }
    keys.iter().map(|key| ranks[key]).collect()
}

impl Graph {
    pub(super) fn new(model: &Model) -> Self {
        let columns = model.columns().len();
        let mut next: Vec<Vec<(NumberId, u32)>> = vec![Vec::new(); columns];
        let all = model.columns().iter();
        let mut data: Vec<Data> = all
            .map(|column| (true, column.lower, column.upper, Some(column.cost), column.integer))
            .collect();
        for (place, row) in (columns..).zip(rows(model)) {
            let place = u32::try_from(place).unwrap_or(u32::MAX);
            let mut own = Vec::new();
            for &(column, a) in model.row_entries(row) {
                next[column.index()].push((a, place));
                own.push((a, column.0));
            }
            next.push(own);
            let (lower, upper) = model.row_sides(row);
            data.push((false, lower, upper, None, false));
        }
        Self { first: ranked(&data), next, columns }
    }

    /// Non-zeros, columns and rows.
    pub(super) fn size(&self) -> u64 {
        (self.next.iter().map(Vec::len).sum::<usize>() / 2 + self.next.len()) as u64
    }

    /// The colours of the data alone.
    pub(super) fn first(&self) -> Vec<u32> {
        self.first.clone()
    }

    /// The coarsest stable colouring that is as fine as this one.
    pub(super) async fn refined(&self, desk: &Desk, mut colours: Vec<u32>) -> Vec<u32> {
        let mut count = most(&colours);
        loop {
            desk.spend(2 * self.size()).await;
            let keys: Vec<(u32, Vec<(NumberId, u32)>)> = self
                .next
                .iter()
                .enumerate()
                .map(|(vertex, next)| {
                    let mut around: Vec<(NumberId, u32)> =
                        next.iter().map(|&(a, other)| (a, colours[other as usize])).collect();
                    around.sort_unstable();
                    (colours[vertex], around)
                })
                .collect();
            colours = ranked(&keys);
            let now = most(&colours);
            if now == count {
                return colours;
            }
            count = now;
        }
    }

    /// A permutation of columns that keeps colours and carries the one column into the other, as
    /// far as refinement tells; it must still be verified.
    pub(super) async fn carried(
        &self,
        (desk, colours): (&Desk, &[u32]),
        (from, to): (usize, usize),
        work: &mut u64,
    ) -> Option<Vec<usize>> {
        let mut left = self.singled((desk, colours), from, work).await;
        let mut right = self.singled((desk, colours), to, work).await;
        loop {
            let (own, other) = (cells(&left), cells(&right));
            let sizes = |cells: &BTreeMap<u32, Vec<usize>>| {
                cells.iter().map(|(&colour, cell)| (colour, cell.len())).collect::<Vec<_>>()
            };
            if sizes(&own) != sizes(&other) {
                return None;
            }
            let columns = |cell: &&Vec<usize>| cell.len() > 1 && cell[0] < self.columns;
            let Some(cell) = own.values().find(columns) else {
                let mut image: Vec<usize> = (0..self.columns).collect();
                for (colour, cell) in own.iter().filter(|(_, cell)| cell[0] < self.columns) {
                    image[cell[0]] = other.get(colour)?[0];
                }
                return Some(image);
            };
            if *work > super::MOST_WORK {
                return None;
            }
            let partners = other.get(&left[cell[0]])?;
            // What can stay where it is does.
            let partner = if partners.contains(&cell[0]) { cell[0] } else { partners[0] };
            left = self.singled((desk, &left), cell[0], work).await;
            right = self.singled((desk, &right), partner, work).await;
        }
    }

    /// The colouring with one column apart from the others of its colour.
    async fn singled(
        &self,
        (desk, colours): (&Desk, &[u32]),
        column: usize,
        work: &mut u64,
    ) -> Vec<u32> {
        *work += 2 * self.size();
        let keys: Vec<(u32, bool)> =
            colours.iter().enumerate().map(|(at, &colour)| (colour, at == column)).collect();
        self.refined(desk, ranked(&keys)).await
    }
}

fn most(colours: &[u32]) -> u32 {
    colours.iter().copied().max().unwrap_or(0)
}

fn cells(colours: &[u32]) -> BTreeMap<u32, Vec<usize>> {
    let mut cells: BTreeMap<u32, Vec<usize>> = BTreeMap::new();
    for (vertex, &colour) in colours.iter().enumerate() {
        cells.entry(colour).or_default().push(vertex);
    }
    cells
}
