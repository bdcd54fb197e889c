/**
 * Real numbers under construction: each node can be enclosed in a ball at any precision,
 * and carries its element of the tower of radicals as long as no pi or e is inside.
 */
import {
  addBalls,
  type Ball,
  ballOf,
  cbrtOfBall,
  divideBalls,
  multiplyBalls,
  negateBall,
  powerOfBall,
  scaleBall,
  sqrtOfBall,
  sqrtOfRational,
  TooCoarse,
} from "./ball.js";
import { eBall, piBall } from "./constants.js";
import { ExactFault } from "./fault.js";
import { exactCbrt, exactSqrt } from "./integer-roots.js";
import { bitsBelowRoots, evaluateHomogeneous, type Polynomial, primitivePart, shifted } from "./polynomial.js";
import { bitLength, Rational } from "./rational.js";
import { addElements, type Element, scaleElement, Tower } from "./tower.js";

export interface Real {
  /** A ball at precision p (bits after the point). */
  ball(p: number): Ball;
  readonly element?: Element;
  /** The value where it is known to be rational without further proof. */
  readonly constant?: Rational;
  /** Equal texts mean equal values. */
  readonly text: string;
}

/** Integers of expressions stay below 2^this, so that a short text cannot ask for a huge number. */
const SIZE_LIMIT = 1 << 16;
export const POWER_LIMIT = 1000;
/** A number that no proof tells from zero is compared with it to this many bits. */
const UNPROVED_BITS = 4096;

const abs = (a: bigint) => (a < 0n ? -a : a);

export interface Decision {
  readonly rational?: Rational;
  /** Vanishes at the number; where it is irrational. */
  readonly polynomial?: Polynomial;
}

export class Builder {
  private readonly tower = new Tower();

  constant(value: Rational): Real {
    if (bitLength(value.num) > SIZE_LIMIT || bitLength(value.den) > SIZE_LIMIT) {
      throw new ExactFault(`a number of more than ${SIZE_LIMIT} bits comes up`);
    }
    return {
      ball: (p) => ballOf(value, p),
      element: { num: [value.num], den: value.den },
      constant: value,
      text: value.toString(),
    };
  }

  private node(text: string, ball: (p: number) => Ball, element: Element | undefined): Real {
    if (element === undefined) return { text, ball };
    if (element.num.slice(1).every((c) => c === 0n)) return this.constant(Rational.of(element.num[0], element.den));
    if (element.num.some((c) => bitLength(c) > SIZE_LIMIT)) {
      throw new ExactFault(`a number of more than ${SIZE_LIMIT} bits comes up`);
    }
    return { text, ball, element };
  }

  pi(): Real {
    return { text: "pi", ball: piBall };
  }

  e(): Real {
    return { text: "e", ball: eBall };
  }

  negate(x: Real): Real {
    const element = x.element && scaleElement(x.element, Rational.of(-1));
    return this.node(`-(${x.text})`, (p) => negateBall(x.ball(p)), element);
  }

  add(x: Real, y: Real): Real {
    const element = x.element && y.element && addElements(x.element, y.element);
    return this.node(`(${x.text}+${y.text})`, (p) => addBalls(x.ball(p), y.ball(p)), element);
  }

  subtract(x: Real, y: Real): Real {
    return x.text === y.text ? this.constant(Rational.ZERO) : this.add(x, this.negate(y));
  }

  multiply(x: Real, y: Real): Real {
    if (x.constant?.sign() === 0 || y.constant?.sign() === 0) return this.constant(Rational.ZERO);
    const element = x.element && y.element && this.tower.multiply(x.element, y.element);
    return this.node(`(${x.text}*${y.text})`, (p) => multiplyBalls(x.ball(p), y.ball(p), p), element);
  }

  divide(x: Real, y: Real): Real {
    if (this.sign(y) === 0) throw new ExactFault("the divisor is exactly 0");
    if (x.text === y.text) return this.constant(Rational.ONE);
    let element: Element | undefined;
    if (x.element !== undefined && y.element !== undefined) {
      const v: Element = { num: y.element.num, den: 1n };
      const f = this.tower.annihilator(v);
      if (f !== undefined) {
        const inverse = this.tower.reciprocal(v, f);
        element = this.tower.multiply(x.element, scaleElement(inverse, Rational.of(y.element.den)));
      }
    }
    return this.node(`(${x.text}/${y.text})`, (p) => divideBalls(x.ball(p), y.ball(p), p), element);
  }

  /** x^n, |n| at most POWER_LIMIT; x^0 = 1. @throws ExactFault where the result is too large */
  power(x: Real, n: number): Real {
    if (n < 0) return this.divide(this.constant(Rational.ONE), this.power(x, -n));
    if (n === 0) return this.constant(Rational.ONE);
    let element = x.element;
    const coordinates = element === undefined ? [enclose(x, 0).mid] : [...element.num, element.den];
    if (Math.max(...coordinates.map(bitLength)) * n > 4 * SIZE_LIMIT) {
      throw new ExactFault(`a number of more than ${SIZE_LIMIT} bits comes up`);
    }
    if (element !== undefined) {
      for (const bit of n.toString(2).slice(1)) {
        element = this.tower.multiply(element, element);
        if (bit === "1") element = this.tower.multiply(element, x.element as Element);
      }
    }
    return this.node(`(${x.text}^${n})`, (p) => powerOfBall(x.ball(p), n, p), element);
  }

  sqrt(x: Real): Real {
    const { rational } = this.decide(x);
    if (rational !== undefined) return this.sqrtOfConstant(rational);
    if (this.sign(x) < 0) throw new ExactFault(`the square root of a negative number (about ${this.about(x)})`);
    return this.node(`sqrt(${x.text})`, (p) => sqrtOfBall(x.ball(p), p), this.adjoin(2, x.element));
  }

  cbrt(x: Real): Real {
    const { rational } = this.decide(x);
    if (rational !== undefined) return this.cbrtOfConstant(rational);
    return this.node(`cbrt(${x.text})`, (p) => cbrtOfBall(x.ball(p), p), this.adjoin(3, x.element));
  }

  /** The root of num/den as the root of the integral num den^(degree - 1), over den. */
  private adjoin(degree: 2 | 3, x: Element | undefined): Element | undefined {
    if (x === undefined) return undefined;
    const integral: Element = { num: x.num.map((c) => c * x.den ** BigInt(degree - 1)), den: 1n };
    const root = this.tower.adjoin(degree, integral);
    return root && scaleElement(root, Rational.of(1n, x.den));
  }

  private sqrtOfConstant(x: Rational): Real {
    if (x.sign() < 0) throw new ExactFault(`the square root of a negative number (${x})`);
    const n = x.num * x.den;
    const whole = exactSqrt(n);
    if (whole !== undefined) return this.constant(Rational.of(whole, x.den));
    // sqrt(n) = sqrt(n m) / m sqrt(m) where n m is a square: sqrt(8) beside sqrt(2) is no new radical.
    let element: Element | undefined;
    for (const m of this.tower.rationalRadicands(2)) {
      const common = exactSqrt(n * m);
      if (common !== undefined)
        element = scaleElement(this.tower.adjoin(2, { num: [m], den: 1n })!, Rational.of(common, m * x.den));
    }
    element ??= this.adjoin(2, { num: [x.num], den: x.den });
    return this.node(`sqrt(${x})`, (p) => sqrtOfRational(x, p), element);
  }

  private cbrtOfConstant(x: Rational): Real {
    if (x.sign() < 0) return this.negate(this.cbrtOfConstant(x.neg()));
    const n = x.num * x.den * x.den;
    const whole = exactCbrt(n);
    if (whole !== undefined) return this.constant(Rational.of(whole, x.den));
    let element: Element | undefined;
    for (const m of this.tower.rationalRadicands(3)) {
      const root = this.tower.adjoin(3, { num: [m], den: 1n }) as Element;
      // cbrt(n) = cbrt(n m^2) cbrt(m) / m, and = cbrt(n m) cbrt(m)^2 / m.
      const [one, two] = [exactCbrt(n * m * m), exactCbrt(n * m)];
      if (one !== undefined) element = scaleElement(root, Rational.of(one, m * x.den));
      else if (two !== undefined) element = scaleElement(this.tower.multiply(root, root), Rational.of(two, m * x.den));
    }
    element ??= this.adjoin(3, { num: [x.num], den: x.den });
    return this.node(`cbrt(${x})`, (p) => cbrtOfBall(ballOf(x, p), p), element);
  }

  /**
   * Rational or not, decided where there is an element. With y = den x integral and f its
   * monic annihilator: y is rational exactly if it is an integer m with f(m) = 0, and then
   * |y - m| is either 0 or above the bound on the other roots of f(m + t).
   */
  decide(x: Real): Decision {
    if (x.constant !== undefined) return { rational: x.constant };
    if (x.element === undefined) return {};
    const { num, den } = x.element;
    const y: Real = { text: "", ball: (p) => scaleBall(x.ball(p), den) };
    let f = this.tower.annihilator({ num, den: 1n });
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
  sign(x: Real): -1 | 0 | 1 {
    const { rational, polynomial } = this.decide(x);
    if (rational !== undefined) return rational.sign();
    for (let p = 64; polynomial !== undefined || p <= UNPROVED_BITS; p *= 2) {
      const ball = enclose(x, p);
      if (abs(ball.mid) > ball.rad) return ball.mid > 0n ? 1 : -1;
    }
    throw new ExactFault(
      `a number that cannot be told from 0 (${UNPROVED_BITS} bits were tried) where its sign matters`,
    );
  }

  private about(x: Real): string {
    return Rational.of(enclose(x, 40).mid, 1n << 40n)
      .toNumber()
      .toPrecision(6);
  }
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
