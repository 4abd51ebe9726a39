//! The rows of a relaxation, scaled to integers once and then read many times.

use std::collections::BTreeMap;
use std::sync::OnceLock;

use dashu_int::{IBig, UBig, ops::Gcd};
use model::{Model, Number, NumberId, Row, RowId, Sense};

use crate::implied;
use crate::words::Words;

/// Lower and upper bound of a column; `None` is infinite.
pub type Bounds = (Option<Number>, Option<Number>);

/// The bounds of the columns of a model. `O(columns)`.
#[must_use]
pub fn bounds_of(model: &Model) -> Vec<Bounds> {
    let exact = |id: model::NumberId| model.numbers().exact(id).clone();
    model.columns().iter().map(|c| (c.lower.map(exact), c.upper.map(exact))).collect()
}

/// Objective and rows of a relaxation in whole numbers: the written rows of the model that are
/// in, in their order, and then the rows added with [`ExactRows::add`], in that order.
///
/// Rows are only ever added; a relaxation that lacks some of them gives these the
/// multiplier 0.
#[derive(Debug, Clone)]
pub struct ExactRows {
    pub(crate) sense: Sense,
    pub(crate) offset: Number,
    /// Costs to be minimised (turned round when the model maximises), times `cost_scale`.
    pub(crate) costs: Vec<IBig>,
    pub(crate) cost_scale: UBig,
    /// The bounds of the model.
    pub(crate) bounds: Vec<Bounds>,
    /// Bounds that follow from the rows of the model, where it gives none; worked out when asked for.
    implied: OnceLock<Vec<Bounds>>,
    /// How many rows are the model's own.
    written: usize,
    pub(crate) rows: Vec<ScaledRow>,
    columns: Vec<u32>,
    /// The coefficients beside `columns`; 0 in a row that is listed in `wide`.
    coefficients: Vec<i64>,
    /// Rows whose scaled coefficients do not fit.
    wide: BTreeMap<u32, Vec<IBig>>,
    /// Costs and sides in machine words.
    pub(crate) words: Words,
}

/// One row times `scale`, in which every number is whole.
#[derive(Debug, Clone)]
pub(crate) struct ScaledRow {
    start: usize,
    end: usize,
    pub(crate) scale: UBig,
    pub(crate) lower: Option<IBig>,
    pub(crate) upper: Option<IBig>,
}

/// The scaled coefficients of a row.
#[derive(Debug, Clone, Copy)]
pub(crate) enum Coefficients<'a> {
    Small(&'a [i64]),
    Wide(&'a [IBig]),
}

impl Coefficients<'_> {
    /// The coefficient at a place of the row.
    pub(crate) fn at(self, place: usize) -> IBig {
        match self {
            Self::Small(values) => IBig::from(values[place]),
            Self::Wide(values) => values[place].clone(),
        }
    }
}

impl ExactRows {
    /// Scales the objective and the rows of `model` that are in. `O(non-zeros)`.
    #[must_use]
    pub fn new(model: &Model) -> Self {
        Self::of(model, |row| model.row_is_in(row))
    }

    /// Scales the objective and the written rows that `wanted` names. `O(non-zeros)`.
    #[must_use]
    pub fn of(model: &Model, wanted: impl Fn(RowId) -> bool) -> Self {
        let exact = |id: model::NumberId| model.numbers().exact(id).clone();
        let costs: Vec<Number> = model.columns().iter().map(|c| exact(c.cost)).collect();
        let cost_scale = common_denominator(costs.iter());
        let sign = if model.sense() == Sense::Maximise { -IBig::ONE } else { IBig::ONE };
        let bounds = bounds_of(model);
        let costs: Vec<IBig> = costs.iter().map(|c| scaled(c, &cost_scale) * &sign).collect();
        let mut rows = Self {
            sense: model.sense(),
            offset: model.offset().clone(),
            words: Words::new(&costs, &cost_scale),
            costs,
            cost_scale,
            implied: OnceLock::new(),
            written: 0,
            bounds,
            rows: Vec::new(),
            columns: Vec::new(),
            coefficients: Vec::new(),
            wide: BTreeMap::new(),
        };
        let whole = Whole::of(model);
        let written = (0..model.row_count()).map(RowId::from_index);
        for row in written.filter(|&row| wanted(row)) {
            if !rows.add_whole(model, row, &whole) {
                rows.add(&model.row(row));
            }
        }
        rows.written = rows.rows.len();
        rows
    }

    /// Adds a written row whose numbers are all whole and fit into words; whether it is one.
    fn add_whole(&mut self, model: &Model, row: RowId, whole: &Whole) -> bool {
        let (lower, upper) = model.row_sides(row);
        let entries = model.row_entries(row);
        let sides = [lower, upper].into_iter().flatten();
        if !entries.iter().map(|&(_, a)| a).chain(sides).all(|id| whole.at(id).is_some()) {
            return false;
        }
        let start = self.columns.len();
        self.columns.extend(entries.iter().map(|(column, _)| column.0));
        self.coefficients.extend(entries.iter().filter_map(|&(_, a)| whole.at(a)));
        let side = |id: Option<NumberId>| id.and_then(|id| whole.at(id)).map(IBig::from);
        let scaled = ScaledRow {
            start,
            end: self.columns.len(),
            scale: UBig::ONE,
            lower: side(lower),
            upper: side(upper),
        };
        self.words.add(&scaled.scale, (scaled.lower.as_ref(), scaled.upper.as_ref()));
        self.rows.push(scaled);
        true
    }

    /// Bounds that follow from the rows of the model, where it gives none. `O(non-zeros)` rational
    /// operations the first time that it is asked for.
    pub(crate) fn implied(&self) -> &[Bounds] {
        self.implied.get_or_init(|| implied::bounds(self, self.written))
    }

    /// Adds a row and gives its place: the index of its multiplier.
    pub fn add(&mut self, row: &Row) -> usize {
        let sides = row.lower.iter().chain(row.upper.iter());
        let scale = common_denominator(row.entries.iter().map(|(_, a)| a).chain(sides));
        let place = self.rows.len();
        let start = self.columns.len();
        let values: Vec<IBig> = row.entries.iter().map(|(_, a)| scaled(a, &scale)).collect();
        self.columns.extend(row.entries.iter().map(|(column, _)| column.0));
        let small: Option<Vec<i64>> = values.iter().map(|v| i64::try_from(v).ok()).collect();
        if let Some(small) = small {
            self.coefficients.extend(small);
        } else {
            self.coefficients.resize(self.columns.len(), 0);
            self.wide.insert(u32::try_from(place).unwrap_or(u32::MAX), values);
        }
        let lower = row.lower.as_ref().map(|side| scaled(side, &scale));
        let upper = row.upper.as_ref().map(|side| scaled(side, &scale));
        self.words.add(&scale, (lower.as_ref(), upper.as_ref()));
        self.rows.push(ScaledRow { start, end: self.columns.len(), scale, lower, upper });
        place
    }

    /// The number of rows, added ones included.
    #[must_use]
    pub fn row_count(&self) -> usize {
        self.rows.len()
    }

    /// The number of columns.
    #[must_use]
    pub fn column_count(&self) -> usize {
        self.costs.len()
    }

    /// What one exact sum looks at: non-zeros and columns.
    #[must_use]
    pub fn work(&self) -> u64 {
        (self.columns.len() + self.costs.len()) as u64
    }

    /// The non-zeros of all rows.
    pub(crate) fn nonzeros(&self) -> usize {
        self.columns.len()
    }

    /// A value to be minimised, without offset, as the model gives values.
    pub(crate) fn as_given(&self, value: Number) -> Number {
        match self.sense {
            Sense::Minimise => value + &self.offset,
            Sense::Maximise => &self.offset - value,
        }
    }

    /// The columns of a row with their scaled coefficients, where these fit into words.
    pub(crate) fn small_entries(&self, row: usize) -> Option<(&[u32], &[i64])> {
        match self.entries(row) {
            (columns, Coefficients::Small(values)) => Some((columns, values)),
            (_, Coefficients::Wide(_)) => None,
        }
    }

    /// The columns of a row with their scaled coefficients.
    pub(crate) fn entries(&self, row: usize) -> (&[u32], Coefficients<'_>) {
        let range = self.rows[row].start..self.rows[row].end;
        let wide = u32::try_from(row).ok().and_then(|row| self.wide.get(&row));
        let small = Coefficients::Small(&self.coefficients[range.clone()]);
        (&self.columns[range], wide.map_or(small, |values| Coefficients::Wide(values)))
    }
}

/// The numbers of a model that are whole and fit into a word.
struct Whole(Vec<Option<i64>>);

impl Whole {
    fn of(model: &Model) -> Self {
        let numbers = model.numbers();
        let word = |number: &Number| {
            number.is_int().then(|| i64::try_from(number.numerator()).ok()).flatten()
        };
        let ids = (0..numbers.len()).map(NumberId::from_index);
        Self(ids.map(|id| word(numbers.exact(id))).collect())
    }

    fn at(&self, id: NumberId) -> Option<i64> {
        self.0[id.index()]
    }
}

/// The least common multiple of the denominators.
pub(crate) fn common_denominator<'a>(numbers: impl Iterator<Item = &'a Number>) -> UBig {
    numbers.fold(UBig::ONE, |multiple, number| common_multiple(multiple, number.denominator()))
}

/// The least common multiple of two positive numbers.
pub(crate) fn common_multiple(a: UBig, b: &UBig) -> UBig {
    if b.is_one() {
        return a;
    }
    let divisor = (&a).gcd(b);
    a / divisor * b
}

/// `number · scale`, where `scale` is a multiple of the denominator.
fn scaled(number: &Number, scale: &UBig) -> IBig {
    number.numerator() * IBig::from(scale / number.denominator())
}
