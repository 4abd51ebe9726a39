//! Job shops, and weighted tardiness on one machine.

use std::collections::BTreeSet;

use crate::complaint::plural;
use crate::instance::Reader;
use crate::number::{Number, number_text, total, total_text};

use super::parts::{Part, Parts};
use super::stream::Stream;
use super::{Found, counted, instance, matrix, vector};

/// `n m`, and for each job its operations in order, each as machine and duration. Machines are
/// counted from 0, or from 1 where none is 0; here they are counted from 1.
pub(super) fn job_shop(stream: &mut Stream) -> Option<Part> {
    let begins = stream.at();
    let n = stream.count("jobs")?;
    let m = stream.count("machines")?;
    let all = stream.numbers(super::packing::cells(n, 2 * m), "the operations")?;
    let (machines, durations): (Vec<Number>, Vec<Number>) =
        all.chunks_exact(2).map(|pair| (pair[0].clone(), pair[1].clone())).unzip();
    let from_zero = machines.iter().any(Number::is_zero);
    let shift = if from_zero { Number::ONE } else { Number::ZERO };
    let machines: Vec<Number> = machines.into_iter().map(|machine| machine + &shift).collect();
    let most = Number::from(m);
    if let Some(at) = machines.iter().position(|k| !k.is_int() || *k < Number::ONE || *k > most) {
        stream.go(begins + 3 + 2 * at);
        let span = stream.last();
        let message = format!("`{}` is no machine of {m}", number_text(&machines[at]));
        let mend = "Give machines as whole numbers from 0, or all from 1.".to_owned();
        stream.error(span, "out-of-range", [message, mend]);
        return None;
    }
    let visits = |job: &[Number]| job.iter().collect::<BTreeSet<_>>().len() == m;
    let odd = machines.chunks_exact(m).filter(|job| !visits(job)).count();
    let loads = load(&machines, &durations, m);
    let size = format!("{}, {}", plural(n, "job", "jobs"), plural(m, "machine", "machines"));
    let longest = durations.chunks_exact(m).filter_map(total).max();
    let mut facts = vec![
        format!("{size}; operation k of job j stands on machine m and takes p."),
        format!(
            "The longest job takes {}, the busiest machine is at work for {}.",
            number_text(&longest.unwrap_or(Number::ZERO)),
            number_text(&loads.into_iter().max().unwrap_or(Number::ZERO))
        ),
    ];
    if from_zero {
        facts.push("The file counts machines from 0; here they are counted from 1.".to_owned());
    }
    if odd > 0 {
        facts.push(format!(
            "{} visit every machine once.",
            plural(odd, "job does not", "jobs do not")
        ));
    }
    let data = vec![
        ("J", counted(n)),
        ("M", counted(m)),
        ("K", counted(m)),
        ("m", matrix(machines, m)),
        ("p", matrix(durations, m)),
    ];
    let mut found = instance(Reader::JobShop, data);
    let name =
        stream.names.iter().rev().find(|(at, _)| *at <= begins).map(|(_, name)| name.clone());
    found.title = name.unwrap_or_default();
    let word = if found.title.is_empty() { size } else { format!("{}, {size}", found.title) };
    Some((found, facts, word))
}

/// The work of each machine.
fn load(machines: &[Number], durations: &[Number], m: usize) -> Vec<Number> {
    let mut loads = vec![Number::ZERO; m + 1];
    for (machine, duration) in machines.iter().zip(durations) {
        let place = usize::try_from(machine.numerator().clone()).unwrap_or(0);
        if let Some(load) = loads.get_mut(place) {
            *load = &*load + duration;
        }
    }
    loads
}

/// Durations, weights and due dates of one instance after the other. The file does not say how
/// many jobs there are, unless it begins with their number.
pub(super) fn tardiness(stream: &mut Stream, part: Option<usize>) -> Option<Found> {
    let given = given(stream);
    let Some(n) = given.or_else(|| jobs(stream)) else {
        let message = "the file does not say how many jobs an instance has".to_owned();
        let mend = "Put the number of jobs on a line of its own at the top.".to_owned();
        stream.error(0..0, "count-missing", [message, mend]);
        return None;
    };
    if given.is_some() {
        stream.go(1);
    }
    let mut parts = Parts::new(part);
    for _ in 0..(stream.left() / (3 * n)).min(super::parts::MOST_PARTS) {
        let p = stream.numbers(n, "the durations")?;
        let w = stream.numbers(n, "the weights")?;
        let d = stream.numbers(n, "the due dates")?;
        let work = total_text(&p);
        let size = format!("{}, {work} of work", plural(n, "job", "jobs"));
        let mut facts = vec![format!("{size}, with weights w and due dates d.")];
        if given.is_none() {
            facts.push(format!("The file does not say how many jobs there are: {n} is the first of 40, 50 and 100 at which all weights are from 1 to 10 and all durations from 1 to 100."));
        }
        let data = vec![("J", counted(n)), ("p", vector(p)), ("w", vector(w)), ("d", vector(d))];
        parts.add((instance(Reader::Tardiness, data), facts, size));
    }
    stream.finish()?;
    parts.finish(stream)
}

/// The number of jobs that stands before one or several instances, if it fits.
fn given(stream: &Stream) -> Option<usize> {
    let first = stream.cells.first()?.text.parse::<usize>().ok().filter(|&n| n > 0)?;
    let rest = stream.cells.len() - 1;
    (rest > 0 && rest.is_multiple_of(first.checked_mul(3)?)).then_some(first)
}

/// The number of jobs of the library's files: 40, 50 or 100.
pub(super) fn jobs(stream: &Stream) -> Option<usize> {
    let within = |at: usize, most: u32| {
        stream.cells[at].text.parse::<u32>().is_ok_and(|value| (1..=most).contains(&value))
    };
    [40, 50, 100].into_iter().find(|&n| {
        let total = stream.cells.len();
        let instances = total / (3 * n);
        total > 0
            && total.is_multiple_of(3 * n)
            && (0..instances).all(|k| {
                let from = 3 * n * k;
                (from..from + n).all(|at| within(at, 100))
                    && (from + n..from + 2 * n).all(|at| within(at, 10))
            })
    })
}
