/**
 * Proved bounds on what rounding does to frequency tables (u = 2^-53 throughout).
 *
 * Write |F| for the sum of |coefficients| over all frequencies. One step sends a
 * coefficient c to the terms w_i c, w_i = p_i exp(2 pi i k.b_i), and adds what meets.
 * - The exact step does not lengthen: |P F| <= |F|, and an error E in |.| stays at most E.
 * - A term: p_i is rounded (u), and multiplied (u). With a phase: its own error 8 u
 *   (assembly/dual/phase.ts), times p_i (u), and a complex product (2 sqrt(2) u).
 * - A frequency k' is met by at most one k for each move (M_i is invertible; folded, +-k
 *   is one entry), so at most m terms meet, at a cost of (m - 1) u of their absolute sum.
 * Hence E' <= E + kappa u (|F| + E) with kappa = m + 2, or m + 13 with phases; products of
 * second order are below the unit of slack in kappa while m < 2^20. Products that fall
 * below the normal range lose at most 2^-1074 each, less than 2^-1000 in all.
 */
export const U = 2 ** -53;
const UP = 1 + 2 ** -48;

/** A table's size |F| (exact function, an upper bound) and the bound E on its error, both in the sum of |coefficients|. */
export interface TableBound {
  readonly size: number;
  readonly error: number;
}

/** The bound after one more step by `moves` moves. */
export function afterStep(bound: TableBound, moves: number, phases: boolean): TableBound {
  const kappa = phases ? moves + 13 : moves + 2;
  return { size: bound.size, error: (bound.error + kappa * U * (bound.size + bound.error) + 2 ** -1000) * UP };
}

/**
 * Bound on the error of `evaluate`: each term has a phase (8 u) and a complex product (3 u),
 * the sum is compensated (u, and (N u)^2 < u / 2 for N < 2^26), the table is off by E.
 */
export function evaluationError(bound: TableBound): number {
  return (bound.error + 14 * U * (bound.size + bound.error)) * UP;
}

/**
 * Bound on the error of `pair`'s sum (both halves of a fold counted): with computed tables
 * a, b and exact ones A, B, sum |a b - A B| <= E_a max|b| + E_b (max|a| + E_a), and the
 * compensated sum of rounded products costs at most 3 u of the absolute sum.
 * @param absolute the absolute sum as computed (an upper bound but for N u of it), both halves
 */
export function pairingError(
  a: TableBound,
  b: TableBound,
  largestA: number,
  largestB: number,
  absolute: number,
): number {
  return (a.error * largestB + b.error * (largestA + a.error) + 4 * U * absolute + 2 ** -1000) * UP;
}
