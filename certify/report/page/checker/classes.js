// The sweep of all n of one residue (FORMAT.md, section 8.2).

import { need } from "./strict.js";
import { Sha256 } from "./sha256.js";
import { buildInstance } from "./graphs.js";
import { Sweep } from "./sweep.js";
import { buildLayers, withN } from "./strip.js";

const MOST_STATES = 2000000;
const MOST_FRONTIER = 253;
const MOST_STEPS = 10000;
const MOST_BITS = 2 ** 31;

// All sweeps run in the graph of n(1), which has p layers more than that of n(0). There T(i) stands
// twice: "low", when 3Z + p layers are not swept, and "high", when 3Z are not. A step takes
// T(i) low and sweeps p layers, which makes T(i + 1) high; moved by p layers it is low again. The
// last 3Z layers, swept from T(i) high, give the answer.
class ClassSweep {
  // n: n(0).
  constructor(claim, strip, values, n) {
    const { zone, modulus } = strip;
    const layers = buildLayers(claim, strip, values, n + modulus);
    const built = { graph: layers.graph, names: Array.from(layers.layer.keys(), String) };
    const { question } = buildInstance(claim, built, withN(claim, values, n + modulus));
    Object.assign(this, { question, layers, zone, modulus });
    const count = layers.graph.n;
    const order = Array.from({ length: count }, (_, v) => v).sort((u, v) => layers.layer[u] - layers.layer[v] || u - v);
    if (question.n > count) order.push(count);
    const before = (layer) => order.filter((v) => v < count && layers.layer[v] < layer).length;
    const [low, high] = [before(layers.total - 3 * zone - modulus), before(layers.total - 3 * zone)];
    this.parts = [order.slice(0, low), order.slice(low, high), order.slice(high)];
    // By layer and place, so that vertices can be moved to another layer.
    this.places = new Map(layers.layer.map((x, v) => [`${x} ${layers.rest[v]}`, v]));
    // What the two frontiers are: those of vertices that were swept, in the graph.
    this.lowFrontier = this.frontierAfter(this.parts[0]);
    this.highFrontier = this.frontierAfter([...this.parts[0], ...this.parts[1]]);
    this.up = this.moves(this.lowFrontier, modulus);
    this.down = this.moves(this.highFrontier, -modulus);
    const same = (frontier, move, other) => String(frontier.map((v) => move.get(v)).sort((s, t) => s - t)) === String(other);
    need(same(this.lowFrontier, this.up, this.highFrontier), "no strip: the frontier changes from step to step");
  }

  frontierAfter(swept) {
    const done = new Set(swept);
    const { graph } = this.question;
    const found = new Set(swept.flatMap((v) => graph.edgesAt[v].map((e) => graph.otherEnd(e, v))));
    return [...found].filter((u) => !done.has(u)).sort((s, t) => s - t);
  }

  // Where the vertices of a frontier go: those in the last Z layers and the apex stay.
  moves(frontier, by) {
    const { layer, rest, total } = this.layers;
    const found = new Map([[-1, -1]]);
    for (const v of frontier) {
      const stays = v === layer.length || layer[v] >= total - this.zone;
      const to = stays ? v : this.places.get(`${layer[v] + by} ${rest[v]}`);
      need(to !== undefined, "no strip: the frontier changes from step to step");
      found.set(v, to);
    }
    return found;
  }

  // States over `frontier`, moved to where the vertices go.
  moved(states, frontier, move) {
    const order = frontier.map((v, i) => [move.get(v), i]).sort((s, t) => s[0] - t[0]);
    return states.map((state) => Int32Array.from(order, ([, i]) => move.get(state[i])));
  }

  // Sweep vertices from states, after `swept`; returns the sweep.
  run(swept, frontier, states, vertices, marks = null) {
    const sweep = new Sweep(this.question);
    for (const v of swept) sweep.swept[v] = 1;
    Object.assign(sweep, { frontier, states, marks });
    for (const v of vertices) {
      sweep.step(v, MOST_STATES);
      need(sweep.frontier.length <= MOST_FRONTIER, "a frontier of more than 253 vertices");
    }
    return sweep;
  }

  // T(0), low.
  first() {
    const sweep = this.run([], [], [new Int32Array(0)], this.parts[0]);
    need(!sweep.completed, "no strip: a cycle is closed too early");
    return sweep.states;
  }

  // T(i + 1) from T(i), both low.
  next(states) {
    const sweep = this.run(this.parts[0], this.lowFrontier, states, this.parts[1]);
    need(!sweep.completed, "no strip: a cycle is closed too early");
    return this.moved(sweep.states, this.highFrontier, this.down);
  }

  // From which T(i) the last 3Z layers complete a cycle, as bits. All T(i), given low, are swept at
  // once; the marks of a state are the i with the state in T(i).
  complete(states, marks) {
    const high = this.moved(states, this.lowFrontier, this.up);
    const swept = [...this.parts[0], ...this.parts[1]];
    return this.run(swept, this.highFrontier, high, this.parts[2], marks).completedMarks;
  }
}

function digestOf(states) {
  const texts = states.map((state) => state.join(",")).sort();
  const sum = new Sha256();
  const coder = new TextEncoder();
  for (const text of texts) sum.update(coder.encode(`${text};`));
  return `${texts.length} ${sum.hex()}`;
}

// Sweep until some T(i) comes again: { states, preperiod, period, answers }; answers are truth values.
function sweepClass(claim, strip, values, n) {
  const sweep = new ClassSweep(claim, strip, values, n);
  const seen = new Map();
  const sizes = [];
  // Every state of any T(i), and the i with the state in T(i), as bits.
  const places = new Map();
  const [all, marks] = [[], []];
  let states = sweep.first();
  for (let digest = digestOf(states); !seen.has(digest); digest = digestOf(states)) {
    need(sizes.length < MOST_STEPS, "the sets of states do not come again in time");
    const mark = 1n << BigInt(sizes.length);
    for (const state of states) {
      const text = state.join(",");
      const place = places.get(text);
      if (place === undefined) {
        places.set(text, all.length);
        all.push(state);
        marks.push(mark);
        need(all.length <= MOST_STATES, "more than 2,000,000 states in a class");
      } else marks[place] |= mark;
    }
    seen.set(digest, sizes.length);
    sizes.push(states.length);
    need(all.length * sizes.length <= MOST_BITS, "the sets of states and their states are too many");
    states = sweep.next(states);
  }
  const preperiod = seen.get(digestOf(states));
  const complete = sweep.complete(all, marks);
  const answers = sizes.map((_, i) => ((complete >> BigInt(i)) & 1n) === 1n);
  return { states: sizes, preperiod, period: sizes.length - preperiod, answers };
}

export { sweepClass };
