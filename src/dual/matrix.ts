/** Exact integer matrices of determinant +-1, as rows of BigInt. */
import { Rational } from "../exact/rational.js";

export type IntegerMatrix = readonly (readonly bigint[])[];

export function transpose(a: IntegerMatrix): bigint[][] {
  return a.map((_, j) => a.map((row) => row[j] as bigint));
}

export function multiply(a: IntegerMatrix, b: IntegerMatrix): bigint[][] {
  return a.map((row) => b.map((_, j) => row.reduce((sum, x, i) => sum + x * (b[i]?.[j] as bigint), 0n)));
}

export function apply(a: IntegerMatrix, v: readonly bigint[]): bigint[] {
  return a.map((row) => row.reduce((sum, x, i) => sum + x * (v[i] as bigint), 0n));
}

/** The inverse, by elimination in exact fractions. @throws RangeError where the determinant is not +-1. */
export function inverse(a: IntegerMatrix): bigint[][] {
  const d = a.length;
  const rows = a.map((row, i) => [
    ...row.map((x) => Rational.of(x)),
    ...row.map((_, j) => (i === j ? Rational.ONE : Rational.ZERO)),
  ]);
  for (let c = 0; c < d; c++) {
    const pivot = rows.findIndex((row, r) => r >= c && row[c]?.sign() !== 0);
    if (pivot < 0) throw new RangeError("inverse: the determinant is 0");
    [rows[c], rows[pivot]] = [rows[pivot] as Rational[], rows[c] as Rational[]];
    const lead = rows[c]?.[c] as Rational;
    rows[c] = (rows[c] as Rational[]).map((x) => x.div(lead));
    for (let r = 0; r < d; r++) {
      const factor = rows[r]?.[c] as Rational;
      if (r === c || factor.sign() === 0) continue;
      rows[r] = (rows[r] as Rational[]).map((x, j) => x.sub(factor.mul(rows[c]?.[j] as Rational)));
    }
  }
  return rows.map((row) =>
    row.slice(d).map((x) => {
      if (!x.isInteger()) throw new RangeError("inverse: the determinant is not +-1");
      return x.num;
    }),
  );
}
