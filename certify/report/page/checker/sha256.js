// SHA-256 (FIPS 180-4), so that a page opened from a file can compute digests as well.

// The first 32 bits of the fractional parts of the cube roots of the first 64 primes, and of
// the square roots of the first 8. They are computed with whole numbers, not copied.
function fraction(prime, exponent) {
  // floor(prime^(1/exponent) * 2^32) by bisection, then without its whole part.
  const wanted = BigInt(prime) << BigInt(32 * exponent);
  let [low, high] = [0n, 1n << 40n];
  while (high - low > 1n) {
    const middle = (low + high) >> 1n;
    if (middle ** BigInt(exponent) <= wanted) low = middle;
    else high = middle;
  }
  return Number(low & 0xffffffffn);
}

function firstPrimes(count) {
  const primes = [];
  for (let k = 2; primes.length < count; k += 1) if (primes.every((p) => k % p !== 0)) primes.push(k);
  return primes;
}

const ROUNDS = Int32Array.from(firstPrimes(64), (p) => fraction(p, 3));
const START = Uint32Array.from(firstPrimes(8), (p) => fraction(p, 2));

const turn = (x, k) => (x >>> k) | (x << (32 - k));

class Sha256 {
  constructor() {
    this.state = START.slice();
    this.block = new Uint8Array(64);
    this.filled = 0;
    this.total = 0;
    this.words = new Int32Array(64);
  }

  mix(bytes, at) {
    const w = this.words;
    for (let i = 0; i < 16; i += 1, at += 4) {
      w[i] = (bytes[at] << 24) | (bytes[at + 1] << 16) | (bytes[at + 2] << 8) | bytes[at + 3];
    }
    for (let i = 16; i < 64; i += 1) {
      const s0 = turn(w[i - 15], 7) ^ turn(w[i - 15], 18) ^ (w[i - 15] >>> 3);
      const s1 = turn(w[i - 2], 17) ^ turn(w[i - 2], 19) ^ (w[i - 2] >>> 10);
      w[i] = (w[i - 16] + s0 + w[i - 7] + s1) | 0;
    }
    const state = this.state;
    let [a, b, c, d] = [state[0] | 0, state[1] | 0, state[2] | 0, state[3] | 0];
    let [e, f, g, h] = [state[4] | 0, state[5] | 0, state[6] | 0, state[7] | 0];
    for (let i = 0; i < 64; i += 1) {
      const s1 = turn(e, 6) ^ turn(e, 11) ^ turn(e, 25);
      const t1 = (h + s1 + ((e & f) ^ (~e & g)) + ROUNDS[i] + w[i]) | 0;
      const s0 = turn(a, 2) ^ turn(a, 13) ^ turn(a, 22);
      const t2 = (s0 + ((a & b) ^ (a & c) ^ (b & c))) | 0;
      h = g;
      g = f;
      f = e;
      e = (d + t1) | 0;
      d = c;
      c = b;
      b = a;
      a = (t1 + t2) | 0;
    }
    state[0] += a;
    state[1] += b;
    state[2] += c;
    state[3] += d;
    state[4] += e;
    state[5] += f;
    state[6] += g;
    state[7] += h;
  }

  update(bytes) {
    this.total += bytes.length;
    let at = 0;
    if (this.filled > 0) {
      at = Math.min(64 - this.filled, bytes.length);
      this.block.set(bytes.subarray(0, at), this.filled);
      this.filled += at;
      if (this.filled < 64) return this;
      this.mix(this.block, 0);
      this.filled = 0;
    }
    for (; at + 64 <= bytes.length; at += 64) this.mix(bytes, at);
    this.block.set(bytes.subarray(at), 0);
    this.filled = bytes.length - at;
    return this;
  }

  // The digest in lower-case hexadecimal; nothing may be added afterwards.
  hex() {
    const bits = BigInt(this.total) * 8n;
    const padding = new Uint8Array(((this.filled < 56 ? 56 : 120) - this.filled) + 8);
    padding[0] = 0x80;
    for (let i = 0; i < 8; i += 1) {
      padding[padding.length - 1 - i] = Number((bits >> BigInt(8 * i)) & 255n);
    }
    this.update(padding);
    return Array.from(this.state, (word) => word.toString(16).padStart(8, "0")).join("");
  }
}

export { Sha256 };
