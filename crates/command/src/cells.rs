//! A growth study as independent numbered cells: listed, run one by one, gathered again.

use std::collections::BTreeMap;
use std::io::{Result, Write};

use engine::native::USUAL_SLICE;
use engine::{StudyRun, gathered};
use record::file;
use record::scenario::Scenario;
use record::study::{Cell, Growth, Report};

use crate::complain::complain;
use crate::ending::Ending;
use crate::options::{CellsOptions, GatherOptions};
use crate::queue;
use crate::source;
use crate::table;

/// Lists the cells of a scenario, or writes the script by which a batch queue makes them.
pub(crate) fn list(
    options: &CellsOptions,
    out: &mut dyn Write,
    err: &mut dyn Write,
) -> Result<Ending> {
    let source = match source::load(&options.file) {
        Ok(source) => source,
        Err(message) => return writeln!(err, "{message}").map(|()| Ending::Wrong),
    };
    let parsed = file::parse(&source.text);
    complain(err, &source.name, None, &parsed.complaints)?;
    let Some(scenario) = parsed.scenario else { return Ok(Ending::Wrong) };
    let (_, count) = match only(&scenario) {
        Ok(found) => found,
        Err(why) => return writeln!(err, "{}: {why}", source.name).map(|()| Ending::Wrong),
    };
    if let Some(wanted) = options.queue {
        write!(out, "{}", queue::script(wanted, &options.file, count))?;
        return Ok(Ending::Done);
    }
    for cell in 0..count {
        writeln!(out, "{cell}")?;
    }
    Ok(Ending::Done)
}

/// The place of the only growth study, and how many cells it has.
fn only(scenario: &Scenario) -> std::result::Result<(usize, u32), String> {
    let found = engine::cells(scenario)?;
    match found.as_slice() {
        [one] => Ok(*one),
        [] => Err("the scenario has no study of kind \"growth\"".to_owned()),
        _ => Err("the scenario has several studies of kind \"growth\": keep one".to_owned()),
    }
}

/// Runs one cell and prints it as JSON.
pub(crate) fn run(
    name: &str,
    scenario: &Scenario,
    cell: u32,
    (out, err): (&mut dyn Write, &mut dyn Write),
) -> Result<Ending> {
    let (place, count) = match only(scenario) {
        Ok(found) => found,
        Err(why) => return writeln!(err, "{name}: {why}").map(|()| Ending::Wrong),
    };
    if cell >= count {
        writeln!(err, "{name}: there is no cell {cell}: it has {count}, from 0")?;
        return Ok(Ending::Wrong);
    }
    let mut run = StudyRun::cell(scenario, 0, &scenario.studies[place], cell);
    while !run.advance(USUAL_SLICE) {}
    for report in run.take() {
        serde_json::to_writer(&mut *out, &report.line(""))?;
        writeln!(out)?;
    }
    Ok(Ending::Done)
}

/// Puts cells together and sums them up.
pub(crate) fn gather(
    options: &GatherOptions,
    out: &mut dyn Write,
    err: &mut dyn Write,
) -> Result<Ending> {
    let growth = match read(&options.files) {
        Ok(growth) => growth,
        Err(why) => return writeln!(err, "hullward: {why}").map(|()| Ending::Wrong),
    };
    let report = Report::Growth(Box::new(gathered(growth)));
    if options.json {
        serde_json::to_writer(&mut *out, &report.line(""))?;
        writeln!(out)?;
    } else {
        table::evidence(&report, "", out)?;
        table::caution(out)?;
    }
    Ok(Ending::Done)
}

/// All cells of one study.
///
/// # Errors
/// A file that holds no cell, cells of different studies, or cells that are missing.
fn read(files: &[String]) -> std::result::Result<Growth, String> {
    let mut study: Option<Growth> = None;
    let mut cells: BTreeMap<u32, Cell> = BTreeMap::new();
    for name in files {
        let text = source::load(name)?.text;
        for (number, line) in text.lines().enumerate().filter(|(_, line)| !line.trim().is_empty()) {
            let part: Growth = serde_json::from_str(line)
                .map_err(|error| format!("{name}:{}: this is no cell: {error}", number + 1))?;
            let head = Growth { cells: Vec::new(), ..part.clone() };
            let first = study.get_or_insert_with(|| head.clone());
            if *first != head {
                return Err(format!("{name}:{}: this cell is of another study", number + 1));
            }
            cells.extend(part.cells.into_iter().map(|cell| (cell.cell, cell)));
        }
    }
    let study = study.ok_or("there is no cell in what was given")?;
    let missing: Vec<String> = (0..study.of)
        .filter(|cell| !cells.contains_key(cell))
        .map(|cell| cell.to_string())
        .collect();
    if !missing.is_empty() {
        return Err(format!("cells are missing: {}", missing.join(", ")));
    }
    Ok(Growth { cells: cells.into_values().collect(), ..study })
}
