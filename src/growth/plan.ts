/** How much is sampled: a function of the walk and the options alone, so that results do not depend on the machine. */
import type { GrowthTable } from "../kernel/growth.js";
import type { Effort } from "../session.js";
import { batchEnds } from "../statistics/batches.js";

export interface SamplingPlan {
  /** At most; without a tolerance, all of them. A multiple of `round`. */
  readonly replicates: number;
  /** Replicates between two looks at the interval. */
  readonly round: number;
  /** Replicates in a job. */
  readonly perJob: number;
  readonly steps: number;
  readonly warmUp: number;
  /** Counted moves at which logarithms are taken; increasing, the last is `steps`. */
  readonly checkpoints: readonly number[];
  /** The checkpoints that end batches, an even number of them: the middle one is at half the steps. */
  readonly batches: readonly number[];
}

/** Nanoseconds of one thread that an effort may spend on sampling (on a machine of some 3 GHz). */
const BUDGET: Record<Effort, number> = { quick: 1.6e9, standard: 1.6e10, thorough: 1.1e11 };
const REPLICATES: Record<Effort, number> = { quick: 64, standard: 128, thorough: 768 };
const ROUND = 32;
const JOB_NANOSECONDS = 4e8;
const MAX_REPLICATES = 4096;

/** Nanoseconds a move: the draw, the share of a word's matrix, the share of an orthonormalisation. */
export function costOf(table: GrowthTable): number {
  const { dimension: d, length, every } = table;
  if (d === 2) return 20 + 8 / length;
  return 20 + (1.2 * d * d * d) / length + (6 * d * d * d) / (length * every);
}

/** Powers of two from 8 on, for a curve that also shows short products. */
function early(steps: number): number[] {
  const out: number[] = [];
  for (let k = 8; k < steps; k *= 2) out.push(k);
  return out;
}

export function samplingPlan(table: GrowthTable, effort: Effort, steps: number | undefined): SamplingPlan {
  const cost = costOf(table);
  const n = steps ?? Math.max(64, 64 * Math.floor(BUDGET[effort] / cost / REPLICATES[effort] / 64));
  const affordable = Math.floor(BUDGET[effort] / cost / n / ROUND) * ROUND;
  const replicates = steps === undefined ? REPLICATES[effort] : Math.max(ROUND, Math.min(MAX_REPLICATES, affordable));
  const perJob = Math.max(4, Math.min(ROUND, 4 * Math.floor(JOB_NANOSECONDS / (4 * n * cost))));
  const batches = batchEnds(n, 2 * Math.max(1, Math.min(64, Math.floor(Math.sqrt(n) / 8))));
  const checkpoints = [...new Set([...early(n), ...batches])].sort((a, b) => a - b);
  return { replicates, round: ROUND, perJob, steps: n, warmUp: 1024 + Math.floor(n / 16), checkpoints, batches };
}
