//! The command line of the measurement.

use crate::problems::{NAMES, Named, named};
use crate::sampling::Effort;
use crate::solvers::Solver;

/// What can be asked for.
pub(crate) const USAGE: &str = "\
cargo xtask bench lp [PART]... [options]
    roots         root relaxations beside HiGHS and microlp, presolve off
    children      solves after one bound change
    subtours      subtours on demand to the root bound, the linear programs alone
    presolved     roots with presolve beside roots without, ours and HiGHS
    proofs        what the exact check of a root costs beside its solve
    growth        time over size
    instructions  counts by callgrind; only when it is named

cargo xtask bench tree [options]
    searches: bare mode beside microlp, as a production solver would beside HiGHS

cargo xtask bench expand
    time and memory of two million non-zeros beside their MPS text

cargo xtask bench wasm
    the built page's engine under Node beside the native one

--quick         5 samples instead of 15, no fresh seeds
--seeds A,B     these fresh seeds beside seed 1, instead of two from the clock
--match TEXT    only problems whose name holds TEXT";

/// The tables to make.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Default)]
pub(crate) struct Tables {
    pub(crate) roots: bool,
    pub(crate) children: bool,
    pub(crate) subtours: bool,
    pub(crate) presolved: bool,
    pub(crate) proofs: bool,
    pub(crate) growth: bool,
    pub(crate) instructions: bool,
}

/// What to do.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(crate) enum Part {
    /// Print [`USAGE`].
    Help,
    /// Make ready, and solve once when somebody is named.
    Once { problem: String, seed: u64, who: Option<Solver> },
    /// Measure linear programs.
    Tables(Tables),
    /// Measure searches.
    Trees,
}

/// What was asked for.
#[derive(Clone, Debug)]
pub(crate) struct Arguments {
    pub(crate) part: Part,
    pub(crate) effort: Effort,
    seeds: Vec<u64>,
    filter: String,
}

impl Arguments {
    /// The seeds as they are given on the command line.
    pub(crate) fn words(&self) -> String {
        self.seeds.iter().map(ToString::to_string).collect::<Vec<_>>().join(",")
    }

    /// Whether a problem is to be measured.
    pub(crate) fn wants(&self, name: &str) -> bool {
        name.contains(&self.filter)
    }

    /// The seed of the order in which everyone is called.
    pub(crate) fn order_seed(&self) -> u64 {
        self.seeds.first().copied().unwrap_or(1)
    }

    /// Seed 1 and the fresh ones.
    pub(crate) fn seeds(&self) -> impl Iterator<Item = u64> + '_ {
        std::iter::once(1).chain(self.seeds.iter().copied())
    }

    /// The problems, one after the other: the set with seed 1, then with the fresh seeds.
    pub(crate) fn problems(&self) -> Vec<Named> {
        let seeds = self.seeds();
        let wanted: Vec<&str> = NAMES.into_iter().filter(|name| self.wants(name)).collect();
        let all = seeds.flat_map(|seed| wanted.iter().map(move |name| named(name, seed)));
        all.flatten().collect()
    }
}

/// Reads the arguments.
pub(crate) fn parse(words: &[String]) -> Result<Arguments, String> {
    let mut words = words.iter().map(String::as_str);
    let mut arguments = Arguments {
        part: Part::Help,
        effort: Effort::FULL,
        seeds: fresh_seeds(),
        filter: String::new(),
    };
    let what = words.next();
    match what {
        Some("lp" | "tree") => {}
        Some("once") => {
            arguments.part = once(&mut words)?;
            return Ok(arguments);
        }
        Some("help") | None => return Ok(arguments),
        Some(other) => return Err(format!("there is no measurement {other:?}")),
    }
    let mut tables = Tables::default();
    while let Some(word) = words.next() {
        match word {
            "roots" => tables.roots = true,
            "children" => tables.children = true,
            "subtours" => tables.subtours = true,
            "presolved" => tables.presolved = true,
            "proofs" => tables.proofs = true,
            "growth" => tables.growth = true,
            "instructions" => tables.instructions = true,
            "--quick" => (arguments.effort, arguments.seeds) = (Effort::QUICK, Vec::new()),
            "--seeds" => arguments.seeds = seeds(words.next().unwrap_or_default())?,
            "--match" => arguments.filter = words.next().unwrap_or_default().to_owned(),
            other => return Err(format!("{other:?} is not understood")),
        }
    }
    if what == Some("tree") {
        if tables != Tables::default() {
            return Err("bench tree has no parts".to_owned());
        }
        arguments.part = Part::Trees;
        return Ok(arguments);
    }
    if tables == Tables::default() {
        tables = Tables {
            roots: true,
            children: true,
            subtours: true,
            presolved: true,
            proofs: true,
            growth: true,
            instructions: false,
        };
    }
    arguments.part = Part::Tables(tables);
    Ok(arguments)
}

fn once<'a>(words: &mut impl Iterator<Item = &'a str>) -> Result<Part, String> {
    let (Some(problem), Some(seed), Some(who)) = (words.next(), words.next(), words.next()) else {
        return Err("once needs a problem, a seed and a name".to_owned());
    };
    let seed = seed.parse().map_err(|_| format!("{seed:?} is not a seed"))?;
    let who = Solver::ALL.into_iter().find(|solver| solver.name() == who);
    Ok(Part::Once { problem: problem.to_owned(), seed, who })
}

fn seeds(list: &str) -> Result<Vec<u64>, String> {
    let seed = |word: &str| word.parse().map_err(|_| format!("{word:?} is not a seed"));
    list.split(',').filter(|word| !word.is_empty()).map(seed).collect()
}

/// Two seeds that nobody has tuned on.
#[allow(clippy::disallowed_types, reason = "seeds of a measurement, printed for the next run")]
fn fresh_seeds() -> Vec<u64> {
    use std::time::{SystemTime, UNIX_EPOCH};
    let now = SystemTime::now().duration_since(UNIX_EPOCH).map_or(0, |since| since.as_secs());
    vec![2 + now % 100_000, 200_003 + now % 99_991]
}
