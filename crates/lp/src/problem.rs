//! The problem as the caller states it: min cᵀx, L ≤ Ax ≤ U, l ≤ x ≤ u, any side infinite.
//!
//! Rows are kept with sorted columns, repeated entries summed and zeros left out, so that
//! two statements of the same row are the same bits.

use std::fmt;

/// A column of a problem, numbered from 0 in the order of adding.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Col(pub u32);

/// A row of a problem, numbered from 0 in the order of adding; deleting rows moves later ones up.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct RowId(pub u32);

/// Why a row or a column is refused.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum ProblemError {
    /// A cost is infinite or not a number.
    Cost,
    /// A bound is not a number, a lower bound is +∞ or an upper bound −∞.
    Bound,
    /// A coefficient (or a sum of repeated ones) is infinite or not a number.
    Coefficient(Col),
    /// A row names a column that does not exist.
    UnknownColumn(Col),
    /// A row to be deleted does not exist.
    UnknownRow(RowId),
    /// A row to be deleted has its logical out of the basis.
    RowNotBasic(RowId),
    /// More than 2³⁰ columns, rows or nonzeros.
    TooLarge,
}

impl fmt::Display for ProblemError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Cost => write!(f, "a cost must be finite"),
            Self::Bound => write!(f, "bounds must be numbers, −∞ only below and ∞ only above"),
            Self::Coefficient(col) => {
                write!(f, "the coefficient of column {} must be finite", col.0)
            }
            Self::UnknownColumn(col) => write!(f, "there is no column {}", col.0),
            Self::UnknownRow(row) => write!(f, "there is no row {}", row.0),
            Self::RowNotBasic(row) => {
                write!(f, "row {} is active: its logical is not basic", row.0)
            }
            Self::TooLarge => write!(f, "the problem has more than 2^30 columns, rows or nonzeros"),
        }
    }
}

impl std::error::Error for ProblemError {}

/// The largest number of columns, rows or nonzeros.
const LIMIT: usize = 1 << 30;

/// A row to be appended.
#[derive(Clone, Debug, PartialEq)]
pub struct NewRow {
    /// Coefficients; repeated columns are summed.
    pub entries: Vec<(Col, f64)>,
    /// Least activity, −∞ for none.
    pub lower: f64,
    /// Greatest activity, ∞ for none.
    pub upper: f64,
}

/// A row with sorted distinct columns and its range.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct CleanRow {
    pub(crate) entries: Vec<(u32, f64)>,
    pub(crate) lower: f64,
    pub(crate) upper: f64,
}

/// min cᵀx, L ≤ Ax ≤ U, l ≤ x ≤ u; a missing side is [`f64::INFINITY`] with its sign.
///
/// A range with lower > upper is accepted: the problem is then infeasible.
#[derive(Clone, Debug, Default)]
pub struct Problem {
    pub(crate) cost: Vec<f64>,
    pub(crate) lower: Vec<f64>,
    pub(crate) upper: Vec<f64>,
    pub(crate) rows: Vec<CleanRow>,
    nonzeros: usize,
}

impl Problem {
    /// A problem without rows and columns.
    #[must_use]
    pub fn new() -> Self {
        Self::default()
    }

    /// Adds a column.
    ///
    /// # Errors
    /// When the cost is not finite, a bound is NaN or infinite on the wrong side, or the problem
    /// grows too large.
    pub fn add_column(&mut self, cost: f64, lower: f64, upper: f64) -> Result<Col, ProblemError> {
        if !cost.is_finite() {
            return Err(ProblemError::Cost);
        }
        check_range(lower, upper)?;
        let index = index_below_limit(self.cost.len())?;
        self.cost.push(cost);
        self.lower.push(lower);
        self.upper.push(upper);
        Ok(Col(index))
    }

    /// Adds a row; repeated columns are summed.
    ///
    /// # Errors
    /// When a column is unknown, a coefficient is not finite, a side is NaN or infinite on the
    /// wrong side, or the problem grows too large.
    pub fn add_row(
        &mut self,
        entries: &[(Col, f64)],
        lower: f64,
        upper: f64,
    ) -> Result<RowId, ProblemError> {
        let index = index_below_limit(self.rows.len())?;
        let row = clean_row(entries, (lower, upper), self.cost.len())?;
        self.nonzeros += row.entries.len();
        index_below_limit(self.nonzeros)?;
        self.rows.push(row);
        Ok(RowId(index))
    }

    /// Number of columns.
    #[must_use]
    pub fn column_count(&self) -> u32 {
        u32::try_from(self.cost.len()).unwrap_or(u32::MAX)
    }

    /// Number of rows.
    #[must_use]
    pub fn row_count(&self) -> u32 {
        u32::try_from(self.rows.len()).unwrap_or(u32::MAX)
    }
}

/// The next index after `count` things, unless there are too many.
pub(crate) fn index_below_limit(count: usize) -> Result<u32, ProblemError> {
    if count >= LIMIT {
        return Err(ProblemError::TooLarge);
    }
    u32::try_from(count).map_err(|_| ProblemError::TooLarge)
}

/// Refuses NaN and infinities on the wrong side.
fn check_range(lower: f64, upper: f64) -> Result<(), ProblemError> {
    let wrong =
        lower.is_nan() || upper.is_nan() || lower == f64::INFINITY || upper == f64::NEG_INFINITY;
    if wrong { Err(ProblemError::Bound) } else { Ok(()) }
}

/// Sorts, sums and checks the entries of a row over `columns` columns.
pub(crate) fn clean_row(
    entries: &[(Col, f64)],
    range: (f64, f64),
    columns: usize,
) -> Result<CleanRow, ProblemError> {
    check_range(range.0, range.1)?;
    let mut sorted: Vec<(u32, f64)> = Vec::with_capacity(entries.len());
    for &(col, value) in entries {
        if col.0 as usize >= columns {
            return Err(ProblemError::UnknownColumn(col));
        }
        sorted.push((col.0, value));
    }
    sorted.sort_by_key(|&(col, _)| col);
    sorted.dedup_by(|next, kept| {
        let same = next.0 == kept.0;
        if same {
            kept.1 += next.1;
        }
        same
    });
    if let Some(&(col, _)) = sorted.iter().find(|(_, value)| !value.is_finite()) {
        return Err(ProblemError::Coefficient(Col(col)));
    }
    sorted.retain(|&(_, value)| value != 0.0);
    Ok(CleanRow { entries: sorted, lower: range.0, upper: range.1 })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn repeated_entries_are_summed_and_zeros_left_out() {
        let mut problem = Problem::new();
        let x = problem.add_column(1.0, 0.0, 1.0).unwrap();
        let y = problem.add_column(1.0, 0.0, 1.0).unwrap();
        problem.add_row(&[(y, 2.0), (x, 1.0), (y, 1.0)], 0.0, 1.0).unwrap();
        problem.add_row(&[(x, 1.0), (x, -1.0)], 0.0, 1.0).unwrap();
        assert_eq!(problem.rows[0].entries, vec![(0, 1.0), (1, 3.0)]);
        assert!(problem.rows[1].entries.is_empty());
    }

    #[test]
    fn input_that_is_no_number_is_refused() {
        let mut problem = Problem::new();
        assert_eq!(problem.add_column(f64::NAN, 0.0, 1.0), Err(ProblemError::Cost));
        assert_eq!(problem.add_column(f64::INFINITY, 0.0, 1.0), Err(ProblemError::Cost));
        assert_eq!(problem.add_column(0.0, f64::NAN, 1.0), Err(ProblemError::Bound));
        assert_eq!(problem.add_column(0.0, f64::INFINITY, f64::INFINITY), Err(ProblemError::Bound));
        let x = problem.add_column(0.0, 0.0, f64::INFINITY).unwrap();
        assert_eq!(problem.add_row(&[(x, f64::NAN)], 0.0, 1.0), Err(ProblemError::Coefficient(x)));
        assert_eq!(
            problem.add_row(&[(Col(7), 1.0)], 0.0, 1.0),
            Err(ProblemError::UnknownColumn(Col(7)))
        );
        assert_eq!(problem.add_row(&[(x, 1.0)], 0.0, f64::NEG_INFINITY), Err(ProblemError::Bound));
        assert_eq!(problem.row_count(), 0);
    }
}
