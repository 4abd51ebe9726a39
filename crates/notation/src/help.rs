//! Help on a code: what it means, a text that provokes it, and the same text mended.
//!
//! The texts stand in `help/*.md`, one heading a code. An example is a listing of differences:
//! lines that begin with `-` are only in the text that fails, those with `+` only in the mended
//! one. `tests/help.rs` holds every example to its code.

/// All entries, in the order in which help lists them.
const TEXTS: &[&str] = &[
    include_str!("../help/syntax.md"),
    include_str!("../help/name.md"),
    include_str!("../help/shape.md"),
    include_str!("../help/row.md"),
    include_str!("../help/subset.md"),
    include_str!("../help/data.md"),
    include_str!("../help/size.md"),
    include_str!("../help/lint.md"),
];

/// Help on one code.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Help {
    /// The code.
    pub code: &'static str,
    /// What it means and what to do, one paragraph.
    pub meaning: &'static str,
    /// The example, lines marked `-` and `+`; empty where a text cannot show it.
    pub example: &'static str,
}

impl Help {
    /// The example as it fails.
    #[must_use]
    pub fn fails(&self) -> String {
        self.side('-')
    }

    /// The example mended.
    #[must_use]
    pub fn mended(&self) -> String {
        self.side('+')
    }

    fn side(&self, mark: char) -> String {
        let lines = self.example.lines();
        let kept = lines.filter_map(|line| line.strip_prefix(mark).or(line.strip_prefix(' ')));
        kept.flat_map(|line| [line, "\n"]).collect()
    }
}

/// Help on a code such as `lint.big-m`. `O(length of the help)`.
#[must_use]
pub fn help(code: &str) -> Option<Help> {
    codes().find(|entry| entry.code == code)
}

/// Help on every code.
pub fn codes() -> impl Iterator<Item = Help> {
    TEXTS.iter().flat_map(|text| text.split("## ").skip(1)).map(entry)
}

fn entry(text: &'static str) -> Help {
    let (code, rest) = text.split_once('\n').unwrap_or((text, ""));
    let (meaning, rest) = rest.split_once("```diff\n").unwrap_or((rest, ""));
    let example = rest.split("```").next().unwrap_or("");
    Help { code, meaning: meaning.trim(), example }
}
