//! The face of the readers: a text in, a reading out.

use crate::complaint::{Complaint, Complaints, grouped};
use crate::finish::finish;
use crate::instance::{Instance, Reader};
use crate::library::{self, Found};
use crate::pace::{Pace, Slices};
use crate::sniff::guess;
use crate::{MAX_TEXT, arcs, blocks, matrix, points, sums, table, tsplib};

/// What was read.
#[derive(Debug, Clone, PartialEq)]
pub struct Reading {
    /// The instance; `None` when there is an error among the complaints.
    pub instance: Option<Instance>,
    /// What was understood, one sentence each.
    pub facts: Vec<String>,
    /// What was not, in the order of the text; at most about 200.
    pub complaints: Vec<Complaint>,
    /// The reader that was used: the one named, or the one guessed.
    pub reader: Reader,
    /// A word for each instance of a file that holds several.
    pub parts: Vec<String>,
    /// Sums and ranges of the data, a sentence for each.
    pub sums: Vec<String>,
}

/// Reads `text` with the reader named, or else with the one that the text looks made for.
/// O(length) and, for the statements on a round trip, O(n³) up to 300 stops.
#[must_use]
pub fn read(text: &str, reader: Option<Reader>) -> Reading {
    read_part(text, reader, None)
}

/// As [`read()`]; of a file that holds several instances, the one of that number, from 1.
#[must_use]
pub fn read_part(text: &str, reader: Option<Reader>, part: Option<usize>) -> Reading {
    Slices::whole(|pace| read_in_slices(text, reader, part, pace))
}

/// As [`read_part()`], in the slices of a pace.
pub async fn read_in_slices(
    text: &str,
    reader: Option<Reader>,
    part: Option<usize>,
    pace: Pace,
) -> Reading {
    if text.len() > MAX_TEXT {
        return too_long(text, reader.unwrap_or(Reader::Matrix));
    }
    let mut sink = Complaints::new(text, &pace);
    pace.spend(text.len()).await;
    let chosen = match reader {
        Some(reader) => reader,
        None => guess(text, &pace).await,
    };
    if let Some((at, c)) = text.char_indices().find(|(_, c)| is_binary(*c)) {
        let mend = "Paste text: export the table as CSV, or copy its cells.";
        sink.error(at..at + c.len_utf8(), "binary", "this is no text but a binary file", mend);
        return refused(chosen, sink, Vec::new());
    }
    if let Some((span, message, mend)) = no_instance(text) {
        sink.error(span, "no-instance", message, mend);
        return refused(chosen, sink, Vec::new());
    }
    let found = with(chosen, text, part, &mut sink).await;
    let guessed = reader.is_none().then(|| {
        format!(
            "Taken for {} (`{}`); name another reader if it is not.",
            chosen.taken_for(),
            chosen.name()
        )
    });
    match found {
        Some(Found { instance, mut facts, parts }) if sink.errors() == 0 => {
            facts.extend(sink.habits());
            facts.extend(guessed);
            let sums = sums::of(&instance, &pace).await;
            sink.doubt_thousands();
            let complaints = sink.finish();
            Reading { instance: Some(instance), facts, complaints, reader: chosen, parts, sums }
        }
        _ => {
            if sink.errors() == 0 {
                let message = format!("this could not be read as {}", chosen.taken_for());
                sink.error(0..0, "not-read", message, "Name another reader, or mend the text.");
            }
            refused(chosen, sink, guessed.into_iter().collect())
        }
    }
}

async fn with<'a>(
    reader: Reader,
    text: &'a str,
    part: Option<usize>,
    sink: &mut Complaints<'a>,
) -> Option<Found> {
    let (instance, facts) = match reader {
        Reader::Matrix => finish(reader, matrix::read(text, sink).await?, &sink.pace()).await,
        Reader::Points => {
            finish(reader, points::read(text, false, sink).await?, &sink.pace()).await
        }
        Reader::Geographic => {
            finish(reader, points::read(text, true, sink).await?, &sink.pace()).await
        }
        Reader::Arcs => arcs::read(text, sink).await?,
        Reader::Table => table::read(text, sink).await?,
        Reader::Tsplib => finish(reader, tsplib::read(text, sink).await?, &sink.pace()).await,
        Reader::Blocks => blocks::read(text, sink).await?,
        _ => return library::read(text, reader, part, sink).await,
    };
    Some(Found { instance, facts, parts: Vec::new() })
}

/// What a text is that is surely no instance.
fn no_instance(text: &str) -> Option<(std::ops::Range<usize>, &'static str, &'static str)> {
    let start = text.len() - text.trim_start().len();
    let rest = &text[start..];
    let length = rest.find(['\n', '\r']).unwrap_or(rest.len());
    let json = (rest.starts_with('{') || rest.starts_with('[')) && rest.contains("\":")
        || rest.starts_with('[') && rest[1..].trim_start().starts_with(['{', '[']);
    if json {
        let mend = "Paste its data as a table, or as `name by i, j` and rows below.";
        return Some((start..start + length, "this is JSON, no table", mend));
    }
    let mend = "Paste the instance that it solves.";
    rest.starts_with("Route #1:").then_some((
        start..start + length,
        "this is a solution, no instance",
        mend,
    ))
}

fn is_binary(c: char) -> bool {
    c.is_control() && !c.is_whitespace()
}

fn refused(reader: Reader, sink: Complaints, mut facts: Vec<String>) -> Reading {
    let places = match sink.errors() {
        1 => "One place".to_owned(),
        errors => format!("{} places", grouped(errors)),
    };
    facts.push(format!("{places} could not be read, so there is no instance yet."));
    Reading {
        instance: None,
        facts,
        complaints: sink.finish(),
        reader,
        parts: Vec::new(),
        sums: Vec::new(),
    }
}

fn too_long(text: &str, reader: Reader) -> Reading {
    let mut sink = Complaints::new("", &Pace::default());
    let megabytes = text.len().div_ceil(1 << 20);
    let message = format!("the text is {megabytes} MB long; {} MB are read", MAX_TEXT >> 20);
    sink.error(0..0, "too-long", message, "Paste a smaller instance.");
    refused(reader, sink, Vec::new())
}
