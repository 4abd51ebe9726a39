//! Five thousand seeded random linear programs of ten kinds: our kernel against HiGHS and microlp,
//! and its certificate of each, agreed or not, checked in exact arithmetic.
//!
//! `HULLWARD_RANDOM=30000` runs as many instead, from seeds that the short run does not use;
//! `HULLWARD_SEEDS=7000000` beside it begins elsewhere.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]
#![allow(clippy::print_stderr, reason = "a check says what it has seen")]

use hullward_tests_reference::agree;
use hullward_tests_reference::independent::{Verdict, highs, microlp};
use hullward_tests_reference::kernel::problem;
use hullward_tests_reference::random_lp::{KINDS, random_lp};
use lp::{Limits, Outcome, Simplex};
use model::{Model, Number, RowId, nearest_f64};
use proof::{Budget, Certifier, ExactRows, Point, Progress, Wish, bounds_of};
use tree::standings;

/// How far two values may be apart, relative to 1 + their size.
const AGREE: f64 = 1e-7;

fn verdict(outcome: &Outcome) -> Option<Verdict> {
    match outcome {
        Outcome::Optimal(solution) => Some(Verdict::Optimal(solution.objective)),
        Outcome::Infeasible(_) => Some(Verdict::Infeasible),
        Outcome::Unbounded { .. } => Some(Verdict::Unbounded),
        Outcome::Stopped { .. } => None,
    }
}

fn same(ours: Verdict, other: Verdict) -> bool {
    match (ours, other) {
        (Verdict::Optimal(a), Verdict::Optimal(b)) => agree(a, b, AGREE),
        (a, b) => a == b,
    }
}

/// Whether exact arithmetic bears out what our kernel says.
fn is_proved(model: &Model, simplex: &Simplex) -> bool {
    let rows = ExactRows::new(model);
    let Some(outcome) = simplex.outcome() else { return false };
    match outcome {
        Outcome::Optimal(solution) => {
            let point = Point::new(model, &solution.x);
            let near = |bound: Option<Number>| {
                bound.is_some_and(|bound| {
                    agree(nearest_f64(&bound), nearest_f64(&point.objective), 1e-8)
                })
            };
            nearest_f64(&point.worst()) <= 1e-7 && near(certified(&rows, model, simplex))
        }
        Outcome::Infeasible(ray) => proof::infeasible(&rows, &bounds_of(model), &ray.multipliers),
        Outcome::Unbounded { point, ray } => {
            nearest_f64(&Point::new(model, point).worst()) <= 1e-7 && recedes(model, ray)
        }
        Outcome::Stopped { .. } => false,
    }
}

/// The exact optimum by the final basis: multipliers and a point of the same value, within all rows
/// and bounds.
fn certified(rows: &ExactRows, model: &Model, simplex: &Simplex) -> Option<Number> {
    let (basis, wish) = (standings(&simplex.basis()), Wish::Optimum(None));
    let mut certifier = Certifier::new(bounds_of(model), basis, wish, Budget::default());
    while certifier.advance(rows, 1_000_000) == Progress::Working {}
    certifier.bound(rows).filter(|_| certifier.is_exact())
}

/// Whether a direction lowers the objective and keeps every row and bound, but for rounding of its
/// own numbers, which are exact here.
fn recedes(model: &Model, ray: &[f64]) -> bool {
    let ray: Vec<Number> = ray.iter().map(|&v| Number::try_from(v).unwrap()).collect();
    let keeps = |value: f64, lower: bool, upper: bool| {
        (value >= -1e-9 || !lower) && (value <= 1e-9 || !upper)
    };
    let columns = model.columns().iter().zip(&ray).all(|(column, value)| {
        keeps(nearest_f64(value), column.lower.is_some(), column.upper.is_some())
    });
    let rows = (0..model.row_count()).map(RowId::from_index).map(|row| model.row(row)).all(|row| {
        let zero = Number::ZERO;
        let value = row.entries.iter().fold(zero, |sum, (c, a)| sum + a * &ray[c.index()]);
        keeps(nearest_f64(&value), row.lower.is_some(), row.upper.is_some())
    });
    let costs = model.columns().iter().map(|column| model.numbers().exact(column.cost));
    let slope = costs.zip(&ray).fold(Number::ZERO, |sum, (c, r)| sum + c * r);
    columns && rows && slope < Number::ZERO
}

/// What was seen of a kind.
#[derive(Debug, Default)]
struct Seen {
    optimal: u32,
    infeasible: u32,
    unbounded: u32,
    highs_differs: u32,
    microlp_differs: u32,
    failures: Vec<String>,
}

impl Seen {
    fn look_at(&mut self, kind: usize, seed: u64) {
        let model = random_lp(kind, seed);
        let mut simplex = Simplex::new(problem(&model));
        let outcome = simplex.solve(Limits::default()).clone();
        let name = format!("{} (kind {kind}, seed {seed})", KINDS[kind]);
        let Some(ours) = verdict(&outcome) else {
            self.failures.push(format!("{name}: {outcome:?}"));
            return;
        };
        match ours {
            Verdict::Optimal(_) => self.optimal += 1,
            Verdict::Infeasible => self.infeasible += 1,
            _ => self.unbounded += 1,
        }
        let others = [highs(&model, &[], false), microlp(&model, &[])];
        self.highs_differs += u32::from(!same(ours, others[0]));
        self.microlp_differs += u32::from(!same(ours, others[1]));
        if !is_proved(&model, &simplex) {
            self.failures.push(format!("{name}: {ours:?}, HiGHS and microlp {others:?}"));
        }
    }
}

/// How many, and from which seed.
fn extent() -> (u64, u64) {
    let asked = |name: &str| std::env::var(name).ok().and_then(|text| text.parse().ok());
    let first = asked("HULLWARD_SEEDS").unwrap_or(1_000_000);
    asked("HULLWARD_RANDOM").map_or((5_000, 0), |count| (count, first))
}

#[test]
fn random_problems_agree_with_both_or_are_proved() {
    let (count, first) = extent();
    let mut all = Vec::new();
    for (kind, name) in KINDS.iter().enumerate() {
        let mut seen = Seen::default();
        for seed in first..first + count / KINDS.len() as u64 {
            seen.look_at(kind, seed);
        }
        eprintln!(
            "{name}: {} optimal, {} infeasible, {} unbounded; HiGHS differs in {}, microlp in {}; {} not proved",
            seen.optimal,
            seen.infeasible,
            seen.unbounded,
            seen.highs_differs,
            seen.microlp_differs,
            seen.failures.len()
        );
        all.push(seen);
    }
    let failures: Vec<&String> = all.iter().flat_map(|seen| &seen.failures).collect();
    assert!(failures.is_empty(), "{failures:#?}");
    let total = |pick: fn(&Seen) -> u32| all.iter().map(pick).sum::<u32>();
    let counts = [total(|s| s.optimal), total(|s| s.infeasible), total(|s| s.unbounded)];
    assert!(counts.iter().all(|&n| u64::from(n) > count / 50), "{counts:?}");
}
