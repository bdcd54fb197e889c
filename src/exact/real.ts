/** Real numbers under construction, and their enclosure at a wanted precision. */
import { type Ball, TooCoarse } from "./ball.js";
import { bitLength, type Rational } from "./rational.js";
import type { Element } from "./tower.js";

/**
 * A real number that can be enclosed in a ball at any precision; it carries its element of
 * the tower of radicals as long as no pi or e is inside.
 */
export interface Real {
  /**
   * A ball at precision p (bits after the point).
   * @throws TooCoarse where p is too low to tell a divisor from 0
   */
  ball(p: number): Ball;
  readonly element?: Element;
  /** The value where it is known to be rational without further proof. */
  readonly constant?: Rational;
  /** Equal texts mean equal values. */
  readonly text: string;
}

/**
 * A ball at precision p with a radius of at most 2 units, from a working precision that is
 * raised until it is enough; `guard` remembers by how many bits, which hardly depends on p.
 */
export function enclose(x: Real, p: number, guard = { bits: 8 }): Ball {
  for (;;) {
    try {
      const { mid, rad } = x.ball(p + guard.bits);
      const cut = BigInt(guard.bits);
      if (rad >> cut === 0n) return { mid: mid >> cut, rad: 2n };
      guard.bits = bitLength(rad) + 2;
    } catch (error) {
      if (!(error instanceof TooCoarse)) throw error;
      guard.bits = 2 * guard.bits + 32;
    }
  }
}
