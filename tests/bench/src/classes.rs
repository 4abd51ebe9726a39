//! Figures of a class of problems: ratio, interval, goal, worst, and whether the machine was quiet.

use crate::statistics::{Pair, Ratio, median, ratio};

/// The classes by rows: under 1,000, to 4,000, larger.
pub(crate) const CLASSES: [(&str, usize, usize); 3] = [
    ("under 1,000 rows", 0, 1_000),
    ("1,000 to 4,000 rows", 1_000, 4_000),
    ("larger", 4_000, usize::MAX),
];

/// Samples of everyone on one problem.
#[derive(Clone, Debug)]
pub(crate) struct Measured {
    pub(crate) name: String,
    pub(crate) rows: usize,
    /// By solver, in the order of the run.
    pub(crate) samples: Vec<Vec<f64>>,
}

/// What is compared in a line.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Comparison {
    pub(crate) title: &'static str,
    /// Who is divided by whom.
    pub(crate) who: (usize, usize),
    /// The ratio to reach; none when it is only reported.
    pub(crate) goal: Option<f64>,
}

/// Prints one line: `all` restricted to a class.
pub(crate) fn line(class: &str, all: &[&Measured], comparison: Comparison) {
    let (one, other) = comparison.who;
    let pairs: Vec<Pair> =
        all.iter().map(|m| (&m.samples[one][..], &m.samples[other][..])).collect();
    let Ratio { mean, low, high } = ratio(&pairs);
    let goal = match comparison.goal {
        None => String::new(),
        Some(goal) if high <= goal => format!("  goal {goal:.2} met"),
        Some(goal) => format!("  goal {goal:.2} MISSED"),
    };
    let worst = all
        .iter()
        .map(|m| (median(&m.samples[one]) / median(&m.samples[other]), &m.name))
        .max_by(|a, b| a.0.total_cmp(&b.0));
    let worst = worst.map_or(String::new(), |(ratio, name)| format!("  worst {ratio:.2} ({name})"));
    println!(
        "{class:<22} {:>3} problems  {:<16} {mean:>6.2} [{low:.2}, {high:.2}]{goal}{worst}",
        all.len(),
        comparison.title
    );
}

/// Prints how far the two runs of ours are apart; over 5 % the class is void.
pub(crate) fn self_check(class: &str, all: &[&Measured], who: (usize, usize)) {
    let pairs: Vec<Pair> =
        all.iter().map(|m| (&m.samples[who.0][..], &m.samples[who.1][..])).collect();
    let mean = ratio(&pairs).mean;
    let verdict =
        if (0.95..=1.05).contains(&mean) { "quiet" } else { "VOID: the machine is not quiet" };
    println!("{class:<22} {:>3} problems  {:<16} {mean:>6.2} {verdict}", all.len(), "ours/ours");
}
