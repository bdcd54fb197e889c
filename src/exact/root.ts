/** The one real root of an integer polynomial in an interval, to any number of bits. */

import { ExactFault } from "./fault.js";
import { type ExactNumber, exactRational, fixedToNumber } from "./number.js";
import {
  countRealRoots,
  degree,
  evaluateHomogeneous,
  type Polynomial,
  polynomialText,
  signAt,
  squareFreePart,
} from "./polynomial.js";
import { floorDiv, Rational } from "./rational.js";

const ONE_ROOT = "an interval that holds exactly one real root of the polynomial";

/** The root lies in [cell, cell + 1] / 2^bits, with different signs of f at the two ends. */
interface Cell {
  readonly cell: bigint;
  readonly bits: number;
}

/** A first cell inside (low, high), where f has one root, simple and irrational, and no other. */
function firstCell(f: Polynomial, low: Rational, high: Rational): Cell {
  for (let bits = 0; ; bits += 4) {
    const scale = 1n << BigInt(bits);
    const left = (a: bigint) => signAt(f, Rational.of(a, scale)) === signAt(f, low);
    let from = -floorDiv(-low.num * scale, low.den);
    let to = floorDiv(high.num * scale, high.den);
    // Otherwise the root is between an end and the grid: a finer grid comes closer to the ends.
    if (from < to && left(from) && !left(to)) {
      while (to - from > 1n) {
        const middle = (from + to) >> 1n;
        if (left(middle)) from = middle;
        else to = middle;
      }
      return { cell: from, bits };
    }
  }
}

/**
 * Quadratic interval refinement (Abbott 2006): the cell is cut into 2^s, the line through
 * the two end values guesses the part, and signs decide; s doubles after a success and is
 * halved after a failure. s = 1 is bisection and cannot fail.
 */
function refined(f: Polynomial, start: Cell, bits: number): Cell {
  let { cell, bits: at } = start;
  const value = (a: bigint, k: number) => evaluateHomogeneous(f, a, 1n << BigInt(k));
  const sign = value(cell, at) > 0n;
  let step = 1;
  while (at < bits) {
    const s = Math.min(step, bits - at);
    const [low, high] = [value(cell, at), value(cell + 1n, at)];
    const base = cell << BigInt(s);
    const last = (1n << BigInt(s)) - 1n;
    const isLeft = (part: bigint) => value(base + part, at + s) > 0n === sign;
    const nearest = (2n * (low << BigInt(s)) + (low - high)) / (2n * (low - high));
    const guess = nearest < 1n ? 1n : nearest > last ? last : nearest;
    const right = isLeft(guess);
    const part = right ? guess : guess - 1n;
    // The root is on one side of the guess for certain; one more sign shows whether it is next to it.
    const certain = right ? part === last || !isLeft(part + 1n) : part === 0n || isLeft(part);
    if (certain) {
      cell = base + part;
      at += s;
      step = 2 * s;
    } else step = Math.max(1, Math.floor(s / 2));
  }
  return { cell, bits: at };
}

/** The rational root in the interval, where there is one: c root is an integer, c the leading coefficient. */
function rationalRoot(f: Polynomial, low: Rational, high: Rational): Rational | undefined {
  const lead = f[f.length - 1];
  const inside = (x: Rational) => x.compare(low) >= 0 && x.compare(high) <= 0;
  let [from, to] = [low, high];
  while (to.sub(from).mul(Rational.of(lead)).compare(Rational.of(1n, 2n)) >= 0) {
    const middle = from.add(to).div(Rational.of(2));
    const sign = signAt(f, middle);
    if (sign === 0) return middle;
    const left = signAt(f, from);
    if (left === 0) return from;
    if (sign === left) from = middle;
    else to = middle;
  }
  const first = floorDiv(from.num * lead, from.den);
  return [first, first + 1n].map((m) => Rational.of(m, lead)).find((x) => inside(x) && signAt(f, x) === 0);
}

/**
 * The root of the polynomial (coefficients from the constant term up) in [low, high].
 * @throws ExactFault unless the closed interval holds exactly one real root.
 */
export function polynomialRoot(coefficients: readonly Rational[], low: Rational, high: Rational): ExactNumber {
  const common = coefficients.reduce((m, c) => m * c.den, 1n);
  const text = `root of ${polynomialText(coefficients)} between ${low} and ${high}`;
  const f = squareFreePart(coefficients.map((c) => (c.num * common) / c.den));
  const count = countRealRoots(f, low, high);
  if (count !== 1) {
    throw new ExactFault(
      `${polynomialText(coefficients)} has ${count === 0 ? "no real root" : `${count} real roots`} from ${low} to ${high}`,
      ONE_ROOT,
    );
  }
  const rational = degree(f) === 1 ? Rational.of(-f[0], f[1]) : rationalRoot(f, low, high);
  if (rational !== undefined) return exactRational(rational, text);
  let best = firstCell(f, low, high);
  const toFixed = (bits: number) => {
    if (best.bits <= bits) best = refined(f, best, bits + 1);
    const cut = best.bits - bits;
    return (best.cell + (1n << BigInt(cut - 1))) >> BigInt(cut);
  };
  return { text, kind: "algebraic", polynomial: f, toFixed, toNumber: () => fixedToNumber(toFixed) };
}
