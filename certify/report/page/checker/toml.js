// A strict reader of the TOML 1.0 that claims use: comments, keys, strings, integers, truth
// values, arrays, tables and inline tables. Everything else (points in numbers, dates, lists
// of tables) has no place in a claim and is refused, with the line.
//
// A table is read into a Map in the order of the file, because the order of parameters counts.

import { Rejected, wholeNumber } from "./strict.js";

const MOST_PARTS = 20;
const MOST_LEVELS = 30;
const MOST_INTEGER = 2 ** 53;
const ESCAPES = { b: "\b", t: "\t", n: "\n", f: "\f", r: "\r", '"': '"', "\\": "\\" };

class TomlReader {
  constructor(text) {
    this.text = text.replace(/\r\n/g, "\n");
    this.at = 0;
    this.root = new Map();
    // How a table came about: a `[head]`, a longer head ("implied"), a key with points
    // ("dotted", with its section), or braces ("closed").
    this.origin = new Map([[this.root, "head"]]);
    this.section = 0;
  }

  fail(reason) {
    const line = this.text.slice(0, this.at).split("\n").length;
    throw new Rejected(`line ${line}: ${reason}`);
  }

  // Take what a sticky pattern matches here; undefined if it does not match.
  take(pattern) {
    pattern.lastIndex = this.at;
    const match = pattern.exec(this.text);
    if (match === null) return undefined;
    this.at += match[0].length;
    return match[0];
  }

  blanks() {
    this.take(/[ \t]*/y);
  }

  // A comment may hold any character but control characters; a tab is allowed.
  comment() {
    this.take(/#[^\x00-\x08\x0a-\x1f\x7f]*/y);
  }

  lineEnd() {
    this.blanks();
    this.comment();
    if (this.at < this.text.length && this.take(/\n/y) === undefined) this.fail("not the end of the line");
  }

  // Spaces, line ends and comments between the parts of an array.
  gap() {
    for (let before = -1; before !== this.at; ) {
      before = this.at;
      this.take(/[ \t\n]*/y);
      this.comment();
    }
  }

  key() {
    const parts = [];
    for (;;) {
      this.blanks();
      const bare = this.take(/[A-Za-z0-9_-]+/y);
      if (bare !== undefined) parts.push(bare);
      else if (this.text[this.at] === '"') parts.push(this.basic());
      else if (this.text[this.at] === "'") parts.push(this.literal());
      else this.fail("a key is missing");
      if (parts.length > MOST_PARTS) this.fail("a key of too many parts");
      this.blanks();
      if (this.take(/\./y) === undefined) return parts;
    }
  }

  escape() {
    // Behind a backslash.
    const letter = this.text[this.at];
    if (Object.hasOwn(ESCAPES, letter ?? "")) {
      this.at += 1;
      return ESCAPES[letter];
    }
    const digits = this.take(/u[0-9a-fA-F]{4}|U[0-9a-fA-F]{8}/y);
    const code = parseInt((digits ?? "u").slice(1), 16);
    // A surrogate is no character.
    if (!(code <= 0x10ffff) || (code >= 0xd800 && code <= 0xdfff)) this.fail("a broken escape");
    return String.fromCodePoint(code);
  }

  basic() {
    this.at += 1;
    let found = "";
    for (;;) {
      found += this.take(/[^"\\\x00-\x08\x0a-\x1f\x7f]*/y);
      if (this.take(/"/y) !== undefined) return found;
      if (this.take(/\\/y) === undefined) this.fail("a string without an end, or a control character");
      found += this.escape();
    }
  }

  literal() {
    const found = this.take(/'[^'\x00-\x08\x0a-\x1f\x7f]*'/y);
    if (found === undefined) this.fail("a string without an end, or a control character");
    return found.slice(1, -1);
  }

  // The first line end is dropped; up to two quotes may stand before the closing three.
  longBasic() {
    this.at += 3;
    this.take(/\n/y);
    let found = "";
    for (;;) {
      found += this.take(/[^"\\\x00-\x08\x0b-\x1f\x7f]*/y);
      const quotes = this.take(/"{1,5}/y);
      if (quotes !== undefined) {
        if (quotes.length >= 3) return found + quotes.slice(3);
        found += quotes;
      } else if (this.take(/\\[ \t]*\n[ \t\n]*/y) === undefined) {
        if (this.take(/\\/y) === undefined) this.fail("a string without an end, or a control character");
        found += this.escape();
      }
    }
  }

  longLiteral() {
    const found = this.take(/'''(?:'{0,2}[^'\x00-\x08\x0b-\x1f\x7f])*'{3,5}/y);
    if (found === undefined) this.fail("a string without an end, or a control character");
    return found.slice(3, -3).replace(/^\n/, "");
  }

  integer() {
    const decimal = /[+-]?(?:0|[1-9](?:_?[0-9])*)(?![0-9A-Za-z_.:+-])/y;
    const other = /0(?:x[0-9a-fA-F](?:_?[0-9a-fA-F])*|o[0-7](?:_?[0-7])*|b[01](?:_?[01])*)(?![0-9A-Za-z_.:+-])/y;
    const digits = (this.take(decimal) ?? this.take(other))?.replace(/[_+]/g, "");
    if (digits === undefined) this.fail("not a value that a claim may hold");
    const size = wholeNumber(digits.replace("-", ""));
    if (size > MOST_INTEGER) this.fail("an integer beyond 2^53");
    return Number(digits.startsWith("-") ? `-${size}` : size) + 0;
  }

  array(level) {
    this.at += 1;
    const found = [];
    for (;;) {
      this.gap();
      if (this.take(/\]/y) !== undefined) return found;
      found.push(this.value(level));
      this.gap();
      if (this.take(/,/y) === undefined && this.text[this.at] !== "]") this.fail("a comma or ] is missing");
    }
  }

  // On one line, without a comma at the end; nothing can be added to it later.
  inline(level) {
    this.at += 1;
    const found = new Map();
    this.origin.set(found, "head");
    this.blanks();
    while (this.take(/\}/y) === undefined) {
      this.assign(found, level);
      this.blanks();
      const comma = this.take(/,/y) !== undefined;
      this.blanks();
      if (comma === (this.text[this.at] === "}")) this.fail("a broken inline table");
    }
    this.close(found);
    return found;
  }

  close(value) {
    if (!(value instanceof Map)) return;
    this.origin.set(value, "closed");
    for (const part of value.values()) this.close(part);
  }

  value(above) {
    const level = above + 1;
    if (level > MOST_LEVELS) this.fail("too many levels");
    this.blanks();
    const rest = this.text.slice(this.at, this.at + 3);
    if (rest === '"""') return this.longBasic();
    if (rest === "'''") return this.longLiteral();
    if (rest[0] === '"') return this.basic();
    if (rest[0] === "'") return this.literal();
    if (rest[0] === "[") return this.array(level);
    if (rest[0] === "{") return this.inline(level);
    if (this.take(/true(?![A-Za-z0-9_-])/y) !== undefined) return true;
    if (this.take(/false(?![A-Za-z0-9_-])/y) !== undefined) return false;
    return this.integer();
  }

  // The table `name` inside `table`, made if it is missing.
  inside(table, name, origin) {
    if (!table.has(name)) {
      const made = new Map();
      table.set(name, made);
      this.origin.set(made, origin);
    }
    const found = table.get(name);
    if (!(found instanceof Map) || this.origin.get(found) === "closed") this.fail(`'${name}' is given twice`);
    return found;
  }

  assign(table, level) {
    const parts = this.key();
    const own = `dotted ${this.section}`;
    for (const name of parts.slice(0, -1)) {
      table = this.inside(table, name, own);
      // A key with points extends no table of another section, and none with a head.
      if (this.origin.get(table) === "implied") this.origin.set(table, own);
      if (this.origin.get(table) !== own) this.fail(`'${name}' is given twice`);
    }
    const last = parts[parts.length - 1];
    if (table.has(last)) this.fail(`'${last}' is given twice`);
    if (this.take(/=/y) === undefined) this.fail("= is missing");
    table.set(last, this.value(level));
  }

  // `[a.b]`: a table is opened by a head once, and not when keys with points made it.
  head() {
    this.at += 1;
    const parts = this.key();
    if (this.take(/\]/y) === undefined) this.fail("] is missing");
    let table = this.root;
    for (const name of parts) table = this.inside(table, name, "implied");
    if (this.origin.get(table) !== "implied") this.fail(`[${parts.join(".")}] is given twice`);
    this.origin.set(table, "head");
    this.section += 1;
    return table;
  }

  read() {
    let table = this.root;
    while (this.at < this.text.length) {
      this.blanks();
      if (this.text.startsWith("[[", this.at)) this.fail("a list of tables has no place in a claim");
      if (this.text[this.at] === "[") table = this.head();
      else if (this.at < this.text.length && !"#\n".includes(this.text[this.at])) this.assign(table, 0);
      this.lineEnd();
    }
    return this.root;
  }
}

// Read a TOML text; a table is a Map, an integer a Number (at most 2^53 in absolute value).
function readToml(text) {
  return new TomlReader(text).read();
}

export { readToml };
