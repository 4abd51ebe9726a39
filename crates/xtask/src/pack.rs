//! The parts of the page that need not be read as text, packed into one.
//!
//! The two modules share much (the standard library, `record`), and LZMA sees that where gzip's
//! window of 32 KB does not: together they come out a third smaller. Before that they are taken
//! apart into streams ([`crate::streams`]). `web/unpack.js` undoes both.

use std::io::Write;

use base64::Engine as _;
use base64::engine::general_purpose::STANDARD;
use lzma_rust2::{LzmaOptions, LzmaWriter};

use crate::fault::{Attempt, Fault};
use crate::streams::Streams;

/// How far back a match may lie, in bytes: over all parts.
const WINDOW: u32 = 8 << 20;
/// The longest match that LZMA can write; it is looked for everywhere.
const LONGEST_MATCH: u32 = 273;

/// Parts packed into one text.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Pack {
    /// The streams of the parts one after another, as base64 of a `.lzma` stream.
    pub(crate) text: String,
    /// How long each part is, in bytes, with commas between.
    pub(crate) lengths: String,
    /// How long each stream is, likewise.
    pub(crate) streams: String,
    /// The length of the stream in bytes.
    pub(crate) size: usize,
}

/// Packs parts.
pub(crate) fn pack(parts: &[&[u8]]) -> Result<Pack, Fault> {
    let mut streams = Streams::default();
    for part in parts {
        streams.add(part)?;
    }
    let stream = lzma(&streams.concat()).attempting("compress the modules")?;
    let lengths: Vec<String> = parts.iter().map(|part| part.len().to_string()).collect();
    Ok(Pack {
        text: STANDARD.encode(&stream),
        lengths: lengths.join(","),
        streams: streams.lengths(),
        size: stream.len(),
    })
}

fn lzma(bytes: &[u8]) -> std::io::Result<Vec<u8>> {
    let mut options = LzmaOptions::with_preset(9);
    // Nothing is aligned, and bytes hang together with the ones before.
    (options.lc, options.lp, options.pb) = (2, 0, 0);
    (options.dict_size, options.nice_len) = (WINDOW, LONGEST_MATCH);
    let mut writer = LzmaWriter::new_use_header(Vec::new(), &options, Some(bytes.len() as u64))?;
    writer.write_all(bytes)?;
    writer.finish()
}

#[cfg(test)]
mod tests {
    use std::io::Read;

    use lzma_rust2::LzmaReader;

    use super::*;

    #[test]
    fn parts_come_back_by_their_lengths() {
        let parts: [&[u8]; 3] = [b"first part", b"", &[7; 5000]];
        let packed = pack(&parts).expect("memory takes every byte");
        assert_eq!(packed.lengths, "10,0,5000");
        assert!(packed.streams.starts_with("5010,0,"));
        let stream = STANDARD.decode(&packed.text).expect("it was just encoded");
        assert_eq!(stream.len(), packed.size);
        let mut bytes = Vec::new();
        let mut reader = LzmaReader::new_mem_limit(&stream[..], u32::MAX, None).expect("a header");
        reader.read_to_end(&mut bytes).expect("it was just packed");
        assert_eq!(bytes, parts.concat());
    }

    #[test]
    fn the_same_parts_give_the_same_text() {
        let bytes: Vec<u8> = (0..50_000_u32).map(|at| (at * at % 251) as u8).collect();
        assert_eq!(pack(&[&bytes]), pack(&[&bytes]));
    }
}
