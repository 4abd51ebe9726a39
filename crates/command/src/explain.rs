//! `hullward help CODE`: what the code of a complaint means.

use std::io::{Result, Write};

use record::file::nearest;

use crate::ending::Ending;

/// Prints the meaning of a code and an example: lines marked `-` fail, those marked `+` mend it.
pub(crate) fn explain(code: &str, out: &mut dyn Write, err: &mut dyn Write) -> Result<Ending> {
    let found = engine::explanation(code);
    if found.meaning.is_empty() {
        let known: Vec<&str> = engine::explained().collect();
        let hint = nearest(code, &known).map(|near| format!("did you mean {near}? "));
        let hint = hint.unwrap_or_default();
        writeln!(err, "hullward: there is no code {code}: {hint}there are {}", known.join(", "))?;
        return Ok(Ending::Wrong);
    }
    writeln!(out, "{}\n\n{}", found.code, found.meaning)?;
    if !found.example.is_empty() {
        writeln!(out, "\n{}", found.example.trim_end())?;
    }
    Ok(Ending::Done)
}
