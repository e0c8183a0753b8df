// graph6 and sparse6: one graph a line, as printable characters of six bits each
// (formats.txt of nauty; FORMAT.md, section 3.2).

import { need } from "./strict.js";

const MOST_LINE = 2 ** 26;

// The six-bit numbers of a line.
function sextets(bytes, what) {
  return Array.from(bytes, (byte) => {
    need(byte >= 63 && byte <= 126, `${what}: a character outside of the format`);
    return byte - 63;
  });
}

// The number of vertices in its shortest form, and how many sextets it takes.
function readCount(six, what) {
  const number = (from, to) => {
    need(six.length >= to, `${what}: cut short`);
    return six.slice(from, to).reduce((sum, part) => sum * 64 + part, 0);
  };
  let [n, used, least] = [number(0, 1), 1, 0];
  if (n === 63) [n, used, least] = [number(1, 4), 4, 63];
  if (used === 4 && six[1] === 63) [n, used, least] = [number(2, 8), 8, 258048];
  need(n >= least, `${what}: the number of vertices is not in its shortest form`);
  need(n <= 10000, `${what}: more than 10,000 vertices`);
  return [n, used];
}

// The bits below the diagonal, column by column; the length is exact and the padding is 0.
function readDense(bytes, what) {
  const six = sextets(bytes, what);
  const [n, used] = readCount(six, what);
  const bits = (n * (n - 1)) / 2;
  need(six.length - used === Math.ceil(bits / 6), `${what}: has not the length of a graph on ${n} vertices`);
  const bit = (k) => (six[used + Math.floor(k / 6)] >> (5 - (k % 6))) & 1;
  const codes = [];
  let k = 0;
  for (let v = 1; v < n; v += 1) for (let u = 0; u < v; u += 1, k += 1) if (bit(k)) codes.push(u * n + v);
  for (; k < 6 * (six.length - used); k += 1) need(bit(k) === 0, `${what}: a padding bit is not 0`);
  return { n, codes };
}

// Items of one bit b and k bits x: b moves the current vertex on by one; then x beyond the
// current vertex becomes it, and any other x is joined to it.
function readSparse(bytes, what) {
  const six = sextets(bytes.subarray(1), what);
  const [n, used] = readCount(six, what);
  const total = 6 * (six.length - used);
  const bit = (place) => (six[used + Math.floor(place / 6)] >> (5 - (place % 6))) & 1;
  let k = 0;
  while (2 ** k < n) k += 1;
  const codes = [];
  let [v, at, behind] = [0, 0, 0];
  while (v < n && at + 1 + k <= total) {
    v += bit(at);
    let x = 0;
    for (let i = 1; i <= k; i += 1) x = 2 * x + bit(at + i);
    at += 1 + k;
    if (x > v) v = x;
    else if (v < n) {
      need(x !== v, `${what}: a loop`);
      codes.push(x * n + v);
      behind = at;
    }
  }
  // Padding is as the format says, so that nothing but the edges is in the line.
  const rest = Array.from({ length: total - behind }, (_, i) => bit(behind + i));
  if (n === 2 ** k && rest.length > k && rest[0] === 0) rest.shift();
  need(total - behind <= 5 && rest.every((b) => b === 1), `${what}: bits after the last edge`);
  return { n, codes };
}

const HEADS = [">>graph6<<", ">>sparse6<<"];

function withoutHead(bytes) {
  for (const head of HEADS) {
    if (String.fromCharCode(...bytes.subarray(0, head.length)) === head) return bytes.subarray(head.length);
  }
  return bytes;
}

// Yield the graphs of a file, one after the other: { n, codes }.
function* readGraph6(bytes) {
  const rest = withoutHead(bytes);
  let count = 0;
  for (let at = 0; at < rest.length; ) {
    count += 1;
    const what = `graph ${count}`;
    const end = rest.indexOf(10, at);
    const whole = end >= 0;
    need((whole ? end : rest.length) - at < MOST_LINE, `${what}: the line is too long`);
    let line = rest.subarray(at, whole ? end : rest.length);
    if (whole && line[line.length - 1] === 13) line = line.subarray(0, -1);
    need(line.length > 0, `${what}: an empty line`);
    const sparse = line[0] === 58;
    // Only the length of graph6 shows that a line without an end is whole.
    need(whole || !sparse, `${what}: the line has no end`);
    yield sparse ? readSparse(line, what) : readDense(line, what);
    at = whole ? end + 1 : rest.length;
  }
}

export { readGraph6 };
