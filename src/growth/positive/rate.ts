/**
 * The rate of large deviations at a speed, enclosed: I(x) = sup_s (s x - Lambda(s)).
 *
 * Any s gives a lower bound. For an upper one take s1 < s < s3 whose chords have slopes
 * m1 = (Lambda(s) - Lambda(s1)) / (s - s1) <= x <= m3 = (Lambda(s3) - Lambda(s)) / (s3 - s).
 * Lambda is convex, so to the right of s it lies above the line of slope m1 through
 * (s, Lambda(s)), and beyond s3 above the line of slope m3: there t x - Lambda(t) is at most
 * s x - Lambda(s) + (s3 - s)(x - m1). To the left alike with (s - s1)(m3 - x).
 */
import { Rational } from "../../exact/rational.js";
import type { Enclosure } from "./positive.js";

/** Lambda at a double, or undefined where it could not be enclosed. */
export type EnclosePressure = (s: number) => Enclosure | undefined;

const most = (a: Rational, b: Rational) => (a.compare(b) < 0 ? b : a);

/**
 * I(x) from three s near the one where the supremum is taken, `step` apart: the bounds part by
 * its square times Lambda''. Undefined where `s` is too far off, or Lambda not known well enough.
 */
export function encloseRate(speed: number, s: number, step: number, pressure: EnclosePressure): Enclosure | undefined {
  const [left, right] = [s - step, s + step];
  const [before, at, after] = [pressure(left), pressure(s), pressure(right)];
  if (before === undefined || at === undefined || after === undefined) return undefined;
  const exact = Rational.fromNumber;
  const x = exact(speed);
  const [back, on] = [exact(s).sub(exact(left)), exact(right).sub(exact(s))];
  // Bounds of the chords' slopes: certainly at most x, certainly at least x.
  const [low1, high1] = [at.low.sub(before.high).div(back), at.high.sub(before.low).div(back)];
  const [low3, high3] = [after.low.sub(at.high).div(on), after.high.sub(at.low).div(on)];
  if (high1.compare(x) > 0 || low3.compare(x) < 0) return undefined;
  const value = exact(s).mul(x);
  const excess = most(on.mul(x.sub(low1)), back.mul(high3.sub(x)));
  return {
    // The rate is never negative: Lambda(0) = 0.
    low: most(Rational.ZERO, value.sub(at.high)),
    high: value.sub(at.low).add(excess),
  };
}
