//! `hullward prove`: a saved log proved again, leaf by leaf, by a machine that did not run it.

use std::io::{Result, Write};

use engine::LogAudit;
use engine::native::USUAL_SLICE;
use record::event::Log;
use record::results::{AuditReport, ErrorReport, Judgement};
use report::audit::sentences;

use crate::complain::complain;
use crate::ending::Ending;
use crate::options::ProveOptions;

/// Proves every leaf of the log in a file and says what came of it; JSON where that is asked for.
pub(crate) fn prove(
    options: &ProveOptions,
    out: &mut dyn Write,
    err: &mut dyn Write,
) -> Result<Ending> {
    let file = options.file.as_str();
    let bytes = match std::fs::read(file) {
        Ok(bytes) => bytes,
        Err(error) => {
            return writeln!(err, "{file}: cannot be read: {error}").map(|()| Ending::Wrong);
        }
    };
    let log = match record::log::decode(&bytes) {
        Ok(log) => log,
        Err(error) => return writeln!(err, "{file}: {error}").map(|()| Ending::Wrong),
    };
    if log.engine != engine::VERSION {
        let (made, now) = (&log.engine, engine::VERSION);
        writeln!(err, "{file}: the log is of engine {made}; this is engine {now}")?;
    }
    let found = match proved(log) {
        Ok(found) => found,
        Err(error) => {
            complain(err, file, None, &error.complaints)?;
            return writeln!(err, "{file}: {}", error.message).map(|()| Ending::Wrong);
        }
    };
    if options.json {
        serde_json::to_writer(&mut *out, &found)?;
        writeln!(out)?;
    } else {
        writeln!(out, "{}: {} nodes", found.title, found.nodes)?;
        for sentence in sentences(&found) {
            writeln!(out, "{sentence}")?;
        }
    }
    Ok(ending(&found))
}

/// What comes of a log.
fn proved(log: Log) -> std::result::Result<AuditReport, ErrorReport> {
    let mut audit = LogAudit::new(log)?;
    while !audit.advance(USUAL_SLICE)? {}
    Ok(audit.report())
}

fn ending(found: &AuditReport) -> Ending {
    match found.judgement {
        Judgement::Proved => Ending::Done,
        Judgement::Open => Ending::Limit,
        Judgement::Refused => Ending::Wrong,
    }
}
