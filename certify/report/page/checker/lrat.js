// The derivation: lines `ID LITERALS 0 HINTS 0`, each a consequence by unit propagation of the
// lines its hints name (LRAT; Cruz-Filipe, Heule, Hunt, Kaufmann and Schneider-Kamp, CADE 2017,
// here without deletions and RAT steps). The DRAT file says the same without IDs and hints.

import { need } from "./strict.js";

// Reads numbers from lines of bytes: plain digits, single spaces, line ends.
class Lines {
  constructor(bytes, what) {
    Object.assign(this, { bytes, what, at: 0, line: 1, ended: true });
  }

  fail(reason) {
    need(false, `${this.what}:${this.line}: ${reason}`);
  }

  // The next number of the line; `ended` says whether it is the last one.
  number() {
    const { bytes } = this;
    const negative = bytes[this.at] === 45;
    if (negative) this.at += 1;
    const from = this.at;
    let value = 0;
    while (bytes[this.at] >= 48 && bytes[this.at] <= 57) value = 10 * value + bytes[this.at++] - 48;
    const digits = this.at - from;
    if (digits < 1 || digits > 18) this.fail("a number is missing or too long");
    if (bytes[from] === 48 && (digits > 1 || negative)) this.fail("a number is not written plainly");
    const end = bytes[this.at++];
    if (end !== 32 && end !== 10) this.fail("a space or the end of the line is missing");
    this.ended = end === 10;
    return negative ? -value : value;
  }

  // Numbers up to a 0 into `list`.
  upToZero(list) {
    list.length = 0;
    for (let value = this.number(); value !== 0; value = this.number()) {
      if (this.ended) this.fail("the line ends without a 0");
      list.push(value);
    }
    return list;
  }
}

// Propagates over the clauses so far. `falseAt[middle + x]` is the last step in which the
// literal x was false.
class Propagator {
  constructor(variables) {
    this.middle = variables;
    this.falseAt = new Int32Array(2 * variables + 1);
    this.step = 0;
    this.clauses = [null];
  }

  start() {
    this.step += 1;
  }

  isSet(variable) {
    const { middle, falseAt, step } = this;
    return falseAt[middle + variable] === step || falseAt[middle - variable] === step;
  }

  makeFalse(literal) {
    this.falseAt[this.middle + literal] = this.step;
  }

  // Use a clause: 0 when all its literals are false; its only other literal when that is open
  // (it becomes true); and null when it says nothing.
  use(id) {
    const { middle, falseAt, step } = this;
    const clause = this.clauses[id];
    let unit = 0;
    for (let i = 0; i < clause.length; i += 1) {
      const literal = clause[i];
      if (falseAt[middle + literal] === step) continue;
      if (unit !== 0 || falseAt[middle - literal] === step) return null;
      unit = literal;
    }
    if (unit !== 0) falseAt[middle - unit] = step;
    return unit;
  }
}

function checkLine(lines, propagator, variables, last) {
  const id = lines.number();
  if (lines.ended || id !== propagator.clauses.length) lines.fail("another ID is needed");
  const literals = lines.upToZero([]);
  if (lines.ended) lines.fail("there are no hints");
  propagator.start();
  for (const literal of literals) {
    if (Math.abs(literal) > variables) lines.fail("an unknown variable");
    if (propagator.isSet(literal)) lines.fail("two literals of one variable");
    propagator.makeFalse(literal);
  }
  if (last !== (literals.length === 0)) lines.fail("the last line, and no other, has no literals");
  const hints = lines.upToZero([]);
  if (!lines.ended) lines.fail("something follows the hints");
  if (hints.length === 0) lines.fail("there are no hints");
  hints.forEach((hint, i) => {
    if (hint < 1 || hint >= id) lines.fail("a hint is no earlier ID");
    const unit = propagator.use(hint);
    const wanted = i < hints.length - 1 ? unit !== null && unit !== 0 : unit === 0;
    if (!wanted) lines.fail(`the hint ${hint} is not ${i < hints.length - 1 ? "unit" : "false"}`);
  });
  // Accepted: with all its literals false, the hints contradict each other; so the line follows.
  propagator.clauses.push(Int32Array.from(literals));
  return literals;
}

// clauses: the facts' clauses; steps: the number of lines that the record states.
function checkDerivation({ clauses, variables, steps, lrat, drat }) {
  const propagator = new Propagator(variables);
  for (const clause of clauses) propagator.clauses.push(Int32Array.from(clause));
  const lines = new Lines(lrat, "lrat");
  const plain = new Lines(drat, "drat");
  need(Number.isInteger(steps) && steps >= 1, "the number of steps is not one");
  const again = [];
  for (let step = 1; step <= steps; step += 1) {
    need(lines.at < lrat.length, "lrat: fewer lines than the record states");
    const literals = checkLine(lines, propagator, variables, step === steps);
    lines.line += 1;
    need(plain.at < drat.length, "drat: fewer lines than the derivation");
    plain.upToZero(again);
    const same = plain.ended && again.length === literals.length && again.every((x, i) => x === literals[i]);
    if (!same) plain.fail("not the line of the derivation");
    plain.line += 1;
  }
  // Accepted: the last line is the empty clause, and nothing is left unread.
  need(lines.at === lrat.length, "lrat: more lines than the record states");
  need(plain.at === drat.length, "drat: more lines than the derivation");
}

export { checkDerivation };
