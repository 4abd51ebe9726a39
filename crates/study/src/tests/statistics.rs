//! Statistics against published examples and against a reference library: SciPy 1.17.1 and statsmodels
//! 0.15.0, called as each check says. Digits are those that the library printed. The numbers of the three
//! published examples are from memory; they agree with 2⁸², with statsmodels and with all resamples counted.

use record::study::{Cell, Growth};

use crate::growth::summed_up;
use crate::statistics::{
    count, holm, interval, line, resampled, shifted_geometric_mean, sign_test,
};

fn near(found: f64, wanted: f64, relative: f64) {
    assert!((found - wanted).abs() <= relative * wanted.abs(), "{found} for {wanted}");
}

/// `scipy.stats.binomtest(wins, wins + losses).pvalue`.
#[test]
fn the_sign_test_is_that_of_the_library() {
    for (wins, losses, p) in [
        (9, 1, 0.021_484_375),
        (8, 2, 0.109_375),
        (14, 6, 0.115_318_298_339_843_75),
        (30, 12, 0.007_915_897_334_896_727),
        (61, 39, 0.035_200_200_217_704_855),
        (3, 11, 0.057_373_046_875),
        (260, 190, 0.001_119_986_291_528_849),
    ] {
        near(sign_test(wins, losses), p, 1e-9);
    }
}

/// Arbuthnott 1710 (Philosophical Transactions 27): more boys than girls were christened in each of 82
/// years; he gives one chance in 4 8360 0000 0000 0000 0000 0000 for one side, to four digits.
#[test]
fn the_first_sign_test_that_was_published() {
    near(sign_test(82, 0) / 2.0, 1.0 / 4.836e24, 1e-4);
}

/// Benjamini, Hochberg 1995 (Journal of the Royal Statistical Society B 57): 15 endpoints of a trial, of
/// which a procedure that holds the familywise error at 0.05 rejects three. The adjusted values are those
/// of `statsmodels.stats.multitest.multipletests(p, method="holm")`, as those of the shorter lists are.
#[test]
fn holm_is_that_of_the_library_and_rejects_what_the_paper_says() {
    let trial = [
        0.0001, 0.0004, 0.0019, 0.0095, 0.0201, 0.0278, 0.0298, 0.0344, 0.0459, 0.324, 0.4262,
        0.5719, 0.6528, 0.759, 1.0,
    ];
    let adjusted = [
        0.0015, 0.0056, 0.0247, 0.114, 0.2211, 0.278, 0.278, 0.278, 0.3213, 1.0, 1.0, 1.0, 1.0,
        1.0, 1.0,
    ];
    for (values, wanted) in [
        (&trial[..], &adjusted[..]),
        (&[0.01, 0.04, 0.03, 0.005], &[0.03, 0.06, 0.06, 0.02]),
        (&[0.2, 0.01, 0.01, 0.6], &[0.4, 0.04, 0.04, 0.6]),
    ] {
        let found = holm(values);
        assert_eq!(found.len(), wanted.len());
        found.iter().zip(wanted).for_each(|(found, wanted)| near(*found, *wanted, 1e-9));
    }
    assert_eq!(holm(&trial).iter().filter(|p| **p < 0.05).count(), 3);
}

/// `scipy.stats.gmean(v + shift) - shift`.
#[test]
fn the_shifted_geometric_mean_is_that_of_the_library() {
    let values = [1.0, 2.0, 5.0, 8.0, 20.0, 100.0, 3.0, 3.0];
    for (shift, wanted) in
        [(0.0, 5.885_661_912_765_424), (10.0, 9.377_256_694_183_838), (1e3, 17.279_726_516_219_284)]
    {
        near(shifted_geometric_mean(&values, shift), wanted, 1e-9);
    }
}

/// `scipy.stats.linregress(x, y)`.
#[test]
fn the_line_is_that_of_the_library() {
    let points = [(5.0, 2.1), (6.0, 2.9), (8.0, 4.2), (10.0, 5.6), (12.0, 6.4), (15.0, 9.0)];
    let found = line(&points).expect("a line");
    near(found.slope, 0.664_953_271_028_037_4, 1e-12);
    near(found.intercept, -1.172_897_196_261_682_3, 1e-12);
    near(found.r2, 0.992_686_219_757_550_7, 1e-12);
}

/// The survival times of seven mice (Efron, Tibshirani 1993, An Introduction to the Bootstrap, table 2.1):
/// the bootstrap's standard error of their mean is 23.36. The interval is of all 7⁷ resamples, each counted
/// once, by `numpy.quantile(…, method="inverted_cdf")`; `scipy.stats.bootstrap(method="percentile")` of a
/// million draws gives 43.9 to 134.4.
#[test]
fn the_bootstrap_of_a_mean_is_the_published_one() {
    let mice: Vec<Vec<f64>> =
        [94.0, 197.0, 16.0, 38.0, 99.0, 141.0, 23.0].map(|days| vec![days]).to_vec();
    let mean = |drawn: &[&f64]| Some(drawn.iter().copied().sum::<f64>() / count(drawn.len()));
    for seed in 1..=5 {
        let values = resampled(&mice, seed, mean);
        let middle = values.iter().sum::<f64>() / count(values.len());
        let square = values.iter().map(|value| (value - middle) * (value - middle)).sum::<f64>();
        near(libm::sqrt(square / count(values.len())), 23.36, 0.05);
        let (low, high) = interval(values).expect("an interval");
        // The 2.5 % of 2,000 draws is one of 1.28 to 3.72 % (3.5 times √(p(1 − p)/2000) either way), which
        // of all resamples lie here.
        assert!((38.2..46.6).contains(&low) && (129.5..141.2).contains(&high), "{low} {high}");
    }
}

/// Paired log-ratios of five sources with one to four parts, sources drawn whole: the interval of their
/// geometric mean over all 5⁵ resamples, each counted once, and `scipy.stats.bootstrap` on the places of
/// the sources with a million draws: 0.9200 to 2.1170 both.
#[test]
fn resampling_by_source_is_that_of_the_library() {
    let logs: [&[f64]; 5] =
        [&[0.1, 0.3, 0.2], &[-0.4, -0.1], &[0.9, 1.1, 1.0, 0.8], &[0.0], &[0.5, 0.2]];
    let mut cells = Vec::new();
    for (source, logs) in logs.iter().enumerate() {
        for (part, log) in logs.iter().enumerate() {
            // 10⁹ each: the shift of 1,000 does not show in six digits.
            #[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "3e9")]
            let times = (1e9 * libm::exp(*log)) as u64;
            for (rival, work) in [("A", 1_000_000_000), ("B", times)] {
                cells.push(Cell {
                    cell: u32::try_from(cells.len()).expect("few"),
                    rival: rival.to_owned(),
                    size: 10 + u32::try_from(part).expect("few"),
                    instance: format!("day {source}"),
                    work,
                    solved: true,
                    ..Cell::default()
                });
            }
        }
    }
    for seed in 1..=5 {
        let growth = Growth { cells: cells.clone(), seed, ..Growth::default() };
        let pair = summed_up(growth).pairs.remove(0);
        // exp(4.6 / 12)
        near(pair.ratio, 1.467_159, 1e-5);
        // Between the values of 1.28 and 3.72 % of all resamples, as above; parts drawn one by one give
        // 1.13 to 1.90.
        let (low, high) = pair.interval;
        assert!((0.913..0.964).contains(&low) && (2.068..2.241).contains(&high), "{pair:?}");
    }
}

/// Twelve instances, three rivals, thousands of non-zeros touched; 0 is a run that was stopped. The shares
/// are `scipy.stats.ecdf(ratios).cdf.evaluate(factor)` of the ratios to the best that was solved, a stopped
/// run's being infinite: Dolan, Moré 2002, (2.1).
#[test]
fn the_performance_profile_is_the_distribution_of_the_library() {
    let table = [
        [40, 0, 2],
        [48, 28, 0],
        [38, 17, 58],
        [4, 17, 0],
        [34, 0, 8],
        [3, 1, 3],
        [9, 59, 0],
        [39, 45, 14],
        [17, 26, 16],
        [58, 11, 53],
        [0, 50, 0],
        [24, 38, 30],
    ];
    let mut cells = Vec::new();
    for (seed, row) in (1..).zip(table) {
        for (rival, work) in ["A", "B", "C"].into_iter().zip(row) {
            cells.push(Cell {
                cell: u32::try_from(cells.len()).expect("few"),
                rival: rival.to_owned(),
                size: 5,
                seed,
                // What a stopped run had done is not looked at, however little.
                work: if work == 0 { 1 } else { 1_000 * work },
                solved: work != 0,
                ..Cell::default()
            });
        }
    }
    let profile = summed_up(Growth { cells, ..Growth::default() }).profile;
    let twelfths = [
        (1.0, [3.0, 5.0, 4.0]),
        (1.5, [4.0, 5.0, 5.0]),
        (2.0, [5.0, 7.0, 5.0]),
        (4.0, [8.0, 8.0, 7.0]),
        (8.0, [10.0, 10.0, 8.0]),
        (16.0, [10.0, 10.0, 8.0]),
        (64.0, [11.0, 10.0, 8.0]),
    ];
    assert_eq!(profile.len(), twelfths.len());
    for ((factor, shares), (wanted, of_twelve)) in profile.iter().zip(twelfths) {
        near(*factor, wanted, 1e-12);
        shares.iter().zip(of_twelve).for_each(|(share, of)| near(*share, of / 12.0, 1e-12));
    }
}

/// Three days with four parts each, on all of which one rival wins: three votes and no twelve. As twelve the parts of
/// three days were told apart at p = 0.0005; `scipy.stats.binomtest(3, 3).pvalue` is 0.25.
#[test]
fn parts_of_one_instance_have_one_vote() {
    let cells = |days: &[&str]| {
        let mut cells = Vec::new();
        for day in days {
            for (rival, work) in [("A", 1_000_000), ("B", 9_000_000)] {
                for size in 4..8 {
                    cells.push(Cell {
                        cell: u32::try_from(cells.len()).expect("few"),
                        rival: rival.to_owned(),
                        instance: (*day).to_owned(),
                        solved: true,
                        size,
                        work,
                        ..Cell::default()
                    });
                }
            }
        }
        cells
    };
    let pair = |days: &[&str]| {
        summed_up(Growth { cells: cells(days), ..Growth::default() }).pairs.remove(0)
    };
    let days = pair(&["Monday", "Tuesday", "Wednesday"]);
    assert_eq!((days.instances, days.wins, days.distinguishable), (12, 12, false));
    near(days.p, 0.25, 1e-12);
    // Of a single instance, about whose parts alone it speaks, each part is one.
    near(pair(&[""]).p, 0.125, 1e-12);
}
