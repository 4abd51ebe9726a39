//! Ways to draw a solution, by the index sets of its variables: pairs of stops are arcs on the
//! map, one stop is a value written at it, a whole number is a bar over time, starts and ends are a chart of
//! machines, weights against a room are bins, what rows join is a graph, other pairs are a grid. Where
//! nothing else is drawn, other single indices are a grid of one column. What fits none of these is left
//! to the table of values.

mod ends;
mod graph;
mod strips;

use std::collections::{BTreeMap, BTreeSet};

use model::{ColumnId, FamilyId, LabelId, Model, NumberId, RowId, VariableId};
use record::message::{Arc, Drawing, Picture};

use self::ends::Ends;
use self::graph::Graph;
use self::strips::{Chart, Loads, Pulse};
use super::tidy;

/// Values of less are not drawn.
const ZERO: f64 = 1e-9;

/// A row is tight when it is met within this share of its side; absolute below 1.
const TIGHT: f64 = 1e-7;

/// A grid has at most so many cells.
const CELLS: usize = 4_000;

/// Time has at most so many periods.
const PERIODS: usize = 400;

/// How the variables of a model are drawn; the first suits best.
#[derive(Debug, Clone, Default)]
pub(crate) struct Drawings {
    stops: BTreeMap<LabelId, u32>,
    ways: Vec<Way>,
}

#[derive(Debug, Clone)]
enum Way {
    Arcs(VariableId),
    Stops(VariableId, Option<FamilyId>),
    Bars(Vec<VariableId>, Vec<i64>),
    Chart(Chart),
    Ends(Ends),
    Pulse(Pulse),
    Loads(Loads),
    Graph(Graph),
    Grid(VariableId, Vec<LabelId>, Vec<LabelId>),
    Column(VariableId, Vec<LabelId>),
}

impl Drawings {
    /// The ways for a model on an instance with these stops. Whole variables over pairs of stops
    /// come before others: of labels and flows beside arcs, a map shows the arcs. `O(columns)`.
    pub(crate) fn new(model: &Model, labels: &[String]) -> Self {
        let known = labels
            .iter()
            .zip(0..)
            .filter_map(|(label, place)| model.labels().find(label).map(|label| (label, place)));
        let mut drawings = Self { stops: known.collect(), ways: Vec::new() };
        let mut ways: Vec<(u8, Way)> = Vec::new();
        let mut over_time = Vec::new();
        let mut periods = BTreeSet::new();
        let variables = model.variables().iter().enumerate();
        for (index, variable) in variables.filter(|(_, variable)| !variable.columns.is_empty()) {
            let id = VariableId::from_index(index);
            let tuples: Vec<&[LabelId]> =
                variable.columns.clone().map(|c| model.column_tuple(ColumnId(c))).collect();
            if let Some(times) = times(model, &tuples) {
                periods.extend(times);
                over_time.push(id);
            } else {
                let found = drawings.ways_of(model, id, &tuples);
                ways.extend(found.into_iter().map(|way| (rank(model, &way), way)));
            }
        }
        if !over_time.is_empty() && periods.len() <= PERIODS {
            ways.push((2, Way::Bars(over_time, periods.into_iter().collect())));
        }
        if ways.is_empty() {
            ways.extend(column(model).map(|way| (rank(model, &way), way)));
        }
        ways.sort_by_key(|(rank, _)| *rank);
        drawings.ways = ways.into_iter().map(|(_, way)| way).collect();
        drawings
    }

    /// The ways that suit a variable by its tuples and its rows.
    fn ways_of(&self, model: &Model, id: VariableId, tuples: &[&[LabelId]]) -> Vec<Way> {
        let are_stops = tuples.iter().all(|tuple| tuple.iter().all(|l| self.stops.contains_key(l)));
        let length = tuples.first().map_or(0, |tuple| tuple.len());
        if length == 0 || tuples.iter().any(|tuple| tuple.len() != length) {
            return Vec::new();
        }
        let loads = Loads::new(model, id).map(Way::Loads);
        match (length, are_stops) {
            (2, true) => loads.into_iter().chain([Way::Arcs(id)]).collect(),
            (1, true) => vec![Way::Stops(id, self.pairs_of(model, id))],
            _ => {
                let chart = Chart::new(model, id, length).map(Way::Chart);
                let chart = chart.or_else(|| Ends::new(model, id, length).map(Way::Ends));
                let pulse = Pulse::new(model, id, length).map(Way::Pulse);
                let vertices = Graph::of_vertices(model, id, length).map(Way::Graph);
                let pairs = if length == 2 { Graph::of_pairs(model, id) } else { None };
                let grid = if length == 2 { grid(id, tuples) } else { None };
                let charts = chart.into_iter().chain(pulse).chain(vertices);
                charts.chain(loads).chain(pairs.map(Way::Graph)).chain(grid).collect()
            }
        }
    }

    /// The first family of written rows over pairs of stops that holds two columns of a variable
    /// over stops and nothing else: its tight rows are the arcs along which values are passed on.
    fn pairs_of(&self, model: &Model, variable: VariableId) -> Option<FamilyId> {
        let fits = |row: u32| {
            let row = RowId(row);
            self.pair(model.row_tuple(row)).is_some()
                && model.row_entries(row).len() <= 2
                && model
                    .row_entries(row)
                    .iter()
                    .all(|(column, _)| model.columns()[column.index()].variable == variable)
        };
        let families = model.families().iter();
        let place = families
            .map(|family| family.rows.clone())
            .position(|mut rows| !rows.is_empty() && rows.all(fits))?;
        Some(FamilyId::from_index(place))
    }

    fn pair(&self, tuple: &[LabelId]) -> Option<(u32, u32)> {
        let [from, to] = tuple else { return None };
        Some((*self.stops.get(from)?, *self.stops.get(to)?))
    }

    /// The drawings of a point; none when there is no point. `O(columns + rows)`.
    pub(crate) fn of(&self, model: &Model, x: &[f64]) -> Vec<Drawing> {
        if x.is_empty() {
            return Vec::new();
        }
        self.ways.iter().map(|way| self.drawing(model, way, x)).collect()
    }

    fn drawing(&self, model: &Model, way: &Way, x: &[f64]) -> Drawing {
        let name = |id: &VariableId| name_of(model, *id).to_owned();
        match way {
            Way::Arcs(id) => Drawing {
                name: format!("{} on the map", name(id)),
                picture: Picture::Map { arcs: self.arcs(model, *id, x), at: Vec::new() },
            },
            Way::Stops(id, family) => Drawing {
                name: match family {
                    Some(_) => format!("{} and tight rows on the map", name(id)),
                    None => format!("{} on the map", name(id)),
                },
                picture: Picture::Map {
                    arcs: family.map_or_else(Vec::new, |family| self.tight(model, family, x)),
                    at: self.values_at(model, *id, x),
                },
            },
            Way::Bars(ids, periods) => {
                let names: Vec<String> = ids.iter().map(name).collect();
                let series = ids.iter().map(|id| (name(id), over(model, *id, periods, x)));
                Drawing {
                    name: format!("{} over time", names.join(", ")),
                    picture: Picture::Bars { periods: periods.clone(), series: series.collect() },
                }
            }
            Way::Chart(chart) => chart.drawing(model, x),
            Way::Ends(ends) => ends.drawing(model, x),
            Way::Pulse(pulse) => pulse.drawing(model, x),
            Way::Loads(loads) => loads.drawing(model, x),
            Way::Graph(graph) => graph.drawing(model, x),
            Way::Grid(id, rows, columns) => Drawing {
                name: format!("{} as a grid", name(id)),
                picture: cells(model, *id, (rows, columns), x),
            },
            Way::Column(id, rows) => Drawing {
                name: format!("{} as a column", name(id)),
                picture: Picture::Grid {
                    cells: (0..)
                        .zip(values(model, *id, x))
                        .map(|(k, (_, v))| (k, 0, v))
                        .filter(|cell| cell.2.abs() > ZERO)
                        .collect(),
                    rows: names(model, rows),
                    columns: vec![name(id)],
                },
            },
        }
    }

    fn arcs(&self, model: &Model, id: VariableId, x: &[f64]) -> Vec<Arc> {
        let values = values(model, id, x).filter(|(_, value)| value.abs() > ZERO);
        let arcs = values.filter_map(|(column, value)| {
            let (from, to) = self.pair(model.column_tuple(column))?;
            Some(Arc { from, to, value, column: Some(column.0) })
        });
        arcs.collect()
    }

    fn values_at(&self, model: &Model, id: VariableId, x: &[f64]) -> Vec<(u32, f64)> {
        let values = values(model, id, x).filter_map(|(column, value)| {
            let stop = model.column_tuple(column).first()?;
            Some((*self.stops.get(stop)?, value))
        });
        values.collect()
    }

    /// The rows of a family that the point meets as an equation.
    fn tight(&self, model: &Model, family: FamilyId, x: &[f64]) -> Vec<Arc> {
        let rows = model.families()[family.index()].rows.clone().map(RowId);
        let arcs = rows.filter(|&row| is_tight(model, row, x)).filter_map(|row| {
            let (from, to) = self.pair(model.row_tuple(row))?;
            Some(Arc { from, to, value: 1.0, column: None })
        });
        arcs.collect()
    }
}

fn name_of(model: &Model, id: VariableId) -> &str {
    &model.variables()[id.index()].name
}

/// What suits best comes first.
fn rank(model: &Model, way: &Way) -> u8 {
    match way {
        Way::Arcs(id) => {
            let mut columns = model.variables()[id.index()].columns.clone();
            u8::from(!columns.all(|column| model.columns()[column as usize].integer))
        }
        Way::Chart(_) | Way::Ends(_) | Way::Pulse(_) => 1,
        Way::Loads(loads) if !loads.is_long(model) => 1,
        Way::Graph(graph) if !graph.is_dense() => 1,
        Way::Stops(..) => 3,
        Way::Bars(..) => 2,
        Way::Grid(..) => 4,
        Way::Graph(_) | Way::Loads(_) => 5,
        Way::Column(..) => 6,
    }
}

/// The whole numbers of tuples that are one whole number each.
fn times(model: &Model, tuples: &[&[LabelId]]) -> Option<Vec<i64>> {
    let times = tuples.iter().map(|tuple| match tuple {
        [label] => time(model, *label),
        _ => None,
    });
    times.collect()
}

fn time(model: &Model, label: LabelId) -> Option<i64> {
    model.labels().name(label).parse().ok()
}

/// Rows and columns in the order in which the tuples first name them.
fn grid(id: VariableId, tuples: &[&[LabelId]]) -> Option<Way> {
    let side = |place: usize| {
        let mut seen = BTreeSet::new();
        let labels = tuples.iter().filter_map(|tuple| tuple.get(place).copied());
        labels.filter(|label| seen.insert(*label)).collect::<Vec<_>>()
    };
    let (rows, columns) = (side(0), side(1));
    (rows.len() * columns.len() <= CELLS).then_some(Way::Grid(id, rows, columns))
}

/// The first variable over one index, in the order of its columns.
fn column(model: &Model) -> Option<Way> {
    let variables = model.variables().iter().enumerate();
    let mut over_one = variables.filter_map(|(index, variable)| {
        let labels = variable.columns.clone().map(|c| match model.column_tuple(ColumnId(c)) {
            [label] => Some(*label),
            _ => None,
        });
        let labels = labels.collect::<Option<Vec<_>>>()?;
        let fits = !labels.is_empty() && labels.len() <= CELLS;
        fits.then(|| Way::Column(VariableId::from_index(index), labels))
    });
    over_one.next()
}

fn names(model: &Model, labels: &[LabelId]) -> Vec<String> {
    labels.iter().map(|&label| model.labels().name(label).to_owned()).collect()
}

fn cells(
    model: &Model,
    id: VariableId,
    (rows, columns): (&[LabelId], &[LabelId]),
    x: &[f64],
) -> Picture {
    let places = |labels: &[LabelId]| -> BTreeMap<LabelId, u32> {
        labels.iter().copied().zip(0..).collect()
    };
    let (row_of, column_of) = (places(rows), places(columns));
    let values = values(model, id, x).filter(|(_, value)| value.abs() > ZERO);
    let cells = values.filter_map(|(column, value)| {
        let [from, to] = model.column_tuple(column) else { return None };
        Some((*row_of.get(from)?, *column_of.get(to)?, value))
    });
    Picture::Grid {
        cells: cells.collect(),
        rows: names(model, rows),
        columns: names(model, columns),
    }
}

/// The value of a variable in each period.
fn over(model: &Model, id: VariableId, periods: &[i64], x: &[f64]) -> Vec<Option<f64>> {
    let known = values(model, id, x).filter_map(|(column, value)| {
        Some((time(model, *model.column_tuple(column).first()?)?, value))
    });
    let known: BTreeMap<i64, f64> = known.collect();
    periods.iter().map(|period| known.get(period).copied()).collect()
}

fn values<'a>(
    model: &'a Model,
    id: VariableId,
    x: &'a [f64],
) -> impl Iterator<Item = (ColumnId, f64)> + 'a {
    let columns = model.variables()[id.index()].columns.clone();
    columns.filter_map(|column| Some((ColumnId(column), tidy(*x.get(column as usize)?))))
}

fn is_tight(model: &Model, row: RowId, x: &[f64]) -> bool {
    let float = |id: NumberId| model.numbers().float(id);
    let terms = model.row_entries(row).iter();
    let activity = terms.fold(0.0, |sum, &(column, a)| sum + float(a) * x[column.index()]);
    let (lower, upper) = model.row_sides(row);
    let meets = |side: f64| {
        let scale = if side.abs() > 1.0 { side.abs() } else { 1.0 };
        (activity - side).abs() <= TIGHT * scale
    };
    [lower, upper].into_iter().flatten().any(|side| meets(float(side)))
}
