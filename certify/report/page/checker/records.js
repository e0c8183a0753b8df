// One record: its line, its keys, and the evidence by kind (FORMAT.md, sections 5 to 7).

import { Rejected, need, exactly, isInteger, readCanonical } from "./strict.js";
import { checkWitness } from "./witness.js";
import { checkObstruction } from "./obstruction.js";
import { checkCounting } from "./counting.js";
import { checkCases } from "./cases.js";
import { checkSweep } from "./sweep.js";
import { checkClauses } from "./clauses.js";

const KEYS = ["answer", "edges", "evidence", "instance", "kind", "length", "vertices"];

// What each kind of evidence shows.
const SHOWS = {
  witness: "exists",
  obstruction: "impossible",
  counting: "impossible",
  cases: "impossible",
  sweep: "impossible",
  clauses: "impossible",
  endless: "settled",
  none: "open",
};

// Thrown for a record that is right as it is, but leaves its instance open.
class LeftOpen extends Rejected {}

function readRecord(line) {
  const text = new TextDecoder("latin1").decode(line);
  need(/^[\x00-\x7f]*$/.test(text), "the line is not ASCII");
  const record = readCanonical(text);
  exactly(record, KEYS, "the record");
  return record;
}

function countIntegers(value) {
  if (isInteger(value)) return 1;
  const parts = value instanceof Map ? [...value.values()] : Array.isArray(value) ? value : [];
  return parts.reduce((sum, part) => sum + countIntegers(part), 0);
}

// How long the evidence is to read.
function readingLength(kind, body, instance) {
  switch (kind) {
    case "witness":
      return instance.graph.n;
    case "cases":
      return countIntegers(body) + body.get("nodes").length;
    case "sweep":
      return body.get("states").reduce((sum, count) => sum + count, 0);
    case "clauses":
      return body.get("clauses") + body.get("steps");
    case "none":
      return 0;
    default:
      return countIntegers(body);
  }
}

function checkEvidence(kind, body, instance, key, read) {
  const { absent, question } = instance;
  if (kind === "witness") checkWitness(body, instance);
  else if (kind === "obstruction") checkObstruction(body, instance);
  else {
    need(!absent && question.n >= 3, "only the obstructions absent and small fit here");
    if (kind === "counting") checkCounting(body, question);
    else if (kind === "cases") checkCases(body, question);
    else if (kind === "sweep") checkSweep(body, question);
    else checkClauses(body, question, key, read);
  }
}

// Check the evidence for one graph, and return its reading length; `clauses` need files.
function checkOne(kind, body, instance, key, read) {
  checkEvidence(kind, body, instance, key, read);
  return readingLength(kind, body, instance);
}

// Check a record whose instance is already known to be the right one.
//
// instance: from buildInstance, or null for a row of an endless claim; key: KEY of section 1; read:
// name -> bytes of a listed file; endless: a function of the evidence for a row, which returns its
// reading length.
function checkRecord(record, instance, { key, read, endless }) {
  const [answer, edges, body, , kind, length, vertices] = exactly(record, KEYS, "the record");
  need(typeof kind === "string" && Object.hasOwn(SHOWS, kind), "the kind of evidence is unknown");
  need(answer === SHOWS[kind], `'${kind}' is no evidence for this answer`);
  const [n, m] = instance === null ? [0, 0] : [instance.graph.n, instance.graph.m];
  need(vertices === n, `the graph has ${n} vertices`);
  need(edges === m, `the graph has ${m} edges`);
  if (kind === "none") {
    need(exactly(body, [], "the evidence").length === 0 && length === 0, "an open record holds no evidence");
    throw new LeftOpen("left open: no evidence was found within the limits of the search");
  }
  need((kind === "endless") === (instance === null), "this kind of evidence does not fit here");
  const found = instance === null ? endless(body) : checkOne(kind, body, instance, key, read);
  need(length === found, "the reading length is another");
}

export { LeftOpen, SHOWS, readRecord, checkOne, checkRecord };
