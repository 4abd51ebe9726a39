//! Rows of the simplex tableau in the caller's units, for cuts.
//!
//! With ρ = B⁻ᵀe_r and x_B(r) the basic column: x_B(r) + Σ_j (ρA)_j x_j = Σ_i ρ_i (row i's activity),
//! the sum over nonbasic columns. In scaled units value = u · scaled value, so ρ_i is multiplied by
//! u_B(r) / u_(n+i) and (ρA)_j by u_B(r) / u_j: powers of two, no digit changes.
//!
//! Source: Gomory 1963; Koberstein 2005.

use crate::basis::Status;
use crate::problem::{Col, RowId};
use crate::simplex::Simplex;
use crate::state::Core;

/// A row of the tableau: x_basic + Σ `coefficients` x = Σ `multipliers` · (activity of the row), for
/// every x.
#[derive(Clone, Debug, PartialEq)]
pub struct TableauRow {
    /// The row's multiplier in the sum, rows ascending, zeros left out.
    pub multipliers: Vec<(RowId, f64)>,
    /// Coefficients of the nonbasic columns, ascending, zeros left out.
    pub coefficients: Vec<(Col, f64)>,
}

impl Simplex {
    /// The tableau row of a basic column; none when the column is not basic or a solve is under
    /// way. Work: a solve with the factors and the nonzeros of the rows with a multiplier.
    pub fn tableau_row(&mut self, column: Col) -> Option<TableauRow> {
        if self.machine.is_working() || column.0 as usize >= self.core.columns() {
            return None;
        }
        self.core.refactor_first();
        let position = self.core.head.binary_search(&column.0).ok()?;
        Some(self.core.tableau_row(position as u32))
    }
}

impl Core {
    /// The row at a position, refined; factors are canonical.
    fn tableau_row(&mut self, position: u32) -> TableauRow {
        self.care.refines = true;
        self.compute_row(position);
        self.care.refines = false;
        let n = self.columns();
        let unit = self.unit[self.head[position as usize] as usize];
        let mut multipliers: Vec<(RowId, f64)> = self
            .scratch
            .rho
            .iter()
            .filter(|&(_, value)| value != 0.0)
            .map(|(row, value)| (RowId(row), value * (unit / self.unit[n + row as usize])))
            .collect();
        multipliers.sort_unstable_by_key(|&(row, _)| row);
        let row = &mut self.scratch.row;
        row.clear();
        for (i, multiplier) in self.scratch.rho.iter() {
            self.matrix.row(i as usize).for_each(|(j, value)| row.add(j, multiplier * value));
        }
        let mut coefficients: Vec<(Col, f64)> = row
            .iter()
            .filter(|&(j, value)| value != 0.0 && self.status[j as usize] != Status::Basic)
            .map(|(j, value)| (Col(j), value * (unit / self.unit[j as usize])))
            .collect();
        coefficients.sort_unstable_by_key(|&(column, _)| column);
        TableauRow { multipliers, coefficients }
    }
}
