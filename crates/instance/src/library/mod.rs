//! Files of the public libraries, as they are published.
//!
//! | reader | takes | supplies |
//! |---|---|---|
//! | `knapsack` | `n b`, then a line `p a` for each item; or `n`, lines `j p a`, then `b` | `J`, `p`, `a`, `b` |
//! | `multi-knapsack` | OR-Library mknap | `I`, `J`, `p`, `a`, `b` |
//! | `assignment` | OR-Library gap | `I`, `J`, `c`, `a`, `b` |
//! | `sites` | OR-Library cap | `I`, `J`, `q`, `f`, `d`, `c` |
//! | `medians` | OR-Library pmed | `I`, `J`, `d` (shortest paths), `p`, `w` |
//! | `tardiness` | OR-Library wt | `J`, `p`, `w`, `d` |
//! | `job-shop` | jobs by machine and duration | `J`, `M`, `N`, `p`, `H`; `K`, `m`, `p` where a job returns to a machine |
//! | `quadratic` | QAPLIB | `N`, `L`, `f`, `d` |
//! | `graph` | DIMACS graphs for colouring | `V`, `E`, `h`, `w` |
//! | `steiner` | SteinLib | `V`, `E`, `A`, `c`, `R`, `r` |
//! | `routing` | `n K Q`, then `q x y` for each stop, the depot first | `V`, `c`, `q`, `Q`, `K`, `r` |
//!
//! OR-Library: Beasley, Journal of the Operational Research Society 41, 1990, 1069-1072. QAPLIB:
//! Burkard, Karisch, Rendl, Journal of Global Optimization 10, 1997, 391-403. SteinLib: Koch,
//! Martin, Voß, 2001. The files of the OR-Library hold one or several instances; which of them is
//! read is asked for by its number.

mod graph;
mod guess;
mod location;
mod packing;
mod parts;
mod quadratic;
mod routing;
mod scheduling;
mod stream;
#[cfg(test)]
mod tests;

use crate::complaint::Complaints;
use crate::instance::{Datum, Instance, Reader};
use crate::number::Number;

pub(crate) use guess::guess;
use parts::Parts;
use stream::Stream;

/// What came out of a file.
pub(crate) struct Found {
    pub(crate) instance: Instance,
    pub(crate) facts: Vec<String>,
    /// A word for each instance of the file, where there is more than one.
    pub(crate) parts: Vec<String>,
}

/// Reads a file of a library; of several instances the one of that number, from 1. O(length), but
/// for `medians`, which finds shortest paths in O(n · m · log n).
pub(crate) async fn read<'a>(
    text: &'a str,
    reader: Reader,
    part: Option<usize>,
    sink: &mut Complaints<'a>,
) -> Option<Found> {
    match reader {
        Reader::Graph => return graph::dimacs(text, sink).await.map(alone),
        Reader::Steiner => return graph::steiner(text, sink).await.map(alone),
        _ => {}
    }
    let mut stream = Stream::new(text, reader == Reader::JobShop, sink).await;
    match reader {
        Reader::Medians => location::medians(&mut stream).await.map(alone),
        Reader::Sites => location::sites(&mut stream).await.map(alone),
        Reader::Quadratic => quadratic::read(&mut stream).await.map(alone),
        Reader::Routing => routing::read(&mut stream).await.map(alone),
        Reader::Knapsack => packing::knapsack(&mut stream).await.map(alone),
        Reader::MultiKnapsack => Parts::counted(&mut stream, part, packing::multi).await,
        Reader::Assignment => Parts::counted(&mut stream, part, packing::assignment).await,
        Reader::Tardiness => scheduling::tardiness(&mut stream, part).await,
        _ => Parts::all(&mut stream, part, scheduling::job_shop).await,
    }
}

fn alone((instance, facts): (Instance, Vec<String>)) -> Found {
    Found { instance, facts, parts: Vec::new() }
}

/// The set 1, …, n.
fn counted(n: usize) -> Datum {
    Datum::Integers((1..=n).filter_map(|i| i64::try_from(i).ok()).collect())
}

/// Numbers over 1, …, n.
fn vector(values: Vec<Number>) -> Datum {
    let cells = (1_usize..).zip(values).map(|(i, value)| (vec![i.to_string()], value)).collect();
    Datum::Table { arity: 1, cells }
}

/// Numbers over two such sets, listed by rows of `width`.
fn matrix(values: Vec<Number>, width: usize) -> Datum {
    grid(values.into_iter().map(Some).collect(), width)
}

/// As [`matrix()`], with cells that have no number. A map is built fast from entries in the order
/// of its keys.
fn grid(mut values: Vec<Option<Number>>, width: usize) -> Datum {
    let sorted = |count: usize| {
        let mut labels: Vec<(String, usize)> =
            (0..count).map(|i| ((i + 1).to_string(), i)).collect();
        labels.sort_unstable();
        labels
    };
    let (rows, columns) = (sorted(values.len() / width.max(1)), sorted(width));
    let mut cells = Vec::new();
    for (row, i) in &rows {
        for (column, j) in &columns {
            let number = values.get_mut(i * width + j).and_then(Option::take);
            cells.extend(number.map(|number| (vec![row.clone(), column.clone()], number)));
        }
    }
    Datum::Table { arity: 2, cells: cells.into_iter().collect() }
}

/// An instance of `reader` with these data.
fn instance(reader: Reader, data: Vec<(&str, Datum)>) -> Instance {
    let mut instance = Instance::new(reader);
    for (name, datum) in data {
        instance.set(name, datum);
    }
    instance
}
