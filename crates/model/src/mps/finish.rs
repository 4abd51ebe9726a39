//! The draft made a model: sides from RHS and RANGES, bounds from what was given, names taken
//! apart into variables and families.

use super::complaint::Complaints;
use super::draft::{ColumnDraft, Draft, Entry, Kind, RowDraft};
use super::name::{Group, groups};
use super::number::Value;
use super::trap::{Trap, Traps};
use crate::{
    ColumnId, ColumnSpec, FamilyState, LabelId, Model, ModelBuilder, ModelError, Number, Row,
};

/// The model of a draft. `None` after an error, which is then in the sink.
pub(super) fn model(
    draft: Draft<'_>,
    traps: &mut Traps,
    sink: &mut Complaints<'_>,
) -> Option<Model> {
    for row in &draft.rows {
        if sides(row).is_none() {
            sink.error(row.span.clone(), || {
                let message = format!("Row {} has an infinite right-hand side", row.name);
                ("infinite", message, "Write a number under 10^20.".to_owned())
            });
        }
    }
    if sink.errors() > 0 {
        return None;
    }
    if !draft.objective {
        traps.meet(Trap::NoObjective, 0..0);
    }
    let built = build(draft, traps);
    if let Err(error) = &built {
        sink.error(0..0, || {
            ("too-large", error.to_string(), "Take a smaller instance.".to_owned())
        });
    }
    built.ok()
}

fn build(mut draft: Draft<'_>, traps: &mut Traps) -> Result<Model, ModelError> {
    let mut builder = ModelBuilder::new(draft.title, draft.sense);
    builder.offset(draft.offset.take().unwrap_or(Number::ZERO));
    let mut places = vec![ColumnId(0); draft.columns.len()];
    for Group { base, members } in groups(draft.columns.iter().map(|column| column.name)) {
        builder.variable(base, false);
        for (at, labels) in members {
            let spec = column(&draft.columns[at], traps);
            let tuple = tuple(&mut builder, &labels);
            places[at] = builder.column(&tuple, &spec)?;
        }
    }
    let (starts, sorted) = by_row(&draft.entries, draft.rows.len());
    for Group { base, members } in groups(draft.rows.iter().map(|row| row.name)) {
        builder.family(base, FamilyState::In, false);
        for (at, labels) in members {
            let entries = sorted[starts[at]..starts[at + 1]].iter().map(|entry| {
                (places[entry.column as usize], draft.numbers.exact(entry.number).clone())
            });
            let (lower, upper) = sides(&draft.rows[at]).unwrap_or((None, None));
            let row = Row { entries: entries.collect(), lower, upper };
            let tuple = tuple(&mut builder, &labels);
            builder.row(&tuple, row)?;
        }
    }
    Ok(builder.build())
}

fn tuple(builder: &mut ModelBuilder, labels: &[&str]) -> Vec<LabelId> {
    labels.iter().map(|label| builder.label(label)).collect()
}

/// The entries sorted by row, and where each row begins among them.
fn by_row(entries: &[Entry], rows: usize) -> (Vec<usize>, Vec<Entry>) {
    let mut starts = vec![0_usize; rows + 1];
    for entry in entries {
        starts[entry.row as usize + 1] += 1;
    }
    for row in 0..rows {
        starts[row + 1] += starts[row];
    }
    let mut sorted = entries.to_vec();
    sorted.sort_by_key(|entry| entry.row);
    (starts, sorted)
}

type Sides = (Option<Number>, Option<Number>);

/// The sides of a row. `None` for an infinite right-hand side where it cannot stand.
fn sides(row: &RowDraft<'_>) -> Option<Sides> {
    let right = match (&row.right, row.kind) {
        (None, _) => Number::ZERO,
        (Some(Value::Finite(right)), _) => right.clone(),
        (Some(Value::Above), Kind::AtMost) | (Some(Value::Below), Kind::AtLeast) => {
            return Some((None, None));
        }
        _ => return None,
    };
    let size = |range: &Number| if *range < Number::ZERO { -range.clone() } else { range.clone() };
    let all = |side: Number| (Some(side.clone()), Some(side));
    Some(match (row.kind, &row.range) {
        (Kind::AtMost, Some(Value::Finite(range))) => (Some(&right - size(range)), Some(right)),
        (Kind::AtLeast, Some(Value::Finite(range))) => {
            let upper = &right + size(range);
            (Some(right), Some(upper))
        }
        (Kind::Equal, Some(Value::Finite(range))) if *range < Number::ZERO => {
            (Some(&right + range), Some(right))
        }
        (Kind::Equal, Some(Value::Finite(range))) => {
            let upper = &right + range;
            (Some(right), Some(upper))
        }
        (Kind::Equal, None) => all(right),
        (Kind::AtMost, _) | (Kind::Equal, Some(Value::Below)) => (None, Some(right)),
        (Kind::AtLeast, _) | (Kind::Equal, Some(Value::Above)) => (Some(right), None),
    })
}

/// The bounds of a column by what was given and, where it was not, by the practice that the
/// module's table tells.
fn column(draft: &ColumnDraft<'_>, traps: &mut Traps) -> ColumnSpec {
    let mut meet = |trap: Trap| traps.meet(trap, draft.span.clone());
    let finite = |value: &Option<Value>| match value {
        Some(Value::Finite(number)) => Some(number.clone()),
        _ => None,
    };
    let (mut lower, mut upper) = (finite(&draft.lower), finite(&draft.upper));
    if draft.lower.is_none() {
        lower = Some(Number::ZERO);
        match &upper {
            Some(upper) if *upper < Number::ZERO => {
                meet(Trap::NegativeUpper);
                lower = None;
            }
            Some(upper) if upper.is_zero() => meet(Trap::ZeroUpper),
            _ => {}
        }
    }
    if draft.minus_infinity && lower.is_none() && draft.upper.is_none() {
        meet(Trap::MinusInfinity);
    }
    if draft.integer && !draft.bounded {
        meet(Trap::UnboundedInteger);
        upper = Some(Number::ONE);
    }
    if let (Some(lower), Some(upper)) = (&lower, &upper)
        && lower > upper
    {
        meet(Trap::CrossedBounds);
    }
    ColumnSpec { lower, upper, cost: draft.cost.clone(), integer: draft.integer }
}
