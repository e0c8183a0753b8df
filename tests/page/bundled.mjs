// For the tests: the joined script as a page runs it, in a context with nothing of Node's.
//
// Arguments: the script, then folders. Output: the verdicts on all instances, and on the whole.

import { readFileSync, readdirSync } from "node:fs";
import { join } from "node:path";
import vm from "node:vm";

const [script, ...folders] = process.argv.slice(2);
const context = vm.createContext({ TextDecoder, TextEncoder });
vm.runInContext(readFileSync(script, "utf8"), context);
const { checkFolder, readerOf } = vm.runInContext("({ checkFolder, readerOf })", context);

const all = [];
for (const folder of folders) {
  const files = {};
  for (const entry of readdirSync(folder, { recursive: true, withFileTypes: true })) {
    const path = join(entry.parentPath ?? entry.path, entry.name);
    if (entry.isFile()) files[path.slice(folder.length + 1)] = new Uint8Array(readFileSync(path));
  }
  const items = [];
  for await (const { final, answer, kind, verdict } of checkFolder(readerOf(files))) {
    items.push(final ? verdict : [answer, kind, verdict]);
  }
  all.push(items);
}
process.stdout.write(JSON.stringify(all));
