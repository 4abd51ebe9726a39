//! The regression pack: a scenario with what its rivals gave, as one JSON object, so that whoever
//! builds the production model can see the same again; and the drift check: a new instance against
//! what was recorded.

use std::io::{Result, Write};

use record::file;
use record::results::{RivalResult, Status, digest};
use record::scenario::{InstanceText, Scenario};
use serde_json::{Value, json};

use crate::complain::complain;
use crate::ending::Ending;
use crate::options::DriftOptions;
use crate::run::run_one;
use crate::source;

/// How far a bound or an optimum may be away, relative to its size, and still count as the same.
const TOLERANCE: f64 = 1e-6;

/// What is compared of a rival, with the words for it.
const MEASURES: [(&str, &str); 7] = [
    ("rows", "rows"),
    ("columns", "columns"),
    ("nonzeros", "non-zeros"),
    ("root_bound", "root bound"),
    ("optimum", "optimum"),
    ("smallest_decade", "smallest power of ten among coefficients"),
    ("largest_decade", "largest power of ten among coefficients"),
];

/// The pack of a scenario whose rivals were run.
pub(crate) fn text(scenario: &Scenario, results: &[RivalResult]) -> String {
    let pack = json!({
        "hullward_pack": 1,
        "engine": engine::VERSION,
        "tolerance": TOLERANCE,
        "digest": digest(results),
        "scenario": file::print(scenario),
        "expected": results.iter().map(expected).collect::<Vec<_>>(),
    });
    format!("{pack:#}\n")
}

fn expected(one: &RivalResult) -> Value {
    let decades = one.families.iter().flat_map(|family| family.decades.keys());
    let decades: Vec<i32> = decades.filter_map(|decade| decade.parse().ok()).collect();
    let root = one.root.as_ref();
    let solved = one.search.as_ref().filter(|_| one.status == Status::Optimal);
    json!({
        "instance": one.instance,
        "rival": one.rival,
        "title": one.title,
        "rows": one.rows,
        "columns": one.columns,
        "nonzeros": one.nonzeros,
        "root_bound": root.and_then(|root| root.bound),
        "checked_bound": root.and_then(|root| root.checked_bound.clone()),
        "optimum": solved.and_then(|search| search.incumbent),
        "smallest_decade": decades.iter().min(),
        "largest_decade": decades.iter().max(),
    })
}

/// A pack that was read.
struct Pack {
    scenario: Scenario,
    expected: Vec<Value>,
}

/// Runs a pack again, or holds a new instance against it.
pub(crate) fn drift(
    options: &DriftOptions,
    out: &mut dyn Write,
    err: &mut dyn Write,
) -> Result<Ending> {
    let pack = match read(&options.pack, err)? {
        Ok(pack) => pack,
        Err(why) => return writeln!(err, "{}: {why}", options.pack).map(|()| Ending::Wrong),
    };
    match &options.file {
        None => again(&pack, out),
        Some(file) => match source::load(file) {
            Ok(source) => held(pack, source.text, out),
            Err(message) => writeln!(err, "{message}").map(|()| Ending::Wrong),
        },
    }
}

fn read(name: &str, err: &mut dyn Write) -> Result<std::result::Result<Pack, String>> {
    let text = match source::load(name) {
        Ok(source) => source.text,
        Err(message) => return Ok(Err(message)),
    };
    let Ok(pack) = serde_json::from_str::<Value>(&text) else {
        return Ok(Err("this is no pack: write one with hullward write --as pack".to_owned()));
    };
    let (Some(scenario), Some(expected)) = (pack["scenario"].as_str(), pack["expected"].as_array())
    else {
        return Ok(Err("this is no pack: it lacks \"scenario\" or \"expected\"".to_owned()));
    };
    let parsed = file::parse(scenario);
    complain(err, name, None, &parsed.complaints)?;
    Ok(parsed
        .scenario
        .map(|scenario| Pack { scenario, expected: expected.clone() })
        .ok_or_else(|| "its scenario cannot be read".to_owned()))
}

/// Runs everything again and says what differs.
fn again(pack: &Pack, out: &mut dyn Write) -> Result<Ending> {
    let mut differ = 0;
    let rivals = pack.scenario.rivals.len().max(1);
    for (place, before) in pack.expected.iter().enumerate() {
        let (_, one) = run_one(&pack.scenario, (place / rivals, place % rivals));
        let now = expected(&one);
        for (key, words) in MEASURES {
            if !same(&before[key], &now[key]) {
                differ += 1;
                let who = who(&now);
                writeln!(out, "{who}: {words} {} in place of {}", now[key], before[key])?;
            }
        }
    }
    if differ == 0 {
        writeln!(out, "all {} results are as recorded", pack.expected.len())?;
        return Ok(Ending::Done);
    }
    Ok(Ending::Broken)
}

fn same(before: &Value, now: &Value) -> bool {
    match (before.as_f64(), now.as_f64()) {
        (Some(before), Some(now)) => (before - now).abs() <= TOLERANCE * (1.0 + before.abs()),
        _ => before == now,
    }
}

fn who(of: &Value) -> String {
    let word = |key: &str| of[key].as_str().unwrap_or_default().to_owned();
    let instance = word("instance");
    if instance.is_empty() { word("rival") } else { format!("{} on {instance}", word("rival")) }
}

/// Every rival on a new instance, against the least and the most that were recorded of it.
fn held(pack: Pack, text: String, out: &mut dyn Write) -> Result<Ending> {
    let mut scenario = pack.scenario;
    let bind = scenario.instance.take().map(|before| before.bind).unwrap_or_default();
    scenario.instance = Some(InstanceText { text, bind, ..InstanceText::default() });
    scenario.further_instances = Vec::new();
    let mut ending = Ending::Done;
    for rival in 0..scenario.rivals.len() {
        let (_, one) = run_one(&scenario, (0, rival));
        if let Some(error) = &one.error {
            writeln!(out, "{}: cannot be run: {}", one.rival, error.message)?;
            ending = Ending::Wrong;
            continue;
        }
        let now = expected(&one);
        let before = pack.expected.iter().filter(|before| before["rival"] == now["rival"]);
        let before: Vec<&Value> = before.collect();
        let beyond: Vec<String> = MEASURES
            .iter()
            .filter_map(|(key, words)| outside(words, &before, (key, &now[*key])))
            .collect();
        if beyond.is_empty() {
            writeln!(out, "{}: within what was recorded", one.rival)?;
        }
        for words in beyond {
            writeln!(out, "{}: {words}", one.rival)?;
        }
    }
    Ok(ending)
}

/// A measure that lies outside of what was recorded, in words.
fn outside(words: &str, before: &[&Value], (key, now): (&str, &Value)) -> Option<String> {
    let now = now.as_f64()?;
    let mut known: Vec<f64> = before.iter().filter_map(|before| before[key].as_f64()).collect();
    known.sort_by(f64::total_cmp);
    let (low, high) = (known.first().copied()?, known.last().copied()?);
    let slack = TOLERANCE * (1.0 + high.abs());
    (now < low - slack || now > high + slack)
        .then(|| format!("{words} {now}, outside of the recorded {low} to {high}"))
}
