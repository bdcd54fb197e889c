/**
 * Are doubles enough? Rounding matters where products shrink a direction far and bring it
 * back: what a vector lost cannot come back. A few runs are repeated with exact integers,
 * same start and same moves, and compared.
 */
import { type GrowthTable, sampleGrowth } from "../kernel/growth.js";
import { loadKernel } from "../kernel/kernel.js";
import type { Real } from "../kernel/real.js";
import type { Session } from "../session.js";
import type { Walk } from "../walk/walk.js";
import { exactVectorGrowth } from "./products.js";

const REPLICATES = 8;
const BITS = 2 ** 14;

export interface DoublesCheck {
  readonly moves: number;
  /** Largest difference of log |A_n...A_1 v| between doubles and exact integers. */
  readonly worst: number;
  /** Mean absolute difference per move. */
  readonly rate: number;
}

export async function checkDoubles(
  walk: Walk,
  table: GrowthTable,
  session: Session,
  top: number,
  real: Real,
): Promise<DoublesCheck> {
  // So many moves that the exact vectors stay below some 2^14 bits.
  const moves = Math.max(64, Math.min(2048, Math.floor((BITS * Math.LN2) / Math.max(top, 0.01))));
  const kernel = await loadKernel({ memoryLimit: session.memoryLimit });
  const run = { seed: session.seed, firstReplicate: 0, replicates: REPLICATES, warmUp: 1, checkpoints: [moves] };
  const logs = sampleGrowth(kernel, table, run);
  const exponents = logs.length / REPLICATES;
  const exact = await exactVectorGrowth(walk, session.seed, REPLICATES, 1, moves, real);
  const gaps = exact.map((x, r) => Math.abs((logs[r * exponents] as number) - x));
  return { moves, worst: Math.max(...gaps), rate: gaps.reduce((a, b) => a + b, 0) / REPLICATES / moves };
}
