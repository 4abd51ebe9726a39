//! `hullward digest`: one line a rival that two machines, two builds or two slice sizes can
//! compare.

use std::io::{Result, Write};

use record::file;

use crate::clock::Clock;
use crate::complain::complain;
use crate::ending::Ending;
use crate::options::DigestOptions;
use crate::source;

/// Prints letter, number of events and digest of each rival, and where runs are asked for the
/// milliseconds of the shortest.
pub(crate) fn digest(
    options: &DigestOptions,
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
    let mut ending = Ending::Done;
    for rival in 0..scenario.rivals.len() {
        match engine::log_digest(&source.text, rival, options.slice) {
            Ok(line) => match shortest(&source.text, rival, options) {
                Some(milliseconds) => writeln!(out, "{line} {milliseconds}")?,
                None => writeln!(out, "{line}")?,
            },
            Err(error) => {
                writeln!(err, "{}: {error}", source.name)?;
                ending = Ending::Wrong;
            }
        }
    }
    Ok(ending)
}

/// The milliseconds of the shortest of the runs that are asked for; `None` where none is.
fn shortest(text: &str, rival: usize, options: &DigestOptions) -> Option<f64> {
    let run = |_| {
        let clock = Clock::start();
        engine::log_digest(text, rival, options.slice).map(|_| clock.milliseconds())
    };
    let times = (0..options.runs).filter_map(|number| run(number).ok());
    times.reduce(|least, time| if time < least { time } else { least })
}
