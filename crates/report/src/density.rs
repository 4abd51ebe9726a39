//! A tree too large to draw node by node: counts by cell of a grid, so that the cost of drawing
//! is bounded by pixels and not by nodes.

/// Counts by cell, row by row.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Density {
    /// Cells across.
    pub columns: usize,
    /// Cells down.
    pub rows: usize,
    /// Nodes in each cell.
    pub counts: Vec<u32>,
    /// The largest count.
    pub most: u32,
}

impl Density {
    /// Counts points of [0, 1] × [0, 1] into `columns` × `rows` cells. O(points + cells).
    #[must_use]
    pub fn of(points: impl Iterator<Item = (f64, f64)>, columns: usize, rows: usize) -> Self {
        let (columns, rows) = (columns.max(1), rows.max(1));
        let mut counts = vec![0_u32; columns * rows];
        let mut most = 0;
        for (x, y) in points {
            let cell = &mut counts[index(y, rows) * columns + index(x, columns)];
            *cell = cell.saturating_add(1);
            most = most.max(*cell);
        }
        Self { columns, rows, counts, most }
    }

    /// A cell's weight from 0 to `levels`: 0 for an empty one, then by the square root of its
    /// share of the largest count.
    #[must_use]
    pub fn level(&self, cell: usize, levels: u32) -> u32 {
        let count = self.counts.get(cell).copied().unwrap_or(0);
        if count == 0 || self.most == 0 {
            return 0;
        }
        let share = (f64::from(count) / f64::from(self.most)).sqrt();
        ((share * f64::from(levels)).ceil() as u32).clamp(1, levels.max(1))
    }
}

fn index(share: f64, cells: usize) -> usize {
    let at = share * cells as f64;
    if at > 0.0 { (at as usize).min(cells - 1) } else { 0 }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn points_fall_into_their_cells() {
        let density =
            Density::of([(0.0, 0.0), (1.0, 1.0), (0.99, 0.99), (-1.0, 0.6)].into_iter(), 4, 2);
        assert_eq!(density.counts, vec![1, 0, 0, 0, 1, 0, 0, 2]);
        assert_eq!(density.level(1, 4), 0);
        assert_eq!(density.level(0, 4), 3);
        assert_eq!(density.level(7, 4), 4);
    }

    #[test]
    fn an_empty_grid_is_one_cell() {
        assert_eq!(Density::of(std::iter::empty(), 0, 0).counts, vec![0]);
    }
}
