//! A formulation in pieces for its colours: comments, names of data and of variables, labels, and
//! places that are complained of. Names come from the last check; what is coloured follows the
//! text at once.

use record::message::{CheckReport, Complaint};

/// What a piece is.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq)]
pub(crate) enum Kind {
    /// Nothing in particular.
    #[default]
    Plain,
    /// From `#` or `%` to the end of the line.
    Comment,
    /// The name of a datum or a definition.
    Datum,
    /// The name of a variable.
    Variable,
    /// The label of a constraint.
    Label,
    /// A word that opens a part.
    Part,
}

/// A piece of the text.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Piece {
    /// Its letters.
    pub(crate) text: String,
    /// What it is.
    pub(crate) kind: Kind,
    /// Whether it stands in a place that is complained of: `Some(true)` for an error.
    pub(crate) marked: Option<bool>,
}

/// Longer texts stay without colours, so that typing stays quick.
const LONGEST: usize = 60_000;

/// Lines that open a part.
const PARTS: [&str; 8] = [
    "data",
    "definitions",
    "minimise",
    "maximise",
    "minimize",
    "maximize",
    "subject to",
    "such that",
];

/// The text in pieces that follow one another. `checked` is the text that `report` is about; its
/// places are moved along with what was typed since.
pub(crate) fn pieces(text: &str, checked: &str, report: Option<&CheckReport>) -> Vec<Piece> {
    if text.len() > LONGEST {
        return vec![Piece { text: text.to_owned(), kind: Kind::Plain, marked: None }];
    }
    let marks = report.map_or_else(Vec::new, |report| marks(text, checked, report));
    let mut pieces: Vec<Piece> = Vec::new();
    let mut unit = 0;
    for (letter, kind) in text.chars().zip(kinds(text, report)) {
        let marked = marked(&marks, unit);
        unit += letter.len_utf16() as u32;
        match pieces.last_mut() {
            Some(last) if last.kind == kind && last.marked == marked => last.text.push(letter),
            _ => pieces.push(Piece { text: letter.to_string(), kind, marked }),
        }
    }
    pieces
}

/// A place in UTF-16 units, and whether it is an error's.
type Mark = (u32, u32, bool);

fn marked(marks: &[Mark], unit: u32) -> Option<bool> {
    let at = marks.iter().filter(|(start, end, _)| (*start..*end).contains(&unit));
    at.map(|mark| mark.2).reduce(|one, other| one || other)
}

fn marks(text: &str, checked: &str, report: &CheckReport) -> Vec<Mark> {
    let (old, new) = (units(checked), units(text));
    let start = old.iter().zip(&new).take_while(|(a, b)| a == b).count();
    let ends = old[start..].iter().rev().zip(new[start..].iter().rev());
    let end = ends.take_while(|(a, b)| a == b).count();
    let count = |number: usize| u32::try_from(number).unwrap_or(u32::MAX);
    let (start, last) = (count(start), count(old.len() - end));
    let moved = |complaint: &Complaint| {
        // Of an empty place the unit before it is marked.
        let from = complaint.start.saturating_sub(u32::from(complaint.start == complaint.end));
        if complaint.end <= start {
            Some((from, complaint.end, complaint.error))
        } else if complaint.start >= last {
            let along = |unit: u32| (unit + count(new.len())).saturating_sub(count(old.len()));
            Some((along(from), along(complaint.end), complaint.error))
        } else {
            None
        }
    };
    let complaints = report.remarks.iter().map(|remark| &remark.complaint);
    complaints.filter(|complaint| !complaint.is_note()).filter_map(moved).collect()
}

fn units(text: &str) -> Vec<u16> {
    text.encode_utf16().collect()
}

/// The kind of each letter.
fn kinds(text: &str, report: Option<&CheckReport>) -> Vec<Kind> {
    let mut kinds = Vec::with_capacity(text.len());
    for line in text.split_inclusive('\n') {
        let letters: Vec<char> = line.chars().collect();
        let from = kinds.len();
        kinds.resize(from + letters.len(), Kind::Plain);
        colour(&letters, &mut kinds[from..], report);
    }
    kinds
}

/// Whether a name is one of these.
fn is_of(
    name: &str,
    names: impl Fn(&CheckReport) -> &[String],
    report: Option<&CheckReport>,
) -> bool {
    report.is_some_and(|report| names(report).iter().any(|known| known == name))
}

fn colour(line: &[char], kinds: &mut [Kind], report: Option<&CheckReport>) {
    let comment = comment(line);
    kinds[comment..].fill(Kind::Comment);
    let whole: String = line[..comment].iter().collect();
    if PARTS.contains(&whole.trim().to_lowercase().as_str()) {
        kinds[..comment].fill(Kind::Part);
        return;
    }
    let end = label(&line[..comment], report).map_or(comment, |(from, to)| {
        kinds[from..to].fill(Kind::Label);
        from
    });
    let mut at = 0;
    while at < end {
        if let Some((length, kind)) = decorated(&line[at..end], report) {
            kinds[at..at + length].fill(kind);
            at += length;
            continue;
        }
        if !line[at].is_alphabetic() {
            at += 1;
            continue;
        }
        let length = line[at..end].iter().take_while(|c| c.is_alphabetic()).count();
        let word: String = line[at..at + length].iter().collect();
        let command = at > 0 && line[at - 1] == '\\';
        if !command {
            kinds[at..at + length].fill(kind(&word, report));
        }
        at += length;
    }
}

/// The length and the kind of a known name that is set in a way of its own: `\mathcal{G}`, `\bar d`,
/// `𝒢`.
fn decorated(line: &[char], report: Option<&CheckReport>) -> Option<(usize, Kind)> {
    let letters = |from: usize| line[from..].iter().take_while(|c| c.is_alphabetic()).count();
    let known = |length, name: &str| {
        Some((length, kind(name, report))).filter(|(_, kind)| *kind != Kind::Plain)
    };
    if let Some(letter) = script(*line.first()?) {
        return known(1, &format!("\\mathcal {letter}"));
    }
    if line[0] != '\\' {
        return None;
    }
    let command: String = line[1..1 + letters(1)].iter().collect();
    let mut at = 1 + command.chars().count();
    at += line[at..].iter().take_while(|c| **c == ' ').count();
    let braced = line.get(at) == Some(&'{');
    at += usize::from(braced);
    let length = if braced { letters(at) } else { letters(at).min(1) };
    if length == 0 || braced && line.get(at + length) != Some(&'}') {
        return None;
    }
    let inner: String = line[at..at + length].iter().collect();
    known(at + length + usize::from(braced), &format!("\\{command} {inner}"))
}

/// The capital of which a sign is the script form (Unicode, Mathematical Alphanumeric Symbols and,
/// for eight of them, Letterlike Symbols).
fn script(sign: char) -> Option<char> {
    const OLDER: [(char, char); 8] = [
        ('ℬ', 'B'),
        ('ℰ', 'E'),
        ('ℱ', 'F'),
        ('ℋ', 'H'),
        ('ℐ', 'I'),
        ('ℒ', 'L'),
        ('ℳ', 'M'),
        ('ℛ', 'R'),
    ];
    if let Some((_, letter)) = OLDER.iter().find(|(one, _)| *one == sign) {
        return Some(*letter);
    }
    let place = u32::from(sign).checked_sub(0x1d49c).filter(|place| *place < 26)?;
    char::from_u32(u32::from('A') + place)
}

fn kind(word: &str, report: Option<&CheckReport>) -> Kind {
    if is_of(word, |report| &report.variables, report) {
        Kind::Variable
    } else if is_of(word, |report| &report.data, report) {
        Kind::Datum
    } else {
        Kind::Plain
    }
}

/// Where a comment begins; the end of the line when there is none. A TeX `\%` is none.
fn comment(line: &[char]) -> usize {
    let begins =
        |at: &usize| line[*at] == '#' || (line[*at] == '%' && (*at == 0 || line[*at - 1] != '\\'));
    (0..line.len()).find(begins).unwrap_or(line.len())
}

/// The label at the end of a line: a family's name in brackets after a space.
fn label(line: &[char], report: Option<&CheckReport>) -> Option<(usize, usize)> {
    let end = line.iter().rposition(|c| !c.is_whitespace())?;
    let open = line.iter().rposition(|c| *c == '(')?;
    let inside: String = line.get(open + 1..end)?.iter().collect();
    let apart = open > 0 && line[open - 1].is_whitespace();
    (line[end] == ')' && apart && is_of(&inside, |report| &report.families, report))
        .then_some((open, end + 1))
}

#[cfg(test)]
mod tests {
    use super::*;
    use record::message::Remark;

    fn report(places: &[(u32, u32)]) -> CheckReport {
        let names = |names: &[&str]| names.iter().map(|&name| name.to_owned()).collect();
        let remark = |&(start, end): &(u32, u32)| Remark {
            complaint: Complaint {
                error: true,
                code: String::new(),
                line: 1,
                column: 1,
                start,
                end,
                message: String::new(),
                mend: String::new(),
            },
            mends: Vec::new(),
        };
        CheckReport {
            data: names(&["c", "demand"]),
            variables: names(&["x"]),
            families: names(&["leave"]),
            remarks: places.iter().map(remark).collect(),
            ..CheckReport::default()
        }
    }

    fn of(kind: Kind, pieces: &[Piece]) -> Vec<&str> {
        let found = pieces.iter().filter(|piece| piece.kind == kind);
        found.map(|piece| piece.text.as_str()).collect()
    }

    fn marked_in(pieces: &[Piece]) -> String {
        pieces.iter().filter(|p| p.marked.is_some()).map(|p| p.text.as_str()).collect()
    }

    #[test]
    fn pieces_have_kinds_and_make_up_the_text() {
        let text = "minimise\n  c_{i} x_i + demand \\c  (leave)\n# x\n";
        let found = pieces(text, text, Some(&report(&[])));
        assert_eq!(found.iter().map(|piece| piece.text.as_str()).collect::<String>(), text);
        assert_eq!(of(Kind::Datum, &found), ["c", "demand"]);
        assert_eq!(of(Kind::Variable, &found), ["x"]);
        assert_eq!(of(Kind::Label, &found), ["(leave)"]);
        assert_eq!(of(Kind::Comment, &found), ["# x\n"]);
        assert_eq!(of(Kind::Part, &found), ["minimise\n"]);
    }

    /// Script letters had no colour, for their names hold the command that sets them.
    #[test]
    fn names_set_in_a_way_of_their_own_are_coloured() {
        let mut report = report(&[]);
        report.data = vec!["\\mathcal G".to_owned(), "\\bar d".to_owned()];
        let text = "i ∈ \\mathcal{G}, 𝒢 ∪ \\mathcal G ∪ \\mathcal{H} ≤ \\bar d_i + \\bar e G ℋ";
        let found = pieces(text, text, Some(&report));
        assert_eq!(found.iter().map(|piece| piece.text.as_str()).collect::<String>(), text);
        assert_eq!(of(Kind::Datum, &found), ["\\mathcal{G}", "𝒢", "\\mathcal G", "\\bar d"]);
    }

    #[test]
    fn marks_move_with_the_text() {
        let report = report(&[(2, 3)]);
        assert_eq!(marked_in(&pieces("𝔹 y", "𝔹 y", None)), "");
        let marks = |text: &str| marked_in(&pieces(text, "a y b", Some(&report)));
        assert_eq!(marks("a y b"), "y");
        assert_eq!(marks("aaaa y b"), "y");
        assert_eq!(marks("a y bbb"), "y");
        assert_eq!(marks("a z b"), "");
    }

    #[test]
    fn an_empty_place_marks_what_stands_before_it() {
        assert_eq!(marked_in(&pieces("abc", "abc", Some(&report(&[(3, 3)])))), "c");
        assert!(pieces("", "", Some(&report(&[(0, 0)]))).is_empty());
        let long = "x".repeat(LONGEST + 1);
        assert_eq!(pieces(&long, &long, Some(&report(&[(0, 1)]))).len(), 1);
    }
}
