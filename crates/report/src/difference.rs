//! What differs between two rivals, in sentences: sizes, variables, families, coefficients, and the
//! lines of their notation. It compares what is written, not what it means: whether they are the
//! same problem is a study.

use std::collections::{BTreeMap, BTreeSet};

use record::message::RivalReport;
use record::results::FamilyReport;
use record::scenario::FamilyState;

use crate::number::{count, of};

/// Names told before the others are only counted.
const NAMED: usize = 6;
/// Lines of notation compared at most, and told at most.
const LINES: usize = 400;
const TOLD: usize = 24;

/// A line of notation that only one of two rivals has.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct LineOf {
    /// Whether the first rival has it.
    pub first: bool,
    /// The line.
    pub text: String,
}

/// Lines that only one of two rivals has.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Lines {
    /// The first of them, in order.
    pub told: Vec<LineOf>,
    /// What was left out, as a sentence; empty when nothing was.
    pub left_out: String,
}

/// What differs, one sentence each; one that says so where nothing does. `A` and `B` are what the
/// rivals are called.
#[must_use]
pub fn sentences(names: [&str; 2], rivals: [&RivalReport; 2]) -> Vec<String> {
    let [one, other] = rivals;
    let mut told = Vec::new();
    if one.maximise != other.maximise {
        let sense = |rival: &RivalReport| if rival.maximise { "maximises" } else { "minimises" };
        told.push(format!("{} {}, {} {}.", names[0], sense(one), names[1], sense(other)));
    }
    told.extend(sizes(names, rivals));
    told.extend(variables(names, rivals));
    told.extend(families(names, rivals));
    if told.is_empty() {
        told.push(format!(
            "{} and {} have the same sizes, variables and families, and as many coefficients of \
             each power of ten.",
            names[0], names[1]
        ));
    }
    told
}

fn sizes(names: [&str; 2], [one, other]: [&RivalReport; 2]) -> Option<String> {
    let parts = [
        ("row", u64::from(one.rows), u64::from(other.rows)),
        ("column", u64::from(one.columns), u64::from(other.columns)),
        ("whole column", u64::from(one.integer_columns), u64::from(other.integer_columns)),
        ("coefficient", one.nonzeros, other.nonzeros),
    ];
    let apart = parts.iter().filter(|(_, one, other)| one != other);
    let words: Vec<String> = apart
        .map(|(noun, one, other)| format!("{} against {}", of(*one, noun), count(*other)))
        .collect();
    (!words.is_empty())
        .then(|| format!("{} has, against {}: {}.", names[0], names[1], words.join("; ")))
}

/// Names of variables without their indices, with how many columns each has.
fn by_variable(rival: &RivalReport) -> BTreeMap<&str, u64> {
    let mut counts = BTreeMap::new();
    for name in &rival.column_names {
        let variable = name.split('[').next().unwrap_or(name);
        *counts.entry(variable).or_insert(0) += 1;
    }
    counts
}

fn variables(names: [&str; 2], [one, other]: [&RivalReport; 2]) -> Vec<String> {
    let (ones, others) = (by_variable(one), by_variable(other));
    let mut told = Vec::new();
    for (name, mine, theirs) in [(names[0], &ones, &others), (names[1], &others, &ones)] {
        let own: Vec<String> = mine
            .iter()
            .filter(|(variable, _)| !theirs.contains_key(**variable))
            .map(|(variable, columns)| format!("{variable} ({})", of(*columns, "column")))
            .collect();
        told.extend(listed(&own).map(|list| format!("Only {name} has the variables {list}.")));
    }
    let changed: Vec<String> = ones
        .iter()
        .filter_map(|(variable, mine)| others.get(variable).map(|theirs| (variable, mine, theirs)))
        .filter(|(_, mine, theirs)| mine != theirs)
        .map(|(variable, mine, theirs)| {
            format!("{variable} ({} against {} columns)", count(*mine), count(*theirs))
        })
        .collect();
    told.extend(listed(&changed).map(|list| format!("Variables over other indices: {list}.")));
    told
}

fn families(names: [&str; 2], [one, other]: [&RivalReport; 2]) -> Vec<String> {
    let mut told = Vec::new();
    let known = |rival: &RivalReport| -> BTreeSet<String> {
        rival.families.iter().map(|family| family.name.clone()).collect()
    };
    for (name, mine, theirs) in [(names[0], one, known(other)), (names[1], other, known(one))] {
        let own: Vec<String> = mine
            .families
            .iter()
            .filter(|family| !theirs.contains(&family.name))
            .map(|family| format!("({}), {}", family.name, amount(family)))
            .collect();
        told.extend(listed(&own).map(|list| format!("Only {name} has the families {list}.")));
    }
    for mine in &one.families {
        let theirs = other.families.iter().find(|family| family.name == mine.name);
        told.extend(theirs.and_then(|theirs| family(mine, theirs)));
    }
    told
}

fn amount(family: &FamilyReport) -> String {
    match family.state {
        FamilyState::OnDemand => "on demand".to_owned(),
        FamilyState::Out => "out".to_owned(),
        FamilyState::In => of(u64::from(family.rows), "row"),
    }
}

/// What differs in a family that both have.
fn family(mine: &FamilyReport, theirs: &FamilyReport) -> Option<String> {
    let name = &mine.name;
    if amount(mine) != amount(theirs) {
        return Some(format!("({name}): {} against {}.", amount(mine), amount(theirs)));
    }
    (mine.decades != theirs.decades).then(|| {
        format!(
            "({name}) has coefficients of other sizes: {} against {}.",
            range(mine),
            range(theirs)
        )
    })
}

/// The powers of ten of a family's coefficients, as they are named there.
fn range(family: &FamilyReport) -> String {
    let all: Vec<String> = family
        .decades
        .iter()
        .map(|(decade, some)| format!("{} of {decade}", count(*some)))
        .collect();
    if all.is_empty() { "none".to_owned() } else { all.join(", ") }
}

fn listed(all: &[String]) -> Option<String> {
    let more = all.len().saturating_sub(NAMED);
    let named = all.iter().take(NAMED).cloned().collect::<Vec<_>>().join("; ");
    match more {
        _ if all.is_empty() => None,
        0 => Some(named),
        _ => Some(format!("{named}; and {} more", count(more as u64))),
    }
}

/// Lines of two notations that only one of them has, in order, by a longest common subsequence; at
/// most some, of texts that are not very long. O(lines²).
#[must_use]
pub fn lines(one: &str, other: &str) -> Lines {
    let split = |text: &'_ str| -> Vec<String> {
        let lines = text.lines().map(|line| line.split_whitespace().collect::<Vec<_>>().join(" "));
        lines.filter(|line| !line.is_empty()).collect()
    };
    let (mut one, mut other) = (split(one), split(other));
    let long = one.len() > LINES || other.len() > LINES;
    one.truncate(LINES);
    other.truncate(LINES);
    let common = table(&one, &other);
    let (mut i, mut j, mut told) = (0, 0, Vec::new());
    while i < one.len() || j < other.len() {
        if i < one.len() && j < other.len() && one[i] == other[j] {
            (i, j) = (i + 1, j + 1);
        } else if j == other.len() || (i < one.len() && common[i + 1][j] >= common[i][j + 1]) {
            told.push(LineOf { first: true, text: one[i].clone() });
            i += 1;
        } else {
            told.push(LineOf { first: false, text: other[j].clone() });
            j += 1;
        }
    }
    let mut left_out = String::new();
    if told.len() > TOLD {
        left_out = format!("And {} more.", count((told.len() - TOLD) as u64));
        told.truncate(TOLD);
    }
    if long {
        left_out += &format!(" Only the first {LINES} lines of each were compared.");
    }
    Lines { told, left_out: left_out.trim_start().to_owned() }
}

/// The length of the longest common subsequence from each pair of places on.
fn table(one: &[String], other: &[String]) -> Vec<Vec<u32>> {
    let mut common = vec![vec![0; other.len() + 1]; one.len() + 1];
    for i in (0..one.len()).rev() {
        for j in (0..other.len()).rev() {
            common[i][j] = if one[i] == other[j] {
                common[i + 1][j + 1] + 1
            } else {
                common[i + 1][j].max(common[i][j + 1])
            };
        }
    }
    common
}

#[cfg(test)]
mod tests {
    use super::*;

    fn rival(columns: &[&str], families: &[(&str, u32)]) -> RivalReport {
        let family = |&(name, rows): &(&str, u32)| FamilyReport {
            name: name.to_owned(),
            state: FamilyState::In,
            rows,
            added: 0,
            decades: BTreeMap::new(),
            separation: String::new(),
        };
        RivalReport {
            title: String::new(),
            maximise: false,
            rows: families.iter().map(|family| family.1).sum(),
            columns: columns.len() as u32,
            integer_columns: 0,
            nonzeros: 0,
            families: families.iter().map(family).collect(),
            column_names: columns.iter().map(|&name| name.to_owned()).collect(),
            statistics: Vec::new(),
            complaints: Vec::new(),
        }
    }

    #[test]
    fn what_only_one_has_is_named() {
        let labels = rival(&["x[a → b]", "x[b → a]", "u[a]"], &[("leave", 2), ("order", 1)]);
        let flow = rival(&["x[a → b]", "x[b → a]", "f[a → b]"], &[("leave", 2), ("supply", 2)]);
        let told = sentences(["A", "B"], [&labels, &flow]);
        assert_eq!(
            told,
            [
                "A has, against B: 3 rows against 4.",
                "Only A has the variables u (1 column).",
                "Only B has the variables f (1 column).",
                "Only A has the families (order), 1 row.",
                "Only B has the families (supply), 2 rows.",
            ]
        );
    }

    #[test]
    fn a_family_on_demand_differs_from_one_that_is_in() {
        let one = rival(&["x"], &[("cover", 3)]);
        let mut other = one.clone();
        other.families[0].state = FamilyState::OnDemand;
        assert_eq!(sentences(["A", "B"], [&one, &other]), ["(cover): 3 rows against on demand."]);
        other.families[0].state = FamilyState::In;
        other.families[0].decades.insert("10".to_owned(), 4);
        let told = sentences(["A", "B"], [&one, &other]);
        assert_eq!(told, ["(cover) has coefficients of other sizes: none against 4 of 10."]);
        assert!(sentences(["A", "B"], [&one, &one])[0].contains("the same sizes"));
    }

    #[test]
    fn lines_that_moved_or_changed_are_told() {
        let Lines { told, left_out } = lines("a\nb\nc\n", "a\n  b2\nc\n\nd");
        let words: Vec<(bool, &str)> =
            told.iter().map(|line| (line.first, line.text.as_str())).collect();
        assert_eq!(words, [(true, "b"), (false, "b2"), (false, "d")]);
        assert_eq!((lines("x  +  y", "x + y"), left_out.as_str()), (Lines::default(), ""));
    }

    #[test]
    fn what_is_cut_is_said() {
        let many =
            |from: u32, to: u32| -> String { (from..to).map(|line| format!("{line}\n")).collect() };
        assert_eq!(lines(&many(0, 30), "").left_out, "And 6 more.");
        let long = lines(&many(0, 500), &many(0, 450));
        assert_eq!(long.left_out, "Only the first 400 lines of each were compared.");
    }
}
