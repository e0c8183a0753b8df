// When the graphs of an endless claim are strips, and from which n on (FORMAT.md, section 8.1).

import { need } from "./strict.js";
import { Reader } from "./pieces.js";
import { buildByRule } from "./graphs.js";
import { modulusOf } from "./moduli.js";

const MOST_ZONE = 60;

// What a condition demands: the least Z, and a number that n must exceed (or -1).
function demandOf({ A, B, N, high: z }, L, c) {
  if (A === 0 && B === 0 && N === 0) return [1, -1];
  // The form up to sign: the first of A, B, N that is not 0 is positive.
  const sign = Math.sign(A || B || N);
  const [a, b, n] = [A * sign, B * sign, N * sign];
  const opposite = a + b === 0 && a > 0;
  const single = (a === 0) !== (b === 0);
  if (opposite && n === 0) return [z + 1, -1];
  if (opposite && a === 1 && Math.abs(n) === 1) return [z + 1, -1];
  if (single && n === 0) return [z + Math.abs(L) + 1, -1];
  const ones = a + b === 1;
  if (single && ones && n === -1) return [z + Math.abs(c) + 1, -1];
  const far = (a === 0 && b === 0) || (opposite && a === 1) || (single && ones);
  need(far, `no strip: a condition on ${A}*a.x + ${B}*b.x + ${N}*n`);
  return [1, 4 * (z + Math.abs(L) + Math.abs(c) + 1)];
}

// The bounds of all coordinates: the long one (its place, L and c), and the intervals of the others.
function readBounds(claim, values) {
  const { names: parameters, growing } = claim.endless;
  const { coordinates, bounds: trees } = claim.rule;
  const names = coordinates ?? [null];
  const scope = { parameters, vertices: [], coordinates: null, bare: false };
  const reader = new Reader({ scope, values, growing, long: undefined, bounds: new Map() });
  const moving = trees.map((pair) => pair.some((tree) => reader.moves(tree)));
  need(moving.filter(Boolean).length === 1, "no strip: not exactly one coordinate has bounds that name n");
  const place = moving.indexOf(true);
  const bounds = new Map();
  let [L, c] = [0, 0];
  trees.forEach((pair, i) => {
    const [low, high] = pair.map((tree) => {
      const pieces = reader.pieces(tree);
      need(pieces.length === 1 && pieces[0].low === pieces[0].high, "no strip: a bound that is no plain number");
      return pieces[0];
    });
    need(low.N === 0 && high.N === (i === place ? 1 : 0), "no strip: the bounds are not L and n + c");
    if (i === place) [L, c] = [low.low, high.low];
    else {
      need(low.low <= high.low, "no strip: a coordinate without values");
      bounds.set(names[i], [low.low, high.low]);
    }
  });
  const asked = reader.conditions.some(({ A, B, N }) => A !== 0 || B !== 0 || N !== 0);
  need(!asked && modulusOf(reader.moduli) === 1, "no strip: the bounds ask for more of n than to be added");
  return { long: names[place], place, bounds, L, c };
}

// The graph of the strip for one n: its vertices have a layer (0-based, from L) and a place, the
// other coordinates as a text.
function buildLayers(claim, strip, values, n) {
  const { graph, names } = buildByRule(claim.rule, withN(claim, values, n));
  const layer = [];
  const rest = [];
  for (const name of names) {
    const parts = name.split(",");
    layer.push(Number(parts[strip.place]) - strip.L);
    rest.push(parts.filter((_, i) => i !== strip.place).join(","));
  }
  return { graph, layer, rest, total: n + strip.c - strip.L + 1 };
}

// The values of all parameters, with n in its place.
function withN(claim, values, n) {
  const place = claim.endless.names.indexOf(claim.endless.growing);
  return values.map((value, i) => (i === place ? n : value));
}

// The first graphs of each residue must look like those of a strip.
function checkGraph({ graph, layer, total }, Z) {
  need(graph.n >= 3, "no strip: fewer than three vertices");
  need(layer.some((x) => x >= total - 2 * Z && x < total - Z), "no strip: no vertex in the middle of the end");
  for (let e = 0; e < graph.m; e += 1) {
    const [x, y] = [layer[graph.low[e]], layer[graph.high[e]]].sort((s, t) => s - t);
    need(y - x <= Z || (x < Z && y >= total - Z), "no strip: an edge that is too long");
  }
}

// Read what section 8.1 says of a row: { first, modulus, zone, L, c, place }.
//
// values: of the parameters, with lo in the place of n.
function readStrip(claim, values, lo) {
  const { names: parameters, growing } = claim.endless;
  const { coordinates, trees } = claim.rule;
  const { long, place, bounds, L, c } = readBounds(claim, values);
  let [zone, far] = [1, -1];
  const moduli = [];
  for (const [tree, vertices, bare] of [[trees.where, ["a"], true], [trees.adjacent, ["a", "b"], false]]) {
    if (tree === null) continue;
    const scope = { parameters, vertices, coordinates, bare };
    const reader = new Reader({ scope, values, growing, long, bounds });
    reader.truth(tree);
    moduli.push(...reader.moduli);
    for (const condition of reader.conditions) {
      const [least, beyond] = demandOf(condition, L, c);
      zone = Math.max(zone, least);
      far = Math.max(far, beyond);
    }
  }
  const modulus = modulusOf(moduli);
  need(zone <= MOST_ZONE, "no strip: the zones are too long");
  const room = 5 * zone + 2 * modulus;
  // At least `room` layers: n + c - L + 1 >= room.
  const first = Math.max(lo, room, room - 1 - c + L, far + 1);
  const strip = { first, modulus, zone, L, c, place };
  for (let n = first; n < first + modulus; n += 1) checkGraph(buildLayers(claim, strip, values, n), zone);
  return strip;
}

export { readStrip, buildLayers, withN };
