//! Reading: the text cut into sections, each line handed to its section; first by words, then,
//! where that fails, by the columns of cards.

use std::ops::Range;

use super::complaint::{Complaint, Complaints, Severity, excerpt};
use super::draft::Draft;
use super::line::{Field, Layout, lines, words};
use super::trap::{Trap, Traps};
use crate::{Model, Sense};

/// The longest text that is read, in bytes.
pub const MOST_BYTES: usize = 64 << 20;
/// The most entries of the matrix that are read.
pub const MOST_ENTRIES: usize = 5_000_000;

/// The section a line stands in.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Section {
    None,
    Sense,
    Rows,
    Columns,
    Rhs,
    Ranges,
    Bounds,
    /// One that was refused: its lines are passed over.
    Refused,
    End,
}

/// The reader of one text in one layout.
pub(super) struct Reader<'a> {
    pub(super) sink: Complaints<'a>,
    pub(super) traps: Traps,
    pub(super) layout: Layout,
    pub(super) draft: Draft<'a>,
    section: Section,
    /// Whether columns stand between integer markers.
    pub(super) integer: bool,
    /// The column whose lines are being read.
    pub(super) current: Option<u32>,
    /// The first set named in RHS, RANGES and BOUNDS.
    pub(super) sets: [Option<&'a str>; 3],
    /// Whether a limit ended the reading.
    pub(super) stopped: bool,
}

/// Reads an MPS text, exactly; [the module's table](super) says how, where readers disagree.
///
/// The model comes with warnings; without a model, the complaints hold at least one error, and
/// all that were found. Nothing panics. `O(n log n)` in the length of the text.
///
/// # Errors
/// All complaints, when any of them is an error: a text over [`MOST_BYTES`], more entries than
/// [`MOST_ENTRIES`], or anything that cannot be read.
pub fn read(text: &str) -> Result<(Model, Vec<Complaint>), Vec<Complaint>> {
    if text.len() > MOST_BYTES {
        return Err(vec![too_long(text.len())]);
    }
    let (free, free_errors, stopped) = attempt(text, Layout::Free);
    let complaints = match free {
        Ok(read) => return Ok(read),
        Err(complaints) => complaints,
    };
    if stopped {
        return Err(complaints);
    }
    let (fixed, fixed_errors, _) = attempt(text, Layout::Fixed);
    match fixed {
        Ok((model, mut warnings)) => {
            warnings.insert(0, by_columns(&complaints));
            Ok((model, warnings))
        }
        Err(fixed) if fixed_errors < free_errors => Err(fixed),
        Err(_) => Err(complaints),
    }
}

/// The outcome of reading in one layout, how many errors there were, and whether a limit ended
/// it.
type Attempt = (Result<(Model, Vec<Complaint>), Vec<Complaint>>, usize, bool);

fn attempt(text: &str, layout: Layout) -> Attempt {
    let mut reader = Reader {
        sink: Complaints::new(text),
        traps: Traps::default(),
        layout,
        draft: Draft::new(),
        section: Section::None,
        integer: false,
        current: None,
        sets: [None; 3],
        stopped: false,
    };
    for line in lines(text) {
        if reader.stopped {
            break;
        }
        reader.line(&line);
    }
    if reader.section != Section::End && !reader.stopped {
        reader.sink.error(text.len()..text.len(), || {
            (
                "no-end",
                "The text ends without ENDATA: it may be cut off".to_owned(),
                "Write ENDATA on a line of its own at the end, if the text is complete.".to_owned(),
            )
        });
    }
    let stopped = reader.stopped;
    let Reader { mut sink, mut traps, draft, .. } = reader;
    let model = super::finish::model(draft, &mut traps, &mut sink);
    traps.finish(&mut sink);
    let errors = sink.errors();
    let complaints = sink.finish();
    match model {
        Some(model) if errors == 0 => (Ok((model, complaints)), 0, stopped),
        _ => (Err(complaints), errors, stopped),
    }
}

impl<'a> Reader<'a> {
    fn line(&mut self, line: &Field<'a>) {
        if line.text.starts_with('*') || line.text.trim().is_empty() {
            return;
        }
        if self.section == Section::End {
            self.traps.meet(Trap::AfterEnd, line.span());
            return;
        }
        if !line.text.starts_with(char::is_whitespace) {
            self.header(line);
            return;
        }
        match self.section {
            Section::Sense => self.sense(&words(line)),
            Section::Rows => self.row(line),
            Section::Columns => self.column(line),
            Section::Rhs => self.right(line),
            Section::Ranges => self.range(line),
            Section::Bounds => self.bound(line),
            Section::Refused | Section::End => {}
            Section::None => self.error(line.span(), "no-section", || {
                (
                    "This line stands before the first section".to_owned(),
                    "Begin with NAME and ROWS.".to_owned(),
                )
            }),
        }
    }

    fn header(&mut self, line: &Field<'a>) {
        let words = words(line);
        let Some(first) = words.first().copied() else { return };
        self.section = match first.text.to_ascii_uppercase().as_str() {
            "NAME" => {
                self.draft.title = line.text[first.text.len()..].trim();
                Section::None
            }
            "OBJSENSE" | "OBJSENSE:" => {
                if words.len() > 1 {
                    self.sense(&words[1..]);
                }
                Section::Sense
            }
            "ROWS" => Section::Rows,
            "COLUMNS" => Section::Columns,
            "RHS" if words.len() == 1 => Section::Rhs,
            "RANGES" if words.len() == 1 => Section::Ranges,
            "BOUNDS" if words.len() == 1 => Section::Bounds,
            "ENDATA" => Section::End,
            _ => {
                self.unknown_section(first);
                Section::Refused
            }
        };
    }

    fn unknown_section(&mut self, first: Field<'a>) {
        self.error(first.span(), "unknown-section", || {
            (
                format!("{} is no section that is read here", excerpt(first.text)),
                "Sections are NAME, OBJSENSE, ROWS, COLUMNS, RHS, RANGES, BOUNDS and ENDATA; other lines begin with a blank.".to_owned(),
            )
        });
    }

    fn sense(&mut self, words: &[Field<'a>]) {
        let Some(word) = words.first() else { return };
        match word.text.to_ascii_uppercase().as_str() {
            "MAX" | "MAXIMIZE" | "MAXIMISE" => self.draft.sense = Sense::Maximise,
            "MIN" | "MINIMIZE" | "MINIMISE" => self.draft.sense = Sense::Minimise,
            _ => self.error(word.span(), "sense", || {
                (
                    format!("{} is no direction of the objective", excerpt(word.text)),
                    "Write MAX or MIN.".to_owned(),
                )
            }),
        }
    }

    /// Adds an error; the words, message and mend, are made only when they are kept.
    pub(super) fn error(
        &mut self,
        span: Range<usize>,
        code: &'static str,
        words: impl FnOnce() -> (String, String),
    ) {
        self.sink.error(span, || {
            let (message, mend) = words();
            (code, message, mend)
        });
    }
}

fn too_long(bytes: usize) -> Complaint {
    Complaint {
        severity: Severity::Error,
        code: "too-long",
        line: 1,
        column: 1,
        span: 0..0,
        message: format!("The text has {} MB; at most 64 MB are read", bytes.div_ceil(1 << 20)),
        mend: "Take a smaller instance.".to_owned(),
    }
}

/// The warning that the text was read by columns, at what the reading by words fell over.
fn by_columns(free: &[Complaint]) -> Complaint {
    let error = free.iter().find(|complaint| complaint.severity == Severity::Error);
    let (line, column, span) =
        error.map_or((1, 1, 0..0), |first| (first.line, first.column, first.span.clone()));
    Complaint {
        severity: Severity::Warning,
        code: "fixed-columns",
        line,
        column,
        span,
        message: "The text was read by the columns of cards, for words between blanks failed here: names may hold blanks, which many programs do not take".to_owned(),
        mend: "Write names without blanks.".to_owned(),
    }
}
