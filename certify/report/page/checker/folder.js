// The front door: a folder of evidence (FORMAT.md, sections 1 and 5).
//
//   for await (const item of checkFolder(read)) ...
//
// `read(name, most)` returns the bytes of a file, or throws Rejected when it is missing, is no
// regular file, or has more than `most` bytes. Items are { instance, answer, kind, verdict,
// reason }, one for each instance, in order; the last item is the verdict on the whole:
// { final: true, verdict, reason, instances, accepted, exists, impossible, settled, onlyOpen }. No
// acceptance of the whole is given before everything has been read.

import { Rejected, need, readJson, writeJson, exactly, decodeText } from "./strict.js";
import { Sha256 } from "./sha256.js";
import { readClaim } from "./claims.js";
import { buildByRule, buildInstance } from "./graphs.js";
import { readList, isOfLines } from "./lists.js";
import { unpackPieces } from "./inflate.js";
import { LeftOpen, readRecord, checkRecord } from "./records.js";
import { checkEndless } from "./endless.js";

const MANIFEST = "manifest.json";
const EVIDENCE = "evidence.jsonl";
const PACKED = "evidence.jsonl.gz";
const KEPT = [MANIFEST, EVIDENCE, PACKED];
const MOST_FILE = 2 ** 28;
const MOST_LARGE = 2 ** 32;
const MOST_LINE = 2 ** 26;

// Relative, with `/` between parts; all characters are printable, and none is `\` or `:`.
function checkName(name) {
  const parts = name.split("/");
  need(parts.every((part) => part !== "" && part !== "." && part !== ".."), `'${name}' is no file name`);
  need(!/[\\:]|(?! )[\p{C}\p{Z}]/u.test(name), `'${name}' has a character that no file name has`);
  return name;
}

function readManifest(bytes) {
  const value = readJson(decodeText(bytes, MANIFEST));
  const [claim, format, digests] = exactly(value, ["claim", "format", "sha256"], MANIFEST);
  need(format === 1, "the format is not 1");
  need(typeof claim === "string" && !checkName(claim).includes("/"), "the claim's name has one part");
  need(digests instanceof Map, "sha256 is not an object");
  for (const [name, digest] of digests) {
    checkName(name);
    need(typeof digest === "string" && /^[0-9a-f]{64}$/.test(digest), `${name}: not a SHA-256 digest`);
  }
  need(!KEPT.includes(claim) && !digests.has(MANIFEST), "the files are not different ones");
  // One file of evidence, so that no two readers read two different ones.
  need(digests.has(EVIDENCE) !== digests.has(PACKED), `not one of ${EVIDENCE} and ${PACKED} is listed`);
  return { claim, digests };
}

// The files that the manifest lists, all of them with the digest it says.
class Files {
  constructor(read) {
    const { claim, digests } = readManifest(read(MANIFEST, MOST_LINE));
    Object.assign(this, { claim, digests, read, contents: new Map(), used: new Set() });
    this.evidence = digests.has(PACKED) ? PACKED : EVIDENCE;
  }

  take(name, most) {
    if (this.contents.has(name)) return;
    const bytes = this.read(name, most);
    need(new Sha256().update(bytes).hex() === this.digests.get(name), `${name} has changed since the manifest was written`);
    this.contents.set(name, bytes);
  }

  // Take all of them; `large` is the list, if it may be large.
  takeAll(large) {
    for (const name of this.digests.keys()) {
      this.take(name, name === large || name === this.evidence ? MOST_LARGE : MOST_FILE);
    }
  }

  get(name) {
    need(this.digests.has(name), `${name} is not listed in ${MANIFEST}`);
    this.used.add(name);
    this.take(name, MOST_FILE);
    return this.contents.get(name);
  }

  lines() {
    const bytes = this.get(this.evidence);
    return linesOf(this.evidence === PACKED ? unpackPieces(bytes, MOST_LARGE) : [bytes]);
  }

  checkAllUsed() {
    for (const name of this.digests.keys()) need(this.used.has(name), `${name} belongs to nothing`);
  }
}

function join(parts) {
  if (parts.length === 1) return parts[0];
  const whole = new Uint8Array(parts.reduce((sum, part) => sum + part.length, 0));
  let at = 0;
  for (const part of parts) {
    whole.set(part, at);
    at += part.length;
  }
  return whole;
}

// The lines of a text that comes in pieces; a line without an end, or too long, is handed out as
// null. Of a line too long nothing is kept.
function* linesOf(pieces) {
  let [parts, length] = [[], 0];
  for (const piece of pieces) {
    for (let at = 0; at < piece.length; ) {
      const end = piece.indexOf(10, at);
      const part = piece.subarray(at, end < 0 ? piece.length : end);
      length += part.length;
      parts = length < MOST_LINE ? [...parts, part] : [];
      at += part.length + 1;
      if (end >= 0) {
        yield length < MOST_LINE ? join(parts) : null;
        [parts, length] = [[], 0];
      }
    }
  }
  if (length > 0) yield null;
}

// The name of the claim's list, null if it has none.
function listName(claim, files) {
  if (claim.list === null) return null;
  need(checkName(claim.list.name) !== files.claim && !KEPT.includes(claim.list.name), "the files are not different ones");
  return claim.list.name;
}

// Yield the instances: { name, key, values, build }; `name` is written as in a record.
function* listInstances(claim, files) {
  if (claim.list !== null) {
    let place = 0;
    for (const build of readList(files.get(claim.list.name), claim.list.format)) {
      place += 1;
      yield { name: place, key: String(place), values: [], build };
    }
    return;
  }
  const growing = claim.endless?.growing;
  yield* claim.rows.map((values) => {
    const text = (parameter, i) => (parameter === growing ? `${values[i]}..` : values[i]);
    const name = new Map(claim.parameters.map((parameter, i) => [parameter, text(parameter, i)]));
    const sorted = [...claim.parameters].sort().map((parameter) => `${parameter}=${name.get(parameter)}`);
    return { name, key: sorted.join(",") || "only", values, build: () => buildByRule(claim.rule, values) };
  });
}

// A verdict on one instance. An error of the claim is not caught: it is one of the folder.
function checkInstance(instance, line, claim, files) {
  const isEndless = claim.endless !== null;
  const built = isEndless ? null : buildInstance(claim, instance.build(), instance.values);
  const claimed = isEndless ? undefined : claim.answers.each?.({ parameters: instance.values });
  const item = { instance: instance.name, answer: "open", kind: "none", verdict: "rejected", reason: "" };
  try {
    need(line !== undefined, "there is no record of it");
    need(line !== null, "the line has no end, or is too long");
    const record = readRecord(line);
    need(writeJson(record.get("instance")) === writeJson(instance.name), "the record is of another instance");
    for (const key of ["answer", "kind"]) {
      need(typeof record.get(key) === "string", `'${key}' is not a text`);
      item[key] = record.get(key);
    }
    const endless = (body) => checkEndless(body, claim, instance.values);
    checkRecord(record, built, { key: instance.key, read: (name) => files.get(name), endless });
    need(claimed === undefined || claimed === item.answer, `the claim says ${claimed}, and the evidence shows ${item.answer}`);
    // Accepted: the record is of this instance, its evidence shows its answer, and the claim
    // says no other.
    return { ...item, verdict: "accepted", reason: `${item.kind} checked` };
  } catch (error) {
    if (!(error instanceof Rejected)) throw error;
    return { ...item, reason: error.message, open: error instanceof LeftOpen };
  }
}

async function* checkFolder(read) {
  const sums = { instances: 0, accepted: 0, exists: 0, impossible: 0, settled: 0 };
  let onlyOpen = true;
  try {
    const files = new Files(read);
    const claim = readClaim(files.get(files.claim));
    files.takeAll(claim.list !== null && isOfLines(claim.list.format) ? listName(claim, files) : null);
    listName(claim, files);
    const lines = files.lines();
    sums.instances = claim.rows?.length ?? 0;
    for (const instance of listInstances(claim, files)) {
      if (claim.list !== null) sums.instances += 1;
      const { open = false, ...item } = checkInstance(instance, lines.next().value, claim, files);
      if (item.verdict === "accepted") {
        sums.accepted += 1;
        sums[item.answer] += 1;
      } else onlyOpen &&= open;
      yield item;
    }
    need(lines.next().done, `${files.evidence}: a line too many`);
    const rest = sums.accepted < sums.instances ? "an instance is not accepted" : null;
    if (rest !== null && !onlyOpen) throw new Rejected(rest);
    checkCounts(claim.answers.counts, sums, sums.instances - sums.accepted);
    files.checkAllUsed();
    if (rest !== null) throw new LeftOpen(rest);
    // Accepted, here and nowhere else: every instance has exactly one record, in order, every
    // record is accepted, the answers agree with the claim, and every listed file was needed.
    yield { final: true, verdict: "accepted", reason: null, onlyOpen: false, ...sums };
  } catch (error) {
    if (!(error instanceof Rejected)) throw error;
    yield { final: true, verdict: "rejected", reason: error.message, onlyOpen: error instanceof LeftOpen, ...sums };
  }
}

// Counts are wrong, whatever the answers to what is open will be, when they need fewer than are
// shown, or more than are open.
function checkCounts(counts, sums, open) {
  let missing = 0;
  for (const [answer, count] of counts) {
    need(
      sums[answer] <= count && count <= sums[answer] + open,
      `the claim says ${answer} for ${count} instances, and the evidence shows it for ${sums[answer]}`,
    );
    missing += count - sums[answer];
  }
  need(counts.size < 2 || missing === open, "the counts of the claim do not add up to the number of instances");
}

// `read` for files that are already there: an object or a Map of name -> Uint8Array.
function readerOf(files) {
  const known = files instanceof Map ? files : new Map(Object.entries(files));
  return (name, most) => {
    need(known.has(name), `${name} is missing`);
    need(known.get(name).length <= most, `${name} is too long`);
    return known.get(name);
  };
}

export { checkFolder, readerOf };
