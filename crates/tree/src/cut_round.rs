//! One round of general cuts: rows of the tableau, and rows of the relaxation alone or with others
//! that cancel a continuous column, one after the other.

use std::collections::{BTreeMap, BTreeSet};

use lp::Col;
use model::{ColumnId, Number, Row, nearest_f64};
use separate::general::{
    Aggregate, Class, Frame, GeneralCut, complemented, cover, fraction, from_tableau,
};

use crate::branching::is_fractional;
use crate::relaxation::Relaxation;
use crate::settings::Cuts;

/// Rows of the tableau that are looked at in a round.
const MOST_TABLEAU: usize = 50;
/// Rows of the relaxation that are looked at in a round.
const MOST_ROWS: usize = 400;
/// Rows that are summed at most.
const MOST_SUMMED: usize = 4;

/// What is looked at next.
#[derive(Debug, Clone, Copy)]
enum Task {
    Tableau(ColumnId),
    Row(usize),
}

/// A round under way.
#[derive(Debug)]
pub(crate) struct CutRound {
    wanted: Cuts,
    x: Vec<f64>,
    rows: Vec<Row>,
    /// The rows in which a continuous column stands that is between its bounds.
    of_column: BTreeMap<ColumnId, Vec<usize>>,
    tasks: Vec<Task>,
    pub(crate) found: Vec<GeneralCut>,
    pub(crate) ticks: u64,
}

impl CutRound {
    /// Gathers the rows. `O(non-zeros)`.
    pub(crate) fn new(
        relaxation: &Relaxation,
        frame: &Frame,
        (wanted, whole): (Cuts, &[ColumnId]),
        x: &[f64],
    ) -> Self {
        let count = relaxation.row_count();
        let rows: Vec<Row> = (0..count).filter_map(|index| relaxation.exact_row(index)).collect();
        let mut of_column: BTreeMap<ColumnId, Vec<usize>> = BTreeMap::new();
        for (index, row) in rows.iter().enumerate() {
            let open =
                |column: ColumnId| !frame.integer[column.index()] && between(frame, column, x);
            for (column, _) in row.entries.iter().filter(|(column, _)| open(*column)) {
                of_column.entry(*column).or_default().push(index);
            }
        }
        let mut fractional: Vec<ColumnId> =
            whole.iter().copied().filter(|c| is_fractional(x[c.index()])).collect();
        let off = |c: &ColumnId| (x[c.index()] - x[c.index()].floor() - 0.5).abs();
        fractional.sort_by(|a, b| off(a).total_cmp(&off(b)).then(a.cmp(b)));
        fractional.truncate(if wanted.gomory { MOST_TABLEAU } else { 0 });
        let single = if wanted.mir || wanted.cover { MOST_ROWS } else { 0 };
        let tight = (0..rows.len()).filter(|&index| touches(&rows[index], x)).take(single);
        let mut tasks: Vec<Task> = tight.map(Task::Row).collect();
        tasks.extend(fractional.into_iter().map(Task::Tableau));
        tasks.reverse();
        let ticks = rows.iter().map(|row| row.entries.len() as u64).sum();
        Self { wanted, x: x.to_vec(), rows, of_column, tasks, found: Vec::new(), ticks }
    }

    /// Looks at the next row; false when all are done.
    pub(crate) fn step(&mut self, relaxation: &mut Relaxation, frame: &Frame) -> bool {
        match self.tasks.pop() {
            None => return false,
            Some(Task::Tableau(column)) => self.tableau(relaxation, frame, column),
            Some(Task::Row(index)) => self.row(frame, index),
        }
        true
    }

    fn tableau(&mut self, relaxation: &mut Relaxation, frame: &Frame, column: ColumnId) {
        self.ticks += 1;
        let Some(row) = relaxation.simplex.tableau_row(Col(column.0)) else { return };
        let mut sum = Aggregate::default();
        for (index, multiplier) in row.multipliers {
            let Some(multiplier) = fraction(multiplier).filter(|y| !y.is_zero()) else { continue };
            let Some(row) = self.rows.get(index.0 as usize) else { return };
            self.ticks += row.entries.len() as u64;
            if !sum.add(frame, row, &multiplier, &self.x) {
                return;
            }
        }
        self.found.extend(from_tableau(&sum, frame, &self.x));
    }

    fn row(&mut self, frame: &Frame, index: usize) {
        self.ticks += 1 + 4 * self.rows[index].entries.len() as u64;
        if self.wanted.cover {
            self.found.extend(cover(&self.rows[index], frame, &self.x));
        }
        if self.wanted.mir {
            let cut = self.rounding(frame, index);
            self.found.extend(cut);
        }
    }

    /// The rounding of a row, or of it with others, as soon as one is violated.
    fn rounding(&mut self, frame: &Frame, index: usize) -> Option<GeneralCut> {
        let mut sum = Aggregate::default();
        if !sum.add(frame, &self.rows[index], &Number::ONE, &self.x) {
            return None;
        }
        let mut used = BTreeSet::from([index]);
        loop {
            let turned = complemented(&sum.turned(), frame, &self.x);
            let both = [complemented(&sum, frame, &self.x), turned];
            let better = |a: GeneralCut, b: GeneralCut| if b.efficacy > a.efficacy { b } else { a };
            if let Some(cut) = both.into_iter().flatten().reduce(better) {
                return Some(cut);
            }
            if used.len() >= MOST_SUMMED {
                return None;
            }
            let (next, multiplier) = self.partner(&sum, &used)?;
            self.ticks += 4 * self.rows[next].entries.len() as u64;
            used.insert(next);
            if !sum.add(frame, &self.rows[next], &multiplier, &self.x) {
                return None;
            }
        }
    }

    /// A row that cancels a continuous column of the sum that is between its bounds.
    fn partner(&self, sum: &Aggregate, used: &BTreeSet<usize>) -> Option<(usize, Number)> {
        for column in sum.columns() {
            let Some(rows) = self.of_column.get(&column) else { continue };
            let own = sum.coefficient(column)?;
            for &index in rows.iter().filter(|index| !used.contains(index)) {
                let entry = self.rows[index].entries.iter().find(|(c, _)| *c == column);
                if let Some((_, other)) = entry {
                    return Some((index, -(own / other)));
                }
            }
        }
        None
    }
}

/// How many cuts are of a class.
pub(crate) fn count(cuts: &[GeneralCut], class: Class) -> u32 {
    let count = cuts.iter().filter(|cut| cut.class == class).count();
    u32::try_from(count).unwrap_or(u32::MAX)
}

/// Whether a column is between its bounds.
fn between(frame: &Frame, column: ColumnId, x: &[f64]) -> bool {
    let value = x[column.index()];
    let (lower, upper) = &frame.bounds[column.index()];
    lower.as_ref().is_none_or(|l| value > nearest_f64(l) + 1e-6)
        && upper.as_ref().is_none_or(|u| value < nearest_f64(u) - 1e-6)
}

/// Whether a row is tight, or nearly so, at a point.
fn touches(row: &Row, x: &[f64]) -> bool {
    let activity = row.activity(x);
    let near = |side: &Option<Number>| {
        side.as_ref().is_some_and(|side| {
            let side = nearest_f64(side);
            (side - activity).abs() <= 0.1 * (1.0 + side.abs())
        })
    };
    near(&row.lower) || near(&row.upper)
}
