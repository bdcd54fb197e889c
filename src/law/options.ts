/** Options of `law`, read and checked. */

import { notInIntegers } from "../dual/integers.js";
import { type Fault, OptionsError } from "../errors.js";
import type { CommonOptions, Effort } from "../session.js";
import type { Walk } from "../walk/walk.js";

export interface LawOptions extends CommonOptions {
  /** The frequency k: d whole numbers below 2^63 in size. */
  readonly frequency: readonly (bigint | number | string)[];
  /** The last step n wanted; default: as many as the effort allows, up to 40. */
  readonly steps?: number;
  /** Exact fractions, from integers over the weights' common denominator: for a density with rational coefficients, no translations. */
  readonly exact?: boolean;
  /** Also the distance to uniform and the norm bound, which do not depend on the frequency; default true. */
  readonly distance?: boolean;
}

export interface LawRequest {
  readonly frequency: readonly bigint[];
  readonly steps: number;
  /** Whether the caller asked for that many steps. */
  readonly asked: boolean;
}

const DEFAULT_STEPS = 40;
const MOST_STEPS = 1_000_000;

/** What one call may spend: frequencies in a table, and products in all. Not time: the answer is the same everywhere. */
export const LAW_BUDGET: Readonly<Record<Effort, { readonly entries: number; readonly products: number }>> = {
  quick: { entries: 2 ** 20, products: 5e6 },
  standard: { entries: 2 ** 22, products: 6e7 },
  thorough: { entries: 2 ** 24, products: 6e8 },
};

function whole(x: bigint | number | string): bigint | undefined {
  if (typeof x === "bigint") return x;
  if (typeof x === "number") return Number.isSafeInteger(x) ? BigInt(x) : undefined;
  return /^\s*[+-]?\d+\s*$/.test(x) ? BigInt(x.trim().replace(/^\+/, "")) : undefined;
}

function notRational({ start }: Walk): string | undefined {
  if (start.type !== "density") return start.type === "point" ? "a start at one point" : undefined;
  const rational = start.terms.every((t) => t.cos.rational !== undefined && t.sin.rational !== undefined);
  return rational ? undefined : "a density with an irrational coefficient";
}

/** @throws OptionsError naming every option that is wrong. */
export function readOptions(options: LawOptions, walk: Walk): LawRequest {
  const { dimension } = walk;
  const faults: Fault[] = [];
  const given: unknown = options.frequency;
  const list: readonly (bigint | number | string)[] = Array.isArray(given) ? given : [];
  const frequency = list.map(whole);
  const limit = 1n << 63n;
  const good = frequency.every((k) => k !== undefined && k > -limit && k < limit);
  if (list.length !== dimension || !good) {
    const accepted = `${dimension} whole numbers below 2^63 in size, separated by commas`;
    faults.push({ pointer: "--frequency", message: `found ${list.join(",") || "nothing"}; accepted: ${accepted}` });
  }
  const { steps = DEFAULT_STEPS } = options;
  if (!(Number.isInteger(steps) && steps >= 0 && steps <= MOST_STEPS)) {
    faults.push({ pointer: "--steps", message: `found ${steps}; accepted: a whole number from 0 to ${MOST_STEPS}` });
  }
  if (options.exact === true) {
    const found = notInIntegers(walk) ?? notRational(walk);
    const accepted = "walks without translations that start from a density with rational coefficients";
    if (found !== undefined) faults.push({ pointer: "--exact", message: `found ${found}; accepted: ${accepted}` });
  }
  if (faults.length > 0) throw new OptionsError(faults);
  return { frequency: frequency as bigint[], steps, asked: options.steps !== undefined };
}
