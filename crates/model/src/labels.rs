//! Labels: the names of the members of index sets, each kept once.

use std::collections::BTreeMap;

use crate::LabelId;

/// A table of labels. The order of first insertion gives the ids.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Labels {
    names: Vec<String>,
    ids: BTreeMap<String, LabelId>,
}

impl Labels {
    /// The id of `name`, which is added if it is new.
    pub fn intern(&mut self, name: &str) -> LabelId {
        if let Some(&id) = self.ids.get(name) {
            return id;
        }
        let id = LabelId::from_index(self.names.len());
        self.names.push(name.to_owned());
        self.ids.insert(name.to_owned(), id);
        id
    }

    /// The id of `name`, if it is known.
    #[must_use]
    pub fn find(&self, name: &str) -> Option<LabelId> {
        self.ids.get(name).copied()
    }

    /// The name of a label; empty for an id of another table.
    #[must_use]
    pub fn name(&self, id: LabelId) -> &str {
        self.names.get(id.index()).map_or("", String::as_str)
    }

    /// The number of labels.
    #[must_use]
    pub fn len(&self) -> usize {
        self.names.len()
    }

    /// Whether the table holds no label.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        self.names.is_empty()
    }
}
