//! MPS texts: a whole model of somebody else's, read as a rival, and described.

use std::ops::Range;

use model::{Model, Sense, mps};
use record::message::{Complaint, InstanceReport};
use record::place::{Finding, complaint};
use record::results::ErrorReport;

/// The name of the reader.
pub(crate) const READER: &str = "mps";

/// Whether a text is meant as MPS: its sections ROWS and COLUMNS begin lines of their own.
#[must_use]
pub fn looks_like_mps(text: &str) -> bool {
    let begins = |word: &str| {
        text.lines().any(|line| {
            let first = line.split_whitespace().next();
            !line.starts_with(char::is_whitespace)
                && first.is_some_and(|first| first.eq_ignore_ascii_case(word))
        })
    };
    begins("ROWS") && begins("COLUMNS")
}

/// The model of an MPS text, with its warnings.
///
/// # Errors
/// What cannot be read, with its places in the text.
pub(crate) fn read(text: &str) -> Result<(Model, Vec<Complaint>), ErrorReport> {
    match mps::read(text) {
        Ok((model, warnings)) => Ok((model, placed(text, &warnings))),
        Err(complaints) => Err(ErrorReport {
            message: "the MPS text does not become a model".to_owned(),
            complaints: placed(text, &complaints),
            place: "rival".to_owned(),
        }),
    }
}

/// What an MPS text says, as a report of a reader. It is usable as a rival, not as an instance.
#[must_use]
pub fn mps_report(text: &str) -> InstanceReport {
    let report = InstanceReport { reader: READER.to_owned(), ..InstanceReport::default() };
    match read(text) {
        Ok((model, complaints)) => InstanceReport {
            title: model.title().to_owned(),
            usable: true,
            facts: facts(&model),
            statistics: model.describe(),
            complaints,
            ..report
        },
        Err(error) => InstanceReport { complaints: error.complaints, ..report },
    }
}

/// The complaint that a whole model stands where an instance is wanted.
pub(crate) fn no_instance(text: &str) -> Complaint {
    let finding = Finding {
        error: true,
        code: "model-for-instance".to_owned(),
        span: first_word(text),
        message: "this is a whole model in MPS, no instance for formulations".to_owned(),
        mend: "make it a rival: [[rival]] with mps = '''…'''; such a rival needs no instance"
            .to_owned(),
    };
    complaint(text, finding)
}

fn first_word(text: &str) -> Range<usize> {
    let start = text.len() - text.trim_start().len();
    let length = text[start..].find(char::is_whitespace).unwrap_or(text.len() - start);
    start..start + length
}

/// The model in sentences.
fn facts(model: &Model) -> Vec<String> {
    let statistics = model.statistics();
    let sense = match model.sense() {
        Sense::Minimise => "minimised",
        Sense::Maximise => "maximised",
    };
    let ranged = (0..statistics.rows).map(model::RowId).filter(
        |&row| matches!(model.row_sides(row), (Some(lower), Some(upper)) if lower != upper),
    );
    let mut facts = vec![
        format!(
            "a model of {} in {}, {}, {sense}",
            count(u64::from(statistics.rows), "row"),
            count(u64::from(statistics.columns), "column"),
            count(statistics.nonzeros, "non-zero"),
        ),
        format!("{} of the columns must be whole", statistics.integer_columns),
    ];
    let ranged = ranged.count();
    if ranged > 0 {
        facts.push(format!("{} with two different sides", count(ranged as u64, "row")));
    }
    if !model.offset().is_zero() {
        facts.push(format!("a constant of {} in the objective", model.offset()));
    }
    let named = |names: Vec<&str>| names.join(", ");
    facts.push(format!("variables: {}", named(few(model.variables().iter().map(|v| &*v.name)))));
    facts.push(format!("families: {}", named(few(model.families().iter().map(|f| &*f.name)))));
    facts
}

/// The first names, and dots for the rest.
fn few<'n>(names: impl Iterator<Item = &'n str>) -> Vec<&'n str> {
    const MOST: usize = 8;
    let mut names: Vec<&str> = names.take(MOST + 1).collect();
    if names.len() > MOST {
        names[MOST] = "…";
    }
    names
}

fn count(value: u64, noun: &str) -> String {
    format!("{value} {noun}{}", if value == 1 { "" } else { "s" })
}

/// Complaints with line and column as the reader of MPS counts them.
fn placed(text: &str, found: &[mps::Complaint]) -> Vec<Complaint> {
    let placed = found.iter().map(|one| {
        let finding = Finding {
            error: one.severity == mps::Severity::Error,
            code: one.code.to_owned(),
            span: one.span.clone(),
            message: one.message.clone(),
            mend: one.mend.clone(),
        };
        Complaint { line: one.line, column: one.column, ..complaint(text, finding) }
    });
    placed.collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    const TEXT: &str = "NAME small\nROWS\n N cost\n L cap\nCOLUMNS\n m1 'MARKER' 'INTORG'\n x[a] cost -3 cap 2\n x[b] cost -2 cap 1\n m2 'MARKER' 'INTEND'\n y cost 1 cap -1\nRHS\n RHS cap 4\nBOUNDS\n UP BND x[a] 5\n UP BND x[b] 5\nENDATA\n";

    #[test]
    fn a_text_with_both_sections_is_mps() {
        assert!(looks_like_mps(TEXT));
        assert!(looks_like_mps("* c\r\nrows\r\nColumns\r\n"));
        assert!(!looks_like_mps("ROWS, COLUMNS\n1 2\n"));
        assert!(!looks_like_mps("0 1\n2 0\n"));
    }

    #[test]
    fn a_model_is_described_and_a_wrong_one_has_places() {
        let report = mps_report(TEXT);
        assert!(report.usable && report.complaints.is_empty(), "{:?}", report.complaints);
        assert_eq!((report.reader.as_str(), report.title.as_str()), ("mps", "small"));
        let facts = report.facts.join("\n");
        assert!(facts.contains("a model of 1 row in 3 columns, 3 non-zeros, minimised"), "{facts}");
        assert!(facts.contains("2 of the columns must be whole"), "{facts}");
        assert!(facts.contains("variables: x, y\nfamilies: cap"), "{facts}");
        let report = mps_report(&TEXT.replace("cap 4", "cap 4x"));
        assert!(!report.usable);
        assert_eq!((report.complaints[0].line, report.complaints[0].column), (12, 10));
        let place = no_instance("\n\nNAME small\n");
        assert_eq!((place.line, place.column, place.end - place.start), (3, 1, 4));
    }
}
