// Evidence of kind `counting`: what the edges of H must add up to, and what they can
// (FORMAT.md, section 6). All numbers are exact (BigInt), because weights may be large.

import { need, exactly, isInteger, listOf, vertexOf, sortedVertices } from "./strict.js";

function tuple(value, count, what) {
  need(listOf(value, what).length === count, `${what}: not ${count} parts`);
  return value;
}

function weight(value, least, what) {
  need(isInteger(value) && value !== 0 && (least === null || value >= least), `${what}: a weight out of range`);
  return BigInt(value);
}

function markSet(set, n, what) {
  need(sortedVertices(set, n, what).length > 0 && set.length < n, `${what}: nothing or everything`);
  const inside = new Uint8Array(n);
  for (const v of set) inside[v] = 1;
  return inside;
}

class Sheet {
  constructor(graph) {
    this.graph = graph;
    this.scores = new Array(graph.m).fill(0n);
    this.need = 0n;
  }

  // H has exactly two edges at each vertex: the scores of its edges hold y twice.
  addVertex(v, y) {
    for (const e of this.graph.edgesAt[v]) this.scores[e] += y;
    this.need += 2n * y;
  }

  // Add z to every edge that leaves the set.
  addLeaving(set, inside, z) {
    const { graph } = this;
    for (const v of set) {
      for (const e of graph.edgesAt[v]) if (!inside[graph.otherEnd(e, v)]) this.scores[e] += z;
    }
  }

  // At least two edges of H leave the set.
  addCut([set, z]) {
    const inside = markSet(set, this.graph.n, "cut");
    const size = weight(z, 1, "cut");
    this.addLeaving(set, inside, size);
    this.need += 2n * size;
  }

  // An even number of edges of H leaves the set, so not exactly those of the odd list F:
  // (leaving outside F) - (leaving in F) >= 1 - size of F.
  addParity([set, list, z]) {
    const { graph } = this;
    const inside = markSet(set, graph.n, "parity");
    const size = weight(z, 1, "parity");
    this.addLeaving(set, inside, size);
    need(listOf(list, "parity").length % 2 === 1, "parity: not an odd number of edges");
    let before = -1;
    for (const pair of list) {
      const [u, v] = tuple(pair, 2, "parity").map((w) => vertexOf(w, graph.n, "parity"));
      need(u < v, "parity: an edge is written u < v");
      const e = graph.edgeBetween(u, v);
      need(e >= 0 && inside[u] !== inside[v], `parity: {${u}, ${v}} is no edge that leaves the set`);
      need(e > before, "parity: the edges are not sorted");
      before = e;
      this.scores[e] -= 2n * size;
    }
    this.need += size * BigInt(1 - list.length);
  }

  // Along H every required edge counts, and any other only if H uses it.
  offer(required) {
    let sum = 0n;
    this.scores.forEach((score, e) => {
      if (required[e] || score > 0n) sum += score;
    });
    return sum;
  }
}

function checkCounting(body, question) {
  const [vertices, cuts, parities] = exactly(body, ["vertex", "cut", "parity"], "the counting");
  const sheet = new Sheet(question.graph);
  let before = -1;
  for (const entry of listOf(vertices, "vertex")) {
    const [v, y] = tuple(entry, 2, "vertex");
    need(vertexOf(v, question.n, "vertex") > before, "vertex: not sorted");
    before = v;
    sheet.addVertex(v, weight(y, null, "vertex"));
  }
  for (const cut of listOf(cuts, "cut")) sheet.addCut(tuple(cut, 2, "cut"));
  for (const parity of listOf(parities, "parity")) sheet.addParity(tuple(parity, 3, "parity"));
  // Accepted: the scores along H sum to at least `need`, and H's edges offer at most `offer`.
  const offer = sheet.offer(question.required);
  need(sheet.need > offer, `need ${sheet.need} is not more than offer ${offer}`);
}

export { checkCounting };
