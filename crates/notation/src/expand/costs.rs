//! The cost of each column while the objective is added up: few numbers differ, so each is kept
//! once.

use model::{Number, Numbers};

use crate::evaluate::{Evaluated, moderate};

/// No cost so far.
const NONE: u32 = u32::MAX;

/// Costs by column.
#[derive(Debug, Default)]
pub(super) struct Costs {
    at: Vec<u32>,
    numbers: Numbers,
}

impl Costs {
    /// Adds to the cost of a column. `O(log numbers)`.
    pub(super) fn add(&mut self, column: u32, more: Number) -> Evaluated<()> {
        let column = column as usize;
        if self.at.len() <= column {
            self.at.resize(column + 1, NONE);
        }
        let cost = match self.at[column] {
            NONE => more,
            id => self.numbers.exact(model::NumberId(id)) + more,
        };
        self.at[column] = self.numbers.intern(&moderate(cost)?).0;
        Ok(())
    }

    /// The cost of a column in the objective.
    pub(super) fn get(&self, column: u32) -> Option<&Number> {
        let id = self.at.get(column as usize).copied().filter(|&id| id != NONE)?;
        Some(self.numbers.exact(model::NumberId(id)))
    }

    /// All columns in the objective, in order.
    pub(super) fn iter(&self) -> impl Iterator<Item = (u32, &Number)> {
        (0..u32::try_from(self.at.len()).unwrap_or(NONE))
            .filter_map(|column| Some((column, self.get(column)?)))
    }
}
