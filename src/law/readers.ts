/**
 * How a table that holds P^n e_k is read against the law of x_0: at a point, or against a
 * density's coefficients.
 */
import { encloseAround } from "../dual/enclose.js";
import { pointFractions } from "../dual/moves.js";
import { polynomialOf, tableTerms } from "../dual/polynomial.js";
import { Rational } from "../exact/rational.js";
import type { DualTables } from "../kernel/dual.js";
import { evaluationError, type TableBound, U } from "../kernel/dual-rounding.js";
import { exactQuantity, type Quantity } from "../quantity/quantity.js";
import type { Start } from "../walk/walk.js";

export interface ComplexQuantity {
  readonly real: Quantity;
  readonly imag: Quantity;
}

/** Reads one table; `bound` is what is proved of the table's size and error. */
export type TableReader = (tables: DualTables, table: number, bound: TableBound, step: number) => ComplexQuantity;

export const exactly = (re: bigint, method: string): ComplexQuantity => ({
  real: exactQuantity(re, method),
  imag: exactQuantity(0n, method),
});

function around(re: number, im: number, error: number, method: string): ComplexQuantity {
  return { real: encloseAround(re, error, method), imag: encloseAround(im, error, method) };
}

function atPoint(fractions: readonly bigint[], method: string): TableReader {
  return (tables, table, bound) => {
    const { re, im } = tables.evaluate(table, fractions);
    return around(re, im, evaluationError(bound), method);
  };
}

/**
 * The integral of e_k against a density sum_j r_j e_j is r_{-k}. Only the density's own
 * frequencies matter; where the table has none of them the coefficient is 0 exactly, since
 * a table drops nothing.
 */
function againstDensity(start: Start & { type: "density" }, dimension: number): TableReader {
  const { terms, bound: rounded } = tableTerms(polynomialOf(start.terms), { dimension, width: 2, fold: "conjugate" });
  const both = terms.flatMap(({ frequency, re, im }) => [
    { frequency, re, im: -im },
    { frequency: frequency.map((k) => -k), re, im },
  ]);
  const largest = both.reduce((m, t) => Math.max(m, Math.abs(t.re) + Math.abs(t.im)), 0);
  return (tables, table, bound) => {
    let re = 0;
    let im = 0;
    let absolute = 0;
    let met = 0;
    for (const term of both) {
      const c = tables.coefficient(table, term.frequency);
      if (c === undefined) continue;
      met++;
      re += c.re * term.re - c.im * term.im;
      im += c.re * term.im + c.im * term.re;
      absolute += (Math.abs(c.re) + Math.abs(c.im)) * (Math.abs(term.re) + Math.abs(term.im));
    }
    if (met === 0) return exactly(0n, "dual walk: no frequency of the density is met");
    // Products and sums: (3 + met) u of the absolute sum; then the table's and the density's own errors.
    const arithmetic = (4 + met) * U * absolute;
    const error = (arithmetic + bound.error * largest + (bound.size + bound.error) * rounded.error) * (1 + 2 ** -48);
    return around(re, im, error, "dual walk paired with the density");
  };
}

/** Tables of integers over total^step against a density with rational coefficients: exact fractions. */
export function exactReaderOf(start: Start, total: bigint): TableReader {
  if (start.type !== "density") throw new RangeError("exactReaderOf: only a density has rational coefficients");
  const half = Rational.of(1, 2);
  // The coefficient of the density at -k, against e_k.
  const both = polynomialOf(start.terms).harmonics.flatMap(({ frequency, cos, sin }) => {
    const [re, im] = [cos.scale(half).rational as Rational, sin.scale(half).rational as Rational];
    return [
      { frequency, re, im },
      { frequency: frequency.map((k) => -k), re, im: im.neg() },
    ];
  });
  const method = "dual walk in exact integers, paired with the density";
  return (tables, table, _, step) => {
    let re = Rational.ZERO;
    let im = Rational.ZERO;
    for (const term of both) {
      const c = tables.integerAt(table, term.frequency);
      re = re.add(term.re.mul(Rational.of(c.re))).add(term.im.neg().mul(Rational.of(c.im)));
      im = im.add(term.im.mul(Rational.of(c.re))).add(term.re.mul(Rational.of(c.im)));
    }
    const over = Rational.of(1n, total ** BigInt(step));
    return { real: exactQuantity(re.mul(over), method), imag: exactQuantity(im.mul(over), method) };
  };
}

export function readerOf(start: Start, dimension: number): TableReader {
  if (start.type === "point") return atPoint(pointFractions(start.point), "dual walk evaluated at the start");
  if (start.type === "density") return againstDensity(start, dimension);
  return () => exactly(0n, "the uniform law is invariant");
}
