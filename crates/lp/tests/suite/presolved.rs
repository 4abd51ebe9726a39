//! Presolve and the way back: the same value, a restored solution that is optimal by its own
//! numbers, and a basis from which nothing is left to do.

use crate::families::{INFINITY, KINDS, generate};
use crate::instances::{
    facilities, lot_sizing, lot_sizing_by_use, multi_commodity, one_machine, packing,
    position_labels, single_commodity,
};
use crate::shadow::{Shadow, Verdict};
use hullward_lp::{
    Limits, Outcome, Presolved, PresolvedSolve, Progress, Restored, Simplex, Solution, presolve,
    solve_presolved,
};

/// What was seen over many problems.
#[derive(Debug, Default)]
struct Seen {
    optimal: u32,
    shrunk: u32,
    no_optimum: u32,
    pivots: u64,
}

/// Primal feasible, dual feasible, complementary: all by the numbers that were restored.
fn check_restored(shadow: &Shadow, restored: &Restored, name: &str) {
    let activity: Vec<f64> = shadow
        .rows
        .iter()
        .map(|row| row.0.iter().map(|&(j, value)| value * restored.x[j]).sum())
        .collect();
    let objective = shadow.cost.iter().zip(&restored.x).map(|(c, x)| c * x).sum();
    let solution = Solution {
        objective,
        x: restored.x.clone(),
        activity,
        duals: restored.duals.clone(),
        reduced_costs: restored.reduced_costs.clone(),
    };
    shadow.verdict(&Outcome::Optimal(solution), name);
}

fn check(shadow: &Shadow, name: &str, seen: &mut Seen) {
    let problem = shadow.problem();
    let whole = shadow.verdict(shadow.simplex().solve(Limits::default()), name);
    match presolve(&problem) {
        Presolved::Reduced { problem: reduced, postsolve } => {
            let mut small = Simplex::new(reduced);
            if let Outcome::Optimal(solution) = small.solve(Limits::default()).clone() {
                let restored = postsolve.restore(&solution, &small.basis());
                check_restored(shadow, &restored, name);
                let mut again = shadow.simplex();
                let repair = again.load_basis(&restored.basis());
                assert_eq!((repair.dropped, repair.inserted), (0, 0), "{name}: no basis");
                let found = shadow.verdict(again.solve(Limits::default()), name);
                assert!(found.agrees(whole, 1e-8), "{name}: {found:?}, whole {whole:?}");
                assert_eq!(again.stats().iterations, 0, "{name}: the basis was not optimal");
                seen.optimal += 1;
                seen.shrunk += u32::from(small.row_count() < shadow.rows.len() as u32);
                seen.pivots += small.stats().iterations;
            } else {
                assert!(!matches!(whole, Verdict::Optimal(_)), "{name}: {:?}", small.outcome());
                seen.no_optimum += 1;
            }
        }
        Presolved::Infeasible(ray) => {
            assert_eq!(whole, Verdict::Infeasible, "{name}");
            if let Some(ray) = ray {
                shadow.verdict(&Outcome::Infeasible(ray), name);
            }
            seen.no_optimum += 1;
        }
        Presolved::NoOptimum => {
            assert!(!matches!(whole, Verdict::Optimal(_)), "{name}: {whole:?}");
            seen.no_optimum += 1;
        }
    }
    let solved = solve_presolved(&problem);
    let found = shadow.verdict(solved.simplex.outcome().unwrap(), name);
    assert!(found.agrees(whole, 1e-8), "{name}: by way of presolve {found:?}, whole {whole:?}");
}

#[test]
fn random_problems_of_every_kind() {
    let mut seen = Seen::default();
    for kind in KINDS {
        for seed in 0..250 {
            check(&generate(kind, 40_000 + seed), &format!("{kind} {seed}"), &mut seen);
        }
    }
    assert!(seen.optimal > 800 && seen.shrunk > 400 && seen.no_optimum > 100, "{seen:?}");
}

/// Rows and columns that presolve is for, strewn over random problems: multiples of rows and
/// columns, single entries, slacks, columns that nobody holds, equations with two columns.
#[test]
fn random_problems_with_more_to_reduce() {
    let mut seen = Seen::default();
    for kind in KINDS {
        for seed in 0..250 {
            let mut shadow = generate(kind, 60_000 + seed);
            embellish(&mut shadow, seed);
            check(&shadow, &format!("{kind} {seed}, embellished"), &mut seen);
        }
    }
    assert!(seen.optimal > 600 && seen.shrunk > 600, "{seen:?}");
}

fn embellish(shadow: &mut Shadow, seed: u64) {
    let mut random = crate::random::Random::new(seed);
    for _ in 0..random.integer(1, 3) {
        let row = shadow.rows[random.integer(0, shadow.rows.len() as i64 - 1) as usize].clone();
        let factor = if random.one_in(2) { 2.0 } else { -0.5 };
        let (a, b) = (row.1 * factor, row.2 * factor);
        let (lower, upper) = if factor > 0.0 { (a, b) } else { (b, a) };
        let loose = random.whole(0, 2);
        let entries = row.0.iter().map(|&(j, value)| (j, value * factor)).collect();
        shadow.row(entries, lower - loose, upper + random.whole(0, 2));
    }
    for _ in 0..random.integer(1, 4) {
        let twin = random.integer(0, shadow.cost.len() as i64 - 1) as usize;
        let factor = if random.one_in(2) { 1.0 } else { -2.0 };
        let cost = factor * shadow.cost[twin] + if random.one_in(2) { 0.0 } else { 1.0 };
        let low = random.whole(-2, 1);
        let column = shadow.column(cost, low, low + random.whole(1, 4));
        for row in &mut shadow.rows {
            let entry: f64 = row.0.iter().filter(|e| e.0 == twin).map(|e| e.1).sum();
            if entry != 0.0 {
                row.0.push((column, factor * entry));
            }
        }
    }
    for k in 0..random.integer(1, 4) as usize {
        let at = (7 * k + seed as usize) % shadow.rows.len();
        let bounds = if random.one_in(2) { (0.0, INFINITY) } else { (-1.0, 3.0) };
        let slack = shadow.column(random.whole(0, 1), bounds.0, bounds.1);
        shadow.rows[at].0.push((slack, random.whole(1, 3)));
        let single = random.integer(0, shadow.cost.len() as i64 - 1) as usize;
        shadow.row(vec![(single, 2.0)], random.whole(-9, -4), random.whole(6, 19));
    }
    for _ in 0..random.integer(1, 3) {
        tie(shadow, &mut random);
    }
}

/// A new column in a few rows, tied to an old one by an equation.
fn tie(shadow: &mut Shadow, random: &mut crate::random::Random) {
    let old = random.integer(0, shadow.cost.len() as i64 - 1) as usize;
    let (low, width) = (random.whole(-9, 2), random.whole(1, 14));
    let bounds = match random.integer(0, 3) {
        0 => (-INFINITY, INFINITY),
        1 => (low, INFINITY),
        _ => (low, low + width),
    };
    let new = shadow.column(random.whole(-3, 5), bounds.0, bounds.1);
    for _ in 0..random.integer(0, 3) {
        let at = random.integer(0, shadow.rows.len() as i64 - 1) as usize;
        if shadow.rows[at].0.iter().all(|entry| entry.0 != new) {
            shadow.rows[at].0.push((new, random.whole(1, 4)));
        }
    }
    let factor = if random.one_in(2) { 2.0 } else { -1.0 };
    let side = random.whole(-2, 3);
    shadow.row(vec![(new, 1.0), (old, factor)], side, side);
}

/// x + 2y = 10 with 0 ≤ x ≤ 4 says 3 ≤ y ≤ 5: in turn y is held by x's upper bound, by its own
/// and by none.
#[test]
fn an_equation_with_two_columns_leaves_with_one() {
    for (cost, upper, expected) in
        [((1.0, 3.0), 9.0, 13.0), ((3.0, 1.0), 4.5, 7.5), ((0.0, -1.0), 9.0, -5.0)]
    {
        let mut shadow = Shadow::default();
        let x = shadow.column(cost.0, 0.0, 4.0);
        let y = shadow.column(cost.1, 0.0, upper);
        let z = shadow.column(-0.25, 0.0, 6.0);
        shadow.row(vec![(x, 1.0), (y, 2.0)], 10.0, 10.0);
        shadow.row(vec![(x, 1.0), (y, 1.0), (z, 1.0)], -INFINITY, 12.0);
        shadow.row(vec![(x, 1.0), (y, -1.0), (z, 2.0)], -3.0, 11.0);
        let Presolved::Reduced { postsolve, .. } = presolve(&shadow.problem()) else { panic!() };
        assert!(postsolve.reduction_count() > 0);
        check(&shadow, &format!("costs {cost:?}"), &mut Seen::default());
        let solved = solve_presolved(&shadow.problem());
        let Some(Outcome::Optimal(solution)) = solved.simplex.outcome() else { panic!() };
        let of_z = -0.25 * solution.x[2];
        assert!((solution.objective - of_z - expected).abs() < 1e-9, "{cost:?}: {solution:?}");
    }
}

/// Stopped after every number of steps, and in every slice size: the same bytes.
#[test]
fn slices_change_no_byte() {
    let mut most = 0;
    for kind in KINDS {
        for seed in [3, 4] {
            let mut shadow = generate(kind, seed);
            embellish(&mut shadow, seed);
            let bytes = |solve: &PresolvedSolve| {
                let simplex = &solve.simplex;
                let sizes = (solve.rows, solve.columns, solve.reduced, simplex.stats());
                format!("{:?} {:?} {sizes:?}", simplex.outcome(), simplex.basis())
            };
            let expected = bytes(&solve_presolved(&shadow.problem()));
            let mut steps = PresolvedSolve::new(shadow.problem());
            let mut count = 1;
            while steps.advance(0) == Progress::Working {
                let mut resumed = steps.clone();
                while resumed.advance(u64::MAX) == Progress::Working {}
                assert_eq!(bytes(&resumed), expected, "{kind} {seed}: stopped at step {count}");
                count += 1;
            }
            assert_eq!(bytes(&steps), expected, "{kind} {seed}, step by step");
            most = if count > most { count } else { most };
            for ticks in 1..80 {
                let mut sliced = PresolvedSolve::new(shadow.problem());
                while sliced.advance(ticks) == Progress::Working {}
                assert_eq!(bytes(&sliced), expected, "{kind} {seed}, slices of {ticks}");
            }
        }
    }
    assert!(most > 30, "{most} steps at most");
}

#[test]
fn known_formulations() {
    let mut seen = Seen::default();
    check(&position_labels(12, 2), "position labels", &mut seen);
    check(&single_commodity(10, 2), "one commodity", &mut seen);
    check(&multi_commodity(7, 2), "a commodity a stop", &mut seen);
    check(&facilities(10, 20, true, 2), "facilities, strong", &mut seen);
    check(&facilities(10, 20, false, 2), "facilities, weak", &mut seen);
    check(&lot_sizing(20, 2), "lot sizing", &mut seen);
    check(&lot_sizing_by_use(12, 2), "lot sizing by use", &mut seen);
    check(&packing(10, 6, 2), "packing", &mut seen);
    check(&one_machine(8, 2), "one machine", &mut seen);
    assert_eq!(seen.optimal, 9, "{seen:?}");
}

/// A chain in which every reduction enables the next one, down to nothing.
#[test]
fn a_chain_falls_together() {
    let mut shadow = Shadow::default();
    let x = shadow.column(1.0, 0.0, 10.0);
    let y = shadow.column(2.0, 0.0, INFINITY);
    let z = shadow.column(0.0, -INFINITY, INFINITY);
    shadow.row(vec![(x, 2.0)], 3.0, INFINITY);
    shadow.row(vec![(x, 1.0), (y, 1.0)], 4.0, 4.0);
    shadow.row(vec![(y, 1.0), (z, 1.0)], 0.0, 7.0);
    let Presolved::Reduced { problem, postsolve } = presolve(&shadow.problem()) else { panic!() };
    assert_eq!((problem.row_count(), problem.column_count()), (0, 0));
    assert!(postsolve.reduction_count() >= 4);
    let solved = solve_presolved(&shadow.problem());
    assert_eq!((solved.rows, solved.simplex.stats().iterations), (0, 0));
    let found = shadow.verdict(solved.simplex.outcome().unwrap(), "chain");
    assert_eq!(found, Verdict::Optimal(4.0));
}

#[test]
fn proofs_of_infeasibility_are_of_the_problem_as_given() {
    let mut shadow = Shadow::default();
    let x = shadow.column(1.0, 0.0, 1.0);
    let y = shadow.column(1.0, 0.0, 2.0);
    shadow.row(vec![(x, 1.0), (y, 1.0)], 4.0, INFINITY);
    let Presolved::Infeasible(Some(ray)) = presolve(&shadow.problem()) else { panic!() };
    assert_eq!(ray.multipliers, vec![1.0]);
    shadow.verdict(&Outcome::Infeasible(ray), "one row");
}
