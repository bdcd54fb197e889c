/** Options of `averages`, read and checked before anything is computed. */

import { notInIntegers } from "../dual/integers.js";
import { type Fault, OptionsError } from "../errors.js";
import type { CommonOptions, Session } from "../session.js";
import type { Walk } from "../walk/walk.js";
import { bitsPerMove, defaultSampling } from "./sampled.js";

export interface AveragesOptions extends CommonOptions {
  /** Moves of each sampled replicate; default by effort. */
  readonly steps?: number;
  /** Number of sampled replicates; default by effort, fewer where more moves are asked for (8 at least). */
  readonly replicates?: number;
  /** Points z in (0, 1] at which to evaluate the correlations' generating function, sum of z^n <f, P^n f>. */
  readonly generating?: readonly number[];
  /**
   * Correlations as exact fractions, from integers over the weights' common denominator: for walks
   * without translations and observables with rational coefficients. Default: doubles, enclosed.
   */
  readonly exact?: boolean;
}

/** Where only the moves are given: as many replicates as make the usual work of it, but enough to compare. */
const FEWEST = 8;
function replicatesFor(steps: number, usual: { readonly steps: number; readonly replicates: number }): number {
  const share = Math.floor((usual.steps * usual.replicates) / steps);
  return Math.min(usual.replicates, Math.max(FEWEST, Number.isFinite(share) ? share : FEWEST));
}

function irrationalObservable(walk: Walk): string | undefined {
  const found = walk.observables.find(
    (f) => f.type === "terms" && f.terms.some((t) => t.cos.rational === undefined || t.sin.rational === undefined),
  );
  return found === undefined ? undefined : `an irrational coefficient in ${found.label}`;
}

/** @throws OptionsError naming every option that is wrong. */
export function samplingOf(
  options: AveragesOptions,
  session: Session,
  walk: Walk,
): { steps: number; replicates: number } {
  const usual = defaultSampling(session.effort, walk.dimension, bitsPerMove(walk));
  const { steps = usual.steps, replicates = replicatesFor(steps, usual) } = options;
  const faults: Fault[] = [];
  for (const [pointer, found, most] of [
    ["--steps", steps, 2 ** 31],
    ["--replicates", replicates, 2 ** 20],
  ] as const) {
    if (Number.isInteger(found) && found >= 2 && found <= most) continue;
    faults.push({ pointer, message: `found ${found}; accepted: a whole number from 2 to ${most}` });
  }
  for (const z of options.generating ?? []) {
    if (z > 0 && z <= 1) continue;
    faults.push({ pointer: "--generating", message: `found ${z}; accepted: numbers above 0, at most 1` });
  }
  if (options.exact === true) {
    const found = notInIntegers(walk) ?? irrationalObservable(walk);
    if (found !== undefined) {
      const accepted = "walks without translations, observables with rational coefficients";
      faults.push({ pointer: "--exact", message: `found ${found}; accepted: ${accepted}` });
    }
  }
  if (faults.length > 0) throw new OptionsError(faults);
  return { steps, replicates };
}
