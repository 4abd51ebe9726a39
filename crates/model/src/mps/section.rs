//! Lines of ROWS, COLUMNS, RHS and RANGES.

use super::complaint::{excerpt, plural};
use super::draft::{ColumnDraft, Entry, Kind, RowDraft, RowRef};
use super::line::{Field, Pairs, pairs, row, words};
use super::number::{NotNumber, Value, parse};
use super::read::{MOST_ENTRIES, Reader};
use super::trap::Trap;
use crate::{Number, nearest_f64};

/// Which section's first set is meant.
#[derive(Debug, Clone, Copy)]
pub(super) enum SetOf {
    Rhs,
    Ranges,
    Bounds,
}

impl<'a> Reader<'a> {
    pub(super) fn row(&mut self, line: &Field<'a>) {
        let Some((kind, name)) = row(line, self.layout) else {
            return self.shape(line, "a type (N, E, L or G) and a name");
        };
        if self.draft.row_refs.contains_key(name.text) {
            return self.error(name.span(), "row-again", || {
                let message = format!("There are two rows named {}", excerpt(name.text));
                (message, "Give every row a name of its own.".to_owned())
            });
        }
        let kind = match kind.text.to_ascii_uppercase().as_str() {
            "E" => Kind::Equal,
            "L" => Kind::AtMost,
            "G" => Kind::AtLeast,
            "N" => return self.objective_row(name),
            _ => {
                return self.error(kind.span(), "row-type", || {
                    let message = format!("{} is no type of row", excerpt(kind.text));
                    (message, "Write N, E, L or G.".to_owned())
                });
            }
        };
        let id = u32::try_from(self.draft.rows.len()).unwrap_or(u32::MAX);
        self.draft.row_refs.insert(name.text, RowRef::Row(id));
        let draft = RowDraft {
            name: name.text,
            span: name.span(),
            kind,
            right: None,
            range: None,
            last: None,
        };
        self.draft.rows.push(draft);
    }

    fn objective_row(&mut self, name: Field<'a>) {
        let row = if self.draft.objective {
            self.traps.meet(Trap::FreeRow, name.span());
            RowRef::Free
        } else {
            self.draft.objective = true;
            RowRef::Objective
        };
        self.draft.row_refs.insert(name.text, row);
    }

    pub(super) fn column(&mut self, line: &Field<'a>) {
        if self.marker(line) {
            return;
        }
        let Some(Pairs { head: Some(name), pairs }) = pairs(line, self.layout) else {
            return self.shape(line, "a column, and once or twice a row and a number");
        };
        let column = self.named_column(name);
        for (row, number) in pairs {
            self.entry(column, row, number);
        }
    }

    /// The column of that name, begun if it is new.
    fn named_column(&mut self, name: Field<'a>) -> u32 {
        if let Some(current) = self.current
            && self.draft.columns[current as usize].name == name.text
        {
            return current;
        }
        let next = u32::try_from(self.draft.columns.len()).unwrap_or(u32::MAX);
        let id = *self.draft.column_ids.entry(name.text).or_insert(next);
        if id == next {
            self.draft.columns.push(ColumnDraft {
                name: name.text,
                span: name.span(),
                cost: Number::ZERO,
                costed: false,
                integer: self.integer,
                bounded: false,
                minus_infinity: false,
                lower: None,
                upper: None,
            });
        } else {
            self.error(name.span(), "column-again", || {
                let message = format!("Column {} goes on after other columns", excerpt(name.text));
                (message, "Write all entries of a column together.".to_owned())
            });
        }
        self.current = Some(id);
        id
    }

    fn entry(&mut self, column: u32, row: Field<'a>, number: Field<'a>) {
        let (Some(target), Some(value)) = (self.row_ref(row), self.coefficient(number)) else {
            return;
        };
        match target {
            RowRef::Free => {}
            RowRef::Objective => {
                let draft = &mut self.draft.columns[column as usize];
                let again = std::mem::replace(&mut draft.costed, true);
                draft.cost += value;
                if again {
                    self.traps.meet(Trap::EntryAgain, row.span());
                }
            }
            RowRef::Row(id) => {
                if self.draft.rows[id as usize].last.replace(column) == Some(column) {
                    self.traps.meet(Trap::EntryAgain, row.span());
                }
                let number = self.draft.numbers.intern(&value);
                self.draft.entries.push(Entry { row: id, column, number });
                self.count_entries(row);
            }
        }
    }

    fn count_entries(&mut self, place: Field<'a>) {
        if self.draft.entries.len() > MOST_ENTRIES {
            self.stopped = true;
            self.error(place.span(), "too-many-entries", || {
                let most = plural(MOST_ENTRIES, "entry", "entries");
                (format!("More than {most}"), "Take a smaller instance.".to_owned())
            });
        }
    }

    /// Whether the line is a marker; it switches integer columns on or off.
    fn marker(&mut self, line: &Field<'a>) -> bool {
        if !line.text.contains('\'') {
            return false;
        }
        let words = words(line);
        let [.., marker, kind] = words.as_slice() else { return false };
        if !marker.text.eq_ignore_ascii_case("'MARKER'") {
            return false;
        }
        match kind.text.to_ascii_uppercase().as_str() {
            "'INTORG'" => self.integer = true,
            "'INTEND'" => self.integer = false,
            _ => self.error(kind.span(), "marker", || {
                let message = format!("The marker {} is not read here", excerpt(kind.text));
                let mend = "Markers are 'INTORG' and 'INTEND'; write special ordered sets as rows.";
                (message, mend.to_owned())
            }),
        }
        true
    }

    pub(super) fn right(&mut self, line: &Field<'a>) {
        for (row, number) in self.set_line(line, SetOf::Rhs) {
            let (Some(target), Some(value)) = (self.row_ref(row), self.value(number)) else {
                continue;
            };
            match target {
                RowRef::Free => self.traps.meet(Trap::FreeRowValue, row.span()),
                RowRef::Objective => self.constant(number, value),
                RowRef::Row(id) => {
                    let value = self.side(number, value);
                    if self.draft.rows[id as usize].right.replace(value).is_some() {
                        self.traps.meet(Trap::ValueAgain, row.span());
                    }
                }
            }
        }
    }

    /// The RHS of the objective row: minus the constant.
    fn constant(&mut self, place: Field<'a>, value: Value) {
        let Value::Finite(value) = value else {
            return self.too_large(place);
        };
        if !value.is_zero() {
            self.traps.meet(Trap::ObjectiveConstant, place.span());
        }
        if self.draft.offset.replace(-value).is_some() {
            self.traps.meet(Trap::ValueAgain, place.span());
        }
    }

    pub(super) fn range(&mut self, line: &Field<'a>) {
        for (row, number) in self.set_line(line, SetOf::Ranges) {
            let (Some(target), Some(value)) = (self.row_ref(row), self.value(number)) else {
                continue;
            };
            let RowRef::Row(id) = target else {
                self.traps.meet(Trap::FreeRowValue, row.span());
                continue;
            };
            let value = self.side(number, value);
            let draft = &mut self.draft.rows[id as usize];
            if draft.kind == Kind::Equal {
                self.traps.meet(Trap::RangeOnEquation, row.span());
            }
            if draft.range.replace(value).is_some() {
                self.traps.meet(Trap::ValueAgain, row.span());
            }
        }
    }

    /// The pairs of a line of RHS or RANGES, none when it is of a further set.
    fn set_line(&mut self, line: &Field<'a>, of: SetOf) -> Vec<(Field<'a>, Field<'a>)> {
        match pairs(line, self.layout) {
            Some(Pairs { head, pairs }) if self.first_set(head, of) => pairs,
            Some(_) => Vec::new(),
            None => {
                self.shape(line, "a set (which may lack), and once or twice a row and a number");
                Vec::new()
            }
        }
    }

    /// Whether a line belongs to the first set of its section; a line without a set does.
    pub(super) fn first_set(&mut self, set: Option<Field<'a>>, of: SetOf) -> bool {
        let Some(set) = set else { return true };
        let first = *self.sets[of as usize].get_or_insert(set.text);
        if first != set.text {
            self.traps.meet(Trap::FurtherSet, set.span());
        }
        first == set.text
    }

    fn row_ref(&mut self, name: Field<'a>) -> Option<RowRef> {
        let found = self.draft.row_refs.get(name.text).copied();
        if found.is_none() {
            self.error(name.span(), "unknown-row", || {
                let message = format!("There is no row {}", excerpt(name.text));
                (message, "List it in ROWS, or mend its name.".to_owned())
            });
        }
        found
    }

    fn coefficient(&mut self, field: Field<'a>) -> Option<Number> {
        match self.value(field)? {
            Value::Finite(number) if nearest_f64(&number).is_finite() => Some(number),
            _ => {
                self.too_large(field);
                None
            }
        }
    }

    /// A number, infinite or not; `None` and an error when it is none.
    pub(super) fn value(&mut self, field: Field<'a>) -> Option<Value> {
        match parse(field.text) {
            Ok(value) => Some(value),
            Err(why) => {
                self.error(field.span(), "not-a-number", || match why {
                    NotNumber::TooLong => (
                        format!("{} has more digits than are read", excerpt(field.text)),
                        "Write at most 60 significant digits and 200 decimal places.".to_owned(),
                    ),
                    NotNumber::Other => (
                        format!("{} is no number", excerpt(field.text)),
                        "Write a decimal number with a point, such as 2.5 or 1e-3.".to_owned(),
                    ),
                });
                None
            }
        }
    }

    /// A side or bound: 10²⁰ or more in magnitude is infinite, and warned of.
    pub(super) fn side(&mut self, place: Field<'a>, value: Value) -> Value {
        let Value::Finite(number) = value else { return value };
        let limit = Number::from(10_u128.pow(20));
        let infinite = if number >= limit {
            Value::Above
        } else if number <= -limit {
            Value::Below
        } else {
            return Value::Finite(number);
        };
        self.traps.meet(Trap::LargeIsInfinite, place.span());
        infinite
    }

    pub(super) fn too_large(&mut self, place: Field<'a>) {
        self.error(place.span(), "infinite", || {
            let message = format!("{} is too large here", excerpt(place.text));
            (message, "Write a number under 10^100.".to_owned())
        });
    }

    pub(super) fn shape(&mut self, line: &Field<'a>, wanted: &str) {
        let start = line.text.len() - line.text.trim_start().len();
        let span = line.start + start..line.start + line.text.trim_end().len();
        self.error(span, "line-shape", || {
            let message = format!("{} has not the shape of a line here", excerpt(line.text.trim()));
            (message, format!("A line here has {wanted}, between blanks."))
        });
    }
}
