//! `hullward write --as report, markdown, json, svg or csv`: every rival and every study of a scenario is run, and what came out
//! is put on record.

use std::io::{Result, Write};

use record::file;
use record::link;
use record::pack::Pack;
use record::results::RivalResult;
use record::scenario::{Scenario, letter};
use record::study::{Line, Report};
use report::csv::csv;
use report::decision::{self, Evidence};
use report::study::over_instances;

use crate::ending::Ending;
use crate::options::Form;
use crate::run::{run_one, run_study, studies_of, title_of};

/// The record of a scenario in one of its forms, and how the runs ended; rivals that could not be run
/// are named on `err` and stand in the record as such.
pub(crate) fn record(
    scenario: &Scenario,
    (form, name): (Form, &str),
    err: &mut dyn Write,
) -> Result<(String, Ending)> {
    let mut ending = Ending::Done;
    let mut results = Vec::new();
    for instance in 0..scenario.instances().count().max(1) {
        for rival in 0..scenario.rivals.len() {
            let (_, one) = run_one(scenario, (instance, rival));
            if let Some(error) = &one.error {
                let (letter, message) = (letter(rival), &error.message);
                writeln!(err, "{name}: rival {letter} could not be run: {message}")?;
                ending = Ending::Wrong;
            }
            results.push(one);
        }
    }
    if form == Form::Pack {
        return Ok((report::pack::json(&Pack::new(engine::VERSION, scenario, &results)), ending));
    }
    if form == Form::Csv {
        return Ok((csv(&results), ending));
    }
    let mut studies = Vec::new();
    for instance in 0..scenario.instances().count().max(1) {
        for study in studies_of(scenario, instance) {
            let (mut reports, ended) = run_study(scenario, instance, study);
            if ended == Ending::Limit {
                let (kind, seconds) = (&study.kind, scenario.run.seconds);
                writeln!(err, "{name}: the study {kind} was stopped by the limit of {seconds} s")?;
                // The record says so as well: else it reads as if nobody had asked.
                let why = format!("it was stopped by the limit of {seconds} s");
                reports.push(Report::Left { kind: kind.clone(), why });
            }
            ending = ending.max(ended);
            let title = title_of(scenario, instance, study);
            studies.extend(reports.into_iter().map(|report| (title.clone(), report)));
        }
    }
    let over = over_instances(&studies);
    studies.extend(over.into_iter().map(|report| (String::new(), report)));
    Ok((set(scenario, form, &results, &studies), ending))
}

fn set(
    scenario: &Scenario,
    form: Form,
    results: &[RivalResult],
    studies: &[(String, Report)],
) -> String {
    let stated = engine::stated(scenario);
    let statements: Vec<String> = stated.rivals.iter().map(|one| one.text.clone()).collect();
    let typeset: Vec<String> =
        stated.rivals.iter().map(|one| decision::mathml(&one.typeset)).collect();
    let link = link::pack(&file::print(scenario)).unwrap_or_default();
    let link = if link.len() > link::OFTEN_CUT { String::new() } else { link };
    let evidence = Evidence {
        scenario,
        results,
        studies,
        facts: &stated.facts,
        statements: &statements,
        typeset: &typeset,
        unit: &stated.unit,
        engine: engine::VERSION,
        link: &link,
    };
    match form {
        Form::Markdown => decision::markdown(&evidence),
        Form::Svg => decision::svg(&evidence),
        Form::Json => object(&evidence),
        _ => decision::html(&evidence),
    }
}

/// The record as one object, with the figures that it is made of in full.
fn object(evidence: &Evidence<'_>) -> String {
    let studies: Vec<Line<'_>> =
        evidence.studies.iter().map(|(instance, report)| report.line(instance)).collect();
    let mut object: serde_json::Value =
        serde_json::from_str(&decision::json(evidence)).unwrap_or_default();
    object["results"] = serde_json::json!(evidence.results);
    object["studies"] = serde_json::json!(studies);
    format!("{object:#}\n")
}
