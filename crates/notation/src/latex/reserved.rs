//! Characters that TeX reserves, in running text: a backslash before each, and away again.

/// What stands for itself in a text only behind a backslash, in mathematics too.
const ALWAYS: [char; 3] = ['&', '%', '#'];

/// A text with a backslash before each reserved character. An underscore within or beside
/// mathematics is left to mean a subscript.
pub(super) fn escaped_text(text: &str) -> String {
    let underscores = !text.contains(['$', '\\']);
    let mut out = String::with_capacity(text.len());
    for c in text.chars() {
        if ALWAYS.contains(&c) || underscores && c == '_' {
            out.push('\\');
        }
        out.push(c);
    }
    out
}

/// A title; raw where its escaped form would not be read back.
pub(super) fn escaped(title: &str) -> String {
    let out = escaped_text(title);
    if crate::parse::is_title(&out) && unescaped(&out) == title { out } else { title.to_owned() }
}

/// The text without backslashes before reserved characters.
pub(crate) fn unescaped(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    let mut backslashes = 0;
    for c in text.chars() {
        if c == '\\' {
            backslashes += 1;
            continue;
        }
        let kept = if ALWAYS.contains(&c) || c == '_' { 0 } else { backslashes };
        out.extend(std::iter::repeat_n('\\', kept));
        backslashes = 0;
        out.push(c);
    }
    out.extend(std::iter::repeat_n('\\', backslashes));
    out
}
