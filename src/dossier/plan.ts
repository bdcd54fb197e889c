/** What `assess` asks of each question: which frequencies, which moduli, how many moves. */
import { gcdBig } from "../exact/rational.js";
import type { Effort } from "../session.js";
import { translationDenominator } from "../walk/denominator.js";
import type { Walk } from "../walk/walk.js";

/**
 * Moves of the exact trajectory that is drawn, all compared with double precision. The
 * comparison is kept for `after` moves beyond the one at which the two are `apart`, or for
 * `compared` moves where they never are.
 */
export const TRAJECTORY = { moves: 1000, compared: 200, after: 60, digits: 20, apart: 0.01 } as const;

/**
 * A few low frequencies, (1, 0, ..., 0) first: the first coordinate, the second, and their
 * sum and difference, as many as the effort has time for.
 */
export function lowFrequencies(dimension: number, effort: Effort): number[][] {
  const unit = (entries: Readonly<Record<number, number>>) =>
    Array.from({ length: dimension }, (_, i) => entries[i] ?? 0);
  const all = [unit({ 0: 1 }), unit({ 1: 1 }), unit({ 0: 1, 1: 1 }), unit({ 0: 1, 1: -1 })];
  return all.slice(0, effort === "quick" ? 2 : all.length);
}

/** Points of (Z/q)^d beyond which a modulus is left out. */
const MOST_POINTS: Readonly<Record<Effort, number>> = { quick: 1000, standard: 10_000, thorough: 300_000 };
const LARGEST_MODULUS: Readonly<Record<Effort, number>> = { quick: 12, standard: 16, thorough: 31 };

function lcm(a: bigint, b: bigint): bigint {
  return (a / gcdBig(a, b)) * b;
}

/** The denominator that start and translations share; undefined where one coordinate is not rational. */
export function walkDenominator(walk: Walk): bigint | undefined {
  let q = translationDenominator(walk);
  if (q === undefined || walk.start.type !== "point") return undefined;
  for (const x of walk.start.point) {
    if (x.rational === undefined) return undefined;
    q = lcm(q, x.rational.den);
  }
  return q;
}

export interface Moduli {
  /** The main one first; empty where no modulus is small enough. */
  readonly moduli: readonly number[];
  /** Why there are none. */
  readonly skipped?: string;
}

/**
 * Small moduli for which the moves map (Z/q)^d into itself: multiples of the translations'
 * denominator; the walk's own denominator first where its start is rational.
 */
export function smallModuli(walk: Walk, effort: Effort): Moduli {
  const base = translationDenominator(walk);
  if (base === undefined) {
    return {
      moduli: [],
      skipped: "a translation is not known to be rational, so no set of points with one denominator is kept",
    };
  }
  const fits = (q: number, times = 1) => q ** walk.dimension <= times * MOST_POINTS[effort];
  const moduli: number[] = [];
  const own = walkDenominator(walk);
  // The walk's own orbits are the ones that matter: they may cost more.
  if (own !== undefined && own > 1n && own <= 1n << 31n && fits(Number(own), 20)) moduli.push(Number(own));
  const step = Number(base);
  for (let q = step === 1 ? 2 : step; q <= LARGEST_MODULUS[effort] && fits(q); q += step) {
    if (!moduli.includes(q)) moduli.push(q);
  }
  // With a large denominator of the translations, the first multiple may still be small enough.
  if (moduli.length === 0 && base <= 1n << 31n && fits(step)) moduli.push(step);
  if (moduli.length > 0) return { moduli };
  return {
    moduli: [],
    skipped: `the smallest modulus that the translations allow is ${base}: more than ${MOST_POINTS[effort]} points`,
  };
}
