//! Drawings of lines, marks and words, black on white or white on black as the text around them is.

use std::fmt::Write;

use crate::decision::escaped;

/// A drawing; places are in pixels from the upper left.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Figure {
    /// What it shows, in words.
    pub label: String,
    /// Width and height.
    pub size: (usize, usize),
    /// Thin grey lines from x, y to x, y.
    pub rules: Vec<[usize; 4]>,
    /// Lines from x, y to x, y, each with its dashes.
    pub lines: Vec<([usize; 4], &'static str)>,
    /// Discs, or rings where they are not full.
    pub marks: Vec<(usize, usize, bool)>,
    /// Words beside the lines: x, y and the word.
    pub words: Vec<(usize, usize, String)>,
    /// Small words, each with where its place is in it: start, middle or end.
    pub labels: Vec<(usize, usize, &'static str, String)>,
    /// Names of the rivals, centred.
    pub names: Vec<(usize, usize, String)>,
}

impl Figure {
    /// The drawing as SVG, by attributes alone: the page's policy refuses styles in an element.
    #[must_use]
    pub fn svg(&self) -> String {
        let (width, height) = self.size;
        let mut out = format!(
            "<svg role=\"img\" aria-label=\"{}\" viewBox=\"0 0 {width} {height}\" width=\"{width}\" \
             height=\"{height}\" font-family=\"system-ui,sans-serif\" font-size=\"13\" \
             fill=\"currentColor\" stroke=\"none\">",
            escaped(&self.label)
        );
        let grey = self.rules.iter().map(|rule| (rule, "stroke-opacity=\"0.3\"".to_owned()));
        let lines = self.lines.iter();
        let lines = lines.map(|(line, dashes)| (line, format!("stroke-dasharray=\"{dashes}\"")));
        for ([x1, y1, x2, y2], hand) in grey.chain(lines) {
            // Writing to a string cannot fail.
            let _ = write!(
                out,
                "<line x1=\"{x1}\" y1=\"{y1}\" x2=\"{x2}\" y2=\"{y2}\" stroke=\"currentColor\" {hand}/>"
            );
        }
        for (x, y, full) in &self.marks {
            let fill = if *full { "currentColor" } else { "Canvas" };
            let _ = write!(
                out,
                "<circle cx=\"{x}\" cy=\"{y}\" r=\"3.5\" stroke=\"currentColor\" fill=\"{fill}\"/>"
            );
        }
        let words =
            self.words.iter().map(|(x, y, word)| (x, y, word, "font-style=\"italic\"".to_owned()));
        let labels = self.labels.iter().map(|(x, y, anchor, word)| {
            (x, y, word, format!("font-size=\"12\" text-anchor=\"{anchor}\""))
        });
        let bold = "font-size=\"16\" font-weight=\"600\" text-anchor=\"middle\"";
        let names = self.names.iter().map(|(x, y, name)| (x, y, name, bold.to_owned()));
        for (x, y, word, hand) in words.chain(labels).chain(names) {
            let _ = write!(out, "<text x=\"{x}\" y=\"{y}\" {hand}>{}</text>", escaped(word));
        }
        out + "</svg>"
    }
}
