//! Where a text comes from: a file, standard input, or a link.

use std::io::Read;

use record::file::LONGEST_FILE;
use record::link;

/// A text and the name under which complaints speak of it.
#[derive(Debug)]
pub(crate) struct Source {
    pub(crate) name: String,
    pub(crate) text: String,
}

/// The text of a file, of standard input (`-`), or in a link.
pub(crate) fn load(word: &str) -> Result<Source, String> {
    if word.contains(link::PREFIX) {
        let text = link::unpack(word).map_err(|error| error.to_string())?;
        return Ok(Source { name: "link".to_owned(), text });
    }
    let (name, bytes) = if word == "-" {
        ("-", limited(std::io::stdin().lock()))
    } else {
        (word, std::fs::File::open(word).and_then(limited))
    };
    let bytes = bytes.map_err(|error| format!("{name}: cannot be read: {error}"))?;
    if bytes.len() > LONGEST_FILE {
        return Err(format!("{name}: longer than 64 MiB"));
    }
    let text = String::from_utf8(bytes).map_err(|error| {
        let at = error.utf8_error().valid_up_to();
        format!("{name}: is no UTF-8 text: see byte {at}; save it as UTF-8")
    })?;
    let text = text.strip_prefix('\u{feff}').map_or(text.clone(), str::to_owned);
    Ok(Source { name: name.to_owned(), text })
}

/// At most one byte more than is read.
fn limited(source: impl Read) -> std::io::Result<Vec<u8>> {
    let mut bytes = Vec::new();
    source.take(LONGEST_FILE as u64 + 1).read_to_end(&mut bytes)?;
    Ok(bytes)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_link_is_a_source() {
        let packed = link::pack("hullward = 1\n").expect("short");
        let source = load(&format!("https://host/page{packed}")).expect("whole");
        assert_eq!((source.name.as_str(), source.text.as_str()), ("link", "hullward = 1\n"));
        assert!(load("#s1.!").is_err());
    }

    #[test]
    fn a_file_that_is_not_there_is_named() {
        let message = load("no/such/file.toml").expect_err("missing");
        assert!(message.starts_with("no/such/file.toml: cannot be read"), "{message}");
    }
}
