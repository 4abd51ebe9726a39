//! Characters as other programs give them: the spaces of a PDF, letters of the mathematical
//! alphabets (Unicode 15, block U+1D400–U+1D7FF), accents that combine.

/// White space of any width, and characters that only steer the setting.
pub(super) fn is_white(c: char) -> bool {
    matches!(c, '~' | '\u{ad}' | '\u{feff}' | '\u{200b}'..='\u{200f}' | '\u{2060}'..='\u{2064}')
        || c.is_whitespace()
}

/// The plain letter or digit that a character of a mathematical alphabet stands for.
pub(super) fn plain(c: char) -> Option<char> {
    let code = u32::from(c);
    match code {
        0x210e => return Some('h'),
        // the italic, bold and sans-serif alphabets, 26 capitals and 26 small letters each
        0x1d400..=0x1d49b | 0x1d5a0..=0x1d6a3 => {
            let at = (code - 0x1d400) % 52;
            let letter = if at < 26 { 0x41 + at } else { 0x61 + at - 26 };
            return char::from_u32(letter);
        }
        0x1d7ce..=0x1d7ff => return char::from_u32(0x30 + (code - 0x1d7ce) % 10),
        0x1d6a8..=0x1d7c9 => {}
        _ => return None,
    }
    // five Greek alphabets of 58 letters
    let at = (code - 0x1d6a8) % 58;
    match at {
        0..=16 => char::from_u32(0x391 + at),
        18..=24 => char::from_u32(0x391 + at),
        26..=50 => char::from_u32(0x3b1 + at - 26),
        52 => Some('ε'),
        53 => Some('θ'),
        55 => Some('φ'),
        _ => None,
    }
}

/// A letter of a script or black-letter alphabet, which is another name than the plain letter.
pub(super) fn script(c: char) -> Option<char> {
    let code = u32::from(c);
    match code {
        0x1d49c..=0x1d4b5 => char::from_u32(0x41 + code - 0x1d49c),
        0x1d4d0..=0x1d4e9 => char::from_u32(0x41 + code - 0x1d4d0),
        _ => "ℬBℰEℱFℋHℐIℒLℳMℛR".split(c).nth(1).and_then(|rest| rest.chars().next()),
    }
    .filter(|_| !c.is_ascii())
}

/// The TeX command of an accent that combines with the letter before it.
pub(super) fn accent(c: char) -> Option<&'static str> {
    Some(match c {
        '\u{302}' => "hat",
        '\u{303}' => "tilde",
        '\u{304}' | '\u{305}' => "bar",
        '\u{307}' => "dot",
        '\u{20d7}' => "vec",
        _ => return None,
    })
}
