//! Dispatch rules beside a theorem and beside enumeration.

use hullward_engine::native::{USUAL_SLICE, Watch, run_rival};
use record::scenario::{InstanceText, Rival, Run, Scenario};

/// Small numbers from a seed: SplitMix64 (Steele, Lea, Flood 2014).
fn draw(state: &mut u64, most: u64) -> u64 {
    *state = state.wrapping_add(0x9e37_79b9_7f4a_7c15);
    let mut z = *state;
    z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
    z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
    1 + (z ^ (z >> 31)) % most
}

/// What dispatch rules alone give: the root is solved and nothing is branched on.
fn dispatched(rival: &str, instance: String) -> Option<f64> {
    let run = Run { heuristics: Some(vec!["family".to_owned()]), nodes: 1, ..Run::default() };
    let scenario = Scenario {
        instance: Some(InstanceText { text: instance, ..InstanceText::default() }),
        rivals: vec![Rival { from: Some(rival.to_owned()), ..Rival::default() }],
        run,
        ..Scenario::default()
    };
    let run = run_rival(&scenario, (0, 0), USUAL_SLICE, &mut |_| Watch::GoOn);
    let found = run.search?.measures.incumbents;
    found.iter().find(|one| one.origin == "dispatch rules").map(|one| one.value)
}

/// Without releases the order by weight over time costs least (Smith 1956, Naval Research Logistics
/// Quarterly 3): so the rule finds the optimum, which is computed here by that order.
#[test]
fn without_releases_weight_over_time_is_optimal() {
    for seed in 1..=6 {
        let mut state = seed;
        let jobs: Vec<(u64, u64)> =
            (0..6).map(|_| (draw(&mut state, 9), draw(&mut state, 9))).collect();
        let table = |name: &str, of: &dyn Fn(&(u64, u64)) -> u64| {
            let rows = jobs.iter().enumerate().map(|(j, job)| format!("j{j} {}", of(job)));
            format!("{name} by j\n{}\n\n", rows.collect::<Vec<_>>().join("\n"))
        };
        let labels: Vec<String> = (0..jobs.len()).map(|j| format!("j{j}")).collect();
        let text = format!("J\n{}\n\n", labels.join(" "))
            + &table("p", &|job| job.0)
            + &table("w", &|job| job.1);
        let mut order = jobs.clone();
        order.sort_by(|a, b| (b.1 * a.0).cmp(&(a.1 * b.0)));
        let (mut now, mut cost) = (0, 0);
        for (time, weight) in order {
            now += time;
            cost += weight * now;
        }
        #[expect(clippy::cast_precision_loss, reason = "small whole numbers")]
        let cost = cost as f64;
        for rival in ["machine/big-m", "machine/parallel"] {
            assert_eq!(dispatched(rival, text.clone()), Some(cost), "{rival}, seed {seed}");
        }
    }
}

/// The orders of three jobs.
const ORDERS: [[usize; 3]; 6] = [[0, 1, 2], [0, 2, 1], [1, 0, 2], [1, 2, 0], [2, 0, 1], [2, 1, 0]];

/// When all is done if each machine takes the jobs in its order; `None` where that closes a circle.
fn length(times: &[[u64; 3]; 3], routes: &[[usize; 3]; 3], orders: [usize; 3]) -> Option<u64> {
    let mut done = [[None; 3]; 3];
    for _ in 0..9 {
        for job in 0..3 {
            for machine in 0..3 {
                let at = routes[job].iter().position(|&m| m == machine)?;
                let before = if at == 0 { Some(0) } else { done[job][routes[job][at - 1]] };
                let order = ORDERS[orders[machine]];
                let place = order.iter().position(|&j| j == job)?;
                let free = if place == 0 { Some(0) } else { done[order[place - 1]][machine] };
                let start = before.zip(free).map(|(before, free): (u64, u64)| before.max(free));
                done[job][machine] = start.map(|start| start + times[job][machine]);
            }
        }
    }
    let all: Option<Vec<u64>> = done.iter().flatten().copied().collect();
    all?.into_iter().max()
}

/// A dispatched job shop is as long as some schedule that enumeration knows, and near the shortest.
#[test]
fn a_dispatched_job_shop_is_among_all_schedules_and_near_the_shortest() {
    let mut best = 0;
    for seed in 1..=6 {
        let mut state = 100 + seed;
        let mut times = [[0; 3]; 3];
        times.iter_mut().flatten().for_each(|time| *time = draw(&mut state, 9));
        let mut routes = [[0; 3]; 3];
        for route in &mut routes {
            *route = ORDERS[usize::try_from(draw(&mut state, 6)).unwrap() - 1];
        }
        let (mut steps, mut table) = (String::new(), String::new());
        for (j, route) in routes.iter().enumerate() {
            for (m, time) in times[j].iter().enumerate() {
                table += &format!("j{j} m{m} {time}\n");
            }
            for pair in route.windows(2) {
                steps += &format!("j{j} m{} m{}\n", pair[0], pair[1]);
            }
        }
        let text = format!(
            "J\nj0 j1 j2\n\nM\nm0 m1 m2\n\nN by j, m, l\n{steps}\np by j, m\n{table}\nH = 81\n"
        );
        let all: Vec<u64> =
            (0..216).filter_map(|k| length(&times, &routes, [k % 6, k / 6 % 6, k / 36])).collect();
        let shortest = *all.iter().min().unwrap();
        let found = dispatched("job-shop/disjunctive", text).unwrap();
        #[expect(clippy::cast_precision_loss, reason = "small whole numbers")]
        let is = |length: u64| (length as f64 - found).abs() < 1e-6;
        assert!(all.iter().any(|&length| is(length)), "seed {seed}: {found} is no schedule");
        #[expect(clippy::cast_precision_loss, reason = "small whole numbers")]
        let least = shortest as f64;
        assert!(found <= 1.25 * least, "seed {seed}: {found} beside {shortest}");
        best += usize::from(is(shortest));
    }
    assert!(best >= 3, "the shortest was found {best} times of 6");
}
