//! `hullward run`: the rivals of scenarios, one after another.

use std::io::{Result, Write};

use engine::StudyRun;
use engine::native::{Phase, RivalRun, USUAL_SLICE, Watch, instance_title, result, run_rival};
use record::event::Log;
use record::file::{self, Parsed};
use record::ground::Ground;
use record::message::Complaint;
use record::results::{RivalResult, Status, Timing};
use record::scenario::{Scenario, Study, letter};
use record::study::Report;
use report::study::over_instances;

use crate::cells;
use crate::clock::Clock;
use crate::complain::complain;
use crate::ending::Ending;
use crate::options::RunOptions;
use crate::progress::Line;
use crate::same;
use crate::second::add_opinion;
use crate::source::{self, Source};
use crate::table;
use crate::verify::verify;

/// Runs every scenario; a wrong one does not keep the others from running.
pub(crate) fn run(
    options: &RunOptions,
    out: &mut dyn Write,
    err: &mut dyn Write,
) -> Result<Ending> {
    let mut worst = Ending::Done;
    for word in &options.files {
        let ending = match source::load(word) {
            Ok(source) => Job { options, source }.run(out, err)?,
            Err(message) => writeln!(err, "{message}").map(|()| Ending::Wrong)?,
        };
        worst = worst.max(ending);
    }
    Ok(worst)
}

/// One scenario to run.
struct Job<'o> {
    options: &'o RunOptions,
    source: Source,
}

impl Job<'_> {
    fn run(&self, out: &mut dyn Write, err: &mut dyn Write) -> Result<Ending> {
        let mut parsed = file::parse(&self.source.text);
        complain(err, &self.source.name, None, &parsed.complaints)?;
        let Some(mut scenario) = parsed.scenario.take() else { return Ok(Ending::Wrong) };
        if let Some(seconds) = self.options.seconds {
            scenario.run.seconds = seconds;
        }
        if let Some(preset) = self.options.preset {
            scenario.run = scenario.run.with(preset);
        }
        let chosen = match self.chosen(&scenario) {
            Ok(chosen) => chosen,
            Err(message) => {
                writeln!(err, "{}: {message}", self.source.name)?;
                return Ok(Ending::Wrong);
            }
        };
        if let Some(cell) = self.options.cell {
            return cells::run(&self.source.name, &scenario, cell, (out, err));
        }
        let mut ending = Ending::Done;
        let mut results = Vec::new();
        for instance in 0..scenario.instances().count().max(1) {
            for &rival in &chosen {
                let (one, ended) = self.rival(&scenario, &parsed, (instance, rival), err)?;
                ending = ending.max(ended);
                if self.options.json {
                    serde_json::to_writer(&mut *out, &one)?;
                    writeln!(out)?;
                    out.flush()?;
                }
                results.push((instance * scenario.rivals.len() + rival, one));
            }
        }
        same::say(&scenario, &results, &self.source.name, err)?;
        if !self.options.json {
            let results: Vec<RivalResult> = results.into_iter().map(|(_, one)| one).collect();
            table::print(&scenario, &results, out)?;
        }
        if self.options.rival.is_none() {
            ending = ending.max(self.studies(&scenario, (out, err))?);
        }
        if !self.options.json {
            table::caution(out)?;
        }
        Ok(ending)
    }

    /// Runs every study on every instance.
    fn studies(
        &self,
        scenario: &Scenario,
        (out, err): (&mut dyn Write, &mut dyn Write),
    ) -> Result<Ending> {
        let mut ending = Ending::Done;
        let mut all = Vec::new();
        for instance in 0..scenario.instances().count().max(1) {
            for study in studies_of(scenario, instance) {
                let title = title_of(scenario, instance, study);
                let (reports, ended) = run_study(scenario, instance, study);
                if ended == Ending::Limit {
                    let (name, kind, seconds) =
                        (&self.source.name, &study.kind, scenario.run.seconds);
                    writeln!(
                        err,
                        "{name}: the study {kind} was stopped by the limit of {seconds} s"
                    )?;
                }
                ending = ending.max(ended);
                for report in &reports {
                    if let Report::Left { kind, why } = report {
                        writeln!(
                            err,
                            "{}: the study {kind} was left out: {why}",
                            self.source.name
                        )?;
                        ending = ending.max(Ending::Wrong);
                    }
                    self.say(report, &title, out)?;
                }
                all.extend(reports.into_iter().map(|report| (title.clone(), report)));
            }
        }
        for report in over_instances(&all) {
            self.say(&report, "", out)?;
        }
        Ok(ending)
    }

    /// What a study found, as JSON or in words.
    fn say(&self, report: &Report, title: &str, out: &mut dyn Write) -> Result<()> {
        if !self.options.json {
            return table::evidence(report, title, out);
        }
        serde_json::to_writer(&mut *out, &report.line(title))?;
        writeln!(out)?;
        out.flush()
    }

    /// The places of the rivals to run.
    fn chosen(&self, scenario: &Scenario) -> std::result::Result<Vec<usize>, String> {
        let count = scenario.rivals.len();
        let all = (0..count).filter(|&rival| {
            self.options.rival.as_ref().is_none_or(|wanted| *wanted == letter(rival))
        });
        let chosen: Vec<usize> = all.collect();
        if chosen.is_empty() {
            return Err(match &self.options.rival {
                Some(wanted) => format!("there is no rival {wanted}: it has {count}"),
                None => "the scenario has no rival: add [[rival]]".to_owned(),
            });
        }
        if self.options.log.is_some()
            && (chosen.len() > 1 || !scenario.further_instances.is_empty())
        {
            return Err("--log saves one log: name the rival with --rival".to_owned());
        }
        Ok(chosen)
    }

    fn rival(
        &self,
        scenario: &Scenario,
        parsed: &Parsed,
        place: (usize, usize),
        err: &mut dyn Write,
    ) -> Result<(RivalResult, Ending)> {
        let (run, one) = run_one(scenario, place);
        self.complain_of(&one, &run, (scenario, parsed, place), err)?;
        if let Some(path) = &self.options.log {
            save(path, run, scenario, place)?;
        }
        if let Some(fault) = verify(&one) {
            writeln!(err, "{}: an internal check failed: {fault}", self.source.name)?;
            return Ok((one, Ending::Broken));
        }
        let ending = ending(&one);
        Ok((one, ending))
    }

    /// What is said of fields of `[run]`, at their places in the file.
    fn in_run(&self, mut complaints: Vec<Complaint>) -> Vec<Complaint> {
        for found in &mut complaints {
            let field = found.code.trim_start_matches("run.");
            let place = file::place_in_run(&self.source.text, field);
            (found.line, found.column) = place.unwrap_or((found.line, found.column));
        }
        complaints
    }

    /// What is wrong with a rival, and what notation warns of, at its place in the file or in
    /// the shipped text.
    fn complain_of(
        &self,
        one: &RivalResult,
        run: &RivalRun,
        (scenario, parsed, (instance, rival)): (&Scenario, &Parsed, (usize, usize)),
        err: &mut dyn Write,
    ) -> Result<()> {
        let name = &self.source.name;
        let origin = parsed.rival_origins.get(rival).copied().flatten();
        let from = scenario.rivals.get(rival).and_then(|rival| rival.from.as_ref());
        let of_rival = from.unwrap_or(name);
        if let Some(report) = &run.report {
            let (of_run, own): (Vec<Complaint>, Vec<Complaint>) =
                report.complaints.iter().cloned().partition(|found| found.code.starts_with("run."));
            complain(err, name, None, &self.in_run(of_run))?;
            complain(err, of_rival, origin, &own)?;
        }
        let Some(error) = &one.error else { return Ok(()) };
        if error.place == "instance" {
            let origin = parsed.instance_origins.get(instance).copied();
            complain(err, name, origin, &error.complaints)?;
        } else {
            complain(err, of_rival, origin, &error.complaints)?;
        }
        writeln!(err, "{name}: rival {} could not be run: {}", one.rival, error.message)
    }
}

/// The studies that are made on an instance: those that go over all of them stand with the first.
pub(crate) fn studies_of(scenario: &Scenario, instance: usize) -> impl Iterator<Item = &Study> {
    let own = move |study: &&Study| instance == 0 || !engine::is_over_all(&study.kind);
    scenario.studies.iter().filter(own)
}

/// How what a study finds names its instance; empty where it speaks of all.
pub(crate) fn title_of(scenario: &Scenario, instance: usize, study: &Study) -> String {
    let all = engine::is_over_all(&study.kind);
    if all { String::new() } else { instance_title(scenario, instance) }
}

/// A study, with a look at the clock between slices.
pub(crate) fn run_study(
    scenario: &Scenario,
    instance: usize,
    study: &Study,
) -> (Vec<Report>, Ending) {
    let clock = Clock::start();
    let mut line = Line::new();
    let mut run = StudyRun::new(scenario, instance, study);
    while !run.advance(USUAL_SLICE) {
        line.say(&study.kind, &run.doing(), &clock);
        if clock.is_over(scenario.run.seconds) {
            line.wipe();
            return (Vec::new(), Ending::Limit);
        }
    }
    line.wipe();
    (run.take(), Ending::Done)
}

/// A rival on an instance, with what a second LP code says of it.
pub(crate) fn run_one(scenario: &Scenario, place: (usize, usize)) -> (RivalRun, RivalResult) {
    let clock = Clock::start();
    let (run, timing) = timed(scenario, place, &clock);
    let mut one = result(scenario, place, &run);
    one.timing = Some(timing);
    add_opinion(&mut one, &run, scenario.run.seconds, &clock);
    if run.stopped {
        say_the_time(&mut one, scenario.run.seconds);
    }
    (run, one)
}

/// Runs one rival with a look at the clock between slices.
fn timed(scenario: &Scenario, place: (usize, usize), clock: &Clock) -> (RivalRun, Timing) {
    let mut root_ms = None;
    let mut line = Line::new();
    let run = run_rival(scenario, place, USUAL_SLICE, &mut |moment| {
        if moment.phase == Phase::Search && root_ms.is_none() {
            root_ms = Some(clock.milliseconds());
        }
        line.show(&letter(place.1), &moment, clock);
        if clock.is_over(scenario.run.seconds) { Watch::Stop } else { Watch::GoOn }
    });
    line.wipe();
    let all = clock.milliseconds();
    let root_ms = root_ms.unwrap_or(all);
    let searched = run.search.is_some();
    (run, Timing { root_ms, search_ms: if searched { all - root_ms } else { 0.0 } })
}

/// The clock stopped it: says so, and how others see the same tree.
fn say_the_time(one: &mut RivalResult, seconds: f64) {
    if let Some(search) = &mut one.search {
        let nodes = search.nodes;
        let why = format!("the time limit of {seconds} s; nodes = {nodes} gives the same tree");
        search.stopped = Some(why);
    } else if let Some(root) = &mut one.root {
        root.stopped = Some(format!("the time limit of {seconds} s"));
    }
}

fn ending(one: &RivalResult) -> Ending {
    match one.status {
        Status::Error => Ending::Wrong,
        Status::Limit => Ending::Limit,
        Status::Optimal | Status::Infeasible | Status::Unbounded => Ending::Done,
    }
}

fn save(path: &str, run: RivalRun, scenario: &Scenario, place: (usize, usize)) -> Result<()> {
    let place_of = |place: usize| u32::try_from(place).unwrap_or(u32::MAX);
    let ground = run.evidence.map(|evidence| Ground {
        scenario: file::print(scenario),
        instance: place_of(place.0),
        rival: place_of(place.1),
        evidence,
    });
    let version = record::log::version(ground.as_ref());
    let log = Log { version, engine: engine::VERSION.to_owned(), events: run.events, ground };
    let bytes = record::log::encode(&log).map_err(std::io::Error::other)?;
    std::fs::write(path, bytes)
}
