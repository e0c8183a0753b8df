// Lists of edges in words: DIMACS, and plain lists of names (FORMAT.md, section 3.2).

import { need } from "./strict.js";

// The lines as lists of words; what follows the last line end is a line if it is not empty.
function wordLines(text) {
  const lines = text.replace(/\r\n/g, "\n").split("\n");
  if (lines[lines.length - 1] === "") lines.pop();
  return lines.map((line, i) => {
    need(!/[\p{Zs}\p{Zl}\p{Zp}\p{Cc}\ufeff]/u.test(line.replace(/[ \t]/g, "")), `line ${i + 1}: white space or a control character`);
    return line;
  });
}

const wordsOf = (line) => line.split(/[ \t]+/).filter((word) => word !== "");

function readDimacs(text) {
  let n = -1;
  let wanted = 0;
  const codes = [];
  let edges = 0;
  wordLines(text).forEach((line, i) => {
    const what = `line ${i + 1}`;
    const [kind, ...words] = wordsOf(line);
    const number = (word) => {
      need(/^[0-9]{1,12}$/.test(word), `${what}: '${word}' is not a number`);
      return Number(word);
    };
    if (kind === "c") return;
    if (kind === "p") {
      need(n < 0 && words.length === 3 && (words[0] === "edge" || words[0] === "col"), `${what}: a broken or second line p`);
      [n, wanted] = words.slice(1).map(number);
      need(n <= 10000, `${what}: more than 10,000 vertices`);
      return;
    }
    need(kind === "e" && n >= 0 && words.length === 2, `${what}: none of c, p, and, after p, e`);
    const [u, v] = words.map(number);
    need(u >= 1 && u <= n && v >= 1 && v <= n, `${what}: not a vertex`);
    need(u !== v, `${what}: a loop`);
    edges += 1;
    codes.push((Math.min(u, v) - 1) * n + Math.max(u, v) - 1);
  });
  need(n >= 0, "there is no line p");
  need(edges === wanted, `${edges} edges, and the line p says ${wanted}`);
  return { n, codes, names: Array.from({ length: n }, (_, v) => String(v + 1)) };
}

// Vertices are numbered in the order in which they appear first.
function readEdges(text) {
  const numbers = new Map();
  const pairs = [];
  wordLines(text).forEach((line, i) => {
    const words = wordsOf(line.replace(/#.*$/u, ""));
    need(words.length <= 2, `line ${i + 1}: more than two words`);
    for (const word of words) if (!numbers.has(word)) numbers.set(word, numbers.size);
    need(numbers.size <= 10000, `line ${i + 1}: more than 10,000 vertices`);
    if (words.length < 2) return;
    need(words[0] !== words[1], `line ${i + 1}: a loop`);
    pairs.push(words.map((word) => numbers.get(word)));
  });
  const n = numbers.size;
  need(n > 0, "the file names no vertex");
  return { n, codes: pairs.map(([u, v]) => Math.min(u, v) * n + Math.max(u, v)), names: [...numbers.keys()] };
}

export { readDimacs, readEdges };
