// The syntax of rules: words and trees (FORMAT.md, section 3.1).
//
// A tree is made of objects { kind, ... }; `parts` holds the subexpressions that count as nodes.

import { Rejected, need } from "./strict.js";

const MOST_LETTERS = 2000;
const MOST_NODES = 500;
const MOST_LEVELS = 40;
const MOST_LITERAL = 10n ** 12n;

const COMPARISONS = ["==", "!=", "<", "<=", ">", ">="];
// How tightly an operator binds; a right operand binds more tightly than its operator.
const TERNARY = 1;
const OR = 2;
const AND = 3;
const NOT = 4;
const COMPARE = 5;
const SUM = 6;
const PRODUCT = 7;
const UNARY = 8;

const WORDS = new RegExp(
  [
    "(?<blank>[ \\t\\r\\n]+)",
    "(?<name>[A-Za-z_][A-Za-z0-9_]*)",
    // Not directly followed by a letter, a digit, `_` or a point.
    "(?<number>(?:0[xX](?:_?[0-9a-fA-F])+|0[oO](?:_?[0-7])+|0[bB](?:_?[01])+|[1-9](?:_?[0-9])*|0(?:_?0)*)(?![A-Za-z0-9_.]))",
    "(?<sign>\\*\\*|//|==|!=|<=|>=|[-+*%<>(){}\\[\\],.])",
  ].join("|"),
  "y",
);

function splitWords(text) {
  need(text.length <= MOST_LETTERS, "an expression of more than 2,000 characters");
  need(/^[ \t\r\n!-~]*$/.test(text) && !/[#\\"'`]/.test(text), "a character that no expression has");
  const words = [];
  let open = 0;
  for (let at = 0; at < text.length; at = WORDS.lastIndex) {
    WORDS.lastIndex = at;
    const match = WORDS.exec(text);
    need(match !== null, `cannot read '${text.slice(at, at + 20)}'`);
    const { blank, name, number, sign } = match.groups;
    if ("([{".includes(sign ?? " ")) open += 1;
    if (")]}".includes(sign ?? " ")) open -= 1;
    if (blank === undefined) words.push({ text: name ?? number ?? sign, name, number });
    else if (/[\r\n]/.test(blank)) {
      // As in Python, an expression goes on in another line only inside brackets.
      const outside = at === 0 || WORDS.lastIndex === text.length;
      need(outside || open > 0, "a line ends inside the expression");
    }
  }
  return words;
}

class Parser {
  constructor(text) {
    this.words = splitWords(text);
    this.at = 0;
  }

  sees(text) {
    return this.words[this.at]?.text === text;
  }

  take(text) {
    if (!this.sees(text)) return false;
    this.at += 1;
    return true;
  }

  expect(text) {
    if (!this.take(text)) {
      const seen = this.words[this.at]?.text ?? "the end";
      throw new Rejected(`expected '${text}', not '${seen}'`);
    }
  }

  whole() {
    const tree = this.expression(TERNARY);
    need(this.at === this.words.length, `'${this.words[this.at]?.text}' does not belong here`);
    return tree;
  }

  // An expression of operators that bind at least as tightly as `least`.
  expression(least) {
    let left = this.prefix(least);
    for (;;) {
      if (least <= PRODUCT && ["*", "//", "%"].some((sign) => this.sees(sign))) {
        left = this.binary(left, UNARY);
      } else if (least <= SUM && (this.sees("+") || this.sees("-"))) {
        left = this.binary(left, PRODUCT);
      } else if (least <= COMPARE && this.comparison()) left = this.chain(left);
      else if (least <= AND && this.sees("and")) left = this.several("and", left, NOT);
      else if (least <= OR && this.sees("or")) left = this.several("or", left, AND);
      else if (least <= TERNARY && this.take("if")) {
        const condition = this.expression(OR);
        this.expect("else");
        left = { kind: "if", parts: [condition, left, this.expression(TERNARY)] };
      } else return left;
    }
  }

  binary(left, tighter) {
    const { text } = this.words[this.at++];
    return { kind: "arithmetic", sign: text, parts: [left, this.expression(tighter)] };
  }

  several(word, left, tighter) {
    const parts = [left];
    while (this.take(word)) parts.push(this.expression(tighter));
    return { kind: word, parts };
  }

  // The comparison sign that comes next, if any.
  comparison() {
    const sign = this.words[this.at]?.text;
    if (COMPARISONS.includes(sign) || sign === "in") return sign;
    return sign === "not" && this.words[this.at + 1]?.text === "in" ? "not in" : undefined;
  }

  chain(left) {
    const [signs, parts] = [[], [left]];
    for (let sign = this.comparison(); sign; sign = this.comparison()) {
      this.at += sign === "not in" ? 2 : 1;
      signs.push(sign);
      parts.push(this.expression(SUM));
    }
    return { kind: "compare", signs, parts };
  }

  prefix(least) {
    if (least <= NOT && this.take("not")) return { kind: "not", parts: [this.expression(NOT)] };
    if (least <= UNARY && (this.sees("-") || this.sees("+"))) {
      const { text } = this.words[this.at++];
      return { kind: "sign", sign: text, parts: [this.expression(UNARY)] };
    }
    const base = this.postfix();
    if (!this.sees("**")) return base;
    return this.binary(base, UNARY);
  }

  postfix() {
    let tree = this.primary();
    for (;;) {
      if (this.take(".")) {
        const name = this.words[this.at]?.name;
        need(name !== undefined, "a name is missing after the point");
        this.at += 1;
        tree = { kind: "coordinate", name, parts: [tree] };
      } else if (this.take("(")) {
        const values = this.list(")")[0];
        tree = { kind: "call", parts: [tree, ...values] };
      } else return tree;
    }
  }

  // Expressions with commas between them, up to the bracket; and whether a comma ends them.
  list(bracket) {
    const parts = [];
    let comma = false;
    while (!this.take(bracket)) {
      need(parts.length === 0 || comma, `expected ',' or '${bracket}'`);
      parts.push(this.expression(TERNARY));
      comma = this.take(",");
    }
    return [parts, comma];
  }

  primary() {
    const word = this.words[this.at];
    need(word !== undefined, "the expression ends too early");
    this.at += 1;
    if (word.number !== undefined) {
      const value = BigInt(literal(word.number));
      need(value <= MOST_LITERAL, "a literal beyond 10^12");
      return { kind: "integer", value: Number(value), parts: [] };
    }
    if (word.name !== undefined) return { kind: "name", name: word.name, parts: [] };
    if (word.text === "(") {
      const [parts, comma] = this.list(")");
      return parts.length === 1 && !comma ? parts[0] : { kind: "tuple", parts };
    }
    if (word.text === "{") return { kind: "set", parts: this.list("}")[0] };
    if (word.text === "[") return { kind: "list", parts: this.list("]")[0] };
    throw new Rejected(`'${word.text}' does not belong here`);
  }
}

function literal(digits) {
  const plain = digits.replace(/_/g, "").toLowerCase();
  // Several zeros are Python's way of writing 0.
  return /^0+$/.test(plain) ? "0" : plain;
}

// Count the nodes; the whole is on level 1.
function measure(tree, level) {
  need(level <= MOST_LEVELS, "an expression of more than 40 levels");
  return tree.parts.reduce((sum, part) => sum + measure(part, level + 1), 1);
}

// Read a text into a tree, within the limits on its size.
function parseRule(text) {
  const tree = new Parser(text).whole();
  need(measure(tree, 1) <= MOST_NODES, "an expression of more than 500 nodes");
  return tree;
}

export { parseRule };
