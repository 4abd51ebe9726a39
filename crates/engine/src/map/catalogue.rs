//! The catalogue as the page and the command list it.

use std::collections::BTreeMap;

use catalogue::{Level, Order, Relation};
use record::message::CatalogueEntry;

/// Every shipped formulation.
pub(crate) fn catalogue_entries() -> Vec<CatalogueEntry> {
    let entries = catalogue::entries();
    let names = entries.iter().map(|entry| (entry.id.as_str(), name(&entry.title))).collect();
    let mut known = Known { names, of: BTreeMap::new() };
    for family in entries.iter().map(|entry| &entry.family) {
        if !known.of.contains_key(family) {
            known.of.insert(family.clone(), catalogue::relations(family));
        }
    }
    let sent = entries.iter().map(|entry| CatalogueEntry {
        id: entry.id.clone(),
        title: entry.title.clone(),
        family: entry.family_title.clone(),
        relaxation: entry.relaxation,
        citation: entry.citation.clone(),
        size: entry.size.clone(),
        assumption: entry.assumption.clone(),
        natural: entry.natural.clone(),
        readers: entry.readers.clone(),
        known: whole(entry).into_iter().chain(known.sentences(&entry.family, &entry.id)).collect(),
        pitfall: entry.pitfall.clone(),
        text: entry.text.to_owned(),
    });
    sent.collect()
}

/// That its relaxation is integral, where that is known.
fn whole(entry: &catalogue::Entry) -> Option<String> {
    let known = !entry.integral.is_empty();
    known.then(|| format!("that of its best whole plan, whatever the data ({})", entry.integral))
}

/// A title without who published it.
fn name(title: &str) -> &str {
    title.split(" (").next().unwrap_or(title)
}

/// The relations of every family, and what its rivals are called.
struct Known<'a> {
    names: BTreeMap<&'a str, &'a str>,
    of: BTreeMap<String, Vec<Relation>>,
}

impl Known<'_> {
    /// What is known of a rival's bound, in the order of its family's file.
    fn sentences(&self, family: &str, id: &str) -> Vec<String> {
        let relations = self.of.get(family).into_iter().flatten();
        relations.filter_map(|relation| self.sentence(relation, id)).collect()
    }

    fn sentence(&self, relation: &Relation, id: &str) -> Option<String> {
        let (other, first) = match id {
            id if id == relation.left => (&relation.right, true),
            id if id == relation.right => (&relation.left, false),
            _ => return None,
        };
        let other = self.names.get(other.as_str()).unwrap_or(&"");
        let said = match (relation.order, first) {
            (Order::NeverWeaker, true) => format!("never weaker than \u{201c}{other}\u{201d}"),
            (Order::NeverWeaker, false) => format!("never stronger than \u{201c}{other}\u{201d}"),
            (Order::Equal, _) => format!("the same as \u{201c}{other}\u{201d}"),
            (Order::Incomparable, _) => {
                format!("now stronger, now weaker than \u{201c}{other}\u{201d}")
            }
        };
        let seen = if relation.level == Level::Observed { "only observed: " } else { "" };
        Some(format!("{said} ({seen}{})", relation.source))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn an_entry_says_what_is_known_of_its_bound() {
        let entries = catalogue_entries();
        let known = |id: &str| entries.iter().find(|e| e.id == id).map(|e| e.known.join("\n"));
        let split = known("ufl/split").unwrap_or_default();
        assert!(split.contains("never weaker than \u{201c}Joined links\u{201d} ("), "{split}");
        let joined = known("ufl/joined").unwrap_or_default();
        assert!(
            joined.starts_with("never stronger than \u{201c}Split links\u{201d} ("),
            "{joined}"
        );
        let lots = known("lot/l-s").unwrap_or_default();
        assert!(lots.starts_with("that of its best whole plan, whatever the data ("), "{lots}");
        let ordered = known("bins/ordered").unwrap_or_default();
        assert!(ordered.contains("(only observed: "), "{ordered}");
        let legs = known("atsp/legs").unwrap_or_default();
        assert!(legs.contains("now stronger, now weaker than \u{201c}Subtours"), "{legs}");
    }

    #[test]
    fn words_find_entries_with_accents_or_without() {
        let entries = catalogue_entries();
        let found = |words: &str| -> Vec<&str> {
            entries.iter().filter(|e| e.holds(words)).map(|e| e.id.as_str()).collect()
        };
        assert_eq!(found("CORNUEJOLS radii"), ["ufl/radii", "p-median/radius"]);
        assert_eq!(found("miller 1960 position round"), ["atsp/labels", "atsp/loose-labels"]);
        assert_eq!(found("").len(), entries.len());
        assert!(found("no such word").is_empty());
    }
}
