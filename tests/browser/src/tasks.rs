//! The tasks of the page's own thread, from the browser's trace: how long each took on the clock, and
//! how much of a processor it had in that time. A machine that does other work as well makes the first
//! longer, not the second.

use serde_json::Value;

use crate::browser::Browser;
use crate::devtools::Post;
use crate::{Outcome, fault};

/// What is traced: tasks, and the marks of `performance.mark`.
pub(crate) const CATEGORIES: &str = "toplevel,blink.user_timing";
const TASK: &str = "ThreadControllerImpl::RunTask";
/// A smaller piece of what was traced is the last.
const PIECE: usize = 1_000;

/// A task of the page's own thread.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Task {
    /// When it began, in milliseconds of the trace.
    pub at: f64,
    /// Milliseconds on the clock.
    pub took: f64,
    /// Milliseconds of a processor.
    pub worked: f64,
}

/// All tasks of the page's own thread, and when its scripts set marks.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Tasks {
    /// The tasks in order.
    pub all: Vec<Task>,
    marks: Vec<(String, f64)>,
}

impl Tasks {
    /// The tasks that began between two marks.
    ///
    /// # Errors
    /// A mark that was not set.
    pub fn between(&self, first: &str, last: &str) -> Outcome<Vec<Task>> {
        let (first, last) = (self.mark(first)?, self.mark(last)?);
        Ok(self.all.iter().filter(|task| task.at > first && task.at < last).copied().collect())
    }

    /// When a mark was set for the last time, in milliseconds of the trace.
    ///
    /// # Errors
    /// That it was not.
    pub fn mark(&self, name: &str) -> Outcome<f64> {
        let set = self.marks.iter().rev().find(|(known, _)| known == name);
        set.map(|&(_, at)| at).ok_or_else(|| fault(format!("there is no mark {name:?}")))
    }
}

impl Browser {
    /// What the page's own thread did since the browser was started; once, for a browser of
    /// [`visit_traced`](crate::visit::visit_traced), and only after a mark was set.
    ///
    /// # Errors
    /// Those of the driver; that no mark was set.
    pub async fn tasks(&self) -> Outcome<Tasks> {
        let events = self.traced().await?;
        let of_mark = |event: &&Value| event["cat"] == "blink.user_timing";
        let last = events.iter().rev().find(of_mark).ok_or_else(|| fault("no mark was set"))?;
        let (process, thread) = (last["pid"].clone(), last["tid"].clone());
        let own = |event: &&Value| event["pid"] == process && event["tid"] == thread;
        let milliseconds = |event: &Value, what: &str| event[what].as_f64().unwrap_or(0.0) / 1000.0;
        let mut found = Tasks::default();
        for event in events.iter().filter(own) {
            let at = milliseconds(event, "ts");
            if of_mark(&event) {
                found.marks.push((event["name"].as_str().unwrap_or_default().to_owned(), at));
            } else if event["name"] == TASK {
                let (took, worked) = (milliseconds(event, "dur"), milliseconds(event, "tdur"));
                found.all.push(Task { at, took, worked });
            }
        }
        found.all.sort_by(|one, other| one.at.total_cmp(&other.at));
        found.marks.sort_by(|one, other| one.1.total_cmp(&other.1));
        Ok(found)
    }

    /// All that was traced, which the driver hands over piece by piece.
    async fn traced(&self) -> Outcome<Vec<Value>> {
        let mut events = Vec::new();
        loop {
            let log = self.post(Post::trace()).await?;
            let entries = log.as_array().map(Vec::as_slice).unwrap_or_default();
            let messages = entries
                .iter()
                .filter_map(|entry| serde_json::from_str(entry["message"].as_str()?).ok())
                .map(|mut message: Value| message["message"]["params"].take());
            events.extend(messages);
            if entries.len() < PIECE {
                return Ok(events);
            }
        }
    }
}
