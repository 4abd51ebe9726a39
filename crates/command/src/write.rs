//! `hullward write`: a rival or a scenario in a form that others read.

use std::io::{Result, Write};

use engine::{HandOver, Refusal};
use record::file::{self, Parsed};
use record::link;
use record::results::ErrorReport;
use record::scenario::{Scenario, letter};

use crate::complain::complain;
use crate::ending::Ending;
use crate::options::{Form, WriteOptions};
use crate::record as on_record;
use crate::source::{self, Source};

/// Writes what is asked for to the file that is named, else to standard output; notes go to
/// standard error.
pub(crate) fn write(
    options: &WriteOptions,
    out: &mut dyn Write,
    err: &mut dyn Write,
) -> Result<Ending> {
    let source = match source::load(&options.file) {
        Ok(source) => source,
        Err(message) => return writeln!(err, "{message}").map(|()| Ending::Wrong),
    };
    let parsed = file::parse(&source.text);
    complain(err, &source.name, None, &parsed.complaints)?;
    let Some(scenario) = &parsed.scenario else { return Ok(Ending::Wrong) };
    let job = Job { options, source: &source, parsed: &parsed, scenario };
    if options.form.is_run() {
        return job.put_on_record(out, err);
    }
    match job.made(err)? {
        Ok(handed) => job.hand_over(&handed, out, err),
        Err(ending) => Ok(ending),
    }
}

struct Job<'j> {
    options: &'j WriteOptions,
    source: &'j Source,
    parsed: &'j Parsed,
    scenario: &'j Scenario,
}

impl Job<'_> {
    /// The text, or how the call ends without one; the reasons are written.
    fn made(&self, err: &mut dyn Write) -> Result<std::result::Result<HandOver, Ending>> {
        let place = match self.place() {
            Ok(place) => place,
            Err(message) => return self.wrong(&message, err).map(Err),
        };
        let whole = |rival: Option<usize>| match self.options.form {
            Form::Link => link_of(&part(self.scenario, rival)),
            _ => Ok(scenario_of(&part(self.scenario, rival))),
        };
        let made = match (self.options.form, place) {
            (Form::Scenario | Form::Link, (_, rival)) => match whole(rival) {
                Ok(handed) => Ok(handed),
                Err(message) => return self.wrong(&message, err).map(Err),
            },
            (Form::Stripped, (_, rival)) => {
                let factor = self.options.scale.as_deref().unwrap_or("1");
                engine::stripped(&part(self.scenario, rival), factor).map(|stripped| HandOver {
                    notes: stripped.notes,
                    ..scenario_of(&stripped.scenario)
                })
            }
            (_, (_, None)) => return self.wrong(&self.which(), err).map(Err),
            (Form::Mps, (instance, Some(rival))) => engine::mps(self.scenario, (instance, rival)),
            (Form::Tightened, (instance, Some(rival))) => {
                engine::tightened(self.scenario, (instance, rival))
            }
            (Form::Text, (_, Some(rival))) => engine::notation_text(self.scenario, rival),
            (_, (_, Some(rival))) => engine::latex(self.scenario, rival),
        };
        let rival = place.1.unwrap_or(0);
        match made {
            Ok(handed) => {
                self.complain_of(rival, &handed.complaints, err)?;
                Ok(Ok(handed))
            }
            Err(Refusal::Wrong(error)) => self.refused((place.0, rival), &error, err).map(Err),
            Err(Refusal::Broken(what)) => {
                writeln!(err, "{}: an internal check failed: {what}", self.source.name)?;
                Ok(Err(Ending::Broken))
            }
        }
    }

    /// The instance and the rival by place; no rival where none is named among several.
    fn place(&self) -> std::result::Result<(usize, Option<usize>), String> {
        let instances = self.scenario.instances().count();
        let instance = self.options.instance.unwrap_or(1);
        if instance > instances.max(1) {
            return Err(format!("there is no instance {instance}: it has {instances}"));
        }
        let rivals = self.scenario.rivals.len();
        let rival = match &self.options.rival {
            None => (rivals == 1 && !self.options.form.is_whole()).then_some(0),
            Some(wanted) => {
                let found = (0..rivals).find(|&rival| letter(rival) == *wanted);
                Some(found.ok_or_else(|| format!("there is no rival {wanted}: it has {rivals}"))?)
            }
        };
        Ok((instance - 1, rival))
    }

    fn which(&self) -> String {
        match self.scenario.rivals.len() {
            0 => "the scenario has no rival: add [[rival]]".to_owned(),
            rivals => format!("name the rival with --rival: A to {}", letter(rivals - 1)),
        }
    }

    fn wrong(&self, message: &str, err: &mut dyn Write) -> Result<Ending> {
        writeln!(err, "{}: {message}", self.source.name).map(|()| Ending::Wrong)
    }

    /// What was said about a rival, at its place in the file or in the shipped text.
    fn complain_of(
        &self,
        rival: usize,
        complaints: &[record::message::Complaint],
        err: &mut dyn Write,
    ) -> Result<()> {
        let origin = self.parsed.rival_origins.get(rival).copied().flatten();
        let from = self.scenario.rivals.get(rival).and_then(|rival| rival.from.as_ref());
        complain(err, from.unwrap_or(&self.source.name), origin, complaints)
    }

    fn refused(
        &self,
        (instance, rival): (usize, usize),
        error: &ErrorReport,
        err: &mut dyn Write,
    ) -> Result<Ending> {
        if error.place == "instance" {
            let origin = self.parsed.instance_origins.get(instance).copied();
            complain(err, &self.source.name, origin, &error.complaints)?;
        } else {
            self.complain_of(rival, &error.complaints, err)?;
        }
        let what = format!("rival {} cannot be written: {}", letter(rival), error.message);
        self.wrong(&what, err)
    }

    /// Runs the scenario, or the rival that is named, and writes what came out.
    fn put_on_record(&self, out: &mut dyn Write, err: &mut dyn Write) -> Result<Ending> {
        let rival = match self.place() {
            Ok((_, rival)) => rival,
            Err(message) => return self.wrong(&message, err),
        };
        let scenario = part(self.scenario, rival);
        let what = (self.options.form, self.source.name.as_str());
        let (text, ending) = on_record::record(&scenario, what, err)?;
        let handed = HandOver { text, notes: Vec::new(), complaints: Vec::new() };
        Ok(ending.max(self.hand_over(&handed, out, err)?))
    }

    fn hand_over(
        &self,
        handed: &HandOver,
        out: &mut dyn Write,
        err: &mut dyn Write,
    ) -> Result<Ending> {
        for note in &handed.notes {
            writeln!(err, "{}: note: {note}", self.source.name)?;
        }
        let several = !self.scenario.further_instances.is_empty();
        if several && self.options.instance.is_none() && self.options.form == Form::Mps {
            let name = &self.source.name;
            writeln!(err, "{name}: note: on the first instance; --instance N takes another")?;
        }
        match self.options.out.as_deref() {
            None | Some("-") => out.write_all(handed.text.as_bytes()).map(|()| Ending::Done),
            Some(path) => match std::fs::write(path, &handed.text) {
                Ok(()) => Ok(Ending::Done),
                Err(error) => writeln!(err, "hullward: {path}: cannot be written: {error}")
                    .map(|()| Ending::Wrong),
            },
        }
    }
}

/// The scenario, or one with that rival alone: then without the digest of all results.
fn part(scenario: &Scenario, rival: Option<usize>) -> Scenario {
    let mut part = scenario.clone();
    if let Some(rival) = rival {
        part.rivals = part.rivals.into_iter().skip(rival).take(1).collect();
        if scenario.rivals.len() > 1 {
            part.engine = None;
            part.digest = None;
        }
    }
    part
}

fn scenario_of(scenario: &Scenario) -> HandOver {
    let text = file::print(scenario);
    HandOver { text, notes: Vec::new(), complaints: Vec::new() }
}

fn link_of(scenario: &Scenario) -> std::result::Result<HandOver, String> {
    let mut text = link::pack(&file::print(scenario)).map_err(|error| error.to_string())?;
    let mut notes = Vec::new();
    if text.len() > link::OFTEN_CUT {
        notes.push(format!(
            "the link has {} characters; some mail and chat programs cut it over {}: the file is safer (--as scenario)",
            text.len(),
            link::OFTEN_CUT
        ));
    }
    text.push('\n');
    Ok(HandOver { text, notes, complaints: Vec::new() })
}
