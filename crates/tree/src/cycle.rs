//! A proof that walks in a circle: the rows of a ray, or the columns of an unbounded direction,
//! that belong to pairs and close to one cycle. Added up along it everything but a total cancels,
//! and the total tells why there is no optimum: a cycle of negative length.

use std::collections::BTreeMap;

use model::{ColumnId, LabelId, Model, Number, RowId};

/// Parts of a ray count from this share of its largest part on.
const SHARE: f64 = 1e-9;

/// Parts of a ray are equal within this share.
const EQUAL: f64 = 1e-6;

/// A cycle and what is added up along it.
#[derive(Debug, Clone, PartialEq)]
pub struct Cycle {
    /// Its stops in order; the first is not repeated.
    pub stops: Vec<LabelId>,
    /// The sum along it, exactly.
    pub total: Number,
}

/// The cycle that the rows of a ray form: rows of one family over pairs, with equal multipliers
/// and one side each, whose left-hand sides cancel. The total is that of the sides of rows with
/// ≤, and its negative for rows with ≥. O(non-zeros of those rows · log).
pub(crate) fn of_rows(model: &Model, ray: &[(RowId, f64)]) -> Option<Cycle> {
    let rows = counted(ray)?;
    let pairs: Option<Vec<_>> = rows.iter().map(|&row| pair(model.row_tuple(row))).collect();
    let stops = closed_walk(&pairs?)?;
    let family = model.row_family(*rows.first()?);
    let mut left: BTreeMap<ColumnId, Number> = BTreeMap::new();
    let (mut total, mut upper_rows) = (Number::ZERO, 0);
    for &row in &rows {
        if model.row_family(row) != family {
            return None;
        }
        let (side, is_upper) = match model.row_sides(row) {
            (None, Some(upper)) => (upper, true),
            (Some(lower), None) => (lower, false),
            _ => return None,
        };
        total += model.numbers().exact(side);
        upper_rows += usize::from(is_upper);
        for &(column, value) in model.row_entries(row) {
            *left.entry(column).or_insert(Number::ZERO) += model.numbers().exact(value);
        }
    }
    let cancels = left.values().all(Number::is_zero);
    let total = match upper_rows {
        0 => -total,
        all if all == rows.len() => total,
        _ => return None,
    };
    (cancels && total < Number::ZERO).then_some(Cycle { stops, total })
}

/// The cycle that the columns of an unbounded direction form: columns over pairs that grow
/// alike. The total is that of their costs. O(columns).
pub(crate) fn of_columns(model: &Model, direction: &[f64]) -> Option<Cycle> {
    let parts: Vec<_> =
        direction.iter().enumerate().map(|(at, &d)| (ColumnId::from_index(at), d)).collect();
    let columns = counted(&parts)?;
    let variable = model.columns().get(columns.first()?.index())?.variable;
    let mut pairs = Vec::new();
    let mut total = Number::ZERO;
    for column in columns {
        let of = &model.columns()[column.index()];
        if of.variable != variable {
            return None;
        }
        pairs.push(pair(model.column_tuple(column))?);
        total += model.numbers().exact(of.cost);
    }
    Some(Cycle { stops: closed_walk(&pairs)?, total })
}

/// The members of a ray that count, when all of them count alike.
fn counted<T: Copy>(ray: &[(T, f64)]) -> Option<Vec<T>> {
    let most = ray.iter().fold(0.0, |most, (_, y)| if y.abs() > most { y.abs() } else { most });
    let counted: Vec<_> = ray.iter().filter(|(_, y)| y.abs() > SHARE * most).collect();
    let first = counted.first()?.1;
    let alike = counted.iter().all(|(_, y)| (y - first).abs() <= EQUAL * most);
    alike.then(|| counted.iter().map(|(member, _)| *member).collect())
}

fn pair(tuple: &[LabelId]) -> Option<(LabelId, LabelId)> {
    let [from, to] = tuple else { return None };
    Some((*from, *to))
}

/// The stops of pairs that, each used once, make one cycle; from the first pair on.
fn closed_walk(pairs: &[(LabelId, LabelId)]) -> Option<Vec<LabelId>> {
    let next: BTreeMap<LabelId, LabelId> = pairs.iter().copied().collect();
    let start = pairs.first()?.0;
    let mut stops = Vec::with_capacity(pairs.len());
    let mut at = start;
    for _ in pairs {
        stops.push(at);
        at = *next.get(&at)?;
    }
    let visited_once = stops.iter().filter(|&&stop| stop == start).count() == 1;
    (next.len() == pairs.len() && at == start && visited_once).then_some(stops)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn walk(pairs: &[(u32, u32)]) -> Option<Vec<u32>> {
        let pairs: Vec<_> = pairs.iter().map(|&(i, j)| (LabelId(i), LabelId(j))).collect();
        closed_walk(&pairs).map(|stops| stops.iter().map(|stop| stop.0).collect())
    }

    #[test]
    fn only_one_closed_walk_is_a_cycle() {
        assert_eq!(walk(&[(2, 5), (7, 2), (5, 7)]), Some(vec![2, 5, 7]));
        assert_eq!(walk(&[(0, 1), (1, 0), (2, 3), (3, 2)]), None, "two cycles");
        assert_eq!(walk(&[(0, 1), (1, 2)]), None, "a path");
        assert_eq!(walk(&[(0, 1), (1, 0), (0, 2)]), None, "a fork");
        assert_eq!(walk(&[(0, 1), (1, 1)]), None, "a loop at the end");
        assert_eq!(walk(&[]), None);
    }

    #[test]
    fn parts_must_be_alike() {
        assert_eq!(counted(&[(0, -2.0), (1, 0.0), (2, -2.0), (3, 1e-12)]), Some(vec![0, 2]));
        assert_eq!(counted(&[(0, 2.0), (1, 1.0)]), None);
        assert_eq!(counted(&[(0, 2.0), (1, -2.0)]), None);
        assert_eq!(counted::<u8>(&[]), None);
    }
}
