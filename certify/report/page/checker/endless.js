// Evidence of kind `endless`: the answers for all n of a row (FORMAT.md, section 8.3).

import { need, exactly, listOf } from "./strict.js";
import { buildByRule, buildInstance } from "./graphs.js";
import { readStrip, withN } from "./strip.js";
import { Reader } from "./pieces.js";
import { modulusOf } from "./moduli.js";
import { sweepClass } from "./classes.js";
import { checkRecipes } from "./recipes.js";
import { SHOWS, checkOne } from "./records.js";

const MOST_COMPARED = 1000000;
const SMALL = ["witness", "obstruction", "counting", "cases", "sweep"];

// The answers for n = lo, ..., first - 1, each with evidence of its own; and their reading length.
function checkSmall(list, claim, values, lo, first) {
  need(listOf(list, "small").length === first - lo, `small has not ${first - lo} entries`);
  let length = 0;
  const answers = list.map((entry, i) => {
    const n = lo + i;
    const [answer, body, kind] = exactly(entry, ["answer", "evidence", "kind"], `small, n = ${n}`);
    need(SMALL.includes(kind) && answer === SHOWS[kind], `small, n = ${n}: this kind does not fit here`);
    const parameters = withN(claim, values, n);
    const instance = buildInstance(claim, buildByRule(claim.rule, parameters), parameters);
    length += checkOne(kind, body, instance, "", () => need(false, "small evidence has no files"));
    return answer === "exists";
  });
  return [answers, length];
}

function sameList(list, other) {
  return Array.isArray(list) && list.length === other.length && list.every((value, i) => value === other[i]);
}

// The answers of one residue as a function of i >= 0; and its reading length.
function checkClass(entry, claim, strip, values, n) {
  const what = `the class of n = ${n}`;
  const [states, preperiod, period, answers] = exactly(entry, ["states", "preperiod", "period", "answers"], what);
  const found = sweepClass(claim, strip, values, n);
  need(sameList(states, found.states), `${what}: other states`);
  need(preperiod === found.preperiod && period === found.period, `${what}: another period`);
  need(answers === found.answers.map((answer) => (answer ? "1" : "0")).join(""), `${what}: other answers`);
  const at = (i) => found.answers[i < preperiod ? i : preperiod + ((i - preperiod) % period)];
  return { at, preperiod, period, length: found.states.reduce((sum, size) => sum + size, 0) };
}

// From which n on the claimed answers are periodic, and their period.
function claimedPeriod(claim, values) {
  if (claim.answers.tree === null) return [0, 1];
  const { names: parameters, growing } = claim.endless;
  const scope = { parameters, vertices: [], coordinates: null, bare: false };
  const reader = new Reader({ scope, values, growing, long: undefined, bounds: new Map() });
  reader.truth(claim.answers.tree);
  // A condition N*n + z has one sign where n > z.
  return [Math.max(0, ...reader.conditions.map(({ high }) => high + 1)), modulusOf(reader.moduli)];
}

const multiple = (i, j) => {
  let result = i;
  while (result % j !== 0) result += i;
  return result;
};

// Compare the answers with the claimed ones for all n; beyond `start` both are periodic.
function compareAnswers(claim, values, { lo, strip, small, classes }) {
  const { each } = claim.answers;
  if (each === null) return;
  const [from, period] = claimedPeriod(claim, values);
  const { first, modulus } = strip;
  let [start, together] = [Math.max(first, from), period];
  for (const one of classes) {
    start = Math.max(start, first + modulus * (one.preperiod + 1));
    together = multiple(together, modulus * one.period);
    need(start + together - lo <= MOST_COMPARED, "more than 1,000,000 answers are to be compared");
  }
  for (let n = lo; n < start + together; n += 1) {
    const i = n - first;
    const exists = n < first ? small[n - lo] : classes[i % modulus].at(Math.floor(i / modulus));
    const claimed = each({ parameters: withN(claim, values, n) }) === "exists";
    need(claimed === exists, `n = ${n}: the claim says the opposite of what the evidence shows`);
  }
}

// Check the evidence for a row of an endless claim; returns its reading length.
//
// values: of the parameters, with lo in the place of the growing one.
function checkEndless(body, claim, values) {
  const keys = ["first", "modulus", "zone", "small", "classes", "recipes"];
  const [first, modulus, zone, smallList, classList, recipes] = exactly(body, keys, "the evidence");
  const lo = values[claim.endless.names.indexOf(claim.endless.growing)];
  const strip = readStrip(claim, values, lo);
  need(first === strip.first && modulus === strip.modulus && zone === strip.zone, "first, modulus or zone is another");
  const [small, smallLength] = checkSmall(smallList, claim, values, lo, first);
  need(listOf(classList, "classes").length === modulus, `classes has not ${modulus} entries`);
  const classes = classList.map((entry, i) => checkClass(entry, claim, strip, values, first + i));
  compareAnswers(claim, values, { lo, strip, small, classes });
  checkRecipes(recipes, claim, strip, values);
  // Accepted: every n before `first` has evidence of its own; every other n is some n(i) of a
  // residue, and its answer is that of T(i), which is one of the sets that were swept.
  return classes.reduce((sum, one) => sum + one.length, smallLength);
}

export { checkEndless };
