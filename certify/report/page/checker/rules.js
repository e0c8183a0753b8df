// The meaning of rules: sorts are decided before evaluation, evaluation is lazy and exact
// (FORMAT.md, section 3.1).
//
// A scope says which names there are:
//   parameters   a list of names; the values are in env.parameters, in this order
//   vertices     the vertices there are: [], ["a"] or ["a", "b"]; their values are env.a, env.b
//   coordinates  null when a vertex is one integer, else the names of its coordinates
//   bare         whether coordinates of `a` may be written without `a.`

import { need } from "./strict.js";
import { parseRule } from "./syntax.js";
import { OPERATIONS, PREDICATES, FUNCTIONS } from "./predicates.js";

const PYTHON = (
  "False None True and as assert async await break class continue def del elif else except " +
  "finally for from global if import in is lambda nonlocal not or pass raise return try while " +
  "with yield"
).split(" ");

const RESERVED = new Set([
  ..."a b where true false abs".split(" "),
  ...Object.keys(PREDICATES),
  ...Object.keys(FUNCTIONS),
  ...PYTHON,
]);

// Whether a parameter or a coordinate may have this name.
function isFreeName(name) {
  return /^[A-Za-z][A-Za-z0-9_]*$/.test(name) && !RESERVED.has(name);
}

const DISPLAYS = ["set", "tuple", "list"];

// A part is compiled into { sort, run }, where run(env) is its value.
class Compiler {
  constructor(scope) {
    this.scope = scope;
  }

  ofSort(tree, sort, where) {
    const part = this.compile(tree);
    const name = sort === "integer" ? "an integer" : "a truth value";
    need(part.sort === sort, `${where} needs ${name}`);
    return part.run;
  }

  compile(tree) {
    switch (tree.kind) {
      case "integer":
        return { sort: "integer", run: () => tree.value };
      case "name":
        return this.name(tree.name);
      case "coordinate":
        return this.coordinate(tree);
      case "call":
        return this.call(tree);
      case "sign":
        return this.sign(tree);
      case "arithmetic":
        return this.arithmetic(tree);
      case "compare":
        return this.chain(tree);
      case "not": {
        const run = this.ofSort(tree.parts[0], "truth", "'not'");
        return { sort: "truth", run: (env) => !run(env) };
      }
      case "and":
      case "or":
        return this.several(tree);
      case "if":
        return this.choice(tree);
      default:
        need(false, `a ${tree.kind} does not belong here`);
    }
  }

  name(name) {
    if (name === "True" || name === "true") return { sort: "truth", run: () => true };
    if (name === "False" || name === "false") return { sort: "truth", run: () => false };
    const { parameters, vertices, coordinates, bare } = this.scope;
    const index = parameters.indexOf(name);
    if (index >= 0) return { sort: "integer", run: (env) => env.parameters[index] };
    if (coordinates === null && vertices.includes(name)) {
      return { sort: "integer", run: name === "a" ? (env) => env.a : (env) => env.b };
    }
    const place = bare && coordinates !== null ? coordinates.indexOf(name) : -1;
    need(place >= 0, `'${name}' means nothing here`);
    return { sort: "integer", run: (env) => env.a[place] };
  }

  coordinate(tree) {
    const { vertices, coordinates } = this.scope;
    const base = tree.parts[0];
    need(base.kind === "name" && vertices.includes(base.name), "a point belongs behind a or b");
    const place = (coordinates ?? []).indexOf(tree.name);
    need(place >= 0, `'${base.name}.${tree.name}' means nothing here`);
    return { sort: "integer", run: base.name === "a" ? (env) => env.a[place] : (env) => env.b[place] };
  }

  call(tree) {
    const [base, ...values] = tree.parts;
    const name = base.kind === "name" ? base.name : undefined;
    const single = name === "abs" || Object.hasOwn(PREDICATES, name ?? "");
    need(single || Object.hasOwn(FUNCTIONS, name ?? ""), "an unknown function");
    need(single ? values.length === 1 : values.length >= 2, `${name}: the wrong number of arguments`);
    const runs = values.map((value) => this.ofSort(value, "integer", name));
    const [first, second] = runs;
    if (name === "abs") return { sort: "integer", run: (env) => Math.abs(first(env)) };
    if (single) {
      const predicate = PREDICATES[name];
      return { sort: "truth", run: (env) => predicate(first(env)) };
    }
    const f = FUNCTIONS[name];
    if (runs.length === 2) return { sort: "integer", run: (env) => f(first(env), second(env)) };
    return { sort: "integer", run: (env) => f(...runs.map((run) => run(env))) };
  }

  sign(tree) {
    const run = this.ofSort(tree.parts[0], "integer", `'${tree.sign}'`);
    return { sort: "integer", run: tree.sign === "+" ? run : (env) => 0 - run(env) };
  }

  arithmetic(tree) {
    const [left, right] = tree.parts.map((part) => this.ofSort(part, "integer", `'${tree.sign}'`));
    const operation = OPERATIONS[tree.sign];
    return { sort: "integer", run: (env) => operation(left(env), right(env)) };
  }

  several(tree) {
    const runs = tree.parts.map((part) => this.ofSort(part, "truth", `'${tree.kind}'`));
    const run = (env) => {
      for (const part of runs) if (part(env) !== all) return !all;
      return all;
    };
    const all = tree.kind === "and";
    return { sort: "truth", run };
  }

  choice(tree) {
    const condition = this.ofSort(tree.parts[0], "truth", "'if'");
    const [yes, no] = tree.parts.slice(1).map((part) => this.compile(part));
    need(yes.sort === no.sort, "the branches of 'if' are not of one sort");
    return { sort: yes.sort, run: (env) => (condition(env) ? yes.run(env) : no.run(env)) };
  }

  // A part of a comparison; the value of a display is the list of its members.
  operand(tree) {
    if (!DISPLAYS.includes(tree.kind)) return this.compile(tree);
    need(tree.parts.length > 0, "an empty display");
    const runs = tree.parts.map((part) => this.ofSort(part, "integer", "a display"));
    return { sort: tree.kind, run: (env) => runs.map((run) => run(env)) };
  }

  chain(tree) {
    const operands = tree.parts.map((part) => this.operand(part));
    const links = tree.signs.map((sign, i) => link(sign, operands[i].sort, operands[i + 1].sort));
    const runs = operands.map((operand) => operand.run);
    const [first, second] = runs;
    const [holds] = links;
    if (links.length === 1) return { sort: "truth", run: (env) => holds(first(env), second(env)) };
    const run = (env) => {
      let left = first(env);
      for (let i = 0; i < links.length; i += 1) {
        const right = runs[i + 1](env);
        if (!links[i](left, right)) return false;
        left = right;
      }
      return true;
    };
    return { sort: "truth", run };
  }
}

const contains = (list, other) => other.every((value) => list.includes(value));
const sameSet = (one, other) => contains(one, other) && contains(other, one);

// The comparison `sign` between two parts of these sorts.
function link(sign, left, right) {
  if (sign === "in" || sign === "not in") {
    need(left === "integer" && DISPLAYS.includes(right), `'${sign}' needs an integer and a display`);
    return sign === "in" ? (i, list) => list.includes(i) : (i, list) => !list.includes(i);
  }
  const order = { "<": (i, j) => i < j, "<=": (i, j) => i <= j, ">": (i, j) => i > j, ">=": (i, j) => i >= j };
  if (sign in order) {
    need(left === "integer" && right === "integer", `'${sign}' needs integers`);
    return order[sign];
  }
  need(left === right && left !== "tuple" && left !== "list", `'${sign}' needs two parts of one sort`);
  if (left === "set") return sign === "==" ? sameSet : (one, other) => !sameSet(one, other);
  return sign === "==" ? (i, j) => i === j : (i, j) => i !== j;
}

// Compile a tree of syntax.js, or a text, to a function of env, of sort "integer" or "truth".
function compileTree(tree, scope, sort) {
  return new Compiler(scope).ofSort(tree, sort, "a part");
}

function compileRule(text, scope, sort) {
  return new Compiler(scope).ofSort(parseRule(text), sort, `'${text.slice(0, 60)}'`);
}

export { compileRule, compileTree, isFreeName };
