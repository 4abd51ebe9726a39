//! Files of several instances.

use crate::complaint::{grouped, plural};
use crate::instance::Instance;

use super::Found;
use super::stream::Stream;

/// More instances in a file are refused.
pub(super) const MOST_PARTS: usize = 1_000;

/// One instance, what is said of it, and a word for it.
pub(super) type Part = (Instance, Vec<String>, String);

/// Reads all instances of a file and keeps one.
pub(super) struct Parts {
    wanted: usize,
    kept: Option<(Instance, Vec<String>)>,
    words: Vec<String>,
}

impl Parts {
    pub(super) fn new(part: Option<usize>) -> Self {
        Self { wanted: part.unwrap_or(1), kept: None, words: Vec::new() }
    }

    /// A file that begins with the number of its instances.
    pub(super) async fn counted(
        stream: &mut Stream<'_, '_>,
        part: Option<usize>,
        read: impl AsyncFn(&mut Stream<'_, '_>) -> Option<Part>,
    ) -> Option<Found> {
        let count = stream.whole("the number of instances", 1, MOST_PARTS)?;
        let mut parts = Self::new(part);
        for _ in 0..count {
            parts.add(read(stream).await?);
        }
        stream.finish()?;
        parts.finish(stream)
    }

    /// A file of one instance after the other.
    pub(super) async fn all(
        stream: &mut Stream<'_, '_>,
        part: Option<usize>,
        read: impl AsyncFn(&mut Stream<'_, '_>) -> Option<Part>,
    ) -> Option<Found> {
        let mut parts = Self::new(part);
        while parts.words.is_empty() || stream.left() > 0 && parts.words.len() < MOST_PARTS {
            parts.add(read(stream).await?);
        }
        stream.finish()?;
        parts.finish(stream)
    }

    pub(super) fn add(&mut self, (instance, facts, word): Part) {
        self.words.push(format!("{} – {word}", self.words.len() + 1));
        if self.words.len() == self.wanted {
            self.kept = Some((instance, facts));
        }
    }

    pub(super) fn finish(mut self, stream: &mut Stream) -> Option<Found> {
        let count = self.words.len();
        let Some((instance, mut facts)) = self.kept else {
            let instances = plural(count, "instance", "instances");
            let message = format!("the file holds {instances}, none of number {}", self.wanted);
            let mend = format!("Choose one from 1 to {}.", grouped(count));
            stream.error(0..0, "no-such-part", [message, mend]);
            return None;
        };
        if count == 1 {
            self.words.clear();
        } else {
            facts.insert(
                0,
                format!("Instance {} of the {} in this file.", self.wanted, grouped(count)),
            );
        }
        Some(Found { instance, facts, parts: self.words })
    }
}
