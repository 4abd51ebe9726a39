//! Building a model: columns first, then rows family by family.

use std::fmt;

use crate::model::Tuples;
use crate::{
    Column, ColumnId, Family, FamilyId, FamilyState, LabelId, Labels, Model, Number, Numbers, Row,
    RowId, Sense, SubsetFamily, SubsetFamilyId, Variable, VariableId,
};

/// What a builder refuses.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum ModelError {
    /// A row names a column that does not exist.
    UnknownColumn(ColumnId),
    /// More columns, rows or entries than 32-bit ids can count.
    TooLarge,
}

impl fmt::Display for ModelError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::UnknownColumn(column) => {
                write!(f, "a row names column {}, which does not exist", column.0)
            }
            Self::TooLarge => {
                write!(f, "the model has more than 4,294,967,294 columns, rows or entries")
            }
        }
    }
}

impl std::error::Error for ModelError {}

/// A column to add.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct ColumnSpec {
    /// Lower bound; `None` is −∞.
    pub lower: Option<Number>,
    /// Upper bound; `None` is +∞.
    pub upper: Option<Number>,
    /// Cost in the objective.
    pub cost: Number,
    /// Whether it must be a whole number.
    pub integer: bool,
}

/// Builds a [`Model`] piece by piece.
#[derive(Debug)]
pub struct ModelBuilder {
    model: Model,
}

impl ModelBuilder {
    /// An empty model.
    #[must_use]
    pub fn new(title: &str, sense: Sense) -> Self {
        Self {
            model: Model {
                title: title.to_owned(),
                sense,
                offset: Number::ZERO,
                labels: Labels::default(),
                numbers: Numbers::default(),
                variables: Vec::new(),
                columns: Vec::new(),
                column_tuples: Tuples::default(),
                families: Vec::new(),
                row_family: Vec::new(),
                row_tuples: Tuples::default(),
                row_sides: Vec::new(),
                row_start: vec![0],
                entries: Vec::new(),
                subset_families: Vec::new(),
            },
        }
    }

    /// Goes on where a finished model ends.
    #[must_use]
    pub fn from_model(model: Model) -> Self {
        Self { model }
    }

    /// The id of a label, added if it is new.
    pub fn label(&mut self, name: &str) -> LabelId {
        self.model.labels.intern(name)
    }

    /// Sets the constant of the objective.
    pub fn offset(&mut self, offset: Number) {
        self.model.offset = offset;
    }

    /// Starts a variable: the columns that follow belong to it. `arrow` says that its
    /// tuples are directed pairs over one set.
    pub fn variable(&mut self, name: &str, arrow: bool) -> VariableId {
        let start = count(self.model.columns.len());
        self.model.variables.push(Variable { name: name.to_owned(), arrow, columns: start..start });
        VariableId::from_index(self.model.variables.len() - 1)
    }

    /// Makes room for exactly so many more columns of so many places each.
    pub fn reserve_columns(&mut self, count: usize, places: usize) {
        self.model.columns.reserve_exact(count);
        self.model.column_tuples.reserve(count, places);
    }

    /// Adds a column to the variable that was started last (an unnamed one if none was).
    pub fn column(&mut self, tuple: &[LabelId], spec: &ColumnSpec) -> Result<ColumnId, ModelError> {
        if self.model.variables.is_empty() {
            self.variable("", false);
        }
        let id = ColumnId(checked(self.model.columns.len())?);
        let numbers = &mut self.model.numbers;
        let column = Column {
            variable: VariableId::from_index(self.model.variables.len() - 1),
            lower: spec.lower.as_ref().map(|n| numbers.intern(n)),
            upper: spec.upper.as_ref().map(|n| numbers.intern(n)),
            cost: numbers.intern(&spec.cost),
            integer: spec.integer,
        };
        self.model.columns.push(column);
        self.model.column_tuples.push(tuple);
        if let Some(variable) = self.model.variables.last_mut() {
            variable.columns.end = id.0 + 1;
        }
        Ok(id)
    }

    /// Changes the cost of a column.
    pub fn cost(&mut self, column: ColumnId, cost: &Number) -> Result<(), ModelError> {
        let id = self.model.numbers.intern(cost);
        let target = self.model.columns.get_mut(column.index());
        target.ok_or(ModelError::UnknownColumn(column))?.cost = id;
        Ok(())
    }

    /// Starts a family: the rows that follow belong to it.
    pub fn family(&mut self, name: &str, state: FamilyState, arrow: bool) -> FamilyId {
        let start = count(self.model.row_family.len());
        self.model.families.push(Family {
            name: name.to_owned(),
            state,
            over_subsets: false,
            arrow,
            rows: start..start,
        });
        FamilyId::from_index(self.model.families.len() - 1)
    }

    /// Adds a row to the family that was started last. Entries on the same column are
    /// added up, zeros dropped.
    pub fn row(&mut self, tuple: &[LabelId], row: Row) -> Result<RowId, ModelError> {
        if self.model.families.is_empty() {
            self.family("row 1", FamilyState::In, false);
        }
        let id = RowId(checked(self.model.row_family.len())?);
        let columns = self.model.columns.len();
        for (column, coefficient) in merged(row.entries) {
            if column.index() >= columns {
                return Err(ModelError::UnknownColumn(column));
            }
            let number = self.model.numbers.intern(&coefficient);
            self.model.entries.push((column, number));
        }
        let numbers = &mut self.model.numbers;
        let sides = (row.lower.map(|n| numbers.intern(&n)), row.upper.map(|n| numbers.intern(&n)));
        self.model.row_sides.push(sides);
        self.model.row_start.push(checked(self.model.entries.len())?);
        self.model.row_tuples.push(tuple);
        self.model.row_family.push(FamilyId::from_index(self.model.families.len() - 1));
        if let Some(family) = self.model.families.last_mut() {
            family.rows.end = id.0 + 1;
        }
        Ok(id)
    }

    /// Adds a family over subsets to the family that was started last; its `family` field
    /// is set here.
    pub fn subset_family(
        &mut self,
        mut subset_family: SubsetFamily,
    ) -> Result<SubsetFamilyId, ModelError> {
        let columns = self.model.columns.len();
        if let Some(term) = subset_family.terms.iter().find(|t| t.column.index() >= columns) {
            return Err(ModelError::UnknownColumn(term.column));
        }
        subset_family.family = FamilyId::from_index(self.model.families.len().saturating_sub(1));
        self.over_subsets();
        self.model.subset_families.push(subset_family);
        Ok(SubsetFamilyId::from_index(self.model.subset_families.len() - 1))
    }

    /// Marks the family that was started last as one over subsets (also one left out).
    pub fn over_subsets(&mut self) {
        if let Some(family) = self.model.families.last_mut() {
            family.over_subsets = true;
        }
    }

    /// How many entries have been written so far.
    #[must_use]
    pub fn nonzeros(&self) -> usize {
        self.model.entries.len()
    }

    /// The finished model.
    #[must_use]
    pub fn build(mut self) -> Model {
        self.model.entries.shrink_to_fit();
        self.model
    }
}

fn checked(length: usize) -> Result<u32, ModelError> {
    u32::try_from(length).ok().filter(|&n| n < u32::MAX).ok_or(ModelError::TooLarge)
}

fn count(length: usize) -> u32 {
    u32::try_from(length).unwrap_or(u32::MAX)
}

/// Entries by rising column, those on the same column added up, zeros dropped.
pub(crate) fn merged(mut entries: Vec<(ColumnId, Number)>) -> Vec<(ColumnId, Number)> {
    entries.sort_by_key(|(column, _)| *column);
    let mut out: Vec<(ColumnId, Number)> = Vec::with_capacity(entries.len());
    for (column, coefficient) in entries {
        match out.last_mut() {
            Some((last, sum)) if *last == column => *sum += coefficient,
            _ => out.push((column, coefficient)),
        }
    }
    out.retain(|(_, coefficient)| !coefficient.is_zero());
    out
}
