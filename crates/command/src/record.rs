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
use report::decision::{self, Evidence, Interval};
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
    let facts = facts(scenario);
    let statements: Vec<String> = (0..scenario.rivals.len())
        .map(|rival| {
            engine::notation_text(scenario, rival).map_or_else(|_| String::new(), |it| it.text)
        })
        .collect();
    let typeset: Vec<String> =
        statements.iter().map(|text| decision::mathml(&engine::typeset(text))).collect();
    let unit = scenario.instance.as_ref().map(|text| engine::instance_report(text).unit);
    let link = link::pack(&file::print(scenario)).unwrap_or_default();
    let link = if link.len() > link::OFTEN_CUT { String::new() } else { link };
    let evidence = Evidence {
        scenario,
        results,
        studies,
        facts: &facts,
        statements: &statements,
        typeset: &typeset,
        unit: &unit.unwrap_or_default(),
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

/// The record as one object: its pieces, and the figures that they are made of.
fn object(evidence: &Evidence<'_>) -> String {
    let studies: Vec<Line<'_>> =
        evidence.studies.iter().map(|(instance, report)| report.line(instance)).collect();
    let record: serde_json::Value =
        serde_json::from_str(&decision::json(evidence)).unwrap_or_default();
    let intervals: Vec<serde_json::Value> =
        decision::intervals(evidence).iter().map(|one| interval(one, evidence.unit)).collect();
    let object = serde_json::json!({
        "hullward_record": 1,
        "engine": evidence.engine,
        "intervals": intervals,
        "scenario": file::print(evidence.scenario),
        "results": evidence.results,
        "studies": studies,
        "record": record,
    });
    format!("{object:#}\n")
}

/// Between which values the best possible plan of an instance lies: `bound` is proved in exact arithmetic,
/// `plan` is the best that was found, both in `unit`.
fn interval(one: &Interval, unit: &str) -> serde_json::Value {
    serde_json::json!({
        "instance": one.instance,
        "sense": if one.maximise { "maximise" } else { "minimise" },
        "bound": one.bound,
        "plan": one.plan,
        "unit": unit,
        "closed": one.is_closed(),
    })
}

/// What is understood of the first instance.
fn facts(scenario: &Scenario) -> Vec<String> {
    let report = scenario.instance.as_ref().map(engine::instance_report);
    report.map_or_else(Vec::new, |report| report.facts)
}
