//! Graphs: what joins the labels of one set is read from rows over two of them, or from the pairs
//! that a variable stands over.

use std::collections::{BTreeMap, BTreeSet};

use model::{ColumnId, LabelId, Model, RowId, VariableId};
use record::message::{Arc, Drawing, Picture, Vertex};

use super::{ZERO, name_of, values};

/// Vertices drawn at most; of more, those where values are not whole come first.
const VERTICES: usize = 80;
/// A graph of more vertices is not drawn.
const MOST: usize = 5_000;
/// Edges between vertices that can still be told apart.
const CROWD: usize = 300;
/// A row of more entries joins no pairs.
const CLIQUE: usize = 6;

/// How a variable over vertices, or over pairs of them, is drawn.
#[derive(Debug, Clone)]
pub(super) struct Graph {
    variable: VariableId,
    vertices: Vec<LabelId>,
    edges: Vec<(u32, u32)>,
    over: Over,
}

/// What the variable stands over.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Over {
    /// A vertex.
    Vertices,
    /// A vertex, at this place of the tuple, and a class.
    Classes(usize),
    /// A pair.
    Pairs,
}

impl Graph {
    /// The graph whose vertices, or whose pairs of a vertex and a class, have a column each, joined
    /// by rows of few of them with ones. `O(nonzeros)`.
    pub(super) fn of_vertices(model: &Model, variable: VariableId, length: usize) -> Option<Self> {
        let columns = model.variables()[variable.index()].columns.clone();
        if columns.clone().any(|column| !model.columns()[column as usize].integer) || length > 2 {
            return None;
        }
        let over = if length == 1 { Some(Over::Vertices) } else { class_side(model, variable) }?;
        let at = |column: ColumnId| {
            let tuple = model.column_tuple(column);
            tuple.get(if over == Over::Classes(1) { 1 } else { 0 }).copied()
        };
        let vertices = distinct(columns.map(ColumnId).filter_map(at))?;
        if !named(model, &vertices) {
            return None;
        }
        let places: BTreeMap<LabelId, u32> = vertices.iter().copied().zip(0..).collect();
        let mut edges = BTreeSet::new();
        for row in (0..model.row_count()).map(RowId::from_index) {
            let joined = joined(model, variable, row);
            let joined: Vec<u32> =
                joined.iter().filter_map(|&column| places.get(&at(column)?).copied()).collect();
            for (place, &one) in joined.iter().enumerate() {
                let others = joined[place + 1..].iter().filter(|&&other| other != one);
                edges.extend(others.map(|&other| (one.min(other), one.max(other))));
            }
        }
        let edges: Vec<(u32, u32)> = edges.into_iter().collect();
        (!edges.is_empty()).then_some(Self { variable, vertices, edges, over })
    }

    /// The graph of the pairs over one set of labels. `O(columns)`.
    pub(super) fn of_pairs(model: &Model, variable: VariableId) -> Option<Self> {
        let columns = model.variables()[variable.index()].columns.clone().map(ColumnId);
        let pairs = columns.filter_map(|column| match model.column_tuple(column) {
            [from, to] => Some((*from, *to)),
            _ => None,
        });
        let pairs: Vec<(LabelId, LabelId)> = pairs.collect();
        let side = |of: fn(&(LabelId, LabelId)) -> LabelId| -> BTreeSet<LabelId> {
            pairs.iter().map(of).collect()
        };
        let (from, to) = (side(|pair| pair.0), side(|pair| pair.1));
        let shared = from.intersection(&to).count();
        let vertices = distinct(pairs.iter().flat_map(|&(from, to)| [from, to]))?;
        let one_set =
            named(model, &vertices) && 2 * shared >= from.len().min(to.len()) && vertices.len() > 2;
        let places: BTreeMap<LabelId, u32> = vertices.iter().copied().zip(0..).collect();
        let edges: BTreeSet<(u32, u32)> = pairs
            .iter()
            .map(|(from, to)| (places[from], places[to]))
            .filter(|(from, to)| from != to)
            .map(|(from, to)| (from.min(to), from.max(to)))
            .collect();
        let edges = edges.into_iter().collect();
        one_set.then_some(Self { variable, vertices, edges, over: Over::Pairs })
    }

    /// Whether so many pairs are joined that a grid of values is read better.
    pub(super) fn is_dense(&self) -> bool {
        let vertices = self.vertices.len();
        match self.over {
            Over::Pairs => 4 * self.edges.len() > vertices * vertices.saturating_sub(1),
            _ => self.edges.len() > CROWD,
        }
    }

    /// The graph of a point.
    pub(super) fn drawing(&self, model: &Model, x: &[f64]) -> Drawing {
        let stands =
            if self.over == Over::Pairs { "on the graph" } else { "at the nodes of the graph" };
        let all = self.vertices.len();
        let part =
            if all > VERTICES { format!(", {VERTICES} of {all} nodes") } else { String::new() };
        let name = format!("{} {stands}{part}", name_of(model, self.variable));
        Drawing { name, picture: few(self.picture(model, x)) }
    }

    fn picture(&self, model: &Model, x: &[f64]) -> Picture {
        let mut vertices: Vec<Vertex> = self
            .vertices
            .iter()
            .map(|&label| Vertex {
                label: model.labels().name(label).to_owned(),
                class: String::new(),
                value: (self.over != Over::Pairs).then_some(0.0),
            })
            .collect();
        let places: BTreeMap<LabelId, u32> = self.vertices.iter().copied().zip(0..).collect();
        let mut arcs = Vec::new();
        let known = values(model, self.variable, x).filter(|(_, value)| value.abs() > ZERO);
        for (column, value) in known {
            match (self.over, model.column_tuple(column)) {
                (Over::Pairs, [from, to]) => {
                    let (from, to) = (places[from], places[to]);
                    arcs.push(Arc { from, to, value, column: Some(column.0) });
                }
                (Over::Vertices, [label]) => {
                    vertices[places[label] as usize].value = Some(value);
                }
                (Over::Classes(place), &[one, two]) => {
                    let (label, class) = if place == 0 { (one, two) } else { (two, one) };
                    let vertex = &mut vertices[places[&label] as usize];
                    if vertex.value.is_none_or(|known| value > known) {
                        vertex.value = Some(value);
                        model.labels().name(class).clone_into(&mut vertex.class);
                    }
                }
                _ => {}
            }
        }
        let crowded = self.over == Over::Pairs && self.is_dense();
        let edges = if crowded { Vec::new() } else { self.edges.clone() };
        Picture::Graph { vertices, edges, arcs }
    }
}

/// At most [`VERTICES`] of a graph: those where a value is not whole come first, then those where it is
/// not 0, then those beside them.
fn few(picture: Picture) -> Picture {
    let Picture::Graph { vertices, edges, arcs } = picture else { return picture };
    if vertices.len() <= VERTICES {
        return Picture::Graph { vertices, edges, arcs };
    }
    let mut keys = vec![3_u8; vertices.len()];
    let mut touch = |place: u32, key: u8| {
        if let Some(known) = keys.get_mut(place as usize)
            && key < *known
        {
            *known = key;
        }
    };
    let key = |value: f64| match (value.abs() > ZERO, (value - value.round()).abs() > ZERO) {
        (_, true) => 0,
        (true, _) => 1,
        _ => 3,
    };
    for (vertex, place) in vertices.iter().zip(0..) {
        touch(place, vertex.value.map_or(3, key));
    }
    for arc in &arcs {
        touch(arc.from, key(arc.value));
        touch(arc.to, key(arc.value));
    }
    let held = keys.clone();
    let is_held = |place: u32| held.get(place as usize).is_some_and(|key| *key < 2);
    for &(one, other) in &edges {
        for (near, place) in [(one, other), (other, one)] {
            if is_held(near) && keys[place as usize] > 2 {
                keys[place as usize] = 2;
            }
        }
    }
    chosen(vertices, (edges, arcs), &keys)
}

/// The vertices of the least keys, in their own order, with what joins them.
fn chosen(
    vertices: Vec<Vertex>,
    (mut edges, mut arcs): (Vec<(u32, u32)>, Vec<Arc>),
    keys: &[u8],
) -> Picture {
    let mut order: Vec<usize> = (0..vertices.len()).collect();
    order.sort_by_key(|&place| keys[place]);
    order.truncate(VERTICES);
    order.sort_unstable();
    let places: BTreeMap<u32, u32> = order
        .iter()
        .zip(0..)
        .filter_map(|(&old, new)| Some((u32::try_from(old).ok()?, new)))
        .collect();
    let pair = |from: u32, to: u32| Some((*places.get(&from)?, *places.get(&to)?));
    edges = edges.into_iter().filter_map(|(from, to)| pair(from, to)).collect();
    arcs = arcs
        .into_iter()
        .filter_map(|arc| pair(arc.from, arc.to).map(|(from, to)| Arc { from, to, ..arc }))
        .collect();
    let kept = vertices.into_iter().zip(0..).filter(|(_, place)| places.contains_key(place));
    Picture::Graph { vertices: kept.map(|(vertex, _)| vertex).collect(), edges, arcs }
}

/// Whether labels are not all whole numbers: periods and ranks are no vertices.
fn named(model: &Model, labels: &[LabelId]) -> bool {
    labels.iter().any(|&label| model.labels().name(label).parse::<i64>().is_err())
}

/// Labels in the order in which they come, when there are few.
fn distinct(labels: impl Iterator<Item = LabelId>) -> Option<Vec<LabelId>> {
    let mut seen = BTreeSet::new();
    let labels: Vec<LabelId> = labels.filter(|label| seen.insert(*label)).collect();
    (labels.len() <= MOST).then_some(labels)
}

/// The columns of a variable that a row holds with ones: two and perhaps one more column, or a few
/// and nothing else.
fn joined(model: &Model, variable: VariableId, row: RowId) -> Vec<ColumnId> {
    let entries = model.row_entries(row);
    let of = |column: ColumnId| model.columns()[column.index()].variable == variable;
    let one = |id| model.numbers().float(id).abs() == 1.0;
    let fits = (2..=CLIQUE).contains(&entries.len())
        && !matches!(model.row_sides(row), (Some(lower), Some(upper)) if lower == upper)
        && entries.iter().all(|&(_, a)| one(a));
    let columns: Vec<ColumnId> =
        entries.iter().map(|entry| entry.0).filter(|&column| fits && of(column)).collect();
    let beside = entries.len() - columns.len();
    let joins = columns.len() == 2 && beside <= 1 || columns.len() > 2 && beside == 0;
    if joins { columns } else { Vec::new() }
}

/// Which of two indices is the vertex: rows that join two columns keep the other, the class.
fn class_side(model: &Model, variable: VariableId) -> Option<Over> {
    let mut agree = [true; 2];
    let mut seen = false;
    for row in (0..model.row_count()).map(RowId::from_index) {
        let columns = joined(model, variable, row);
        let Some(first) = columns.first().map(|&column| model.column_tuple(column)) else {
            continue;
        };
        seen = true;
        for tuple in columns.iter().map(|&column| model.column_tuple(column)) {
            for (agree, (a, b)) in agree.iter_mut().zip(tuple.iter().zip(first)) {
                *agree &= a == b;
            }
        }
    }
    match agree {
        [false, true] if seen => Some(Over::Classes(0)),
        [true, false] if seen => Some(Over::Classes(1)),
        _ => None,
    }
}
