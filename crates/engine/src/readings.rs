//! Instance texts are read once, and again only when they change.

use std::rc::Rc;

use instance::{Reader, Reading, Slices};
use record::message::InstanceReport;
use record::results::ErrorReport;
use record::scenario::{InstanceText, reader_and_part};

use crate::fault::{fault, unknown};
use crate::map;
use crate::mps;

/// The last text that was read, with what came out of it, and one that is being read.
#[derive(Debug, Default)]
pub(crate) struct Readings {
    last: Option<(Source, Rc<Reading>)>,
    open: Option<(Source, Slices<'static, Reading>)>,
    /// The report on the last text, on its way or done.
    report: Option<Reporting>,
}

#[derive(Debug)]
enum Reporting {
    Open(Slices<'static, InstanceReport>),
    Done(InstanceReport),
}

/// A text and the reader that was asked for.
#[derive(Debug, Clone, PartialEq, Eq)]
struct Source {
    reader: Option<String>,
    text: Rc<str>,
}

impl Source {
    fn new(text: &InstanceText) -> Self {
        Self { reader: text.reader.clone(), text: Rc::from(text.text.as_str()) }
    }

    fn is(&self, text: &InstanceText) -> bool {
        self.reader == text.reader && *self.text == *text.text
    }

    /// The reading of it, not begun yet.
    fn reading(&self) -> Result<Slices<'static, Reading>, ErrorReport> {
        let (reader, part) = asked(self.reader.as_deref())?;
        let text = Rc::clone(&self.text);
        Ok(Slices::new(
            |pace| async move { instance::read_in_slices(&text, reader, part, pace).await },
        ))
    }
}

impl Readings {
    /// Reads on in a text for about `ticks`; whether there is more to do before [`Self::read`] has
    /// it at once. A text that was being read and is another gives way.
    pub(crate) fn advance(&mut self, text: &InstanceText, ticks: u64) -> bool {
        // What a text is, is asked once and not in every slice.
        let open = self.open.as_ref().is_some_and(|(source, _)| source.is(text));
        let last = |(source, _): &(Source, Rc<Reading>)| source.is(text);
        if !open && (is_mps(text) || self.last.as_ref().is_some_and(last)) {
            return false;
        }
        if !open {
            let source = Source::new(text);
            self.open = source.reading().ok().map(|reading| (source, reading));
        }
        let Some((_, slices)) = &mut self.open else { return false };
        let Some(reading) = slices.advance(ticks) else { return true };
        self.keep(reading);
        false
    }

    /// Goes on with the report of a text that was read; whether there is more to do before
    /// [`Self::report`] has it at once.
    pub(crate) fn advance_report(&mut self, text: &InstanceText, ticks: u64) -> bool {
        let Some((source, reading)) = self.last.as_ref().filter(|(source, _)| source.is(text))
        else {
            return false;
        };
        let (text, reading) = (Rc::clone(&source.text), Rc::clone(reading));
        let report = self.report.get_or_insert_with(|| {
            Reporting::Open(Slices::new(|pace| async move {
                map::instance_report(&text, &reading, &pace).await
            }))
        });
        if let Reporting::Open(slices) = report {
            match slices.advance(ticks) {
                Some(done) => *report = Reporting::Done(done),
                None => return true,
            }
        }
        false
    }

    /// Keeps what came out of the text that was being read.
    fn keep(&mut self, reading: Reading) {
        if let Some((source, _)) = self.open.take() {
            self.last = Some((source, Rc::new(reading)));
            self.report = None;
        }
    }

    /// What a reader understood of a text.
    ///
    /// # Errors
    /// A reader that does not exist.
    pub(crate) fn read(&mut self, text: &InstanceText) -> Result<Rc<Reading>, ErrorReport> {
        if is_mps(text) {
            let complaint = mps::no_instance(&text.text);
            return Err(ErrorReport {
                message: complaint.message.clone(),
                complaints: vec![complaint],
                place: "instance".to_owned(),
            });
        }
        asked(text.reader.as_deref())?;
        while self.advance(text, u64::MAX) {}
        match &self.last {
            Some((_, reading)) => Ok(Rc::clone(reading)),
            None => Err(fault("instance", "the instance was not read")),
        }
    }

    /// The report of a text.
    ///
    /// # Errors
    /// A reader that does not exist.
    pub(crate) fn report(&mut self, text: &InstanceText) -> Result<InstanceReport, ErrorReport> {
        if is_mps(text) {
            let mut report = mps::mps_report(&text.text);
            report.usable = false;
            report.complaints.insert(0, mps::no_instance(&text.text));
            return Ok(report);
        }
        self.read(text)?;
        while self.advance_report(text, u64::MAX) {}
        match self.report.take() {
            Some(Reporting::Done(report)) => Ok(report),
            _ => Ok(InstanceReport::default()),
        }
    }
}

/// What is understood of an instance; of one that cannot be read, the complaints.
#[must_use]
pub fn instance_report(text: &InstanceText) -> InstanceReport {
    Readings::default().report(text).unwrap_or_else(|error| InstanceReport {
        complaints: error.complaints,
        ..InstanceReport::default()
    })
}

/// The reader of a name, and which instance of a file.
fn asked(name: Option<&str>) -> Result<(Option<Reader>, Option<usize>), ErrorReport> {
    Ok(match name.map(reader_and_part) {
        None => (None, None),
        Some((name, part)) => (Some(reader(name)?), part),
    })
}

/// Whether a text is a whole model in MPS, said to be one or looking like one.
fn is_mps(text: &InstanceText) -> bool {
    match text.reader.as_deref() {
        Some(name) => name == mps::READER,
        None => mps::looks_like_mps(&text.text),
    }
}

fn reader(name: &str) -> Result<Reader, ErrorReport> {
    let known: Vec<&str> = Reader::all().map(Reader::name).collect();
    Reader::from_name(name).ok_or_else(|| unknown("instance", "reader", name, &known))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn an_unchanged_text_is_not_read_again() {
        let mut readings = Readings::default();
        let mut text = InstanceText { text: "0 1\n2 0\n".to_owned(), ..InstanceText::default() };
        let first = readings.read(&text).expect("a reader");
        text.bind.insert("c".to_owned(), "d".to_owned());
        assert!(Rc::ptr_eq(&first, &readings.read(&text).expect("a reader")));
        text.reader = Some("matrix".to_owned());
        assert!(!Rc::ptr_eq(&first, &readings.read(&text).expect("a reader")));
        text.reader = Some("matrx".to_owned());
        let error = readings.read(&text).expect_err("no reader");
        assert!(error.message.contains("did you mean \"matrix\"?"), "{error}");
    }
}
