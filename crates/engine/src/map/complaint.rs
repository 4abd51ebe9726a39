//! Complaints of the instance reader and diagnostics of notation.

use notation::{Diagnostic, Severity};
use record::message::{Complaint, NOTE};
use record::place::{Finding, complaint};

/// A complaint of the instance reader about `text`. Line and column are the reader's own, for
/// it knows every way in which a line can end.
pub(crate) fn of_instance(text: &str, found: &instance::Complaint) -> Complaint {
    let finding = Finding {
        error: found.severity == instance::Severity::Error,
        code: found.code.to_owned(),
        span: found.span.clone(),
        message: found.message.clone(),
        mend: found.mend.clone(),
    };
    Complaint { line: found.line, column: found.column, ..complaint(text, finding) }
}

/// A diagnostic of notation about `text`, with all its mends in one sentence. The code of one
/// that only tells what was assumed begins with `note.`.
pub(crate) fn of_diagnostic(text: &str, found: &Diagnostic) -> Complaint {
    let mends: Vec<&str> = found.mends.iter().map(|mend| mend.label.as_str()).collect();
    let finding = Finding {
        error: found.severity == Severity::Error,
        code: match found.severity {
            Severity::Info => format!("{NOTE}{}", found.code),
            Severity::Warning | Severity::Error => found.code.to_owned(),
        },
        span: found.span.clone(),
        message: found.message.clone(),
        mend: mends.join("; "),
    };
    complaint(text, finding)
}
