// The common period of residues.

import { need } from "./strict.js";
import { FUNCTIONS } from "./predicates.js";

const MOST = 60;

// The least common multiple of moduli; at most 60.
function modulusOf(moduli) {
  let result = 1;
  for (const k of moduli) {
    result = (result / FUNCTIONS.gcd(result, k)) * k;
    need(result <= MOST, "no strip: the moduli are too large");
  }
  return result;
}

export { modulusOf };
