//! One machine, job shops, projects: jobs with whole times, and horizons that a plan keeps to.

use super::Class;
use super::blocks::{Blocks, halved};
use super::draw::Draw;

/// Releases spread over half of all times.
pub(super) fn machine(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let mut times = Vec::new();
    for _ in 0..size {
        times.push(draw.amount(class, 1, 6));
    }
    let spread = times.iter().sum::<i64>() / 2 + 1;
    let mut blocks = Blocks::new();
    let jobs = blocks.labels("J", 'j', size as usize);
    blocks.column(("p", "j"), &jobs, |j| times[j]);
    blocks.column(("r", "j"), &jobs, |_| draw.below(spread));
    blocks.column(("w", "j"), &jobs, |_| 1 + draw.below(9));
    blocks
}

/// Due after the job's own time and up to three quarters of all.
pub(super) fn due(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let times: Vec<i64> = (0..size).map(|_| draw.amount(class, 1, 6)).collect();
    let spread = times.iter().sum::<i64>() * 3 / 4 + 1;
    let mut blocks = Blocks::new();
    let jobs = blocks.labels("J", 'j', size as usize);
    blocks.column(("p", "j"), &jobs, |j| times[j]);
    blocks.column(("d", "j"), &jobs, |j| std::cmp::max(times[j], draw.below(spread)));
    blocks.column(("w", "j"), &jobs, |_| 1 + draw.below(9));
    blocks
}

/// Three machines, a random route for each job; the horizon is that of the jobs taken in turn.
pub(super) fn job_shop(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let mut blocks = Blocks::new();
    let jobs = blocks.labels("J", 'j', halved(size) - 1);
    let machines = blocks.labels("M", 'm', 3);
    let mut times = vec![vec![0; machines.len()]; jobs.len()];
    for cell in times.iter_mut().flatten() {
        *cell = draw.amount(class, 1, 4);
    }
    let routes: Vec<Vec<usize>> = jobs.iter().map(|_| draw.order(machines.len())).collect();
    let mut steps = Vec::new();
    let (mut free, mut ready) = (vec![0; machines.len()], vec![0; jobs.len()]);
    for turn in 0..machines.len() {
        for (j, route) in routes.iter().enumerate() {
            let m = route[turn];
            ready[j] = std::cmp::max(free[m], ready[j]) + times[j][m];
            free[m] = ready[j];
            if let Some(&next) = route.get(turn + 1) {
                steps.push(format!("{} {} {}", jobs[j], machines[m], machines[next]));
            }
        }
    }
    blocks.by("N", "j, m, l", &steps);
    blocks.table(("p", "j, m"), (&jobs, &machines), |j, m| Some(times[j][m]));
    blocks.value("H", ready.into_iter().max().unwrap_or(0));
    blocks
}

/// Two resources of six; the horizon is that of the activities taken one after another, each as
/// soon as it fits.
pub(super) fn project(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let mut blocks = Blocks::new();
    let activities = blocks.labels("J", 'j', size as usize);
    let count = activities.len();
    let mut plan = Project::default();
    for j in 0..count {
        plan.times.push(draw.amount(class, 1, 4));
        plan.needs.push([draw.below(5), draw.below(5)]);
        let before: Vec<usize> = (0..j).filter(|_| draw.below(i64::from(size)) < 2).collect();
        let first = j > 0 && before.is_empty() && j + 1 == count;
        plan.before.push(if first { vec![0] } else { before });
    }
    let horizon = plan.horizon();
    let pairs: Vec<String> = (0..count)
        .flat_map(|j| plan.before[j].iter().map(move |&i| (i, j)))
        .map(|(i, j)| format!("{} {}", activities[i], activities[j]))
        .collect();
    blocks.by("N", "i, j", &pairs);
    let resources = blocks.labels("R", 'k', 2);
    blocks.column(("p", "j"), &activities, |j| plan.times[j]);
    blocks.table(("b", "j, k"), (&activities, &resources), |j, k| {
        Some(plan.needs[j][k]).filter(|&need| need > 0)
    });
    blocks.column(("B", "k"), &resources, |_| Project::THERE);
    blocks.value("H", horizon);
    blocks
}

#[derive(Default)]
struct Project {
    times: Vec<i64>,
    needs: Vec<[i64; 2]>,
    before: Vec<Vec<usize>>,
}

impl Project {
    /// What there is of each resource.
    const THERE: i64 = 6;

    /// When all is done if each activity in turn starts as soon as it fits. `O(activities² H)`.
    fn horizon(&self) -> i64 {
        let mut starts: Vec<i64> = Vec::new();
        for (j, before) in self.before.iter().enumerate() {
            let ends = before.iter().map(|&i| starts[i] + self.times[i]);
            let mut start = ends.max().unwrap_or(0);
            while (start..start + self.times[j]).any(|t| !self.fits(j, t, &starts)) {
                start += 1;
            }
            starts.push(start);
        }
        starts.iter().zip(&self.times).map(|(start, time)| start + time).max().unwrap_or(0)
    }

    fn fits(&self, j: usize, t: i64, starts: &[i64]) -> bool {
        (0..2).all(|k| {
            let at = |i: &usize| starts[*i] <= t && t < starts[*i] + self.times[*i];
            let used: i64 = (0..starts.len()).filter(at).map(|i| self.needs[i][k]).sum();
            used + self.needs[j][k] <= Self::THERE
        })
    }
}
