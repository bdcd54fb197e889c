/** How far the law of x_n is from uniform: the largest low coefficient, and Wasserstein-1. */
import { loadReal } from "../kernel/real.js";
import type { Interval } from "../quantity/interval.js";
import { enclosedQuantity, exactQuantity, type Quantity } from "../quantity/quantity.js";
import type { Session } from "../session.js";
import type { Walk } from "../walk/walk.js";
import { moduliJob } from "./jobs.js";
import type { DistanceToUniform } from "./result.js";
import { smoothings, wasserstein } from "./smoothing.js";

/** Frequencies up to sign; the cutoff is the largest with no more than these. */
const FREQUENCIES = { quick: 40, standard: 144, thorough: 544 } as const;
/** Products of all of them together. */
const PRODUCTS = { quick: 1.5e6, standard: 1.5e7, thorough: 3e8 } as const;
const PER_JOB = 8;
/** Steps at most: rational starts would go on for ever. */
const MOST_STEPS = 100;

/** K for a walk of this dimension: at least 1. */
export function cutoffFor(dimension: number, effort: Session["effort"]): number {
  let cutoff = 1;
  while (((2 * cutoff + 3) ** dimension - 1) / 2 <= FREQUENCIES[effort]) cutoff++;
  return cutoff;
}

/** All k with 0 < max |k_j| <= K whose first component that is not 0 is positive. */
export function lowHalf(dimension: number, cutoff: number): number[][] {
  let all: number[][] = [[]];
  const range = Array.from({ length: 2 * cutoff + 1 }, (_, i) => i - cutoff);
  for (let j = 0; j < dimension; j++) all = all.flatMap((k) => range.map((x) => [...k, x]));
  return all.filter((k) => (k.find((x) => x !== 0) ?? 0) > 0);
}

const enclosed = ({ low, high }: Interval, method: string): Quantity =>
  low === high && Number.isInteger(low) ? exactQuantity(BigInt(low), method) : enclosedQuantity(low, high, method);

/** More frequencies than this are not followed: in dimension 8 even K = 1 has 3280, and bounds that say little. */
const MOST_FREQUENCIES = 1200;

/** Distances at n = 0, 1, ..., as far as every coefficient was followed; undefined in dimension 8. */
export async function distanceToUniform(
  walk: Walk,
  asked: number,
  session: Session,
): Promise<DistanceToUniform | undefined> {
  const steps = Math.min(asked, MOST_STEPS);
  const cutoff = cutoffFor(walk.dimension, session.effort);
  if (((2 * cutoff + 1) ** walk.dimension - 1) / 2 > MOST_FREQUENCIES) return undefined;
  const half = lowHalf(walk.dimension, cutoff);
  const products = Math.ceil(PRODUCTS[session.effort] / half.length);
  const payloads = Array.from({ length: Math.ceil(half.length / PER_JOB) }, (_, i) => ({
    document: walk.document,
    memoryLimit: session.memoryLimit,
    frequencies: half.slice(i * PER_JOB, (i + 1) * PER_JOB).map((k) => k.map(BigInt)),
    steps,
    entries: 2 * products + 64,
    products,
  }));
  const parts = await session.pool.map(moduliJob, payloads, {
    signal: session.signal,
    onDone: (done) => session.progress("distance to uniform", done, payloads.length),
  });
  const moduli = parts.flat();
  const reached = moduli.reduce((m, list) => Math.min(m, list.length), steps + 1);
  const kernels = smoothings(cutoff, walk.dimension, await loadReal());
  const rows = Array.from({ length: reached }, (_, step) => {
    const at = half.map((frequency, i) => ({ frequency, modulus: moduli[i]![step]! }));
    const largest = at.reduce((a, b) => (b.modulus.high > a.modulus.high ? b : a));
    // The largest is at least every lower end.
    const low = at.reduce((m, { modulus }) => Math.max(m, modulus.low), 0);
    return {
      step,
      largest: enclosed({ low, high: largest.modulus.high }, `largest of ${half.length} coefficients up to sign`),
      frequency: largest.frequency,
      wasserstein: enclosed(
        wasserstein(at, kernels),
        "smoothing inequality (Bobkov and Ledoux 2021, Fejér's kernel); from below by one wave",
      ),
    };
  });
  return { cutoff, frequencies: half.length, steps: rows };
}
