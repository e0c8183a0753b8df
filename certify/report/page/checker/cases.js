// Evidence of kind `cases`: a tree of cases that are all impossible (FORMAT.md, section 6).

import { need, exactly, listOf, permutation, vertexOf } from "./strict.js";
import { State, FREE, USED, REMOVED } from "./forced.js";
import { Question } from "./graphs.js";
import { checkForm } from "./obstruction.js";
import { checkCounting } from "./counting.js";

// How p acts on edges, as a list; p must map edges to edges and required ones onto required ones.
function edgeMap(p, question, what) {
  const { graph, required } = question;
  permutation(p, graph.n, what);
  return Int32Array.from(graph.low, (u, e) => {
    const image = graph.edgeBetween(p[u], p[graph.high[e]]);
    need(image >= 0 && required[image] === required[e], `${what} is no automorphism`);
    return image;
  });
}

// What is left to ask in a state: Q without the removed edges, the used ones required.
function questionOf(state) {
  const keeps = (e) => state.status[e] !== REMOVED;
  const graph = state.graph.filtered(keeps);
  return new Question(graph, state.status.filter((_, e) => keeps(e)).map((status) => (status === USED ? 1 : 0)));
}

class Tree {
  constructor(question, nodes, symmetries) {
    this.question = question;
    this.nodes = nodes;
    this.symmetries = symmetries;
    // Of every node so far: the edges used and removed by branches on the way to it, and the
    // number of the node behind its subtree (0 while it is open).
    this.assumed = [];
    this.behind = [];
  }

  // Read the tree with a stack of cases to come; the top is the next in preorder.
  check() {
    const stack = [{ state: State.first(this.question), used: [], removed: [] }];
    this.nodes.forEach((node, number) => {
      while (stack.length > 0 && stack[stack.length - 1].closes !== undefined) {
        this.behind[stack.pop().closes] = number;
      }
      need(stack.length > 0, "more nodes than one tree");
      const work = stack.pop();
      this.assumed.push(work);
      this.behind.push(0);
      stack.push({ closes: number });
      const children = this.visit(node, number, work);
      for (const child of children.reverse()) stack.push(child);
    });
    need(stack.every((entry) => entry.closes !== undefined), "the tree is cut short");
    // Accepted: every leaf has no H, and every H of a node is one of one of its children.
  }

  child(work, state, used, removed) {
    const next = state.copy();
    next.set(used, USED);
    next.set(removed, REMOVED);
    return { state: next, used: [...work.used, ...used], removed: [...work.removed, ...removed] };
  }

  visit(node, number, work) {
    const kind = listOf(node, `node ${number}`)[0];
    const sizes = { forced: 1, obstruction: 2, counting: 2, edge: 3, vertex: 2, like: 3 };
    need(typeof kind === "string" && Object.hasOwn(sizes, kind), `node ${number} is of no known kind`);
    need(node.length === sizes[kind], `node ${number} has not ${sizes[kind]} parts`);
    const { state } = work;
    const free = state.settle();
    work.state = null;
    // The forced moves hold for every H, and contradict each other.
    if (kind === "forced") need(!free, `node ${number}: the forced moves do not end in a contradiction`);
    else need(free, `node ${number}: the forced moves end in a contradiction`);
    if (kind === "obstruction") checkForm(node[1], questionOf(state));
    if (kind === "counting") checkCounting(node[1], questionOf(state));
    if (kind === "like") this.checkLike(node, number, state);
    if (kind === "edge") return this.edgeBranch(node, number, work, state);
    if (kind === "vertex") return this.vertexBranch(node, number, work, state);
    return [];
  }

  // H uses the edge or it does not.
  edgeBranch([, u, v], number, work, state) {
    const { graph, n } = this.question;
    [u, v].forEach((w) => vertexOf(w, n, `node ${number}`));
    const e = u < v ? graph.edgeBetween(u, v) : -1;
    need(e >= 0 && state.status[e] === FREE, `node ${number}: not an edge that is open`);
    return [this.child(work, state, [e], []), this.child(work, state, [], [e])];
  }

  // H uses one pair of the edges left at the vertex, and that contains the used ones.
  vertexBranch([, v], number, work, state) {
    vertexOf(v, this.question.n, `node ${number}`);
    const used = state.at(v, USED);
    need(used.length < 2, `node ${number}: the edges at ${v} are settled`);
    const left = state.leftAt(v);
    const children = [];
    left.forEach((e, i) => {
      for (const f of left.slice(i + 1)) {
        if (used.every((g) => g === e || g === f)) children.push(this.child(work, state, [e, f], []));
      }
    });
    return children;
  }

  // An H here would be mapped to an H that satisfies the assumptions of node j, which has none.
  checkLike([, j, k], number, state) {
    need(Number.isInteger(j) && j >= 0 && j < number && this.behind[j] > 0, `node ${number}: no node that ended before`);
    need(Number.isInteger(k) && k >= 0 && k < this.symmetries.length, `node ${number}: no such symmetry`);
    const image = new Uint8Array(this.question.graph.m);
    this.symmetries[k].forEach((f, e) => {
      image[f] = state.status[e];
    });
    const { used, removed } = this.assumed[j];
    const fits = used.every((e) => image[e] === USED) && removed.every((e) => image[e] === REMOVED);
    need(fits, `node ${number} is not like node ${j}`);
  }
}

function checkCases(body, question) {
  const [nodes, symmetries] = exactly(body, ["nodes", "symmetries"], "the cases");
  const maps = listOf(symmetries, "symmetries").map((p, k) => edgeMap(p, question, `symmetry ${k}`));
  new Tree(question, listOf(nodes, "nodes"), maps).check();
}

export { checkCases, edgeMap };
