//! The drawings of a growth study: work over size, and the performance profile.

use record::study::Growth;

use super::chart::{Chart, log2};
use super::figure::Figure;
use crate::number::{count, percent, short};

/// Most ticks of an axis of sizes, and of powers of ten.
const MOST_TICKS: usize = 7;

/// Mean work over size, in powers of ten, with each fit drawn out to the production size; `None` where
/// there are not two sizes.
pub(super) fn growing(growth: &Growth, rivals: &[&str]) -> Option<Figure> {
    let means = || growth.means.iter().filter(|mean| mean.instances > 0 && mean.work > 0.0);
    let mut sizes: Vec<u32> = means().map(|mean| mean.size).collect();
    sizes.sort_unstable();
    sizes.dedup();
    let (first, last) = (*sizes.first()?, *sizes.last()?);
    if first == last {
        return None;
    }
    let fits = || growth.fits.iter().filter(|fit| fit.low > 0.0 && fit.high.is_finite());
    let end = if fits().next().is_some() { growth.production.max(last) } else { last };
    let works =
        means().map(|mean| mean.work).chain(fits().flat_map(|fit| [fit.low, fit.at, fit.high]));
    let mut works: Vec<f64> = works.collect();
    works.sort_by(f64::total_cmp);
    let (low, high) = decades(*works.first()?, *works.last()?);
    let across = |size: u32| f64::from(size - first) / f64::from(end - first);
    let up = |work: f64| (ten(work) - f64::from(low)) / f64::from(high - low);
    let label = format!(
        "Mean work of each rival at sizes {} to {}",
        count(u64::from(first)),
        count(u64::from(last))
    );
    let mut chart = Chart::new(label, "size", "work, mean", rivals);
    scales(&mut chart, (low, high), &sizes, (across, end));
    for (place, rival) in rivals.iter().enumerate() {
        let own: Vec<_> = means().filter(|mean| mean.rival == **rival).collect();
        let points: Vec<(f64, f64)> =
            own.iter().map(|mean| (across(mean.size), up(mean.work))).collect();
        chart.line(place, &points);
        for (mean, point) in own.iter().zip(&points) {
            chart.mark(*point, mean.stopped == 0);
        }
        let fit = fits().find(|fit| fit.rival == **rival);
        if let (Some(fit), Some(last)) = (fit, points.last()) {
            chart.rule(*last, (1.0, up(fit.at)));
            chart.rule((1.0, up(fit.low)), (1.0, up(fit.high)));
        }
    }
    Some(chart.0)
}

/// Ticks at powers of ten, and at sizes that are far enough from each other.
fn scales(
    chart: &mut Chart,
    (low, high): (i32, i32),
    sizes: &[u32],
    (across, end): (impl Fn(u32) -> f64, u32),
) {
    let every = 1 + (high - low) / 5;
    for power in (low..=high).filter(|power| (power - low) % every == 0) {
        let share = f64::from(power - low) / f64::from(high - low);
        chart.tick_up(share, format!("10{}", raised(power)));
    }
    let every = sizes.len().div_ceil(MOST_TICKS);
    let shown = sizes.iter().copied().step_by(every.max(1));
    let room = |size: &u32| *size == end || across(end) - across(*size) > 0.1;
    let beyond = (!sizes.contains(&end)).then_some(end);
    for size in shown.filter(room).chain(beyond) {
        chart.tick_across(across(size), count(u64::from(size)));
    }
}

fn ten(number: f64) -> f64 {
    log2(number) / std::f64::consts::LOG2_10
}

/// Whole powers of ten around two numbers, at least one apart.
fn decades(low: f64, high: f64) -> (i32, i32) {
    let power = |number: f64| ten(number);
    let below = (-400..400).take_while(|&whole| f64::from(whole) <= power(low)).last().unwrap_or(0);
    let above = (-400..400).find(|&whole| f64::from(whole) >= power(high)).unwrap_or(400);
    (below, above.max(below + 1))
}

/// A number as an exponent.
fn raised(number: i32) -> String {
    let digits = ['⁰', '¹', '²', '³', '⁴', '⁵', '⁶', '⁷', '⁸', '⁹'];
    let set = |letter: char| letter.to_digit(10).map_or('⁻', |digit| digits[digit as usize]);
    number.to_string().chars().map(set).collect()
}

/// The shares of instances within a factor of the best, as steps: between two factors that were looked
/// at it is the share at the lower. `None` with fewer than two factors.
pub(super) fn profiled(shares: &[(f64, Vec<f64>)], rivals: &[&str], what: &str) -> Option<Figure> {
    let last = shares.last().map(|(factor, _)| log2(*factor)).filter(|last| *last > 0.0)?;
    let label =
        format!("Share of instances on which each rival is within a factor of the least {what}");
    let mut chart = Chart::new(label, &format!("{what}, times the best"), "instances", rivals);
    for share in [0.0, 0.5, 1.0] {
        chart.tick_up(share, percent(share));
    }
    for (factor, _) in shares.iter().filter(|(factor, _)| whole_power(*factor)) {
        chart.tick_across(log2(*factor) / last, short(*factor));
    }
    for place in 0..rivals.len() {
        let mut points: Vec<(f64, f64)> = Vec::new();
        for (factor, own) in shares {
            let (x, share) = (log2(*factor) / last, own.get(place).copied().unwrap_or(0.0));
            points.extend(points.last().map(|&(_, before)| (x, before)));
            points.push((x, share));
        }
        chart.line(place, &points);
    }
    Some(chart.0)
}

fn whole_power(factor: f64) -> bool {
    let power = log2(factor);
    (0..64).any(|whole| f64::from(whole) == power)
}

#[cfg(test)]
mod tests {
    use record::study::{Fit, SizeMean};

    use super::*;

    fn mean(rival: &str, size: u32, work: f64, stopped: u32) -> SizeMean {
        SizeMean {
            rival: rival.to_owned(),
            size,
            work,
            stopped,
            instances: 5,
            ..SizeMean::default()
        }
    }

    /// Work that is ten times as much stands one power higher; a size at which a run was stopped is a
    /// ring; the fit goes on to the production size, where its band stands.
    #[test]
    fn work_is_drawn_over_size_in_powers_of_ten() {
        let means = vec![
            mean("A", 10, 1e3, 0),
            mean("B", 10, 1e4, 0),
            mean("A", 20, 1e4, 0),
            mean("B", 20, 1e5, 2),
        ];
        let fit = Fit { rival: "A".to_owned(), low: 1e4, at: 1e5, high: 1e6, ..Fit::default() };
        let growth = Growth { means, fits: vec![fit], production: 30, ..Growth::default() };
        let figure = growing(&growth, &["A", "B"]).unwrap_or_default();
        let height = |at: usize| figure.marks[at].1;
        assert_eq!(height(0) - height(1), height(2) - height(3), "one power each");
        assert_eq!(height(1), height(2), "10⁴ in both");
        assert_eq!(
            figure.marks.iter().map(|mark| mark.2).collect::<Vec<_>>(),
            [true, true, true, false]
        );
        let words: Vec<&str> = figure.labels.iter().map(|label| label.3.as_str()).collect();
        assert!(words.contains(&"10³") && words.contains(&"30"), "{words:?}");
        let right = figure.rules.iter().filter(|rule| rule[0] == rule[2] && rule[1] != rule[3]);
        assert!(right.clone().any(|rule| rule[1].abs_diff(rule[3]) > 40), "the band: {figure:?}");
        assert!(
            growing(&Growth { means: vec![mean("A", 4, 9.0, 0)], ..Growth::default() }, &["A"])
                .is_none()
        );
    }

    #[test]
    fn a_profile_is_drawn_as_steps() {
        let shares = vec![(1.0, vec![0.5, 0.5]), (2.0, vec![1.0, 0.5]), (4.0, vec![1.0, 1.0])];
        let figure = profiled(&shares, &["A", "B"], "work").unwrap_or_default();
        // Across or upright, never slanted.
        let steps = figure.lines.iter().map(|(line, _)| *line);
        assert!(steps.clone().all(|[x1, y1, x2, y2]| x1 == x2 || y1 == y2), "{figure:?}");
        // The keys of two rivals, and of each a step to each further factor.
        assert_eq!(steps.count(), 2 + 2 * 4);
        assert!(profiled(&[], &["A"], "work").is_none());
    }
}
