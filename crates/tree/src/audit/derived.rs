//! The general cuts of a log: each must follow from its derivation, from rows of the model and cuts
//! proved before it. Then all of them are rows of the relaxation in which leaves are proved.

use model::{Model, Row};
use separate::general::{Frame, GeneralCut, follows};

use super::testimony::Source;
use crate::ledger::rows_of;

/// The rows that derivations speak of.
#[derive(Debug)]
pub(super) struct Derived {
    rows: Vec<Row>,
    frame: Frame,
}

impl Derived {
    /// Takes the rows from the model. `O(non-zeros of the sources)`.
    ///
    /// # Errors
    /// A source that the model or the log does not have, as a clause.
    pub(super) fn new(
        model: &Model,
        sources: &[Source],
        cuts: &[GeneralCut],
    ) -> Result<Self, &'static str> {
        let row = |source: &Source| match source {
            Source::Row(row) => row.addition(model).map(|addition| addition.row),
            Source::Cut(place) => cuts.get(*place).map(|cut| cut.row.clone()),
        };
        let rows: Option<Vec<Row>> = sources.iter().map(row).collect();
        let rows = rows.ok_or("rests on a row that the model does not have")?;
        Ok(Self { rows, frame: Frame::new(model) })
    }

    /// Whether the cut at this place follows, and the non-zeros touched.
    pub(super) fn proves(
        &self,
        place: usize,
        sources: &[Source],
        cuts: &[GeneralCut],
    ) -> (bool, u64) {
        let cut = &cuts[place];
        let used = rows_of(&cut.derivation);
        let before = |row: &usize| match sources.get(*row) {
            Some(Source::Cut(other)) => *other < place,
            Some(Source::Row(_)) => true,
            None => false,
        };
        let entries =
            used.iter().filter_map(|row| self.rows.get(*row)).map(|row| row.entries.len());
        let ticks = 1 + entries.map(|entries| entries as u64).sum::<u64>();
        let holds = used.iter().all(before) && self.is_row(&cut.row);
        (holds && follows(cut, &self.rows, &self.frame), ticks)
    }

    /// Whether the columns of a row are there, in order and none twice.
    fn is_row(&self, row: &Row) -> bool {
        let rising = row.entries.windows(2).all(|pair| pair[0].0 < pair[1].0);
        rising && row.entries.iter().all(|(column, _)| column.index() < self.frame.bounds.len())
    }
}
