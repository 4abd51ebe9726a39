//! The link: `#s1.` followed by the scenario text, deflated (raw, RFC 1951) and written in
//! base64url without padding (RFC 4648, section 5).

use std::fmt;

use base64::{Engine, engine::general_purpose::URL_SAFE_NO_PAD};
use miniz_oxide::{deflate::compress_to_vec, inflate::decompress_to_vec_with_limit};

/// What a fragment of version 1 begins with.
pub const PREFIX: &str = "#s1.";

/// The longest scenario text, in bytes, that a link may hold: 1 MiB. A short link can unpack
/// to any length, so unpacking stops there.
pub const LONGEST_TEXT: usize = 1 << 20;

/// From this many characters on some mail and chat programs cut a link.
pub const OFTEN_CUT: usize = 8_000;

/// Why a text and a link could not be turned into each other.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum LinkError {
    /// There is no `#s1.` in it.
    NoScenario,
    /// A character that base64url does not have, or one too few.
    Base64,
    /// The packed bytes end early or are damaged.
    Deflate,
    /// The text is longer than [`LONGEST_TEXT`].
    TooLong,
    /// The text is not UTF-8.
    Utf8,
}

impl fmt::Display for LinkError {
    fn fmt(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        formatter.write_str(match self {
            Self::NoScenario => "the link holds no scenario: it has no part that begins with #s1.",
            Self::Base64 => {
                "the link was cut short or damaged: copy it again, to its last character, or ask \
                 for the file"
            }
            Self::Deflate => {
                "the link was cut short or damaged: copy it again, or ask for the file"
            }
            Self::TooLong => "the scenario is longer than 1 MiB, too long for a link: use the file",
            Self::Utf8 => "the link does not hold a text: copy it again, or ask for the file",
        })
    }
}

impl std::error::Error for LinkError {}

/// The fragment (`#s1.…`) that holds a scenario text. The same text gives the same fragment.
///
/// # Errors
/// [`LinkError::TooLong`] over [`LONGEST_TEXT`].
pub fn pack(text: &str) -> Result<String, LinkError> {
    if text.len() > LONGEST_TEXT {
        return Err(LinkError::TooLong);
    }
    let packed = compress_to_vec(text.as_bytes(), 9);
    Ok(format!("{PREFIX}{}", URL_SAFE_NO_PAD.encode(packed)))
}

/// The scenario text in a link: a whole address, or its fragment alone. White space around it
/// is ignored.
///
/// # Errors
/// Every [`LinkError`].
pub fn unpack(link: &str) -> Result<String, LinkError> {
    let link = link.trim();
    let packed = match link.find(PREFIX) {
        Some(at) => &link[at + PREFIX.len()..],
        None => return Err(LinkError::NoScenario),
    };
    let bytes = URL_SAFE_NO_PAD.decode(packed).map_err(|_| LinkError::Base64)?;
    let text =
        decompress_to_vec_with_limit(&bytes, LONGEST_TEXT).map_err(|failure| {
            match failure.status {
                miniz_oxide::inflate::TINFLStatus::HasMoreOutput => LinkError::TooLong,
                _ => LinkError::Deflate,
            }
        })?;
    String::from_utf8(text).map_err(|_| LinkError::Utf8)
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn opens_a_link_packed_by_hand() {
        // 0x01, length 2, its complement, "hi": a stored block of RFC 1951, section 3.2.4.
        let stored = [1, 2, 0, 0xFD, 0xFF, b'h', b'i'];
        let link = format!("https://host/page.html#s1.{}", URL_SAFE_NO_PAD.encode(stored));
        assert_eq!(unpack(&link), Ok("hi".to_owned()));
    }

    #[test]
    fn says_what_is_wrong() {
        assert_eq!(unpack("https://host/"), Err(LinkError::NoScenario));
        assert_eq!(unpack("#s1.***"), Err(LinkError::Base64));
        let whole = pack(&"abc def ".repeat(50)).expect("short");
        let bytes = URL_SAFE_NO_PAD.decode(&whole[PREFIX.len()..]).expect("base64url");
        let cut = URL_SAFE_NO_PAD.encode(&bytes[..bytes.len() - 3]);
        assert_eq!(unpack(&format!("{PREFIX}{cut}")), Err(LinkError::Deflate));
        assert_eq!(pack(&"x".repeat(LONGEST_TEXT + 1)), Err(LinkError::TooLong));
        let bomb = compress_to_vec(&vec![b'x'; LONGEST_TEXT + 1], 9);
        let link = format!("{PREFIX}{}", URL_SAFE_NO_PAD.encode(bomb));
        assert!(link.len() < OFTEN_CUT);
        assert_eq!(unpack(&link), Err(LinkError::TooLong));
        let not_text = compress_to_vec(&[0xFF, 0xFE], 9);
        let link = format!("{PREFIX}{}", URL_SAFE_NO_PAD.encode(not_text));
        assert_eq!(unpack(&link), Err(LinkError::Utf8));
    }

    proptest! {
        #[test]
        fn every_text_comes_back(text in "\\PC{0,200}|[a-z\n\t\r]{0,300}") {
            let link = pack(&text).expect("short");
            prop_assert!(link[PREFIX.len()..].bytes().all(|b| b.is_ascii_alphanumeric() || b == b'-' || b == b'_'));
            prop_assert_eq!(unpack(&link), Ok(text));
        }

        #[test]
        fn nothing_panics(link in "(#s1\\.)?[A-Za-z0-9_-]{0,60}") {
            let _ = unpack(&link);
        }
    }
}
