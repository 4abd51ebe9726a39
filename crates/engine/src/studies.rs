//! Studies of a scenario: each is a plan that the scenario holds, run in slices over all rivals on
//! one instance.

use std::rc::Rc;

use record::results::ErrorReport;
use record::scenario::{Field, Rival, Role, Scenario, Study, letter};
use record::study::Report;
use study::{Plan, Running, Source, Subject};

use crate::load::{Loaded, formulation, load, states};
use crate::readings::Readings;

/// The kinds of study there are.
pub const KINDS: [&str; 11] = [
    "ladder",
    "families",
    "equivalence",
    "order",
    "tightening",
    "cuts",
    "numerics",
    "growth",
    "infeasibility",
    "symmetry",
    "variability",
];

/// A study on its way.
#[derive(Debug)]
pub struct StudyRun {
    running: Running<Vec<Report>>,
}

impl StudyRun {
    /// A study of a scenario on one of its instances, both by place. Rivals that cannot be run are
    /// left out; why is said with their own results.
    #[must_use]
    pub fn new(scenario: &Scenario, instance: usize, study: &Study) -> Self {
        Self::some(scenario, instance, study, None)
    }

    /// One cell of a growth study, by number from 0: its runs alone, nothing summed up.
    #[must_use]
    pub fn cell(scenario: &Scenario, instance: usize, study: &Study, cell: u32) -> Self {
        Self::some(scenario, instance, study, Some(cell))
    }

    fn some(scenario: &Scenario, instance: usize, study: &Study, cell: Option<u32>) -> Self {
        let plan = plan(scenario, study);
        let subjects = subjects(scenario, instance);
        let running = match plan {
            Err(why) => left(study, why),
            Ok(_) if subjects.is_empty() => left(study, "no rival could be run".to_owned()),
            Ok(plan) => begun(study, subjects, plan, cell),
        };
        Self { running }
    }

    /// Goes on for about `ticks`; whether it is at its end.
    pub fn advance(&mut self, ticks: u64) -> bool {
        self.running.advance(ticks)
    }

    /// What came out, once it is at its end.
    pub fn take(&mut self) -> Vec<Report> {
        self.running.take().unwrap_or_default()
    }

    /// What is being done, as a clause, and how many models are solved.
    #[must_use]
    pub fn doing(&self) -> (String, u32) {
        (self.running.doing(), self.running.solved())
    }

    /// Non-zeros touched so far.
    #[must_use]
    pub fn ticks(&self) -> u64 {
        self.running.ticks()
    }
}

fn left(study: &Study, why: String) -> Running<Vec<Report>> {
    let report = Report::Left { kind: study.kind.clone(), why };
    Running::new(|_| async { vec![report] })
}

fn begun(
    study: &Study,
    subjects: Vec<Subject>,
    plan: Plan,
    cell: Option<u32>,
) -> Running<Vec<Report>> {
    let kind = study.kind.clone();
    Running::new(|desk| async move {
        match kind.as_str() {
            "ladder" => vec![Report::Ladder(study::ladder::ladder(desk, subjects, plan).await)],
            "families" => {
                vec![Report::Families(study::families::families(desk, subjects, plan).await)]
            }
            "tightening" => {
                vec![Report::Tightening(study::tightening::tightening(desk, subjects, plan).await)]
            }
            "cuts" => vec![Report::Cuts(study::cuts::cuts(desk, subjects, plan).await)],
            "numerics" => {
                vec![Report::Numerics(study::numerics::numerics(desk, subjects, plan).await)]
            }
            "infeasibility" => {
                let found = study::infeasibility::infeasibility(desk, subjects, plan).await;
                vec![Report::Infeasibility(found)]
            }
            "symmetry" => {
                vec![Report::Symmetry(study::symmetry::symmetry(desk, subjects, plan).await)]
            }
            "variability" => {
                let found = study::variability::variability(desk, subjects, plan).await;
                vec![Report::Variability(Box::new(found))]
            }
            "growth" => {
                let growth = study::growth::growth(desk, subjects, plan, cell).await;
                vec![Report::Growth(Box::new(growth))]
            }
            "order" => {
                let orders = study::order::order(desk, subjects, plan).await;
                orders.into_iter().map(|one| Report::Order(Box::new(one))).collect()
            }
            "equivalence" => {
                let verdicts = study::court::court(desk, subjects, plan).await;
                verdicts.into_iter().map(|one| Report::Equivalence(Box::new(one))).collect()
            }
            _ => vec![Report::Left { why: unknown(&kind), kind }],
        }
    })
}

/// How many cells the growth studies of a scenario have on one of its instances, each with its place
/// among the scenario's studies.
///
/// # Errors
/// A field that a study does not have.
pub fn cells(scenario: &Scenario, instance: usize) -> Result<Vec<(usize, u32)>, String> {
    let subjects = subjects(scenario, instance);
    let growth = scenario.studies.iter().enumerate().filter(|(_, study)| study.kind == "growth");
    growth
        .map(|(place, study)| Ok((place, study::growth::cells(&subjects, &plan(scenario, study)?))))
        .collect()
}

/// A growth study from all of its cells, however they were made.
#[must_use]
pub fn gathered(growth: record::study::Growth) -> record::study::Growth {
    study::growth::summed_up(growth)
}

fn unknown(kind: &str) -> String {
    format!("there is no study \"{kind}\"; there are {}", KINDS.join(", "))
}

/// The rivals that become a model.
fn subjects(scenario: &Scenario, instance: usize) -> Vec<Subject> {
    let mut readings = Readings::default();
    let rivals = scenario.rivals.iter().enumerate();
    let all =
        rivals.map(|(place, rival)| subject(scenario, (instance, place), rival, &mut readings));
    all.filter_map(Result::ok).collect()
}

fn subject(
    scenario: &Scenario,
    (instance, place): (usize, usize),
    rival: &Rival,
    readings: &mut Readings,
) -> Result<Subject, ErrorReport> {
    let Loaded { title, model, .. } = load(scenario, (instance, place))?;
    let entry = rival.from.as_deref().and_then(catalogue::find);
    let relaxation = rival.role == Some(Role::Relaxation)
        || entry.as_ref().is_some_and(|entry| entry.relaxation);
    let source = match scenario.instances().nth(instance) {
        Some(text) if rival.mps.is_none() => {
            let reading = readings.read(text)?;
            reading.instance.clone().map(|data| {
                let (words, _) = formulation(rival)?;
                Ok(Source {
                    text: Rc::from(words.as_str()),
                    instance: Rc::new(data),
                    bind: text.bind.clone(),
                    states: states(rival),
                })
            })
        }
        _ => None,
    };
    let source = source.transpose()?;
    Ok(Subject { letter: letter(place), title, model, entry, relaxation, source })
}

/// The limits and seeds that a study's fields ask for.
///
/// # Errors
/// A field that it does not have, or of another kind.
fn plan(scenario: &Scenario, study: &Study) -> Result<Plan, String> {
    let mut plan =
        Plan { seed: scenario.seed, best_known: scenario.run.best_known, ..Plan::default() };
    for (name, field) in &study.fields {
        match name.as_str() {
            "nodes" => plan.nodes = whole(name, field)?,
            "seed" => plan.seed = u64::from(whole(name, field)?),
            "duels" => plan.duels = whole(name, field)?,
            "plans" => plan.plans = whole(name, field)?,
            "orders" => plan.orders = whole(name, field)?,
            "rows" => plan.rows = whole(name, field)?,
            "sizes" => {
                plan.sizes = list(name, field, whole)?;
                plan.growth.sizes.clone_from(&plan.sizes);
            }
            "seeds" => plan.growth.seeds = list(name, field, seed)?,
            "classes" => plan.growth.classes = list(name, field, class)?,
            "production" => plan.growth.production = Some(whole(name, field)?),
            "shared" => plan.shared = list(name, field, text)?,
            "mutants" => plan.mutants = flag(name, field)?,
            _ => {
                let known = "nodes, seed, duels, plans, rows, orders, sizes, seeds, classes, \
                             production, shared, mutants";
                return Err(format!("the study has no \"{name}\"; there are {known}"));
            }
        }
    }
    Ok(plan)
}

fn whole(name: &str, field: &Field) -> Result<u32, String> {
    match field {
        Field::Whole(value) => {
            u32::try_from(*value).map_err(|_| format!("\"{name}\" is too large, or negative"))
        }
        _ => Err(format!("\"{name}\" must be a whole number")),
    }
}

fn seed(name: &str, field: &Field) -> Result<u64, String> {
    whole(name, field).map(u64::from)
}

fn class(name: &str, field: &Field) -> Result<catalogue::Class, String> {
    let text = text(name, field)?;
    catalogue::Class::from_name(&text).ok_or_else(|| {
        let known = catalogue::Class::ALL.map(catalogue::Class::name).join(", ");
        format!("there is no class \"{text}\" of data; there are {known}")
    })
}

fn text(name: &str, field: &Field) -> Result<String, String> {
    match field {
        Field::Text(text) => Ok(text.clone()),
        _ => Err(format!("\"{name}\" must be a text")),
    }
}

fn flag(name: &str, field: &Field) -> Result<bool, String> {
    match field {
        Field::Flag(flag) => Ok(*flag),
        _ => Err(format!("\"{name}\" must be true or false")),
    }
}

fn list<T>(
    name: &str,
    field: &Field,
    one: fn(&str, &Field) -> Result<T, String>,
) -> Result<Vec<T>, String> {
    match field {
        Field::List(fields) => fields.iter().map(|field| one(name, field)).collect(),
        _ => Err(format!("\"{name}\" must be a list")),
    }
}
