//! Dives and the feasibility pump: a relaxation of its own is led to a whole point.
//!
//! *Fractional diving* rounds the column that is nearest to a whole number, *guided diving* the one
//! that is nearest to its value in the best plan (Danna, Rothberg, Le Pape 2005, Mathematical
//! Programming 102), and solves again; where that leaves no point the other side is taken, once.
//! The *feasibility pump* goes to and fro between a whole point and the point of the relaxation that
//! is nearest to it in the columns at a bound (Fischetti, Glover, Lodi 2005); where it would turn in
//! a circle, the columns that are farthest off are turned, here a fixed number of them.

use lp::{Col, Limits, NewRow, Outcome, Progress as LpProgress, Simplex};
use model::{ColumnId, Row, nearest_f64};

use crate::branching::{Chooser, is_fractional};

/// Relaxations that one dive solves at most.
const MOST_SOLVES: u32 = 600;
/// Rounds of the pump at most.
const MOST_ROUNDS: u32 = 40;
/// Columns that the pump turns where it would go in a circle.
const TURNED: usize = 10;

/// How a whole point is looked for.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Rule {
    Fractional,
    Guided,
    Pump,
}

impl Rule {
    pub(crate) fn name(self) -> &'static str {
        match self {
            Self::Fractional => "fractional diving",
            Self::Guided => "guided diving",
            Self::Pump => "feasibility pump",
        }
    }
}

/// How far a dive came.
#[derive(Debug)]
pub(crate) enum Step {
    Working,
    /// It goes on from a relaxation of this objective.
    Bound(f64),
    Whole(Vec<f64>),
    Failed,
}

/// A dive under way.
#[derive(Debug)]
pub(crate) struct Dive {
    simplex: Simplex,
    rule: Rule,
    guide: Option<Vec<f64>>,
    /// The column that was rounded last, with its other side.
    last: Option<(ColumnId, f64, f64)>,
    /// The whole point that the pump is near to.
    near: Vec<f64>,
    solves: u32,
    started: bool,
    before: (u64, u64),
}

impl Dive {
    pub(crate) fn new(simplex: Simplex, rule: Rule, guide: Option<Vec<f64>>) -> Self {
        let stats = simplex.stats();
        let before = (stats.ticks, stats.iterations);
        let near = Vec::new();
        Self { simplex, rule, guide, last: None, near, solves: 0, started: false, before }
    }

    pub(crate) fn rule(&self) -> Rule {
        self.rule
    }

    /// Whether what is solved is a distance and not the objective.
    pub(crate) fn is_distance(&self) -> bool {
        self.rule == Rule::Pump
    }

    pub(crate) fn ticks(&self) -> u64 {
        self.simplex.stats().ticks - self.before.0
    }

    pub(crate) fn iterations(&self) -> u64 {
        self.simplex.stats().iterations - self.before.1
    }

    /// Takes in a row; false when the kernel refuses it.
    pub(crate) fn add(&mut self, row: &Row) -> bool {
        let side =
            |side: &Option<model::Number>, none: f64| side.as_ref().map_or(none, nearest_f64);
        let row = NewRow {
            entries: row.entries.iter().map(|(c, a)| (Col(c.0), nearest_f64(a))).collect(),
            lower: side(&row.lower, f64::NEG_INFINITY),
            upper: side(&row.upper, f64::INFINITY),
        };
        self.started = false;
        self.simplex.add_rows(&[row]).is_ok()
    }

    /// Works on for about `ticks`.
    pub(crate) fn advance(&mut self, chooser: &Chooser, ticks: u64) -> Step {
        if !self.started {
            self.started = true;
            self.solves += 1;
            self.simplex.start(Limits::default());
        }
        if self.simplex.advance(ticks) == LpProgress::Working {
            return Step::Working;
        }
        self.started = false;
        let most = if self.rule == Rule::Pump { MOST_ROUNDS } else { MOST_SOLVES };
        if self.solves > most {
            return Step::Failed;
        }
        let (x, objective) = match self.simplex.outcome() {
            Some(Outcome::Optimal(solution)) => (solution.x.clone(), solution.objective),
            Some(Outcome::Infeasible(_)) => return self.turn_back(),
            _ => return Step::Failed,
        };
        if chooser.fractional(&x) == 0 {
            return Step::Whole(x);
        }
        if self.rule == Rule::Pump {
            self.pump(chooser, &x);
            return Step::Working;
        }
        self.round(chooser, &x);
        Step::Bound(objective)
    }

    /// The last rounding left no point: its other side, once.
    fn turn_back(&mut self) -> Step {
        let Some((column, lower, upper)) = self.last.take().filter(|(_, l, u)| l <= u) else {
            return Step::Failed;
        };
        self.simplex.set_bounds(Col(column.0), lower, upper);
        Step::Working
    }

    /// Rounds one column.
    fn round(&mut self, chooser: &Chooser, x: &[f64]) {
        let aim = |column: ColumnId| {
            let value = x[column.index()];
            let guide = self.guide.as_ref().map(|guide| guide[column.index()]);
            (guide.unwrap_or_else(|| value.round()) - value).abs()
        };
        let mut best: Option<(f64, ColumnId)> = None;
        for &column in chooser.whole() {
            let away = aim(column);
            let nearer = best.is_none_or(|(least, _)| away < least);
            if is_fractional(x[column.index()]) && nearer {
                best = Some((away, column));
            }
        }
        let Some((_, column)) = best else { return };
        let value = x[column.index()];
        let (lower, upper) = self.simplex.bounds(Col(column.0));
        let up = match &self.guide {
            Some(guide) => guide[column.index()] > value,
            None => value.round() > value,
        };
        let (floor, ceiling) = (value.floor() + 0.0, value.ceil() + 0.0);
        let (new, other) = if up {
            ((ceiling, upper), (lower, floor))
        } else {
            ((lower, floor), (ceiling, upper))
        };
        self.last = Some((column, other.0, other.1));
        self.simplex.set_bounds(Col(column.0), new.0, new.1);
    }

    /// One round of the pump: the nearest whole point, and costs that lead to it.
    fn pump(&mut self, chooser: &Chooser, x: &[f64]) {
        let whole = chooser.whole();
        let rounded: Vec<f64> = whole.iter().map(|c| x[c.index()].round() + 0.0).collect();
        if rounded == self.near {
            self.turn(whole, x);
        } else {
            self.near = rounded;
        }
        for column in 0..x.len() {
            self.simplex.set_cost(Col(u32::try_from(column).unwrap_or(u32::MAX)), 0.0);
        }
        for (&column, &near) in whole.iter().zip(&self.near) {
            let (lower, upper) = self.simplex.bounds(Col(column.0));
            let cost = match near {
                near if near <= lower => 1.0,
                near if near >= upper => -1.0,
                _ => 0.0,
            };
            self.simplex.set_cost(Col(column.0), cost);
        }
    }

    /// Turns the columns that are farthest from the whole point.
    fn turn(&mut self, whole: &[ColumnId], x: &[f64]) {
        let away = |place: usize| x[whole[place].index()] - self.near[place];
        let mut places: Vec<usize> = (0..whole.len()).collect();
        places.sort_by(|&a, &b| away(b).abs().total_cmp(&away(a).abs()).then(a.cmp(&b)));
        let turned: Vec<(usize, f64)> = places
            .into_iter()
            .take(TURNED)
            .map(|place| (place, if away(place) < 0.0 { -1.0 } else { 1.0 }))
            .collect();
        for (place, step) in turned {
            let (lower, upper) = self.simplex.bounds(Col(whole[place].0));
            let moved = self.near[place] + step;
            let back = self.near[place] - step;
            let inside = |value: f64| value >= lower && value <= upper;
            self.near[place] = match (inside(moved), inside(back)) {
                (true, _) => moved,
                (false, true) => back,
                (false, false) => self.near[place],
            };
        }
    }
}
