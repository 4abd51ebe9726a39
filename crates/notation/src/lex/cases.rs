//! `\\begin{cases} … \\end{cases}` as one bracket whose rows are kept apart.

use super::Lexer;
use super::token::Kind;

/// The text of the tokens that begin, part and end a bracket of cases.
pub(crate) const MARK: &str = "cases";

impl Lexer<'_> {
    /// The rows up to the end of the environment, from behind its beginning.
    pub(super) fn cases(&mut self, name: &str, start: usize) {
        let text = self.text;
        let closing = format!("\\end{{{name}}}");
        let known = self.endless.iter().any(|one| one == name);
        let found = if known { None } else { text[self.at..].find(&closing) };
        let Some(length) = found else {
            if !known {
                self.endless.push(name.to_owned());
            }
            return self.push(Kind::Unknown, start, self.at);
        };
        let (from, to) = (self.at, self.at + length);
        self.push_text(Kind::LeftBrace, start, from, MARK.to_owned());
        let mut at = from;
        for (number, row) in text[from..to].split("\\\\").enumerate() {
            if number > 0 && !row.trim().is_empty() {
                self.push_text(Kind::SuchThat, at.saturating_sub(2), at, MARK.to_owned());
            }
            // [2pt] behind a line break
            let skip = if row.starts_with('[') { row.find(']').map_or(0, |i| i + 1) } else { 0 };
            self.relex(&row[skip..], at + skip);
            at += row.len() + 2;
        }
        self.at = to + closing.len();
        self.push_text(Kind::RightBrace, to, self.at, MARK.to_owned());
    }
}
