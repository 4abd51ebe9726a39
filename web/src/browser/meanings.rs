//! Meanings of codes that were asked for and are on their way.

use record::message::Explanation;
use yew::Callback;

/// Who waits for which code.
#[derive(Debug, Default)]
pub(crate) struct Meanings {
    waiting: Vec<(String, Callback<Explanation>)>,
}

impl Meanings {
    /// Somebody waits for a code.
    pub(crate) fn begin(&mut self, code: &str, hear: Callback<Explanation>) {
        self.waiting.push((code.to_owned(), hear));
    }

    /// All who wait for this code.
    pub(crate) fn end(&mut self, code: &str) -> Vec<Callback<Explanation>> {
        let (heard, waiting) =
            std::mem::take(&mut self.waiting).into_iter().partition(|(waiting, _)| waiting == code);
        self.waiting = waiting;
        let heard: Vec<(String, Callback<Explanation>)> = heard;
        heard.into_iter().map(|(_, hear)| hear).collect()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn all_who_wait_for_a_code_hear_of_it_once() {
        let mut meanings = Meanings::default();
        for code in ["lint.free", "row.strict", "lint.free"] {
            meanings.begin(code, Callback::noop());
        }
        assert_eq!((meanings.end("lint.free").len(), meanings.end("lint.free").len()), (2, 0));
        assert_eq!(meanings.end("row.strict").len(), 1);
    }
}
