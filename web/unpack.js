"use strict";
// What the page carries, unpacked in two steps: LZMA, then the streams of crates/xtask/src/streams.rs.

// The parts of the last of some packs that follow one another in one stream.
function unpack(packs) {
  const sizes = packs.map(({ streams }) => streams.reduce((sum, size) => sum + size, 0));
  const size = sizes.reduce((sum, size) => sum + size, 0);
  const stream = new Uint8Array(packs.reduce((sum, { bytes }) => sum + bytes.length, 0));
  let at = 0;
  for (const { bytes } of packs) {
    stream.set(bytes, at);
    at += bytes.length;
  }
  const { streams, lengths } = packs.at(-1);
  return joinStreams(unpackLzma(stream, size).subarray(size - sizes.at(-1)), streams, lengths);
}

// LZMA, decoded: what the page carries is a third smaller than under gzip, which browsers could
// decode by themselves. Source: I. Pavlov, "LZMA specification" (2015), public domain; the names
// are its names. Takes a stream with the 13 bytes of the .lzma header and a known size, or its
// begin, and gives the first `size` bytes.
function unpackLzma(packed, size) {
  const properties = packed[0];
  const lc = properties % 9;
  const lp = Math.floor(properties / 9) % 5;
  const pb = Math.floor(properties / 45);
  const header = new DataView(packed.buffer, packed.byteOffset, 13);
  const known = header.getUint32(5, true) >= size && header.getUint32(9, true) === 0;
  if (pb > 4 || !known) throw new Error("this is no .lzma of known size");

  const even = (count) => new Uint16Array(count).fill(1024);
  const literals = even(0x300 << (lc + lp));
  const isMatch = even(12 << 4);
  const isRep = even(12);
  const isRepG0 = even(12);
  const isRepG1 = even(12);
  const isRepG2 = even(12);
  const isRep0Long = even(12 << 4);
  const posSlots = even(4 << 6);
  const posSpecial = even(115);
  const align = even(16);
  // A length: two choices, then 16 trees of 8 (low), 16 of 8 (mid), one of 256 (high).
  const LOW = 2;
  const MID = LOW + 128;
  const HIGH = MID + 128;
  const matchLengths = even(HIGH + 256);
  const repLengths = even(HIGH + 256);

  const out = new Uint8Array(size);
  let next = 18;
  let range = 0xffffffff;
  let code = new DataView(packed.buffer, packed.byteOffset + 14, 4).getUint32(0, false);

  function normalise() {
    if (range < 0x1000000) {
      range = (range << 8) >>> 0;
      code = ((code << 8) | packed[next]) >>> 0;
      next += 1;
    }
  }

  function bit(probabilities, index) {
    const probability = probabilities[index];
    const bound = Math.imul(range >>> 11, probability) >>> 0;
    let value = 0;
    if (code < bound) {
      range = bound;
      probabilities[index] = probability + ((2048 - probability) >> 5);
    } else {
      range -= bound;
      code -= bound;
      probabilities[index] = probability - (probability >> 5);
      value = 1;
    }
    normalise();
    return value;
  }

  function directBits(count) {
    let value = 0;
    for (let i = 0; i < count; i += 1) {
      range >>>= 1;
      value <<= 1;
      if (code >= range) {
        code -= range;
        value |= 1;
      }
      normalise();
    }
    return value;
  }

  function tree(probabilities, from, bits) {
    let at = 1;
    for (let i = 0; i < bits; i += 1) at = (at << 1) | bit(probabilities, from + at);
    return at - (1 << bits);
  }

  function reverseTree(probabilities, from, bits) {
    let at = 1;
    let value = 0;
    for (let i = 0; i < bits; i += 1) {
      const found = bit(probabilities, from + at);
      at = (at << 1) | found;
      value |= found << i;
    }
    return value;
  }

  function length(probabilities, posState) {
    if (bit(probabilities, 0) === 0) return tree(probabilities, LOW + (posState << 3), 3);
    if (bit(probabilities, 1) === 0) return 8 + tree(probabilities, MID + (posState << 3), 3);
    return 16 + tree(probabilities, HIGH, 8);
  }

  function distance(length) {
    const slot = tree(posSlots, Math.min(length, 3) << 6, 6);
    if (slot < 4) return slot;
    const bits = (slot >> 1) - 1;
    const start = (2 | (slot & 1)) << bits;
    if (slot < 14) return start + reverseTree(posSpecial, start - slot, bits);
    return start + (directBits(bits - 4) << 4) + reverseTree(align, 0, 4);
  }

  function literal() {
    const before = at > 0 ? out[at - 1] : 0;
    const from = 0x300 * (((at & ((1 << lp) - 1)) << lc) + (before >> (8 - lc)));
    let symbol = 1;
    if (state >= 7) {
      let match = out[at - rep0 - 1];
      while (symbol < 0x100) {
        const wanted = (match >> 7) & 1;
        match <<= 1;
        const found = bit(literals, from + ((1 + wanted) << 8) + symbol);
        symbol = (symbol << 1) | found;
        if (found !== wanted) break;
      }
    }
    while (symbol < 0x100) symbol = (symbol << 1) | bit(literals, from + symbol);
    return symbol & 0xff;
  }

  // Makes one of the three distances before the last the last one.
  function recall() {
    if (bit(isRepG1, state) === 0) {
      [rep0, rep1] = [rep1, rep0];
    } else if (bit(isRepG2, state) === 0) {
      [rep0, rep1, rep2] = [rep2, rep0, rep1];
    } else {
      [rep0, rep1, rep2, rep3] = [rep3, rep0, rep1, rep2];
    }
  }

  function copy(count) {
    if (rep0 >= at) throw new Error("the .lzma stream is damaged");
    for (const end = Math.min(at + count, size); at < end; at += 1) out[at] = out[at - rep0 - 1];
  }

  let [rep0, rep1, rep2, rep3, state, at] = [0, 0, 0, 0, 0, 0];
  while (at < size) {
    const posState = at & ((1 << pb) - 1);
    const place = (state << 4) + posState;
    if (bit(isMatch, place) === 0) {
      out[at] = literal();
      at += 1;
      state = state < 4 ? 0 : state < 10 ? state - 3 : state - 6;
    } else if (bit(isRep, state) === 0) {
      [rep1, rep2, rep3] = [rep0, rep1, rep2];
      const count = length(matchLengths, posState);
      rep0 = distance(count);
      copy(count + 2);
      state = state < 7 ? 7 : 10;
    } else {
      const older = bit(isRepG0, state) === 1;
      if (older) recall();
      const long = older || bit(isRep0Long, place) === 1;
      copy(long ? length(repLengths, posState) + 2 : 1);
      state = state < 7 ? (long ? 8 : 9) : 11;
    }
  }
  return out;
}

// Puts modules together again out of streams of like bytes (crates/xtask/src/streams.rs says what
// is in which): follows the opcodes, and fetches what belongs to each from its stream.
function joinStreams(bytes, sizes, lengths) {
  const [REST, OPCODE, LOCAL, I32, OFFSET, ALIGN, CALL, BRANCH, DECLARATION, BLOCK, GLOBAL, NUMBER, I64, FLOAT,
    BRANCH_TABLE] = sizes.keys();
  const next = sizes.map((_, stream) => sizes.slice(0, stream).reduce((sum, size) => sum + size, 0));
  let out;
  let at = 0;

  function take(stream, count) {
    const from = next[stream];
    for (let i = 0; i < count; i += 1) out[at + i] = bytes[from + i];
    at += count;
    next[stream] = from + count;
  }

  // A number in LEB128; the value of its low 32 bits.
  function number(stream) {
    let from = next[stream];
    let value = 0;
    let shift = 0;
    let byte;
    do {
      byte = bytes[from];
      out[at] = byte;
      value |= (byte & 0x7f) << shift;
      shift += 7;
      from += 1;
      at += 1;
    } while (byte > 0x7f);
    next[stream] = from;
    return value >>> 0;
  }

  function times(count, stream) {
    for (let i = 0; i < count; i += 1) number(stream);
  }

  function operands(opcode) {
    if (opcode >= 0x20 && opcode <= 0x22) number(LOCAL);
    else if (opcode >= 0x28 && opcode <= 0x3e) {
      number(ALIGN);
      number(OFFSET);
    } else if (opcode === 0x41) number(I32);
    else if (opcode === 0x10 || opcode === 0xd2) number(CALL);
    else if (opcode === 0x0c || opcode === 0x0d) number(BRANCH);
    else if (opcode === 0x0e) times(number(BRANCH_TABLE) + 1, BRANCH_TABLE);
    else if (opcode === 0x11) {
      number(CALL);
      number(NUMBER);
    } else if (opcode === 0x1c) take(NUMBER, number(NUMBER));
    else if (opcode === 0x42) number(I64);
    else if (opcode === 0x43) take(FLOAT, 4);
    else if (opcode === 0x44) take(FLOAT, 8);
    else if (opcode === 0xfc) {
      const more = number(OPCODE);
      if (more > 7) times(more < 15 && more % 2 === 0 ? 2 : 1, NUMBER);
    } else if (opcode >= 0x02 && opcode <= 0x04) number(BLOCK);
    else if (opcode === 0x23 || opcode === 0x24) number(GLOBAL);
    else if ([0x25, 0x26, 0x3f, 0x40, 0xd0].includes(opcode)) number(NUMBER);
  }

  // The length comes before the code and is known after it.
  function func() {
    const begin = at;
    for (let groups = number(DECLARATION); groups > 0; groups -= 1) {
      number(DECLARATION);
      take(DECLARATION, 1);
    }
    for (let depth = 1; depth > 0; ) {
      const opcode = bytes[next[OPCODE]];
      take(OPCODE, 1);
      if (at > out.length) throw new Error("the packed modules are damaged");
      if (opcode >= 0x02 && opcode <= 0x04) depth += 1;
      else if (opcode === 0x0b) depth -= 1;
      operands(opcode);
    }
    const size = at - begin;
    let width = 1;
    while (size >>> (7 * width) > 0) width += 1;
    out.copyWithin(begin + width, begin, at);
    for (let i = 0; i < width; i += 1) {
      out[begin + i] = ((size >>> (7 * i)) & 0x7f) | (i + 1 < width ? 0x80 : 0);
    }
    at += width;
  }

  function module(length) {
    take(REST, 8);
    while (at < length) {
      const section = bytes[next[REST]];
      take(REST, 1);
      const size = number(REST);
      if (section !== 10) take(REST, size);
      else for (let functions = number(REST); functions > 0; functions -= 1) func();
    }
  }

  return lengths.map((length) => {
    // A function is moved by the width of its length once it is whole.
    out = new Uint8Array(length);
    at = 0;
    const mark = bytes.subarray(next[REST], next[REST] + 4);
    if (String.fromCharCode(...mark) === "\0asm") module(length);
    else take(REST, length);
    if (at !== length) throw new Error("the packed modules are damaged");
    return out;
  });
}
