// Exact arithmetic on integers up to 2^53 in absolute value, and the predicates of rules.

import { Rejected, need } from "./strict.js";

const MOST = 2 ** 53;

// A result of arithmetic. A Number below 2^53 is exact, because the true result, if it were
// not below 2^53, would not round to one that is; only 2^53 itself may be a rounded 2^53 + 1.
function bounded(near, exact) {
  if (near > -MOST && near < MOST) return near;
  need(Math.abs(near) === MOST && BigInt(near) === exact(), "a result beyond 2^53");
  return near;
}

const add = (i, j) => bounded(i + j, () => BigInt(i) + BigInt(j));
const subtract = (i, j) => bounded(i - j, () => BigInt(i) - BigInt(j));
const multiply = (i, j) => bounded(i * j, () => BigInt(i) * BigInt(j)) + 0;

// i - i % j is a multiple of j no larger than i, so the division is exact; then round down.
function floorDivide(i, j) {
  if (j === 0) throw new Rejected("a division by zero");
  const rest = i % j;
  const quotient = (i - rest) / j;
  return (rest !== 0 && rest < 0 !== j < 0 ? quotient - 1 : quotient) + 0;
}

function modulo(i, j) {
  if (j === 0) throw new Rejected("a division by zero");
  const rest = i % j;
  return (rest !== 0 && rest < 0 !== j < 0 ? rest + j : rest) + 0;
}

function power(i, exponent) {
  need(exponent >= 0, "a negative exponent");
  if (i === 0 || i === 1) return exponent === 0 ? 1 : i;
  if (i === -1) return exponent % 2 === 0 ? 1 : -1;
  // Two or more in absolute value: past 53 factors the result is too large in any case.
  let result = 1;
  for (let k = 0; k < exponent; k += 1) result = multiply(result, i);
  return result;
}

function gcd(...values) {
  return values.reduce((i, j) => {
    let [a, b] = [Math.abs(i), Math.abs(j)];
    while (b !== 0) [a, b] = [b, a % b];
    return a;
  }, 0);
}

// Whether i = f(k) for a whole k >= 0 near the real number `guess`; f grows. The products below
// are exact near i <= 2^53, or even and below 2^54, or too large to be equal to i.
function near(guess, f, i) {
  const middle = Math.floor(guess);
  for (let k = Math.max(0, middle - 2); k <= middle + 2; k += 1) if (f(k) === i) return true;
  return false;
}

const square = (i) => i >= 0 && near(Math.sqrt(i), (k) => k * k, i);
const cube = (i) => near(Math.cbrt(Math.abs(i)), (k) => k * k * k, Math.abs(i));
const triangular = (i) => i >= 0 && near(Math.sqrt(2 * i), (k) => (k * (k + 1)) / 2, i);
const pentagonal = (i) => i >= 0 && near(Math.sqrt((2 * i) / 3), (k) => (k * (3 * k - 1)) / 2, i);

const FIBONACCI = new Set([0, 1]);
for (let [i, j] = [1, 1]; j <= MOST; [i, j] = [j, i + j]) FIBONACCI.add(j);
const fibonacci = (i) => FIBONACCI.has(i);

// k^e for some k >= 1, e >= 2: a root of some order is whole.
function perfectPower(i) {
  for (let e = 2; 2 ** e <= Math.max(i, 4); e += 1) {
    const middle = Math.round(i ** (1 / e));
    for (let k = Math.max(1, middle - 1); k <= middle + 1; k += 1) {
      let product = 1;
      for (let j = 0; j < e && product <= i; j += 1) product *= k;
      if (product === i) return true;
    }
  }
  return false;
}

// The strong test with these bases is right for all i < 3.3 * 10^24 (Sorenson and Webster,
// Mathematics of Computation 86 (2017) 985-1003).
const BASES = [2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37, 41];

function powerModulo(base, exponent, modulus) {
  let result = 1n;
  for (let b = base % modulus; exponent > 0n; exponent >>= 1n) {
    if (exponent & 1n) result = (result * b) % modulus;
    b = (b * b) % modulus;
  }
  return result;
}

function strongTest(i, base) {
  const modulus = BigInt(i);
  let [odd, twos] = [modulus - 1n, 0];
  for (; odd % 2n === 0n; odd /= 2n) twos += 1;
  let x = powerModulo(BigInt(base), odd, modulus);
  if (x === 1n) return true;
  for (let k = 0; k < twos; k += 1) {
    if (x === modulus - 1n) return true;
    x = (x * x) % modulus;
  }
  return false;
}

function prime(i) {
  if (i < 2) return false;
  for (const p of BASES) if (i % p === 0) return i === p;
  if (i < 1e6) {
    for (let d = 43; d * d <= i; d += 2) if (i % d === 0) return false;
    return true;
  }
  return BASES.every((base) => strongTest(i, base));
}

const OPERATIONS = { "+": add, "-": subtract, "*": multiply, "//": floorDivide, "%": modulo, "**": power };
const PREDICATES = { square, cube, triangular, pentagonal, fibonacci, prime, power: perfectPower };
const FUNCTIONS = { min: Math.min, max: Math.max, gcd };

export { OPERATIONS, PREDICATES, FUNCTIONS };
