// Evidence of kind `clauses`: facts about H as clauses, and a derivation of the empty clause
// (FORMAT.md, section 6). Here: the facts and the text of their clauses.

import { need, exactly, sortedVertices, permutation } from "./strict.js";
import { edgeMap } from "./cases.js";
import { gunzip } from "./inflate.js";
import { checkDerivation } from "./lrat.js";

const MOST_TEXT = 2 ** 28;

// The bytes of a gzip file of ASCII lines that all have an end.
function unpack(bytes, what) {
  const text = gunzip(bytes, MOST_TEXT);
  need(text.every((byte) => byte < 128), `${what} is not ASCII`);
  need(text.length > 0 && text[text.length - 1] === 10, `${what}: the last line has no end`);
  return text;
}

// Writes the clauses of facts; variables 1..m are the edges of Q, later ones are new.
class Writer {
  constructor(question) {
    this.question = question;
    this.variables = question.graph.m;
    this.clauses = [];
  }

  fresh() {
    this.variables += 1;
    return this.variables;
  }

  add(...literals) {
    this.clauses.push(literals);
  }

  // H has exactly two edges at v.
  degree(v) {
    const e = this.question.graph.edgesAt[v].map((edge) => edge + 1);
    if (e.length > 6) this.longDegree(e);
    else {
      for (const left of e) this.add(...e.filter((edge) => edge !== left));
      for (let i = 0; i < e.length; i += 1) {
        for (let j = i + 1; j < e.length; j += 1) for (const f of e.slice(j + 1)) this.add(-e[i], -e[j], -f);
      }
    }
  }

  // s[i]: one of e_1..e_i is used; t[i]: two of them are.
  longDegree(edges) {
    const d = edges.length;
    const e = [0, ...edges];
    const [s, t] = [[0, e[1]], []];
    for (let i = 2; i <= d; i += 1) {
      if (i < d) s[i] = this.fresh();
      t[i] = this.fresh();
    }
    for (let i = 2; i <= d; i += 1) {
      if (i < d) {
        this.add(-s[i - 1], s[i]);
        this.add(-e[i], s[i]);
        this.add(-s[i], s[i - 1], e[i]);
      }
      const before = i > 2 ? [t[i - 1]] : [];
      this.add(-t[i], ...before, s[i - 1]);
      this.add(-t[i], ...before, e[i]);
      if (i > 2) {
        this.add(-t[i - 1], t[i]);
        this.add(-t[i - 1], -e[i]);
      }
      this.add(-s[i - 1], -e[i], t[i]);
    }
    this.add(t[d]);
  }

  // H leaves the set.
  cut(set) {
    const { graph } = this.question;
    const inside = new Uint8Array(graph.n);
    for (const v of set) inside[v] = 1;
    const leaving = [];
    for (let e = 0; e < graph.m; e += 1) if (inside[graph.low[e]] !== inside[graph.high[e]]) leaving.push(e + 1);
    this.add(...leaving);
  }

  // If there is any H, take the one whose edge vector is least among its images under the group
  // that the mirrors generate: it is no larger than its image, whose entry i is that of q(i).
  mirror(k, map) {
    const inverse = new Int32Array(map.length);
    map.forEach((image, e) => {
      inverse[image] = e;
    });
    const moved = [];
    for (let i = 0; i < map.length && moved.length < k; i += 1) if (inverse[i] !== i) moved.push(i);
    const g = moved.slice(1).map(() => this.fresh());
    moved.forEach((i, j) => {
      const [x, y] = [i + 1, inverse[i] + 1];
      const before = j > 0 ? [-g[j - 1]] : [];
      this.add(...before, -x, y);
      if (j === moved.length - 1) return;
      this.add(...before, -x, g[j]);
      this.add(...before, y, g[j]);
    });
  }

  text(facts) {
    const lines = facts.map((fact) => `${fact}\n`);
    lines.push(`p cnf ${this.variables} ${this.clauses.length}\n`);
    for (const clause of this.clauses) lines.push([...clause, 0].join(" "), "\n");
    return lines.join("");
  }
}

// Number texts that are written plainly.
function numbers(words, what) {
  return words.map((word) => {
    need(/^(?:0|[1-9][0-9]{0,17})$/.test(word), `${what}: '${word}' is not a number`);
    return Number(word);
  });
}

const KINDS = ["degree", "cut", "required", "mirror"];

// Add the clauses of one fact; `last` has the order of the fact before.
function addFact(line, writer, last) {
  const { question } = writer;
  const { graph, n } = question;
  const [, , kind, ...words] = line.split(" ");
  const rank = KINDS.indexOf(kind);
  need(line.startsWith("c fact ") && rank >= 0, `'${line.slice(0, 40)}' is no fact`);
  const values = numbers(words, line.slice(0, 40));
  need(rank >= last.rank, "the facts are not in order");
  const after = rank > last.rank ? -1 : last.place;
  let place = -1;
  if (kind === "degree") {
    need(values.length === 1 && values[0] < n && values[0] > after, "degree: vertices out of order");
    [place] = values;
    need(graph.degree(place) >= 2, "degree: fewer than two edges");
    writer.degree(place);
  } else if (kind === "cut") {
    need(sortedVertices(values, n, "cut").length > 0 && values.length < n, "cut: nothing or everything");
    writer.cut(values);
  } else if (kind === "required") {
    const [u, v] = values;
    need(values.length === 2 && u < v && v < n, "required: not an edge");
    place = graph.edgeBetween(u, v);
    need(place > after && question.required[place] === 1, "required: edges not in R, or out of order");
    writer.add(place + 1);
  } else {
    const [k, ...p] = values;
    need(k >= 1, "mirror: k is at least 1");
    writer.mirror(k, edgeMap(permutation(p, n, "mirror"), question, "mirror"));
  }
  return { rank, place };
}

// Read the facts above the line p and compare the whole file with what follows from them.
function readFacts(bytes, question) {
  const text = new TextDecoder("latin1").decode(bytes);
  const writer = new Writer(question);
  const facts = [];
  let last = { rank: 0, place: -1 };
  for (let at = 0; text.startsWith("c", at); ) {
    const end = text.indexOf("\n", at);
    facts.push(text.slice(at, end));
    last = addFact(facts[facts.length - 1], writer, last);
    at = end + 1;
  }
  need(writer.text(facts) === text, "the CNF file is not what follows from its facts");
  return writer;
}

// body: the evidence; names: what its three files must be called; read: name -> bytes.
function checkClauses(body, question, key, read) {
  const [count, steps, ...names] = exactly(body, ["clauses", "steps", "cnf", "lrat", "drat"], "the clauses");
  const endings = ["cnf", "lrat", "drat"];
  endings.forEach((ending, i) => need(names[i] === `clauses/${key}.${ending}.gz`, `${ending}: another name is needed`));
  const [cnf, lrat, drat] = names.map((name, i) => unpack(read(name), endings[i]));
  const { variables, clauses } = readFacts(cnf, question);
  need(count === clauses.length, `${clauses.length} clauses, and the record says ${count}`);
  // Accepted: every clause holds for H, or for the H that was chosen among its images, and
  // together they imply the empty clause.
  checkDerivation({ clauses, variables, steps, lrat, drat });
}

export { checkClauses };
