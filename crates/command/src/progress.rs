//! One line on standard error that says how far a rival is: only on a terminal, and seldom.

use std::io::{IsTerminal, Write};

use engine::native::{Moment, Phase};
use report::number::{count, short};

use crate::clock::Clock;

/// Milliseconds between two lines.
const BETWEEN: f64 = 200.0;

/// The line.
#[derive(Debug)]
pub(crate) struct Line {
    shown: bool,
    next: f64,
}

impl Line {
    /// A line that is not shown yet.
    pub(crate) fn new() -> Self {
        Self { shown: false, next: BETWEEN }
    }

    /// Shows where a rival is, when it is time to.
    pub(crate) fn show(&mut self, letter: &str, moment: &Moment<'_>, clock: &Clock) {
        let now = clock.milliseconds();
        if now < self.next || !std::io::stderr().is_terminal() {
            return;
        }
        self.next = now + BETWEEN;
        self.shown = true;
        let _ = write!(std::io::stderr(), "\r\x1b[K{letter}: {}", words(moment));
    }

    /// Shows what a study does, when it is time to.
    pub(crate) fn say(&mut self, kind: &str, (doing, solved): &(String, u32), clock: &Clock) {
        let now = clock.milliseconds();
        if now < self.next || !std::io::stderr().is_terminal() {
            return;
        }
        self.next = now + BETWEEN;
        self.shown = true;
        let solved = count(u64::from(*solved));
        let _ = write!(std::io::stderr(), "\r\x1b[K{kind}: {doing} ({solved} models solved)");
    }

    /// Wipes the line.
    pub(crate) fn wipe(&mut self) {
        if std::mem::take(&mut self.shown) {
            let _ = write!(std::io::stderr(), "\r\x1b[K");
        }
    }
}

fn words(moment: &Moment<'_>) -> String {
    let doing = moment.progress.map_or("reading", |progress| progress.doing.as_str());
    if moment.phase == Phase::Root {
        let iterations = moment.progress.map_or(0, |progress| progress.iterations);
        return format!("{doing}, {} iterations", count(iterations));
    }
    let value = |value: Option<f64>| value.map_or_else(|| "none".to_owned(), short);
    format!(
        "{doing}, {} nodes, bound {}, incumbent {}",
        count(u64::from(moment.nodes)),
        value(moment.bound),
        value(moment.incumbent)
    )
}
