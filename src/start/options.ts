/** Options of `start`, read and checked. */
import { OptionsError } from "../errors.js";
import type { CommonOptions } from "../session.js";

export interface StartOptions extends CommonOptions {
  /** Largest denominator of the rational points that are looked for; default 1000, at most 10^9. */
  readonly denominators?: number;
}

const MOST = 1_000_000_000;

/** @throws OptionsError */
export function readDenominators({ denominators = 1000 }: StartOptions): number {
  if (Number.isInteger(denominators) && denominators >= 1 && denominators <= MOST) return denominators;
  throw new OptionsError([
    { pointer: "--denominators", message: `found ${denominators}; accepted: a whole number from 1 to ${MOST}` },
  ]);
}
