//! Lines of BOUNDS.

use super::complaint::excerpt;
use super::draft::ColumnDraft;
use super::line::{Field, Layout, card, words};
use super::number::Value;
use super::read::Reader;
use super::section::SetOf;
use super::trap::Trap;
use crate::Number;

/// A line of BOUNDS.
struct Bound<'a> {
    kind: Field<'a>,
    set: Option<Field<'a>>,
    column: Field<'a>,
    value: Option<Field<'a>>,
}

/// What a type of bound sets.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Sets {
    Upper,
    Lower,
    Fixed,
    Free,
    MinusInfinity,
    PlusInfinity,
    Binary,
}

/// What a type sets, and whether it makes the column a whole one.
fn kind(text: &str) -> Option<(Sets, bool)> {
    Some(match text.to_ascii_uppercase().as_str() {
        "UP" => (Sets::Upper, false),
        "UI" => (Sets::Upper, true),
        "LO" => (Sets::Lower, false),
        "LI" => (Sets::Lower, true),
        "FX" => (Sets::Fixed, false),
        "FR" => (Sets::Free, false),
        "MI" => (Sets::MinusInfinity, false),
        "PL" => (Sets::PlusInfinity, false),
        "BV" => (Sets::Binary, true),
        _ => return None,
    })
}

impl Sets {
    fn needs_value(self) -> bool {
        matches!(self, Self::Upper | Self::Lower | Self::Fixed)
    }
}

impl<'a> Reader<'a> {
    pub(super) fn bound(&mut self, line: &Field<'a>) {
        let first = words(line).first().copied();
        let Some((sets, integer)) = first.and_then(|field| kind(field.text)) else {
            return self.unknown_bound(line);
        };
        let Some(bound) = self.bound_fields(line, sets) else {
            return self.shape(line, "a type, a set (which may lack), a column and a number");
        };
        if !self.first_set(bound.set, SetOf::Bounds) {
            return;
        }
        let Some(&column) = self.draft.column_ids.get(bound.column.text) else {
            return self.error(bound.column.span(), "unknown-column", || {
                let message = format!("There is no column {}", excerpt(bound.column.text));
                (message, "Mend its name, or give it an entry in COLUMNS.".to_owned())
            });
        };
        let value = match bound.value {
            Some(field) if sets.needs_value() => {
                let Some(value) = self.value(field) else { return };
                self.side(field, value)
            }
            _ => Value::Finite(Number::ZERO),
        };
        let draft = &mut self.draft.columns[column as usize];
        draft.bounded = true;
        draft.integer |= integer;
        draft.minus_infinity |= sets == Sets::MinusInfinity;
        match set(draft, sets, value) {
            Some(true) => self.traps.meet(Trap::ValueAgain, bound.kind.span()),
            Some(false) => {}
            None => self.too_large(bound.value.unwrap_or(bound.kind)),
        }
    }

    /// Cuts a line of BOUNDS. By words, a line of three words is a type, a set and a column
    /// where the third names a column and no number is needed, else it lacks the set (or, where
    /// the third names a column, the number).
    fn bound_fields(&self, line: &Field<'a>, sets: Sets) -> Option<Bound<'a>> {
        if self.layout == Layout::Fixed {
            let [kind, set, column, value, None, None] = card(line)? else { return None };
            let bound = Bound { kind: kind?, set, column: column?, value };
            return (bound.value.is_some() || !sets.needs_value()).then_some(bound);
        }
        let known = |field: Field<'_>| self.draft.column_ids.contains_key(field.text);
        let (kind, set, column, value) = match *words(line).as_slice() {
            [kind, column] if !sets.needs_value() => (kind, None, column, None),
            [kind, set, column] if !sets.needs_value() && (known(column) || !known(set)) => {
                (kind, Some(set), column, None)
            }
            [_, set, column] if known(column) && !known(set) => return None,
            [kind, column, value] => (kind, None, column, Some(value)),
            [kind, set, column, value] => (kind, Some(set), column, Some(value)),
            _ => return None,
        };
        Some(Bound { kind, set, column, value })
    }

    fn unknown_bound(&mut self, line: &Field<'a>) {
        let Some(kind) = words(line).first().copied() else { return };
        self.error(kind.span(), "bound-type", || {
            let semi = ["SC", "SI", "SU"].iter().any(|s| kind.text.eq_ignore_ascii_case(s));
            if semi {
                let mend = "Write x ≤ U y with a binary column y, and x ≥ L y for a lower end.";
                ("Semi-continuous columns are not read here".to_owned(), mend.to_owned())
            } else {
                let mend = "Write UP, LO, FX, FR, MI, PL, BV, LI or UI.";
                (format!("{} is no type of bound", excerpt(kind.text)), mend.to_owned())
            }
        });
    }
}

/// Sets bounds and says whether one was there before; `None` when the value cannot stand there.
fn set(draft: &mut ColumnDraft<'_>, sets: Sets, value: Value) -> Option<bool> {
    let whole = |n: u8| Value::Finite(Number::from(n));
    let (lower, upper) = match sets {
        Sets::Upper if value == Value::Below => return None,
        Sets::Lower if value == Value::Above => return None,
        Sets::Fixed if !matches!(value, Value::Finite(_)) => return None,
        Sets::Upper => (None, Some(value)),
        Sets::Lower => (Some(value), None),
        Sets::Fixed => (Some(value.clone()), Some(value)),
        Sets::Free => (Some(Value::Below), Some(Value::Above)),
        Sets::MinusInfinity => (Some(Value::Below), None),
        Sets::PlusInfinity => (None, Some(Value::Above)),
        Sets::Binary => (Some(whole(0)), Some(whole(1))),
    };
    let mut again = false;
    for (slot, new) in [(&mut draft.lower, lower), (&mut draft.upper, upper)] {
        if let Some(new) = new {
            again |= slot.as_ref().is_some_and(|old| *old != new);
            *slot = Some(new);
        }
    }
    Some(again)
}
