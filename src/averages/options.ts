/** Options of `averages`, read and checked before anything is computed. */
import { type Fault, OptionsError } from "../errors.js";
import type { CommonOptions, Session } from "../session.js";
import type { Walk } from "../walk/walk.js";
import { bitsPerMove, defaultSampling } from "./sampled.js";

export interface AveragesOptions extends CommonOptions {
  /** Moves of each sampled replicate; default by effort. */
  readonly steps?: number;
  /** Number of sampled replicates; default by effort. */
  readonly replicates?: number;
}

/** @throws OptionsError naming every option that is wrong. */
export function samplingOf(
  options: AveragesOptions,
  session: Session,
  walk: Walk,
): { steps: number; replicates: number } {
  const usual = defaultSampling(session.effort, walk.dimension, bitsPerMove(walk));
  const { steps = usual.steps, replicates = usual.replicates } = options;
  const faults: Fault[] = [];
  for (const [pointer, found, most] of [
    ["--steps", steps, 2 ** 31],
    ["--replicates", replicates, 2 ** 20],
  ] as const) {
    if (Number.isInteger(found) && found >= 2 && found <= most) continue;
    faults.push({ pointer, message: `found ${found}; accepted: a whole number from 2 to ${most}` });
  }
  if (faults.length > 0) throw new OptionsError(faults);
  return { steps, replicates };
}
