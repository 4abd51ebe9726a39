//! What is gathered from the sections before the model is built.

use std::collections::BTreeMap;
use std::ops::Range;

use super::number::Value;
use crate::{Number, NumberId, Numbers, Sense};

/// The kind of a row that restricts.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Kind {
    Equal,
    AtMost,
    AtLeast,
}

/// What a row name stands for.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum RowRef {
    Objective,
    /// A further N row.
    Free,
    Row(u32),
}

/// A row that restricts.
#[derive(Debug)]
pub(super) struct RowDraft<'a> {
    pub(super) name: &'a str,
    pub(super) span: Range<usize>,
    pub(super) kind: Kind,
    pub(super) right: Option<Value>,
    pub(super) range: Option<Value>,
    /// The column whose entry came last, to find a second one.
    pub(super) last: Option<u32>,
}

/// A column.
#[derive(Debug)]
pub(super) struct ColumnDraft<'a> {
    pub(super) name: &'a str,
    pub(super) span: Range<usize>,
    pub(super) cost: Number,
    /// Whether a cost was given.
    pub(super) costed: bool,
    pub(super) integer: bool,
    /// Whether a bound line names it.
    pub(super) bounded: bool,
    /// Whether an MI line names it.
    pub(super) minus_infinity: bool,
    pub(super) lower: Option<Value>,
    pub(super) upper: Option<Value>,
}

/// One entry of the matrix.
#[derive(Debug, Clone, Copy)]
pub(super) struct Entry {
    pub(super) row: u32,
    pub(super) column: u32,
    pub(super) number: NumberId,
}

/// Everything read so far.
#[derive(Debug)]
pub(super) struct Draft<'a> {
    pub(super) title: &'a str,
    pub(super) sense: Sense,
    pub(super) offset: Option<Number>,
    pub(super) objective: bool,
    pub(super) rows: Vec<RowDraft<'a>>,
    pub(super) row_refs: BTreeMap<&'a str, RowRef>,
    pub(super) columns: Vec<ColumnDraft<'a>>,
    pub(super) column_ids: BTreeMap<&'a str, u32>,
    pub(super) entries: Vec<Entry>,
    pub(super) numbers: Numbers,
}

impl Draft<'_> {
    pub(super) fn new() -> Self {
        Self {
            title: "",
            sense: Sense::Minimise,
            offset: None,
            objective: false,
            rows: Vec::new(),
            row_refs: BTreeMap::new(),
            columns: Vec::new(),
            column_ids: BTreeMap::new(),
            entries: Vec::new(),
            numbers: Numbers::default(),
        }
    }
}
