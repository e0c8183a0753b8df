// Rejections, and JSON read without any leniency (FORMAT.md, introduction and section 5).
//
// An object is read into a Map, so that no key is special and none is lost. An integer is
// a Number up to 2^53 - 1 in absolute value and a BigInt beyond.

// Whatever is wrong with evidence or with a claim ends in one of these.
class Rejected extends Error {}

function need(condition, reason) {
  if (!condition) throw new Rejected(reason);
}

// The deepest value that any record may hold has far fewer levels.
const MOST_LEVELS = 30;
const MOST_DIGITS = 100;
const ESCAPES = { '"': '"', "\\": "\\", "/": "/", b: "\b", f: "\f", n: "\n", r: "\r", t: "\t" };

function wholeNumber(digits) {
  const exact = BigInt(digits);
  const near = Number(exact);
  return Number.isSafeInteger(near) ? near : exact;
}

function readString(text, start) {
  // `start` is behind the opening quote; returns the string and the place behind it.
  let found = "";
  for (let at = start; at < text.length; at += 1) {
    const letter = text[at];
    if (letter === '"') return [found, at + 1];
    need(letter >= " ", "a control character in a JSON string");
    if (letter !== "\\") {
      found += letter;
      continue;
    }
    at += 1;
    if (text[at] === "u") {
      const code = text.slice(at + 1, at + 5);
      need(/^[0-9a-fA-F]{4}$/.test(code), "a broken escape in a JSON string");
      found += String.fromCharCode(parseInt(code, 16));
      at += 4;
    } else {
      need(text[at] in ESCAPES && at < text.length, "a broken escape in a JSON string");
      found += ESCAPES[text[at]];
    }
  }
  throw new Rejected("a JSON string without an end");
}

// Read one JSON value. Refused: doubled keys, numbers with a point or an exponent, minus
// zero, more than 100 digits, anything after the value.
function readJson(text) {
  let at = 0;
  const number = /-?(?:0|[1-9][0-9]*)/y;

  function skip() {
    while (at < text.length && " \t\n\r".includes(text[at])) at += 1;
  }
  function expect(letter) {
    skip();
    need(text[at] === letter, `JSON: '${letter}' is missing`);
    at += 1;
  }
  function word(name, value) {
    need(text.startsWith(name, at), "JSON: not a value");
    at += name.length;
    return value;
  }
  function string() {
    const [found, behind] = readString(text, at + 1);
    at = behind;
    return found;
  }
  function integer() {
    number.lastIndex = at;
    const match = number.exec(text);
    need(match !== null, "JSON: not a value");
    at += match[0].length;
    need(!".eE".includes(text[at] ?? " "), "JSON: a number that is not an integer");
    need(match[0] !== "-0", "JSON: minus zero");
    need(match[0].replace("-", "").length <= MOST_DIGITS, "JSON: an integer with too many digits");
    return match[0].length < 16 ? Number(match[0]) : wholeNumber(match[0]);
  }
  function list(level) {
    const found = [];
    at += 1;
    skip();
    if (text[at] === "]") return word("]", found);
    for (;;) {
      found.push(value(level));
      skip();
      if (text[at] === "]") return word("]", found);
      expect(",");
    }
  }
  function object(level) {
    const found = new Map();
    at += 1;
    skip();
    if (text[at] === "}") return word("}", found);
    for (;;) {
      skip();
      need(text[at] === '"', "JSON: a key is missing");
      const key = string();
      need(!found.has(key), `JSON: the key '${key}' is doubled`);
      expect(":");
      found.set(key, value(level));
      skip();
      if (text[at] === "}") return word("}", found);
      expect(",");
    }
  }
  function value(above) {
    const level = above + 1;
    need(level <= MOST_LEVELS, "JSON: too many levels");
    skip();
    switch (text[at]) {
      case "{":
        return object(level);
      case "[":
        return list(level);
      case '"':
        return string();
      case "t":
        return word("true", true);
      case "f":
        return word("false", false);
      case "n":
        return word("null", null);
      default:
        return integer();
    }
  }
  const whole = value(0);
  skip();
  need(at === text.length, "JSON: something follows the value");
  return whole;
}

// Compare by code points, as Python does; JavaScript itself compares UTF-16 units.
function byCodePoint(one, other) {
  const [left, right] = [Array.from(one), Array.from(other)];
  for (let i = 0; i < left.length && i < right.length; i += 1) {
    const difference = left[i].codePointAt(0) - right[i].codePointAt(0);
    if (difference !== 0) return difference;
  }
  return left.length - right.length;
}

function writeString(value) {
  const short = { '"': '\\"', "\\": "\\\\", "\n": "\\n", "\r": "\\r" };
  Object.assign(short, { "\t": "\\t", "\f": "\\f", "\b": "\\b" });
  const escape = (unit) =>
    short[unit] ?? `\\u${unit.charCodeAt(0).toString(16).padStart(4, "0")}`;
  return `"${value.replace(/["\\]|[^ -~]/g, escape)}"`;
}

// Write a value in canonical form: keys sorted, no spaces, non-ASCII characters escaped.
function writeJson(value) {
  if (typeof value === "string") return writeString(value);
  if (Array.isArray(value)) return `[${value.map(writeJson).join(",")}]`;
  if (value instanceof Map) {
    const keys = [...value.keys()].sort(byCodePoint);
    return `{${keys.map((key) => `${writeString(key)}:${writeJson(value.get(key))}`).join(",")}}`;
  }
  return String(value);
}

// A record is its own canonical form, so that one record is one text and nothing hides in it.
function readCanonical(text) {
  const value = readJson(text);
  need(writeJson(value) === text, "the line is not in canonical form");
  return value;
}

function isInteger(value) {
  return typeof value === "bigint" || Number.isInteger(value);
}

// An object with exactly these keys; returns their values in this order.
function exactly(value, keys, what) {
  need(value instanceof Map, `${what} is not an object`);
  for (const key of value.keys()) need(keys.includes(key), `${what} has an unknown key '${key}'`);
  for (const key of keys) need(value.has(key), `${what} has no key '${key}'`);
  return keys.map((key) => value.get(key));
}

function listOf(value, what) {
  need(Array.isArray(value), `${what} is not a list`);
  return value;
}

function vertexOf(value, n, what) {
  need(Number.isInteger(value) && value >= 0 && value < n, `${what}: not a vertex`);
  return value;
}

// A strictly ascending list of vertices.
function sortedVertices(value, n, what) {
  listOf(value, what).forEach((v, i) => {
    vertexOf(v, n, what);
    need(i === 0 || value[i - 1] < v, `${what} is not sorted, or has a vertex twice`);
  });
  return value;
}

// A list of all of 0, ..., n-1 in any order.
function permutation(value, n, what) {
  need(listOf(value, what).length === n, `${what} has not ${n} entries`);
  const seen = new Uint8Array(n);
  for (const v of value) {
    need(!seen[vertexOf(v, n, what)], `${what} has ${v} twice`);
    seen[v] = 1;
  }
  return value;
}

// UTF-8 without a byte order mark.
function decodeText(bytes, what) {
  let text;
  try {
    text = new TextDecoder("utf-8", { fatal: true, ignoreBOM: true }).decode(bytes);
  } catch {
    throw new Rejected(`${what} is not UTF-8`);
  }
  need(!text.startsWith("\ufeff"), `${what} starts with a byte order mark`);
  return text;
}

export { Rejected, need, readJson, writeJson, readCanonical, wholeNumber, isInteger, exactly, listOf, vertexOf, sortedVertices, permutation, decodeText };
