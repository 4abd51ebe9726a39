//! Strips of lengths: a variable that says when something begins is a chart of machines over time
//! (Gantt 1919); a variable whose rows weigh it against a room is pieces lying in bins.
//!
//! Both are read from the rows. A start `S_t` has rows `v − S_t ≥ p` with `p > 0` and no other
//! column: the smallest such `p` is how long it lasts. Rows over two starts and a choice name
//! the machine: the index in which both agree.

use std::collections::{BTreeMap, BTreeSet};

use model::{ColumnId, FamilyId, LabelId, Model, RowId, VariableId};
use record::message::{Drawing, Part, Picture, Strip};

use super::{ZERO, name_of, values};

/// Strips drawn at most, and parts in all of them.
const STRIPS: usize = 80;
/// Rooms that are seen at a glance.
const FEW: usize = 24;
pub(super) const PARTS: usize = 4_000;

/// How a variable of starts is drawn.
#[derive(Debug, Clone)]
pub(super) struct Chart {
    variable: VariableId,
    /// How long each column's work lasts.
    lasts: BTreeMap<ColumnId, f64>,
    /// The index that names the strip; none puts each start on a strip of its own.
    lane: Option<usize>,
}

/// A row as `terms ≥ side`, when it has but one side.
pub(super) fn at_least(model: &Model, row: RowId) -> Option<(f64, f64)> {
    let float = |id| model.numbers().float(id);
    match model.row_sides(row) {
        (Some(lower), None) => Some((1.0, float(lower))),
        (None, Some(upper)) => Some((-1.0, -float(upper))),
        _ => None,
    }
}

impl Chart {
    /// The chart of a continuous variable with one or two indices, each of whose columns is seen
    /// to last. `O(nonzeros)`.
    pub(super) fn new(model: &Model, variable: VariableId, length: usize) -> Option<Self> {
        let columns = model.variables()[variable.index()].columns.clone();
        let whole = columns.clone().any(|column| model.columns()[column as usize].integer);
        if whole || columns.len() > PARTS || length > 2 {
            return None;
        }
        let mut lasts: BTreeMap<ColumnId, f64> = BTreeMap::new();
        for row in 0..model.row_count() {
            let Some((column, time)) = lasting(model, variable, RowId::from_index(row)) else {
                continue;
            };
            let known = lasts.entry(column).or_insert(time);
            if time < *known {
                *known = time;
            }
        }
        let lane = (length == 2).then(|| lane(model, variable)).flatten();
        (lasts.len() == columns.len()).then_some(Self { variable, lasts, lane })
    }

    /// The chart of a point.
    pub(super) fn drawing(&self, model: &Model, x: &[f64]) -> Drawing {
        let mut strips = Stacked::default();
        for (column, from) in values(model, self.variable, x) {
            let to = from + self.lasts.get(&column).copied().unwrap_or_default();
            let part = Part { name: String::new(), from, to, value: 1.0, column: column.0 };
            strips.add(model, model.column_tuple(column), self.lane, &part);
        }
        strips.drawing(name_of(model, self.variable))
    }
}

/// Strips that are filled part by part.
#[derive(Default)]
pub(super) struct Stacked {
    strips: Vec<Strip>,
    places: BTreeMap<Vec<LabelId>, usize>,
}

impl Stacked {
    /// Puts a part into the strip of one of its labels, or into one of its own, and names both.
    pub(super) fn add(
        &mut self,
        model: &Model,
        tuple: &[LabelId],
        lane: Option<usize>,
        part: &Part,
    ) {
        let label = |label: &LabelId| model.labels().name(*label).to_owned();
        let named: Vec<LabelId> = match lane {
            Some(place) => tuple.get(place).copied().into_iter().collect(),
            None => tuple.to_vec(),
        };
        let names: Vec<String> = named.iter().map(label).collect();
        let strips = &mut self.strips;
        let place = *self.places.entry(named).or_insert_with(|| {
            strips.push(Strip { name: names.join(", "), limit: None, parts: Vec::new() });
            strips.len() - 1
        });
        let rest = tuple.iter().enumerate().filter(|(place, _)| Some(*place) != lane);
        let rest: Vec<String> = rest.map(|(_, of)| label(of)).collect();
        self.strips[place].parts.push(Part { name: rest.join(", "), ..part.clone() });
    }

    /// The chart of a variable.
    pub(super) fn drawing(mut self, variable: &str) -> Drawing {
        let all = self.strips.len();
        self.strips.truncate(STRIPS);
        let part =
            if all > STRIPS { format!(", the first {STRIPS} of {all}") } else { String::new() };
        let name = format!("{variable} as a chart over time{part}");
        Drawing { name, picture: Picture::Strips { strips: self.strips, time: true } }
    }
}

/// The start that a row holds back, and by how much: `v − S ≥ p`.
fn lasting(model: &Model, variable: VariableId, row: RowId) -> Option<(ColumnId, f64)> {
    let (sign, side) = at_least(model, row)?;
    let [one, other] = model.row_entries(row) else { return None };
    let float = |id| model.numbers().float(id) * sign;
    let (a, b) = (float(one.1), float(other.1));
    let held = if a < 0.0 { one.0 } else { other.0 };
    let of = model.columns()[held.index()].variable;
    (a + b == 0.0 && side > 0.0 && of == variable).then(|| (held, side / a.abs()))
}

/// The index in which the two starts of every row that also holds a choice agree.
fn lane(model: &Model, variable: VariableId) -> Option<usize> {
    let mut agree = [true; 2];
    let mut seen = false;
    for row in (0..model.row_count()).map(RowId::from_index) {
        let entries = model.row_entries(row);
        let of = |column: ColumnId| &model.columns()[column.index()];
        let mut starts = entries.iter().filter(|entry| of(entry.0).variable == variable);
        let chosen = entries.iter().any(|entry| of(entry.0).integer);
        let (Some(one), Some(other), None) = (starts.next(), starts.next(), starts.next()) else {
            continue;
        };
        if chosen {
            seen = true;
            let pairs = model.column_tuple(one.0).iter().zip(model.column_tuple(other.0));
            for (agree, (a, b)) in agree.iter_mut().zip(pairs) {
                *agree &= a == b;
            }
        }
    }
    agree.iter().position(|&agree| agree && seen)
}

/// How a variable that says for each period whether something begins in it is drawn.
#[derive(Debug, Clone)]
pub(super) struct Pulse {
    variable: VariableId,
    /// How many periods what is named by all indices but the last takes.
    lasts: BTreeMap<Vec<LabelId>, f64>,
    /// The index that names the strip; none puts each on a strip of its own.
    lane: Option<usize>,
}

impl Pulse {
    /// The chart of a whole variable whose last index is a period: the first family of rows by
    /// period, with one upper side, in which a column stands as many times as its work takes
    /// periods (Pritsker, Watters & Wolfe 1969). `O(nonzeros)`.
    pub(super) fn new(model: &Model, variable: VariableId, length: usize) -> Option<Self> {
        let columns = model.variables()[variable.index()].columns.clone().map(ColumnId);
        if !(2..=3).contains(&length) || columns.len() > PARTS {
            return None;
        }
        let by_time = |column: ColumnId| {
            let of = model.columns()[column.index()];
            let last = model.column_tuple(column).last();
            of.integer && last.is_some_and(|&label| super::time(model, label).is_some())
        };
        if !columns.clone().all(by_time) {
            return None;
        }
        let families = model.families().iter();
        families.map(|family| family.rows.clone()).find_map(|rows| {
            let rows: Vec<RowId> = rows.map(RowId).collect();
            let lasts = periods(model, variable, &rows)?;
            let lane = lane_of(model, variable, &rows);
            let more = lasts.values().any(|&last| last > 1.0);
            let all = columns.clone().all(|c| lasts.contains_key(work(model.column_tuple(c))));
            (more && all).then_some(Self { variable, lasts, lane })
        })
    }

    /// The chart of a point.
    pub(super) fn drawing(&self, model: &Model, x: &[f64]) -> Drawing {
        let mut strips = Stacked::default();
        for (column, value) in values(model, self.variable, x).filter(|(_, value)| *value > ZERO) {
            let tuple = model.column_tuple(column);
            let Some(from) = tuple.last().and_then(|&label| super::time(model, label)) else {
                continue;
            };
            let from = from as f64;
            let to = from + self.lasts.get(work(tuple)).copied().unwrap_or(1.0);
            let part = Part { name: String::new(), from, to, value, column: column.0 };
            strips.add(model, work(tuple), self.lane, &part);
        }
        strips.drawing(name_of(model, self.variable))
    }
}

/// All indices but the period.
fn work(tuple: &[LabelId]) -> &[LabelId] {
    tuple.split_last().map_or(&[], |(_, rest)| rest)
}

/// In how many periods of these rows each work stands, where that is not 0 for any of them and every
/// row has one upper side and a period.
fn periods(
    model: &Model,
    variable: VariableId,
    rows: &[RowId],
) -> Option<BTreeMap<Vec<LabelId>, f64>> {
    let mut stands: BTreeMap<ColumnId, BTreeSet<i64>> = BTreeMap::new();
    for &row in rows {
        let time = model.row_tuple(row).iter().find_map(|&label| super::time(model, label))?;
        let (None, Some(_)) = model.row_sides(row) else { return None };
        for &(column, weight) in model.row_entries(row) {
            if model.columns()[column.index()].variable != variable
                || model.numbers().float(weight) <= 0.0
            {
                return None;
            }
            stands.entry(column).or_default().insert(time);
        }
    }
    let mut lasts: BTreeMap<Vec<LabelId>, f64> = BTreeMap::new();
    for (column, times) in stands {
        let known = lasts.entry(work(model.column_tuple(column)).to_vec()).or_default();
        let times = times.len() as f64;
        if times > *known {
            *known = times;
        }
    }
    (!lasts.is_empty()).then_some(lasts)
}

/// The index of the work that every row shares with its columns.
fn lane_of(model: &Model, variable: VariableId, rows: &[RowId]) -> Option<usize> {
    let length = model.variables()[variable.index()]
        .columns
        .clone()
        .next()
        .map_or(0, |column| work(model.column_tuple(ColumnId(column))).len());
    let shared = |place: usize| {
        rows.iter().all(|&row| {
            let named = model.row_tuple(row);
            let mut columns = model.row_entries(row).iter().map(|entry| entry.0);
            columns.all(|column| named.contains(&model.column_tuple(column)[place]))
        })
    };
    (0..length).find(|&place| length > 1 && shared(place))
}

/// How a variable that is weighed against rooms is drawn.
#[derive(Debug, Clone)]
pub(super) struct Loads {
    variable: VariableId,
    /// The family whose rows are the rooms.
    family: FamilyId,
}

impl Loads {
    /// The first family of written rows that weigh a variable against a room: one upper side,
    /// weights that are not all alike, and beside them at most one whole column that makes room.
    /// `O(nonzeros)`.
    pub(super) fn new(model: &Model, variable: VariableId) -> Option<Self> {
        let families = model.families().iter();
        let place = families.map(|family| family.rows.clone()).position(|rows| {
            let mut weights = Vec::new();
            rows.len() <= STRIPS
                && !rows.is_empty()
                && rows.map(RowId).all(|row| weighs(model, variable, row, &mut weights))
                && weights.len() <= PARTS
                && weights.iter().any(|weight| weights.first() != Some(weight))
        })?;
        Some(Self { variable, family: FamilyId::from_index(place) })
    }

    /// Whether there are so many rooms that a grid of values is read better.
    pub(super) fn is_long(&self, model: &Model) -> bool {
        model.families()[self.family.index()].rows.len() > FEW
    }

    /// What lies in each room at a point; rooms without anything and without an end are left out.
    pub(super) fn drawing(&self, model: &Model, x: &[f64]) -> Drawing {
        let family = &model.families()[self.family.index()].name;
        let name = format!("{} as lengths in ({family})", name_of(model, self.variable));
        let rows = model.families()[self.family.index()].rows.clone().map(RowId);
        let strips = rows.map(|row| self.strip(model, row, x));
        let strips = strips.filter(|strip| !strip.parts.is_empty() || strip.limit > Some(ZERO));
        Drawing { name, picture: Picture::Strips { strips: strips.collect(), time: false } }
    }

    fn strip(&self, model: &Model, row: RowId, x: &[f64]) -> Strip {
        let named = model.row_tuple(row);
        let label = |label: &LabelId| model.labels().name(*label).to_owned();
        let mut limit = at_least(model, row).map_or(0.0, |(_, side)| -side);
        let (mut parts, mut end) = (Vec::new(), 0.0);
        for &(column, weight) in model.row_entries(row) {
            let weight = upper_sign(model, row) * model.numbers().float(weight);
            let value = x.get(column.index()).copied().unwrap_or_default();
            if model.columns()[column.index()].variable != self.variable {
                limit -= weight * value;
            } else if value > ZERO {
                let tuple = model.column_tuple(column);
                let rest: Vec<String> =
                    tuple.iter().filter(|l| !named.contains(l)).map(label).collect();
                let (from, to) = (end, end + weight * value);
                parts.push(Part { name: rest.join(", "), from, to, value, column: column.0 });
                end = to;
            }
        }
        let names: Vec<String> = named.iter().map(label).collect();
        Strip { name: names.join(", "), limit: Some(limit), parts }
    }
}

/// What turns the entries of a row into those of a row with an upper side.
fn upper_sign(model: &Model, row: RowId) -> f64 {
    at_least(model, row).map_or(1.0, |(sign, _)| -sign)
}

/// Whether a row weighs a variable against a room; its weights are noted.
fn weighs(model: &Model, variable: VariableId, row: RowId, weights: &mut Vec<f64>) -> bool {
    if at_least(model, row).is_none() {
        return false;
    }
    let sign = upper_sign(model, row);
    let before = weights.len();
    let mut others = 0;
    for &(column, weight) in model.row_entries(row) {
        let weight = sign * model.numbers().float(weight);
        let of = &model.columns()[column.index()];
        if of.variable == variable && weight > 0.0 {
            weights.push(weight);
        } else if of.variable != variable && of.integer && weight < 0.0 {
            others += 1;
        } else {
            return false;
        }
    }
    others <= 1 && weights.len() >= before + 2
}
