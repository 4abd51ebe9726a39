//! What was found of switches, in figures.

use model::{Model, Number, NumberId, RowId, nearest_f64};
use record::study::{FamilyTightening, RivalTightening, SwitchRow};

use super::Rewritten;
use super::switch::{Switched, smaller};
use crate::words::{exact, row as named};

/// Notes what was found of a row, and adds it to the figures of its family.
pub(super) fn note(
    out: &mut RivalTightening,
    model: &Model,
    switched: &Switched,
    reaches: &[Option<Number>; 3],
) {
    let name = &model.families()[model.row_family(switched.row).index()].name;
    if out.families.last().is_none_or(|family| family.name != *name) {
        out.families.push(FamilyTightening { name: name.clone(), ..FamilyTightening::default() });
    }
    let Some(family) = out.families.last_mut() else { return };
    let size = |number: &Number| nearest_f64(number).abs();
    let new = [0, 1, 2].map(|by: usize| smaller(switched, reaches[by].as_ref()?));
    let before = size(&switched.coefficient);
    let needs = [0, 1, 2].map(|by: usize| new[by].as_ref().map_or(before, |(m, _)| size(m)));
    family.rows += 1;
    family.tightened_by_data += u32::from(new[0].is_some());
    family.tightened_by_relaxation += u32::from(new[1].is_some());
    family.tightened_by_cutoff += u32::from(new[2].is_some());
    raise(&mut family.largest, before);
    raise(&mut family.largest_by_data, needs[0]);
    raise(&mut family.largest_by_relaxation, needs[1]);
    raise(&mut family.largest_by_cutoff, needs[2]);
    if family.example.is_empty()
        && let (Some((m, _)), Some(reach)) = (&new[1], &reaches[1])
    {
        let from = if new[0] == new[1] { "the bounds" } else { "the relaxation" };
        family.example = format!(
            "{}: {} in place of {}, since by {from} the rest is at most {} where {} opens it",
            named(model, switched.row),
            exact(m),
            exact(&switched.coefficient),
            exact(reach),
            model.column_name(switched.switch),
        );
    }
    out.switches.push(SwitchRow {
        row: model.row_name(switched.row),
        family: name.clone(),
        switch: model.column_name(switched.switch),
        coefficient: before,
        by_data: needs[0],
        by_relaxation: needs[1],
        by_cutoff: needs[2],
    });
}

/// The smallest and the largest absolute coefficient of the rows that are in, some of them
/// rewritten. `O(non-zeros)`.
pub(super) fn range(model: &Model, rows: &Rewritten) -> (f64, f64) {
    let (mut low, mut high) = (f64::INFINITY, 0.0);
    let mut meet = |size: f64| {
        if size > 0.0 && size < low {
            low = size;
        }
        raise(&mut high, size);
    };
    let float = |id: NumberId| model.numbers().float(id).abs();
    for id in (0..model.row_count()).map(RowId::from_index).filter(|&id| model.row_is_in(id)) {
        match rows.get(&id) {
            Some(row) => row.entries.iter().for_each(|(_, a)| meet(nearest_f64(a).abs())),
            None => model.row_entries(id).iter().for_each(|(_, a)| meet(float(*a))),
        }
    }
    (if low.is_finite() { low } else { 0.0 }, high)
}

fn raise(most: &mut f64, value: f64) {
    if value > *most {
        *most = value;
    }
}

pub(super) fn count(length: usize) -> u32 {
    u32::try_from(length).unwrap_or(u32::MAX)
}
