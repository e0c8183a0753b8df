// The command line for Node: node main.js [--json] FOLDER...
//
// Exit code 0: every folder is accepted; 2: wrong use; 3: something is rejected; 4: nothing is,
// but something is left open. 1 is left to crashes.

import { closeSync, fstatSync, lstatSync, openSync, readSync, statSync, constants } from "node:fs";
import { join } from "node:path";
import { Rejected, need, writeJson } from "./strict.js";
import { checkFolder } from "./folder.js";

const USAGE = "usage: node main.js [--json] FOLDER ...";
const PIECE = 2 ** 28;

// Read a regular file that no symbolic link inside the folder leads to.
function readFile(folder, name, most) {
  const parts = name.split("/");
  parts.forEach((_, i) => {
    const info = lstatSync(join(folder, ...parts.slice(0, i + 1)), { throwIfNoEntry: false });
    need(info !== undefined, `${name} is missing`);
    need(i < parts.length - 1 ? info.isDirectory() : info.isFile(), `${name} is not a regular file`);
  });
  const handle = openSync(join(folder, name), constants.O_RDONLY | constants.O_NOFOLLOW);
  try {
    const { size } = fstatSync(handle);
    need(size <= most, `${name} is too long`);
    const bytes = new Uint8Array(size);
    let at = 0;
    for (let count = -1; at < size && count !== 0; at += count) {
      count = readSync(handle, bytes, at, Math.min(PIECE, size - at), at);
    }
    need(at === size, `${name} has changed while it was read`);
    return bytes;
  } finally {
    closeSync(handle);
  }
}

function readerIn(folder) {
  return (name, most) => {
    try {
      return readFile(folder, name, most);
    } catch (error) {
      if (error instanceof Rejected || error.code === undefined) throw error;
      throw new Rejected(`${name} cannot be read: ${error.code}`);
    }
  };
}

function asLine(folder, item) {
  const { answer, instance, kind, reason, verdict } = item;
  return writeJson(new Map(Object.entries({ answer, folder, instance, kind, reason, verdict })));
}

function instanceName(instance) {
  if (typeof instance === "number") return String(instance);
  return [...instance].map(([name, value]) => `${name}=${value}`).join(",") || "only";
}

async function checkOne(folder, asJson) {
  for await (const item of checkFolder(readerIn(folder))) {
    if (item.final) {
      const { accepted, instances, exists, impossible, settled } = item;
      const each = `${exists} exist, ${impossible} impossible${settled > 0 ? `, ${settled} settled for all n` : ""}`;
      const sums = `${accepted} of ${instances} instances accepted (${each})`;
      const text = `${folder}: ${item.verdict}: ${item.reason === null ? "" : `${item.reason}; `}${sums}`;
      if (!asJson) process.stdout.write(`${text}\n`);
      else if (item.verdict === "rejected") process.stderr.write(`${text}\n`);
      return item;
    }
    if (asJson) process.stdout.write(`${asLine(folder, item)}\n`);
    else if (item.verdict === "rejected") {
      process.stdout.write(`${folder}: rejected: instance ${instanceName(item.instance)}: ${item.reason}\n`);
    }
  }
  throw new Error("the checker gave no verdict");
}

async function main(words) {
  const asJson = words.includes("--json");
  const folders = words.filter((word) => word !== "--json");
  const wrong = folders.find((folder) => !statSync(folder, { throwIfNoEntry: false })?.isDirectory());
  if (folders.length === 0 || wrong !== undefined) {
    process.stderr.write(`${wrong === undefined ? "" : `${wrong}: not a folder\n`}${USAGE}\n`);
    return 2;
  }
  let code = 0;
  for (const folder of folders) {
    const { verdict, onlyOpen } = await checkOne(folder, asJson);
    if (verdict === "rejected") code = onlyOpen && code !== 3 ? 4 : 3;
  }
  return code;
}

process.exitCode = await main(process.argv.slice(2));
