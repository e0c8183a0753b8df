// Evidence of kind `obstruction`: one reason that can be seen in the graph (FORMAT.md, section 6).
// H stands for any Hamiltonian cycle of the question that uses all required edges.

import { Rejected, need, exactly, listOf, vertexOf, sortedVertices } from "./strict.js";

// H would have two edges at the vertex.
function checkLeaf(body, { graph, n }) {
  const [, vertex] = exactly(body, ["form", "vertex"], "the leaf");
  need(graph.degree(vertexOf(vertex, n, "leaf")) <= 1, `${vertex} has more than one edge`);
}

function forcedEdge(question, u, v) {
  const e = u === v ? -1 : question.graph.edgeBetween(u, v);
  need(e >= 0 && question.isForced(e), `{${u}, ${v}} is not a forced edge`);
}

// H would use three edges at the vertex.
function checkCrowded(body, question) {
  const [, vertex, neighbours] = exactly(body, ["form", "vertex", "neighbours"], "the crowd");
  vertexOf(vertex, question.n, "crowded");
  need(sortedVertices(neighbours, question.n, "neighbours").length === 3, "not three neighbours");
  for (const u of neighbours) forcedEdge(question, vertex, u);
}

// H would contain a cycle that leaves vertices out.
function checkRing(body, question) {
  const [, vertices] = exactly(body, ["form", "vertices"], "the ring");
  const k = listOf(vertices, "ring").length;
  need(k >= 3 && k < question.n, "a ring has from 3 to n - 1 vertices");
  vertices.forEach((v) => vertexOf(v, question.n, "ring"));
  need(new Set(vertices).size === k, "the ring has a vertex twice");
  vertices.forEach((v, i) => forcedEdge(question, v, vertices[(i + 1) % k]));
}

function components(graph, removed) {
  const seen = removed.slice();
  let count = 0;
  for (let root = 0; root < graph.n; root += 1) {
    if (seen[root]) continue;
    count += 1;
    seen[root] = 1;
    for (const stack = [root]; stack.length > 0; ) {
      const v = stack.pop();
      for (const e of graph.edgesAt[v]) {
        const u = graph.otherEnd(e, v);
        if (!seen[u]) {
          seen[u] = 1;
          stack.push(u);
        }
      }
    }
  }
  return count;
}

function readSet(body, n) {
  const [, set] = exactly(body, ["form", "set"], "the set");
  const inside = new Uint8Array(n);
  for (const v of sortedVertices(set, n, "set")) inside[v] = 1;
  return [set.length, inside];
}

// H enters and leaves each component: 2c edges, for which the set has 2(size) - 2r edge ends.
// Without a set, H would join two components.
function checkSeparator(body, question) {
  const { graph, n } = question;
  const [size, inside] = readSet(body, n);
  need(size < n, "the set is everything");
  const c = components(graph, inside);
  let r = 0;
  question.required.forEach((bit, e) => {
    if (bit && inside[graph.low[e]] && inside[graph.high[e]]) r += 1;
  });
  need(size > 0 || c >= 2, "the graph is connected");
  need(c > size - r, `${c} components are not more than ${size} - ${r}`);
}

// H has 2(size) edges at the set, all different, and r more; but only n in all.
function checkIndependent(body, question) {
  const { graph, n } = question;
  const [size, inside] = readSet(body, n);
  let r = 0;
  for (let e = 0; e < graph.m; e += 1) {
    const ends = inside[graph.low[e]] + inside[graph.high[e]];
    need(ends < 2, `{${graph.low[e]}, ${graph.high[e]}} is inside the set`);
    if (ends === 0 && question.required[e]) r += 1;
  }
  need(2 * size + r > n, `2 * ${size} + ${r} is not more than ${n}`);
}

const FORMS = { leaf: checkLeaf, crowded: checkCrowded, ring: checkRing, separator: checkSeparator, independent: checkIndependent };

// The forms for a question that is not absent and has at least three vertices.
function checkForm(body, question) {
  const form = body instanceof Map ? body.get("form") : undefined;
  need(typeof form === "string" && Object.hasOwn(FORMS, form), `the form ${String(form)} does not fit here`);
  FORMS[form](body, question);
}

function checkObstruction(body, instance) {
  const form = body instanceof Map ? body.get("form") : undefined;
  const { absent, onlyVertex, question } = instance;
  if (form === "absent") {
    exactly(body, ["form"], "the obstruction");
    // Accepted: the object would need a vertex or an edge that is not there.
    need(absent, "nothing is absent");
  } else if (form === "small") {
    exactly(body, ["form"], "the obstruction");
    // Accepted: a cycle has three vertices, and the one path that is none is left out.
    need(!absent && !onlyVertex && question.n < 3, "the question is not small");
  } else {
    if (absent || question.n < 3) throw new Rejected("only the forms absent and small fit here");
    // Accepted: the reason is above each form.
    checkForm(body, question);
  }
}

export { checkObstruction, checkForm };
