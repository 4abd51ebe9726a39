//! Complaints on standard error: `file:line:column: error: message (mend) [code]`, the code where
//! `hullward help` knows it.

use std::io::{Result, Write};

use record::file::Origin;
use record::message::Complaint;

/// Writes complaints about the text of the name; where the text stands within a file, `origin`
/// says where it begins. Notes are no complaints.
pub(crate) fn complain(
    err: &mut dyn Write,
    name: &str,
    origin: Option<Origin>,
    complaints: &[Complaint],
) -> Result<()> {
    for complaint in complaints.iter().filter(|complaint| !complaint.is_note()) {
        let (line, column) =
            origin.map_or((complaint.line, complaint.column), |origin| origin.place(complaint));
        let kind = if complaint.error { "error" } else { "warning" };
        write!(err, "{name}:{line}:{column}: {kind}: ")?;
        if origin.is_some_and(|origin| !origin.verbatim) {
            write!(err, "(line {} of this text) ", complaint.line)?;
        }
        write!(err, "{}", complaint.message)?;
        if !complaint.mend.is_empty() {
            write!(err, " ({})", complaint.mend)?;
        }
        if !engine::explanation(&complaint.code).meaning.is_empty() {
            write!(err, " [{}]", complaint.code)?;
        }
        writeln!(err)?;
    }
    Ok(())
}
