//! Other programs, and steps with their durations.
#![allow(clippy::disallowed_types, reason = "durations are shown, and nothing depends on them")]

use std::path::Path;
use std::process::{Command, Stdio};
use std::thread;
use std::time::{Duration, Instant};

use crate::fault::{Attempt, Fault};

/// Does a step under its name and says how long it took.
pub(crate) fn step<T>(name: &str, act: impl FnOnce() -> Result<T, Fault>) -> Result<T, Fault> {
    println!("── {name}");
    let begun = Instant::now();
    let result = act();
    let outcome = if result.is_ok() { "done" } else { "FAILED" };
    println!("── {name}: {outcome} in {:.1} s\n", begun.elapsed().as_secs_f64());
    result
}

/// Runs a program to its end; what it prints is seen.
pub(crate) fn run(command: &mut Command) -> Result<(), Fault> {
    let line = shown(command);
    println!("   {line}");
    let status = command.status().attempting(format!("start `{line}`"))?;
    if status.success() { Ok(()) } else { Err(Fault::new(format!("`{line}` failed: {status}"))) }
}

/// Runs a program and returns what it printed.
pub(crate) fn output(command: &mut Command) -> Result<String, Fault> {
    let line = shown(command);
    let output = command.stdin(Stdio::null()).output().attempting(format!("start `{line}`"))?;
    if output.status.success() {
        Ok(String::from_utf8_lossy(&output.stdout).into_owned())
    } else {
        let said = String::from_utf8_lossy(&output.stderr);
        Err(Fault::new(format!("`{line}` failed: {}\n{}", output.status, said.trim())))
    }
}

/// Runs a program quietly for at most this long; true if it ended well. It is ended when the time
/// is over.
pub(crate) fn within(limit: Duration, command: &mut Command) -> bool {
    println!("   {} (for {} s at most)", shown(command), limit.as_secs());
    let quiet = command.stdin(Stdio::null()).stdout(Stdio::null()).stderr(Stdio::null());
    let Ok(mut child) = quiet.spawn() else { return false };
    let begun = Instant::now();
    while begun.elapsed() < limit {
        match child.try_wait() {
            Ok(Some(status)) => return status.success(),
            Ok(None) => thread::sleep(Duration::from_millis(100)),
            Err(_) => break,
        }
    }
    // It may have ended by itself just now: there is nothing else to end then.
    let _ = child.kill();
    let _ = child.wait();
    false
}

/// Whether a program of this name stands on the path.
pub(crate) fn on_path(program: &str) -> bool {
    std::env::var_os("PATH")
        .is_some_and(|path| std::env::split_paths(&path).any(|folder| is_file(&folder, program)))
}

fn is_file(folder: &Path, program: &str) -> bool {
    folder.join(program).is_file()
}

/// A command as one would type it, without its environment.
fn shown(command: &Command) -> String {
    let mut line = command.get_program().to_string_lossy().into_owned();
    for argument in command.get_args() {
        line.push(' ');
        line.push_str(&argument.to_string_lossy());
    }
    line
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_a_program_prints_and_how_it_ends() {
        let printed = output(Command::new("rustc").arg("--version"));
        assert!(printed.is_ok_and(|text| text.starts_with("rustc ")));
        let failed = output(Command::new("rustc").arg("--no-such-option"));
        let Err(fault) = failed else { panic!("it ended well") };
        assert!(fault.to_string().contains("rustc --no-such-option"));
    }

    #[test]
    fn a_program_that_takes_too_long_is_ended() {
        let begun = Instant::now();
        assert!(!within(Duration::from_millis(300), Command::new("sleep").arg("20")));
        assert!(begun.elapsed() < Duration::from_secs(10));
        assert!(within(Duration::from_secs(10), Command::new("sleep").arg("0")));
    }

    #[test]
    fn programs_on_the_path() {
        assert!(on_path("rustc"));
        assert!(!on_path("no-such-program-anywhere"));
    }
}
