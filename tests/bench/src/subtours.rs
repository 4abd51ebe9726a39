//! Subtours on demand to the root bound: degree rows first, then in rounds all violated subtour rows
//! that the separator finds, at once; the time of the linear programs alone.
//!
//! Each has a point of its own, from which the same separator draws its rows, so that each has rounds
//! of its own; both end at the same bound. They are drawn once, off the clock: the same solver comes by
//! the same points again. HiGHS takes rows one at a time through this interface, also off the clock;
//! ours takes them on it.
//!
//! Source: Dantzig, Fulkerson, Johnson 1954.

use crate::arguments::Arguments;
use crate::classes::{Comparison, Measured, line, self_check};
use crate::clock;
use crate::highs_peer;
use crate::random::Random;
use crate::sampling::{interleaved, solves};
use crate::shadow::{Row, Shadow};
use crate::solvers::problem;
use crate::statistics::median;
use lp::{Col, Limits, NewRow, Outcome, Simplex};
use model::{
    ColumnSpec, FamilyState, LabelId, ModelBuilder, Number, Relation, Scope, Sense,
    SubsetCondition, SubsetFamily, SubsetTerm, nearest_f64,
};
use separate::{Progress, Separator};

/// Stops of a round trip.
const SIZES: [usize; 5] = [50, 75, 100, 150, 200];

/// The ratio to reach.
const GOAL: f64 = 1.0;

/// Ours, ours again, HiGHS.
const WHO: usize = 3;

/// The rows of one round.
type Round = Vec<Row>;

/// A run to the root bound.
struct Run {
    seconds: f64,
    iterations: u64,
    objective: f64,
}

/// Measures and prints.
pub(crate) fn run(arguments: &Arguments) {
    println!(
        "Subtours on demand to the root bound: CPU milliseconds of the linear programs (medians)"
    );
    println!(
        "{:<20}{:>9} {:>9}{:>9}{:>9} {:>7}  {:>8}{:>8}  {:>7}{:>7}  {:>6}{:>6}",
        "problem",
        "columns",
        "ours",
        "again",
        "HiGHS",
        "o/H",
        "it ours",
        "HiGHS",
        "rounds",
        "HiGHS",
        "rows",
        "HiGHS"
    );
    let mut random = Random::new(arguments.order_seed());
    let mut measured = Vec::new();
    for seed in arguments.seeds() {
        for stops in SIZES {
            let name = format!("subtours{stops} #{seed}");
            if arguments.wants(&name) {
                measured.push(one(name, (stops, seed), arguments, &mut random));
            }
        }
    }
    println!();
    let all: Vec<&Measured> = measured.iter().collect();
    if !all.is_empty() {
        let comparison = Comparison { title: "ours/HiGHS", who: (0, 2), goal: Some(GOAL) };
        line("50 to 200 stops", &all, comparison);
        self_check("50 to 200 stops", &all, (0, 1));
    }
    println!();
}

fn one(
    name: String,
    (stops, seed): (usize, u64),
    arguments: &Arguments,
    random: &mut Random,
) -> Measured {
    let (lp, edges) = degrees(stops, seed);
    let mut separator = separator(stops, &edges);
    let (mut own, mut theirs) = (Vec::new(), Vec::new());
    let mine = ours(&lp, |_, x| drawn(&mut separator, x, &mut own));
    let other = highs(&lp, |_, x| drawn(&mut separator, x, &mut theirs));
    assert!(
        (mine.objective - other.objective).abs() <= 1e-6 * (1.0 + other.objective.abs()),
        "{name}: {}, HiGHS {}",
        mine.objective,
        other.objective
    );
    let counts = [mine.seconds, mine.seconds, other.seconds].map(solves);
    let again = |round: usize, rounds: &[Round]| rounds.get(round).cloned().unwrap_or_default();
    let samples = interleaved(WHO, arguments.effort, random, |who| {
        let run = || match who {
            0 | 1 => ours(&lp, |round, _| again(round, &own)),
            _ => highs(&lp, |round, _| again(round, &theirs)),
        };
        let seconds: f64 = (0..counts[who]).map(|_| run().seconds).sum();
        (seconds / counts[who] as f64, seconds)
    });
    let ms: Vec<f64> = samples.iter().map(|samples| median(samples) * 1e3).collect();
    let rows = |rounds: &[Round]| rounds.iter().map(Vec::len).sum::<usize>();
    println!(
        "{name:<20}{:>9} {:>9.3}{:>9.3}{:>9.3} {:>7.2}  {:>8}{:>8}  {:>7}{:>7}  {:>6}{:>6}",
        lp.cost.len(),
        ms[0],
        ms[1],
        ms[2],
        ms[0] / ms[2],
        mine.iterations,
        other.iterations,
        own.len(),
        theirs.len(),
        rows(&own),
        rows(&theirs)
    );
    Measured { name, rows: lp.rows.len(), samples }
}

/// An edge a pair of stops at its rounded distance, two of them at each stop.
fn degrees(stops: usize, seed: u64) -> (Shadow, Vec<(usize, usize)>) {
    let mut random = Random::new(seed);
    let places: Vec<(f64, f64)> =
        (0..stops).map(|_| (random.unit() * 1000.0, random.unit() * 1000.0)).collect();
    let mut lp = Shadow::default();
    let edges: Vec<(usize, usize)> =
        (0..stops).flat_map(|i| (i + 1..stops).map(move |j| (i, j))).collect();
    for &(i, j) in &edges {
        let (dx, dy) = (places[i].0 - places[j].0, places[i].1 - places[j].1);
        lp.column((dx * dx + dy * dy).sqrt().round(), 0.0, 1.0);
    }
    for stop in 0..stops {
        let here = edges.iter().enumerate().filter(|(_, (i, j))| *i == stop || *j == stop);
        lp.row(here.map(|(edge, _)| (edge, 1.0)).collect(), 2.0, 2.0);
    }
    (lp, edges)
}

/// The separator of Σ x over the edges that leave S ≥ 2, two stops at least on either side.
fn separator(stops: usize, edges: &[(usize, usize)]) -> Separator {
    let mut builder = ModelBuilder::new("measured", Sense::Minimise);
    let ground: Vec<LabelId> = (0..stops).map(|i| builder.label(&i.to_string())).collect();
    builder.variable("x", true);
    let spec = ColumnSpec {
        lower: Some(Number::ZERO),
        upper: Some(Number::ONE),
        cost: Number::ZERO,
        integer: true,
    };
    let mut terms = Vec::new();
    for &(i, j) in edges {
        let column = builder.column(&[ground[i], ground[j]], &spec).unwrap();
        let scope = Scope::Crossing(ground[i], ground[j]);
        terms.push(SubsetTerm { column, coefficient: Number::ONE, scope });
    }
    let family = builder.family("subtour", FamilyState::OnDemand, false);
    let size = SubsetCondition::Size { at_least: 2, at_most: stops as u32 - 2 };
    let subsets = SubsetFamily {
        family,
        tuple: Vec::new(),
        ground,
        conditions: vec![size],
        terms,
        weights: vec![Number::ZERO; stops],
        constant: Number::from(-2),
        rounded: None,
        relation: Relation::AtLeast,
    };
    let id = builder.subset_family(subsets).unwrap();
    Separator::new(&builder.build(), id)
}

/// The rows of the next round at a point, noted down unless there are none.
fn drawn(separator: &mut Separator, x: &[f64], rounds: &mut Vec<Round>) -> Round {
    separator.start(x);
    while separator.advance(u64::MAX) == Progress::Working {}
    let side = |side: Option<&Number>, none: f64| side.map_or(none, nearest_f64);
    let members = separator.take().into_iter().map(|member| {
        let entries = member.row.entries.iter().map(|(c, a)| (c.index(), nearest_f64(a))).collect();
        let (lower, upper) = (member.row.lower.as_ref(), member.row.upper.as_ref());
        (entries, side(lower, f64::NEG_INFINITY), side(upper, f64::INFINITY))
    });
    let round: Round = members.collect();
    if !round.is_empty() {
        rounds.push(round.clone());
    }
    round
}

/// Rows of a round, given its number and the point, until there are none.
fn ours(lp: &Shadow, mut next: impl FnMut(usize, &[f64]) -> Round) -> Run {
    let ready = problem(lp);
    let (mut simplex, mut seconds) = clock::timed(|| {
        let mut simplex = Simplex::new(ready);
        simplex.solve(Limits::default());
        simplex
    });
    for number in 0.. {
        let Some(Outcome::Optimal(solution)) = simplex.outcome() else {
            panic!("{:?}", simplex.outcome())
        };
        let round = next(number, &solution.x);
        if round.is_empty() {
            let (iterations, objective) = (simplex.stats().iterations, solution.objective);
            return Run { seconds, iterations, objective };
        }
        let rows: Vec<NewRow> = round.into_iter().map(new_row).collect();
        let ((), more) = clock::timed(|| {
            simplex.add_rows(&rows).unwrap();
            simplex.solve(Limits::default());
        });
        seconds += more;
    }
    unreachable!("a round has a number")
}

fn new_row((entries, lower, upper): Row) -> NewRow {
    let entries = entries.into_iter().map(|(j, value)| (Col(j as u32), value)).collect();
    NewRow { entries, lower, upper }
}

/// As [`ours`].
fn highs(lp: &Shadow, mut next: impl FnMut(usize, &[f64]) -> Round) -> Run {
    let (model, columns) = highs_peer::model(lp);
    let (mut solved, mut seconds) = clock::timed(|| model.solve());
    let mut iterations = solved.simplex_iteration_count().unsigned_abs();
    for number in 0.. {
        let objective = solved.objective_value();
        let round = next(number, solved.get_solution().columns());
        if round.is_empty() {
            return Run { seconds, iterations, objective };
        }
        let mut model: highs::Model = solved.into();
        for (entries, lower, upper) in round {
            let entries = entries.into_iter().map(|(j, value)| (columns[j], value));
            model.add_row(lower..=upper, entries);
        }
        let (after, more) = clock::timed(|| model.solve());
        (solved, seconds) = (after, seconds + more);
        iterations += solved.simplex_iteration_count().unsigned_abs();
    }
    unreachable!("a round has a number")
}
