/** Integer matrices of determinant +-1 and their action on integer vectors. */
import type { IntegerMatrix } from "../walk/integers.js";

export {
  type IntegerMatrix,
  inverseMatrix as inverse,
  multiplyMatrices as multiply,
  transpose,
} from "../walk/integers.js";

/** The product a v, v a column. */
export function apply(a: IntegerMatrix, v: readonly bigint[]): bigint[] {
  return a.map((row) => row.reduce((sum, x, i) => sum + x * (v[i] as bigint), 0n));
}
