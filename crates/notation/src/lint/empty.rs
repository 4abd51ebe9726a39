//! Rows without entries: an expansion writes none, a file may hold some.

use model::RowId;

use super::Subject;
use crate::diagnostic::{Diagnostic, lints as message};

pub(super) fn lint(subject: &Subject<'_>) -> Vec<Diagnostic> {
    let model = subject.model();
    let mut found = Vec::new();
    for family in model.families() {
        let empty = |row: &RowId| model.row_entries(*row).is_empty();
        let mut rows = family.rows.clone().map(RowId).filter(empty);
        let Some(first) = rows.next() else { continue };
        found.push(message::empty_rows(&family.name, (1 + rows.count(), &model.row_name(first))));
    }
    found
}
