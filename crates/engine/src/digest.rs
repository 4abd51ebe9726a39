//! One line that two machines, two builds or two slice sizes can compare.

use record::file;
use record::log;
use record::results::ErrorReport;
use record::scenario::letter;

use crate::native::{Watch, run_rival};

/// Runs a rival of a scenario (on its first instance) in slices of `slice` ticks and gives its
/// letter, the number of its events and the digest of their bytes ([`log::digest`]), with
/// blanks between: the same text on every machine and for every slice. No clock stops it, only
/// the scenario's limits of nodes and iterations.
///
/// # Errors
/// The scenario cannot be read, has no such rival, or the rival cannot be run.
pub fn log_digest(text: &str, rival: usize, slice: u64) -> Result<String, ErrorReport> {
    let parsed = file::parse(text);
    let Some(scenario) = parsed.scenario else {
        return Err(ErrorReport {
            message: "the scenario cannot be read".to_owned(),
            complaints: parsed.complaints,
            place: "scenario".to_owned(),
        });
    };
    let run = run_rival(&scenario, (0, rival), slice, &mut |_| Watch::GoOn);
    match run.error {
        Some(error) => Err(error),
        None => Ok(format!("{} {} {}", letter(rival), run.events.len(), log::digest(&run.events))),
    }
}
