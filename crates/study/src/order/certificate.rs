//! What a certificate hands out: rows, bounds and multipliers by name, numbers as fractions, so that
//! anybody can form the sums again.

use std::collections::{BTreeMap, BTreeSet};

use model::{ColumnId, Model, Number};
use record::study::{Certificate, MappedColumn, RowProof, SystemRow};

use super::affine::Map;
use crate::claims::Claim;
use crate::maximise::{Maximiser, Multipliers};
use crate::subject::Subject;

/// A value of less is 0.
const ROUNDING: f64 = 1e-9;

fn by_column(model: &Model, entries: &[(ColumnId, Number)]) -> Vec<(String, String)> {
    entries.iter().map(|(column, a)| (model.column_name(*column), a.to_string())).collect()
}

fn side(side: Option<&Number>) -> String {
    side.map_or_else(String::new, ToString::to_string)
}

/// The row that does not hold, and where.
pub(super) fn witness(out: &mut Certificate, model: &Model, (claim, point): (&Claim, &[f64])) {
    witness_of(out, model, (&claim.entries, point));
}

/// The objective that tells two relaxations apart, and the point of the one.
pub(super) fn witness_of(
    out: &mut Certificate,
    model: &Model,
    (entries, point): (&[(ColumnId, Number)], &[f64]),
) {
    out.objective = by_column(model, entries);
    let values = point.iter().enumerate().filter(|(_, value)| value.abs() > ROUNDING);
    let name = |column: usize| model.column_name(ColumnId::from_index(column));
    out.point = values.map(|(column, &value)| (name(column), value)).collect();
}

/// What stands for the variables of the outer rival.
pub(super) fn put_map(out: &mut Certificate, [inner, outer]: [&Subject; 2], map: &Map) {
    let column = |(column, (constant, entries)): (&ColumnId, &(Number, Vec<_>))| MappedColumn {
        column: outer.model.column_name(*column),
        constant: constant.to_string(),
        entries: by_column(&inner.model, entries),
    };
    out.map = map.iter().map(column).collect();
}

/// The proofs of all rows.
pub(super) fn put(
    out: &mut Certificate,
    model: &Model,
    (maximiser, proofs): (&Maximiser<'_>, &[(&Claim, Multipliers)]),
) {
    let (mut used, mut columns) = (BTreeSet::new(), BTreeSet::new());
    for (claim, multipliers) in proofs {
        let mut rest: BTreeMap<ColumnId, Number> = claim.entries.iter().cloned().collect();
        for (place, y) in multipliers {
            used.insert(*place);
            for (column, a) in &maximiser.rows[*place].row.entries {
                *rest.entry(*column).or_insert(Number::ZERO) -= y * a;
            }
        }
        columns.extend(rest.into_iter().filter(|(_, d)| !d.is_zero()).map(|(column, _)| column));
        let name = |place: &usize| maximiser.rows[*place].name.clone();
        out.proofs.push(RowProof {
            row: claim.name.clone(),
            entries: by_column(model, &claim.entries),
            side: claim.side.to_string(),
            multipliers: multipliers
                .iter()
                .map(|(place, y)| (name(place), y.to_string()))
                .collect(),
        });
    }
    for place in used {
        let named = &maximiser.rows[place];
        out.system.push(SystemRow {
            row: named.name.clone(),
            entries: by_column(model, &named.row.entries),
            lower: side(named.row.lower.as_ref()),
            upper: side(named.row.upper.as_ref()),
        });
    }
    for column in columns {
        let (lower, upper) = &maximiser.bounds[column.index()];
        out.bounds.push((model.column_name(column), side(lower.as_ref()), side(upper.as_ref())));
    }
}
