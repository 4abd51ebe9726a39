//! The help on the notation: short sections, each with a whole formulation as its example.

/// A section of the help.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Section {
    /// What it is about.
    pub title: &'static str,
    /// What is to be known; code stands between grave accents.
    pub words: &'static str,
    /// A formulation that shows it, without errors or warnings.
    pub example: &'static str,
}

/// A section begins with this sign.
const SECTION: &str = "§ ";
/// Between the words and the example.
const FENCE: &str = "\n~~~\n";

/// The sections in the order in which they are read.
pub fn guide() -> impl Iterator<Item = Section> {
    include_str!("guide.txt").split(SECTION).filter_map(|section| {
        let (words, example) = section.split_once(FENCE)?;
        let (title, words) = words.split_once('\n')?;
        Some(Section { title: title.trim(), words: words.trim(), example: example.trim_end() })
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_example_is_sound() {
        let (mut count, mut wrong) = (0, Vec::new());
        for section in guide() {
            count += 1;
            assert!(!section.words.is_empty() && !section.title.is_empty());
            let parse = crate::parse(section.example);
            let (checked, found) = crate::check(&parse.tree);
            let found = [parse.diagnostics, found].concat();
            wrong.extend(found.iter().map(|found| format!("{}: {found:?}", section.title)));
            if checked.families().is_empty() {
                wrong.push(format!("{}: no rows", section.title));
            }
        }
        assert!(wrong.is_empty(), "{}", wrong.join("\n"));
        let signs = include_str!("guide.txt").matches(SECTION).count();
        assert_eq!((count, signs), (11, 11));
    }
}
