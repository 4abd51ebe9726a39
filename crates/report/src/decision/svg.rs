//! Drawings as one SVG that stands alone: black on white, one below the other.

use std::fmt::Write;

use super::escaped;
use crate::study::Figure;

/// Room around the drawings, and for the heading above each.
const MARGIN: usize = 24;
const HEAD: usize = 32;

pub(super) fn document(drawings: &[(String, Figure)]) -> String {
    let widest = drawings.iter().map(|(_, figure)| figure.size.0).max().unwrap_or(0);
    let longest = drawings.iter().map(|(heading, _)| heading.chars().count() * 9).max();
    let width = widest.max(longest.unwrap_or(400)) + 2 * MARGIN;
    let (mut body, mut y) = (String::new(), MARGIN);
    for (heading, figure) in drawings {
        // Writing to a string cannot fail.
        let _ = write!(
            body,
            "<text x=\"{MARGIN}\" y=\"{}\" font-weight=\"600\">{}</text>\n\
             <g transform=\"translate({MARGIN} {})\">{}</g>\n",
            y + 16,
            escaped(heading),
            y + HEAD,
            figure.svg()
        );
        y += HEAD + figure.size.1 + MARGIN;
    }
    if drawings.is_empty() {
        body.push_str("<text x=\"24\" y=\"40\">The record has no drawing.</text>\n");
        y += HEAD + MARGIN;
    }
    format!(
        "<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 {width} {y}\" width=\"{width}\" \
         height=\"{y}\" font-family=\"system-ui,sans-serif\" font-size=\"15\" color=\"#000\">\n\
         <rect width=\"100%\" height=\"100%\" fill=\"#fff\"/>\n{body}</svg>\n"
    )
}
