//! A model in sentences: what an analyst looks at before the first run.

use std::collections::BTreeMap;

use crate::mps::{excerpt as short, grouped, plural};
use crate::{ColumnId, Family, FamilyState, Model, NumberId, RowId};

/// What rows and columns repeat, lack or fall apart into.
struct Shape {
    /// Entries of each column.
    uses: Vec<u32>,
    /// A fingerprint of each column's entries, in the order of the rows.
    columns: Vec<u128>,
    /// The parent of each column among those that rows join.
    joined: Vec<u32>,
    empty_rows: Vec<RowId>,
    total: f64,
}

impl Model {
    /// Sizes, density, ranges of coefficients by family, and what is repeated, empty or apart, a
    /// sentence each. Rows on demand and those left out are not looked at.
    /// `O(non-zeros + rows · log rows)`.
    #[must_use]
    pub fn describe(&self) -> Vec<String> {
        let shape = self.shape();
        let mut said = vec![self.size_words(), self.cost_words()];
        let written = |family: &&Family| family.state == FamilyState::In && !family.rows.is_empty();
        let families: Vec<&Family> = self.families.iter().filter(written).collect();
        let few = families.len() <= FAMILIES;
        let worth = families.iter().filter(|family| few || family.rows.len() > 1).take(FAMILIES);
        let told: Vec<String> = worth.map(|family| self.family_words(family)).collect();
        let rest = families.len() - told.len();
        said.extend(told);
        if rest > 0 {
            said.push(format!(
                "{} not told of one by one.",
                plural(rest, "family is", "families are")
            ));
        }
        said.extend(self.repeated(&shape));
        said.extend(self.left_alone(&shape));
        let numbers = self.rows_in().flat_map(|row| self.row_entries(row)).map(|entry| entry.1);
        if let Some((_, range)) = self.sizes(numbers) {
            let total = text(shape.total);
            said.push(format!("All coefficients: {range} in size; they add up to {total}."));
        }
        said
    }

    fn shape(&self) -> Shape {
        let n = self.columns.len();
        let mut shape = Shape {
            uses: vec![0; n],
            columns: self.columns.iter().map(fingerprint_of).collect(),
            joined: (0..).take(n).collect(),
            empty_rows: Vec::new(),
            total: 0.0,
        };
        for row in self.rows_in() {
            let entries = self.row_entries(row);
            if entries.is_empty() {
                shape.empty_rows.push(row);
            }
            for &(column, number) in entries {
                let at = column.0 as usize;
                shape.uses[at] += 1;
                shape.total += self.numbers.float(number);
                shape.columns[at] = mixed(mixed(shape.columns[at], row.0), number.0);
                if let Some(&(first, _)) = entries.first() {
                    join(&mut shape.joined, first.0, column.0);
                }
            }
        }
        shape
    }

    fn rows_in(&self) -> impl Iterator<Item = RowId> {
        let rows = (0..).take(self.row_sides.len()).map(RowId);
        rows.filter(|&row| self.row_is_in(row))
    }

    fn size_words(&self) -> String {
        let statistics = self.statistics();
        let binary = |column: &&crate::Column| {
            let is = |bound: Option<NumberId>, value: f64| {
                bound.is_some_and(|bound| same(self.numbers.float(bound), value))
            };
            column.integer && is(column.lower, 0.0) && is(column.upper, 1.0)
        };
        let binary = self.columns.iter().filter(binary).count();
        let whole = statistics.integer_columns as usize;
        let kinds = match (whole, binary) {
            (0, _) => "none whole".to_owned(),
            (whole, binary) if whole == binary => format!("{} of them 0 or 1", grouped(whole)),
            (whole, 0) => format!("{} of them whole", grouped(whole)),
            _ => format!("{} of them whole, {} of these 0 or 1", grouped(whole), grouped(binary)),
        };
        let (rows, columns) = (statistics.rows as usize, statistics.columns as usize);
        let nonzeros = usize::try_from(statistics.nonzeros).unwrap_or(usize::MAX);
        format!(
            "{}, {} ({kinds}), {}: {} % of the matrix, {} a row.",
            plural(rows, "row", "rows"),
            plural(columns, "column", "columns"),
            plural(nonzeros, "non-zero", "non-zeros"),
            tenths(nonzeros.saturating_mul(100), rows.saturating_mul(columns)),
            tenths(nonzeros, rows)
        )
    }

    fn cost_words(&self) -> String {
        let costs = self.columns.iter().map(|column| column.cost);
        let sizes = self.sizes(costs);
        match sizes {
            None => "No column has a cost.".to_owned(),
            Some((count, range)) => {
                format!("Costs: {} not 0, {range} in size.", grouped(count))
            }
        }
    }

    /// "order: 12 rows, coefficients 1 to 4 in size, right-hand sides 3."
    fn family_words(&self, family: &Family) -> String {
        let rows: Vec<RowId> = family.rows.clone().map(RowId).collect();
        let numbers = rows.iter().flat_map(|&row| self.row_entries(row)).map(|entry| entry.1);
        let coefficients = self
            .sizes(numbers)
            .map_or_else(String::new, |(_, range)| format!(", coefficients {range} in size"));
        let sides = rows.iter().flat_map(|&row| {
            let (lower, upper) = self.row_sides(row);
            [lower, upper.filter(|_| upper != lower)].into_iter().flatten()
        });
        let sides = self.sizes(sides).map_or_else(
            || ", sides 0".to_owned(),
            |(_, range)| format!(", sides other than 0 {range} in size"),
        );
        let rows = plural(rows.len(), "row", "rows");
        format!("{}: {rows}{coefficients}{sides}.", short(&family.name))
    }

    /// How many numbers are not 0, and the range of their size with the powers of ten it spans.
    fn sizes(&self, numbers: impl Iterator<Item = NumberId>) -> Option<(usize, String)> {
        let (mut count, mut range) = (0, None);
        let sizes = numbers.map(|number| self.numbers.float(number).abs());
        for size in sizes.filter(|size| *size > 0.0) {
            count += 1;
            let (least, most) = range.unwrap_or((size, size));
            range = Some((
                if size < least { size } else { least },
                if size > most { size } else { most },
            ));
        }
        let (least, most) = range?;
        let mut decades = 0;
        let mut grown = least;
        while grown * 10.0 <= most && decades < 300 {
            (grown, decades) = (grown * 10.0, decades + 1);
        }
        let wide = match decades {
            0 => " (within one power of ten)".to_owned(),
            1 => " (1 power of ten)".to_owned(),
            more => format!(" ({more} powers of ten)"),
        };
        let range = if same(least, most) {
            text(least)
        } else {
            format!("{} to {}{wide}", text(least), text(most))
        };
        Some((count, range))
    }

    /// Rows and columns that repeat another.
    fn repeated(&self, shape: &Shape) -> Vec<String> {
        let mut rows: Vec<(u128, RowId)> = self
            .rows_in()
            .filter(|&row| !self.row_entries(row).is_empty())
            .map(|row| (self.row_fingerprint(row), row))
            .collect();
        rows.sort_unstable();
        let pairs = rows.windows(2).filter(|pair| {
            let [(_, one), (_, other)] = [pair[0], pair[1]];
            self.row_entries(one) == self.row_entries(other)
                && self.row_sides(one) == self.row_sides(other)
        });
        let rows: Vec<(RowId, RowId)> = pairs.map(|pair| (pair[1].1, pair[0].1)).collect();
        let used = (0..).zip(&shape.columns).filter(|&(at, _)| shape.uses[at as usize] > 0);
        let mut columns: Vec<(u128, u32)> = used.map(|(at, &print)| (print, at)).collect();
        columns.sort_unstable();
        let columns: Vec<(u32, u32)> = columns
            .windows(2)
            .filter(|pair| pair[0].0 == pair[1].0)
            .map(|pair| (pair[1].1, pair[0].1))
            .collect();
        let mut said = Vec::new();
        if let Some((one, other)) = rows.iter().min() {
            said.push(format!(
                "{} another (first: {} is {}).",
                plural(rows.len(), "row repeats", "rows repeat"),
                short(&self.row_name(*one)),
                short(&self.row_name(*other))
            ));
        }
        if let Some((one, other)) = columns.iter().min() {
            let name = |at: u32| short(&self.column_name(ColumnId(at)));
            said.push(format!(
                "{} interchangeable with another: same entries, cost and bounds (first: {} and {}).",
                plural(columns.len(), "column is", "columns are"),
                name(*other),
                name(*one)
            ));
        }
        said
    }

    fn row_fingerprint(&self, row: RowId) -> u128 {
        let (lower, upper) = self.row_sides(row);
        let side = |side: Option<NumberId>| side.map_or(u32::MAX, |side| side.0);
        let start = mixed(mixed(SEED, side(lower)), side(upper));
        let entries = self.row_entries(row).iter();
        entries.fold(start, |print, &(column, number)| mixed(mixed(print, column.0), number.0))
    }

    /// Empty rows and columns, and parts that no row joins.
    fn left_alone(&self, shape: &Shape) -> Vec<String> {
        let mut said = Vec::new();
        if let Some(&first) = shape.empty_rows.first() {
            let rows = plural(shape.empty_rows.len(), "row has", "rows have");
            said.push(format!("{rows} no entry (first: {}).", short(&self.row_name(first))));
        }
        let unused = shape.uses.iter().filter(|&&uses| uses == 0).count();
        if let Some(first) = (0..).zip(&shape.uses).find(|(_, uses)| **uses == 0) {
            let columns = plural(unused, "column stands", "columns stand");
            let name = short(&self.column_name(ColumnId(first.0)));
            said.push(format!("{columns} in no row (first: {name})."));
        }
        let mut parts: BTreeMap<u32, usize> = BTreeMap::new();
        let mut joined = shape.joined.clone();
        for (at, _) in (0..).zip(&shape.uses).filter(|(_, uses)| **uses > 0) {
            *parts.entry(root(&mut joined, at)).or_insert(0) += 1;
        }
        if parts.len() > 1 {
            let largest = parts.values().max().copied().unwrap_or(0);
            said.push(format!(
                "The model falls into {} parts that no row joins, the largest of {}.",
                grouped(parts.len()),
                plural(largest, "column", "columns")
            ));
        }
        said
    }
}

/// No more families than this are told of.
const FAMILIES: usize = 12;
/// Where fingerprints begin, and what they are multiplied by: FNV-1a of 128 bits.
const SEED: u128 = 0x6c62_272e_07bb_0142_62b8_2175_6295_c58d;
const PRIME: u128 = 0x0000_0000_0100_0000_0000_0000_0000_013b;

fn mixed(print: u128, value: u32) -> u128 {
    (print ^ u128::from(value)).wrapping_mul(PRIME)
}

/// The cost, the bounds and whether a column is whole.
fn fingerprint_of(column: &crate::Column) -> u128 {
    let bound = |bound: Option<NumberId>| bound.map_or(u32::MAX, |bound| bound.0);
    let parts =
        [column.cost.0, bound(column.lower), bound(column.upper), u32::from(column.integer)];
    parts.into_iter().fold(SEED, mixed)
}

/// The column that stands for the part of a column.
fn root(joined: &mut [u32], mut at: u32) -> u32 {
    while joined[at as usize] != at {
        joined[at as usize] = joined[joined[at as usize] as usize];
        at = joined[at as usize];
    }
    at
}

fn join(joined: &mut [u32], one: u32, other: u32) {
    let (one, other) = (root(joined, one), root(joined, other));
    let (low, high) = if one < other { (one, other) } else { (other, one) };
    joined[high as usize] = low;
}

fn same(one: f64, other: f64) -> bool {
    one.to_bits() == other.to_bits() || one - other == 0.0
}

/// A number in few characters: plain between 10⁻⁴ and 10⁹, else with a power of ten.
fn text(value: f64) -> String {
    let size = value.abs();
    if size == 0.0 || (1e-4..1e9).contains(&size) {
        format!("{value}")
    } else {
        format!("{value:e}")
    }
}

/// A quotient to one place, cut off.
fn tenths(above: usize, below: usize) -> String {
    let tenths = above.saturating_mul(10).checked_div(below).unwrap_or(0);
    format!("{}.{}", grouped(tenths / 10), tenths % 10)
}

#[cfg(test)]
mod tests {
    use crate::mps;

    /// Two parts: a and b are alike, row r2 repeats r1; c stands alone with 1e-3 to 1e6; d in no
    /// row; r4 has no entry.
    const TEXT: &str = "NAME t\nROWS\n N cost\n L r1\n L r2\n G r3\n L r4\nCOLUMNS\n\
        \u{20}m1 'MARKER' 'INTORG'\n a cost 2 r1 3\n a r2 3\n b cost 2 r1 3\n b r2 3\n m2 'MARKER' 'INTEND'\n\
        \u{20}c cost 7 r3 0.001\n e r3 1000000\n d cost 1\nRHS\n R r1 4 r2 4\n R r3 5\nBOUNDS\n\
        \u{20}UP B a 1\n UP B b 1\nENDATA\n";

    #[test]
    fn a_model_is_told_in_sentences() {
        let (model, _) = mps::read(TEXT).unwrap();
        assert_eq!(
            model.describe(),
            [
                "4 rows, 5 columns (2 of them 0 or 1), 6 non-zeros: 30.0 % of the matrix, 1.5 a row.",
                "Costs: 4 not 0, 1 to 7 (within one power of ten) in size.",
                "r1: 1 row, coefficients 3 in size, sides other than 0 4 in size.",
                "r2: 1 row, coefficients 3 in size, sides other than 0 4 in size.",
                "r3: 1 row, coefficients 0.001 to 1000000 (9 powers of ten) in size, sides other than 0 5 in size.",
                "r4: 1 row, sides 0.",
                "1 row repeats another (first: r2 is r1).",
                "1 column is interchangeable with another: same entries, cost and bounds (first: a and b).",
                "1 row has no entry (first: r4).",
                "1 column stands in no row (first: d).",
                "The model falls into 2 parts that no row joins, the largest of 2 columns.",
                "All coefficients: 0.001 to 1000000 (9 powers of ten) in size; they add up to 1000012.001.",
            ]
        );
    }

    #[test]
    fn nothing_odd_is_not_spoken_of() {
        let text = "ROWS\n N c\n E r\nCOLUMNS\n x c 1 r 1\n y c 2 r 1\nRHS\n R r 1\nENDATA\n";
        let (model, _) = mps::read(text).unwrap();
        assert_eq!(
            model.describe()[1..],
            [
                "Costs: 2 not 0, 1 to 2 (within one power of ten) in size.",
                "r: 1 row, coefficients 1 in size, sides other than 0 1 in size.",
                "All coefficients: 1 in size; they add up to 2.",
            ]
        );
    }
}
