//! A linear program as plain lists, as the shared generators fill it and every solver reads it.

/// Entries by column, lower and upper side.
pub(crate) type Row = (Vec<(usize, f64)>, f64, f64);

/// min cᵀx, L ≤ Ax ≤ U, l ≤ x ≤ u.
#[derive(Clone, Debug, Default)]
pub(crate) struct Shadow {
    pub(crate) cost: Vec<f64>,
    pub(crate) lower: Vec<f64>,
    pub(crate) upper: Vec<f64>,
    pub(crate) rows: Vec<Row>,
}

impl Shadow {
    pub(crate) fn column(&mut self, cost: f64, lower: f64, upper: f64) -> usize {
        self.cost.push(cost);
        self.lower.push(lower);
        self.upper.push(upper);
        self.cost.len() - 1
    }

    pub(crate) fn row(&mut self, entries: Vec<(usize, f64)>, lower: f64, upper: f64) {
        self.rows.push((entries, lower, upper));
    }

    pub(crate) fn nonzeros(&self) -> usize {
        self.rows.iter().map(|row| row.0.len()).sum()
    }
}
