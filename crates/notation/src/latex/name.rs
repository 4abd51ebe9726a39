//! Names in LaTeX: Greek letters as commands, whole words upright.

use crate::lex::letter_command;

/// A name with the decorations that belong to it; `whole` says that its letters are one name.
pub(super) fn text(name: &str, whole: bool) -> String {
    if let Some(rest) = name.strip_prefix('\\') {
        return decorated(rest);
    }
    let end = name.find(['_', '^']).unwrap_or(name.len());
    let (word, decoration) = name.split_at(end);
    format!("{}{decoration}", base(word, whole))
}

/// `\bar λ` and its like: what stands behind the command is one letter or a braced word.
fn decorated(rest: &str) -> String {
    let printed = rest.split_inclusive(' ').map(|piece| {
        let end = piece.find(['_', '^']).unwrap_or(piece.len());
        let (word, decoration) = piece.split_at(end);
        letter_command(word).map_or_else(|| piece.to_owned(), |c| format!("\\{c}{decoration}"))
    });
    format!("\\{}", printed.collect::<String>())
}

fn base(word: &str, whole: bool) -> String {
    if let Some(command) = letter_command(word) {
        return format!("\\{command}");
    }
    let several = word.chars().count() > 1;
    let plain = word.chars().all(char::is_alphanumeric);
    // at the start of a line these words would open a part
    let opens = matches!(word.to_lowercase().as_str(), "data" | "define" | "definitions");
    if several && plain && (whole || opens) {
        format!("\\mathit{{{word}}}")
    } else {
        word.to_owned()
    }
}
