// Reading a claim: its keys, its instances, its answers (FORMAT.md, section 2).

import { need, decodeText } from "./strict.js";
import { readToml } from "./toml.js";
import { compileRule, isFreeName } from "./rules.js";
import { parseRule } from "./syntax.js";

const MOST_BYTES = 2 ** 20;
const MOST_NAMES = 20;
const MOST_INSTANCES = 100000;
const MOST_LOOPS = 1000000;

// A table with some of these keys, and all of `needed`.
function table(value, known, needed, what) {
  need(value instanceof Map, `${what} is not a table`);
  for (const key of value.keys()) need(known.includes(key), `${what}: unknown key '${key}'`);
  for (const key of needed) need(value.has(key), `${what}: '${key}' is missing`);
  return value;
}

function optional(map, key, type, what) {
  if (!map.has(key)) return null;
  need(typeof map.get(key) === type, `${what}: '${key}' is not a ${type}`);
  return map.get(key);
}

const scopeOf = (parameters) => ({ parameters, vertices: [], coordinates: null, bare: false });

// A range: a function of env that returns [lo, hi]. An integer k stands for k..k.
function readRange(value, scope, what) {
  if (typeof value === "number") return () => [value, value];
  need(typeof value === "string", `${what} is not a range`);
  const bounds = value.split("..");
  need(bounds.length === 2, `${what}: a range is written lo..hi`);
  const [lo, hi] = bounds.map((bound) => compileRule(bound, scope, "integer"));
  return (env) => [lo(env), hi(env)];
}

function checkNames(names, what) {
  need(names.length <= MOST_NAMES, `${what}: more than 20 names`);
  for (const name of names) need(isFreeName(name), `${what}: '${name}' is no name for it`);
}

function readParameters(value) {
  const whole = table(value, [...value.keys()], [], "[instances]");
  const names = [...whole.keys()].filter((key) => key !== "where");
  need(names.length > 0, "[instances] names no parameter");
  checkNames(names, "[instances]");
  // A bound may use the parameters written above it.
  const isOpen = (name) => typeof whole.get(name) === "string" && /\.\.[ \t\r\n]*$/.test(whole.get(name));
  const growing = names.find(isOpen) ?? null;
  // No other range, and not `where`, may name the growing parameter.
  const known = (list) => scopeOf(list.map((name) => (name === growing ? " " : name)));
  const ranges = names.map((name, i) => {
    const scope = known(names.slice(0, i));
    if (name !== growing) return readRange(whole.get(name), scope, name);
    // The growing parameter stands at its lower bound lo in the rows.
    const low = compileRule(whole.get(name).split("..")[0], scope, "integer");
    need(whole.get(name).split("..").length === 2, `${name}: a range is written lo..hi`);
    return (env) => [low(env), low(env)];
  });
  const where = optional(whole, "where", "string", "[instances]");
  return { names, ranges, growing, where: where === null ? null : compileRule(where, known(names), "truth") };
}

// The rows of the nested loops that satisfy `where`, first parameter outermost.
function listInstances({ names, ranges, where }) {
  const rows = [];
  let loops = 0;
  const walk = (row) => {
    if (row.length === names.length) {
      if (where !== null && !where({ parameters: row })) return;
      rows.push(row);
      need(rows.length <= MOST_INSTANCES, "more than 100,000 instances");
      return;
    }
    const [lo, hi] = ranges[row.length]({ parameters: row });
    for (let value = lo; value <= hi; value += 1) {
      loops += 1;
      need(loops <= MOST_LOOPS, "the loops of [instances] are run through more than 1,000,000 times");
      walk([...row, value]);
    }
  };
  walk([]);
  need(rows.length > 0, "the claim has no instance");
  return rows;
}

// The bounds of a range as trees.
function boundTrees(value) {
  if (typeof value !== "number") return value.split("..").map(parseRule);
  const tree = { kind: "integer", value, parts: [] };
  return [tree, tree];
}

function readVertices(value, parameters) {
  const scope = scopeOf(parameters);
  if (!(value instanceof Map)) return { coordinates: null, ranges: [readRange(value, scope, "vertices")] };
  const coordinates = [...value.keys()];
  need(coordinates.length >= 2, "vertices: a table has two coordinates or more");
  checkNames(coordinates, "vertices");
  for (const name of coordinates) need(!parameters.includes(name), `'${name}' is a parameter and a coordinate`);
  return { coordinates, ranges: coordinates.map((name) => readRange(value.get(name), scope, name)) };
}

function readRule(graph, parameters) {
  const vertices = graph.get("vertices");
  const { coordinates, ranges } = readVertices(vertices, parameters);
  const whereText = optional(graph, "where", "string", "[graph]");
  const adjacentText = optional(graph, "adjacent", "string", "[graph]");
  const inWhere = { parameters, vertices: ["a"], coordinates, bare: true };
  const inAdjacent = { parameters, vertices: ["a", "b"], coordinates, bare: false };
  return {
    coordinates,
    ranges,
    bounds: (vertices instanceof Map ? [...vertices.values()] : [vertices]).map(boundTrees),
    trees: { where: whereText === null ? null : parseRule(whereText), adjacent: parseRule(adjacentText) },
    where: whereText === null ? null : compileRule(whereText, inWhere, "truth"),
    adjacent: compileRule(adjacentText, inAdjacent, "truth"),
  };
}

// A vertex that `ends`, `required` or `forbidden` names: a function of env that returns the
// vertex as text, the way graphs.js writes vertices.
function readVertex(value, parameters, rule) {
  const integer = (part) => {
    if (typeof part === "number") return () => part;
    need(typeof part === "string", "a vertex is an integer or a string");
    return compileRule(part, scopeOf(parameters), "integer");
  };
  if (rule === null) {
    need(typeof value === "number" || typeof value === "string", "a vertex of a list is named by a string or an integer");
    return () => String(value);
  }
  if (rule.coordinates === null) {
    const run = integer(value);
    return (env) => String(run(env));
  }
  const count = rule.coordinates.length;
  need(Array.isArray(value) && value.length === count, `a vertex has ${count} coordinates`);
  const runs = value.map(integer);
  return (env) => runs.map((run) => String(run(env))).join(",");
}

function readNamed(root, parameters, rule) {
  const vertex = (value) => readVertex(value, parameters, rule);
  const edges = (key) => {
    const value = root.get(key) ?? [];
    need(Array.isArray(value), `'${key}' is not a list of edges`);
    return value.map((edge) => {
      need(Array.isArray(edge) && edge.length === 2, `'${key}': an edge is a list of two vertices`);
      return edge.map(vertex);
    });
  };
  const ends = root.get("ends") ?? [];
  need(Array.isArray(ends), "'ends' is not a list");
  if (root.has("ends")) {
    need(root.get("structure") === "hamiltonian-path", "only paths have 'ends'");
    need(ends.length === 1 || ends.length === 2, "'ends' names one or two vertices");
  }
  return { ends: ends.map(vertex), required: edges("required"), forbidden: edges("forbidden") };
}

// The claimed answers: { each } is a function of env to "exists" or "impossible";
// { counts } has the claimed number for each word that is claimed.
function readAnswers(value, parameters, isList) {
  const counts = new Map();
  let each = null;
  let tree = null;
  const keys = [...table(value, ["exists", "impossible"], [], "[answers]").keys()];
  for (const key of keys) {
    const said = value.get(key);
    if (typeof said === "number") {
      need(said >= 0, `[answers]: '${key}' is a negative count`);
      counts.set(key, said);
      continue;
    }
    need(keys.length === 1, "[answers]: a rule or a truth value stands alone");
    const other = key === "exists" ? "impossible" : "exists";
    need(typeof said === "boolean" || (typeof said === "string" && !isList), `[answers]: '${key}' has no such value`);
    const run = typeof said === "boolean" ? () => said : compileRule(said, scopeOf(parameters), "truth");
    each = (env) => (run(env) ? key : other);
    if (typeof said === "string") tree = parseRule(said);
  }
  return { each, counts, tree };
}

const FORMATS = ["graph6", "sparse6", "dimacs", "graphml", "edges"];
const ENDINGS = { g6: "graph6", s6: "sparse6", col: "dimacs", dimacs: "dimacs", graphml: "graphml", edges: "edges", txt: "edges" };

function readList(graph) {
  const name = optional(graph, "list", "string", "[graph]");
  const format = optional(graph, "format", "string", "[graph]");
  if (format !== null) {
    need(FORMATS.includes(format), `[graph]: unknown format '${format}'`);
    return { name, format };
  }
  const ending = /\.([^./]*)$/.exec(name)?.[1] ?? "";
  need(Object.hasOwn(ENDINGS, ending), `[graph]: the ending of '${name}' is of no known format`);
  return { name, format: ENDINGS[ending] };
}

// Read the bytes of a claim. `endless` is null, or has the `names` of all parameters and the
// `growing` one, whose value in a row is its lower bound. `rule` or `list` is null; `rows` are the instances of a rule, as
// lists of the values of `parameters`, and null for a list.
function readClaim(bytes) {
  need(bytes.length <= MOST_BYTES, "the claim is longer than 1 MiB");
  const known = ["title", "statement", "structure", "ends", "required", "forbidden", "graph", "instances", "answers"];
  const root = table(readToml(decodeText(bytes, "the claim")), known, ["structure", "graph"], "the claim");
  optional(root, "title", "string", "the claim");
  optional(root, "statement", "string", "the claim");
  const structure = root.get("structure");
  need(structure === "hamiltonian-path" || structure === "hamiltonian-cycle", "unknown structure");
  const graph = root.get("graph");
  need(graph instanceof Map, "[graph] is not a table");
  const isList = graph.has("list");
  table(graph, isList ? ["list", "format"] : ["vertices", "adjacent", "where"], isList ? ["list"] : ["vertices", "adjacent"], "[graph]");
  need(!(isList && root.has("instances")), "a list of graphs has no [instances]");
  let given = { names: [], ranges: [], growing: null, where: null };
  if (root.has("instances")) {
    need(root.get("instances") instanceof Map, "[instances] is not a table");
    given = readParameters(root.get("instances"));
  }
  const rule = isList ? null : readRule(graph, given.names);
  const answers = readAnswers(root.get("answers") ?? new Map(), given.names, isList);
  if (given.growing !== null) {
    need(answers.counts.size === 0, "[answers]: an endless claim has no counts");
    for (const key of ["ends", "required", "forbidden"]) need(!root.has(key), `an endless claim has no '${key}'`);
  }
  return {
    structure,
    endless: given.growing === null ? null : given,
    parameters: given.names,
    rule,
    list: isList ? readList(graph) : null,
    ...readNamed(root, given.names, rule),
    answers,
    rows: isList ? null : listInstances(given),
  };
}

export { readClaim };
