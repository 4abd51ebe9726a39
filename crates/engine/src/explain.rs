//! What the code of a complaint about a formulation means.

use notation::Help;
use record::message::{Explanation, NOTE};

use crate::{assumption, map};

/// Help on the codes of the engine's own complaints.
const OWN: [Help; 2] = [assumption::HELP, map::RUN_HELP];

/// The meaning of a code, as a complaint carries it; empty where there is no such code.
#[must_use]
pub fn explanation(code: &str) -> Explanation {
    let own = OWN.into_iter().find(|help| help.code == code);
    let found = own.or_else(|| notation::help(code.strip_prefix(NOTE).unwrap_or(code)));
    let (meaning, example) = found.map_or(("", ""), |help| (help.meaning, help.example));
    Explanation { code: code.to_owned(), meaning: meaning.to_owned(), example: example.to_owned() }
}

/// Every code that can be explained.
pub fn explained() -> impl Iterator<Item = &'static str> {
    notation::codes().chain(OWN).map(|help| help.code)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_code_is_explained_as_a_warning_and_as_a_note() {
        let found = explanation("lint.big-m");
        assert!(found.meaning.contains("10,000") && found.example.contains("\n+"), "{found:?}");
        assert_eq!(explanation("note.name.inferred").meaning, explanation("name.inferred").meaning);
        assert!(explanation(assumption::HELP.code).meaning.contains("published"));
        assert!(explanation("lint.nothing").meaning.is_empty());
        assert!(explained().all(|code| !explanation(code).meaning.is_empty()));
    }
}
