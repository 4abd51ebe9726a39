//! Whether the results are those that were there when the link or file was made, for stderr.

use std::io::{Result, Write};

use record::results::{Comparison, RivalResult, compare};
use record::scenario::Scenario;

/// Says whether the results, each with its place in the scenario's order of results, are those of
/// the scenario's digest; nothing where it has none.
pub(crate) fn say(
    scenario: &Scenario,
    results: &[(usize, RivalResult)],
    name: &str,
    err: &mut dyn Write,
) -> Result<()> {
    let Some(digest) = &scenario.digest else { return Ok(()) };
    if let Some(made) = scenario.engine.as_deref().filter(|made| *made != engine::VERSION) {
        let now = engine::VERSION;
        writeln!(err, "{name}: its results are of engine {made}; this is engine {now}")?;
    }
    let compared: Vec<(&RivalResult, Comparison)> =
        results.iter().map(|(place, one)| (one, compare(digest, *place, one))).collect();
    let differs = compared.iter().find_map(|(one, found)| match found {
        Comparison::Differs(what) => Some(format!("{}: {what}", of(one))),
        _ => None,
    });
    if let Some(what) = differs {
        return writeln!(err, "{name}: the results differ from those it was made with, {what}");
    }
    let open: Vec<String> = compared
        .iter()
        .filter(|(_, found)| *found != Comparison::Same)
        .map(|(one, _)| of(one))
        .collect();
    if open.len() == compared.len() {
        return writeln!(err, "{name}: no result could be compared with those it was made with");
    }
    let but = if open.is_empty() {
        String::new()
    } else {
        format!("; not compared: {}", open.join(", "))
    };
    writeln!(err, "{name}: the results are the same as those it was made with{but}")
}

fn of(one: &RivalResult) -> String {
    if one.instance.is_empty() {
        one.rival.clone()
    } else {
        format!("{} on {}", one.rival, one.instance)
    }
}
