// For the tests: what the checker in JavaScript sees in claims and in lists of graphs.
//
// Standard input is a list of { claim, format, files } with contents in base64; standard output
// is the list of what is seen: "refused", or the instances (of a claim), or the graphs.

import { readFileSync } from "node:fs";
import { buildByRule, buildInstance } from "../../certify/report/page/checker/graphs.js";
import { readClaim } from "../../certify/report/page/checker/claims.js";
import { readStrip } from "../../certify/report/page/checker/strip.js";
import { readList } from "../../certify/report/page/checker/lists.js";
import { Rejected } from "../../certify/report/page/checker/strict.js";

const bytes = (text) => new Uint8Array(Buffer.from(text, "base64"));
const pairs = (graph) => Array.from(graph.low, (u, e) => [u, graph.high[e]]);

function seenList(data, format) {
  return [...readList(data, format)].map((build) => {
    const { graph, names } = build();
    return [names, pairs(graph)];
  });
}

// A row of an endless claim: its values, and what makes it a strip.
function seenStrip(claim, values) {
  const place = claim.endless.names.indexOf(claim.endless.growing);
  try {
    const { first, modulus, zone } = readStrip(claim, values, values[place]);
    return [first, modulus, zone];
  } catch (error) {
    if (!(error instanceof Rejected)) throw error;
    return "refused";
  }
}

function seenClaim({ claim: text, files }) {
  const claim = readClaim(bytes(text));
  if (claim.endless !== null) return ["endless", claim.rows.map((values) => seenStrip(claim, values))];
  let instances;
  if (claim.list === null) {
    instances = claim.rows.map((values) => [values, () => buildByRule(claim.rule, values)]);
  } else {
    const { name, format } = claim.list;
    if (!(name in files)) throw new Rejected("no such file");
    instances = [...readList(bytes(files[name]), format)].map((build, i) => [[i + 1], build]);
  }
  const rows = instances.map(([values, build]) => {
    const { names, ...given } = build();
    const parameters = claim.list === null ? values : [];
    const built = buildInstance(claim, { names, ...given }, parameters);
    const { graph, absent, isCycle, question } = built;
    const row = [values, names, pairs(graph), absent, isCycle];
    const asked = question && [question.n, pairs(question.graph), pairs(question.graph).filter((_, e) => question.required[e])];
    const claimed = claim.answers.each?.({ parameters }) ?? null;
    return [...row, asked, claimed && claimed === "exists"];
  });
  return [rows, Object.fromEntries(claim.answers.counts)];
}

const found = JSON.parse(readFileSync(0, "utf8")).map((task) => {
  try {
    return "format" in task ? seenList(bytes(task.data), task.format) : seenClaim(task);
  } catch (error) {
    if (!(error instanceof Rejected)) throw error;
    return "refused";
  }
});
process.stdout.write(JSON.stringify(found));
