//! Cutting stock, assignments to agents, knapsacks with several rows.

use hullward_tests_reference::graphs::names;
use hullward_tests_reference::open_data;
use hullward_tests_reference::round_trip::instance;
use instance::Instance;

use super::{Record, row, shipped, value_of};

fn list(text: &str, name: &str) -> Vec<u32> {
    let from = text.find(&format!("{name}=[")).unwrap() + name.len() + 2;
    let inner = &text[from..from + text[from..].find(']').unwrap()];
    inner.split(", ").map(|one| one.trim().parse().unwrap()).collect()
}

/// `W=100 w=[45, 36] b=[97, 610]` with all patterns that leave no room for a piece.
fn rolls(text: &str) -> Instance {
    let from = text.find("W=").unwrap() + 2;
    let width: u32 = text[from..].split(' ').next().unwrap().parse().unwrap();
    let (widths, wanted) = (list(text, "w"), list(text, "b"));
    let (mut open, mut full) = (vec![(Vec::<u32>::new(), width)], Vec::new());
    while let Some((counts, left)) = open.pop() {
        match widths.get(counts.len()) {
            Some(&one) => {
                let longer =
                    |count: u32| ([counts.as_slice(), &[count]].concat(), left - count * one);
                // The last width fills what is left.
                let least = if counts.len() + 1 == widths.len() { left / one } else { 0 };
                open.extend((least..=left / one).map(longer));
            }
            None => full.push(counts),
        }
    }
    let names: Vec<String> = (0..widths.len()).map(|i| format!("i{i}")).collect();
    let patterns: Vec<String> = (0..full.len()).map(|p| format!("p{p}")).collect();
    let column = |numbers: &[u32]| -> String {
        names.iter().zip(numbers).map(|(name, number)| format!("{name} {number}\n")).collect()
    };
    let mut cells = String::new();
    for (pattern, counts) in patterns.iter().zip(&full) {
        for (name, count) in names.iter().zip(counts).filter(|(_, count)| **count > 0) {
            cells.push_str(&format!("{name} {pattern} {count}\n"));
        }
    }
    instance(&format!(
        "I\n{}\n\nw by i\n{}\nb by i\n{}\nQ = {width}\n\nP\n{}\n\na by i, p\n{cells}\n",
        names.join(" "),
        column(&widths),
        column(&wanted),
        patterns.chunks(200).map(|line| line.join(" ")).collect::<Vec<_>>().join("\n"),
    ))
}

pub(crate) fn cutting(record: &Record) -> Option<f64> {
    if !record.is("cutting stock") {
        return None;
    }
    let on = rolls(&record.instance);
    let id = match record.formulation.split(' ').next().unwrap() {
        "Kantorovich" => "bins/assignment",
        "arc-flow" => "bins/arc-flow",
        _ => "bins/patterns",
    };
    Some(value_of(shipped(id), &on, record.bounds()))
}

/// The numbers of a file from its `n`-th problem of agents or of rows on.
pub(crate) fn numbers(file: &str) -> Option<Vec<f64>> {
    let text = open_data(file, "the OR-Library")?;
    Some(text.split_whitespace().map(|word| word.parse().unwrap()).collect())
}

fn grid(rows: (&str, usize), columns: (&str, usize), cells: &[f64], sign: f64) -> String {
    let mut out = String::new();
    for r in 0..rows.1 {
        for c in 0..columns.1 {
            let value = sign * cells[r * columns.1 + c];
            out.push_str(&format!("{}{r} {}{c} {value}\n", rows.0, columns.0));
        }
    }
    out
}

/// A problem of agents: how many, how many jobs, worths and hours by agent and job, hours of each agent.
struct Agents {
    agents: usize,
    jobs: usize,
    worths: Vec<f64>,
    hours: Vec<f64>,
    there: Vec<f64>,
}

impl Agents {
    /// `gap1-2`: the second problem of the first file.
    fn of(name: &str) -> Option<Self> {
        let (file, number) = name.split_once('-').unwrap();
        let numbers = numbers(&format!("gap/{file}.txt"))?;
        let mut rest = &numbers[1..];
        for _ in 1..number.parse::<usize>().unwrap() {
            rest = &rest[2 + 2 * count(rest[0]) * count(rest[1]) + count(rest[0])..];
        }
        let (agents, jobs) = (count(rest[0]), count(rest[1]));
        let (cells, from) = (agents * jobs, &rest[2..]);
        Some(Self {
            agents,
            jobs,
            worths: from[..cells].to_vec(),
            hours: from[cells..2 * cells].to_vec(),
            there: from[2 * cells..2 * cells + agents].to_vec(),
        })
    }

    /// As blocks, the worths as costs.
    fn blocks(&self) -> String {
        let (agents, jobs) = (("m", self.agents), ("j", self.jobs));
        format!(
            "I\n{}\n\nJ\n{}\n\nc by i, j\n{}\na by i, j\n{}\nb by i\n{}\n",
            names("m", self.agents),
            names("j", self.jobs),
            grid(agents, jobs, &self.worths, -1.0),
            grid(agents, jobs, &self.hours, 1.0),
            row("m", &self.there),
        )
    }

    /// Every list of jobs that an agent has the hours for, as blocks.
    fn lists(&self) -> String {
        let (mut lists, mut whose, mut which) = (Vec::new(), String::new(), String::new());
        for agent in 0..self.agents {
            let mut open = vec![(Vec::new(), 0, self.there[agent])];
            while let Some((list, next, left)) = open.pop() {
                if next == self.jobs {
                    let name = format!("p{}", lists.len());
                    whose.push_str(&format!("m{agent} {name} 1\n"));
                    list.iter().for_each(|job| which.push_str(&format!("j{job} {name} 1\n")));
                    lists.push(name);
                    continue;
                }
                let hours = self.hours[agent * self.jobs + next];
                if hours <= left {
                    open.push(([&list[..], &[next]].concat(), next + 1, left - hours));
                }
                open.push((list, next + 1, left));
            }
        }
        let lines: Vec<String> = lists.chunks(100).map(|line| line.join(" ")).collect();
        format!("\nP\n{}\n\ng by i, p\n{whose}\nt by j, p\n{which}", lines.join("\n"))
    }
}

/// A problem of agents, to be maximised, its lists of jobs written out where they are not by the hundred thousand.
pub(crate) fn agents(record: &Record) -> Option<f64> {
    if !record.is("generalised assignment (max)") {
        return None;
    }
    let listed = record.formulation.contains("Dantzig");
    if listed && record.instance.starts_with("gap3") {
        return None;
    }
    let problem = Agents::of(&record.instance)?;
    let lists = if listed { problem.lists() } else { String::new() };
    let on = instance(&(problem.blocks() + &lists));
    let id = if listed { "gap/patterns" } else { "gap/plain" };
    Some(-value_of(shipped(id), &on, record.bounds()))
}

#[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "small and whole")]
fn count(number: f64) -> usize {
    number as usize
}

pub(crate) fn resources(record: &Record) -> Option<f64> {
    if !record.is("multi-dimensional knapsack (max)") {
        return None;
    }
    let number: usize = record.instance.rsplit_once('-').unwrap().1.parse().unwrap();
    let numbers = numbers("mknap/mknap1.txt")?;
    let mut rest = &numbers[1..];
    for left in (1..=number).rev() {
        let (n, m) = (count(rest[0]), count(rest[1]));
        let length = 3 + n + m * n + m;
        if left > 1 {
            rest = &rest[length..];
            continue;
        }
        let on = instance(&format!(
            "J\n{}\n\nI\n{}\n\np by j\n{}\na by i, j\n{}\nb by i\n{}\n",
            names("i", n),
            names("r", m),
            row("i", &rest[3..3 + n]),
            grid(("r", m), ("i", n), &rest[3 + n..3 + n + m * n], 1.0),
            row("r", &rest[3 + n + m * n..length]),
        ));
        return Some(value_of(shipped("multi-knapsack/plain"), &on, record.bounds()));
    }
    None
}
