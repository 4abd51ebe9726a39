//! Which figures a sentence is made of: every table and drawing of the record has a number, and each
//! sentence that is made of figures names those that it took them from.

use record::study::Report;

use super::{Evidence, instances, orders};
use crate::study::sections;

/// A sentence, with the numbers of the evidence that it is made of.
pub(super) type Cited = (String, Vec<usize>);

/// Sentences that cite nothing: they repeat what was given.
pub(super) fn plain(sentences: impl Iterator<Item = String>) -> Vec<Cited> {
    sentences.map(|sentence| (sentence, Vec::new())).collect()
}

/// A sentence with what it cites: `… [2, 5]`.
pub(super) fn with_marks((sentence, cited): &Cited) -> String {
    if cited.is_empty() { sentence.clone() } else { format!("{sentence} [{}]", listed(cited)) }
}

fn listed(cited: &[usize]) -> String {
    cited.iter().map(usize::to_string).collect::<Vec<_>>().join(", ")
}

/// The numbers, counted from 1 in the order of the record.
#[derive(Debug, Default)]
pub(super) struct Marks {
    instances: Vec<String>,
    /// Of the table of each instance.
    pub(super) results: Vec<usize>,
    /// Of the orders of all rivals.
    pub(super) orders: Vec<usize>,
    /// Of the sections of each study.
    pub(super) studies: Vec<Vec<usize>>,
}

impl Marks {
    pub(super) fn of(evidence: &Evidence<'_>) -> Self {
        let instances = instances(evidence);
        let mut last = 0;
        let mut next = || {
            last += 1;
            last
        };
        let results = instances.iter().map(|_| next()).collect();
        let orders = orders(evidence).iter().map(|_| next()).collect();
        let of_study = |(_, report): &(String, Report)| -> Vec<usize> {
            sections(report).iter().map(|_| next()).collect()
        };
        let studies = evidence.studies.iter().map(of_study).collect();
        Self { instances, results, orders, studies }
    }

    /// The table of an instance.
    pub(super) fn on(&self, instance: &str) -> Vec<usize> {
        let place = self.instances.iter().position(|known| known == instance);
        place.map(|place| self.results[place]).into_iter().collect()
    }

    /// The first section of the study at a place, in which its verdict stands.
    pub(super) fn study(&self, place: usize) -> Option<usize> {
        self.studies.get(place)?.first().copied()
    }
}
