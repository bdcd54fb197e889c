/**
 * Best simultaneous rational approximations of a start, by a scan over the denominators
 * q = 1, ..., Q: those q at which L |x - p/q| falls below its value at every smaller q, where
 * L is the denominator of the orbit of p/q, lcm(q, the translations' denominator). Then
 * room / distance = 1 / (2 L |x - p/q|) is larger than for every smaller q.
 *
 * The scan adds x to itself modulo 1 in units of 2^-52, exactly, so that q x is off by at
 * most 2q units; what may be a record within that error is compared again in many more bits.
 */
import type { ExactNumber } from "../exact/number.js";
import { gcdBig, Rational } from "../exact/rational.js";
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
}

const UNIT = 2 ** 52;

/** Denominators that may be records, with no promise that all are. */
export function candidates(start: readonly ExactNumber[], most: number, translations: bigint): number[] {
  const steps = start.map((x) => Number(BigInt.asUintN(52, (x.toFixed(56) + 8n) >> 4n)));
  const at = new Float64Array(start.length);
  const common = translations < 2n ** 40n ? Number(translations) : 0;
  const factor = new Map<number, number>();
  const found: number[] = [];
  let best = Number.POSITIVE_INFINITY;
  for (let q = 1; q <= most; q++) {
    let sum = 0;
    for (let j = 0; j < at.length; j++) {
      let next = at[j] + steps[j];
      if (next >= UNIT) next -= UNIT;
      at[j] = next;
      const off = next > UNIT / 2 ? UNIT - next : next;
      sum += off * off;
    }
    const off = Math.sqrt(sum);
    const error = 2 * q * Math.sqrt(at.length) + off * 2 ** -48;
    const times = common === 1 ? 1 : orbitFactor(q, common, translations, factor);
    if ((off - error) * times > best) continue;
    found.push(q);
    best = Math.min(best, (off + error) * times);
  }
  return found;
}

/** lcm(q, b) / q = b / gcd(q, b), as a double; held by the gcd. */
function orbitFactor(q: number, common: number, translations: bigint, held: Map<number, number>): number {
  let [a, b] = [q, common === 0 ? Number(translations % BigInt(q)) : common];
  while (b !== 0) [a, b] = [b, a % b];
  let factor = held.get(a);
  if (factor === undefined) {
    factor = Number(translations / BigInt(a));
    held.set(a, factor);
  }
  return factor;
}

/**
 * The records with denominator at most `most`, in increasing order of q. The start itself,
 * where it is rational, is not among them.
 * @param translations common denominator of the translations
 */
export function bestApproximations(start: readonly ExactNumber[], most: number, translations: bigint): Approximations {
  const records: Approximation[] = [];
  const unresolved: number[] = [];
  let best: Rational | undefined;
  for (const q of candidates(start, most, translations)) {
    const numerators = nearestNumerators(start, q);
    if (isPoint(start, numerators, q)) continue;
    const distance = torusDistance(start, numerators, q);
    if (distance === undefined) {
      unresolved.push(q);
      continue;
    }
    const orbitDenominator = (BigInt(q) / gcdBig(BigInt(q), translations)) * translations;
    const scaled = (end: Rational) => end.mul(Rational.of(orbitDenominator));
    // A record must be proved smaller: the same point over a multiple of its denominator is none.
    if (best !== undefined && scaled(distance.high).compare(best) >= 0) continue;
    best = scaled(distance.low);
    records.push({ denominator: q, numerators, distance, orbitDenominator });
  }
  return { records, unresolved };
}
