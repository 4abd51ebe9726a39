//! Children: one bound of a solved relaxation changed, solved again from the basis that is kept.
//!
//! Both begin with the same basis of the parent, since another optimum may need no work for a child,
//! and keep their factors and basis. After each child the bound goes back and the parent is solved
//! again off the clock.

use crate::arguments::Arguments;
use crate::classes::{Comparison, Measured, line, self_check};
use crate::clock;
use crate::highs_peer;
use crate::problems::Named;
use crate::random::Random;
use crate::sampling::interleaved;
use crate::solvers::problem;
use crate::statistics::median;
use lp::{Basis, Col, Limits, Outcome, Simplex};

/// A bound change: column, lower, upper.
type Change = (usize, f64, f64);

/// Columns branched on.
const COLUMNS: usize = 6;

/// Least CPU seconds of the children of a sample.
const LOOP: f64 = 0.05;

/// Most rounds through the changes in a sample.
const MOST_ROUNDS: usize = 200;

/// Measures and prints.
pub(crate) fn run(arguments: &Arguments) {
    println!("Children after one bound change, basis kept: CPU milliseconds a child (medians)");
    println!(
        "{:<24}{:>7}{:>9} {:>9}{:>9}{:>9} {:>7}  {:>8}{:>8}",
        "problem", "rows", "children", "ours", "again", "HiGHS", "o/H", "it ours", "HiGHS"
    );
    let mut random = Random::new(arguments.order_seed());
    let measured: Vec<Measured> =
        arguments.problems().iter().map(|p| one(p, arguments, &mut random)).collect();
    println!();
    let classes = [("under 4,000 rows", 0, 4_000, 0.5), ("larger", 4_000, usize::MAX, 1.0)];
    for (class, least, below, goal) in classes {
        let here: Vec<&Measured> =
            measured.iter().filter(|m| (least..below).contains(&m.rows)).collect();
        if !here.is_empty() {
            let comparison = Comparison { title: "ours/HiGHS", who: (0, 2), goal: Some(goal) };
            line(class, &here, comparison);
            self_check(class, &here, (0, 1));
        }
    }
    println!();
}

fn one(named: &Named, arguments: &Arguments, random: &mut Random) -> Measured {
    let mut ours = Simplex::new(problem(&named.lp));
    let changes = changes(named, &mut ours);
    let mut again = ours.clone();
    let mut highs = Highs::new(named, &ours.basis());
    let rounds = [
        rounds(ours_through(&mut ours, named, &changes).0, changes.len()),
        rounds(ours_through(&mut again, named, &changes).0, changes.len()),
        rounds(highs.through(named, &changes).0, changes.len()),
    ];
    let mut iterations = [0.0; 3];
    let samples = interleaved(3, arguments.effort, random, |who| {
        let (mut seconds, mut pivots) = (0.0, 0.0);
        let (begun, times) = (clock::now(), rounds[who]);
        for _ in 0..times {
            let (time, count) = match who {
                0 => ours_through(&mut ours, named, &changes),
                1 => ours_through(&mut again, named, &changes),
                _ => highs.through(named, &changes),
            };
            seconds += time;
            pivots += count;
        }
        iterations[who] = pivots / times as f64;
        (seconds / times as f64, clock::now() - begun)
    });
    let ms: Vec<f64> = samples.iter().map(|samples| median(samples) * 1e3).collect();
    println!(
        "{:<24}{:>7}{:>9} {:>9.4}{:>9.4}{:>9.4} {:>7.2}  {:>8.1}{:>8.1}",
        named.name,
        named.lp.rows.len(),
        changes.len(),
        ms[0],
        ms[1],
        ms[2],
        ms[0] / ms[2],
        iterations[0],
        iterations[2]
    );
    Measured { name: named.name.clone(), rows: named.lp.rows.len(), samples }
}

fn rounds(seconds: f64, changes: usize) -> usize {
    let times = (LOOP / (seconds * changes as f64)).ceil();
    if times > MOST_ROUNDS as f64 { MOST_ROUNDS } else { times as usize }
}

/// Both children of the first fractional columns; where there are too few, columns at a whole value
/// above their lower bound are sent to it.
fn changes(named: &Named, simplex: &mut Simplex) -> Vec<Change> {
    let Outcome::Optimal(root) = simplex.solve(Limits::default()).clone() else {
        panic!("{}: no optimum", named.name)
    };
    let (mut fractional, mut whole) = (Vec::new(), Vec::new());
    for (j, &x) in root.x.iter().enumerate().take(named.whole) {
        let (lower, upper) = (named.lp.lower[j], named.lp.upper[j]);
        if (x - x.round()).abs() > 1e-6 {
            fractional.extend([(j, lower, x.floor()), (j, x.ceil(), upper)]);
        } else if x.round() > lower {
            whole.push((j, lower, lower));
        }
    }
    let mut changes: Vec<Change> = fractional.into_iter().take(2 * COLUMNS).collect();
    let lacking = COLUMNS - changes.len() / 2;
    changes.extend(whole.into_iter().take(lacking));
    changes
}

/// Each child once: CPU seconds and iterations a child.
fn ours_through(simplex: &mut Simplex, named: &Named, changes: &[Change]) -> (f64, f64) {
    let (mut seconds, mut iterations) = (0.0, 0);
    for &(column, lower, upper) in changes {
        let before = simplex.stats().iterations;
        let begun = clock::now();
        simplex.set_bounds(Col(column as u32), lower, upper);
        simplex.solve(Limits::default());
        seconds += clock::now() - begun;
        iterations += simplex.stats().iterations - before;
        simplex.set_bounds(Col(column as u32), named.lp.lower[column], named.lp.upper[column]);
        simplex.solve(Limits::default());
    }
    (seconds / changes.len() as f64, iterations as f64 / changes.len() as f64)
}

/// HiGHS with a solved parent.
struct Highs {
    model: Option<highs::Model>,
    columns: Vec<highs::Col>,
}

impl Highs {
    fn new(named: &Named, basis: &Basis) -> Self {
        let (model, columns) = highs_peer::model(&named.lp);
        Self { model: Some(highs_peer::solved_from(model, basis)), columns }
    }

    /// As [`ours_through`].
    fn through(&mut self, named: &Named, changes: &[Change]) -> (f64, f64) {
        let (mut seconds, mut iterations) = (0.0, 0.0);
        for &(column, lower, upper) in changes {
            let mut model = self.model.take().unwrap();
            let begun = clock::now();
            model.change_column_bounds(self.columns[column], lower..=upper);
            let solved = model.solve();
            seconds += clock::now() - begun;
            iterations += solved.simplex_iteration_count() as f64;
            let mut model: highs::Model = solved.into();
            let (lower, upper) = (named.lp.lower[column], named.lp.upper[column]);
            model.change_column_bounds(self.columns[column], lower..=upper);
            self.model = Some(model.solve().into());
        }
        (seconds / changes.len() as f64, iterations / changes.len() as f64)
    }
}
