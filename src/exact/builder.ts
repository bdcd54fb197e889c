/** The operations of expressions on real numbers: balls and elements of the tower side by side. */
import {
  addBalls,
  type Ball,
  ballOf,
  cbrtOfBall,
  divideBalls,
  multiplyBalls,
  negateBall,
  powerOfBall,
  sqrtOfBall,
  sqrtOfRational,
} from "./ball.js";
import { eBall, piBall } from "./constants.js";
import { type Decision, decide, signOf } from "./decide.js";
import { ExactFault } from "./fault.js";
import { exactCbrt, exactSqrt } from "./integer-roots.js";
import { bitLength, Rational } from "./rational.js";
import { enclose, type Real } from "./real.js";
import { addElements, type Element, scaleElement, Tower } from "./tower.js";

/** Integers of expressions stay below 2^this, so that a short text cannot ask for a huge number. */
const SIZE_LIMIT = 1 << 16;
export const POWER_LIMIT = 1000;

/** Every operation throws ExactFault where it has no value; the parser adds where. */
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
    if (signOf(y, this.tower) === 0) throw new ExactFault("the divisor is exactly 0");
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
    const sign = rational?.sign() ?? signOf(x, this.tower);
    if (sign < 0) throw new ExactFault(`the square root of a negative number (${rational ?? `about ${about(x)}`})`);
    if (rational !== undefined) return this.rootOfConstant(2, rational);
    return this.node(`sqrt(${x.text})`, (p) => sqrtOfBall(x.ball(p), p), this.adjoin(2, x.element));
  }

  cbrt(x: Real): Real {
    const { rational } = this.decide(x);
    if (rational !== undefined) {
      const root = this.rootOfConstant(3, rational.abs());
      return rational.sign() < 0 ? this.negate(root) : root;
    }
    return this.node(`cbrt(${x.text})`, (p) => cbrtOfBall(x.ball(p), p), this.adjoin(3, x.element));
  }

  /** The root of num/den as the root of the integral num den^(degree - 1), over den. */
  private adjoin(degree: 2 | 3, x: Element | undefined): Element | undefined {
    if (x === undefined) return undefined;
    const integral: Element = { num: x.num.map((c) => c * x.den ** BigInt(degree - 1)), den: 1n };
    const root = this.tower.adjoin(degree, integral);
    return root && scaleElement(root, Rational.of(1n, x.den));
  }

  private rootOfConstant(degree: 2 | 3, x: Rational): Real {
    const element = this.knownRoot(degree, x) ?? this.adjoin(degree, { num: [x.num], den: x.den });
    const ball = (p: number) => (degree === 2 ? sqrtOfRational(x, p) : cbrtOfBall(ballOf(x, p), p));
    return this.node(`${degree === 2 ? "sqrt" : "cbrt"}(${x})`, ball, element);
  }

  /**
   * The root of x >= 0 in terms of the roots of integers that are there already: sqrt(8) is
   * 2 sqrt(2), and sqrt(6) is sqrt(2) sqrt(3). Sought are powers e_i of the integers m_i
   * that make n prod m_i^e_i a whole power, n = num den^(degree - 1); then
   * root(n) = whole / prod root(m_i)^e_i, with 1 / root(m)^e = root(m)^(degree - e) / m.
   */
  private knownRoot(degree: 2 | 3, x: Rational): Element | undefined {
    const wholeRoot = degree === 2 ? exactSqrt : exactCbrt;
    const radicands = this.tower.rationalRadicands(degree);
    const seek = (n: bigint, i: number): Element | undefined => {
      const whole = wholeRoot(n);
      if (whole !== undefined) return { num: [whole], den: 1n };
      for (let e = 1; e < degree && i < radicands.length; e++) {
        const found = seek(n * radicands[i] ** BigInt(e), i + 1);
        if (found === undefined) continue;
        const root = this.tower.adjoin(degree, { num: [radicands[i]], den: 1n }) as Element;
        const inverse = degree - e === 2 ? this.tower.multiply(root, root) : root;
        return scaleElement(this.tower.multiply(found, inverse), Rational.of(1n, radicands[i]));
      }
      return i < radicands.length ? seek(n, i + 1) : undefined;
    };
    const root = seek(x.num * x.den ** BigInt(degree - 1), 0);
    return root && scaleElement(root, Rational.of(1n, x.den));
  }

  decide(x: Real): Decision {
    return decide(x, this.tower);
  }
}

function about(x: Real): string {
  const value = Rational.of(enclose(x, 40).mid, 1n << 40n);
  return value.toNumber().toPrecision(6);
}
