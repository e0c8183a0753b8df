// Evidence of kind `sweep`: all ways to pass a line of vertices (FORMAT.md, section 6).
//
// A state is an Int32Array with a value for each frontier vertex, ascending: the vertex itself
// (no chosen edge), -1 (two chosen edges), or the other end of its piece.

import { need, exactly, listOf, permutation } from "./strict.js";
import { Sha256 } from "./sha256.js";

const MOST_CELLS = 2 ** 29;

class Sweep {
  constructor(question) {
    this.question = question;
    this.graph = question.graph;
    this.swept = new Uint8Array(question.n);
    this.frontier = [];
    this.states = [new Int32Array(0)];
    // Whether a choice closed the cycle in question.
    this.completed = false;
    // For several sweeps at once (classes.js): of each state the sweeps it belongs to, as bits;
    // and the sweeps in which the cycle was closed.
    this.marks = null;
    this.completedMarks = 0n;
    // The value of every vertex in the state at hand.
    this.mate = Int32Array.from({ length: question.n }, (_, v) => v);
  }

  // Step v; `most` is how many states there may be afterwards. Returns the states as texts.
  step(v, most) {
    const { graph, question, swept, mate } = this;
    swept[v] = 1;
    const edges = graph.edgesAt[v].filter((e) => !swept[graph.otherEnd(e, v)]);
    const ahead = edges.map((e) => graph.otherEnd(e, v));
    const must = ahead.filter((_, i) => question.required[edges[i]]);
    const next = [...new Set([...this.frontier, ...ahead])].filter((u) => u !== v).sort((s, t) => s - t);
    // Two edges of H at each of these, and no other edge of R among them, would close H.
    const unswept = question.n - swept.reduce((sum, done) => sum + done, 0);
    this.mayClose = next.length === unswept && !this.requiredAhead();
    const found = new Map();
    const [states, marks] = [[], []];
    this.states.forEach((state, k) => {
      const mark = this.marks === null ? 0n : this.marks[k];
      this.frontier.forEach((u, i) => (mate[u] = state[i]));
      const wanted = mate[v] === v ? 2 : mate[v] === -1 ? 0 : 1;
      const open = ahead.filter((u) => mate[u] !== -1);
      for (const choice of choices(open, wanted, must)) {
        const values = this.join(v, choice, next, mark);
        if (values === null) continue;
        const text = values.join(",");
        const place = found.get(text);
        if (place === undefined) {
          found.set(text, states.length);
          states.push(values);
          marks.push(mark);
          need(found.size <= most, `step of ${v}: more states than are stated`);
        } else if (mark !== 0n) marks[place] |= mark;
      }
      for (const u of this.frontier) mate[u] = u;
    });
    this.frontier = next;
    this.states = states;
    if (this.marks !== null) this.marks = marks;
    return [...found.keys()];
  }

  requiredAhead() {
    const { low, high } = this.graph;
    return this.question.required.some((bit, e) => bit && !this.swept[low[e]] && !this.swept[high[e]]);
  }

  // Choose the edges from v to `choice`; null when that closes a cycle that is not the one in
  // question. `mate` is as before afterwards.
  join(v, choice, next, mark) {
    const { mate } = this;
    const changed = [];
    const put = (u, value) => {
      changed.push([u, mate[u]]);
      mate[u] = value;
    };
    let closed = false;
    for (const u of choice) {
      const [p, q] = [mate[v], mate[u]];
      if (p === u) {
        closed = true;
        put(v, -1);
        put(u, -1);
        continue;
      }
      // The piece that ends at v (v alone at first) and the one that ends at u become one,
      // with the ends p and q.
      if (p !== v) put(v, -1);
      if (q !== u) put(u, -1);
      put(p, q);
      put(q, p);
    }
    const values = closed ? null : Int32Array.from(next, (u) => mate[u]);
    const complete = closed && this.mayClose && next.every((u) => mate[u] === -1);
    for (const [u, value] of changed.reverse()) mate[u] = value;
    if (complete) {
      this.completed = true;
      this.completedMarks |= mark;
    }
    return values;
  }
}

// All ways to choose so many of `open`, among them all of `must`.
function choices(open, wanted, must) {
  if (must.some((u) => !open.includes(u)) || must.length > wanted) return [];
  if (wanted === 0) return [[]];
  if (wanted === 1) return (must.length === 1 ? must : open).map((u) => [u]);
  const pairs = [];
  for (let i = 0; i < open.length; i += 1) {
    for (let j = i + 1; j < open.length; j += 1) {
      if (must.every((u) => u === open[i] || u === open[j])) pairs.push([open[i], open[j]]);
    }
  }
  return pairs;
}

// Adds texts to a digest piece by piece.
class Digest {
  constructor() {
    this.sha = new Sha256();
    this.coder = new TextEncoder();
  }

  add(text) {
    this.sha.update(this.coder.encode(text));
  }

  addStates(texts) {
    texts.sort();
    for (let at = 0; at < texts.length; at += 1000) {
      this.add((at > 0 ? ";" : "") + texts.slice(at, at + 1000).join(";"));
    }
    this.add("\n");
  }
}

function checkSweep(body, question) {
  const [order, states, digest] = exactly(body, ["order", "states", "digest"], "the sweep");
  const { n } = question;
  permutation(order, n, "order");
  need(listOf(states, "states").length === n, `states has not ${n} entries`);
  for (const count of states) need(Number.isInteger(count) && count >= 0, "states: not a number of states");
  need(typeof digest === "string", "the digest is not a text");
  const sweep = new Sweep(question);
  const sum = new Digest();
  order.forEach((v, i) => {
    const texts = sweep.step(v, states[i]);
    need(!sweep.completed, `step ${i + 1}: the cycle in question is closed`);
    need(texts.length === states[i], `step ${i + 1}: ${texts.length} states, not ${states[i]}`);
    need(texts.length * (sweep.frontier.length + 1) <= MOST_CELLS, `step ${i + 1}: too many states`);
    sum.addStates(texts);
  });
  need(states[n - 1] === 0, "the last step leaves a state");
  need(sum.sha.hex() === digest, "the digest is another");
  // Accepted: an H, cut down to the edges with a swept end, is one of the states at each step,
  // unless it is closed there, which was looked for; at the last step there is none.
}

export { Sweep, checkSweep };
