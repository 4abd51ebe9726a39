//! Forty jobs that are due (OR-Library, `wt40`; Crauwels, Potts & Van Wassenhove, INFORMS Journal on Computing 10
//! (1998) 341-350): the published optima, recalled from memory, are reached by a plan that a search in this file
//! finds, and by none that is better in so many tries; every row of the shipped rivals holds for that plan in exact
//! arithmetic, and their objective is the published number. That nothing is better is beyond a proof here.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use std::rc::Rc;

use hullward_tests_reference::round_trip::rival;
use hullward_tests_reference::theory::{labels, table};
use hullward_tests_reference::{agree, open_data};
use instance::Instance;
use model::Model;
use proof::violations;

/// The optima of the first five.
const OPTIMA: [f64; 5] = [913.0, 1225.0, 537.0, 2094.0, 990.0];

/// How often a plan is shuffled and improved.
const TRIES: u32 = 600;

/// Time, due date and weight of each job.
struct Jobs {
    names: Vec<String>,
    jobs: Vec<[f64; 3]>,
}

impl Jobs {
    fn of(on: &Instance) -> Self {
        let names = labels(on, "J");
        let columns = ["p", "d", "w"].map(|name| table(on, name));
        let job = |name: &String| columns.each_ref().map(|column| column[&vec![name.clone()]]);
        let jobs = names.iter().map(job).collect();
        Self { names, jobs }
    }

    /// What an order costs.
    fn cost(&self, order: &[usize]) -> f64 {
        let (mut now, mut sum) = (0.0, 0.0);
        for &j in order {
            let [time, due, weight] = self.jobs[j];
            now += time;
            sum += if now > due { weight * (now - due) } else { 0.0 };
        }
        sum
    }

    /// Moves single jobs and swaps two while that is of use.
    fn improve(&self, order: &mut Vec<usize>) -> f64 {
        let mut best = self.cost(order);
        loop {
            let before = best;
            for from in 0..order.len() {
                for to in 0..order.len() {
                    for swap in [true, false] {
                        let mut tried = order.clone();
                        if swap {
                            tried.swap(from, to);
                        } else {
                            let job = tried.remove(from);
                            tried.insert(to, job);
                        }
                        let cost = self.cost(&tried);
                        if cost < best {
                            (best, *order) = (cost, tried);
                        }
                    }
                }
            }
            if best >= before {
                return best;
            }
        }
    }

    /// The best order of all tries, from the jobs as they are due.
    fn search(&self) -> (f64, Vec<usize>) {
        let mut order: Vec<usize> = (0..self.jobs.len()).collect();
        order.sort_by(|&a, &b| self.jobs[a][1].total_cmp(&self.jobs[b][1]));
        let mut best = (self.improve(&mut order), order);
        // a linear congruential generator (Knuth)
        let mut state = 1_u64;
        let mut draw = |below: usize| {
            state = state.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1);
            usize::try_from((state >> 33) % below as u64).unwrap()
        };
        for _ in 0..TRIES {
            let mut order = best.1.clone();
            for _ in 0..4 {
                let (a, b) = (draw(order.len()), draw(order.len()));
                order.swap(a, b);
            }
            let cost = self.improve(&mut order);
            if cost <= best.0 {
                best = (cost, order);
            }
        }
        best
    }

    /// The columns of a rival that an order fills.
    fn columns(&self, model: &Model, order: &[usize]) -> Vec<f64> {
        let mut values = vec![0.0; model.columns().len()];
        let mut set = |variable: &str, tuple: &[&str], value: f64| {
            if let Some(column) = model.find_column(variable, tuple) {
                values[column.index()] = value;
            }
        };
        let mut now = 0.0;
        for (place, &j) in order.iter().enumerate() {
            let ([time, due, _], name) = (self.jobs[j], self.names[j].as_str());
            now += time;
            set("C", &[name], now);
            set("T", &[name], if now > due { now - due } else { 0.0 });
            for &later in &order[place + 1..] {
                set("e", &[name, &self.names[later]], 1.0);
            }
        }
        values
    }
}

/// The objective of a point whose every row holds.
fn held(id: &str, model: &Rc<Model>, values: &[f64]) -> f64 {
    assert_eq!(violations(model, values), [], "{id}");
    let cost = |(column, value): (&model::Column, &f64)| model.numbers().float(column.cost) * value;
    model.columns().iter().zip(values).map(cost).sum()
}

#[test]
fn published_optima_of_forty_jobs_are_reached_and_not_passed() {
    for (number, optimum) in (1..).zip(OPTIMA) {
        let Some(text) = open_data("wt/wt40_orlib_1to5.txt", "the OR-Library") else { return };
        let on = instance::read_part(&text, None, Some(number)).instance.unwrap();
        let jobs = Jobs::of(&on);
        assert_eq!(jobs.jobs.len(), 40);
        let (cost, order) = jobs.search();
        assert!(agree(cost, optimum, 1e-9), "{number}: {cost} for {optimum}");
        for id in ["tardiness/big-m", "tardiness/linear-ordering"] {
            let model = rival(id, &on);
            let found = held(id, &model, &jobs.columns(&model, &order));
            assert!(agree(found, optimum, 1e-9), "{id}, {number}: {found} for {optimum}");
        }
    }
}
