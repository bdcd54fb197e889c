/**
 * Best simultaneous rational approximations of a start, over all denominators q = 1, ..., Q:
 * those q at which L |x - p/q| falls below its value at every smaller q, where L is the
 * denominator of the orbit of p/q, lcm(q, the translations' denominator b). Then
 * room / distance = 1 / (2 L |x - p/q|) is larger than for every smaller q.
 *
 * L |x - p/q| = b / gcd(q, b) |q x - p|. So in a range of q, and for each divisor g of b, a
 * record with q = m g has |m (g x) - p| at most g / b times the value to be beaten: few
 * points of a lattice, all of them listed (cylinder.ts), then compared in exact integers.
 * In one coordinate this is the continued fraction.
 */
import type { ExactNumber } from "../exact/number.js";
import { gcdBig, Rational } from "../exact/rational.js";
import { bitsFor, cylinderPoints } from "./cylinder.js";
import { type Enclosure, isPoint, nearestNumerators, torusDistance } from "./distance.js";

export interface Approximation {
  readonly denominator: number;
  readonly numerators: readonly number[];
  readonly distance: Enclosure;
  /** Denominator of the points of the orbit. */
  readonly orbitDenominator: bigint;
}

export interface Approximations {
  readonly records: readonly Approximation[];
  /** Denominators of points that could not be told from the start through 4096 bits. */
  readonly unresolved: readonly number[];
  /** Every denominator up to this was looked at: less than asked for where the work allowed was used up. */
  readonly searchedTo: number;
}

/** Denominators tried one by one, before there is a value to beat. */
const FIRST = 16;
/** Steps of enumeration in one range. */
const WORK = 2_000_000;

function lcm(a: bigint, b: bigint): bigint {
  return (a / gcdBig(a, b)) * b;
}

/** Divisors of b that are at most `most`. b is below 2^53. */
function divisors(b: bigint, most: number): number[] {
  let rest = Number(b);
  let list = [1];
  for (let p = 2; p * p <= rest; p += p === 2 ? 1 : 2) {
    if (rest % p !== 0) continue;
    const powers = [1];
    while (rest % p === 0) {
      rest /= p;
      powers.push((powers[powers.length - 1] as number) * p);
    }
    list = list.flatMap((x) => powers.map((y) => x * y).filter((z) => z <= most));
  }
  if (rest > 1) list = list.flatMap((x) => (x * rest <= most ? [x, x * rest] : [x]));
  return list;
}

/** Denominators from which values only repeat, where the start is rational. */
function period(start: readonly ExactNumber[], translations: bigint): bigint | undefined {
  let all = translations;
  for (const x of start) {
    if (x.rational === undefined) return undefined;
    all = lcm(all, x.rational.den);
  }
  return all;
}

/** Denominators in (from, to] that may have a value of at most `best`; undefined where it takes too much work. */
function candidates(
  start: readonly ExactNumber[],
  from: number,
  to: number,
  best: Rational,
  translations: bigint,
  factors: readonly number[],
): number[] | undefined {
  const found = new Set<number>();
  for (const g of factors) {
    const most = Math.floor(to / g);
    if (most === 0) continue;
    const radius = best.mul(Rational.of(BigInt(g), translations));
    const bits = bitsFor(radius, most);
    const by = BigInt(g);
    const fixed = start.map((x) => BigInt.asUintN(bits, by * x.toFixed(bits)));
    const list = cylinderPoints({ fixed, bits, off: by, most, radius }, WORK);
    if (list === undefined) return undefined;
    for (const m of list) if (m * g > from) found.add(m * g);
  }
  return [...found].sort((a, b) => a - b);
}

/**
 * The records with denominator at most `most`, in increasing order of q. The start itself,
 * where it is rational, is not among them.
 * @param translations common denominator of the translations, below 2^53
 */
export function bestApproximations(start: readonly ExactNumber[], most: number, translations: bigint): Approximations {
  const records: Approximation[] = [];
  const unresolved: number[] = [];
  let best: { readonly low: Rational; readonly high: Rational } | undefined;
  const consider = (q: number) => {
    const numerators = nearestNumerators(start, q);
    if (isPoint(start, numerators, q)) return;
    const distance = torusDistance(start, numerators, q);
    if (distance === undefined) {
      unresolved.push(q);
      return;
    }
    const orbitDenominator = lcm(BigInt(q), translations);
    const scaled = (end: Rational) => end.mul(Rational.of(orbitDenominator));
    // A record must be proved smaller: the same point over a multiple of its denominator is none.
    if (best !== undefined && scaled(distance.high).compare(best.low) >= 0) return;
    best = { low: scaled(distance.low), high: scaled(distance.high) };
    records.push({ denominator: q, numerators, distance, orbitDenominator });
  };
  const whole = period(start, translations);
  const last = whole !== undefined && whole < BigInt(most) ? Number(whole) : most;
  let reached = Math.min(last, FIRST);
  for (let q = 1; q <= reached; q++) consider(q);
  const factors = divisors(translations, most);
  while (reached < last && best !== undefined && unresolved.length === 0) {
    const to = Math.min(2 * reached, last);
    const list = candidates(start, reached, to, best.high, translations, factors);
    if (list === undefined) break;
    for (const q of list) consider(q);
    reached = to;
  }
  // No value at all among the first: the start is 0, every multiple of it too.
  const nothing = best === undefined && unresolved.length === 0;
  return { records, unresolved, searchedTo: reached === last || nothing ? most : reached };
}
