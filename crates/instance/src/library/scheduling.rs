//! Job shops, and weighted tardiness on one machine.

use std::collections::{BTreeMap, BTreeSet};

use crate::complaint::plural;
use crate::instance::{Datum, Reader};
use crate::number::{Number, number_text, total, total_text};

use super::parts::{Part, Parts};
use super::stream::Stream;
use super::{Found, counted, instance, matrix, vector};

/// `n m`, and for each job its operations in order, each as machine and duration. Machines are
/// counted from 0, or from 1 where none is 0; here they are counted from 1.
pub(super) async fn job_shop(stream: &mut Stream<'_, '_>) -> Option<Part> {
    let begins = stream.at();
    let n = stream.count("jobs")?;
    let m = stream.count("machines")?;
    let all = stream.numbers(super::packing::cells(n, 2 * m), "the operations").await?;
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
    let meaning = if odd == 0 {
        "job j takes p on machine m, and N holds its steps from a machine to the next"
    } else {
        "operation k of job j stands on machine m and takes p"
    };
    let mut facts = vec![
        format!("{size}; {meaning}."),
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
        let jobs = plural(odd, "job does not", "jobs do not");
        facts.push(format!("{jobs} visit every machine once."));
    }
    let mut data = vec![("J", counted(n)), ("M", counted(m))];
    if odd == 0 {
        let (own, fact) = by_machine(&machines, &durations, m);
        data.extend(own);
        facts.push(fact);
    } else {
        data.extend([("K", counted(m)), ("m", matrix(machines, m)), ("p", matrix(durations, m))]);
    }
    let mut found = instance(Reader::JobShop, data);
    let name =
        stream.names.iter().rev().find(|(at, _)| *at <= begins).map(|(_, name)| name.clone());
    found.title = name.unwrap_or_default();
    let word = if found.title.is_empty() { size } else { format!("{}, {size}", found.title) };
    Some((found, facts, word))
}

/// Where every job visits every machine once: its steps `N` from a machine to the next, and its
/// time `p` on each machine; and the length `H` of a plan, with what is said of it.
fn by_machine(
    machines: &[Number],
    durations: &[Number],
    m: usize,
) -> ([(&'static str, Datum); 3], String) {
    let (mut rows, mut cells) = (Vec::new(), BTreeMap::new());
    let jobs = machines.chunks_exact(m).zip(durations.chunks_exact(m));
    for (job, (machines, durations)) in (1_usize..).zip(jobs) {
        let job = job.to_string();
        for pair in machines.windows(2) {
            rows.push(vec![job.clone(), number_text(&pair[0]), number_text(&pair[1])]);
        }
        for (machine, duration) in machines.iter().zip(durations) {
            cells.insert(vec![job.clone(), number_text(machine)], duration.clone());
        }
    }
    let length = greedy(machines, durations, m);
    let fact = format!(
        "H = {}: so long is the plan that always starts the step which can start first.",
        number_text(&length)
    );
    let steps = ("N", Datum::Tuples { arity: 3, rows });
    let times = ("p", Datum::Table { arity: 2, cells });
    ([steps, times, ("H", Datum::Number(length))], fact)
}

/// The length of the plan that always starts the step which can start first, of several the one
/// of the job with the most work left, then of the first job. O(steps · jobs).
fn greedy(machines: &[Number], durations: &[Number], m: usize) -> Number {
    let jobs = durations.len() / m.max(1);
    let place = |at: usize| usize::try_from(machines[at].numerator().clone()).unwrap_or(0);
    let mut next = vec![0; jobs];
    let mut done = vec![Number::ZERO; jobs];
    let mut left: Vec<Number> =
        durations.chunks_exact(m).map(|job| total(job).unwrap_or(Number::ZERO)).collect();
    let mut free = vec![Number::ZERO; m + 1];
    for _ in 0..jobs * m {
        let start = |job: usize| {
            let machine = &free[place(job * m + next[job])];
            if *machine > done[job] { machine.clone() } else { done[job].clone() }
        };
        let open = (0..jobs).filter(|&job| next[job] < m).map(|job| (start(job), job));
        let first = open.reduce(|best, one| {
            let sooner = one.0 < best.0 || one.0 == best.0 && left[one.1] > left[best.1];
            if sooner { one } else { best }
        });
        let Some((start, job)) = first else { break };
        let at = job * m + next[job];
        let end = &start + &durations[at];
        left[job] = &left[job] - &durations[at];
        free[place(at)].clone_from(&end);
        done[job] = end;
        next[job] += 1;
    }
    done.into_iter().max().unwrap_or(Number::ZERO)
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
pub(super) async fn tardiness(stream: &mut Stream<'_, '_>, part: Option<usize>) -> Option<Found> {
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
        let p = stream.numbers(n, "the durations").await?;
        let w = stream.numbers(n, "the weights").await?;
        let d = stream.numbers(n, "the due dates").await?;
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
