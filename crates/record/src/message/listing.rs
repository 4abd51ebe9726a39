//! A shipped formulation as it is listed, and the words by which it is found.

use serde::{Deserialize, Serialize};

/// One shipped formulation.
#[derive(Debug, Clone, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct CatalogueEntry {
    /// The id, e.g. `atsp/labels`.
    pub id: String,
    /// The title.
    pub title: String,
    /// The family it belongs to in words: "round trip, directed".
    pub family: String,
    /// Whether it is only a relaxation.
    pub relaxation: bool,
    /// Its citation.
    pub citation: String,
    /// Its size in terms of the data.
    pub size: String,
    /// For which data it is right.
    pub assumption: String,
    /// The variable in which rivals of its family are compared.
    pub natural: String,
    /// The readers whose instances its family takes, as a scenario file names them.
    pub readers: Vec<String>,
    /// What is known of its bound beside those of others, a sentence each.
    pub known: Vec<String>,
    /// What goes wrong with it.
    pub pitfall: String,
    /// The notation text.
    pub text: String,
}

impl CatalogueEntry {
    /// Whether it holds all these words in its id, title, family or citation: in any letters,
    /// accents or none. No word is held by all.
    #[must_use]
    pub fn holds(&self, words: &str) -> bool {
        let here = [&self.id, &self.title, &self.family, &self.citation].map(|text| plain(text));
        plain(words).split_whitespace().all(|word| here.iter().any(|text| text.contains(word)))
    }
}

/// Small letters without the accents that names of authors have.
fn plain(text: &str) -> String {
    let bare = |c: char| match c {
        'á' | 'à' | 'â' | 'ä' | 'ã' => 'a',
        'é' | 'è' | 'ê' | 'ë' => 'e',
        'í' | 'ì' | 'î' | 'ï' => 'i',
        'ó' | 'ò' | 'ô' | 'ö' => 'o',
        'ú' | 'ù' | 'û' | 'ü' => 'u',
        'ç' => 'c',
        'ñ' => 'n',
        c => c,
    };
    text.chars().flat_map(char::to_lowercase).map(bare).collect()
}
