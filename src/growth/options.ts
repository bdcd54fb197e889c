/** Options of `growth`, and what is accepted. */
import { type Fault, OptionsError } from "../errors.js";
import type { CommonOptions } from "../session.js";

export interface GrowthOptions extends CommonOptions {
  /** Wanted half-width of the top exponent's interval, per move; sampling stops there, or at the effort's limit. */
  readonly tolerance?: number;
  /** Wanted decimals of the top exponent. Where it is sampled: a tolerance of half a unit of the last one. */
  readonly digits?: number;
  /** The s at which Lambda(s) is wanted, from -64 to 64; at most -1 only where it can be proved. Default: 0.5, 1, 2, 4. */
  readonly pressure?: readonly number[];
  /** Moves of a replicate, after its warm-up. Default: by effort. */
  readonly steps?: number;
}

export const DEFAULT_PRESSURE: readonly number[] = [0.5, 1, 2, 4];

export interface GrowthWishes {
  readonly tolerance: number | undefined;
  readonly digits: number | undefined;
  readonly pressure: readonly number[];
  readonly steps: number | undefined;
}

/** @throws OptionsError with every fault. */
export function readOptions(options: GrowthOptions): GrowthWishes {
  const faults: Fault[] = [];
  const fault = (pointer: string, found: unknown, accepted: string) =>
    faults.push({ pointer, message: `found ${found}; accepted: ${accepted}` });
  const { tolerance, digits, pressure = DEFAULT_PRESSURE, steps } = options;
  if (tolerance !== undefined && !(tolerance > 0 && Number.isFinite(tolerance))) {
    fault("--tolerance", tolerance, "a positive number");
  }
  if (digits !== undefined && !(Number.isInteger(digits) && digits >= 1 && digits <= 1000)) {
    fault("--digits", digits, "a whole number from 1 to 1000");
  }
  if (steps !== undefined && !(Number.isInteger(steps) && steps >= 64 && steps <= 1e9)) {
    fault("--steps", steps, "a whole number from 64 to 1000000000");
  }
  for (const s of pressure) if (!(s >= -64 && s <= 64)) fault("--pressure", s, "numbers from -64 to 64");
  if (faults.length > 0) throw new OptionsError(faults);
  const byDigits = digits === undefined ? undefined : Math.max(0.5 * Number(`1e-${digits}`), Number.MIN_VALUE);
  const wanted = [tolerance, byDigits].filter((t) => t !== undefined);
  return { tolerance: wanted.length === 0 ? undefined : Math.min(...wanted), digits, pressure, steps };
}
