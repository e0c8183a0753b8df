// A strict reader of XML 1.0 without a document type: elements with their name spaces,
// attributes, and whether there is text. Comments and processing instructions are skipped.

import { Rejected, need } from "./strict.js";

const START = ":A-Z_a-z\\u00c0-\\u00d6\\u00d8-\\u00f6\\u00f8-\\u02ff\\u0370-\\u037d\\u037f-\\u1fff\\u200c\\u200d\\u2070-\\u218f\\u2c00-\\u2fef\\u3001-\\ud7ff\\uf900-\\ufdcf\\ufdf0-\\ufffd\\u{10000}-\\u{effff}";
const NAME = new RegExp(`[${START}][-.0-9\\u00b7\\u0300-\\u036f\\u203f\\u2040${START}]*`, "uy");
const ENTITIES = { lt: "<", gt: ">", amp: "&", quot: '"', apos: "'" };
const XML_SPACE = "http://www.w3.org/XML/1998/namespace";
const XMLNS_SPACE = "http://www.w3.org/2000/xmlns/";
const MOST_LEVELS = 500;

// The characters of XML 1.0; a lone surrogate cannot come out of UTF-8.
const isCharacter = (code) =>
  code === 9 || code === 10 || code === 13 || (code >= 32 && code <= 0xd7ff) ||
  (code >= 0xe000 && code <= 0xfffd) || (code >= 0x10000 && code <= 0x10ffff);

class XmlReader {
  constructor(text) {
    for (const letter of text) need(isCharacter(letter.codePointAt(0)), "XML: a character that is none");
    this.text = text.replace(/\r\n?/g, "\n");
    this.at = 0;
  }

  fail(reason) {
    throw new Rejected(`line ${this.text.slice(0, this.at).split("\n").length}: ${reason}`);
  }

  sees(start) {
    return this.text.startsWith(start, this.at);
  }

  take(start) {
    if (!this.sees(start)) return false;
    this.at += start.length;
    return true;
  }

  // The text up to `end`, which is passed over.
  until(end, reason) {
    const place = this.text.indexOf(end, this.at);
    if (place < 0) this.fail(reason);
    const found = this.text.slice(this.at, place);
    this.at = place + end.length;
    return found;
  }

  blanks() {
    const from = this.at;
    while (" \t\n".includes(this.text[this.at] ?? "x")) this.at += 1;
    return this.at > from;
  }

  name() {
    NAME.lastIndex = this.at;
    const match = NAME.exec(this.text);
    if (match === null) this.fail("a name is missing");
    this.at += match[0].length;
    return match[0];
  }

  reference() {
    // Behind an ampersand.
    const body = this.until(";", "a reference without an end");
    if (Object.hasOwn(ENTITIES, body)) return ENTITIES[body];
    const digits = /^#(?:x([0-9a-fA-F]+)|([0-9]+))$/.exec(body);
    if (digits === null) this.fail("an unknown reference");
    const code = digits[1] ? parseInt(digits[1], 16) : parseInt(digits[2], 10);
    if (!isCharacter(code)) this.fail("a reference to no character");
    return String.fromCodePoint(code);
  }

  attributeValue() {
    const quote = this.text[this.at];
    if (quote !== '"' && quote !== "'") this.fail("a value is not in quotes");
    this.at += 1;
    let value = "";
    while (!this.take(quote)) {
      const letter = this.text[this.at];
      if (letter === undefined || letter === "<") this.fail("a value without an end");
      this.at += 1;
      if (letter === "&") value += this.reference();
      else value += letter === "\n" || letter === "\t" ? " " : letter;
    }
    return value;
  }

  attributes() {
    const found = new Map();
    for (;;) {
      const apart = this.blanks();
      if (this.sees(">") || this.sees("/>")) return found;
      if (!apart) this.fail("a blank is missing");
      const name = this.name();
      if (found.has(name)) this.fail(`the attribute '${name}' is given twice`);
      this.blanks();
      if (!this.take("=")) this.fail("= is missing");
      this.blanks();
      found.set(name, this.attributeValue());
    }
  }

  declaration() {
    if (!/^<\?xml[ \t\n]/.test(this.text)) return;
    const body = this.until("?>", "the declaration has no end");
    const version = "^<\\?xml[ \\t\\n]+version[ \\t\\n]*=[ \\t\\n]*(?:\"1\\.0\"|'1\\.0')";
    const encoding = "(?:[ \\t\\n]+encoding[ \\t\\n]*=[ \\t\\n]*(?:\"([A-Za-z0-9._-]+)\"|'([A-Za-z0-9._-]+)'))?";
    const alone = "(?:[ \\t\\n]+standalone[ \\t\\n]*=[ \\t\\n]*(?:\"(?:yes|no)\"|'(?:yes|no)'))?[ \\t\\n]*$";
    const match = new RegExp(version + encoding + alone).exec(body);
    if (match === null) this.fail("a broken declaration");
    const declared = (match[1] ?? match[2] ?? "utf-8").toLowerCase();
    if (!["utf-8", "ascii", "us-ascii"].includes(declared)) this.fail("an encoding other than UTF-8 or ASCII");
    if (declared !== "utf-8" && /[^\x00-\x7f]/.test(this.text)) this.fail("not ASCII");
  }

  // A comment or a processing instruction, if one starts here.
  skipped() {
    if (this.take("<!--")) {
      const body = this.until("--", "a comment without an end");
      if (!this.take(">")) this.fail(`-- in a comment ${body.slice(0, 20)}`);
      return true;
    }
    if (!this.take("<?")) return false;
    const name = this.name();
    if (name.toLowerCase() === "xml" || name.includes(":")) this.fail("a processing instruction of this name");
    if (!this.sees("?>") && !this.blanks()) this.fail("a blank is missing");
    this.until("?>", "a processing instruction without an end");
    return true;
  }

  split(name) {
    const parts = name.split(":");
    if (parts.length > 2 || parts.includes("")) this.fail(`'${name}' is no name with a name space`);
    return parts.length === 2 ? parts : ["", name];
  }

  // The spaces that are known inside an element.
  spacesOf(attributes, outer) {
    const spaces = new Map(outer);
    for (const [name, value] of attributes) {
      const [prefix, local] = this.split(name);
      if (prefix !== "xmlns" && name !== "xmlns") continue;
      const own = name === "xmlns" ? "" : local;
      if (own === "xmlns" || (own !== "" && value === "")) this.fail("a name space that cannot be declared");
      if ((own === "xml") !== (value === XML_SPACE) || value === XMLNS_SPACE) this.fail("a name space that cannot be declared");
      spaces.set(own, value);
    }
    return spaces;
  }

  // Read an element; { space, name, attributes, children, hasText }, where attributes are those
  // without a prefix.
  element(outer, level) {
    if (level > MOST_LEVELS) this.fail("too many levels");
    if (!this.take("<")) this.fail("an element is missing");
    const full = this.name();
    const given = this.attributes();
    const spaces = this.spacesOf(given, outer);
    const [prefix, name] = this.split(full);
    if (!spaces.has(prefix)) this.fail(`the prefix '${prefix}' is not declared`);
    const attributes = new Map();
    const seen = new Set();
    for (const [key, value] of given) {
      const [front, local] = this.split(key);
      if (key === "xmlns" || front === "xmlns") continue;
      if (front === "") attributes.set(local, value);
      else {
        if (!spaces.has(front)) this.fail(`the prefix '${front}' is not declared`);
        const expanded = `${spaces.get(front)} ${local}`;
        if (seen.has(expanded)) this.fail(`the attribute '${local}' is given twice`);
        seen.add(expanded);
      }
    }
    const found = { space: spaces.get(prefix), name, attributes, children: [], hasText: false };
    if (this.take("/>")) return found;
    this.at += 1;
    this.contents(found, spaces, level);
    if (this.name() !== full) this.fail(`<${full}> is closed by another name`);
    this.blanks();
    if (!this.take(">")) this.fail("> is missing");
    return found;
  }

  contents(found, spaces, level) {
    while (!this.take("</")) {
      if (this.at >= this.text.length) this.fail("an element without an end");
      if (this.take("<![CDATA[")) found.hasText = /[^ \t\n\r]/.test(this.until("]]>", "CDATA without an end")) || found.hasText;
      else if (this.sees("<!--") || this.sees("<?")) this.skipped();
      else if (this.sees("<")) found.children.push(this.element(spaces, level + 1));
      else if (this.sees("]]>")) this.fail("]]> in a text");
      else {
        let letter = this.text[this.at++];
        if (letter === "&") letter = this.reference();
        if (!" \t\n\r".includes(letter)) found.hasText = true;
      }
    }
  }

  whole() {
    this.declaration();
    const misc = () => {
      while (this.blanks() || this.skipped());
    };
    misc();
    const root = this.element(new Map([["", ""], ["xml", XML_SPACE]]), 1);
    misc();
    if (this.at < this.text.length) this.fail("something follows the document");
    return root;
  }
}

function readXml(text) {
  return new XmlReader(text).whole();
}

export { readXml };
