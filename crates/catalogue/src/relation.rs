//! What is known of the bounds of rivals: published theorems, and what was only observed.

use crate::{families, tables, text};

/// How the bound of the left rival stands to that of the right one.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Order {
    /// Never weaker: `⪰`.
    NeverWeaker,
    /// The same bound: `=`.
    Equal,
    /// Neither dominates, with a witness each way: `∥`.
    Incomparable,
}

/// How far a statement goes.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Level {
    /// Proved in the literature.
    Theorem,
    /// Seen on instances only.
    Observed,
}

/// A relation between the bounds of two rivals.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Relation {
    /// The id on the left.
    pub left: String,
    /// The relation.
    pub order: Order,
    /// The id on the right.
    pub right: String,
    /// How far it goes.
    pub level: Level,
    /// Where it is proved, or what was observed.
    pub source: String,
}

/// All relations of a family, e.g. `atsp`.
#[must_use]
pub fn relations(family: &str) -> Vec<Relation> {
    let table = families().find(|(name, _)| *name == family).map(|(_, table)| table);
    let Some(table) = table else { return Vec::new() };
    tables(&table, "relation").filter_map(relation).collect()
}

fn relation(table: &toml::Table) -> Option<Relation> {
    Some(Relation {
        left: text(table, "left").to_owned(),
        order: match text(table, "relation") {
            "⪰" => Order::NeverWeaker,
            "=" => Order::Equal,
            "∥" => Order::Incomparable,
            _ => return None,
        },
        right: text(table, "right").to_owned(),
        level: match text(table, "level") {
            "theorem" => Level::Theorem,
            "observed" => Level::Observed,
            _ => return None,
        },
        source: text(table, "source").to_owned(),
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::find;

    #[test]
    fn every_relation_names_shipped_rivals_and_a_source() {
        for (family, table) in families() {
            let relations = relations(family);
            assert_eq!(relations.len(), tables(&table, "relation").count(), "{family}");
            for relation in relations {
                assert!(find(&relation.left).is_some(), "{}", relation.left);
                assert!(find(&relation.right).is_some(), "{}", relation.right);
                assert!(!relation.source.is_empty());
            }
        }
    }

    #[test]
    fn an_unknown_family_has_no_relations() {
        assert!(relations("no-such-family").is_empty());
    }
}
