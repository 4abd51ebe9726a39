//! Parts of the page that need not be read as text, packed into one stream, in groups that can be
//! unpacked before the rest of the file has arrived.
//!
//! The modules share much (the standard library, `record`), and LZMA sees that where gzip's
//! window of 32 KB does not: together they come out a third smaller. Before that they are taken
//! apart into streams ([`crate::streams`]). `web/unpack.js` undoes both, of a group with what came before it.

use std::io::{Read, Write};

use base64::Engine as _;
use base64::engine::general_purpose::STANDARD;
use lzma_rust2::{LzmaOptions, LzmaReader, LzmaWriter};

use crate::fault::{Attempt, Fault};
use crate::streams::Streams;

/// How far back a match may lie, in bytes: over all parts.
const WINDOW: u32 = 8 << 20;
/// The longest match that LZMA can write; it is looked for everywhere.
const LONGEST_MATCH: u32 = 273;
/// By how many bytes a decoder that reads early may be ahead of one that reads late.
const AHEAD: usize = 8;

/// A group of parts in the packed stream.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Pack {
    /// Its share of the stream, as base64.
    pub(crate) text: String,
    /// How long each part is, in bytes, with commas between.
    pub(crate) lengths: String,
    /// How long each stream of its parts is, likewise.
    pub(crate) streams: String,
    /// The length of its share in bytes.
    pub(crate) size: usize,
}

/// Packs groups of parts. A group is unpacked from the shares of those before it and its own.
pub(crate) fn pack<const N: usize>(groups: [&[&[u8]]; N]) -> Result<[Pack; N], Fault> {
    let mut bytes = Vec::new();
    let mut ends = Vec::new();
    let mut streams = Vec::new();
    for group in groups {
        let mut apart = Streams::default();
        for part in group {
            apart.add(part)?;
        }
        bytes.extend(apart.concat());
        ends.push(bytes.len());
        streams.push(apart.lengths());
    }
    let stream = lzma(&bytes).attempting("compress the modules")?;
    let mut cuts = cuts(&stream, &ends).attempting("read the compressed modules again")?;
    cuts.insert(0, 0);
    Ok(std::array::from_fn(|group| {
        let share = &stream[cuts[group]..cuts[group + 1]];
        let lengths: Vec<String> =
            groups[group].iter().map(|part| part.len().to_string()).collect();
        Pack {
            text: STANDARD.encode(share),
            lengths: lengths.join(","),
            streams: streams[group].clone(),
            size: share.len(),
        }
    }))
}

/// How much of the stream gives the first so many bytes, for each of `ends`; the last takes all.
fn cuts(stream: &[u8], ends: &[usize]) -> std::io::Result<Vec<usize>> {
    let mut reader = LzmaReader::new_mem_limit(Sip(stream), u32::MAX, None)?;
    let (mut cuts, mut done) = (Vec::new(), 0);
    for end in ends {
        reader.read_exact(&mut vec![0; end - done])?;
        done = *end;
        cuts.push(stream.len().min(stream.len() - reader.inner().0.len() + AHEAD));
    }
    if let Some(last) = cuts.last_mut() {
        *last = stream.len();
    }
    Ok(cuts)
}

/// Gives one byte at a time, so that nobody reads further than needed.
struct Sip<'a>(&'a [u8]);

impl Read for Sip<'_> {
    fn read(&mut self, to: &mut [u8]) -> std::io::Result<usize> {
        let most = to.len().min(1);
        self.0.read(&mut to[..most])
    }
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
    use super::*;

    fn unpacked(stream: &[u8], size: usize) -> Vec<u8> {
        let mut reader = LzmaReader::new_mem_limit(stream, u32::MAX, None).expect("a header");
        let mut bytes = vec![0; size];
        reader.read_exact(&mut bytes).expect("the share is long enough");
        bytes
    }

    #[test]
    fn a_group_comes_back_by_its_lengths_before_the_next_has_arrived() {
        let noise: Vec<u8> = (0..50_000_u32).map(|at| (at * at % 251) as u8).collect();
        let groups: [&[&[u8]]; 2] = [&[b"first part", b"", &[7; 5000]], &[&noise]];
        let [first, second] = pack(groups).expect("memory takes every byte");
        assert_eq!(first.lengths, "10,0,5000");
        assert!(first.streams.starts_with("5010,0,"));
        assert_eq!(second.lengths, "50000");
        let mut stream = STANDARD.decode(&first.text).expect("it was just encoded");
        assert_eq!(stream.len(), first.size);
        assert_eq!(unpacked(&stream, 5010), groups[0].concat());
        assert!(first.size < 100 + AHEAD, "{}", first.size);
        stream.extend(STANDARD.decode(&second.text).expect("it was just encoded"));
        assert_eq!(unpacked(&stream, 55_010)[5010..], noise);
    }

    #[test]
    fn the_same_parts_give_the_same_text() {
        let bytes: Vec<u8> = (0..50_000_u32).map(|at| (at * at % 251) as u8).collect();
        assert_eq!(pack([&[&bytes]]), pack([&[&bytes]]));
    }
}
