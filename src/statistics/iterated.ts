/** The law of the iterated logarithm (Hartman and Wintner 1941): lim sup |S_n - n m| / sqrt(2 n v log log n) = 1. */
import type { Real } from "../kernel/real.js";

/** The envelope is used from this n on: log log 16 > 1. */
export const ENVELOPE_FROM = 16;

/**
 * sqrt(2 v n log log n), the envelope of the centred sum after n steps; n below 16 counts
 * as 16 in the double logarithm, which would vanish or lose its meaning there.
 */
export function envelope(n: number, variance: number, real: Real): number {
  return Math.sqrt(2 * variance * n * real.log(real.log(Math.max(n, ENVELOPE_FROM))));
}
