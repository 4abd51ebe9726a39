//! `hullward read`: what is understood of an instance.

use std::io::{Result, Write};

use record::file::{self, Origin};
use record::message::{BindJob, FoundBy, InstanceReport, Reply, Request};
use record::scenario::{InstanceText, Scenario, letter};

use crate::complain::complain;
use crate::ending::Ending;
use crate::source::{self, Source};

/// Reads the instances of a scenario, or a text that is an instance.
pub(crate) fn read(word: &str, out: &mut dyn Write, err: &mut dyn Write) -> Result<Ending> {
    let source = match source::load(word) {
        Ok(source) => source,
        Err(message) => return writeln!(err, "{message}").map(|()| Ending::Wrong),
    };
    if !file::looks_like_a_scenario(&source.text) {
        if engine::looks_like_mps(&source.text) {
            return model(&source, None, "", &source.text, (out, err));
        }
        let instance = InstanceText { text: source.text.clone(), ..InstanceText::default() };
        return understand(&source, None, &instance, out, err);
    }
    let parsed = file::parse(&source.text);
    complain(err, &source.name, None, &parsed.complaints)?;
    let Some(scenario) = parsed.scenario else { return Ok(Ending::Wrong) };
    let mut worst = Ending::Done;
    let models = scenario.rivals.iter().zip(&parsed.rival_origins);
    let models: Vec<_> = models
        .filter_map(|(rival, origin)| rival.mps.as_ref().map(|text| (&rival.title, origin, text)))
        .collect();
    if scenario.instance.is_none() && models.is_empty() {
        writeln!(err, "{}: the scenario has no instance", source.name)?;
        return Ok(Ending::Wrong);
    }
    for (title, origin, text) in models {
        worst = worst.max(model(&source, *origin, title, text, (out, err))?);
    }
    for (place, (instance, origin)) in scenario.instances().zip(parsed.instance_origins).enumerate()
    {
        let ending = understand(&source, Some(origin), instance, out, err)?;
        if ending == Ending::Done {
            taken(&scenario, instance, out)?;
            sizes(&scenario, place, out)?;
        }
        worst = worst.max(ending);
    }
    Ok(worst)
}

/// What the rivals take from an instance under other names than its own.
fn taken(scenario: &Scenario, instance: &InstanceText, out: &mut dyn Write) -> Result<()> {
    let mut worker = engine::Worker::new();
    let job = BindJob { instance: instance.clone(), rivals: scenario.rivals.clone() };
    worker.handle(Request::Bind(Box::new(job)));
    while worker.advance(engine::native::USUAL_SLICE) {}
    for envelope in worker.take() {
        let Reply::Bound(lines, _) = envelope.reply else { continue };
        for line in
            lines.iter().filter(|line| line.found != FoundBy::Name || !line.problem.is_empty())
        {
            let name = &line.name;
            match (&line.taken, line.problem.is_empty()) {
                (_, false) => writeln!(out, "  {}", line.problem)?,
                (Some(taken), _) if line.found == FoundBy::Shape => {
                    writeln!(out, "  {name} takes {taken}: assumed, {}", line.reason)?;
                }
                (Some(taken), _) => writeln!(out, "  {name} takes {taken}: as the scenario says")?,
                _ => {}
            }
        }
    }
    Ok(())
}

/// The models of the rivals on an instance in short; one that does not become a model is left to
/// `run` to complain of.
fn sizes(scenario: &Scenario, instance: usize, out: &mut dyn Write) -> Result<()> {
    for (rival, letter) in (0..scenario.rivals.len()).map(|rival| (rival, letter(rival))) {
        if scenario.rivals[rival].mps.is_some() {
            continue;
        }
        if let Ok((title, sentences)) = engine::describe(scenario, instance, rival) {
            writeln!(out, "{letter}  {title}")?;
            for said in sentences {
                writeln!(out, "  {said}")?;
            }
        }
    }
    Ok(())
}

/// A whole model in MPS.
fn model(
    source: &Source,
    origin: Option<Origin>,
    title: &str,
    text: &str,
    (out, err): (&mut dyn Write, &mut dyn Write),
) -> Result<Ending> {
    let report = engine::mps_report(text);
    describe(title, &report, out)?;
    complain(err, &source.name, origin, &report.complaints)?;
    Ok(if report.usable { Ending::Done } else { Ending::Wrong })
}

fn understand(
    source: &Source,
    origin: Option<Origin>,
    instance: &InstanceText,
    out: &mut dyn Write,
    err: &mut dyn Write,
) -> Result<Ending> {
    let mut worker = engine::Worker::new();
    worker.handle(Request::Read(instance.clone()));
    while worker.advance(engine::native::USUAL_SLICE) {}
    for envelope in worker.take() {
        match envelope.reply {
            Reply::InstanceRead(report) => {
                describe(&instance.title, &report, out)?;
                complain(err, &source.name, origin, &report.complaints)?;
                return Ok(if report.usable { Ending::Done } else { Ending::Wrong });
            }
            Reply::Failed(error) => writeln!(err, "{}: {error}", source.name)?,
            _ => {}
        }
    }
    Ok(Ending::Wrong)
}

fn describe(title: &str, report: &InstanceReport, out: &mut dyn Write) -> Result<()> {
    let titles = [title, report.title.as_str(), "instance"];
    let title = titles.iter().find(|title| !title.is_empty()).unwrap_or(&"instance");
    writeln!(out, "{title} (read as {})", report.reader)?;
    for fact in &report.facts {
        writeln!(out, "  {fact}")?;
    }
    for fact in &report.statistics {
        writeln!(out, "  {fact}")?;
    }
    if !report.parts.is_empty() {
        let name = report.reader.as_str();
        writeln!(out, "  Instances in this file, to be had by reader = \"{name} 2\" and so on:")?;
        for part in &report.parts {
            writeln!(out, "    {part}")?;
        }
    }
    let errors = report.complaints.iter().filter(|complaint| complaint.error).count();
    if !report.usable {
        let errors = if errors == 1 { "one error".to_owned() } else { format!("{errors} errors") };
        writeln!(out, "  cannot be used: {errors}, listed with the place")?;
    }
    Ok(())
}
