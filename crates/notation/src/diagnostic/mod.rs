//! Diagnostics: what is wrong, where, and how to mend it. The messages themselves stand in
//! one file a family; the texts under `tests/fixtures` hold each of them to its place.
//!
//! | codes | about |
//! |---|---|
//! | `syntax.…` | what cannot be read |
//! | `name.…` | names: undeclared, declared twice, ambiguous, unused, without a set |
//! | `shape.…` | indices, sets, numbers, what is not linear |
//! | `row.…` | domain lines and rows, on the text and on the instance |
//! | `subset.…` | families over subsets |
//! | `data.…` | what the instance supplies or lacks |
//! | `size.…` | limits |
//! | `lint.…` | pitfalls, found in the rows on an instance |

use std::fmt;
use std::ops::Range;

use crate::place::{Span, line_column};

pub(crate) mod data;
pub(crate) mod lints;
pub(crate) mod names;
pub(crate) mod rows;
pub(crate) mod shapes;
pub(crate) mod size;
pub(crate) mod subsets;
pub(crate) mod syntax;

/// How bad it is.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Severity {
    /// Nothing is wrong; something was assumed.
    Info,
    /// The model is made, but probably not as it was meant.
    Warning,
    /// No model is made.
    Error,
}

/// A replacement of a piece of the text.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Edit {
    /// The bytes to replace; empty for an insertion.
    pub span: Range<usize>,
    /// What to put there.
    pub text: String,
}

/// A way to mend it.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Mend {
    /// What to do, as on a button: "make it a variable".
    pub label: String,
    /// The edit that does it, where there is one.
    pub edit: Option<Edit>,
}

impl fmt::Display for Mend {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(&self.label)
    }
}

/// Something to tell about a place in a text.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Diagnostic {
    /// A stable code such as `name.undeclared`.
    pub code: &'static str,
    /// How bad it is.
    pub severity: Severity,
    /// The bytes it is about, on character boundaries.
    pub span: Range<usize>,
    /// What is wrong: lower case, one clause.
    pub message: String,
    /// Ways to mend it, the likeliest first; often none.
    pub mends: Vec<Mend>,
    /// Further places with what they have to do with it.
    pub also: Vec<(Range<usize>, String)>,
}

impl Diagnostic {
    pub(crate) fn error(code: &'static str, span: Span, message: impl Into<String>) -> Self {
        Self::new(code, Severity::Error, span, message.into())
    }

    pub(crate) fn warning(code: &'static str, span: Span, message: impl Into<String>) -> Self {
        Self::new(code, Severity::Warning, span, message.into())
    }

    pub(crate) fn info(code: &'static str, span: Span, message: impl Into<String>) -> Self {
        Self::new(code, Severity::Info, span, message.into())
    }

    fn new(code: &'static str, severity: Severity, span: Span, message: String) -> Self {
        Self { code, severity, span: span.range(), message, mends: Vec::new(), also: Vec::new() }
    }

    pub(crate) fn mend(mut self, label: impl Into<String>) -> Self {
        self.mends.push(Mend { label: label.into(), edit: None });
        self
    }

    pub(crate) fn mend_by(
        mut self,
        label: impl Into<String>,
        span: Span,
        text: impl Into<String>,
    ) -> Self {
        let edit = Some(Edit { span: span.range(), text: text.into() });
        self.mends.push(Mend { label: label.into(), edit });
        self
    }

    pub(crate) fn also(mut self, span: Span, what: impl Into<String>) -> Self {
        self.also.push((span.range(), what.into()));
        self
    }

    /// Whether it stops the text from becoming a model.
    #[must_use]
    pub fn is_error(&self) -> bool {
        self.severity == Severity::Error
    }

    /// One line for a terminal: `3:7: message (mend; mend)`.
    #[must_use]
    pub fn line(&self, text: &str) -> String {
        let (line, column) = line_column(text, self.span.start);
        let mends: Vec<&str> = self.mends.iter().map(|m| m.label.as_str()).collect();
        let tail =
            if mends.is_empty() { String::new() } else { format!(" ({})", mends.join("; ")) };
        format!("{line}:{column}: {}{tail}", self.message)
    }
}

/// Puts diagnostics in the order of their places, each once.
pub(crate) fn tidy(mut diagnostics: Vec<Diagnostic>) -> Vec<Diagnostic> {
    diagnostics.sort_by(|a, b| {
        (a.span.start, a.span.end, a.code, &a.message).cmp(&(
            b.span.start,
            b.span.end,
            b.code,
            &b.message,
        ))
    });
    diagnostics.dedup();
    diagnostics
}
