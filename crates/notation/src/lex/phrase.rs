//! What papers write in words: parts, quantifiers, domains.

use super::Lexer;
use super::token::{Gap, Kind};

/// The token of a phrase in `\text{}` or of one that stands alone; `None` where it is only text.
pub(super) fn phrase(inner: &str) -> Option<Kind> {
    let spaced = inner.contains(['\\', '~']);
    let plain =
        if spaced { inner.replace("\\,", " ").replace(['\\', '~'], " ") } else { inner.to_owned() };
    let words: Vec<&str> = plain.split_whitespace().collect();
    let lower = words.join(" ").to_lowercase();
    let lower = lower.trim_matches([',', ':', ';', '.']);
    Some(match lower {
        "s.t" | "s. t" | "st" | "such that" | "with" | "if" | "where" | "when" => Kind::SuchThat,
        "subject to" | "subj. to" | "s.to" | "s. to" | "subject to the constraints" => {
            Kind::SubjectTo
        }
        "minimise" | "minimize" | "min" => Kind::Minimise,
        "maximise" | "maximize" | "max" => Kind::Maximise,
        "for" => Kind::ForAll,
        "and" => Kind::And,
        "or" => Kind::Or,
        "odd" | "is odd" => Kind::Odd,
        "even" | "is even" => Kind::Even,
        "free"
        | "unrestricted"
        | "is free"
        | "unrestricted in sign"
        | "is unrestricted"
        | "unconstrained"
        | "urs" => Kind::Free,
        "clique in" | "is a clique in" => Kind::Clique,
        "data" => Kind::Data,
        "definitions" => Kind::Definitions,
        // "for all cliques k ∈ K"
        _ if ["for all", "for each", "for every", "for any"]
            .iter()
            .any(|words| is_or_begins(lower, words)) =>
        {
            Kind::ForAll
        }
        _ => return None,
    })
}

fn is_or_begins(text: &str, words: &str) -> bool {
    text.strip_prefix(words).is_some_and(|rest| rest.is_empty() || rest.starts_with(' '))
}

/// How far back a quantifier is sought.
const REACH: usize = 60;

impl Lexer<'_> {
    /// `for all j, k ∈ J with j < k`: behind a quantifier on the same line such a word opens the
    /// condition.
    pub(super) fn condition_word(&self, word: &str) -> Option<Kind> {
        if !["with", "where", "when", "if"].contains(&word) || self.gap.has(Gap::NEWLINE) {
            return None;
        }
        for token in self.tokens.iter().rev().take(REACH) {
            match token.kind {
                Kind::ForAll => return Some(Kind::SuchThat),
                Kind::Break => return None,
                _ if token.gap.has(Gap::NEWLINE) => return None,
                _ => {}
            }
        }
        None
    }
}

/// Whether a phrase asks that what it quantifies be different.
pub(super) fn is_distinct(inner: &str) -> bool {
    ["distinct", "different"].iter().any(|word| inner.contains(word))
}
