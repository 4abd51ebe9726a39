//! The model itself: columns, rows, families, all read-only once built.

use std::ops::Range;

use crate::{
    ColumnId, FamilyId, LabelId, Labels, Number, NumberId, Numbers, RowId, SubsetFamily,
    SubsetFamilyId, VariableId, nearest_f64,
};

/// The direction of the objective.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Sense {
    /// Smaller is better; bounds are lower bounds.
    Minimise,
    /// Larger is better; bounds are upper bounds.
    Maximise,
}

/// Where the rows of a family stand.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum FamilyState {
    /// Written into the model from the start.
    In,
    /// Part of the model's meaning, separated: a row is added when it is violated.
    OnDemand,
    /// Left out of the model.
    Out,
}

/// A variable of the formulation: a name over an index set.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Variable {
    /// The name as it is written, e.g. `x` or `\bar d`.
    pub name: String,
    /// Whether its tuples are directed pairs over one set, shown `x[i → j]`.
    pub arrow: bool,
    /// Its columns, which are contiguous.
    pub columns: Range<u32>,
}

/// One column: bounds, cost, integrality. Infinite bounds are `None`.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Column {
    /// The variable it belongs to.
    pub variable: VariableId,
    /// Lower bound; `None` is −∞.
    pub lower: Option<NumberId>,
    /// Upper bound; `None` is +∞.
    pub upper: Option<NumberId>,
    /// Cost in the objective.
    pub cost: NumberId,
    /// Whether it must be a whole number.
    pub integer: bool,
}

/// A constraint family: all rows that come from one statement.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Family {
    /// Its label, e.g. `leave`, or `row 3` where it has none.
    pub name: String,
    /// Where its rows stand now.
    pub state: FamilyState,
    /// Whether it is quantified over subsets, so that its members are not written out.
    pub over_subsets: bool,
    /// Whether its tuples are directed pairs over one set.
    pub arrow: bool,
    /// Its written rows, which are contiguous. Empty for a family over subsets. The rows of
    /// an ordinary family on demand are listed here and are not in the relaxation at first.
    pub rows: Range<u32>,
}

/// One exact row outside the model: a separated member of a family.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Row {
    /// Entries with their exact coefficients, by rising column, none zero, none twice.
    pub entries: Vec<(ColumnId, Number)>,
    /// Lower side; `None` is −∞.
    pub lower: Option<Number>,
    /// Upper side; `None` is +∞.
    pub upper: Option<Number>,
}

impl Row {
    /// The value of the left-hand side at a floating-point point.
    #[must_use]
    pub fn activity(&self, x: &[f64]) -> f64 {
        self.entries.iter().fold(0.0, |sum, (column, a)| sum + nearest_f64(a) * x[column.index()])
    }
}

/// An exact linear model with provenance. Made by [`crate::ModelBuilder`].
#[derive(Debug, Clone, PartialEq)]
pub struct Model {
    pub(crate) title: String,
    pub(crate) sense: Sense,
    pub(crate) offset: Number,
    pub(crate) labels: Labels,
    pub(crate) numbers: Numbers,
    pub(crate) variables: Vec<Variable>,
    pub(crate) columns: Vec<Column>,
    pub(crate) column_tuples: Tuples,
    pub(crate) families: Vec<Family>,
    pub(crate) row_family: Vec<FamilyId>,
    pub(crate) row_tuples: Tuples,
    pub(crate) row_sides: Vec<(Option<NumberId>, Option<NumberId>)>,
    pub(crate) row_start: Vec<u32>,
    pub(crate) entries: Vec<(ColumnId, NumberId)>,
    pub(crate) subset_families: Vec<SubsetFamily>,
}

/// Index tuples of varying length in one flat store.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Tuples {
    start: Vec<u32>,
    labels: Vec<LabelId>,
}

impl Default for Tuples {
    fn default() -> Self {
        Self { start: vec![0], labels: Vec::new() }
    }
}

impl Tuples {
    pub(crate) fn push(&mut self, tuple: &[LabelId]) {
        self.labels.extend_from_slice(tuple);
        self.start.push(u32::try_from(self.labels.len()).unwrap_or(u32::MAX));
    }

    pub(crate) fn reserve(&mut self, count: usize, places: usize) {
        self.start.reserve_exact(count);
        self.labels.reserve_exact(count.saturating_mul(places));
    }

    fn get(&self, index: usize) -> &[LabelId] {
        &self.labels[self.start[index] as usize..self.start[index + 1] as usize]
    }
}

impl Model {
    /// The formulation's title.
    #[must_use]
    pub fn title(&self) -> &str {
        &self.title
    }

    /// The direction of the objective.
    #[must_use]
    pub fn sense(&self) -> Sense {
        self.sense
    }

    /// The constant of the objective.
    #[must_use]
    pub fn offset(&self) -> &Number {
        &self.offset
    }

    /// The label table.
    #[must_use]
    pub fn labels(&self) -> &Labels {
        &self.labels
    }

    /// The number table.
    #[must_use]
    pub fn numbers(&self) -> &Numbers {
        &self.numbers
    }

    /// The variables in order of declaration.
    #[must_use]
    pub fn variables(&self) -> &[Variable] {
        &self.variables
    }

    /// All columns.
    #[must_use]
    pub fn columns(&self) -> &[Column] {
        &self.columns
    }

    /// The index tuple of a column.
    #[must_use]
    pub fn column_tuple(&self, column: ColumnId) -> &[LabelId] {
        self.column_tuples.get(column.index())
    }

    /// The families in the order of their statements, those left out included.
    #[must_use]
    pub fn families(&self) -> &[Family] {
        &self.families
    }

    /// The number of written rows, those of families on demand included.
    #[must_use]
    pub fn row_count(&self) -> usize {
        self.row_family.len()
    }

    /// The family of a row.
    #[must_use]
    pub fn row_family(&self, row: RowId) -> FamilyId {
        self.row_family[row.index()]
    }

    /// The index tuple of a row.
    #[must_use]
    pub fn row_tuple(&self, row: RowId) -> &[LabelId] {
        self.row_tuples.get(row.index())
    }

    /// The entries of a row by rising column.
    #[must_use]
    pub fn row_entries(&self, row: RowId) -> &[(ColumnId, NumberId)] {
        let i = row.index();
        &self.entries[self.row_start[i] as usize..self.row_start[i + 1] as usize]
    }

    /// Lower and upper side of a row; `None` is infinite.
    #[must_use]
    pub fn row_sides(&self, row: RowId) -> (Option<NumberId>, Option<NumberId>) {
        self.row_sides[row.index()]
    }

    /// Whether a row is in the relaxation from the start.
    #[must_use]
    pub fn row_is_in(&self, row: RowId) -> bool {
        self.families[self.row_family(row).index()].state == FamilyState::In
    }

    /// A written row as an owned exact row.
    #[must_use]
    pub fn row(&self, row: RowId) -> Row {
        let exact = |id: NumberId| self.numbers.exact(id).clone();
        let (lower, upper) = self.row_sides(row);
        Row {
            entries: self.row_entries(row).iter().map(|&(c, a)| (c, exact(a))).collect(),
            lower: lower.map(exact),
            upper: upper.map(exact),
        }
    }

    /// The families over subsets, one for each tuple of their outer index, those
    /// left out not included.
    #[must_use]
    pub fn subset_families(&self) -> &[SubsetFamily] {
        &self.subset_families
    }

    /// One family over subsets.
    #[must_use]
    pub fn subset_family(&self, id: SubsetFamilyId) -> &SubsetFamily {
        &self.subset_families[id.index()]
    }

    /// The name of a column as the page shows it: `x[Ash → Birch]`, `u[Ash]`, `z`.
    #[must_use]
    pub fn column_name(&self, column: ColumnId) -> String {
        let variable = &self.variables[self.columns[column.index()].variable.index()];
        self.indexed(&variable.name, variable.arrow, self.column_tuple(column))
    }

    /// The name of a written row as the page shows it: `order[Ash → Birch]`.
    #[must_use]
    pub fn row_name(&self, row: RowId) -> String {
        let family = &self.families[self.row_family(row).index()];
        self.indexed(&family.name, family.arrow, self.row_tuple(row))
    }

    fn indexed(&self, name: &str, arrow: bool, tuple: &[LabelId]) -> String {
        if tuple.is_empty() {
            return name.to_owned();
        }
        let parts: Vec<&str> = tuple.iter().map(|&l| self.labels.name(l)).collect();
        let separator = if arrow && tuple.len() == 2 { " → " } else { ", " };
        format!("{name}[{}]", parts.join(separator))
    }

    /// Whether a column must be 0 or 1: whole, between these bounds.
    #[must_use]
    pub fn is_binary(&self, column: ColumnId) -> bool {
        let column = &self.columns[column.index()];
        let is = |id: Option<NumberId>, value: &Number| {
            id.is_some_and(|id| self.numbers.exact(id) == value)
        };
        column.integer && is(column.lower, &Number::ZERO) && is(column.upper, &Number::ONE)
    }

    /// The column of a variable at an index tuple. `O(columns of the variable)`.
    #[must_use]
    pub fn find_column(&self, variable: &str, tuple: &[&str]) -> Option<ColumnId> {
        let wanted: Option<Vec<LabelId>> =
            tuple.iter().map(|name| self.labels.find(name)).collect();
        let wanted = wanted?;
        let variable = self.variables.iter().find(|v| v.name == variable)?;
        variable.columns.clone().map(ColumnId).find(|&c| self.column_tuple(c) == wanted.as_slice())
    }

    /// A smallest positive number `q` such that the objective of every feasible point is
    /// the offset plus a multiple of `q`: defined when every column with a cost is whole.
    /// `None` where there is no such lattice. Costs 2 and 4 give 2; costs ½ and ⅓ give ⅙.
    #[must_use]
    pub fn objective_lattice(&self) -> Option<Number> {
        let mut step: Option<Number> = None;
        for column in &self.columns {
            let cost = self.numbers.exact(column.cost);
            if cost.is_zero() {
                continue;
            }
            if !column.integer {
                return None;
            }
            step = Some(match step {
                None => absolute(cost),
                Some(step) => common_divisor(&step, cost),
            });
        }
        step
    }
}

fn absolute(number: &Number) -> Number {
    if *number < Number::ZERO { -number.clone() } else { number.clone() }
}

/// The greatest rational of which both numbers are whole multiples: for a/b and c/d
/// in lowest terms, gcd(a, c) / lcm(b, d).
fn common_divisor(a: &Number, b: &Number) -> Number {
    use dashu_int::{IBig, UBig, ops::Gcd};
    let (an, ad): (&IBig, &UBig) = (a.numerator(), a.denominator());
    let (bn, bd) = (b.numerator(), b.denominator());
    let top = an.gcd(bn);
    let bottom = ad / ad.gcd(bd) * bd;
    Number::from_parts(IBig::from(top), bottom)
}
