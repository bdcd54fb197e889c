/** The rate function of a positive set on an even grid of round speeds. */
import type { Enclosure, PositiveSet } from "./positive.js";
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

/** Bits of Lambda(s) behind a rate. */
const bitsOf = (set: PositiveSet) => set.bitsWithin(BITS[set.cone.coordinates]);

/** Lambda'(s) in doubles. */
function slopeOf(set: PositiveSet): (s: number) => number {
  const bits = bitsOf(set);
  const log = (s: number) => set.approximatePressure(s, bits) ?? Number.NaN;
  return (s) => (log(s + 2 ** -10) - log(s - 2 ** -10)) * 2 ** 9;
}

/** Largest |s| of the grid: a number of the log norm's standard deviations' inverses. */
function furthest(slope: (s: number) => number): number {
  const variance = (slope(2 ** -6) - slope(-(2 ** -6))) * 2 ** 5;
  return Math.min(MOST, DEVIATIONS / Math.sqrt(Math.max(variance, 1e-12)));
}

/** An even grid of round speeds between Lambda'(-S) and Lambda'(S); empty where nothing varies. */
export function roundSpeeds(set: PositiveSet): number[] {
  const slope = slopeOf(set);
  const most = furthest(slope);
  const [slowest, fastest] = [slope(-most), slope(most)];
  if (!(fastest - slowest > 1e-9)) return [];
  const step = roundStep((fastest - slowest) / ROWS[set.cone.coordinates]);
  const first = Math.ceil(slowest / step);
  const count = Math.floor(fastest / step) - first + 1;
  return Array.from({ length: count }, (_, k) => Number(((first + k) * step).toPrecision(12)));
}

/** The s with Lambda'(s) = speed by the secant method, in doubles and then with chords of enclosures. */
export function rateAt(set: PositiveSet, speed: number): Enclosure | undefined {
  const bits = bitsOf(set);
  const slope = slopeOf(set);
  const most = furthest(slope);
  const ends = [
    { s: -most, slope: slope(-most) },
    { s: most, slope: slope(most) },
  ];
  let bend = (ends[1].slope - ends[0].slope) / (2 * most);
  let [last] = Math.abs(ends[0].slope - speed) < Math.abs(ends[1].slope - speed) ? ends : [ends[1]];
  let s = last.s;
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
    if (rate !== undefined) return rate;
    const [before, after] = [pressure(s - step), pressure(s + step)];
    if (before === undefined || after === undefined) return undefined;
    s += (speed - after.low.sub(before.low).toNumber() / (2 * step)) / bend;
  }
  return undefined;
}
