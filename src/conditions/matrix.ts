/** What the conditions ask of integer matrices beyond products: traces, polynomials, text. */
import { type IntegerMatrix, multiply } from "../dual/matrix.js";
import { identityMatrix as identity } from "../walk/integers.js";

export { identity };

export function trace(a: IntegerMatrix): bigint {
  return a.reduce((sum, row, i) => sum + row[i], 0n);
}

export function matrixKey(a: IntegerMatrix): string {
  return a.map((row) => row.join(" ")).join(";");
}

export function isIdentity(a: IntegerMatrix): boolean {
  return a.every((row, i) => row.every((x, j) => x === (i === j ? 1n : 0n)));
}

/** x a + y b. */
export function combine(x: bigint, a: IntegerMatrix, y: bigint, b: IntegerMatrix): bigint[][] {
  return a.map((row, i) => row.map((e, j) => x * e + y * b[i][j]));
}

/**
 * det(x I - a), coefficients from the constant term up, by Faddeev and Le Verrier's
 * recursion: every division is exact.
 */
export function characteristicPolynomial(a: IntegerMatrix): bigint[] {
  const d = a.length;
  const unit = identity(d);
  const coefficients = new Array<bigint>(d + 1).fill(0n);
  coefficients[d] = 1n;
  let m: IntegerMatrix = unit;
  for (let k = 1; k <= d; k++) {
    const am = multiply(a, m);
    const c = -trace(am) / BigInt(k);
    coefficients[d - k] = c;
    m = combine(1n, am, c, unit);
  }
  return coefficients;
}

/** For reports: a JSON number where that is exact, else a decimal string. */
export function plain(n: bigint): number | string {
  const x = Number(n);
  return Number.isSafeInteger(x) ? x : n.toString();
}

export function plainVector(v: readonly bigint[]): (number | string)[] {
  return v.map(plain);
}

export function plainMatrix(a: IntegerMatrix): (number | string)[][] {
  return a.map(plainVector);
}
