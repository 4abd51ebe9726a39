//! Knapsacks of one and several rows, and generalised assignment.

use crate::complaint::plural;
use crate::instance::{Instance, Reader};
use crate::number::number_text;

use super::parts::Part;
use super::stream::{MOST_CELLS, Stream};
use super::{counted, instance, matrix, vector};

/// `n b` and a pair for each item, or `n`, triples with a number before each, and `b` at the end.
pub(super) async fn knapsack(stream: &mut Stream<'_, '_>) -> Option<(Instance, Vec<String>)> {
    let n = stream.count("items")?;
    let number = |k: usize| stream.cells.get(1 + 3 * k).and_then(|cell| cell.text.parse().ok());
    let numbered = stream.cells.len() == 3 * n + 2 && (0..n).all(|k| number(k) == Some(k + 1));
    let mut capacity = if numbered { None } else { stream.number("the capacity") };
    let (mut profits, mut weights) = (Vec::new(), Vec::new());
    for item in 1..=n {
        if numbered && stream.whole("the item's number", item, item).is_none() {
            return None;
        }
        profits.push(stream.number("the profit of an item")?);
        weights.push(stream.number("the weight of an item")?);
    }
    if numbered {
        capacity = stream.number("the capacity");
    }
    stream.finish()?;
    let b = capacity?;
    let facts = vec![
        format!("{} for a knapsack of capacity {}.", plural(n, "item", "items"), number_text(&b)),
        "Of the two numbers of an item the first was taken for its profit p, the second for its weight a; if it is the other way round, change it in the table of names.".to_owned(),
    ];
    let data = vec![
        ("J", counted(n)),
        ("p", vector(profits)),
        ("a", vector(weights)),
        ("b", crate::Datum::Number(b)),
    ];
    Some((instance(Reader::Knapsack, data), facts))
}

/// `n m optimum`, profits, a row of weights for each resource, capacities.
pub(super) async fn multi(stream: &mut Stream<'_, '_>) -> Option<Part> {
    let n = stream.count("items")?;
    let m = stream.count("resources")?;
    let best = stream.number("the value of the optimum, or 0")?;
    let p = stream.numbers(n, "the profits").await?;
    let a = stream.numbers(cells(m, n), "the weights").await?;
    let b = stream.numbers(m, "the capacities").await?;
    let size = format!("{}, {}", plural(n, "item", "items"), plural(m, "resource", "resources"));
    let mut facts = vec![format!("{size}; the profits p are to be maximised.")];
    if !best.is_zero() {
        facts.push(format!("The file gives {} as the best value known.", number_text(&best)));
    }
    let data = vec![
        ("I", counted(m)),
        ("J", counted(n)),
        ("p", vector(p)),
        ("a", matrix(a, n)),
        ("b", vector(b)),
    ];
    Some((instance(Reader::MultiKnapsack, data), facts, size))
}

/// `m n`, a row of costs for each agent, a row of needs for each agent, capacities.
pub(super) async fn assignment(stream: &mut Stream<'_, '_>) -> Option<Part> {
    let m = stream.count("agents")?;
    let n = stream.count("jobs")?;
    let c = stream.numbers(cells(m, n), "the costs").await?;
    let a = stream.numbers(cells(m, n), "what jobs take of agents").await?;
    let b = stream.numbers(m, "the capacities").await?;
    let size = format!("{}, {}", plural(m, "agent", "agents"), plural(n, "job", "jobs"));
    let facts = vec![
        format!("{size}; agent i gives a of its capacity b to job j at c."),
        "Whether c is a cost or a profit the file does not say; in gap1 to gap12 of the OR-Library it is a profit.".to_owned(),
    ];
    let data = vec![
        ("I", counted(m)),
        ("J", counted(n)),
        ("c", matrix(c, n)),
        ("a", matrix(a, n)),
        ("b", vector(b)),
    ];
    Some((instance(Reader::Assignment, data), facts, size))
}

/// The cells of a table; beyond all limits where there are too many.
pub(super) fn cells(rows: usize, columns: usize) -> usize {
    rows.checked_mul(columns).unwrap_or(MOST_CELLS + 1)
}
