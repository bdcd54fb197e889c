/** The rate function of a positive set on an even grid of round speeds. */
import { enclosedBetween } from "../../quantity/quantity.js";
import type { RateRow } from "../rate.js";
import type { PositiveSet } from "./positive.js";
import { encloseRate } from "./rate.js";

const BITS = 64;
/** Speeds run from Lambda'(-S) to Lambda'(S), S as many of the log norm's standard deviations' inverses, and at most. */
const DEVIATIONS = 2;
const MOST = 16;
/** Rows at least; at most two and a half times as many. */
const ROWS = 10;

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
  const log = (s: number) => set.approximatePressure(s, BITS) ?? Number.NaN;
  const slope = (s: number) => (log(s + 2 ** -10) - log(s - 2 ** -10)) * 2 ** 9;
  const most = Math.min(MOST, DEVIATIONS / Math.sqrt(Math.max(variance, 1e-12)));
  const [slowest, fastest] = [slope(-most), slope(most)];
  if (!(fastest > slowest)) return [];
  const step = roundStep((fastest - slowest) / ROWS);
  const first = Math.ceil(slowest / step);
  const last = Math.floor(fastest / step);
  const rows: RateRow[] = [];
  let s = -most;
  for (let k = first; k <= last; k++) {
    tick(k - first, last - first + 1);
    const speed = Number((k * step).toPrecision(12));
    const found = rateNear(set, speed, s, slope, most);
    if (found === undefined) continue;
    s = found.s;
    rows.push({ speed, rate: enclosedBetween(found.rate.low, found.rate.high, METHOD) });
  }
  return rows;
}

const METHOD = "Legendre transform of the enclosed pressure, chords of the convex function";

/** Newton's method for Lambda'(s) = speed, in doubles and then with chords of enclosures. */
function rateNear(set: PositiveSet, speed: number, from: number, slope: (s: number) => number, most: number) {
  let s = from;
  const bend = (at: number) => (slope(at + 2 ** -4) - slope(at - 2 ** -4)) * 2 ** 3;
  for (let sweep = 0; sweep < 40; sweep++) {
    const curvature = bend(s);
    const step = (speed - slope(s)) / curvature;
    if (!Number.isFinite(step) || curvature <= 0) return undefined;
    s = Math.max(-most - 1, Math.min(most + 1, s + Math.max(-1, Math.min(1, step))));
    if (Math.abs(step) < 1e-6) break;
  }
  const pressure = (t: number) => set.pressure(t, BITS);
  for (let sweep = 0; sweep < 4; sweep++) {
    const rate = encloseRate(speed, s, pressure);
    if (rate !== undefined) return { s, rate };
    const [before, after] = [pressure(s - 2 ** -20), pressure(s + 2 ** -20)];
    if (before === undefined || after === undefined) return undefined;
    const exact = after.low.sub(before.low).toNumber() * 2 ** 19;
    s += (speed - exact) / bend(s);
  }
  return undefined;
}
