/** Replicates of the cocycle over the pool's threads, in rounds, until a tolerance or the plan's end. */
import type { GrowthTable } from "../kernel/growth.js";
import type { Session } from "../session.js";
import { exponentEstimates } from "./intervals.js";
import { sampleJob } from "./jobs.js";
import type { SamplingPlan } from "./plan.js";

export interface GrowthSamples {
  readonly plan: SamplingPlan;
  readonly replicates: number;
  /** Exponents that were followed: 1 in dimension 2, else d. */
  readonly exponents: number;
  /** Logarithms laid out [replicate][checkpoint][exponent]. */
  readonly logs: Float64Array<ArrayBuffer>;
}

/** The logarithm of replicate r after plan.checkpoints[c] moves. */
export function logAt(samples: GrowthSamples, r: number, c: number, exponent: number): number {
  const points = samples.plan.checkpoints.length;
  return samples.logs[(r * points + c) * samples.exponents + exponent] as number;
}

export async function sampleReplicates(
  session: Session,
  table: GrowthTable,
  plan: SamplingPlan,
  tolerance: number | undefined,
): Promise<GrowthSamples> {
  const exponents = table.dimension === 2 ? 1 : table.dimension;
  const { warmUp, checkpoints, perJob } = plan;
  const size = checkpoints.length * exponents;
  const logs = new Float64Array(plan.replicates * size);
  for (let have = 0; ; ) {
    const wanted = tolerance === undefined ? plan.replicates : have + plan.round;
    const firsts: number[] = [];
    for (let r = have; r < wanted; r += perJob) firsts.push(r);
    const results = await session.pool.map(
      sampleJob,
      firsts.map((first) => ({
        table,
        run: {
          seed: session.seed,
          firstReplicate: first,
          replicates: Math.min(perJob, wanted - first),
          warmUp,
          checkpoints,
        },
        memoryLimit: session.memoryLimit,
      })),
      {
        signal: session.signal,
        onDone: (done) => session.progress("sampling products", have + done * perJob, plan.replicates),
      },
    );
    for (const [i, result] of results.entries()) logs.set(result, (firsts[i] as number) * size);
    have = wanted;
    const samples = { plan, replicates: have, exponents, logs: logs.subarray(0, have * size) };
    if (have >= plan.replicates) return samples;
    const top = exponentEstimates(samples, session.level).estimates[0];
    if (top !== undefined && tolerance !== undefined && top.halfWidth <= tolerance) return samples;
  }
}
