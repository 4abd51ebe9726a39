//! The help on the notation as it is sent.

use record::message::GuideSection;

/// The sections in order.
pub(crate) fn guide_sections() -> Vec<GuideSection> {
    let sent = notation::guide().map(|section| GuideSection {
        title: section.title.to_owned(),
        words: section.words.to_owned(),
        example: section.example.to_owned(),
    });
    sent.collect()
}
