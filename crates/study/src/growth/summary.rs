//! From cells to means, paired ratios, fits and a performance profile.

use std::collections::BTreeMap;

use record::study::{Cell, Fit, Growth, GrowthPair, SizeMean};

use crate::statistics::{
    Line, count, holm, interval, line, resampled, shifted_geometric_mean, sign_test,
};

/// Shifts of the geometric means.
const NODES_SHIFT: f64 = 10.0;
const WORK_SHIFT: f64 = 1_000.0;
/// Work within a tenth of each other is a tie.
const TIE: f64 = 0.9;
/// A difference is called one below this.
const SIGNIFICANT: f64 = 0.05;
/// A gap of less is rounding.
const ROUNDING: f64 = 1e-12;
/// Where the performance profile is looked at.
const FACTORS: [f64; 7] = [1.0, 1.5, 2.0, 4.0, 8.0, 16.0, 64.0];

/// Size, the instance of which it is a part, class and seed.
type Instance = (u32, String, String, u64);

/// The study with its means, pairs, fits and profile worked out from its cells.
#[must_use]
pub fn summed_up(mut growth: Growth) -> Growth {
    growth.cells.sort_by_key(|cell| cell.cell);
    let rivals = rivals(&growth.cells);
    let table = by_instance(&growth.cells);
    growth.means = means(&growth.cells, &rivals, &table);
    growth.pairs = pairs(&rivals, &table, growth.seed);
    growth.fits = fits(&growth, &rivals);
    growth.profile = profile(&rivals, &table);
    growth
}

fn rivals(cells: &[Cell]) -> Vec<String> {
    let mut rivals: Vec<String> = Vec::new();
    for cell in cells {
        if !rivals.contains(&cell.rival) {
            rivals.push(cell.rival.clone());
        }
    }
    rivals
}

/// The cells that have a result, by instance and rival.
fn by_instance(cells: &[Cell]) -> BTreeMap<Instance, BTreeMap<String, Cell>> {
    let mut table: BTreeMap<Instance, BTreeMap<String, Cell>> = BTreeMap::new();
    for cell in cells.iter().filter(|cell| cell.failed.is_empty()) {
        table.entry(instance(cell)).or_default().insert(cell.rival.clone(), cell.clone());
    }
    table
}

fn instance(cell: &Cell) -> Instance {
    (cell.size, cell.instance.clone(), cell.class.clone(), cell.seed)
}

/// What is drawn together when it is resampled: parts of one instance are not independent. Of several
/// instances each is a source; of one the seeds are, which say nothing of other instances.
fn source((_, instance, class, seed): &Instance) -> (String, u64) {
    if instance.is_empty() { (class.clone(), *seed) } else { (instance.clone(), 0) }
}

fn work(cell: &Cell) -> f64 {
    // Exact up to 2⁵³; more is not reached within the limits.
    #[allow(clippy::cast_precision_loss, reason = "counts of work are far below 2^53")]
    let work = cell.work as f64;
    work
}

fn means(
    cells: &[Cell],
    rivals: &[String],
    table: &BTreeMap<Instance, BTreeMap<String, Cell>>,
) -> Vec<SizeMean> {
    let mut sizes: Vec<u32> = cells.iter().map(|cell| cell.size).collect();
    sizes.sort_unstable();
    sizes.dedup();
    let mut out = Vec::new();
    for size in sizes {
        for rival in rivals {
            let of = |cell: &&Cell| cell.size == size && cell.rival == *rival;
            let own: Vec<&Cell> =
                cells.iter().filter(of).filter(|cell| cell.failed.is_empty()).collect();
            let nodes: Vec<f64> = own.iter().map(|cell| f64::from(cell.nodes)).collect();
            let work: Vec<f64> = own.iter().map(|cell| work(cell)).collect();
            let stopped = own.iter().filter(|cell| !cell.solved).count();
            out.push(SizeMean {
                size,
                rival: rival.clone(),
                instances: u32::try_from(own.len()).unwrap_or(u32::MAX),
                stopped: u32::try_from(stopped).unwrap_or(u32::MAX),
                nodes: shifted_geometric_mean(&nodes, NODES_SHIFT),
                work: shifted_geometric_mean(&work, WORK_SHIFT),
                gap: gap(&own, table),
            });
        }
    }
    out
}

/// The mean gap of the relaxation to the best plan that a rival proved optimal.
fn gap(own: &[&Cell], table: &BTreeMap<Instance, BTreeMap<String, Cell>>) -> Option<f64> {
    let gaps: Vec<f64> = own
        .iter()
        .filter_map(|cell| {
            let solved = table.get(&instance(cell))?.values().find(|cell| cell.solved)?;
            let best = solved.incumbent.filter(|best| *best != 0.0)?;
            let gap = (best - cell.bound?).abs() / best.abs();
            Some(if gap < ROUNDING { 0.0 } else { gap })
        })
        .collect();
    (!gaps.is_empty()).then(|| gaps.iter().sum::<f64>() / count(gaps.len()))
}

/// The log of how many times the work of the first the second takes, on one instance, with
/// whether one of them was stopped. `None` where both were, or one has no result.
fn ratio(cells: &BTreeMap<String, Cell>, [a, b]: [&String; 2]) -> Option<(f64, bool)> {
    let (a, b) = (cells.get(a)?, cells.get(b)?);
    (a.solved || b.solved).then(|| {
        let shifted = |cell: &Cell| libm::log(work(cell) + WORK_SHIFT);
        (shifted(b) - shifted(a), !(a.solved && b.solved))
    })
}

fn pairs(
    rivals: &[String],
    table: &BTreeMap<Instance, BTreeMap<String, Cell>>,
    seed: u64,
) -> Vec<GrowthPair> {
    let mut out = Vec::new();
    for (place, a) in rivals.iter().enumerate() {
        for b in &rivals[place + 1..] {
            out.push(pair([a, b], table, seed));
        }
    }
    let adjusted = holm(&out.iter().map(|pair| pair.p).collect::<Vec<_>>());
    for (pair, adjusted) in out.iter_mut().zip(adjusted) {
        pair.adjusted = adjusted;
        let apart = pair.interval.0 > 1.0 || pair.interval.1 < 1.0;
        pair.distinguishable = apart && adjusted < SIGNIFICANT && pair.instances > 0;
    }
    out
}

fn pair(
    rivals: [&String; 2],
    table: &BTreeMap<Instance, BTreeMap<String, Cell>>,
    seed: u64,
) -> GrowthPair {
    let mut groups: BTreeMap<(String, u64), Vec<f64>> = BTreeMap::new();
    let mut out =
        GrowthPair { rivals: rivals.map(Clone::clone), ratio: 1.0, ..GrowthPair::default() };
    let (mut sum, least) = (0.0, libm::log(TIE));
    for (place, cells) in table {
        let Some((log, censored)) = ratio(cells, rivals) else { continue };
        sum += log;
        out.instances += 1;
        out.censored += u32::from(censored);
        match () {
            () if log > -least => out.wins += 1,
            () if log < least => out.losses += 1,
            () => out.ties += 1,
        }
        groups.entry(source(place)).or_default().push(log);
    }
    if out.instances > 0 {
        out.ratio = libm::exp(sum / f64::from(out.instances));
    }
    let groups: Vec<Vec<f64>> = groups.into_values().collect();
    let mean = |logs: &[&f64]| {
        (!logs.is_empty()).then(|| libm::exp(logs.iter().copied().sum::<f64>() / count(logs.len())))
    };
    out.interval = interval(resampled(&groups, seed, mean)).unwrap_or((out.ratio, out.ratio));
    out.p = match table.keys().any(|(_, instance, ..)| !instance.is_empty()) {
        true => by_source(&groups),
        false => sign_test(out.wins, out.losses),
    };
    out
}

/// The sign test with one vote for each instance, by the mean of its parts: they are not independent.
fn by_source(groups: &[Vec<f64>]) -> f64 {
    let least = libm::log(TIE);
    let means = groups.iter().map(|logs| logs.iter().sum::<f64>() / count(logs.len()));
    let (mut wins, mut losses) = (0, 0);
    for mean in means {
        wins += u32::from(mean > -least);
        losses += u32::from(mean < least);
    }
    sign_test(wins, losses)
}

fn fits(growth: &Growth, rivals: &[String]) -> Vec<Fit> {
    rivals.iter().filter_map(|rival| fit(growth, rival)).collect()
}

/// Log work over the size or over its log, whichever explains more; none with fewer than three
/// sizes. Runs that were stopped count with the work they had done: the fit is from below there.
fn fit(growth: &Growth, rival: &str) -> Option<Fit> {
    let own = growth.cells.iter().filter(|cell| cell.rival == rival && cell.failed.is_empty());
    let mut groups: BTreeMap<(String, u64), Vec<(f64, f64)>> = BTreeMap::new();
    let mut sizes = Vec::new();
    for cell in own {
        let point = (f64::from(cell.size), libm::log(work(cell) + 1.0));
        groups.entry(source(&instance(cell))).or_default().push(point);
        sizes.push(cell.size);
    }
    sizes.sort_unstable();
    sizes.dedup();
    if sizes.len() < 3 {
        return None;
    }
    let groups: Vec<Vec<(f64, f64)>> = groups.into_values().collect();
    let all: Vec<&(f64, f64)> = groups.iter().flatten().collect();
    let plain = |x: f64| x;
    let (exponential, power) = (through(&all, plain)?, through(&all, libm::log)?);
    let is_power = power.r2 > exponential.r2;
    let (line, scale) = if is_power {
        (power, libm::log as fn(f64) -> f64)
    } else {
        (exponential, plain as fn(f64) -> f64)
    };
    let target = scale(f64::from(growth.production));
    let drawn = resampled(&groups, growth.seed, |points| Some(through(points, scale)?.at(target)));
    let (low, high) = interval(drawn).unwrap_or((line.at(target), line.at(target)));
    Some(Fit {
        rival: rival.to_owned(),
        model: if is_power { "power" } else { "exponential" }.to_owned(),
        factor: if is_power { line.slope } else { libm::exp(line.slope) },
        at: libm::exp(line.at(target)),
        low: libm::exp(low),
        high: libm::exp(high),
        r2: line.r2,
    })
}

fn through(points: &[&(f64, f64)], scale: impl Fn(f64) -> f64) -> Option<Line> {
    line(&points.iter().map(|(x, y)| (scale(*x), *y)).collect::<Vec<_>>())
}

/// The share of instances on which each rival is within a factor of the best.
fn profile(
    rivals: &[String],
    table: &BTreeMap<Instance, BTreeMap<String, Cell>>,
) -> Vec<(f64, Vec<f64>)> {
    let whole: Vec<_> = table
        .values()
        .filter(|cells| cells.len() == rivals.len() && cells.values().any(|c| c.solved))
        .collect();
    if whole.is_empty() {
        return Vec::new();
    }
    let best = |cells: &BTreeMap<String, Cell>| {
        let solved = cells.values().filter(|cell| cell.solved).map(work);
        solved.reduce(|a, b| if b < a { b } else { a }).unwrap_or(f64::MAX)
    };
    let within = |rival: &String, factor: f64| {
        let holds = whole.iter().filter(|cells| {
            cells.get(rival).is_some_and(|cell| cell.solved && work(cell) <= factor * best(cells))
        });
        count(holds.count()) / count(whole.len())
    };
    let row = |&factor: &f64| (factor, rivals.iter().map(|rival| within(rival, factor)).collect());
    FACTORS.iter().map(row).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    /// `A` takes 2ⁿ, `B` three times that; two seeds.
    fn cells(factor: u64) -> Vec<Cell> {
        let mut cells = Vec::new();
        for size in [10, 12, 14, 16] {
            for seed in 1..=8 {
                for (rival, times) in [("A", 1), ("B", factor)] {
                    cells.push(Cell {
                        cell: u32::try_from(cells.len()).unwrap_or(0),
                        rival: rival.to_owned(),
                        size,
                        seed,
                        nodes: 10,
                        work: (1_000_000 << size) / 1024 * times,
                        bound: Some(90.0),
                        incumbent: Some(100.0),
                        solved: true,
                        ..Cell::default()
                    });
                }
            }
        }
        cells
    }

    fn study(cells: Vec<Cell>) -> Growth {
        summed_up(Growth { cells, production: 20, seed: 1, ..Growth::default() })
    }

    #[test]
    fn a_rival_that_takes_three_times_the_work_is_told_apart() {
        let growth = study(cells(3));
        let pair = &growth.pairs[0];
        assert!((pair.ratio - 3.0).abs() < 1e-2 && pair.distinguishable, "{pair:?}");
        assert_eq!((pair.wins, pair.ties, pair.losses), (32, 0, 0));
        assert!(pair.adjusted < 1e-8);
        let fit = &growth.fits[0];
        assert!(fit.model == "exponential" && (fit.factor - 2.0).abs() < 1e-3, "{fit:?}");
        // 10⁶ · 2²⁰ / 2¹⁰
        assert!((fit.at / 1.024e9 - 1.0).abs() < 1e-2, "{fit:?}");
        assert_eq!(growth.profile[0].1, [1.0, 0.0]);
        assert_eq!(growth.profile[3].1, [1.0, 1.0]);
        assert!(growth.means[0].gap.is_some_and(|gap| (gap - 0.1).abs() < 1e-12));
    }

    #[test]
    fn rivals_that_take_the_same_are_not_distinguishable() {
        let pair = study(cells(1)).pairs.remove(0);
        assert!(!pair.distinguishable && (pair.ratio - 1.0).abs() < 1e-12, "{pair:?}");
        assert_eq!((pair.ties, pair.adjusted), (32, 1.0));
    }

    #[test]
    fn a_run_that_was_stopped_counts_as_one_and_both_as_none() {
        let mut some = cells(3);
        some[1].solved = false;
        (some[2].solved, some[3].solved) = (false, false);
        let growth = study(some);
        assert_eq!((growth.pairs[0].instances, growth.pairs[0].censored), (31, 1));
        assert_eq!((growth.means[0].stopped, growth.means[1].stopped), (1, 2));
    }

    #[test]
    fn cells_in_any_order_give_the_same() {
        let mut turned = cells(2);
        turned.reverse();
        assert_eq!(study(turned), study(cells(2)));
    }
}
