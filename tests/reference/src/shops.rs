//! Job shops as they are published.

use instance::Instance;

use crate::graphs::names;
use crate::round_trip::instance;

/// A job shop of the usual form (jobs, machines, then for each job its machines and times) as
/// blocks, with a horizon; beside it the work of each job before a machine (`a`) and after it (`z`).
///
/// # Panics
/// When the text is not of that form.
#[must_use]
pub fn shop(text: &str, horizon: usize) -> Instance {
    let plain = text.lines().filter(|line| !line.starts_with('#'));
    let numbers: Vec<usize> =
        plain.flat_map(str::split_whitespace).map(|word| word.parse().unwrap()).collect();
    let (jobs, machines) = (numbers[0], numbers[1]);
    let (mut steps, mut times) = (String::new(), String::new());
    let (mut before, mut after) = (String::new(), String::new());
    for (j, job) in numbers[2..].chunks(2 * machines).take(jobs).enumerate() {
        let (mut done, mut left) = (0, job.chunks(2).map(|op| op[1]).sum::<usize>());
        for op in job.chunks(2) {
            left -= op[1];
            times.push_str(&format!("j{j} m{} {}\n", op[0], op[1]));
            before.push_str(&format!("j{j} m{} {done}\n", op[0]));
            after.push_str(&format!("j{j} m{} {left}\n", op[0]));
            done += op[1];
        }
        for (here, next) in job.chunks(2).zip(job.chunks(2).skip(1)) {
            steps.push_str(&format!("j{j} m{} m{}\n", here[0], next[0]));
        }
    }
    let sets = format!("J\n{}\n\nM\n{}", names("j", jobs), names("m", machines));
    instance(&format!(
        "{sets}\n\nN by j, m, l\n{steps}\np by j, m\n{times}\nH = {horizon}\n\n\
         a by j, m\n{before}\nz by j, m\n{after}\n"
    ))
}

/// A rival by times whose starts leave room for the steps of the job before and after.
///
/// # Panics
/// When there is no such rival.
#[must_use]
pub fn within_windows(id: &str) -> String {
    let text = catalogue::find(id).unwrap_or_else(|| panic!("no rival {id}")).text;
    let data = "  a_{j,m}  ∀ j ∈ J, m ∈ M  work of the job before\n  \
                z_{j,m}  ∀ j ∈ J, m ∈ M  work of the job after\n  H   ";
    text.replacen("  H   ", data, 1)
        .replace("t + p_{j,m} ≤ H}", "t ≥ a_{j,m}, t + p_{j,m} + z_{j,m} ≤ H}")
}
