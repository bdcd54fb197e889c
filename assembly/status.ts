/**
 * What a kernel that can fail returns. The border reads these through the exported
 * getters, so that no number is declared twice.
 */
export const OK: i32 = 0;
/** A 64-bit frequency component would overflow. */
export const OVERFLOW: i32 = 1;
/** A table has reached the size that the border planned for it. */
export const FULL: i32 = 2;
/** A self-check (residue, carried bits) failed: the result must not be used. */
export const CHECK_FAILED: i32 = 3;
/** An iteration did not reach its tolerance within its limit. */
export const NOT_CONVERGED: i32 = 4;

export function statusOverflow(): i32 {
  return OVERFLOW;
}
export function statusFull(): i32 {
  return FULL;
}
export function statusCheckFailed(): i32 {
  return CHECK_FAILED;
}
export function statusNotConverged(): i32 {
  return NOT_CONVERGED;
}
