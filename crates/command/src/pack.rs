//! The regression pack run again, and the drift check: a new instance against what was recorded.

use std::io::{Result, Write};

use engine::native::instance_title;
use record::file;
use record::pack::{Expected, Pack, VERSION};
use record::scenario::{InstanceText, Scenario, letter};
use report::drift::{beyond, differences};

use crate::complain::complain;
use crate::ending::Ending;
use crate::options::DriftOptions;
use crate::run::run_one;
use crate::source;

/// A pack with its scenario read.
struct Opened {
    scenario: Scenario,
    expected: Vec<Expected>,
    tolerance: f64,
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

fn read(name: &str, err: &mut dyn Write) -> Result<std::result::Result<Opened, String>> {
    let text = match source::load(name) {
        Ok(source) => source.text,
        Err(message) => return Ok(Err(message)),
    };
    let pack: Pack = match serde_json::from_str(&text) {
        Ok(pack) => pack,
        Err(why) => {
            return Ok(Err(format!(
                "this is no pack: {why}; write one with hullward write --as pack"
            )));
        }
    };
    if pack.hullward_pack != VERSION {
        let version = pack.hullward_pack;
        return Ok(Err(format!("this is a pack of version {version}; {VERSION} can be read")));
    }
    let parsed = file::parse(&pack.scenario);
    complain(err, name, None, &parsed.complaints)?;
    Ok(parsed
        .scenario
        .map(|scenario| Opened { scenario, expected: pack.expected, tolerance: pack.tolerance })
        .ok_or_else(|| "its scenario cannot be read".to_owned()))
}

/// Runs everything again and says what differs.
fn again(pack: &Opened, out: &mut dyn Write) -> Result<Ending> {
    let mut differ = 0;
    for before in &pack.expected {
        let Some(place) = place_of(&pack.scenario, before) else {
            differ += 1;
            writeln!(out, "{}: its scenario has none of that name", who(before))?;
            continue;
        };
        let (_, one) = run_one(&pack.scenario, place);
        for words in differences(before, &Expected::of(&one), pack.tolerance) {
            differ += 1;
            writeln!(out, "{}: {words}", who(before))?;
        }
    }
    if differ == 0 {
        writeln!(out, "all {} results are as recorded", pack.expected.len())?;
        return Ok(Ending::Done);
    }
    Ok(Ending::Broken)
}

/// The instance and the rival of a record, by place.
fn place_of(scenario: &Scenario, of: &Expected) -> Option<(usize, usize)> {
    let instances = scenario.instances().count().max(1);
    let instance = (0..instances).find(|&at| instance_title(scenario, at) == of.instance)?;
    let rival = (0..scenario.rivals.len()).find(|&at| letter(at) == of.rival)?;
    Some((instance, rival))
}

fn who(of: &Expected) -> String {
    let Expected { rival, instance, .. } = of;
    if instance.is_empty() { rival.clone() } else { format!("{rival} on {instance}") }
}

/// Every rival on a new instance, against the least and the most that were recorded of it.
fn held(pack: Opened, text: String, out: &mut dyn Write) -> Result<Ending> {
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
        let now = Expected::of(&one);
        let before = pack.expected.iter().filter(|before| before.rival == now.rival);
        let outside = beyond(&before.collect::<Vec<_>>(), &now, pack.tolerance);
        if outside.is_empty() {
            writeln!(out, "{}: within what was recorded", one.rival)?;
        }
        for words in outside {
            writeln!(out, "{}: {words}", one.rival)?;
        }
    }
    Ok(ending)
}
