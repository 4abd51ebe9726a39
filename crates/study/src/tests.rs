//! Studies on small rivals whose answers are known.

use std::collections::BTreeMap;
use std::future::Future;
use std::rc::Rc;

use catalogue::{Class, generate};
use instance::{Instance, Reader, read};
use record::study::{EquivalenceKind, EquivalenceLevel, OrderLevel, Relation};

mod infeasibility;
mod objective;
mod rows;
mod statistics;
mod symmetry;
mod variability;

use crate::{Desk, Plan, Running, Source, Subject, court, model_of};

/// A study driven to its end in slices of `ticks`.
fn driven<T, F, W>(ticks: u64, study: F) -> T
where
    F: FnOnce(Rc<Desk>) -> W,
    W: Future<Output = T> + 'static,
{
    let mut running = Running::new(study);
    while !running.advance(ticks) {}
    running.take().expect("it is at its end")
}

fn instance(text: &str) -> Rc<Instance> {
    Rc::new(read(text, None).instance.unwrap_or_else(|| Instance::new(Reader::Blocks)))
}

fn subject(letter: &str, text: &str, instance: &Rc<Instance>) -> Subject {
    let states = BTreeMap::new();
    let model = model_of(text, instance, &BTreeMap::new(), &states).expect("a model");
    Subject {
        letter: letter.to_owned(),
        title: model.title().to_owned(),
        model: Rc::new(model),
        entry: None,
        relaxation: false,
        source: Some(Source {
            text: Rc::from(text),
            instance: Rc::clone(instance),
            bind: BTreeMap::new(),
            states,
        }),
    }
}

fn shipped(letter: &str, id: &str, instance: &Rc<Instance>) -> Subject {
    let entry = catalogue::find(id).expect("it is shipped");
    Subject { entry: Some(entry.clone()), ..subject(letter, entry.text, instance) }
}

fn stops(count: u32) -> Rc<Instance> {
    instance(&generate("atsp", count, Class::Uniform, 1).expect("an instance"))
}

#[test]
fn right_rivals_are_the_same_and_each_broken_one_is_noticed() {
    let data = stops(7);
    let rivals = ["atsp/labels", "atsp/subtours"];
    let subjects: Vec<Subject> =
        rivals.iter().zip(["A", "B"]).map(|(id, letter)| shipped(letter, id, &data)).collect();
    let plan = Plan { sizes: vec![3, 4, 5], duels: 3, ..Plan::default() };
    let verdicts = driven(100_000, |desk| court::court(desk, subjects, plan));
    let verdict = &verdicts[0];
    assert_eq!(
        (verdict.equivalent, verdict.level, verdict.kind),
        (Some(true), EquivalenceLevel::Enumerated, EquivalenceKind::Sets),
        "{verdict:?}"
    );
    // Rounds through n stops: (n − 1)!, so 24 on five.
    assert!(verdict.evidence.iter().any(|one| one.test == "every plan" && one.count == 24));
    assert!(verdict.counterexample.is_none());
    for mutant in &verdict.mutants {
        // With every closed tour forbidden, one of the two degree families follows from the other.
        let idle = mutant.rival == "B" && mutant.without != "subtour";
        assert_eq!(mutant.caught, Some(!idle), "{mutant:?}");
    }
}

#[test]
fn labels_with_too_small_a_coefficient_are_caught_on_few_stops() {
    let data = stops(6);
    let text = catalogue::find("atsp/labels").expect("it is shipped").text;
    // The label rows let a drive go up by one label: n − 1 is needed, n − 2 is one too few.
    let broken = text.replace("(n−1) x_{i,j} ≤ n − 2", "(n−2) x_{i,j} ≤ n − 3");
    assert_ne!(broken, text);
    let subjects = vec![shipped("A", "atsp/subtours", &data), subject("B", &broken, &data)];
    let plan = Plan { mutants: false, ..Plan::default() };
    let verdict = driven(1_000_000, |desk| court::court(desk, subjects, plan)).remove(0);
    assert_eq!(verdict.equivalent, Some(false), "{verdict:?}");
    let example = verdict.counterexample.expect("a plan that labels refuse");
    assert_eq!((example.admitted_by.as_str(), example.refused_by.as_str()), ("A", "B"));
    assert!(example.size.is_some_and(|size| size <= 4), "{:?}", example.size);
    assert!(example.violated.contains(&"order".to_owned()), "{:?}", example.violated);
    // The stops on which it shows, the rows that the plan cannot hold with, and a plan beside it.
    assert_eq!(example.elements.len() as u32, example.size.expect("a part"), "{example:?}");
    assert!(example.rows.iter().any(|row| row.family == "order"), "{example:?}");
    assert!(example.rows.iter().all(|row| row.says.contains('≤') || row.says.contains('=')));
    let stops = |plan: &[record::results::SolutionEntry]| plan.len();
    assert_eq!(stops(&example.plan), example.elements.len(), "a round: {example:?}");
    assert!(example.nearest.is_empty() || example.nearest != example.plan, "{example:?}");
}

/// Both rivals name a `y`, and mean another thing by it: as long as every common name counts they are
/// not the same problem; once `shared` says that plans are told apart by `x` they are.
#[test]
fn chosen_variables_decide_what_is_the_same() {
    let data = stops(3);
    let text = |counted: &str| {
        format!(
            "Choice\ndata\n V\nminimise\n Σ_{{i ∈ V}} x_i\nsubject to\n Σ_{{i ∈ V}} x_i ≥ 1 (some)\n \
             y_i = {counted} ∀ i ∈ V (counted)\n x_i, y_i ∈ {{0,1}} ∀ i ∈ V\n"
        )
    };
    let verdict = |shared: &[&str]| {
        let subjects =
            vec![subject("A", &text("x_i"), &data), subject("B", &text("1 − x_i"), &data)];
        let shared = shared.iter().map(|name| (*name).to_owned()).collect();
        let plan = Plan { mutants: false, shared, ..Plan::default() };
        driven(1_000_000, |desk| court::court(desk, subjects, plan)).remove(0)
    };
    let every = verdict(&[]);
    assert!(every.counterexample.is_some() && every.kind != EquivalenceKind::Sets, "{every:?}");
    let chosen = verdict(&["x"]);
    assert!(chosen.counterexample.is_none(), "{chosen:?}");
    assert_eq!((chosen.equivalent, chosen.kind), (Some(true), EquivalenceKind::Sets), "{chosen:?}");
    assert!(chosen.shared.iter().all(|(name, _)| name == "x"), "{chosen:?}");
}

/// Cutting one way round a triangle: a plan that costs −1 more either way is none of the other.
const OPEN: &str = "Cover
data
  J  jobs
  c_j  ∀ j ∈ J  cost
minimise
  Σ_{j ∈ J} c_j x_j
subject to
  Σ_{j ∈ J} x_j ≥ 1                     (some)
  x_j ∈ {0, 1}  ∀ j ∈ J
";

#[test]
fn covering_and_partitioning_agree_for_non_negative_costs_alone() {
    let data = instance("J\na b c d\n\nc by j\na 3\nb 2\nc 4\nd 5\n");
    let exactly = OPEN.replace("x_j ≥ 1", "x_j = 1");
    let subjects = vec![subject("A", OPEN, &data), subject("B", &exactly, &data)];
    let verdict = driven(50_000, |desk| court::court(desk, subjects, Plan::default())).remove(0);
    assert_eq!(
        (verdict.equivalent, verdict.kind),
        (Some(true), EquivalenceKind::NonNegativeCosts),
        "{verdict:?}"
    );
    let example = verdict.counterexample.expect("two jobs at once");
    assert_eq!((example.admitted_by.as_str(), example.size), ("A", Some(2)));
    // Two of the four jobs tell it, and the one row says by how much.
    assert_eq!(example.elements, ["a", "b"]);
    let [row] = example.rows.as_slice() else { panic!("{example:?}") };
    assert_eq!(row.says, "x[a] + x[b] = 1, and the plan gives 2");
    assert_eq!(example.nearest.len(), 1, "one of the two alone: {example:?}");
}

#[test]
fn what_comes_out_is_the_same_for_every_slice() {
    let study = |ticks| {
        let data = stops(5);
        let subjects =
            vec![shipped("A", "atsp/labels", &data), shipped("B", "atsp/subtours", &data)];
        let plan = Plan { sizes: vec![4], duels: 2, ..Plan::default() };
        let (again, further) = (subjects.clone(), plan.clone());
        let verdicts = driven(ticks, |desk| court::court(desk, subjects, plan));
        let ladder = driven(ticks, |desk| crate::ladder::ladder(desk, again, further));
        (verdicts, ladder)
    };
    let whole = study(u64::MAX);
    for ticks in [1, 777, 50_000] {
        assert_eq!(study(ticks), whole);
    }
}

/// On four stops the sizes 6, 8, 10 and 12 were the whole instance twenty times over, each time counted as
/// another: the rivals were told apart by one instance. No part is larger than the instance, and each counts
/// once.
#[test]
fn parts_that_are_the_same_instance_count_once() {
    let study = |sizes: &[u32]| {
        let data = stops(4);
        let subjects =
            vec![shipped("A", "atsp/labels", &data), shipped("B", "atsp/subtours", &data)];
        let grounds = vec![crate::Ground { title: String::new(), subjects }];
        let growth = crate::GrowthPlan { sizes: sizes.to_vec(), ..Default::default() };
        let plan = Plan { growth, ..Plan::default() };
        let asked = 5 * sizes.len();
        (asked, driven(50_000, |desk| crate::growth::growth(desk, grounds, plan, None)))
    };
    let (asked, whole) = study(&[6, 8, 10, 12]);
    assert_eq!((whole.of, whole.cells.len(), whole.again as usize), (2, 2, asked - 1));
    assert!(whole.cells.iter().all(|cell| cell.size == 4), "{whole:?}");
    assert_eq!((whole.pairs[0].instances, whole.pairs[0].distinguishable), (1, false));
    // Of four stops there are four parts of three; five seeds cannot draw five.
    let (asked, parts) = study(&[3, 4]);
    assert_eq!(parts.pairs[0].instances as usize + parts.again as usize, asked);
    assert!(parts.pairs[0].instances <= 5, "{parts:?}");
    assert_eq!(parts.of as usize, parts.cells.len());
}

/// A run that is stopped for its work stops at the same step for every slice, is no solved one, and has
/// done about that much.
#[test]
fn a_run_is_stopped_for_its_work_where_it_is_for_every_slice() {
    let study = |ticks, work| {
        let subjects = vec![shipped("A", "atsp/labels", &stops(9))];
        let grounds = vec![crate::Ground { title: String::new(), subjects }];
        let growth = crate::GrowthPlan { sizes: vec![9], seeds: vec![1], ..Default::default() };
        let plan = Plan { work, growth, ..Plan::default() };
        driven(ticks, |desk| crate::growth::growth(desk, grounds, plan, None)).cells.remove(0)
    };
    let whole = study(u64::MAX, None);
    let half = study(u64::MAX, Some(whole.work / 2));
    assert!(whole.solved && !half.solved, "{whole:?} {half:?}");
    assert!(
        half.work >= whole.work / 2 && half.work < whole.work,
        "{} of {}",
        half.work,
        whole.work
    );
    for ticks in [1, 999, 70_000] {
        assert_eq!(study(ticks, Some(whole.work / 2)), half);
    }
}

#[test]
fn leaving_a_family_out_is_the_bound_of_the_text_without_it() {
    let data = stops(8);
    let entry = catalogue::find("atsp/labels").expect("it is shipped");
    let subjects = vec![shipped("A", "atsp/labels", &data)];
    let plan = Plan::default();
    let found = driven(1_000_000, |desk| crate::families::families(desk, subjects, plan));
    let rival = &found.rivals[0];
    for share in &rival.families {
        let label = format!("({})", share.name);
        let without: Vec<&str> =
            entry.text.lines().filter(|line| !line.trim_end().ends_with(&label)).collect();
        assert_eq!(without.len() + 1, entry.text.lines().count(), "{label}");
        let bare = subject("A", &(without.join("\n") + "\n"), &data);
        let bound = driven(1_000_000, |desk| async move { desk.relax(&bare.model).await.bound });
        assert!(close(bound, share.without), "{}: {bound:?} {share:?}", share.name);
    }
    // Efficiency (Shapley 1953): the shares add up to what all families gain together.
    let shares: f64 = rival.families.iter().filter_map(|share| share.shapley).sum();
    let gained = rival.bound.zip(rival.bare).map(|(bound, bare)| bound - bare);
    assert!(close(Some(shares), gained), "{shares} {gained:?}");
}

fn close(a: Option<f64>, b: Option<f64>) -> bool {
    a.zip(b).is_some_and(|(a, b)| (a - b).abs() <= 1e-7 * (1.0 + a.abs()))
}

/// Open sites, each client served by open ones; the links one by one, or added up by site.
const LINKED: &str = "Sites
data
  I  sites
  J  clients
  f_i  ∀ i ∈ I  cost of opening
  c_{i,j}  ∀ i ∈ I, j ∈ J  cost of serving
minimise
  Σ_{i ∈ I} f_i y_i + Σ_{i ∈ I} Σ_{j ∈ J} c_{i,j} x_{i,j}
subject to
  Σ_{i ∈ I} x_{i,j} = 1       ∀ j ∈ J           (serve)
  x_{i,j} ≤ y_i               ∀ i ∈ I, j ∈ J    (link)
  x_{i,j} ≥ 0                 ∀ i ∈ I, j ∈ J
  y_i ∈ {0, 1}                ∀ i ∈ I
";

#[test]
fn added_up_links_are_certified_to_be_weaker() {
    let data = instance(
        "I\np q\n\nJ\n1 2 3\n\nf by i\np 4\nq 5\n\nc by i, j\n\
         p 1 1\np 2 3\np 3 6\nq 1 5\nq 2 2\nq 3 1\n",
    );
    let added = LINKED.replace(
        "  x_{i,j} ≤ y_i               ∀ i ∈ I, j ∈ J    (link)",
        "  Σ_{j ∈ J} x_{i,j} ≤ |J| y_i  ∀ i ∈ I           (link)",
    );
    assert_ne!(added, LINKED);
    let subjects = vec![subject("A", LINKED, &data), subject("B", &added, &data)];
    let orders = driven(10_000, |desk| crate::order::order(desk, subjects, Plan::default()));
    let order = &orders[0];
    assert_eq!((order.relation, order.level), (Relation::NeverWeaker, OrderLevel::Certified));
    let [forth, back] = &order.certificates;
    assert_eq!((forth.holds, forth.proved), (Some(true), forth.rows));
    // A single link can be broken over the added-up relaxation, by at most 1 − 1/|J|.
    assert_eq!(back.holds, Some(false));
    assert!(close(back.violation, Some(2.0 / 3.0)), "{back:?}");
}

#[test]
fn a_switch_is_tightened_to_what_the_data_need_and_loses_no_plan() {
    let text = "Lots
data
  T  periods
  d_t  ∀ t ∈ T  demand
minimise
  Σ_{t ∈ T} 10 y_t + Σ_{t ∈ T} 2 q_t
subject to
  q_t ≤ 1000 y_t        ∀ t ∈ T  (switch)
  q_t ≥ d_t             ∀ t ∈ T  (meet)
  0 ≤ q_t ≤ 40          ∀ t ∈ T
  y_t ∈ {0, 1}          ∀ t ∈ T
";
    let data = instance("T\na b\n\nd by t\na 30\nb 20\n");
    let subjects = vec![subject("A", text, &data)];
    let (again, plan) = (subjects.clone(), Plan::default());
    let found =
        driven(9_999, |desk| crate::tightening::tightening(desk, subjects, plan)).rivals.remove(0);
    let family = &found.families[0];
    assert_eq!((family.name.as_str(), family.rows, family.tightened_by_data), ("switch", 2, 2));
    assert!((family.largest - 1000.0).abs() < 1e-9 && (family.largest_by_data - 40.0).abs() < 1e-9);
    // 2·50 + 10·(30 + 20)/1000, and with 40 in place of 1000.
    assert!(
        close(found.bound, Some(100.5)) && close(found.bound_by_data, Some(112.5)),
        "{found:?}"
    );
    assert_eq!((found.range, found.range_after), ((1.0, 1000.0), (1.0, 40.0)));
    assert_eq!(found.cutoff, Some(120.0));
    assert!(found.too_small.is_empty(), "{found:?}");
    let rungs = driven(9_999, |desk| crate::ladder::ladder(desk, again, Plan::default()));
    let bounds: Vec<f64> = rungs.rivals[0].rungs.iter().filter_map(|rung| rung.bound).collect();
    let optimum = rungs.reference.expect("a plan");
    assert!((optimum - 120.0).abs() < 1e-9, "{rungs:?}");
    for bound in bounds {
        assert!(bound <= optimum + 1e-7 && bound >= 100.5 - 1e-7, "{bound}");
    }
}

/// Two lots of at most 30 in all can be made at once, so that 20 are not enough for either; and of all
/// plans only those with one lot are as good as the best.
#[test]
fn a_plan_proves_a_coefficient_too_small_and_a_cutoff_needs_less() {
    let text = "Lots
data
  T  periods
maximise
  Σ_{t ∈ T} 3 q_t − Σ_{t ∈ T} y_t
subject to
  q_t ≤ 20 y_t                    ∀ t ∈ T  (switch)
  Σ_{t ∈ T} q_t ≤ 30              (all)
  0 ≤ q_t ≤ 25                    ∀ t ∈ T
  y_t ∈ {0, 1}                    ∀ t ∈ T
";
    let subjects = vec![subject("A", text, &instance("T\na b\n"))];
    let found =
        driven(9_999, |desk| crate::tightening::tightening(desk, subjects, Plan::default()));
    let rival = &found.rivals[0];
    let [shown] = rival.too_small.as_slice() else { panic!("{rival:?}") };
    // All else admits 25 in one period.
    assert_eq!((shown.row.as_str(), shown.switch.as_str()), ("switch[a]", "y[a]"));
    assert!(close(Some(shown.reaches), Some(25.0)) && close(Some(shown.needs), Some(25.0)));
    assert!(close(Some(shown.allows), Some(20.0)), "{shown:?}");
    assert!(
        shown.plan.iter().any(|entry| entry.variable == "q" && (entry.value - 25.0).abs() < 1e-6)
    );
    // Two switches and 30 units: 3·30 − 2 = 88.
    assert!(close(rival.cutoff, Some(88.0)), "{rival:?}");
    assert_eq!(rival.switches.len(), 2);
    assert!(rival.switches.iter().all(|row| row.by_cutoff <= row.by_relaxation + 1e-9));
    assert!(rival.bound_by_cutoff.is_some_and(|bound| bound >= 88.0 - 1e-6), "{rival:?}");
}

#[test]
fn numerics_name_the_row_that_leaks() {
    let text = "Switch
data
  T  periods
minimise
  Σ_{t ∈ T} y_t
subject to
  q_t ≤ 10000000 y_t    ∀ t ∈ T  (switch)
  q_t ≥ 1               ∀ t ∈ T  (meet)
  q_t ≥ 0               ∀ t ∈ T
  y_t ∈ {0, 1}          ∀ t ∈ T
";
    let data = instance("T\na b\n\nd by t\na 30\nb 20\n");
    let subjects = vec![subject("A", text, &data)];
    let found = driven(1, |desk| crate::numerics::numerics(desk, subjects, Plan::default()));
    let rival = &found.rivals[0];
    // 10⁷ · 10⁻⁶: ten units at a switch that counts as closed.
    assert!((rival.leak.0 - 10.0).abs() < 1e-9 && rival.leak.1 == "switch[a]", "{rival:?}");
    assert!(rival.verdicts.iter().any(|verdict| verdict.contains("switch[a]")), "{rival:?}");
}

#[test]
fn few_classes_of_cuts_are_chosen_that_gain_most_of_what_all_gain() {
    let data = stops(9);
    let subjects = vec![shipped("A", "atsp/labels", &data)];
    let again = subjects.clone();
    let rows = subjects[0].model.row_count();
    let found =
        driven(50_000, |desk| crate::cuts::cuts(desk, subjects, Plan::default())).rivals.remove(0);
    let (bound, all) = (found.bound.expect("a bound"), found.with_all.expect("a bound"));
    // Cuts raise the bound of a shortest round, never over the optimum.
    let optimum = driven(50_000, |desk| async move {
        desk.solve(&again[0].model, Plan::default().search()).await.incumbent
    });
    assert!(bound < all && optimum.is_some_and(|optimum| all <= optimum + 1e-6), "{found:?}");
    let (_, reached) = found.chosen.last().expect("some class gains").clone();
    assert!(reached - bound >= 0.9 * (all - bound) - 1e-9, "{found:?}");
    assert!(found.chosen.len() <= found.classes.len());
    for class in &found.classes {
        assert!(class.added > 0 && !found.idle.contains(&class.class), "{class:?}");
        assert!(!class.separation.is_empty() && !class.why.is_empty(), "{class:?}");
        assert!(class.density.is_none_or(|share| share > 0.0 && share <= 1.0), "{class:?}");
    }
    // As a rival with the cuts as rows: the bound that was promised, and no plan is lost.
    let (made, _) = model::mps::read(&found.model).expect("a model");
    assert_eq!(made.row_count(), rows + found.rows as usize);
    let made = Rc::new(made);
    let solved =
        driven(50_000, |desk| async move { desk.solve(&made, Plan::default().search()).await });
    assert!(close(solved.bound, Some(reached)), "{:?} for {reached}", solved.bound);
    assert!(close(solved.incumbent, optimum), "{:?} for {optimum:?}", solved.incumbent);
}

#[test]
fn the_dual_share_is_a_range_where_multipliers_are_not_unique_and_0_where_sides_are() {
    // min 3x with x ≥ 2 said twice: either row may carry the whole bound of 6.
    let text = "Twice\nminimise\n  3 x\nsubject to\n  x ≥ 2  (once)\n  x ≥ 2  (again)\n  x + 1 y ≥ 1  (idle)\n  x − y ≥ 0  (zero)\n  0 ≤ y ≤ 9\n  x ≥ 0\n";
    let subjects = vec![subject("A", text, &instance("T\na b\n"))];
    let found = driven(9_999, |desk| crate::families::families(desk, subjects, Plan::default()));
    let share = |name: &str| {
        let family = found.rivals[0].families.iter().find(|one| one.name == name);
        family.expect("a family").dual.expect("a share")
    };
    for name in ["once", "again"] {
        let (low, high) = share(name);
        assert!(close(low, Some(0.0)) && close(high, Some(6.0)), "{low:?} {high:?}");
    }
    let nothing = (Some(0.0), Some(0.0));
    assert_eq!((share("idle"), share("zero")), (nothing, nothing));
}

/// Without `cap` the objective has no end, so that no order of adding families has a value.
#[test]
fn where_a_coalition_is_unbounded_there_is_no_share_and_that_is_said() {
    let text = "Two\nminimise\n  y − x\nsubject to\n  x ≤ 3  (cap)\n  x + y ≥ 1  (some)\n  0 ≤ y ≤ 9\n  x ≥ 0\n";
    let subjects = vec![subject("A", text, &instance("T\na b\n"))];
    let found = driven(9_999, |desk| crate::families::families(desk, subjects, Plan::default()));
    let rival = &found.rivals[0];
    assert!(rival.no_shapley.contains("without a bound"), "{rival:?}");
    assert_eq!((rival.bound, rival.bare), (Some(-3.0), None));
    let [cap, some] = rival.families.as_slice() else { panic!("{rival:?}") };
    assert_eq!((cap.without, cap.lost, cap.alone), (None, None, Some(-3.0)), "{cap:?}");
    assert_eq!((some.without, some.lost, some.alone), (Some(-3.0), Some(0.0), None), "{some:?}");
    assert!(cap.shapley.is_none() && some.shapley.is_none());
}

/// With the sites chosen each client takes its cheapest open one, so that `x` need not be said to be whole
/// (Krarup, Pruzan 1983, European Journal of Operational Research 12); where it is, `y` need not, for it is
/// at least as large. Three sites, each the cheap one of two of three clients: half of each costs 3/2,
/// whole ones 2.
#[test]
fn which_variables_may_be_fractional_is_known_of_sites() {
    let data = instance(
        "I\np q r\n\nJ\n1 2 3\n\nf by i\np 1\nq 1\nr 1\n\nc by i, j\n\
         p 1 0\np 2 0\np 3 9\nq 1 0\nq 2 9\nq 3 0\nr 1 9\nr 2 0\nr 3 0\n",
    );
    let text = LINKED.replace("  x_{i,j} ≥ 0   ", "  x_{i,j} ∈ {0, 1}");
    assert_ne!(text, LINKED);
    let subjects = vec![subject("A", &text, &data), subject("B", LINKED, &data)];
    let found = driven(9_999, |desk| crate::families::families(desk, subjects, Plan::default()));
    let of = |rival: usize, name: &str| {
        let share = found.rivals[rival].integrality.iter().find(|one| one.variable == name);
        let share = share.unwrap_or_else(|| panic!("{name}: {found:?}"));
        (share.columns, share.optimum, share.free)
    };
    assert_eq!(of(0, "x"), (9, Some(2.0), Some(true)));
    assert_eq!(of(0, "y"), (3, Some(2.0), Some(true)));
    assert_eq!(of(1, "y"), (3, Some(1.5), Some(false)));
}
