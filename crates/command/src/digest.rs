//! `hullward digest`: one line a rival that two machines, two builds or two slice sizes can
//! compare.

use std::io::{Result, Write};

use record::file;

use crate::complain::complain;
use crate::ending::Ending;
use crate::source;

/// Prints letter, number of events and digest of each rival.
pub(crate) fn digest(
    word: &str,
    slice: u64,
    out: &mut dyn Write,
    err: &mut dyn Write,
) -> Result<Ending> {
    let source = match source::load(word) {
        Ok(source) => source,
        Err(message) => return writeln!(err, "{message}").map(|()| Ending::Wrong),
    };
    let parsed = file::parse(&source.text);
    complain(err, &source.name, None, &parsed.complaints)?;
    let Some(scenario) = parsed.scenario else { return Ok(Ending::Wrong) };
    let mut ending = Ending::Done;
    for rival in 0..scenario.rivals.len() {
        match engine::log_digest(&source.text, rival, slice) {
            Ok(line) => writeln!(out, "{line}")?,
            Err(error) => {
                writeln!(err, "{}: {error}", source.name)?;
                ending = Ending::Wrong;
            }
        }
    }
    Ok(ending)
}
