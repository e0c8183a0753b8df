// Evidence of kind `witness`: the path or the cycle itself (FORMAT.md, section 6).

import { need, exactly, permutation } from "./strict.js";

function checkWitness(body, instance) {
  const [order] = exactly(body, ["order"], "the witness");
  const { kept, ends, mustUse, isCycle, absent } = instance;
  const n = kept.n;
  need(!absent, "a required edge or an end is not in the graph");
  permutation(order, n, "order");
  need(n >= (isCycle ? 3 : 1), "the graph has too few vertices");
  const used = new Set();
  for (let i = 0; i < (isCycle ? n : n - 1); i += 1) {
    const [u, v] = [order[i], order[(i + 1) % n]];
    const e = kept.edgeBetween(u, v);
    need(e >= 0, `${u} and ${v} are not joined`);
    used.add(e);
  }
  for (const [u, v] of mustUse) need(used.has(kept.edgeBetween(u, v)), `the required edge {${u}, ${v}} is not used`);
  const [first, last] = [order[0], order[n - 1]];
  if (ends.length === 1) need(ends[0] === first || ends[0] === last, "the path has another end");
  if (ends.length === 2) {
    const [s, t] = ends;
    need((s === first && t === last) || (s === last && t === first), "the path has other ends");
  }
  // Accepted: the order is a Hamiltonian path or cycle of the graph without the forbidden
  // edges, with the required edges and ends; it can be seen vertex by vertex.
}

export { checkWitness };
