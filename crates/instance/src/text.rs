//! A text as lines with their places.

/// One line, without its end.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Line<'a> {
    pub(crate) text: &'a str,
    /// Its first byte in the whole text.
    pub(crate) start: usize,
}

impl Line<'_> {
    pub(crate) fn end(&self) -> usize {
        self.start + self.text.len()
    }

    pub(crate) fn span(&self) -> std::ops::Range<usize> {
        self.start..self.end()
    }

    pub(crate) fn is_blank(&self) -> bool {
        self.text.trim().is_empty()
    }

    /// Whether the line is a remark: `#` alone or before a blank.
    pub(crate) fn is_remark(&self) -> bool {
        let rest = self.text.trim_start().strip_prefix('#');
        rest.is_some_and(|rest| rest.is_empty() || rest.starts_with([' ', '\t', '#']))
    }
}

/// The lines of a text. They end at `\n`, `\r\n` or a lone `\r`; a byte order mark at the start
/// belongs to no line. O(length).
pub(crate) fn lines(text: &str) -> Vec<Line<'_>> {
    let bytes = text.as_bytes();
    let mut start = if text.starts_with('\u{feff}') { '\u{feff}'.len_utf8() } else { 0 };
    let mut lines = Vec::new();
    let mut at = start;
    while at < bytes.len() {
        let next = match bytes[at] {
            b'\r' if bytes.get(at + 1) == Some(&b'\n') => at + 2,
            b'\n' | b'\r' => at + 1,
            _ => {
                at += 1;
                continue;
            }
        };
        lines.push(Line { text: &text[start..at], start });
        start = next;
        at = next;
    }
    if start < text.len() {
        lines.push(Line { text: &text[start..], start });
    }
    lines
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn all_ends_of_lines_are_known() {
        let text = "\u{feff}a\r\nb\rc\n\nd";
        let found: Vec<_> = lines(text).iter().map(|line| (line.text, line.start)).collect();
        assert_eq!(found, [("a", 3), ("b", 6), ("c", 8), ("", 10), ("d", 11)]);
        assert!(lines("").is_empty());
    }

    #[test]
    fn remarks() {
        let remark = |text| lines(text)[0].is_remark();
        assert!(remark("# a remark") && remark("  #") && remark("## more"));
        assert!(!remark("#1;2") && !remark("a # b"));
    }
}
