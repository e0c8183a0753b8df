// Graphs, graphs by rule, and the question in normal form (FORMAT.md, sections 2 and 4).

import { need } from "./strict.js";

const MOST_VERTICES = 4000;
const MOST_CANDIDATES = 100000;

// Vertices 0, ..., n-1; edges are numbered in the sorted order of their pairs low < high.
class Graph {
  // `codes`: low * n + high of every edge, in any order, possibly repeated.
  constructor(n, codes) {
    const sorted = Float64Array.from(codes).sort();
    const single = sorted.filter((code, i) => i === 0 || sorted[i - 1] !== code);
    this.n = n;
    this.m = single.length;
    this.low = Int32Array.from(single, (code) => Math.floor(code / n));
    this.high = Int32Array.from(single, (code) => code % n);
    this.start = new Int32Array(n + 1);
    this.edgesAt = Array.from({ length: n }, () => []);
    for (let e = 0; e < this.m; e += 1) {
      this.start[this.low[e] + 1] += 1;
      this.edgesAt[this.low[e]].push(e);
      this.edgesAt[this.high[e]].push(e);
    }
    for (let v = 0; v < n; v += 1) this.start[v + 1] += this.start[v];
  }

  // The number of the edge between u and v, or -1: a search by halving among those of the lower end.
  edgeBetween(u, v) {
    const [a, b] = u < v ? [u, v] : [v, u];
    let [from, to] = [this.start[a], this.start[a + 1]];
    while (from < to) {
      const middle = (from + to) >> 1;
      if (this.high[middle] < b) from = middle + 1;
      else to = middle;
    }
    return from < this.start[a + 1] && this.high[from] === b ? from : -1;
  }

  otherEnd(e, v) {
    return this.low[e] === v ? this.high[e] : this.low[e];
  }

  degree(v) {
    return this.edgesAt[v].length;
  }

  codes() {
    return Array.from(this.low, (u, e) => u * this.n + this.high[e]);
  }

  // The graph of the edges e for which keeps(e) is true.
  filtered(keeps) {
    return new Graph(this.n, this.codes().filter((_, e) => keeps(e)));
  }
}

// A question: a graph, and for each edge whether it is required.
class Question {
  constructor(graph, required) {
    this.graph = graph;
    this.n = graph.n;
    this.required = required;
    this.requiredCount = required.reduce((sum, bit) => sum + bit, 0);
  }

  // H uses an edge that is in R, and both edges of a vertex that has only two.
  isForced(e) {
    const { low, high } = this.graph;
    return this.required[e] === 1 || this.graph.degree(low[e]) === 2 || this.graph.degree(high[e]) === 2;
  }
}

// All combinations of values of the ranges, first range outermost.
function candidates(ranges, env) {
  const bounds = ranges.map((range) => range(env));
  let count = 1;
  for (const [lo, hi] of bounds) {
    need(hi >= lo - 1, `the range ${lo}..${hi} of vertices ends before it begins`);
    count *= hi - lo + 1;
  }
  need(count <= MOST_CANDIDATES, "more than 100,000 candidates for vertices");
  let rows = count === 0 ? [] : [[]];
  for (const [lo, hi] of count === 0 ? [] : bounds) {
    const longer = [];
    for (const row of rows) for (let value = lo; value <= hi; value += 1) longer.push([...row, value]);
    rows = longer;
  }
  return rows;
}

// The graph of a rule for the values of the parameters; `names` are its vertices as texts.
function buildByRule(rule, parameters) {
  const env = { parameters, a: 0, b: 0 };
  let rows = candidates(rule.ranges, env);
  const values = rule.coordinates === null ? (row) => row[0] : (row) => row;
  if (rule.where !== null) {
    rows = rows.filter((row) => {
      env.a = values(row);
      return rule.where(env);
    });
  }
  const n = rows.length;
  need(n <= MOST_VERTICES, "more than 4,000 vertices");
  const vertices = rows.map(values);
  const codes = [];
  for (let u = 0; u < n; u += 1) {
    for (let v = u + 1; v < n; v += 1) {
      [env.a, env.b] = [vertices[u], vertices[v]];
      const there = rule.adjacent(env);
      [env.a, env.b] = [vertices[v], vertices[u]];
      need(rule.adjacent(env) === there, `'adjacent' is not symmetric for ${rows[u]} and ${rows[v]}`);
      if (there) codes.push(u * n + v);
    }
  }
  return { graph: new Graph(n, codes), names: rows.map((row) => row.join(",")) };
}

// Bring an instance into normal form.
//
// built: { graph, names }. Returns { graph (before `forbidden`), kept (after), ends, mustUse (pairs
// of vertices of the graph), isCycle, absent, onlyVertex, question }; `question` is null when absent.
function buildInstance(claim, built, parameters) {
  const { graph, names } = built;
  const env = { parameters };
  const numbers = new Map(names.map((name, v) => [name, v]));
  const numberOf = (vertex) => numbers.get(vertex(env)) ?? -1;
  const pairs = (edges) => edges.map((edge) => edge.map(numberOf));
  const betweenIn = (g, [u, v]) => (u < 0 || v < 0 || u === v ? -1 : g.edgeBetween(u, v));

  const removed = new Set(pairs(claim.forbidden).map((pair) => betweenIn(graph, pair)));
  const kept = removed.size === 0 ? graph : graph.filtered((e) => !removed.has(e));
  const ends = claim.ends.map(numberOf);
  const mustUse = pairs(claim.required);
  const absent = ends.includes(-1) || mustUse.some((pair) => betweenIn(kept, pair) < 0);
  const isCycle = claim.structure === "hamiltonian-cycle";
  const onlyVertex = !isCycle && graph.n === 1 && !absent;
  const question = absent ? null : normalForm(kept, ends, mustUse, isCycle);
  return { graph, kept, ends, mustUse, isCycle, absent, onlyVertex, question };
}

// A path becomes a cycle through one more vertex, the apex, which is joined to the possible ends.
function normalForm(kept, ends, mustUse, isCycle) {
  const n = isCycle ? kept.n : kept.n + 1;
  const apex = kept.n;
  const codes = Array.from(kept.low, (u, e) => u * n + kept.high[e]);
  if (!isCycle) {
    const joined = ends.length === 2 ? ends : Array.from({ length: apex }, (_, v) => v);
    for (const v of joined) codes.push(v * n + apex);
  }
  const graph = new Graph(n, codes);
  const required = new Uint8Array(graph.m);
  for (const [u, v] of mustUse) required[graph.edgeBetween(u, v)] = 1;
  for (const v of ends) required[graph.edgeBetween(v, apex)] = 1;
  return new Question(graph, required);
}

export { Graph, Question, buildByRule, buildInstance };
