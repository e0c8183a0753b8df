// Files of graphs, by format: a list of { graph, names } (FORMAT.md, section 3.2).

import { need, decodeText } from "./strict.js";
import { Graph } from "./graphs.js";
import { readGraph6 } from "./graph6.js";
import { readDimacs, readEdges } from "./wordfiles.js";
import { readXml } from "./xml.js";

const GRAPHML = "http://graphml.graphdrawing.org/xmlns";
const MOST_EDGES = 2 ** 23;
const MOST_GRAPHS = 10000000;

// What each element may hold; nothing else may be there.
const HOLDS = {
  graphml: ["desc", "key", "data", "graph"],
  graph: ["desc", "data", "node", "edge"],
  node: ["desc", "data"],
  edge: ["desc", "data"],
  key: ["desc", "default"],
};

function checkElement(element) {
  const { name, space, children, hasText } = element;
  need(space === "" || space === GRAPHML, `<${name}> is in another name space`);
  if (!Object.hasOwn(HOLDS, name)) return;
  need(!hasText, `text in <${name}>`);
  for (const child of children) {
    need(HOLDS[name].includes(child.name), `<${child.name}> in <${name}>`);
    checkElement(child);
  }
}

function readGraphml(text) {
  const root = readXml(text);
  need(root.name === "graphml", "the document is no <graphml>");
  checkElement(root);
  const graphs = root.children.filter((child) => child.name === "graph");
  need(graphs.length === 1, `${graphs.length} elements <graph>`);
  const [graph] = graphs;
  need(graph.attributes.get("edgedefault") === "undirected", "the graph is not undirected");
  const numbers = new Map();
  for (const { name, attributes } of graph.children) {
    if (name !== "node") continue;
    const id = attributes.get("id") ?? "";
    need(id !== "" && !numbers.has(id), `a node without an id of its own: '${id}'`);
    numbers.set(id, numbers.size);
  }
  const n = numbers.size;
  need(n <= 10000, "more than 10,000 vertices");
  const codes = [];
  for (const { name, attributes } of graph.children) {
    if (name !== "edge") continue;
    need((attributes.get("directed") ?? "false") === "false", "a directed edge");
    const [u, v] = ["source", "target"].map((key) => numbers.get(attributes.get(key)) ?? -1);
    need(u >= 0 && v >= 0, "an edge without two nodes");
    need(u !== v, "a loop");
    codes.push(Math.min(u, v) * n + Math.max(u, v));
  }
  return { n, codes, names: [...numbers.keys()] };
}

function readOne(bytes, format) {
  const text = decodeText(bytes, "the list");
  return { dimacs: readDimacs, edges: readEdges, graphml: readGraphml }[format](text);
}

// In these every line is a graph, and only they may be large.
const isOfLines = (format) => format === "graph6" || format === "sparse6";

// Yield for each graph in a file a function that makes { graph, names }, one after the other.
function* readList(bytes, format) {
  let count = 0;
  for (const { n, codes, names } of isOfLines(format) ? readGraph6(bytes) : [readOne(bytes, format)]) {
    count += 1;
    need(count <= MOST_GRAPHS, "more than 10,000,000 graphs");
    yield () => {
      const graph = new Graph(n, codes);
      need(graph.m <= MOST_EDGES, "more than 2^23 edges");
      return { graph, names: names ?? Array.from({ length: n }, (_, v) => String(v)) };
    };
  }
  need(count > 0, "the list holds no graph");
}

export { readList, isOfLines };
