//! Instance texts are read once, and again only when they change.

use std::rc::Rc;

use instance::{Reader, Reading};
use record::message::InstanceReport;
use record::results::ErrorReport;
use record::scenario::{InstanceText, reader_and_part};

use crate::fault::unknown;
use crate::map;
use crate::mps;

/// The last text that was read, with what came out of it.
#[derive(Debug, Default)]
pub(crate) struct Readings {
    last: Option<(Option<String>, String, Rc<Reading>)>,
}

impl Readings {
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
        if let Some((reader, known, reading)) = &self.last
            && *reader == text.reader
            && *known == text.text
        {
            return Ok(Rc::clone(reading));
        }
        let (reader, part) = match text.reader.as_deref().map(reader_and_part) {
            None => (None, None),
            Some((name, part)) => (Some(reader(name)?), part),
        };
        let reading = Rc::new(instance::read_part(&text.text, reader, part));
        self.last = Some((text.reader.clone(), text.text.clone(), Rc::clone(&reading)));
        Ok(reading)
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
        let reading = self.read(text)?;
        Ok(map::instance_report(&text.text, &reading))
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
