// One gzip member (RFC 1952, RFC 1951) and nothing after it.
//
// The decompression that browsers and Node bring along is not used, because versions of them
// differ in what they say about bytes that follow the member; here they are rejected.

import { need } from "./strict.js";

const CRC = Uint32Array.from({ length: 256 }, (_, byte) => {
  let rest = byte;
  for (let i = 0; i < 8; i += 1) rest = rest & 1 ? (rest >>> 1) ^ 0xedb88320 : rest >>> 1;
  return rest;
});

// The check sum of bytes that follow those of the check sum `before`.
function crc32(bytes, before = 0) {
  let rest = ~before;
  for (let i = 0; i < bytes.length; i += 1) rest = CRC[(rest ^ bytes[i]) & 255] ^ (rest >>> 8);
  return ~rest >>> 0;
}

// Lengths and distances (RFC 1951, section 3.2.5): the first value of each symbol and the
// number of bits that are added.
const LENGTH_BITS = [0, 0, 0, 0, 0, 0, 0, 0, 1, 1, 1, 1, 2, 2, 2, 2, 3, 3, 3, 3, 4, 4, 4, 4, 5, 5, 5, 5, 0];
const DISTANCE_BITS = Array.from({ length: 30 }, (_, i) => Math.max(0, (i >> 1) - 1));
const LENGTH_FIRST = firstValues(LENGTH_BITS, 3);
const DISTANCE_FIRST = firstValues(DISTANCE_BITS, 1);
LENGTH_FIRST[28] = 258;
const LENGTH_ORDER = [16, 17, 18, 0, 8, 7, 9, 6, 10, 5, 11, 4, 12, 3, 13, 2, 14, 1, 15];

function firstValues(bits, start) {
  let next = start;
  return bits.map((count) => (next += 1 << count) - (1 << count));
}

// A code from the lengths of its words: how many words there are of each length, and the
// symbols in order. A code must be complete, but for one that has a single word of one bit.
function buildCode(lengths, mayBeShort) {
  const count = new Uint16Array(16);
  for (const length of lengths) count[length] += 1;
  count[0] = 0;
  let left = 1;
  for (let length = 1; length < 16; length += 1) {
    left = 2 * left - count[length];
    need(left >= 0, "gzip: a code with too many words");
  }
  const words = lengths.filter((length) => length > 0).length;
  need(left === 0 || (mayBeShort && words === count[1]), "gzip: a code with too few words");
  const place = new Uint16Array(17);
  for (let length = 1; length < 16; length += 1) place[length + 1] = place[length] + count[length];
  const symbols = new Uint16Array(words);
  lengths.forEach((length, symbol) => {
    if (length > 0) symbols[place[length]++] = symbol;
  });
  return { count, symbols };
}

const FIXED = [
  buildCode(Array.from({ length: 288 }, (_, i) => (i < 144 ? 8 : i < 256 ? 9 : i < 280 ? 7 : 8)), false),
  buildCode(new Array(32).fill(5), false),
];

// How far back a distance reaches, how much is handed out at once, and the longest copy.
const WINDOW = 2 ** 15;
const PIECE = 2 ** 18;
const LONGEST = 258;

class Inflater {
  constructor(bytes, at, end) {
    // `out` begins with what distances still reach; from `fresh` on nothing was handed out.
    const out = new Uint8Array(WINDOW + PIECE + LONGEST);
    Object.assign(this, { bytes, at, end, hold: 0, held: 0, made: 0, fresh: 0, out });
  }

  isFull() {
    return this.made + LONGEST > this.out.length;
  }

  // Hand out what is new, and keep what distances reach.
  take() {
    const piece = this.out.slice(this.fresh, this.made);
    const kept = Math.min(WINDOW, this.made);
    this.out.copyWithin(0, this.made - kept, this.made);
    this.made = this.fresh = kept;
    return piece;
  }

  bits(count) {
    while (this.held < count) {
      need(this.at < this.end, "gzip: cut short");
      this.hold |= this.bytes[this.at++] << this.held;
      this.held += 8;
    }
    const value = this.hold & ((1 << count) - 1);
    this.hold >>>= count;
    this.held -= count;
    return value;
  }

  symbol(code) {
    // Words of each length are consecutive numbers, read from the highest bit on.
    let [word, first, index] = [0, 0, 0];
    for (let length = 1; length < 16; length += 1) {
      word |= this.bits(1);
      const count = code.count[length];
      if (word - first < count) return code.symbols[index + word - first];
      index += count;
      first = (first + count) << 1;
      word <<= 1;
    }
    need(false, "gzip: not a word of the code");
  }

  // The rest of a block that is not compressed is `left` bytes long.
  storedLength() {
    [this.hold, this.held] = [0, 0];
    const [length, check] = [this.bits(16), this.bits(16)];
    need(length === (~check & 0xffff), "gzip: a broken length");
    need(this.at + length <= this.end, "gzip: cut short");
    this.left = length;
  }

  // Go on with the block until it ends (true) or `out` is full (false).
  stored() {
    for (; this.left > 0 && !this.isFull(); this.left -= 1) this.out[this.made++] = this.bytes[this.at++];
    return this.left === 0;
  }

  codes() {
    const [literals, distances, given] = [this.bits(5) + 257, this.bits(5) + 1, this.bits(4) + 4];
    need(literals <= 286 && distances <= 30, "gzip: too many symbols");
    const small = new Array(19).fill(0);
    for (let i = 0; i < given; i += 1) small[LENGTH_ORDER[i]] = this.bits(3);
    const code = buildCode(small, false);
    const lengths = [];
    while (lengths.length < literals + distances) {
      const symbol = this.symbol(code);
      if (symbol < 16) lengths.push(symbol);
      else {
        need(symbol > 16 || lengths.length > 0, "gzip: nothing to repeat");
        const value = symbol === 16 ? lengths[lengths.length - 1] : 0;
        const times = symbol === 16 ? 3 + this.bits(2) : symbol === 17 ? 3 + this.bits(3) : 11 + this.bits(7);
        for (let i = 0; i < times; i += 1) lengths.push(value);
      }
    }
    need(lengths.length === literals + distances, "gzip: too many lengths");
    need(lengths[256] > 0, "gzip: a code without an end");
    return [buildCode(lengths.slice(0, literals), true), buildCode(lengths.slice(literals), true)];
  }

  compressed([literal, distance]) {
    while (!this.isFull()) {
      const symbol = this.symbol(literal);
      if (symbol < 256) this.out[this.made++] = symbol;
      else if (symbol === 256) return true;
      else {
        need(symbol < 286, "gzip: an unknown length");
        const length = LENGTH_FIRST[symbol - 257] + this.bits(LENGTH_BITS[symbol - 257]);
        const far = this.symbol(distance);
        need(far < 30, "gzip: an unknown distance");
        const back = DISTANCE_FIRST[far] + this.bits(DISTANCE_BITS[far]);
        need(back <= this.made, "gzip: a distance before the start");
        for (let i = 0; i < length; i += 1, this.made += 1) this.out[this.made] = this.out[this.made - back];
      }
    }
    return false;
  }

  *pieces() {
    let last = 0;
    while (!last) {
      last = this.bits(1);
      const kind = this.bits(2);
      need(kind < 3, "gzip: an unknown block");
      if (kind === 0) this.storedLength();
      const codes = kind === 2 ? this.codes() : FIXED;
      while (!(kind === 0 ? this.stored() : this.compressed(codes))) yield this.take();
    }
    need(this.at === this.end, "gzip: something follows the member");
    yield this.take();
  }
}

function little(bytes, at) {
  return (bytes[at] | (bytes[at + 1] << 8) | (bytes[at + 2] << 16) | (bytes[at + 3] << 24)) >>> 0;
}

function headerEnd(bytes) {
  need(bytes.length >= 18, "gzip: cut short");
  need(bytes[0] === 0x1f && bytes[1] === 0x8b && bytes[2] === 8, "not a gzip file");
  const flags = bytes[3];
  need((flags & 0xe0) === 0, "gzip: unknown flags");
  let at = 10;
  if (flags & 4) at += 2 + bytes[at] + 256 * bytes[at + 1];
  for (const flag of [8, 16]) {
    // The name and the comment are texts that end with a zero.
    if (flags & flag) at = bytes.indexOf(0, at) + 1 || bytes.length;
  }
  if (flags & 2) {
    const check = crc32(bytes.subarray(0, at)) & 0xffff;
    need(check === (bytes[at] | (bytes[at + 1] << 8)), "gzip: a broken head");
    at += 2;
  }
  need(at + 8 < bytes.length, "gzip: cut short");
  return at;
}

// Yield the bytes in a gzip file of one member, at most `limit` of them, piece by piece. That the
// member is whole, and its check sum right, is known only when the last piece was asked for.
function* unpackPieces(bytes, limit) {
  const start = headerEnd(bytes);
  const end = bytes.length - 8;
  let [size, sum] = [0, 0];
  for (const piece of new Inflater(bytes, start, end).pieces()) {
    size += piece.length;
    sum = crc32(piece, sum);
    need(size <= limit, "gzip: the contents are too long");
    yield piece;
  }
  need(size % 2 ** 32 === little(bytes, end + 4), "gzip: the length is another");
  need(sum === little(bytes, end), "gzip: the check sum is another");
}

// Return the bytes in a gzip file of one member, at most `limit` of them.
function gunzip(bytes, limit) {
  const pieces = [...unpackPieces(bytes, limit)];
  const out = new Uint8Array(pieces.reduce((sum, piece) => sum + piece.length, 0));
  let at = 0;
  for (const piece of pieces) {
    out.set(piece, at);
    at += piece.length;
  }
  return out;
}

export { gunzip, unpackPieces };
