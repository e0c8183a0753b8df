// What a rule of an endless claim can look at: pieces and conditions (FORMAT.md, section 8.1).
//
// A piece { A, B, N, low, high } stands for A*a.x + B*b.x + N*n plus a constant from low to high,
// where x is the long coordinate and n the growing parameter.

import { need } from "./strict.js";
import { compileTree } from "./rules.js";

const MOST_PIECES = 100;
const MOST_FACTORS = 64;
const DISPLAYS = ["set", "tuple", "list"];

const constant = (low, high) => [{ A: 0, B: 0, N: 0, low, high }];
const isFlat = ({ A, B, N }) => A === 0 && B === 0 && N === 0;
const isSmall = (pieces) => pieces.every(isFlat);

// Pieces with the same A, B, N are made one.
function merged(pieces) {
  const found = new Map();
  for (const piece of pieces) {
    for (const part of Object.values(piece)) need(Number.isSafeInteger(part), "no strip: a number is too large");
    const key = `${piece.A} ${piece.B} ${piece.N}`;
    const other = found.get(key) ?? piece;
    found.set(key, { ...piece, low: Math.min(piece.low, other.low), high: Math.max(piece.high, other.high) });
  }
  need(found.size <= MOST_PIECES, "no strip: a part has too many pieces");
  return [...found.values()];
}

function plus(p, q) {
  return { A: p.A + q.A, B: p.B + q.B, N: p.N + q.N, low: p.low + q.low, high: p.high + q.high };
}

function times(p, k) {
  const [low, high] = k < 0 ? [p.high * k, p.low * k] : [p.low * k, p.high * k];
  return { A: p.A * k + 0, B: p.B * k + 0, N: p.N * k + 0, low: low + 0, high: high + 0 };
}

const pairs = (left, right, join) => left.flatMap((p) => right.map((q) => join(p, q)));
const minus = (p, q) => plus(p, times(q, -1));

// The least and the greatest value of a small part, and its size.
function span(pieces) {
  const [low, high] = [Math.min(...pieces.map((p) => p.low)), Math.max(...pieces.map((p) => p.high))];
  return { low, high, size: Math.max(Math.abs(low), Math.abs(high)) };
}

// Reads a rule; collects `conditions` (pieces) and `moduli`.
//
// scope: as in rules.js; values: of the parameters, where that of n is not used; growing: the
// name of n; long: the name of the long coordinate, null if vertices are integers, undefined
// if there are none; bounds: of each other coordinate, [low, high].
class Reader {
  constructor({ scope, values, growing, long, bounds }) {
    Object.assign(this, { scope, values, growing, long, bounds });
    this.conditions = [];
    this.moduli = [];
  }

  // Whether a part names n, a vertex or a coordinate.
  moves(tree) {
    if (tree.kind === "coordinate") return true;
    if (tree.kind === "name") {
      const { vertices, coordinates, bare } = this.scope;
      return tree.name === this.growing || vertices.includes(tree.name) || (bare && (coordinates ?? []).includes(tree.name));
    }
    return tree.parts.some((part) => this.moves(part));
  }

  ask(pieces) {
    this.conditions.push(...pieces);
    this.conditions = mergedExactly(this.conditions);
  }

  // The pieces of an integer part.
  pieces(tree) {
    if (!this.moves(tree)) {
      const value = compileTree(tree, this.scope, "integer")({ parameters: this.values });
      return constant(value, value);
    }
    return merged(this.moving(tree));
  }

  moving(tree) {
    switch (tree.kind) {
      case "name":
        if (tree.name === this.growing) return [{ A: 0, B: 0, N: 1, low: 0, high: 0 }];
        return this.scope.coordinates === null ? this.along(tree.name) : this.coordinate("a", tree.name);
      case "coordinate":
        return this.coordinate(tree.parts[0].name, tree.name);
      case "sign":
        return this.pieces(tree.parts[0]).map((p) => times(p, tree.sign === "-" ? -1 : 1));
      case "arithmetic":
        return this.arithmetic(tree);
      case "call":
        return this.call(tree);
      case "if":
        this.truth(tree.parts[0]);
        return [...this.pieces(tree.parts[1]), ...this.pieces(tree.parts[2])];
      default:
        need(false, "no strip: a part that is not covered");
    }
  }

  along(vertex) {
    return [{ A: vertex === "a" ? 1 : 0, B: vertex === "b" ? 1 : 0, N: 0, low: 0, high: 0 }];
  }

  coordinate(vertex, name) {
    return name === this.long ? this.along(vertex) : constant(...this.bounds.get(name));
  }

  arithmetic(tree) {
    const [left, right] = tree.parts.map((part) => this.pieces(part));
    if (tree.sign === "+") return pairs(left, right, plus);
    if (tree.sign === "-") return pairs(left, right, minus);
    if (tree.sign === "%") return this.modulo(left, right);
    const small = isSmall(left) && isSmall(right);
    if (tree.sign === "*" && !small) return this.product(left, right);
    need(small, `no strip: '${tree.sign}' of a part that grows`);
    const [i, j] = [span(left), span(right)];
    if (tree.sign === "*") {
      const corners = [i.low * j.low, i.low * j.high, i.high * j.low, i.high * j.high];
      return constant(Math.min(...corners) + 0, Math.max(...corners) + 0);
    }
    const size = tree.sign === "//" ? i.size : Math.min(2 ** 53 - 1, Math.max(1, i.size) ** Math.max(0, j.high));
    return constant(-size + 0, size);
  }

  product(left, right) {
    need(isSmall(left) || isSmall(right), "no strip: a product of parts that grow");
    const [pieces, factor] = isSmall(right) ? [left, span(right)] : [right, span(left)];
    need(factor.high - factor.low <= MOST_FACTORS, "no strip: a factor with too many values");
    const found = [];
    for (let k = factor.low; k <= factor.high; k += 1) found.push(...pieces.map((p) => times(p, k)));
    return found;
  }

  modulo(left, right) {
    const [m] = right;
    if (isSmall(right)) {
      const { low, high, size } = span(right);
      if (low === high && low >= 1) {
        if (!isSmall(left)) this.moduli.push(low);
        return constant(0, low - 1);
      }
      need(isSmall(left), "no strip: a modulus that is no positive constant");
      return constant(-size + 0, size);
    }
    const plain = right.length === 1 && m.A === 0 && m.B === 0 && m.N === 1 && m.low === m.high;
    const fits = ({ A, B, N }) => N === 0 && Math.abs(A) <= 1 && Math.abs(B) <= 1 && A * B !== 1;
    need(plain && left.every(fits), "no strip: a modulus that grows");
    const found = [-2, -1, 0, 1, 2].flatMap((j) => left.map((p) => plus(p, times(m, j))));
    this.ask(found);
    return found;
  }

  call(tree) {
    const { name } = tree.parts[0];
    const parts = tree.parts.slice(1).map((part) => this.pieces(part));
    if (name === "abs") {
      this.ask(parts[0]);
      return [...parts[0], ...parts[0].map((p) => times(p, -1))];
    }
    if (name === "gcd") {
      need(parts.every(isSmall), "no strip: gcd of a part that grows");
      return constant(0, Math.max(...parts.map((part) => span(part).size)));
    }
    parts.forEach((part, i) => parts.slice(i + 1).forEach((other) => this.ask(pairs(part, other, minus))));
    return parts.flat();
  }

  // Go through a part that is a truth value.
  truth(tree) {
    if (tree.kind === "name") return;
    if (tree.kind === "compare") {
      tree.signs.forEach((_, i) => this.comparison(tree.parts[i], tree.parts[i + 1]));
    } else if (tree.kind === "call") {
      need(isSmall(this.pieces(tree.parts[1])), "no strip: a predicate of a part that grows");
    } else tree.parts.forEach((part) => this.truth(part));
  }

  comparison(left, right) {
    if (isTruth(left)) {
      [left, right].forEach((part) => this.truth(part));
      return;
    }
    const [some, others] = [left, right].map((part) =>
      (DISPLAYS.includes(part.kind) ? part.parts : [part]).map((member) => this.pieces(member)),
    );
    for (const p of some) for (const q of others) this.ask(pairs(p, q, minus));
  }
}

// Conditions count with the largest absolute value of their constant.
function mergedExactly(conditions) {
  const found = new Map();
  for (const { A, B, N, low, high } of conditions) {
    const key = `${A} ${B} ${N}`;
    const z = Math.max(Math.abs(low), Math.abs(high), found.get(key)?.high ?? 0);
    found.set(key, { A, B, N, low: -z, high: z });
  }
  return [...found.values()];
}

// Whether a tree, whose sorts are known to be right, is a truth value.
function isTruth(tree) {
  if (tree.kind === "if") return isTruth(tree.parts[1]);
  if (tree.kind === "name") return ["True", "False", "true", "false"].includes(tree.name);
  if (tree.kind === "call") return !["abs", "min", "max", "gcd"].includes(tree.parts[0].name);
  return ["compare", "not", "and", "or"].includes(tree.kind);
}

export { Reader };
