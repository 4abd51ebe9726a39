//! The saved log.
//!
//! ```text
//! bytes 0..8    the letters "hullward"
//! byte  8       the letter "L"
//! byte  9       the version: 1, 2 or 3
//! then          the engine's version and the list of events, in postcard's encoding
//! from 2 on     what the log rests on ([`crate::ground`]), in version 2 without general cuts
//! ```
//!
//! Old logs open for ever: the events of version 1 keep their numbers and fields; whoever adds
//! to [`Event`] or [`crate::ground`] in a way that changes these bytes writes version 4 and still
//! reads the others. A log is written as the oldest version that holds it ([`version`]).

use std::fmt;

use crate::derivation::Cuts;
use crate::event::{Event, Log};
use crate::ground::{Evidence, FoundRow, Ground, Tightening};
use crate::hash;

pub use crate::kept::KeptEvents;

const HEAD: &[u8; 9] = b"hullwardL";

/// Whether a file's bytes begin as a log does.
#[must_use]
pub fn looks_like_a_log(bytes: &[u8]) -> bool {
    bytes.starts_with(HEAD)
}

/// The longest log, in bytes: 256 MiB.
pub const LONGEST_LOG: usize = 256 << 20;

/// Why bytes are no log.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum LogError {
    /// They do not begin as a log does.
    NoLog,
    /// The version is newer than this engine.
    Version(u8),
    /// They end early, or hold what a log does not.
    Malformed,
    /// They are more than [`LONGEST_LOG`].
    TooLong,
}

impl fmt::Display for LogError {
    fn fmt(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::NoLog => formatter.write_str("this is no log of a search"),
            Self::Version(version) => {
                write!(formatter, "the log is of version {version}; this engine reads 1 to 3")
            }
            Self::Malformed => formatter.write_str("the log is damaged or cut short"),
            Self::TooLong => formatter.write_str("the log is longer than 256 MiB"),
        }
    }
}

impl std::error::Error for LogError {}

/// The version of a log that rests on this.
#[must_use]
pub fn version(ground: Option<&Ground>) -> u32 {
    ground.map_or(1, |ground| if ground.evidence.cuts == Cuts::default() { 2 } else { 3 })
}

/// What a search found as a log of version 2 has it.
type Uncut = (Vec<(u32, f64)>, Vec<FoundRow>, Vec<Tightening>);

fn with_cuts((scenario, instance, rival, found): (String, u32, u32, Uncut)) -> Ground {
    let (plan, rows, tightened) = found;
    let evidence = Evidence { plan, rows, tightened, cuts: Cuts::default() };
    Ground { scenario, instance, rival, evidence }
}

/// A log as bytes: the same log gives the same bytes.
///
/// # Errors
/// [`LogError::TooLong`]; [`LogError::Version`] for a version that does not go with its ground.
pub fn encode(log: &Log) -> Result<Vec<u8>, LogError> {
    let number = u8::try_from(log.version).unwrap_or(u8::MAX);
    if log.version != version(log.ground.as_ref()) {
        return Err(LogError::Version(number));
    }
    let (engine, events) = (&log.engine, &log.events);
    let body = match &log.ground {
        None => postcard::to_allocvec(&(engine, events)),
        Some(ground) if number == 2 => {
            let Ground { scenario, instance, rival, evidence } = ground;
            let found = (&evidence.plan, &evidence.rows, &evidence.tightened);
            postcard::to_allocvec(&(engine, events, (scenario, instance, rival, found)))
        }
        Some(ground) => postcard::to_allocvec(&(engine, events, ground)),
    };
    let body = body.map_err(|_| LogError::Malformed)?;
    if body.len() > LONGEST_LOG {
        return Err(LogError::TooLong);
    }
    Ok([HEAD.as_slice(), &[number], &body].concat())
}

/// A log from bytes.
///
/// # Errors
/// Every [`LogError`].
pub fn decode(bytes: &[u8]) -> Result<Log, LogError> {
    if bytes.len() > LONGEST_LOG {
        return Err(LogError::TooLong);
    }
    let rest = bytes.strip_prefix(HEAD).ok_or(LogError::NoLog)?;
    let (&version, body) = rest.split_first().ok_or(LogError::NoLog)?;
    let read = match version {
        1 => postcard::take_from_bytes(body).map(|((engine, events), left)| {
            (Log { version: 1, engine, events, ground: None }, left)
        }),
        2 => postcard::take_from_bytes(body).map(|((engine, events, ground), left)| {
            (Log { version: 2, engine, events, ground: Some(with_cuts(ground)) }, left)
        }),
        3 => postcard::take_from_bytes(body).map(|((engine, events, ground), left)| {
            (Log { version: 3, engine, events, ground: Some(ground) }, left)
        }),
        newer => return Err(LogError::Version(newer)),
    };
    match read {
        Ok((log, [])) => Ok(log),
        _ => Err(LogError::Malformed),
    }
}

/// The digest of a list of events: sixteen hexadecimal digits that depend on nothing else (not
/// on the engine's version), so that two machines, or two slice sizes, can be compared.
#[must_use]
pub fn digest(events: &[Event]) -> String {
    hash::hex(&postcard::to_allocvec(events).unwrap_or_default())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::derivation::{Derivation, FoundCut, Source};
    use crate::event::{Branching, NodeNumber, NodeState, Origin, Side};

    fn sample() -> Log {
        let root = NodeNumber(1);
        let branching = Branching { column: 3, side: Side::AtMost, bound: 0.0 };
        let events = vec![
            Event::Created { node: root, parent: None, branching: None },
            Event::Solved {
                node: root,
                state: NodeState::Branched,
                bound: Some(151.2),
                fractional: 2,
                iterations: 40,
                rows_added: 0,
                branch_column: Some(3),
            },
            Event::Created { node: NodeNumber(2), parent: Some(root), branching: Some(branching) },
            Event::Incumbent {
                node: root,
                value: 214.0,
                origin: Origin::Heuristic("2-opt".to_owned()),
            },
            Event::Dropped { node: NodeNumber(2), state: NodeState::Pruned },
            Event::Bound { bound: 214.0, nodes: 1 },
        ];
        Log { version: 1, engine: "0.1.0".to_owned(), events, ground: None }
    }

    #[test]
    fn a_log_comes_back_and_its_digest_sees_every_bit() {
        let log = sample();
        let bytes = encode(&log).expect("version 1");
        assert_eq!(decode(&bytes), Ok(log.clone()));
        let mut other = log.clone();
        if let Event::Bound { bound, .. } = &mut other.events[5] {
            *bound = f64::from_bits(bound.to_bits() + 1);
        }
        assert_ne!(digest(&log.events), digest(&other.events));
    }

    #[test]
    fn damaged_bytes_are_refused_with_a_reason() {
        let bytes = encode(&sample()).expect("version 1");
        assert_eq!(decode(b"hullward"), Err(LogError::NoLog));
        assert_eq!(decode(&bytes[..bytes.len() - 1]), Err(LogError::Malformed));
        assert_eq!(decode(&[bytes.as_slice(), &[0]].concat()), Err(LogError::Malformed));
        let mut newer = bytes;
        newer[9] = 4;
        assert_eq!(decode(&newer), Err(LogError::Version(4)));
        assert_eq!(encode(&Log { version: 2, ..sample() }), Err(LogError::Version(2)));
    }

    #[test]
    fn a_log_that_says_what_it_rests_on_comes_back() {
        let ground = Ground { scenario: "hullward = 1\n".to_owned(), ..Ground::default() };
        let log = Log { version: 2, ground: Some(ground), ..sample() };
        let bytes = encode(&log).expect("version 2");
        assert_eq!(bytes[9], 2);
        assert_eq!(decode(&bytes), Ok(log.clone()));
        assert_eq!(encode(&Log { version: 1, ..log.clone() }), Err(LogError::Version(1)));
        let mut cut = log;
        let evidence = &mut cut.ground.as_mut().expect("a ground").evidence;
        evidence.cuts.sources.push(Source::Row(FoundRow::Written(4)));
        evidence.cuts.cuts.push(FoundCut {
            class: "cover".to_owned(),
            entries: vec![(2, "1".to_owned()), (5, "1".to_owned())],
            side: "1".to_owned(),
            derivation: Derivation::Knapsack((0, true)),
        });
        assert_eq!(encode(&cut), Err(LogError::Version(2)));
        cut.version = version(cut.ground.as_ref());
        let bytes = encode(&cut).expect("version 3");
        assert_eq!((bytes[9], decode(&bytes)), (3, Ok(cut)));
    }
}
