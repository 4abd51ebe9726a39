//! The catalogue as the page and the command list it.

use record::message::CatalogueEntry;

/// Every shipped formulation.
pub(crate) fn catalogue_entries() -> Vec<CatalogueEntry> {
    let entries = catalogue::entries().into_iter();
    let sent = entries.map(|entry| CatalogueEntry {
        id: entry.id,
        title: entry.title,
        family: entry.family_title,
        relaxation: entry.relaxation,
        citation: entry.citation,
        text: entry.text.to_owned(),
    });
    sent.collect()
}
