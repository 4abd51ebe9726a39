//! The built command, with a text on its standard input.

use std::io::Write;
use std::process::{Command, Output, Stdio};

/// What a call gives.
pub(crate) fn hullward(words: &[&str], input: &str) -> Output {
    let mut child = Command::new(env!("CARGO_BIN_EXE_hullward"))
        .args(words)
        .stdin(Stdio::piped())
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .expect("the command starts");
    // A call that is refused before it reads closes the pipe: that is no failure here.
    let _ = child.stdin.take().expect("piped").write_all(input.as_bytes());
    child.wait_with_output().expect("it ends")
}

/// The exit status.
pub(crate) fn status(output: &Output) -> i32 {
    output.status.code().expect("no signal")
}

/// Standard output.
pub(crate) fn out(output: &Output) -> String {
    String::from_utf8(output.stdout.clone()).expect("text")
}

/// Standard error.
pub(crate) fn err(output: &Output) -> String {
    String::from_utf8(output.stderr.clone()).expect("text")
}
