//! The shipped formulations.

use toml::{Table, Value};

use crate::shipped::FAMILIES;
use crate::{families, tables, text};

/// A shipped formulation.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Entry {
    /// `family/rival`, stable for ever: links carry it.
    pub id: String,
    /// The first line of the notation text.
    pub title: String,
    /// The family's short name, e.g. `atsp`.
    pub family: String,
    /// The family in words: "round trip, directed".
    pub family_title: String,
    /// Where it was published.
    pub citation: String,
    /// Whether it is only a relaxation: bounded, never compared for its optimum.
    pub relaxation: bool,
    /// For which costs it is right: "any cost".
    pub assumption: String,
    /// The variable in which rivals of the family are compared.
    pub natural: String,
    /// The readers whose instances the family takes, as a scenario file names them.
    pub readers: Vec<String>,
    /// Size in terms of the numbers of stops, periods or arcs.
    pub size: String,
    /// Why its relaxation is integral on all data; empty where it is not, or not known to be.
    pub integral: String,
    /// What goes wrong with it in practice.
    pub pitfall: String,
    /// The journal notation.
    pub text: &'static str,
}

/// All shipped formulations, by family, in the order of the family's file.
#[must_use]
pub fn entries() -> Vec<Entry> {
    let mut out = Vec::new();
    for (family, table) in families() {
        for formulation in tables(&table, "formulation") {
            let id = text(formulation, "id");
            let Some(notation) = notation(id) else { continue };
            out.push(Entry {
                id: id.to_owned(),
                title: notation.lines().next().unwrap_or_default().trim().to_owned(),
                family: family.to_owned(),
                family_title: text(&table, "title").to_owned(),
                citation: text(formulation, "citation").to_owned(),
                relaxation: formulation.get("relaxation").and_then(Value::as_bool).unwrap_or(false),
                assumption: text(&table, "assumption").to_owned(),
                natural: text(&table, "natural").to_owned(),
                readers: words(&table, "readers"),
                size: text(formulation, "size").to_owned(),
                integral: text(formulation, "integral").to_owned(),
                pitfall: text(formulation, "pitfall").to_owned(),
                text: notation,
            });
        }
    }
    out
}

/// The words of a list.
fn words(table: &Table, key: &str) -> Vec<String> {
    let list = table.get(key).and_then(Value::as_array).into_iter().flatten();
    list.filter_map(Value::as_str).map(str::to_owned).collect()
}

/// The notation text of an id.
fn notation(id: &str) -> Option<&'static str> {
    let mut texts = FAMILIES.iter().flat_map(|family| family.texts);
    texts.find(|(known, _)| *known == id).map(|&(_, text)| text)
}

/// The shipped formulation of that id.
#[must_use]
pub fn find(id: &str) -> Option<Entry> {
    entries().into_iter().find(|entry| entry.id == id)
}

/// The data of a family that its assumption asks to be 0 or more, by name.
#[must_use]
pub fn nonnegative(family: &str) -> Vec<String> {
    let table = families().find(|(name, _)| *name == family).map(|(_, table)| table);
    table.map(|table| words(&table, "nonnegative")).unwrap_or_default()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_text_is_described_once_and_every_description_has_a_text() {
        let entries = entries();
        let ids: Vec<&str> = entries.iter().map(|e| e.id.as_str()).collect();
        let texts = FAMILIES.iter().flat_map(|family| family.texts.iter().map(|&(id, _)| id));
        assert_eq!(ids, texts.collect::<Vec<_>>());
        let described: usize = families().map(|(_, t)| tables(&t, "formulation").count()).sum();
        assert_eq!(described, ids.len());
        for entry in &entries {
            assert!(!entry.title.is_empty() && !entry.citation.is_empty(), "{}", entry.id);
            assert!(!entry.assumption.is_empty() && !entry.natural.is_empty(), "{}", entry.id);
            assert!(!entry.readers.is_empty(), "{}", entry.id);
            assert!(!entry.size.is_empty(), "{}", entry.id);
            assert!((2..=4).contains(&sentences(&entry.pitfall)), "{}", entry.id);
        }
    }

    /// Ends of sentences: a point in 0.5 is none.
    fn sentences(text: &str) -> usize {
        text.split_whitespace().filter(|word| word.ends_with(['.', '?'])).count()
    }

    #[test]
    fn degree_rows_alone_are_a_mere_relaxation() {
        let relaxations: Vec<String> =
            entries().into_iter().filter(|e| e.relaxation).map(|e| e.id).collect();
        assert_eq!(relaxations, ["atsp/assignment", "tsp/degrees"]);
    }

    #[test]
    fn an_unknown_id_is_not_found() {
        assert!(find("atsp/no-such-rival").is_none());
        assert_eq!(
            find("atsp/labels").map(|e| e.family_title),
            Some("round trip, directed".into())
        );
    }
}
