//! A driver of one's own, on a port that it chooses, ended with everything it started.

use std::process::Stdio;

use tokio::io::{AsyncBufReadExt, BufReader, copy, sink};
use tokio::process::{Child, Command};

use crate::{Outcome, fault};

/// A program that says in a line of its output where it can be reached.
#[derive(Debug)]
pub(crate) struct Listening {
    child: Child,
    said: String,
}

impl Listening {
    /// Starts a program in a process group of its own, and waits for a line that `tells` finds
    /// something in.
    pub(crate) async fn start(
        command: &mut Command,
        tells: impl Fn(&str) -> Option<String>,
    ) -> Outcome<Self> {
        let name = command.as_std().get_program().to_string_lossy().into_owned();
        let mut child = command
            .stdin(Stdio::null())
            .stdout(Stdio::piped())
            .stderr(Stdio::null())
            .process_group(0)
            .kill_on_drop(true)
            .spawn()
            .map_err(|error| fault(format!("could not start {name}: {error}")))?;
        let output = child.stdout.take().ok_or_else(|| fault("no output"))?;
        let mut lines = BufReader::new(output).lines();
        while let Some(line) = lines.next_line().await? {
            if let Some(said) = tells(&line) {
                // Read to its end: a program whose output is closed may stop when it next prints, and one
                // whose output nobody reads stands still. geckodriver prints the addresses that Firefox
                // complains of, and a link longer than a pipe's 64 KiB held up its test for ever.
                tokio::spawn(async move { copy(&mut lines.into_inner(), &mut sink()).await });
                return Ok(Self { child, said });
            }
        }
        Err(fault(format!("{name} ended without saying where it listens")))
    }

    /// The process group of the program and all that it started.
    pub(crate) fn group(&self) -> Option<u32> {
        self.child.id()
    }

    /// What the line told.
    pub(crate) fn said(&self) -> &str {
        &self.said
    }
}

impl Drop for Listening {
    fn drop(&mut self) {
        // The whole group: chromedriver leaves its browser behind when it is killed alone.
        if let Some(id) = self.child.id() {
            let group = format!("-{id}");
            let _ = std::process::Command::new("kill").args(["-KILL", "--", &group]).status();
        }
    }
}

/// Starts chromedriver; it says its address.
pub(crate) async fn chromedriver() -> Outcome<Listening> {
    let mut command = Command::new("chromedriver");
    command.arg("--port=0");
    Listening::start(&mut command, |line| {
        let port = line.split("successfully on port ").nth(1)?;
        Some(format!("http://127.0.0.1:{}", port.trim_end_matches('.')))
    })
    .await
}

/// Starts geckodriver; it says its address. `HULLWARD_GECKODRIVER` names it where it is not on the
/// path.
pub(crate) async fn geckodriver() -> Outcome<Listening> {
    let program = std::env::var_os("HULLWARD_GECKODRIVER").unwrap_or("geckodriver".into());
    let mut command = Command::new(program);
    command.arg("--port=0");
    Listening::start(&mut command, |line| {
        Some(format!("http://{}", line.split("Listening on ").nth(1)?.trim()))
    })
    .await
}
