/** Runs of one letter, a^l or b^l: the matrices that weigh the transfer operator of exponent.ts, with radii. */
import { type Cylinder, multiplyBounds, rowTimes, transpose } from "./cylinders.js";
import type { MatrixBounds, VectorBounds } from "./solve.js";

/** Terms of a sum over runs, at most. */
const RUNS = 600;

/** One side of the operator: from the functions on one letter's part to those on the other's. */
export interface Side {
  /** (P^l) for l = 1, ..., L: mid points, row-major, and radii. */
  readonly powers: readonly { readonly mid: Float64Array; readonly rad: Float64Array }[];
  /** The states in which a run can end: the columns of P that are not 0. */
  readonly columns: readonly number[];
  /** Bound of the row sums of sum_{l > L} P^l. */
  readonly tail: number;
  /** For each piece c P^l, l = 1, ..., L, and a bound of the sum of the entries of the rest. */
  readonly rows: readonly {
    readonly powers: readonly { mid: Float64Array; rad: Float64Array }[];
    readonly tail: number;
  }[];
}

const half = ({ low, high }: VectorBounds) => ({
  mid: Float64Array.from(low, (x, i) => x + (high[i]! - x) / 2),
  // Two roundings of the mid point, one of the difference.
  rad: Float64Array.from(low, (x, i) => (high[i]! - x) * 0.5 * (1 + 2 ** -40) + high[i]! * 2 ** -51),
});

export const total = (x: ArrayLike<number>) => {
  let sum = 0;
  for (let i = 0; i < x.length; i++) sum += x[i]!;
  return sum * (1 + x.length * 2 ** -51);
};

/** The largest row sum. */
export function rowSums(m: Float64Array, n: number): number {
  let most = 0;
  for (let i = 0; i < n; i++) most = Math.max(most, total(m.subarray(i * n, (i + 1) * n)));
  return most;
}

export function sideOf(p: MatrixBounds, cylinders: readonly Cylinder[], n: number): Side | undefined {
  const powers: { mid: Float64Array; rad: Float64Array }[] = [];
  let power = p;
  /** Length after which the row sums are at most 1/2: then those of all powers add up to at most twice it. */
  let halving = 0;
  for (let l = 1; ; l++) {
    powers.push(half(power));
    const sums = rowSums(power.high, n);
    if (halving === 0 && sums <= 0.5) halving = l;
    if (halving > 0 && sums < 2 ** -68) break;
    if (l === RUNS) return undefined;
    power = multiplyBounds(power, p, n);
  }
  // Row sums of powers are probabilities: at most 1, so that those from L + 1 on add up to
  // at most the row sums of P^L times those of P + P^2 + ...
  const rest = rowSums(power.high, n) * 2 * halving * (1 + 2 ** -40);
  const turned = transpose(p, n);
  const rows = cylinders.map(({ weights }) => {
    const list: { mid: Float64Array; rad: Float64Array }[] = [];
    let c = weights;
    for (let l = 0; l < powers.length; l++) {
      c = rowTimes(c, turned);
      list.push(half(c));
    }
    return { powers: list, tail: total(c.high) * 2 * halving * (1 + 2 ** -40) };
  });
  const columns = Array.from({ length: n }, (_, k) => k).filter((k) => p.high.some((x, i) => i % n === k && x > 0));
  return { powers, columns, tail: rest, rows };
}

/** Which side leads from where to where: B(t) comes from A by runs of a, A(s) from B by runs of b. */
export type Part = "A" | "B";
export const PARTS: readonly Part[] = ["A", "B"];
export const other = (part: Part): Part => (part === "A" ? "B" : "A");
