/** The rate function of a positive set on an even grid of round speeds. */
import { enclosedBetween } from "../../quantity/quantity.js";
import type { RateRow } from "../rate.js";
import type { PositiveSet } from "./positive.js";
import { encloseRate } from "./rate.js";

/** By the number of coordinates: bits of each Lambda(s), and rows at least (at most two and a half times as many). */
const BITS = [0, 64, 28];
const ROWS = [0, 10, 5];
/** Speeds run from Lambda'(-S) to Lambda'(S), S as many of the log norm's standard deviations' inverses, and at most. */
const DEVIATIONS = 2;
const MOST = 16;

/** The largest of 1, 2, 5 times a power of ten that is at most x. */
function roundStep(x: number): number {
  let power = 1;
  while (power > x) power /= 10;
  while (10 * power <= x) power *= 10;
  return [5, 2, 1].map((m) => m * power).find((step) => step <= x) ?? power;
}

/** @param tick called between rows: for progress and to stop */
export function positiveRates(
  set: PositiveSet,
  variance: number,
  tick: (done: number, total: number) => void,
): RateRow[] {
  const bits = set.bitsWithin(BITS[set.cone.coordinates]);
  const log = (s: number) => set.approximatePressure(s, bits) ?? Number.NaN;
  const slope = (s: number) => (log(s + 2 ** -10) - log(s - 2 ** -10)) * 2 ** 9;
  const most = Math.min(MOST, DEVIATIONS / Math.sqrt(Math.max(variance, 1e-12)));
  const [slowest, fastest] = [slope(-most), slope(most)];
  if (!(fastest > slowest)) return [];
  const step = roundStep((fastest - slowest) / ROWS[set.cone.coordinates]);
  const first = Math.ceil(slowest / step);
  const last = Math.floor(fastest / step);
  const rows: RateRow[] = [];
  let from = { s: -most, slope: slowest };
  for (let k = first; k <= last; k++) {
    tick(k - first, last - first + 1);
    const speed = Number((k * step).toPrecision(12));
    const found = rateNear(set, bits, speed, from, slope, variance);
    if (found === undefined) continue;
    from = { s: found.s, slope: speed };
    rows.push({ speed, rate: enclosedBetween(found.rate.low, found.rate.high, METHOD) });
  }
  return rows;
}

const METHOD = "Legendre transform of the enclosed pressure, chords of the convex function";

/** The s with Lambda'(s) = speed by the secant method, in doubles and then with chords of enclosures. */
function rateNear(
  set: PositiveSet,
  bits: number,
  speed: number,
  from: { readonly s: number; readonly slope: number },
  slope: (s: number) => number,
  variance: number,
) {
  let last = from;
  let bend = variance;
  let s = from.s;
  for (let sweep = 0; sweep < 40; sweep++) {
    const move = (speed - last.slope) / bend;
    if (!Number.isFinite(move)) return undefined;
    // Not far at once: the curve bends.
    s = last.s + Math.max(-2, Math.min(2, move));
    if (Math.abs(move) < 1e-6) break;
    const next = { s, slope: slope(s) };
    const chord = (next.slope - last.slope) / (next.s - last.s);
    if (chord > 0) bend = chord;
    last = next;
  }
  const step = 2 ** -Math.floor(0.4 * bits);
  const pressure = (t: number) => set.pressure(t, bits);
  for (let sweep = 0; sweep < 4; sweep++) {
    const rate = encloseRate(speed, s, step, pressure);
    if (rate !== undefined) return { s, rate };
    const [before, after] = [pressure(s - step), pressure(s + step)];
    if (before === undefined || after === undefined) return undefined;
    s += (speed - after.low.sub(before.low).toNumber() / (2 * step)) / bend;
  }
  return undefined;
}
