//! The list of counts as text, and one list against another.

use std::fmt;
use std::str::FromStr;

/// What a count may rise by before the check fails.
const TOLERANCE: f64 = 1.05;

/// A count lower than held by this is worth a word.
const LOWER: f64 = 0.95;

/// Counts of one compiler, in thousands of instructions.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Counts {
    /// As in `rustc 1.95.0`.
    pub(crate) compiler: String,
    /// By what is solved.
    pub(crate) solves: Vec<(String, u64)>,
}

/// How a count stands to the one held.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) enum Finding {
    /// Within the tolerance.
    Same { now: u64, ratio: f64 },
    /// Fewer by more than the tolerance.
    Fewer { now: u64, ratio: f64 },
    /// More by more than the tolerance.
    More { now: u64, ratio: f64 },
    /// The list does not hold it.
    Unknown,
}

impl fmt::Display for Finding {
    fn fmt(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Same { now, ratio } => write!(out, "{now:>9} thousand, {ratio:.3} of held"),
            Self::Fewer { now, ratio } => {
                write!(out, "{now:>9} thousand, {ratio:.3} of held: write the list anew")
            }
            Self::More { now, ratio } => write!(out, "{now:>9} thousand, {ratio:.3} of held: MORE"),
            Self::Unknown => write!(out, "is not in the list"),
        }
    }
}

/// Each solve of `now` against the list held.
pub(crate) fn compare(held: &Counts, now: &Counts) -> Vec<(String, Finding)> {
    let find = |name: &str| held.solves.iter().find(|(known, _)| known == name);
    let one = |(name, now): &(String, u64)| {
        let finding = match find(name) {
            None => Finding::Unknown,
            Some(&(_, held)) => judged(held, *now),
        };
        (name.clone(), finding)
    };
    now.solves.iter().map(one).collect()
}

fn judged(held: u64, now: u64) -> Finding {
    let ratio = now as f64 / held as f64;
    if ratio > TOLERANCE {
        Finding::More { now, ratio }
    } else if ratio < LOWER {
        Finding::Fewer { now, ratio }
    } else {
        Finding::Same { now, ratio }
    }
}

impl fmt::Display for Counts {
    fn fmt(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        writeln!(out, "{}", self.compiler)?;
        self.solves.iter().try_for_each(|(name, count)| writeln!(out, "{name} {count}"))
    }
}

impl FromStr for Counts {
    type Err = String;

    fn from_str(text: &str) -> Result<Self, String> {
        let mut lines = text.lines();
        let compiler = lines.next().ok_or("the list is empty")?.to_owned();
        let line = |line: &str| {
            let (name, count) = line.rsplit_once(' ')?;
            Some((name.to_owned(), count.parse().ok()?))
        };
        let wrong = |text: &str| format!("{text:?} is no name and count");
        let solves = lines.map(|text| line(text).ok_or_else(|| wrong(text)));
        Ok(Self { compiler, solves: solves.collect::<Result<_, _>>()? })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn counts(count: u64) -> Counts {
        let solves = vec![("root a".to_owned(), 1000), ("root b".to_owned(), count)];
        Counts { compiler: "rustc 1.95.0".to_owned(), solves }
    }

    #[test]
    fn a_list_comes_back_from_its_text() {
        let list = counts(7);
        assert_eq!(list.to_string().parse(), Ok(list));
        assert!("rustc 1\nroot".parse::<Counts>().is_err());
        assert!("".parse::<Counts>().is_err());
    }

    #[test]
    fn more_than_the_tolerance_is_told() {
        let found = |now| compare(&counts(1000), &counts(now))[1].1;
        assert!(matches!(found(1050), Finding::Same { .. }));
        assert!(matches!(found(1060), Finding::More { .. }));
        assert!(matches!(found(900), Finding::Fewer { .. }));
        let other = Counts { solves: vec![("root c".to_owned(), 1)], ..counts(1) };
        assert_eq!(compare(&counts(1), &other)[0].1, Finding::Unknown);
    }

    /// The list that is held can be read and has every solve.
    #[test]
    fn the_list_that_is_held_is_whole() {
        let held: Counts = std::fs::read_to_string(crate::HELD).unwrap().parse().unwrap();
        let names: Vec<&str> = held.solves.iter().map(|(name, _)| name.as_str()).collect();
        assert_eq!(names, crate::SOLVES);
    }
}
