//! The growth study: how rivals compare as instances grow.
//!
//! Every rival runs on every instance: generated ones, or parts of the scenario's own, of each of them
//! where there are several, over sizes, classes of data and seeds. A run that reaches the limit of nodes counts as stopped there: its work
//! is at least so much. Rivals are compared on the same instances (paired ratios); what is not
//! distinguishable is said to be so. Each run is a cell of its own, so that a batch queue can make
//! them one by one; [`summed_up`] takes the cells however they were made.

use std::collections::{BTreeMap, BTreeSet};
use std::rc::Rc;

use catalogue::{Class, generate};
use instance::{Instance, read};
use model::Model;
use record::study::{Cell, Growth};
use tree::Status;

use crate::desk::Desk;
use crate::plan::Plan;
use crate::subject::{Ground, Source, Subject};

mod summary;

pub use summary::summed_up;

/// One instance of a growth study.
#[derive(Debug, Clone, PartialEq, Eq)]
struct Setting {
    size: u32,
    /// The place of the scenario's instance of which it is a part.
    ground: usize,
    class: Option<Class>,
    seed: u64,
}

/// Runs every cell, or one of them where a number is given; sums up where all were run.
pub async fn growth(desk: Rc<Desk>, grounds: Vec<Ground>, plan: Plan, cell: Option<u32>) -> Growth {
    let first = grounds.first().map_or(&[][..], |ground| &ground.subjects);
    let family = generated(first, &plan);
    let mut out = blank(&grounds, &plan, family.as_deref());
    let mut number = 0;
    for setting in chosen(&plan, &grounds, family.is_some()) {
        let data = cell.is_none_or(|cell| is_of(cell, number, first.len()));
        let instance = data.then(|| family.as_deref().and_then(|family| made(family, &setting)));
        for rival in first {
            if cell.is_none_or(|cell| cell == number) {
                let what =
                    format!("{} at size {}, seed {}", rival.letter, setting.size, setting.seed);
                desk.say(format!("run {} of {}: {what}", number + 1, out.of));
                let instance = instance.as_ref().and_then(Option::as_ref);
                let run = match on(&grounds, &setting, &rival.letter) {
                    Some(subject) => run(&desk, subject, (&setting, instance), &plan).await,
                    None => failed(&rival.letter, &setting),
                };
                let title =
                    if family.is_some() { "" } else { grounds[setting.ground].title.as_str() };
                out.cells.push(Cell { cell: number, instance: title.to_owned(), ..run });
            }
            number += 1;
        }
    }
    if cell.is_none() { summed_up(out) } else { out }
}

/// A rival on the instance of a setting; `None` where it is no model there.
fn on<'g>(grounds: &'g [Ground], setting: &Setting, letter: &str) -> Option<&'g Subject> {
    grounds.get(setting.ground)?.subjects.iter().find(|subject| subject.letter == letter)
}

/// How many cells a study has over all instances.
#[must_use]
pub fn cells(grounds: &[Ground], plan: &Plan) -> u32 {
    let Some(first) = grounds.first() else { return 0 };
    let generated = generated(&first.subjects, plan).is_some();
    let instances = chosen(plan, grounds, generated).len();
    u32::try_from(instances * first.subjects.len()).unwrap_or(u32::MAX)
}

/// How many of the instances that were asked for would be others again.
fn again(grounds: &[Ground], plan: &Plan, generated: bool) -> u32 {
    let asked = settings(plan, if generated { 0 } else { grounds.len() }).len();
    u32::try_from(asked - chosen(plan, grounds, generated).len()).unwrap_or(u32::MAX)
}

/// Whether a cell is one of the rivals' of the instance that begins at `first`.
fn is_of(cell: u32, first: u32, rivals: usize) -> bool {
    cell >= first && (cell - first) as usize <= rivals
}

fn blank(grounds: &[Ground], plan: &Plan, family: Option<&str>) -> Growth {
    let largest = plan.growth.sizes.iter().copied().max().unwrap_or(0);
    let subjects = grounds.iter().flat_map(|ground| &ground.subjects);
    let own = subjects.filter_map(|subject| subject.source.as_ref());
    let extent = own.map(|source| source.instance.extent()).max().unwrap_or(0);
    let extent = u32::try_from(extent).unwrap_or(u32::MAX);
    Growth {
        data: match family {
            Some(family) => format!("generated: {family}"),
            None if grounds.len() > 1 => format!("parts of {} instances", grounds.len()),
            None => "parts of the instance".to_owned(),
        },
        nodes: plan.nodes,
        most_work: plan.work,
        production: plan.growth.production.unwrap_or(extent.max(largest)),
        seed: plan.seed,
        of: cells(grounds, plan),
        again: again(grounds, plan, family.is_some()),
        ..Growth::default()
    }
}

/// The family whose generator makes the instances: where classes are named, or no rival has an
/// instance of its own.
fn generated(subjects: &[Subject], plan: &Plan) -> Option<String> {
    let family = subjects.first()?.entry.as_ref()?.family.clone();
    let same = |subject: &Subject| subject.entry.as_ref().is_some_and(|one| one.family == family);
    (!plan.growth.classes.is_empty() && subjects.iter().all(same)).then_some(family)
}

/// The instances of a study, each once: a part that keeps the same elements as one before it is that
/// instance again, and no part is larger than the instance.
fn chosen(plan: &Plan, grounds: &[Ground], generated: bool) -> Vec<Setting> {
    let all = settings(plan, if generated { 0 } else { grounds.len() });
    if generated {
        return all;
    }
    let mut out: Vec<(usize, Setting)> = Vec::new();
    for (place, ground) in grounds.iter().enumerate() {
        let own = all.iter().enumerate().filter(|(_, setting)| setting.ground == place);
        let Some(source) = ground.subjects.iter().find_map(|subject| subject.source.as_ref())
        else {
            out.extend(own.map(|(order, setting)| (order, setting.clone())));
            continue;
        };
        let extent = u32::try_from(source.instance.extent()).unwrap_or(u32::MAX);
        let own: Vec<(usize, Setting)> = own
            .map(|(order, setting)| {
                (order, Setting { size: setting.size.min(extent), ..setting.clone() })
            })
            .collect();
        let parts: Vec<(usize, u64)> =
            own.iter().map(|(_, setting)| (setting.size as usize, setting.seed)).collect();
        let mut seen = BTreeSet::new();
        let kept = source.instance.kept_by(&parts).into_iter();
        out.extend(
            own.into_iter().zip(kept).filter_map(|(one, kept)| seen.insert(kept).then_some(one)),
        );
    }
    out.sort_by_key(|(order, _)| *order);
    out.into_iter().map(|(_, setting)| setting).collect()
}

/// Parts of so many instances; with none of them generated instances of each class.
fn settings(plan: &Plan, grounds: usize) -> Vec<Setting> {
    let sources: Vec<(usize, Option<Class>)> = if grounds == 0 {
        plan.growth.classes.iter().map(|&class| (0, Some(class))).collect()
    } else {
        (0..grounds).map(|ground| (ground, None)).collect()
    };
    let mut out = Vec::new();
    for &size in &plan.growth.sizes {
        for &(ground, class) in &sources {
            let seeds = plan.growth.seeds.iter();
            out.extend(seeds.map(|&seed| Setting { size, ground, class, seed }));
        }
    }
    out
}

fn made(family: &str, setting: &Setting) -> Option<Instance> {
    read(&generate(family, setting.size, setting.class?, setting.seed)?, None).instance
}

fn blank_cell(letter: &str, setting: &Setting) -> Cell {
    Cell {
        rival: letter.to_owned(),
        size: setting.size,
        class: setting.class.map_or_else(String::new, |class| class.name().to_owned()),
        seed: setting.seed,
        ..Cell::default()
    }
}

fn failed(letter: &str, setting: &Setting) -> Cell {
    Cell { failed: "no model of that size".to_owned(), ..blank_cell(letter, setting) }
}

/// One rival on one instance.
async fn run(
    desk: &Desk,
    subject: &Subject,
    (setting, generated): (&Setting, Option<&Instance>),
    plan: &Plan,
) -> Cell {
    let cell = blank_cell(&subject.letter, setting);
    let source = subject.source.as_ref();
    let model = match source {
        Some(source) => model_on(desk, source, setting, generated).await,
        None => None,
    };
    let Some(model) = model.map(Rc::new) else {
        return failed(&subject.letter, setting);
    };
    let count = |length: usize| u32::try_from(length).unwrap_or(u32::MAX);
    let cell =
        Cell { rows: count(model.row_count()), columns: count(model.columns().len()), ..cell };
    let most = plan.work.unwrap_or(u64::MAX);
    let solved = desk.solve_within(&model, plan.search(), most).await;
    Cell {
        bound: solved.bound,
        incumbent: solved.incumbent,
        nodes: solved.nodes,
        iterations: solved.iterations,
        work: solved.work,
        solved: solved.is_settled() && solved.status != Status::Limit,
        ..cell
    }
}

async fn model_on(
    desk: &Desk,
    source: &Source,
    setting: &Setting,
    generated: Option<&Instance>,
) -> Option<Model> {
    match (generated, setting.class) {
        (Some(instance), _) => source.model_on(desk, instance, &BTreeMap::new()).await,
        (None, None) => {
            let part = source.instance.part(setting.size as usize, Some(setting.seed));
            source.model_on(desk, &part, &source.bind).await
        }
        (None, Some(_)) => None,
    }
}
