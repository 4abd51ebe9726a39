//! The face of the readers: a text in, a reading out.

use crate::complaint::{Complaint, Complaints, grouped};
use crate::finish::finish;
use crate::instance::{Instance, Reader};
use crate::sniff::guess;
use crate::{MAX_TEXT, arcs, blocks, matrix, points, table, tsplib};

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
}

/// Reads `text` with the reader named, or else with the one that the text looks made for.
/// O(length) and, for the statements on a round trip, O(n³) up to 300 stops.
#[must_use]
pub fn read(text: &str, reader: Option<Reader>) -> Reading {
    if text.len() > MAX_TEXT {
        return too_long(text, reader.unwrap_or(Reader::Matrix));
    }
    let mut sink = Complaints::new(text);
    let chosen = reader.unwrap_or_else(|| guess(text));
    if let Some((at, c)) = text.char_indices().find(|(_, c)| is_binary(*c)) {
        let mend = "Paste text: export the table as CSV, or copy its cells.";
        sink.error(at..at + c.len_utf8(), "binary", "this is no text but a binary file", mend);
        return refused(chosen, sink, Vec::new());
    }
    let found = match chosen {
        Reader::Matrix => matrix::read(text, &mut sink).map(|trip| finish(chosen, trip)),
        Reader::Points => points::read(text, false, &mut sink).map(|trip| finish(chosen, trip)),
        Reader::Geographic => points::read(text, true, &mut sink).map(|trip| finish(chosen, trip)),
        Reader::Arcs => arcs::read(text, &mut sink),
        Reader::Table => table::read(text, &mut sink),
        Reader::Tsplib => tsplib::read(text, &mut sink).map(|trip| finish(chosen, trip)),
        Reader::Blocks => blocks::read(text, &mut sink),
    };
    let guessed = reader
        .is_none()
        .then(|| format!("Taken for {}; name another reader if it is not.", taken_for(chosen)));
    match found {
        Some((instance, mut facts)) if sink.errors() == 0 => {
            facts.extend(guessed);
            let complaints = sink.finish();
            Reading { instance: Some(instance), facts, complaints, reader: chosen }
        }
        _ => refused(chosen, sink, guessed.into_iter().collect()),
    }
}

fn is_binary(c: char) -> bool {
    c.is_control() && !c.is_whitespace()
}

fn taken_for(reader: Reader) -> &'static str {
    match reader {
        Reader::Matrix => "a distance matrix (`matrix`)",
        Reader::Points => "points in the plane (`points`)",
        Reader::Geographic => "points by latitude and longitude (`points geographic`)",
        Reader::Arcs => "a list of drives (`arcs`)",
        Reader::Table => "tables with headings (`table`)",
        Reader::Tsplib => "a TSPLIB file (`tsplib`)",
        Reader::Blocks => "named blocks (`blocks`)",
    }
}

fn refused(reader: Reader, sink: Complaints, mut facts: Vec<String>) -> Reading {
    let places = match sink.errors() {
        1 => "One place".to_owned(),
        errors => format!("{} places", grouped(errors)),
    };
    facts.push(format!("{places} could not be read, so there is no instance yet."));
    Reading { instance: None, facts, complaints: sink.finish(), reader }
}

fn too_long(text: &str, reader: Reader) -> Reading {
    let mut sink = Complaints::new("");
    let megabytes = text.len().div_ceil(1 << 20);
    let message = format!("the text is {megabytes} MB long; {} MB are read", MAX_TEXT >> 20);
    sink.error(0..0, "too-long", message, "Paste a smaller instance.");
    refused(reader, sink, Vec::new())
}
