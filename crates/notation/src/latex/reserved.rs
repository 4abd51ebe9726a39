//! Characters that TeX reserves, in running text: a backslash before each, and away again.

use crate::lex::token::Kind as Token;

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

/// What a text that is no TeX is set with, and read back from: as it stands, in typewriter.
const VERBATIM: [(char, &str); 10] = [
    ('\\', "\\textbackslash{}"),
    ('^', "\\textasciicircum{}"),
    ('~', "\\textasciitilde{}"),
    ('{', "\\{"),
    ('}', "\\}"),
    ('$', "\\$"),
    ('&', "\\&"),
    ('%', "\\%"),
    ('#', "\\#"),
    ('_', "\\_"),
];

/// A remark in a spelling that reads back as one: `\text{…}` where that says the same, else
/// `\texttt{…}`, in which every character stands for itself.
pub(crate) fn remark(remark: &str) -> String {
    let text = format!("\\text{{{}}}", escaped_text(remark));
    let tokens = crate::lex::lex(&text, 0);
    let whole = matches!(&tokens[..], [one, end]
        if one.kind == Token::Text && one.text == remark && end.kind == Token::End);
    if whole { text } else { format!("\\texttt{{{}}}", verbatim(remark)) }
}

fn verbatim(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for c in text.chars() {
        match VERBATIM.iter().find(|(plain, _)| *plain == c) {
            Some((_, command)) => out.push_str(command),
            None => out.push(c),
        }
    }
    out
}

/// The text that [`remark()`] set in typewriter.
pub(crate) fn read_verbatim(mut text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    while let Some(c) = text.chars().next() {
        let found = VERBATIM.iter().find(|(_, command)| text.starts_with(command));
        let (plain, length) = found.map_or((c, c.len_utf8()), |(plain, s)| (*plain, s.len()));
        out.push(plain);
        text = &text[length..];
    }
    out
}

/// A title; raw where its escaped form would not be read back.
pub(super) fn escaped(title: &str) -> String {
    let out = escaped_text(title);
    if crate::parse::is_title(&out) && unescaped(&out) == title {
        out
    } else {
        crate::print::no_comment(title)
    }
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
