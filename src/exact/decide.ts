/** Rational or irrational, and the sign, proved by the tower of radicals. */
import { scaleBall } from "./ball.js";
import { ExactFault } from "./fault.js";
import { bitsBelowRoots, evaluateHomogeneous, type Polynomial, primitivePart, shifted } from "./polynomial.js";
import { Rational } from "./rational.js";
import { enclose, type Real } from "./real.js";
import type { Tower } from "./tower.js";

/** A number that no proof tells from zero is compared with it to this many bits. */
const UNPROVED_BITS = 4096;

const abs = (a: bigint) => (a < 0n ? -a : a);

/** One of the two where the number is decided, else none. */
export interface Decision {
  readonly rational?: Rational;
  /** Vanishes at the number, which is irrational. */
  readonly polynomial?: Polynomial;
}

/**
 * Rational or not, decided where there is an element. With y = den x integral and f its
 * monic annihilator: y is rational exactly if it is an integer m with f(m) = 0, and then
 * |y - m| is either 0 or above the bound on the other roots of f(m + t).
 */
export function decide(x: Real, tower: Tower): Decision {
  if (x.constant !== undefined) return { rational: x.constant };
  if (x.element === undefined) return {};
  const { num, den } = x.element;
  const y: Real = { text: "", ball: (p) => scaleBall(x.ball(p), den) };
  let f = tower.annihilator({ num, den: 1n });
  if (f === undefined) return {};
  const near = enclose(y, 4);
  const m = (near.mid + 8n) >> 4n;
  if (evaluateHomogeneous(f, m, 1n) === 0n) {
    const around = shifted(f, m);
    const bits = bitsBelowRoots(around);
    const ball = enclose(y, bits + 4);
    if (abs(ball.mid - (m << BigInt(bits + 4))) <= ball.rad) return { rational: Rational.of(m, den) };
    f = shifted(around.slice(1), -m);
  }
  if (f[0] === 0n) f = f.slice(1);
  return { polynomial: primitivePart(f.map((c, i) => c * den ** BigInt(i))) };
}

/**
 * The sign, proved.
 * @throws ExactFault where no proof is at hand and the value is within 2^-4096 of 0.
 */
export function signOf(x: Real, tower: Tower): -1 | 0 | 1 {
  const { rational, polynomial } = decide(x, tower);
  if (rational !== undefined) return rational.sign();
  for (let p = 64; polynomial !== undefined || p <= UNPROVED_BITS; p *= 2) {
    const ball = enclose(x, p);
    if (abs(ball.mid) > ball.rad) return ball.mid > 0n ? 1 : -1;
  }
  throw new ExactFault(`a number that cannot be told from 0 (${UNPROVED_BITS} bits were tried) where its sign matters`);
}
