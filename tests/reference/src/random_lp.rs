//! Seeded random linear programs of ten kinds, small enough to be settled exactly.
//!
//! Every number is a whole number times a power of ten, so the exact model and the floating-point
//! one are the same problem but for the rounding of the badly scaled kind.

use model::{ColumnSpec, FamilyState, Model, ModelBuilder, Number, Row, Sense};
use rand_core::{Rng, SeedableRng};
use rand_pcg::Pcg32;

/// The kinds.
pub const KINDS: [&str; 10] = [
    "degenerate",
    "free columns",
    "boxed",
    "empty rows and columns",
    "fixed columns",
    "infeasible",
    "unbounded",
    "badly scaled",
    "duplicate rows",
    "big-M",
];

/// A linear program in exact numbers while it is drawn.
struct Draft {
    random: Pcg32,
    columns: Vec<ColumnSpec>,
    rows: Vec<Row>,
    point: Vec<i64>,
}

/// The problem of a kind (an index into [`KINDS`]) and a seed.
///
/// # Panics
/// Never: what is drawn is a model.
#[must_use]
pub fn random_lp(kind: usize, seed: u64) -> Model {
    let mut draft = Draft {
        random: Pcg32::seed_from_u64(seed * 16 + kind as u64),
        columns: Vec::new(),
        rows: Vec::new(),
        point: Vec::new(),
    };
    let (columns, rows) = (draft.whole(3, 18), draft.whole(2, 14));
    (0..columns).for_each(|_| draft.draw_column(kind));
    match kind {
        9 => draft.big_m(),
        _ => (0..rows).for_each(|_| draft.draw_row(kind)),
    }
    if kind == 7 {
        draft.scale();
    }
    draft.build(KINDS[kind])
}

fn number(value: i64) -> Number {
    Number::from(value)
}

impl Draft {
    fn whole(&mut self, low: i64, high: i64) -> i64 {
        low + i64::from(self.random.next_u32()) % (high - low + 1)
    }

    fn draw_column(&mut self, kind: usize) {
        let cost = match kind {
            0 => self.whole(0, 2),
            6 => self.whole(-9, 3),
            _ => self.whole(-9, 9),
        };
        let low = self.whole(-4, 4);
        let width = self.whole(1, 8);
        let (lower, upper) = match (kind, self.whole(0, 3)) {
            (0, _) => (Some(0), Some(1)),
            (1, 0 | 1) => (None, None),
            (4, 0 | 1) => (Some(low), Some(low)),
            (6, 0 | 1) | (1 | 5 | 8, 2) => (Some(low), None),
            (4, 2) | (6, 3) => (None, Some(low + width)),
            _ => (Some(low), Some(low + width)),
        };
        let above = lower.or(upper.map(|u| u - 3)).unwrap_or(0);
        let drawn = above + self.whole(0, 3);
        self.point.push(upper.map_or(drawn, |upper| drawn.min(upper)));
        self.columns.push(ColumnSpec {
            lower: lower.map(number),
            upper: upper.map(number),
            cost: number(cost),
            integer: false,
        });
    }

    fn draw_row(&mut self, kind: usize) {
        if kind == 8 && !self.rows.is_empty() && self.whole(0, 1) == 0 {
            return self.repeat_row();
        }
        let sparse = if kind == 3 { 5 } else { 2 };
        let mut entries = Vec::new();
        let mut at = 0;
        for j in 0..self.columns.len() {
            let value = if kind == 0 { 1 } else { self.whole(-7, 7) };
            // In the third kind every third column is in no row.
            let out = kind == 3 && j % 3 == 0;
            if self.whole(0, sparse) == 0 && value != 0 && !out {
                entries.push((model::ColumnId::from_index(j), number(value)));
                at += value * self.point[j];
            }
        }
        if kind == 5 {
            at = self.whole(-15, 15);
        }
        let (below, above) = (self.whole(0, 4), self.whole(0, 4));
        let (lower, upper) = match self.whole(0, 3) {
            _ if kind == 0 => (Some(1.min(at)), None),
            0 => (Some(at), Some(at)),
            1 => (None, Some(at + above)),
            2 => (Some(at - below), None),
            _ => (Some(at - below), Some(at + above)),
        };
        self.rows.push(Row { entries, lower: lower.map(number), upper: upper.map(number) });
    }

    /// A multiple of an earlier row, its sides a little looser or the same.
    fn repeat_row(&mut self) {
        let which = self.whole(0, self.rows.len() as i64 - 1) as usize;
        let (factor, loose) = (number(self.whole(1, 3)), number(self.whole(0, 1)));
        let row = self.rows[which].clone();
        let entries = row.entries.iter().map(|(c, a)| (*c, a * &factor)).collect();
        self.rows.push(Row {
            entries,
            lower: row.lower.map(|side| side * &factor - &loose),
            upper: row.upper.map(|side| side * &factor + &loose),
        });
    }

    /// Flows behind switches with coefficients up to a million, and a demand.
    fn big_m(&mut self) {
        let pairs = self.columns.len() / 2;
        let mut demand = Vec::new();
        for k in 0..pairs {
            let (flow, switch) = (2 * k, 2 * k + 1);
            let (unit, setup) = (self.whole(1, 9), self.whole(50, 200));
            let spec = |cost, upper| ColumnSpec {
                lower: Some(Number::ZERO),
                upper,
                cost: number(cost),
                integer: false,
            };
            self.columns[flow] = spec(unit, None);
            self.columns[switch] = spec(setup, Some(Number::ONE));
            let large = [1_000, 10_000, 1_000_000][self.whole(0, 2) as usize];
            let [flow, switch] = [flow, switch].map(model::ColumnId::from_index);
            let entries = vec![(flow, Number::ONE), (switch, number(-large))];
            self.rows.push(Row { entries, lower: None, upper: Some(Number::ZERO) });
            demand.push((flow, Number::ONE));
        }
        let total = number(self.whole(5, 100));
        self.rows.push(Row { entries: demand, lower: Some(total), upper: None });
    }

    /// Rows and columns times powers of ten between 1/1000 and 1000.
    fn scale(&mut self) {
        let power = |draft: &mut Self| {
            let exponent = draft.whole(-3, 3);
            let size = number(10_i64.pow(exponent.unsigned_abs() as u32));
            if exponent < 0 { Number::ONE / size } else { size }
        };
        let columns: Vec<Number> = (0..self.columns.len()).map(|_| power(self)).collect();
        for (column, factor) in self.columns.iter_mut().zip(&columns) {
            column.cost = &column.cost * factor;
            column.lower = column.lower.take().map(|bound| bound / factor);
            column.upper = column.upper.take().map(|bound| bound / factor);
        }
        for k in 0..self.rows.len() {
            let factor = power(self);
            let row = &mut self.rows[k];
            for (column, value) in &mut row.entries {
                *value = &*value * &factor * &columns[column.index()];
            }
            row.lower = row.lower.take().map(|side| side * &factor);
            row.upper = row.upper.take().map(|side| side * &factor);
        }
    }

    fn build(self, title: &str) -> Model {
        let mut builder = ModelBuilder::new(title, Sense::Minimise);
        for (j, spec) in self.columns.iter().enumerate() {
            builder.variable(&format!("x{j}"), false);
            builder.column(&[], spec).unwrap();
        }
        builder.family("rows", FamilyState::In, false);
        for row in self.rows {
            builder.row(&[], row).unwrap();
        }
        builder.build()
    }
}
