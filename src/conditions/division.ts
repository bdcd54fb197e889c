/** Whether matrices that commute with every move form a division algebra over the reals. */
import { type IntegerMatrix, multiply } from "../dual/matrix.js";
import { countRealRoots } from "../exact/polynomial.js";
import { Rational } from "../exact/rational.js";
import { isDefinite } from "./algebra.js";
import { Span } from "./elimination.js";
import { characteristicPolynomial, combine, identity, trace } from "./matrix.js";

const abs = (a: bigint) => (a < 0n ? -a : a);

/** Distinct real roots of a monic integer polynomial, counted by Sturm's theorem, and a whole one where there is one. */
export function realRoots(f: readonly bigint[]): { count: number; integer?: bigint } {
  // Every root has modulus at most 1 + the sum of the |c_j|.
  const bound = f.slice(0, -1).reduce((sum, c) => sum + abs(c), 1n);
  const count = (low: bigint, high: bigint) => countRealRoots(f, Rational.of(low), Rational.of(high));
  const total = count(-bound, bound);
  if (total === 0) return { count: 0 };
  // Bisection down to unit intervals that hold roots: their ends are the only whole candidates.
  const pending: [bigint, bigint][] = [[-bound, bound]];
  for (let next = pending.pop(); next !== undefined; next = pending.pop()) {
    const [low, high] = next;
    if (count(low, high) === 0) continue;
    if (high - low > 1n) {
      const middle = (low + high) / 2n;
      pending.push([low, middle], [middle, high]);
      continue;
    }
    const value = (x: bigint) => f.reduceRight((sum, c) => sum * x + c, 0n);
    const integer = [low, high].find((x) => value(x) === 0n);
    if (integer !== undefined) return { count: total, integer };
  }
  return { count: total };
}

function isScalar(a: IntegerMatrix): boolean {
  return a.every((row, i) => row.every((x, j) => x === (i === j ? a[0][0] : 0n)));
}

/**
 * For the commutant of a semisimple set, given by a basis of which no matrix that is not
 * scalar has a real eigenvalue. Real division algebras have dimension 1, 2 or 4
 * (Frobenius); one of dimension 2 is then the complex numbers, and one of dimension 4 is
 * the quaternions exactly if x -> x^2 is a negative definite form on the matrices of trace 0.
 */
export function isDivisionAlgebra(basis: readonly IntegerMatrix[]): boolean {
  if (basis.length <= 2) return true;
  if (basis.length !== 4) return false;
  const d = basis[0].length;
  const span = new Span();
  const imaginary: bigint[][][] = [];
  for (const m of basis) {
    const pure = combine(BigInt(d), m, -trace(m), identity(d));
    if (span.add(pure.flat())) imaginary.push(pure);
  }
  const sums = imaginary.map((x) => imaginary.map((y) => combine(1n, multiply(x, y), 1n, multiply(y, x))));
  if (!sums.flat().every(isScalar)) return false;
  const gram = sums.map((row) => row.map((m) => m[0][0]));
  return gram[0][0] < 0n && isDefinite(gram);
}

/**
 * A combination of the matrices without real eigenvalues, by trying `tries` small ones in a
 * fixed irregular order; undefined where none was met.
 */
export function withoutRealEigenvalues(basis: readonly IntegerMatrix[], tries = 40): bigint[][] | undefined {
  // In odd dimension every matrix has a real eigenvalue.
  if (basis.length < 2 || basis[0].length % 2 === 1) return undefined;
  let state = 1;
  const coefficient = () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return BigInt(((state >>> 12) % 15) - 7);
  };
  for (let n = 0; n < tries; n++) {
    const mixed = basis.reduce<bigint[][]>(
      (sum, m) => combine(1n, sum, coefficient(), m),
      basis[0].map((row) => row.map(() => 0n)),
    );
    if (realRoots(characteristicPolynomial(mixed)).count === 0) return mixed;
  }
  return undefined;
}
