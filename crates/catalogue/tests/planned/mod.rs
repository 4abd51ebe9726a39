//! The sizes that `family.toml` states for packing, scheduling, production and quadratic
//! assignment.

use instance::{Datum, Instance};
use model::nearest_f64;

use super::holdings::{Data, Size};

#[allow(
    clippy::cast_possible_truncation,
    clippy::cast_sign_loss,
    reason = "generated numbers are small, whole and 0 or more"
)]
impl Data<'_> {
    /// For each piece the sizes from its own on. Sizes are numbered in the order of the listing.
    fn pieces_and_later_sizes(&self) -> usize {
        let Some(Datum::Table { cells, .. }) = self.0.get("b") else { return 0 };
        let number = |key: &[String]| key[0].trim_start_matches('i').parse().unwrap_or(0_usize);
        let sizes = cells.len() + 1;
        cells.iter().map(|(key, b)| nearest_f64(b) as usize * (sizes - number(key))).sum()
    }

    /// Starts of things that take `p` within the horizon.
    fn starts(&self, horizon: usize) -> usize {
        self.cells("p").iter().map(|p| horizon + 1 - p).sum()
    }
}

/// The size of a rival, where it is of one of these families.
pub(crate) fn stated(id: &str, instance: &Instance) -> Option<Size> {
    let data = Data(instance);
    let (family, rival) = id.split_once('/')?;
    match family {
        "bins" => bins(rival, &data),
        "knapsack" | "gap" | "cover" => packing(id, &data),
        "machine" => machine(rival, &data),
        "job-shop" => job_shop(rival, &data),
        "rcpsp" => project(rival, &data),
        "clsp" => lots(rival, &data),
        "unit" => units(rival, &data),
        "piecewise" => piecewise(rival, &data),
        "qap" => quadratic(rival, &data),
        _ => None,
    }
}

fn bins(rival: &str, data: &Data<'_>) -> Option<Size> {
    let (i, k, q) = (data.count("I"), data.total("b"), data.number("Q"));
    match rival {
        "assignment" => Some((k * (i + 1), i + k, 0)),
        "ordered" => Some((k * (i + 1), i + 2 * k - 1, 0)),
        "arc-flow" => Some((i * (q + 1) - data.total("w") + q, i + q, 0)),
        "patterns" => Some((data.count("P"), i, 0)),
        "linked" => Some((k * (i + 1), i + k + i * k, 0)),
        "one-cut" => Some((1 + i * q - data.total("w"), q, 0)),
        "heads" => Some((k + data.pieces_and_later_sizes(), i + 2 * k, 0)),
        _ => None,
    }
}

fn packing(id: &str, data: &Data<'_>) -> Option<Size> {
    let (i, j) = (data.count("I"), data.count("J"));
    match id {
        "knapsack/plain" => Some((i, 1, 0)),
        "knapsack/covers" => Some((i, 1, 1)),
        "gap/plain" => Some((i * j, i + j, 0)),
        "knapsack/states" => {
            let b = data.number("b") + 1;
            Some((i + 2 * i * b - data.total("a"), i + 1 + (i - 1) * b, 0))
        }
        "gap/patterns" => Some((i * j + data.count("P"), j + i * j + i, 0)),
        "gap/covers" => Some((i * j, i + j, i)),
        "cover/plain" => Some((j, i, 0)),
        "cover/triples" => Some((j, i + i * (i - 1) * (i - 2) / 6, 0)),
        _ => None,
    }
}

fn machine(rival: &str, data: &Data<'_>) -> Option<Size> {
    let n = data.count("J");
    let releases = data.cells("r");
    let (first, last) = (releases.iter().min()?, releases.iter().max()?);
    let horizon = last + data.total("p");
    let pairs = n * (n - 1);
    match rival {
        "big-m" => Some((pairs / 2 + n, n + pairs, 0)),
        "parallel" => {
            // A set of two or more has none that begins with the one last release.
            let alone = releases.iter().filter(|one| *one == last).count() == 1;
            Some((n * n, n + 3 * pairs / 2, n - usize::from(alone)))
        }
        "positions" => Some((n * n + 2 * n, 5 * n - 1 + n * n, 0)),
        "linear-ordering" => Some((n * n, 2 * n + pairs + pairs / 2 + pairs * (n - 2) / 3, 0)),
        "time-indexed" => {
            Some((n + data.starts(horizon) - data.total("r"), 2 * n + horizon - first, 0))
        }
        _ => None,
    }
}

fn job_shop(rival: &str, data: &Data<'_>) -> Option<Size> {
    let (j, m, steps, h) = (data.count("J"), data.count("M"), data.count("N"), data.number("H"));
    match rival {
        "disjunctive" | "tight" => {
            Some((j * m + m * j * (j - 1) / 2 + 1, j * m + steps + m * j * (j - 1), 0))
        }
        "surplus" => {
            let pairs = m * j * (j - 1) / 2;
            Some((j * m + 2 * pairs + 1, j * m + steps + pairs, 0))
        }
        "ranks" => Some((j * j * m + j * m + 1, 4 * j * m - m + steps * j * j, 0)),
        "time-indexed" => Some((data.starts(h) + 1, 2 * j * m + m * h + steps, 0)),
        "time-indexed-split" => Some((data.starts(h) + 1, 2 * j * m + m * h + steps * h, 0)),
        _ => None,
    }
}

fn project(rival: &str, data: &Data<'_>) -> Option<Size> {
    let (j, pairs, r, h) = (data.count("J"), data.count("N"), data.count("R"), data.number("H"));
    match rival {
        "pulse" => Some((data.starts(h) + 1, 2 * j + r * h + pairs, 0)),
        "pulse-split" => Some((data.starts(h) + 1, 2 * j + r * h + pairs * h, 0)),
        "flow" => {
            let a = j * (j - 1);
            let rows = j + a + pairs + a / 2 + a * r + 2 * j * r + r;
            Some((j + 1 + a * (r + 1) + j * r, rows, 0))
        }
        "step" => Some((j * h + 1, 2 * j + j * (h - 1) + pairs * h + r * h, 0)),
        _ => None,
    }
}

fn lots(rival: &str, data: &Data<'_>) -> Option<Size> {
    let (i, t) = (data.count("I"), data.count("T"));
    let spans = i * t * (t + 1) / 2;
    match rival {
        "big-m" => Some((3 * i * t + i, 2 * i * t + t, 0)),
        "l-s" => Some((3 * i * t + i, 2 * i * t + t, i * t)),
        "shortest-path-form" => Some((3 * i * t + i + spans, 5 * i * t + t, 0)),
        "location-form" => Some((3 * i * t + i + spans, 4 * i * t + t + spans, 0)),
        _ => None,
    }
}

fn units(rival: &str, data: &Data<'_>) -> Option<Size> {
    let (g, t) = (data.count("G"), data.count("T"));
    // Pairs of hours less than a minimum time apart.
    let within = |least: usize| (1..least).map(|apart| t.saturating_sub(apart)).sum::<usize>();
    let pairs: usize = ["L", "K"].into_iter().flat_map(|name| data.cells(name)).map(within).sum();
    match rival {
        "aggregated" => Some((3 * g * t + g, t + 5 * g * t, 0)),
        "pairwise" => Some((3 * g * t + g, t + 3 * g * t + pairs, 0)),
        "three-binary" => Some((4 * g * t + g, t + 3 * g * t + pairs, 0)),
        "turn-on-off" | "three-binary-summed" => Some((4 * g * t + g, t + 5 * g * t, 0)),
        _ => None,
    }
}

fn piecewise(rival: &str, data: &Data<'_>) -> Option<Size> {
    let (i, k) = (data.count("I"), data.count("K"));
    let bits = (0..k).take_while(|bit| 1 << bit < k).count();
    match rival {
        "incremental" => Some((i * (2 * k + 1), 1 + 2 * i * k, 0)),
        "multiple-choice" => Some((i * (2 * k + 2), 1 + i * (2 * k + 3), 0)),
        "convex-combination" => Some((i * (2 * k + 3), 1 + i * (k + 5), 0)),
        "split-combination" => Some((i * (3 * k + 2), 1 + i * (k + 3), 0)),
        "big-m" => Some((i * (k + 2), 1 + i * (k + 3), 0)),
        "tight-combination" => Some((i * (2 * k + 3), 1 + i * (2 * k + 2), 0)),
        "logarithmic" => Some((i * (k + 3 + bits), 1 + i * (3 + 2 * bits), 0)),
        _ => None,
    }
}

fn quadratic(rival: &str, data: &Data<'_>) -> Option<Size> {
    let n = data.count("V");
    let products = n * n * (n - 1) * (n - 1);
    match rival {
        "big-m" => Some((2 * n * n, 2 * n + n * n, 0)),
        "products" => Some((n * n + products, 2 * n + products, 0)),
        "four-sums" => Some((n * n + products, 2 * n + 4 * n * n * (n - 1), 0)),
        "rlt-1" => Some((n * n + products, 2 * n + 2 * n * n * (n - 1) + products / 2, 0)),
        _ => None,
    }
}
