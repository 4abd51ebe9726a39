//! One round of general cuts: rows of the tableau, rows of the relaxation alone or with others that
//! cancel a continuous column, and the structures among them, one after the other.

use std::collections::{BTreeMap, BTreeSet};
use std::rc::Rc;

use lp::Col;
use model::{ColumnId, Number, Row, nearest_f64};
use separate::general::{
    Aggregate, Class, Conflicts, Frame, GeneralCut, Lots, OddCuts, Trips, VariableBounds, ZeroHalf,
    complemented, cover, flow_cover, fraction, from_tableau,
};

use crate::branching::is_fractional;
use crate::relaxation::{Relaxation, RowOrigin};
use crate::round_trip::RoundTrip;
use crate::settings::Cuts;

/// Rows of the tableau that are looked at in a round.
const MOST_TABLEAU: usize = 50;
/// Rows of the relaxation that are looked at in a round.
const MOST_ROWS: usize = 400;
/// Rows that are summed at most.
const MOST_SUMMED: usize = 4;
/// Entries of rows that one step gathers.
const AT_ONCE: u64 = 2_000;

/// What is looked at next.
#[derive(Debug, Clone, Copy)]
enum Task {
    /// The rows from this one on are gathered.
    Gather(usize),
    /// A structure of the rows is recognised.
    Recognise(Class),
    /// Some more of the conflict graph.
    Graph,
    /// What is looked at in the rows is listed.
    Plan,
    Tableau(ColumnId),
    Row(usize),
    /// A literal of the conflict graph.
    Literal(usize),
    ZeroHalf,
    Lot(usize),
    Odd,
    /// The first stop of cuts of round trips.
    Stop(usize),
}

/// The structures that were recognised.
#[derive(Debug, Default)]
struct Structures {
    bounds: VariableBounds,
    conflicts: Option<Conflicts>,
    lots: Option<Lots>,
    odd: Option<OddCuts>,
    trips: Option<Trips>,
}

/// A round under way.
#[derive(Debug)]
pub(crate) struct CutRound {
    wanted: Cuts,
    whole: Vec<ColumnId>,
    trip: Option<Rc<RoundTrip>>,
    pub(crate) x: Vec<f64>,
    /// The rows that derivations speak of.
    pub(crate) rows: Vec<Row>,
    /// The rows in which a continuous column stands that is between its bounds.
    of_column: BTreeMap<ColumnId, Vec<usize>>,
    structures: Structures,
    zero_half: Option<ZeroHalf>,
    tasks: Vec<Task>,
    pub(crate) found: Vec<GeneralCut>,
    /// The best of them that are not looked at yet, the best last; `None` before they are chosen.
    pub(crate) queue: Option<Vec<GeneralCut>>,
    /// Those that are taken, with their numbers.
    pub(crate) taken: Vec<(usize, GeneralCut)>,
    pub(crate) ticks: u64,
}

impl CutRound {
    /// A round that has looked at nothing. `O(columns)`.
    pub(crate) fn new(
        (wanted, whole): (Cuts, &[ColumnId]),
        trip: Option<&Rc<RoundTrip>>,
        x: &[f64],
    ) -> Self {
        let structures = [
            (Class::RoundTrip, wanted.classes.has(Class::RoundTrip)),
            (Class::OddSet, wanted.classes.any(&[Class::Blossom, Class::OddSet])),
            (Class::LotSizing, wanted.classes.has(Class::LotSizing)),
            (Class::Clique, wanted.classes.any(&[Class::Clique, Class::OddHole])),
            (Class::FlowCover, wanted.classes.has(Class::FlowCover)),
        ];
        let asked = structures.iter().filter(|(_, asked)| *asked);
        let recognised = asked.map(|(class, _)| Task::Recognise(*class));
        let tasks = std::iter::once(Task::Plan).chain(recognised).chain([Task::Gather(0)]);
        Self {
            wanted,
            whole: whole.to_vec(),
            trip: trip.cloned(),
            x: x.to_vec(),
            rows: Vec::new(),
            of_column: BTreeMap::new(),
            structures: Structures::default(),
            zero_half: None,
            tasks: tasks.collect(),
            found: Vec::new(),
            queue: None,
            taken: Vec::new(),
            ticks: 0,
        }
    }

    /// Takes in rows of the relaxation until some entries are seen.
    fn gather(&mut self, relaxation: &Relaxation, frame: &Frame, mut next: usize) {
        let mut work = 0;
        while work < AT_ONCE && next < relaxation.row_count() {
            if let Some(row) = relaxation.exact_row(next) {
                work += 1 + row.entries.len() as u64;
                let open = |column: ColumnId| {
                    !frame.integer[column.index()] && between(frame, column, &self.x)
                };
                for (column, _) in row.entries.iter().filter(|(column, _)| open(*column)) {
                    self.of_column.entry(*column).or_default().push(self.rows.len());
                }
                self.rows.push(row);
            }
            next += 1;
        }
        self.ticks += work;
        if next < relaxation.row_count() {
            self.tasks.push(Task::Gather(next));
        }
    }

    fn recognise(&mut self, frame: &Frame, class: Class) {
        let (rows, x) = (&self.rows, &self.x);
        let found = &mut self.structures;
        match class {
            Class::FlowCover => found.bounds = VariableBounds::new(rows, frame),
            Class::Clique => {
                found.conflicts = Some(Conflicts::new(frame, x.len()));
                self.tasks.push(Task::Graph);
                return;
            }
            Class::LotSizing => found.lots = Some(Lots::new(rows, frame)),
            Class::OddSet => found.odd = OddCuts::new(rows, frame, x),
            _ => {
                let of = |trip: &Rc<RoundTrip>| Trips::new(&trip.stops, &trip.arcs, rows, frame);
                found.trips = self.trip.as_ref().and_then(of);
            }
        }
        self.ticks += rows.iter().map(|row| row.entries.len() as u64).sum::<u64>();
    }

    /// Goes on with the conflict graph.
    fn graph(&mut self, frame: &Frame) {
        let Some(graph) = &mut self.structures.conflicts else { return };
        if let Some(work) = graph.step(&self.rows, frame, &self.x) {
            self.ticks += work;
            self.tasks.push(Task::Graph);
        }
    }

    /// Goes on with the zero-half cuts.
    fn halve(&mut self, frame: &Frame) {
        let search = self.zero_half.get_or_insert_with(|| ZeroHalf::new(frame, &self.x));
        if let Some(work) = search.step(&self.rows, (frame, &self.x), &mut self.found) {
            self.ticks += work;
            self.tasks.push(Task::ZeroHalf);
        }
    }

    /// What is looked at, in order.
    fn plan(&mut self) {
        let (x, wanted) = (&self.x, self.wanted.classes);
        self.ticks += x.len() as u64;
        let mut fractional: Vec<ColumnId> =
            self.whole.iter().copied().filter(|c| is_fractional(x[c.index()])).collect();
        let off = |c: &ColumnId| (x[c.index()] - x[c.index()].floor() - 0.5).abs();
        fractional.sort_by(|a, b| off(a).total_cmp(&off(b)).then(a.cmp(b)));
        fractional.truncate(if wanted.has(Class::Gomory) { MOST_TABLEAU } else { 0 });
        let single = wanted.any(&[Class::Mir, Class::Cover, Class::FlowCover]);
        let single = if single { MOST_ROWS } else { 0 };
        let tight = (0..self.rows.len()).filter(|&i| touches(&self.rows[i], x)).take(single);
        let mut tasks: Vec<Task> = tight.map(Task::Row).collect();
        tasks.extend(fractional.into_iter().map(Task::Tableau));
        let found = &self.structures;
        let literals = found.conflicts.as_ref().map_or(0, Conflicts::len);
        tasks.extend((0..literals).map(Task::Literal));
        tasks.extend((0..found.lots.as_ref().map_or(0, Lots::places)).map(Task::Lot));
        tasks.extend((0..found.trips.as_ref().map_or(0, Trips::len)).map(Task::Stop));
        tasks.extend(wanted.has(Class::ZeroHalf).then_some(Task::ZeroHalf));
        tasks.extend(found.odd.as_ref().map(|_| Task::Odd));
        tasks.reverse();
        self.tasks = tasks;
    }

    /// Looks at the next thing; false when all are done.
    pub(crate) fn step(&mut self, relaxation: &mut Relaxation, frame: &Frame) -> bool {
        let Some(task) = self.tasks.pop() else { return false };
        self.ticks += 1;
        match task {
            Task::Gather(next) => self.gather(relaxation, frame, next),
            Task::Recognise(class) => self.recognise(frame, class),
            Task::Graph => self.graph(frame),
            Task::Plan => self.plan(),
            Task::Tableau(column) => self.tableau(relaxation, frame, column),
            Task::Row(index) => self.row(frame, index),
            Task::Literal(place) => self.literal(place),
            Task::ZeroHalf => self.halve(frame),
            Task::Lot(place) => {
                let lots = self.structures.lots.as_ref();
                self.found
                    .extend(lots.and_then(|lots| lots.cut(place, &self.rows, frame, &self.x)));
            }
            Task::Odd => self.odd(frame),
            Task::Stop(first) => {
                let Some(trips) = &mut self.structures.trips else { return true };
                self.ticks += (trips.len() * trips.len()) as u64;
                let of = (relaxation.model(), frame);
                self.found.extend(trips.cuts(first, of, &mut self.rows, &self.x));
            }
        }
        true
    }

    /// Where a row that derivations speak of comes from: a row of the relaxation, or a member that was
    /// put behind them.
    pub(crate) fn origin(&self, row: usize, relaxation: &Relaxation) -> Option<RowOrigin> {
        let own = relaxation.origins();
        own.get(row).cloned().or_else(|| {
            let members = self.structures.trips.as_ref()?.members();
            let (family, subset) = members.get(row.checked_sub(own.len())?)?.clone();
            Some(RowOrigin::Member { family, subset })
        })
    }

    fn tableau(&mut self, relaxation: &mut Relaxation, frame: &Frame, column: ColumnId) {
        let Some(row) = relaxation.simplex.tableau_row(Col(column.0)) else { return };
        let mut sum = Aggregate::default();
        for (index, multiplier) in row.multipliers {
            let Some(multiplier) = fraction(multiplier).filter(|y| !y.is_zero()) else { continue };
            let index = index.0 as usize;
            let Some(row) = self.rows.get(index) else { return };
            self.ticks += row.entries.len() as u64;
            if !sum.add(frame, (index, row), &multiplier, &self.x) {
                return;
            }
        }
        self.found.extend(from_tableau(&sum, frame, &self.x));
    }

    fn row(&mut self, frame: &Frame, index: usize) {
        self.ticks += 4 * self.rows[index].entries.len() as u64;
        let (classes, row) = (self.wanted.classes, &self.rows[index]);
        if classes.has(Class::Cover) {
            self.found.extend(cover((index, row), frame, &self.x));
        }
        if classes.has(Class::FlowCover) {
            let bounds = &self.structures.bounds;
            self.found.extend(flow_cover(&self.rows, index, bounds, frame, &self.x));
        }
        if classes.has(Class::Mir) {
            let cut = self.rounding(frame, index);
            self.found.extend(cut);
        }
    }

    fn literal(&mut self, place: usize) {
        let Some(graph) = &self.structures.conflicts else { return };
        self.ticks += (graph.len() * 4) as u64;
        if self.wanted.classes.has(Class::Clique) {
            self.found.extend(graph.cliques(place, &self.x));
        }
        if self.wanted.classes.has(Class::OddHole) {
            self.found.extend(graph.hole(place, &self.x));
        }
    }

    /// One flow of the odd cuts; at the end what they gave of the classes that are wanted.
    fn odd(&mut self, frame: &Frame) {
        let Some(odd) = &mut self.structures.odd else { return };
        if let Some(ticks) = odd.step() {
            self.ticks += ticks;
            self.tasks.push(Task::Odd);
            return;
        }
        let cuts = odd.cuts(&self.rows, frame, &self.x).into_iter();
        self.found.extend(cuts.filter(|cut| self.wanted.classes.has(cut.class)));
    }

    /// The rounding of a row, or of it with others, as soon as one is violated.
    fn rounding(&mut self, frame: &Frame, index: usize) -> Option<GeneralCut> {
        let mut sum = Aggregate::default();
        if !sum.add(frame, (index, &self.rows[index]), &Number::ONE, &self.x) {
            return None;
        }
        let mut used = BTreeSet::from([index]);
        loop {
            let turned = complemented(Class::Mir, &sum.turned(), frame, &self.x);
            let both = [complemented(Class::Mir, &sum, frame, &self.x), turned];
            let better = |a: GeneralCut, b: GeneralCut| if b.efficacy > a.efficacy { b } else { a };
            if let Some(cut) = both.into_iter().flatten().reduce(better) {
                return Some(cut);
            }
            if used.len() >= MOST_SUMMED {
                return None;
            }
            let (next, multiplier) = self.partner(&sum, &used)?;
            self.ticks += 4 * self.rows[next].entries.len() as u64;
            used.insert(next);
            if !sum.add(frame, (next, &self.rows[next]), &multiplier, &self.x) {
                return None;
            }
        }
    }

    /// A row that cancels a continuous column of the sum that is between its bounds.
    fn partner(&self, sum: &Aggregate, used: &BTreeSet<usize>) -> Option<(usize, Number)> {
        for column in sum.columns() {
            let Some(rows) = self.of_column.get(&column) else { continue };
            let own = sum.coefficient(column)?;
            for &index in rows.iter().filter(|index| !used.contains(index)) {
                let entry = self.rows[index].entries.iter().find(|(c, _)| *c == column);
                if let Some((_, other)) = entry {
                    return Some((index, -(own / other)));
                }
            }
        }
        None
    }
}

/// Whether a column is between its bounds.
fn between(frame: &Frame, column: ColumnId, x: &[f64]) -> bool {
    let value = x[column.index()];
    let (lower, upper) = &frame.bounds[column.index()];
    lower.as_ref().is_none_or(|l| value > nearest_f64(l) + 1e-6)
        && upper.as_ref().is_none_or(|u| value < nearest_f64(u) - 1e-6)
}

/// Whether a row is tight, or nearly so, at a point.
fn touches(row: &Row, x: &[f64]) -> bool {
    let activity = row.activity(x);
    let near = |side: &Option<Number>| {
        side.as_ref().is_some_and(|side| {
            let side = nearest_f64(side);
            (side - activity).abs() <= 0.1 * (1.0 + side.abs())
        })
    };
    near(&row.lower) || near(&row.upper)
}
