/** Exact numbers as the walk file writes them. */

import { Builder } from "./builder.js";
import { parseExpression } from "./expression.js";
import { ExactFault } from "./fault.js";
import { type ExactNumber, exactRational, fixedToNumber } from "./number.js";
import type { Rational } from "./rational.js";
import { enclose } from "./real.js";
import { polynomialRoot } from "./root.js";

/** Polynomials up to this degree: the Sturm chain's coefficients grow with its square. */
export const POLYNOMIAL_DEGREE_LIMIT = 64;

/**
 * The number that an expression stands for.
 * @throws ExactFault with the place and the reason where it is none.
 */
export function exactFromText(text: string): ExactNumber {
  const builder = new Builder();
  const real = parseExpression(text, builder);
  const { rational, polynomial } = builder.decide(real);
  if (rational !== undefined) return exactRational(rational, text.trim());
  const guard = { bits: 8 };
  let best: { bits: number; value: bigint } | undefined;
  const toFixed = (bits: number): bigint => {
    if (!Number.isInteger(bits) || bits < 0) throw new RangeError(`toFixed: ${bits} is not a number of bits`);
    if (best === undefined || best.bits < bits) {
      // The loss of precision is measured where it is cheap, then hardly changes with the bits.
      if (best === undefined) enclose(real, 64, guard);
      const ball = enclose(real, bits + 3, guard);
      // At most 2/8 + 1/2 of a unit.
      best = { bits, value: (ball.mid + 4n) >> 3n };
    }
    const cut = BigInt(best.bits - bits);
    return cut === 0n ? best.value : (best.value + (1n << (cut - 1n))) >> cut;
  };
  const kind = polynomial === undefined ? "unproved" : "algebraic";
  return {
    text: text.trim(),
    kind,
    ...(polynomial && { polynomial }),
    toFixed,
    toNumber: () => fixedToNumber(toFixed),
  };
}

/** A rational in a polynomial number; `path` says which. */
function rationalAt(value: string | number, path: string): Rational {
  try {
    const { rational, kind } = exactFromText(String(value));
    if (rational !== undefined) return rational;
    const found = kind === "algebraic" ? "an irrational number" : "a number that is not proved to be rational";
    throw new ExactFault(found, 'a rational number: a text such as "1/2" or "0.25", or a JSON integer', path);
  } catch (error) {
    if (error instanceof ExactFault && error.path === "") throw new ExactFault(error.message, error.accepted, path);
    throw error;
  }
}

/** The shape of a polynomial number in the file. */
export interface PolynomialNumber {
  readonly polynomial: readonly (string | number)[];
  readonly between: readonly (string | number)[];
}

/**
 * An exact number from its form in the file: an expression, a safe integer, or a polynomial
 * with an interval.
 * @throws ExactFault
 */
export function readExact(value: string | number | PolynomialNumber): ExactNumber {
  if (typeof value === "number" || typeof value === "string") return exactFromText(String(value));
  const coefficients = value.polynomial.map((c, i) => rationalAt(c, `/polynomial/${i}`));
  while (coefficients.length > 0 && coefficients[coefficients.length - 1].sign() === 0) coefficients.pop();
  const degrees = `a polynomial of degree 1 to ${POLYNOMIAL_DEGREE_LIMIT}`;
  if (coefficients.length < 2) throw new ExactFault("a constant polynomial", degrees, "/polynomial");
  if (coefficients.length - 1 > POLYNOMIAL_DEGREE_LIMIT) {
    throw new ExactFault(`degree ${coefficients.length - 1}`, degrees, "/polynomial");
  }
  const [low, high] = value.between.map((end, i) => rationalAt(end, `/between/${i}`));
  if (low.compare(high) > 0) {
    throw new ExactFault(`the empty interval from ${low} to ${high}`, "the lower end first", "/between");
  }
  return polynomialRoot(coefficients, low, high);
}
