//! What each constraint family does at a node: its rows in the relaxation, those that hold the
//! vertex, and their duals. For the general cuts, one line together.

use lp::{Basis, Solution};

use crate::relaxation::RowOrigin;
use crate::search::Search;

/// Duals of less are none.
const ZERO: f64 = 1e-9;

/// A family at a node.
#[derive(Debug, Clone, PartialEq)]
pub struct FamilyView {
    /// Its name; "general cuts" for rows of no family.
    pub family: String,
    /// Rows of it in the relaxation of the node.
    pub rows: u32,
    /// Rows that are not basic: they hold the vertex.
    pub held: u32,
    /// Rows whose dual is not 0.
    pub priced: u32,
    /// The greatest dual in size, in units of the objective for a unit of the right-hand side.
    pub greatest: f64,
}

impl Search {
    /// The families in the order of the model, then the cuts; those without rows are left out.
    /// O(rows).
    pub(crate) fn family_views(&self, solution: &Solution, basis: &Basis) -> Vec<FamilyView> {
        let Some(relaxation) = &self.relaxation else { return Vec::new() };
        let mut views: Vec<FamilyView> = self
            .model
            .families()
            .iter()
            .map(|family| family.name.clone())
            .chain(["general cuts".to_owned()])
            .map(|family| FamilyView { family, rows: 0, held: 0, priced: 0, greatest: 0.0 })
            .collect();
        let cuts = views.len() - 1;
        for (row, (origin, dual)) in relaxation.origins().iter().zip(&solution.duals).enumerate() {
            let place = match origin {
                RowOrigin::Written(row) => self.model.row_family(*row).index(),
                RowOrigin::Member { family, .. } => {
                    self.model.subset_family(*family).family.index()
                }
                RowOrigin::Cut(..) => cuts,
            };
            let view = &mut views[place];
            view.rows += 1;
            view.held += u32::from(!basis.is_basic_row(row as u32));
            view.priced += u32::from(dual.abs() > ZERO);
            if dual.abs() > view.greatest.abs() {
                view.greatest = *dual;
            }
        }
        views.retain(|view| view.rows > 0);
        views
    }
}
