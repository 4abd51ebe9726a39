//! Bounds that follow from rows: each row with all but one of its terms at their least leaves a
//! bound for that one (Brearley, Mitra & Williams 1975).

use model::{ColumnId, Number, RowId};

use super::facts::Facts;

/// Times that all rows are gone through, forth and back in turn.
const ROUNDS: usize = 6;

/// Bounds of all columns; `None` is infinite.
pub(super) struct Bounds {
    lower: Vec<Option<Number>>,
    upper: Vec<Option<Number>>,
}

impl Bounds {
    /// As the domains say.
    pub(super) fn declared(facts: &Facts<'_>) -> Self {
        let ends = (0..facts.model.columns().len()).map(|c| facts.bounds(ColumnId::from_index(c)));
        let (lower, upper) = ends.map(|(l, u)| (l.cloned(), u.cloned())).unzip();
        Self { lower, upper }
    }

    /// With what the rows imply, those of one family aside.
    pub(super) fn implied(facts: &Facts<'_>, except: Option<usize>) -> Self {
        let mut bounds = Self::declared(facts);
        let rows = facts.rows.iter().copied().filter(|row| Some(facts.family(*row)) != except);
        let mut rows: Vec<RowId> = rows.collect();
        for _ in 0..ROUNDS {
            let mut changed = false;
            for &row in &rows {
                changed |= bounds.row(facts, row);
            }
            if !changed {
                break;
            }
            rows.reverse();
        }
        bounds
    }

    pub(super) fn lower(&self, column: ColumnId) -> Option<&Number> {
        self.lower[column.index()].as_ref()
    }

    pub(super) fn upper(&self, column: ColumnId) -> Option<&Number> {
        self.upper[column.index()].as_ref()
    }

    fn row(&mut self, facts: &Facts<'_>, row: RowId) -> bool {
        let entries = facts.model.row_entries(row);
        let exact = |sign: i32| -> Vec<(ColumnId, Number)> {
            let sign = Number::from(sign);
            entries.iter().map(|&(column, a)| (column, facts.number(a) * &sign)).collect()
        };
        let (lower, upper) = facts.sides(row);
        let above = upper.is_some_and(|upper| self.at_most(&exact(1), upper));
        let below = lower.is_some_and(|lower| self.at_most(&exact(-1), &-lower.clone()));
        above || below
    }

    /// What `Σ a x ≤ side` implies; whether it is news.
    fn at_most(&mut self, entries: &[(ColumnId, Number)], side: &Number) -> bool {
        let least: Vec<Option<Number>> =
            entries.iter().map(|(column, a)| self.least(*column, a)).collect();
        let endless = least.iter().filter(|term| term.is_none()).count();
        if endless > 1 {
            return false;
        }
        let sum = least.iter().flatten().fold(Number::ZERO, |sum, term| sum + term);
        let mut changed = false;
        for ((column, a), term) in entries.iter().zip(&least) {
            let rest = match term {
                Some(term) if endless == 0 => &sum - term,
                None => sum.clone(),
                Some(_) => continue,
            };
            changed |= self.tighten(*column, (side - rest) / a, *a > Number::ZERO);
        }
        changed
    }

    fn tighten(&mut self, column: ColumnId, value: Number, above: bool) -> bool {
        let own = if above { &mut self.upper } else { &mut self.lower };
        let old = &mut own[column.index()];
        let news = old.as_ref().is_none_or(|old| if above { value < *old } else { value > *old });
        if news {
            *old = Some(value);
        }
        news
    }

    /// The least value of `a x`.
    fn least(&self, column: ColumnId, a: &Number) -> Option<Number> {
        let end = if *a > Number::ZERO { self.lower(column) } else { self.upper(column) };
        end.map(|end| end * a)
    }

    /// The greatest value of `Σ a x`.
    pub(super) fn greatest<'e>(
        &self,
        entries: impl Iterator<Item = &'e (ColumnId, Number)>,
    ) -> Option<Number> {
        let mut sum = Number::ZERO;
        for (column, a) in entries {
            sum -= self.least(*column, &-a.clone())?;
        }
        Some(sum)
    }
}
