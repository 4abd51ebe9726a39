//! Studies of a scenario: each is a plan that the scenario holds, run in slices over all rivals on
//! one instance, or over all instances where one result speaks of them together.

use std::rc::Rc;

use record::scenario::{Field, Scenario, Study};
use record::study::Report;
use study::production::Pasted;
use study::{Desk, Ground, Plan, Running, Subject};

use crate::gather::{Gathering, grounds_at_once};
use crate::native::instance_title;

/// The kinds of study there are.
pub const KINDS: [&str; 12] = [
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
    "production",
];

/// Whether a study goes over all instances of a scenario at once: then it is made once, on the first.
#[must_use]
pub fn is_over_all(kind: &str) -> bool {
    matches!(kind, "growth" | "variability")
}

/// A study on its way.
#[derive(Debug)]
pub struct StudyRun {
    stage: Stage,
}

/// How far it is.
#[derive(Debug)]
enum Stage {
    /// Its rivals become models.
    Gathering(Box<Begun>),
    /// It runs.
    Running(Running<Vec<Report>>),
}

/// A study whose rivals become models.
#[derive(Debug)]
struct Begun {
    study: Study,
    plan: Plan,
    cell: Option<u32>,
    pasted: Pasted,
    gathering: Gathering,
    /// Those that are there, instance by instance.
    grounds: Vec<Ground>,
    /// How many instances it goes over.
    instances: usize,
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
        let stage = match plan(scenario, study) {
            Err(why) => Stage::Running(left(study, why)),
            Ok(plan) => {
                let over_all = is_over_all(&study.kind);
                let (first, instances) =
                    if over_all { (0, scenario.instances().count()) } else { (instance, 1) };
                Stage::Gathering(Box::new(Begun {
                    study: study.clone(),
                    plan,
                    cell,
                    pasted: pasted(scenario, instance, study),
                    gathering: Gathering::new(scenario.clone(), first),
                    grounds: Vec::new(),
                    instances,
                }))
            }
        };
        Self { stage }
    }

    /// Goes on for about `ticks`; whether it is at its end.
    pub fn advance(&mut self, ticks: u64) -> bool {
        let begun = match &mut self.stage {
            Stage::Running(running) => return running.advance(ticks),
            Stage::Gathering(begun) => begun,
        };
        if begun.gathering.advance(ticks) {
            return false;
        }
        begun.grounds.push(begun.gathering.ground());
        if begun.grounds.len() < begun.instances {
            begun.gathering = begun.gathering.next();
            return false;
        }
        let grounds = std::mem::take(&mut begun.grounds);
        let none = grounds.iter().all(|ground| ground.subjects.is_empty());
        let running = if none && begun.study.kind != "production" {
            left(&begun.study, "no rival could be run".to_owned())
        } else {
            let asked = (begun.cell, std::mem::take(&mut begun.pasted));
            self::begun(&begun.study, grounds, begun.plan.clone(), asked)
        };
        self.stage = Stage::Running(running);
        false
    }

    /// What came out, once it is at its end.
    pub fn take(&mut self) -> Vec<Report> {
        match &mut self.stage {
            Stage::Running(running) => running.take().unwrap_or_default(),
            Stage::Gathering(_) => Vec::new(),
        }
    }

    /// What is being done, as a clause, and how many models are solved.
    #[must_use]
    pub fn doing(&self) -> (String, u32) {
        match &self.stage {
            Stage::Running(running) => (running.doing(), running.solved()),
            Stage::Gathering(begun) => (begun.gathering.doing(), 0),
        }
    }

    /// Non-zeros touched so far.
    #[must_use]
    pub fn ticks(&self) -> u64 {
        match &self.stage {
            Stage::Running(running) => running.ticks(),
            Stage::Gathering(_) => 0,
        }
    }
}

/// The pasted table of a study, and where it is looked at from.
fn pasted(scenario: &Scenario, instance: usize, study: &Study) -> Pasted {
    let text = match study.fields.get("table") {
        Some(Field::Text(text)) => text.clone(),
        _ => String::new(),
    };
    Pasted { text, instance: instance_title(scenario, instance), first: instance == 0 }
}

fn left(study: &Study, why: String) -> Running<Vec<Report>> {
    let report = Report::Left { kind: study.kind.clone(), why };
    Running::new(|_| async { vec![report] })
}

fn begun(
    study: &Study,
    grounds: Vec<Ground>,
    plan: Plan,
    (cell, pasted): (Option<u32>, Pasted),
) -> Running<Vec<Report>> {
    let kind = study.kind.clone();
    Running::new(|desk| async move {
        if is_over_all(&kind) {
            return over_all(&kind, desk, grounds, (plan, cell)).await;
        }
        let subjects: Vec<Subject> =
            grounds.into_iter().flat_map(|ground| ground.subjects).collect();
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
            "production" => {
                let found = study::production::production(desk, subjects, (plan, pasted)).await;
                vec![Report::Production(Box::new(found))]
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

/// A study that goes over all instances.
async fn over_all(
    kind: &str,
    desk: Rc<Desk>,
    grounds: Vec<Ground>,
    (plan, cell): (Plan, Option<u32>),
) -> Vec<Report> {
    if kind == "growth" {
        let found = study::growth::growth(desk, grounds, plan, cell).await;
        return vec![Report::Growth(Box::new(found))];
    }
    let found = study::variability::variability(desk, grounds, plan).await;
    vec![Report::Variability(Box::new(found))]
}

/// How many cells the growth studies of a scenario have over its instances, each with its place
/// among the scenario's studies.
///
/// # Errors
/// A field that a study does not have.
pub fn cells(scenario: &Scenario) -> Result<Vec<(usize, u32)>, String> {
    let grounds = grounds_at_once(scenario);
    let growth = scenario.studies.iter().enumerate().filter(|(_, study)| study.kind == "growth");
    growth
        .map(|(place, study)| Ok((place, study::growth::cells(&grounds, &plan(scenario, study)?))))
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
            "work" => plan.work = Some(u64::from(whole(name, field)?)),
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
            "table" => drop(text(name, field)?),
            _ => {
                let known = "nodes, work, seed, duels, plans, rows, orders, sizes, seeds, classes, \
                             production, shared, mutants, table";
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
