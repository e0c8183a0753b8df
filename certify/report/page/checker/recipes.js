// Recipes of an endless claim: witnesses that can be made longer (FORMAT.md, section 8.3).

import { need, exactly, listOf } from "./strict.js";
import { buildInstance } from "./graphs.js";
import { checkWitness } from "./witness.js";
import { buildLayers, withN } from "./strip.js";

// Edges { x, y, from, to }: the layers of the ends, x <= y, and their places.
function edgesOf(order, { layer, rest }, isCycle) {
  const count = isCycle ? order.length : order.length - 1;
  return Array.from({ length: count }, (_, i) => {
    const [u, v] = [order[i], order[(i + 1) % order.length]];
    const [low, high] = layer[u] <= layer[v] ? [u, v] : [v, u];
    return { x: layer[low], y: layer[high], from: rest[low], to: rest[high] };
  });
}

// Repeat the q layers after the cut k times.
function longer(edges, { cut, step, k, zone, total }) {
  const moved = (edge, low, high) => ({ ...edge, x: edge.x + low * step, y: edge.y + high * step });
  return edges.flatMap((edge) => {
    if (edge.x < zone && edge.y >= total - zone) return [moved(edge, 0, k)];
    if (edge.x <= cut) return [edge];
    if (edge.x > cut + step) return [moved(edge, k, k)];
    return Array.from({ length: k + 1 }, (_, j) => moved(edge, j, j));
  });
}

// The order of the vertices along edges that form one path or cycle.
function orderOf(edges, { layer, rest }, isCycle) {
  const numbers = new Map(layer.map((x, v) => [`${x} ${rest[v]}`, v]));
  const near = layer.map(() => []);
  for (const { x, y, from, to } of edges) {
    const [u, v] = [numbers.get(`${x} ${from}`), numbers.get(`${y} ${to}`)];
    need(u !== undefined && v !== undefined && u !== v, "recipe: a vertex that is not there");
    near[u].push(v);
    near[v].push(u);
  }
  need(edges.length === layer.length - (isCycle ? 0 : 1) && near.every((list) => list.length <= 2), "recipe: no path or cycle");
  const start = Math.max(0, near.findIndex((list) => list.length < 2));
  const order = [start];
  for (let [last, place] = [-1, start]; ; ) {
    const next = near[place].find((v, i) => v !== last && (last !== -1 || i === 0));
    if (next === undefined || next === start) return order;
    order.push(next);
    [last, place] = [place, next];
  }
}

function checkRecipe(recipe, claim, strip, values) {
  const [cut, n, order, step] = exactly(recipe, ["cut", "n", "order", "step"], "the recipe");
  for (const number of [cut, n, step]) need(Number.isInteger(number) && number >= 0, "recipe: not a number");
  need(n >= strip.first, "recipe: n is before the first");
  need(step > 0 && step % strip.modulus === 0, "recipe: the step is no multiple of the modulus");
  const witness = (layers, at, found) => {
    const built = { graph: layers.graph, names: layers.layer.map((_, v) => String(v)) };
    checkWitness(new Map([["order", found]]), buildInstance(claim, built, withN(claim, values, at)));
  };
  const layers = buildLayers(claim, strip, values, n);
  const isCycle = claim.structure === "hamiltonian-cycle";
  witness(layers, n, order);
  const edges = edgesOf(order, layers, isCycle);
  for (const k of [1, 2]) {
    const large = buildLayers(claim, strip, values, n + k * step);
    const more = longer(edges, { cut, step, k, zone: strip.zone, total: layers.total });
    witness(large, n + k * step, orderOf(more, large, isCycle));
  }
}

const MOST_RECIPES = 20;

function checkRecipes(recipes, claim, strip, values) {
  need(listOf(recipes, "recipes").length <= MOST_RECIPES, "more than 20 recipes");
  for (const recipe of recipes) checkRecipe(recipe, claim, strip, values);
}

export { checkRecipes };
