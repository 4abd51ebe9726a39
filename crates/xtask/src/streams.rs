//! A wasm module taken apart into streams of like bytes.
//!
//! In code, opcodes, numbers of locals, offsets and constants alternate, and each follows patterns
//! of its own. Side by side in streams they pack a twentieth smaller. `web/unpack.js` puts them
//! together again: it reads the opcodes and fetches what belongs to each from its stream. The
//! length of a function's code is left out, for its last `end` says it.
//!
//! Source: WebAssembly Core Specification 2.0 (2022), chapter 5, "Binary Format".

use crate::fault::Fault;

/// How many streams there are.
pub(crate) const COUNT: usize = 15;

/// What the streams hold; the numbers are those of `web/unpack.js`.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Stream {
    /// All but code: other sections, and parts that are no modules.
    Rest,
    Opcode,
    Local,
    I32,
    Offset,
    Align,
    Call,
    Branch,
    /// Numbers and types of a function's locals.
    Declaration,
    /// Types of blocks.
    Block,
    Global,
    /// Numbers of tables and memories, and what is rare.
    Number,
    I64,
    Float,
    BranchTable,
}

/// The streams of some parts.
#[derive(Debug, Default)]
pub(crate) struct Streams {
    bytes: [Vec<u8>; COUNT],
}

impl Streams {
    /// Takes a part apart: a module, or anything else, which is kept as it is.
    pub(crate) fn add(&mut self, part: &[u8]) -> Result<(), Fault> {
        if !part.starts_with(b"\0asm") {
            self.bytes[Stream::Rest as usize].extend_from_slice(part);
            return Ok(());
        }
        let mut reader = Reader { bytes: part, at: 0, streams: self };
        reader.module().ok_or_else(|| {
            Fault::new(format!(
                "at byte {} a module holds what crates/xtask/src/streams.rs does not know: add it \
                 there and in web/unpack.js",
                reader.at
            ))
        })
    }

    /// The streams one after another.
    pub(crate) fn concat(&self) -> Vec<u8> {
        self.bytes.concat()
    }

    /// How long each is, in bytes, with commas between.
    pub(crate) fn lengths(&self) -> String {
        self.bytes.each_ref().map(|bytes| bytes.len().to_string()).join(",")
    }
}

/// A place in a module, and where its bytes go. Each method gives `None` at the end of the bytes
/// and at what it does not know.
struct Reader<'m, 's> {
    bytes: &'m [u8],
    at: usize,
    streams: &'s mut Streams,
}

impl Reader<'_, '_> {
    fn module(&mut self) -> Option<()> {
        self.take(Stream::Rest, 8)?;
        while self.at < self.bytes.len() {
            let is_code = *self.bytes.get(self.at)? == 10;
            self.take(Stream::Rest, 1)?;
            let size = self.number(Stream::Rest)?;
            if is_code {
                for _ in 0..self.number(Stream::Rest)? {
                    self.function()?;
                }
            } else {
                self.take(Stream::Rest, size)?;
            }
        }
        Some(())
    }

    /// A function: its length, its locals, and instructions up to the `end` of its body.
    fn function(&mut self) -> Option<()> {
        let begin = self.at;
        let (size, width) = leb(&self.bytes[begin..])?;
        // What unpacks it writes the shortest form.
        if width > 1 && *self.bytes.get(begin + width - 1)? == 0 {
            return None;
        }
        self.at += width;
        let end = self.at + size;
        for _ in 0..self.number(Stream::Declaration)? {
            self.number(Stream::Declaration)?;
            self.take(Stream::Declaration, 1)?;
        }
        let mut depth = 1;
        while depth > 0 {
            let opcode = *self.bytes.get(self.at)?;
            self.take(Stream::Opcode, 1)?;
            match opcode {
                0x02..=0x04 => depth += 1,
                0x0b => depth -= 1,
                _ => {}
            }
            self.operands(opcode)?;
        }
        (self.at == end).then_some(())
    }

    /// What follows an opcode.
    fn operands(&mut self, opcode: u8) -> Option<()> {
        match opcode {
            0x02..=0x04 => self.number(Stream::Block)?,
            0x23 | 0x24 => self.number(Stream::Global)?,
            0x25 | 0x26 | 0x3f | 0x40 | 0xd0 => self.number(Stream::Number)?,
            0x0c | 0x0d => self.number(Stream::Branch)?,
            0x0e => {
                for _ in 0..=self.number(Stream::BranchTable)? {
                    self.number(Stream::BranchTable)?;
                }
                0
            }
            0x10 | 0xd2 => self.number(Stream::Call)?,
            0x11 => {
                self.number(Stream::Call)?;
                self.number(Stream::Number)?
            }
            0x1c => {
                let types = self.number(Stream::Number)?;
                self.take(Stream::Number, types)?
            }
            0x20..=0x22 => self.number(Stream::Local)?,
            0x28..=0x3e => {
                self.number(Stream::Align)?;
                self.number(Stream::Offset)?
            }
            0x41 => self.number(Stream::I32)?,
            0x42 => self.number(Stream::I64)?,
            0x43 => self.take(Stream::Float, 4)?,
            0x44 => self.take(Stream::Float, 8)?,
            0xfc => {
                let more = self.number(Stream::Opcode)?;
                for _ in 0..prefixed(more)? {
                    self.number(Stream::Number)?;
                }
                0
            }
            0x00 | 0x01 | 0x05 | 0x0b | 0x0f | 0x1a | 0x1b | 0x45..=0xc4 => 0,
            _ => return None,
        };
        Some(())
    }

    /// Moves a number in LEB128 to a stream; the value of its low bits.
    fn number(&mut self, stream: Stream) -> Option<usize> {
        let (value, width) = leb(self.bytes.get(self.at..)?)?;
        self.take(stream, width)?;
        Some(value)
    }

    /// Moves bytes to a stream; how many.
    fn take(&mut self, stream: Stream, count: usize) -> Option<usize> {
        let taken = self.bytes.get(self.at..self.at + count)?;
        self.streams.bytes[stream as usize].extend_from_slice(taken);
        self.at += count;
        Some(count)
    }
}

/// How many numbers follow an opcode behind the prefix 0xfc: none with the saturating
/// conversions, else one or two.
fn prefixed(opcode: usize) -> Option<usize> {
    match opcode {
        0..=7 => Some(0),
        9 | 11 | 13 | 15..=17 => Some(1),
        8 | 10 | 12 | 14 => Some(2),
        _ => None,
    }
}

/// The value and the width of a number in LEB128 at the beginning of some bytes.
fn leb(bytes: &[u8]) -> Option<(usize, usize)> {
    let width = bytes.iter().take(10).position(|byte| byte & 0x80 == 0)? + 1;
    let low = bytes[..width.min(5)].iter().rev();
    Some((low.fold(0, |value, byte| value << 7 | usize::from(byte & 0x7f)), width))
}

#[cfg(test)]
mod tests {
    use super::*;

    /// `(func (param i32) (result i32) (local i64) local.get 0 i32.load offset=8 if (result i32)
    /// i32.const 300 else f64.const 0 drop i32.const 2 end)` as a module with a code section alone.
    fn module() -> Vec<u8> {
        let body = [
            &[1, 1, 0x7e][..],
            &[0x20, 0, 0x28, 2, 8, 0x04, 0x7f, 0x41, 0xac, 0x02],
            &[0x05, 0x44, 0, 0, 0, 0, 0, 0, 0, 0, 0x1a, 0x41, 2, 0x0b, 0x0b],
        ]
        .concat();
        let size = u8::try_from(body.len()).expect("short");
        let head = [b"\0asm\x01\0\0\0".as_slice(), &[10, size + 2, 1, size]].concat();
        [head, body].concat()
    }

    fn streams(parts: &[&[u8]]) -> Result<Streams, Fault> {
        let mut streams = Streams::default();
        for part in parts {
            streams.add(part)?;
        }
        Ok(streams)
    }

    #[test]
    fn code_goes_to_its_streams_and_the_length_of_a_function_nowhere() {
        let module = module();
        let streams = streams(&[&module, b"a script"]).expect("known opcodes");
        let of = |stream: Stream| streams.bytes[stream as usize].as_slice();
        assert_eq!(of(Stream::Rest), [&module[..11], b"a script"].concat());
        assert_eq!(
            of(Stream::Opcode),
            [0x20, 0x28, 0x04, 0x41, 0x05, 0x44, 0x1a, 0x41, 0x0b, 0x0b]
        );
        assert_eq!((of(Stream::Local), of(Stream::I32)), (&[0][..], &[0xac, 0x02, 2][..]));
        assert_eq!((of(Stream::Align), of(Stream::Offset)), (&[2][..], &[8][..]));
        assert_eq!((of(Stream::Float).len(), of(Stream::Number)), (8, &[][..]));
        assert_eq!(of(Stream::Block), [0x7f]);
        assert_eq!(streams.concat().len(), module.len() - 1 + 8);
    }

    #[test]
    fn what_is_not_known_is_a_fault_that_says_where() {
        let mut module = module();
        module[15] = 0xfd;
        let Err(fault) = streams(&[&module]) else { panic!("let through") };
        assert!(fault.to_string().contains("at byte 16 "), "{fault}");
        module.truncate(20);
        assert!(streams(&[&module]).is_err());
    }
}
