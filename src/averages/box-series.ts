/** A box's indicator in dimension 2 as a Fourier series: its largest terms, with proved bounds. */
import { type Ball, TooCoarse } from "../exact/ball.js";
import { cosineOfTurn } from "../exact/elementary.js";
import type { ExactNumber } from "../exact/number.js";
import { Rational } from "../exact/rational.js";
import type { PlanarTerm } from "../modular/variance.js";
import { above, below, type Interval, minus, over, plus, point, times } from "../quantity/interval.js";
import type { Box } from "./integral.js";

interface ComplexInterval {
  readonly re: Interval;
  readonly im: Interval;
}

/** Between these two neighbouring doubles. */
const PI: Interval = { low: Math.PI, high: above(Math.PI) };
const BITS = 64;
/** Turns of numbers that are not rational, or have long denominators, are cut to this many bits. */
const TURN_BITS = 46;

function intervalOf({ mid, rad }: Ball, extra: number): Interval {
  const scale = 2 ** -BITS;
  const low = below(below(Number(mid - rad) * scale) - extra);
  const high = above(above(Number(mid + rad) * scale) + extra);
  return { low: Math.max(-1, low), high: Math.min(1, high) };
}

/** cos(2 pi t) for a fraction t of a turn; `error`: how far t may be off. */
function cosine(t: Rational, error: number): Interval {
  const part = t.mod1();
  const half = part.compare(Rational.of(1, 2)) > 0 ? Rational.ONE.sub(part) : part;
  const turns = half.mul(Rational.of(2));
  return intervalOf(cosineOfTurn(Number(turns.num), Number(turns.den), BITS), error === 0 ? 0 : above(7 * error));
}

/** exp(-2 pi i k x) between bounds. */
function character(k: number, x: ExactNumber): ComplexInterval {
  let t: Rational;
  let error = 0;
  const exact = x.rational?.mul(Rational.of(k));
  if (exact !== undefined && exact.den < 1n << 40n) t = exact;
  else {
    const guard = 16;
    const fixed = x.toFixed(TURN_BITS + guard) * BigInt(k);
    const scale = 1n << BigInt(TURN_BITS + guard);
    const part = ((fixed % scale) + scale) % scale;
    t = Rational.of(part >> BigInt(guard), 1n << BigInt(TURN_BITS));
    // One unit for the cut; toFixed is off by at most one of its own, |k| below 2^16.
    error = 2 * 2 ** -TURN_BITS;
  }
  const sine = cosine(t.sub(Rational.of(1, 4)), error);
  return { re: cosine(t, error), im: { low: -sine.high, high: -sine.low } };
}

/** The integral of exp(-2 pi i k x) from a to b: i (exp(-2 pi i k b) - exp(-2 pi i k a)) / (2 pi k). */
function side(k: number, low: ExactNumber, high: ExactNumber): ComplexInterval {
  const [a, b] = [low.rational, high.rational];
  if (k === 0) {
    const ends = [low, high].map((x): Interval => {
      if (x.rational?.isInteger()) return point(Number(x.rational.num));
      const value = x.toNumber(); // within two units in the last place
      return { low: below(below(below(value))), high: above(above(above(value))) };
    }) as [Interval, Interval];
    return { re: minus(ends[1], ends[0]), im: point(0) };
  }
  const width = a === undefined ? undefined : b?.sub(a);
  if (width?.mul(Rational.of(k)).isInteger()) return { re: point(0), im: point(0) };
  const [from, to] = [character(k, low), character(k, high)];
  const turn = times(times(PI, point(2)), point(k));
  // i (x + i y) = -y + i x
  return { re: over(minus(from.im, to.im), turn), im: over(minus(to.re, from.re), turn) };
}

const FARTHEST = 256;

/** The `most` terms of largest modulus, the constant left out; undefined where a bound could not be computed. */
export function boxTerms(box: Box, most: number): PlanarTerm[] | undefined {
  try {
    const sides = box.low.map((low, j) => {
      const list = new Map<number, ComplexInterval>();
      for (let k = 0; k <= FARTHEST; k++) list.set(k, side(k, low, box.high[j]!));
      return list;
    }) as [Map<number, ComplexInterval>, Map<number, ComplexInterval>];
    const middle = ({ low, high }: Interval) => (low + high) / 2;
    const size = (z: ComplexInterval) => middle(z.re) ** 2 + middle(z.im) ** 2;
    const candidates: { k: readonly [number, number]; size: number }[] = [];
    for (let x = 0; x <= FARTHEST; x++) {
      for (let y = x === 0 ? 1 : -FARTHEST; y <= FARTHEST; y++) {
        if (x * Math.abs(y) > FARTHEST) continue;
        const s = size(sides[0].get(x)!) * size(sides[1].get(Math.abs(y))!);
        if (s > 1e-20) candidates.push({ k: [x, y], size: s });
      }
    }
    candidates.sort((a, b) => b.size - a.size || a.k[0] - b.k[0] || a.k[1] - b.k[1]);
    return candidates.slice(0, most).map(({ k: [x, y] }) => {
      const a = sides[0].get(x)!;
      const mirrored = sides[1].get(Math.abs(y))!;
      const b = y < 0 ? { re: mirrored.re, im: { low: -mirrored.im.high, high: -mirrored.im.low } } : mirrored;
      const re = minus(times(a.re, b.re), times(a.im, b.im));
      const im = plus(times(a.re, b.im), times(a.im, b.re));
      // c e_k + its conjugate = 2 Re c cos - 2 Im c sin
      return { frequency: [BigInt(x), BigInt(y)] as const, cos: times(re, point(2)), sin: times(im, point(-2)) };
    });
  } catch (error) {
    if (error instanceof TooCoarse) return undefined;
    throw error;
  }
}
