//! Writing: a model as an MPS text that others, and [`super::read()`], read as the same model.

use std::fmt;
use std::fmt::Write as _;

use super::complaint::plural;
use super::name::{Names, safe};
use super::number::decimal;
use crate::{ColumnId, FamilyState, Model, Number, RowId, Sense};

/// A model as an MPS text.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Written {
    /// The text, by words between blanks.
    pub text: String,
    /// What the reader of the file should know: what it lacks, what was rounded or renamed.
    pub notes: Vec<String>,
}

/// Why a model cannot be written.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum WriteError {
    /// The lower side of this row is over its upper side, which no line of MPS says.
    CrossedSides(String),
    /// A number of this row or column is too large or too near to zero to be read back.
    OutOfRange(String),
}

impl fmt::Display for WriteError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::CrossedSides(row) => write!(
                f,
                "the lower side of {row} is over its upper side, which MPS cannot say; write it as two rows"
            ),
            Self::OutOfRange(name) => write!(
                f,
                "{name} has a number that MPS readers take for infinite or zero; keep bounds and sides under 10^20, coefficients under 10^100, and all over 10^-100"
            ),
        }
    }
}

impl std::error::Error for WriteError {}

/// Writes a model. Families on demand and families over subsets are not written: their names
/// stand in a comment and in the notes. Numbers are exact where they end within 60 digits,
/// else rounded to 17 significant digits and counted in the notes. `O(non-zeros · log)`.
///
/// # Errors
/// [`WriteError`] for a row whose sides cross and for numbers out of range.
pub fn write(model: &Model) -> Result<Written, WriteError> {
    let mut writer = Writer {
        model,
        text: String::new(),
        columns: Vec::new(),
        rows: Vec::new(),
        objective: String::new(),
        changed: 0,
        rounded_coefficients: 0,
        rounded_sides: 0,
        sideless: 0,
    };
    writer.name_all();
    writer.head();
    writer.rows()?;
    writer.columns()?;
    writer.sides()?;
    writer.bounds()?;
    writer.text.push_str("ENDATA\n");
    let notes = writer.notes();
    Ok(Written { text: writer.text, notes })
}

struct Writer<'a> {
    model: &'a Model,
    text: String,
    columns: Vec<String>,
    /// The written rows with their names.
    rows: Vec<(RowId, String)>,
    objective: String,
    changed: usize,
    rounded_coefficients: usize,
    rounded_sides: usize,
    sideless: usize,
}

/// The type of a row and what its RHS and RANGES lines say.
struct Shape<'a> {
    kind: char,
    right: Option<&'a Number>,
    range: Option<Number>,
}

impl Writer<'_> {
    fn name_all(&mut self) {
        let model = self.model;
        let mut names = Names::default();
        let variables: Vec<String> = model
            .variables()
            .iter()
            .map(|variable| {
                let alone = variable.columns.len() == 1
                    && model.column_tuple(ColumnId(variable.columns.start)).is_empty();
                names.base(&variable.name, !alone)
            })
            .collect();
        for (at, column) in model.columns().iter().enumerate() {
            let labels = self.labels(model.column_tuple(ColumnId::from_index(at)));
            self.columns.push(names.member(&variables[column.variable.index()], &labels));
        }
        self.changed = names.changed;
        let mut names = Names::default();
        for family in model.families().iter().filter(|f| f.state == FamilyState::In) {
            let alone =
                family.rows.len() == 1 && model.row_tuple(RowId(family.rows.start)).is_empty();
            let base = names.base(&family.name, !alone);
            for row in family.rows.clone().map(RowId) {
                let labels = self.labels(model.row_tuple(row));
                self.rows.push((row, names.member(&base, &labels)));
            }
        }
        self.changed += names.changed;
        self.objective = names.base("objective", false);
    }

    fn labels(&self, tuple: &[crate::LabelId]) -> Vec<&str> {
        tuple.iter().map(|&label| self.model.labels().name(label)).collect()
    }

    fn head(&mut self) {
        let comment = |text: &str| text.replace(|c: char| c.is_control(), " ");
        let _ = writeln!(self.text, "* {}", comment(self.model.title()));
        for note in self.left_out() {
            let _ = writeln!(self.text, "* {}", comment(&note));
        }
        let _ = writeln!(self.text, "NAME {}", safe(self.model.title(), ""));
        if self.model.sense() == Sense::Maximise {
            self.text.push_str("OBJSENSE\n    MAX\n");
        }
    }

    /// What the file lacks: one note a family.
    fn left_out(&self) -> Vec<String> {
        let families = self.model.families().iter();
        let waiting = families.filter(|family| family.state == FamilyState::OnDemand);
        waiting.map(|f| format!("{} is on demand: its rows are not in the file", f.name)).collect()
    }

    fn rows(&mut self) -> Result<(), WriteError> {
        let _ = writeln!(self.text, "ROWS\n N {}", self.objective);
        for at in 0..self.rows.len() {
            let kind = self.shape(at)?.kind;
            self.sideless += usize::from(kind == 'N');
            let _ = writeln!(self.text, " {kind} {}", self.rows[at].1);
        }
        Ok(())
    }

    fn shape(&self, at: usize) -> Result<Shape<'_>, WriteError> {
        let (row, name) = &self.rows[at];
        let exact = |id| self.model.numbers().exact(id);
        let (lower, upper) = self.model.row_sides(*row);
        Ok(match (lower.map(exact), upper.map(exact)) {
            (None, None) => Shape { kind: 'N', right: None, range: None },
            (None, right) => Shape { kind: 'L', right, range: None },
            (right, None) => Shape { kind: 'G', right, range: None },
            (Some(lower), Some(upper)) if lower > upper => {
                return Err(WriteError::CrossedSides(name.clone()));
            }
            (Some(lower), Some(upper)) if lower == upper => {
                Shape { kind: 'E', right: Some(upper), range: None }
            }
            (Some(lower), Some(upper)) => {
                Shape { kind: 'L', right: Some(upper), range: Some(upper - lower) }
            }
        })
    }

    fn columns(&mut self) -> Result<(), WriteError> {
        self.text.push_str("COLUMNS\n");
        let mut entries = vec![Vec::new(); self.columns.len()];
        for (at, (row, _)) in self.rows.iter().enumerate() {
            for &(column, number) in self.model.row_entries(*row) {
                entries[column.index()].push((at, number));
            }
        }
        let (mut integer, mut markers) = (false, 0_u32);
        for (at, entries) in entries.into_iter().enumerate() {
            let column = self.model.columns()[at];
            if column.integer != integer {
                integer = column.integer;
                markers += 1;
                self.marker(markers, integer);
            }
            let cost = self.model.numbers().exact(column.cost);
            if !cost.is_zero() || entries.is_empty() {
                let cost = self.coefficient(cost, at)?;
                let _ = writeln!(self.text, "    {} {} {cost}", self.columns[at], self.objective);
            }
            for (row, number) in entries {
                let number = self.coefficient(self.model.numbers().exact(number), at)?;
                let _ =
                    writeln!(self.text, "    {} {} {number}", self.columns[at], self.rows[row].1);
            }
        }
        if integer {
            self.marker(markers + 1, false);
        }
        Ok(())
    }

    fn marker(&mut self, number: u32, opens: bool) {
        let kind = if opens { "INTORG" } else { "INTEND" };
        let _ = writeln!(self.text, "    marker~{number} 'MARKER' '{kind}'");
    }

    fn coefficient(&mut self, number: &Number, column: usize) -> Result<String, WriteError> {
        let out_of_range = || WriteError::OutOfRange(self.columns[column].clone());
        let written = decimal(number).ok_or_else(out_of_range)?;
        self.rounded_coefficients += usize::from(written.rounded);
        Ok(written.text)
    }

    /// The text of a side or bound, which must be under 10²⁰.
    fn side(&mut self, number: &Number, name: &str) -> Result<String, WriteError> {
        let limit = Number::from(10_u128.pow(20));
        let inside = *number < limit && -number.clone() < limit;
        let written = decimal(number).filter(|_| inside);
        let written = written.ok_or_else(|| WriteError::OutOfRange(name.to_owned()))?;
        self.rounded_sides += usize::from(written.rounded);
        Ok(written.text)
    }

    fn sides(&mut self) -> Result<(), WriteError> {
        self.text.push_str("RHS\n");
        if !self.model.offset().is_zero() {
            let constant = -self.model.offset().clone();
            let name = self.objective.clone();
            let constant = self.side(&constant, &name)?;
            let _ = writeln!(self.text, "    RHS {name} {constant}");
        }
        let mut ranges = String::new();
        for at in 0..self.rows.len() {
            let Shape { right, range, .. } = self.shape(at)?;
            let (right, name) = (right.cloned(), self.rows[at].1.clone());
            if let Some(right) = right.filter(|right| !right.is_zero()) {
                let right = self.side(&right, &name)?;
                let _ = writeln!(self.text, "    RHS {name} {right}");
            }
            if let Some(range) = range {
                let range = self.side(&range, &name)?;
                let _ = writeln!(ranges, "    RNG {name} {range}");
            }
        }
        if !ranges.is_empty() {
            let _ = write!(self.text, "RANGES\n{ranges}");
        }
        Ok(())
    }

    fn bounds(&mut self) -> Result<(), WriteError> {
        let start = self.text.len();
        for (at, column) in self.model.columns().iter().enumerate() {
            let exact = |id| self.model.numbers().exact(id).clone();
            let (lower, upper) = (column.lower.map(exact), column.upper.map(exact));
            match (lower, upper) {
                (None, None) => self.bound("FR", at, None)?,
                (Some(l), Some(u)) if l == u => self.bound("FX", at, Some(&l))?,
                (lower, upper) => {
                    match lower {
                        None => self.bound("MI", at, None)?,
                        Some(l) if !l.is_zero() || upper.as_ref().is_some_and(|u| *u < l) => {
                            self.bound("LO", at, Some(&l))?;
                        }
                        Some(_) => {}
                    }
                    match upper {
                        Some(u) => self.bound("UP", at, Some(&u))?,
                        None if column.integer => self.bound("PL", at, None)?,
                        None => {}
                    }
                }
            }
        }
        if self.text.len() > start {
            self.text.insert_str(start, "BOUNDS\n");
        }
        Ok(())
    }

    fn bound(
        &mut self,
        kind: &str,
        column: usize,
        value: Option<&Number>,
    ) -> Result<(), WriteError> {
        let name = self.columns[column].clone();
        let _ = write!(self.text, " {kind} BND {name}");
        if let Some(value) = value {
            let value = self.side(value, &name)?;
            let _ = write!(self.text, " {value}");
        }
        self.text.push('\n');
        Ok(())
    }

    fn notes(&self) -> Vec<String> {
        let mut notes = self.left_out();
        let mut counted = |count: usize, one: &str, many: &str, rest: &str| {
            if count > 0 {
                notes.push(format!("{}{rest}", plural(count, one, many)));
            }
        };
        let digits = " to 17 significant digits";
        counted(
            self.rounded_coefficients,
            "coefficient is rounded",
            "coefficients are rounded",
            digits,
        );
        counted(
            self.rounded_sides,
            "bound or side is rounded",
            "bounds or sides are rounded",
            digits,
        );
        counted(
            self.changed,
            "name was changed",
            "names were changed",
            ": blanks, brackets and quotes became _, equal names were numbered",
        );
        counted(
            self.sideless,
            "row has no side",
            "rows have no side",
            ": written as N, which readers leave out",
        );
        if !self.model.offset().is_zero() {
            notes.push("the constant of the objective is written as minus the RHS of the objective row, which some readers take otherwise".to_owned());
        }
        notes
    }
}
