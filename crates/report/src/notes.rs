//! Notes as they are read: Markdown (CommonMark) taken apart into paragraphs, lists and code.
//!
//! What a note of a scenario needs and no more: markup of HTML is text, pictures are their
//! description, a link is its words with its address behind them. Nothing of it can run or load.

use pulldown_cmark::{Event, Parser, Tag, TagEnd};

/// How a run of letters is set.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Hand {
    /// As the text around it.
    #[default]
    Plain,
    /// Emphasised.
    Emphasis,
    /// Strong.
    Strong,
    /// As code.
    Code,
}

/// A run of letters.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Run {
    /// The letters.
    pub text: String,
    /// How they are set.
    pub hand: Hand,
}

/// A piece of notes.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Piece {
    /// A heading, of whatever level.
    Heading(Vec<Run>),
    /// A paragraph.
    Paragraph(Vec<Run>),
    /// Items with bullets; a list within an item follows it.
    Bullets(Vec<Vec<Run>>),
    /// Items with numbers, from the number on.
    Numbers(u64, Vec<Vec<Run>>),
    /// Lines as they stand.
    Code(String),
}

/// The pieces of notes. Time and memory grow with the length of the text.
#[must_use]
pub fn pieces(markdown: &str) -> Vec<Piece> {
    let mut reader = Reader::default();
    for event in Parser::new(markdown) {
        reader.take(event);
    }
    reader.end();
    reader.pieces
}

#[derive(Debug, Default)]
struct Reader {
    pieces: Vec<Piece>,
    runs: Vec<Run>,
    /// The lists that are open, with the number of the next item where they have numbers.
    lists: Vec<Option<u64>>,
    emphasis: usize,
    strong: usize,
    heading: bool,
    code: Option<String>,
    /// The address of the link that is open.
    address: String,
}

impl Reader {
    fn take(&mut self, event: Event<'_>) {
        match event {
            Event::Start(tag) => self.begin(tag),
            Event::End(tag) => self.close(tag),
            Event::Text(text) | Event::Html(text) | Event::InlineHtml(text) => self.letters(&text),
            Event::Code(text) => self.run(&text, Hand::Code),
            Event::SoftBreak | Event::HardBreak => self.letters(" "),
            Event::Rule => self.end(),
            _ => {}
        }
    }

    fn begin(&mut self, tag: Tag<'_>) {
        match tag {
            Tag::Emphasis => self.emphasis += 1,
            Tag::Strong => self.strong += 1,
            Tag::Link { dest_url, .. } => self.address = dest_url.into_string(),
            Tag::Heading { .. } => {
                self.end();
                self.heading = true;
            }
            Tag::CodeBlock(_) => {
                self.end();
                self.code = Some(String::new());
            }
            Tag::List(first) => {
                self.end();
                self.lists.push(first);
            }
            Tag::Paragraph if self.lists.is_empty() => self.end(),
            Tag::Paragraph if !self.runs.is_empty() => self.letters(" "),
            Tag::Item | Tag::HtmlBlock => self.end(),
            _ => {}
        }
    }

    fn close(&mut self, tag: TagEnd) {
        match tag {
            TagEnd::Emphasis => self.emphasis -= 1,
            TagEnd::Strong => self.strong -= 1,
            TagEnd::Link => {
                let address = std::mem::take(&mut self.address);
                if self.runs.last().is_none_or(|run| run.text != address) {
                    self.letters(&format!(" ({address})"));
                }
            }
            TagEnd::Paragraph if !self.lists.is_empty() => {}
            TagEnd::Heading(_) | TagEnd::Paragraph | TagEnd::Item | TagEnd::HtmlBlock => self.end(),
            TagEnd::List(_) => {
                self.end();
                self.lists.pop();
            }
            TagEnd::CodeBlock => {
                let code = self.code.take().unwrap_or_default();
                self.pieces.push(Piece::Code(code.trim_end().to_owned()));
            }
            _ => {}
        }
    }

    fn letters(&mut self, text: &str) {
        if let Some(code) = &mut self.code {
            return code.push_str(text);
        }
        let hand = match (self.strong, self.emphasis) {
            (0, 0) => Hand::Plain,
            (0, _) => Hand::Emphasis,
            _ => Hand::Strong,
        };
        self.run(text, hand);
    }

    fn run(&mut self, text: &str, hand: Hand) {
        match self.runs.last_mut().filter(|run| run.hand == hand) {
            Some(run) => run.text.push_str(text),
            None => self.runs.push(Run { text: text.to_owned(), hand }),
        }
    }

    /// What was read so far is a piece, or an item of the list that is open.
    fn end(&mut self) {
        let heading = std::mem::take(&mut self.heading);
        let runs = std::mem::take(&mut self.runs);
        if runs.iter().all(|run| run.text.trim().is_empty()) {
            return;
        }
        match self.lists.last_mut() {
            None if heading => self.pieces.push(Piece::Heading(runs)),
            None => self.pieces.push(Piece::Paragraph(runs)),
            Some(None) => match self.pieces.last_mut() {
                Some(Piece::Bullets(items)) => items.push(runs),
                _ => self.pieces.push(Piece::Bullets(vec![runs])),
            },
            Some(Some(next)) => {
                *next += 1;
                match self.pieces.last_mut() {
                    Some(Piece::Numbers(_, items)) => items.push(runs),
                    _ => self.pieces.push(Piece::Numbers(*next - 1, vec![runs])),
                }
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;

    use super::*;

    fn plain(text: &str) -> Vec<Run> {
        vec![Run { text: text.to_owned(), hand: Hand::Plain }]
    }

    fn set(text: &str, hand: Hand) -> Run {
        Run { text: text.to_owned(), hand }
    }

    #[test]
    fn lines_of_a_paragraph_are_one_and_lists_keep_their_items() {
        let read = pieces(
            "One\nline.\n\n- **A**, first\n  goes on\n- `B`\n\n3. three\n4. four\n\n# End\n",
        );
        let first = vec![set("A", Hand::Strong), set(", first goes on", Hand::Plain)];
        let expected = vec![
            Piece::Paragraph(plain("One line.")),
            Piece::Bullets(vec![first, vec![set("B", Hand::Code)]]),
            Piece::Numbers(3, vec![plain("three"), plain("four")]),
            Piece::Heading(plain("End")),
        ];
        assert_eq!(read, expected);
    }

    #[test]
    fn what_is_code_keeps_its_lines() {
        assert_eq!(pieces("```\na\n  b\n```\n"), [Piece::Code("a\n  b".to_owned())]);
    }

    #[test]
    fn markup_is_text_and_a_link_shows_where_it_leads() {
        let read =
            pieces("<img src=x onerror=alert(1)>\n\nsee [here](javascript:alert(1)) <b>bold</b>");
        let expected = [
            Piece::Paragraph(plain("<img src=x onerror=alert(1)>\n")),
            Piece::Paragraph(plain("see here (javascript:alert(1)) <b>bold</b>")),
        ];
        assert_eq!(read, expected);
    }

    #[test]
    fn lists_within_lists_are_told_in_order() {
        let read = pieces("- a\n  - b\n- c");
        assert_eq!(read, [Piece::Bullets(vec![plain("a"), plain("b"), plain("c")])]);
    }

    #[test]
    fn depth_is_no_danger() {
        assert!(!pieces(&"> ".repeat(100_000)).iter().any(|piece| matches!(piece, Piece::Code(_))));
        let deep: String = (0..300).map(|depth| format!("{}- x\n", "  ".repeat(depth))).collect();
        assert!(!pieces(&deep).is_empty());
    }

    proptest! {
        #[test]
        fn no_letter_makes_it_fall_over(text in "[-*_`#>\\[\\]()<>!&;a1. \n]{0,200}") {
            let _ = pieces(&text);
        }
    }
}
