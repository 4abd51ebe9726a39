//! The outer form of a TSPLIB file: keywords with values, and sections of data lines.

use crate::complaint::{Complaints, excerpt};
use crate::text::{Line, lines};

const SECTIONS: [&str; 9] = [
    "NODE_COORD_SECTION",
    "EDGE_WEIGHT_SECTION",
    "DISPLAY_DATA_SECTION",
    "FIXED_EDGES_SECTION",
    "EDGE_DATA_SECTION",
    "TOUR_SECTION",
    "DEMAND_SECTION",
    "DEPOT_SECTION",
    "CLUSTER_SECTION",
];

const KEYWORDS: [&str; 11] = [
    "NAME",
    "TYPE",
    "COMMENT",
    "DIMENSION",
    "EDGE_WEIGHT_TYPE",
    "EDGE_WEIGHT_FORMAT",
    "NODE_COORD_TYPE",
    "DISPLAY_DATA_TYPE",
    "EDGE_DATA_FORMAT",
    "CAPACITY",
    "VEHICLES",
];

/// Whether a line is of a kind that only TSPLIB files have.
pub(crate) fn is_telling(line: &str) -> bool {
    let line = line.trim();
    section_name(line).is_some()
        || line.split_once(':').is_some_and(|(key, _)| {
            ["DIMENSION", "EDGE_WEIGHT_TYPE", "EDGE_WEIGHT_FORMAT"].contains(&key.trim())
        })
}

fn section_name(line: &str) -> Option<&'static str> {
    let name = line.trim_end_matches(':').trim_end();
    SECTIONS.into_iter().find(|section| *section == name)
}

/// A file taken apart.
pub(crate) struct File<'a> {
    keywords: Vec<(&'a str, &'a str, Line<'a>)>,
    sections: Vec<(&'static str, Vec<Line<'a>>)>,
}

impl<'a> File<'a> {
    /// Takes a file apart. The line `EOF` may be missing; `-1` ends a section.
    pub(crate) fn scan(text: &'a str, sink: &mut Complaints) -> Self {
        let mut file = Self { keywords: Vec::new(), sections: Vec::new() };
        let mut inside = false;
        for line in lines(text) {
            let trimmed = line.text.trim();
            if trimmed.is_empty() {
                continue;
            }
            if trimmed == "EOF" {
                break;
            }
            if let Some(name) = section_name(trimmed) {
                file.open(name, line, sink);
                inside = true;
            } else if trimmed == "-1" && inside {
                inside = false;
            } else if let Some((key, value)) = keyword(trimmed) {
                file.set(key, value, line, sink);
                inside = false;
            } else if inside {
                if let Some((_, rows)) = file.sections.last_mut() {
                    rows.push(line);
                }
            } else if sink.is_full() {
                sink.count_error();
            } else {
                let message = format!("`{}` is neither keyword nor data", excerpt(trimmed));
                let mend = "Write `KEYWORD: value`, or a section's name on a line of its own.";
                sink.error(line.span(), "not-understood", message, mend);
            }
        }
        file
    }

    fn open(&mut self, name: &'static str, line: Line<'a>, sink: &mut Complaints) {
        if self.section(name).is_some() {
            let message = format!("{name} is given twice");
            sink.error(line.span(), "section-twice", message, "Keep one of them.");
        }
        if name == "FIXED_EDGES_SECTION" {
            let message = "fixed edges are not read: the round is free to leave them out";
            sink.warn(line.span(), "section-unread", message, "");
        }
        self.sections.push((name, Vec::new()));
    }

    fn set(&mut self, key: &'a str, value: &'a str, line: Line<'a>, sink: &mut Complaints) {
        if !KEYWORDS.contains(&key) {
            let message = format!("`{}` is not a keyword that is read", excerpt(key));
            sink.warn(line.span(), "keyword-unread", message, "");
        } else if self.keyword(key).is_none() {
            self.keywords.push((key, value, line));
        } else if key != "COMMENT" {
            let message = format!("{key} is given twice");
            sink.error(line.span(), "keyword-twice", message, "Keep one of them.");
        }
    }

    /// A keyword's value and line.
    pub(crate) fn keyword(&self, key: &str) -> Option<(&'a str, Line<'a>)> {
        let found = self.keywords.iter().find(|(known, ..)| *known == key)?;
        Some((found.1, found.2))
    }

    pub(crate) fn value(&self, key: &str) -> Option<&'a str> {
        self.keyword(key).map(|(value, _)| value)
    }

    /// The data lines of a section.
    pub(crate) fn section(&self, name: &str) -> Option<&[Line<'a>]> {
        let found = self.sections.iter().find(|(known, _)| *known == name)?;
        Some(&found.1)
    }
}

/// `KEY: value` or `KEY : value`, the key in capitals.
fn keyword(line: &str) -> Option<(&str, &str)> {
    let (key, value) = line.split_once(':')?;
    let key = key.trim_end();
    let capital = |c: char| c.is_ascii_uppercase() || c == '_';
    (!key.is_empty() && key.chars().all(capital)).then_some((key, value.trim()))
}
