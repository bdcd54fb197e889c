/** The jobs of `growth`: a few replicates' logarithms, the pressure at one s, bounds by enumeration or by words of the modular group. */

import { Rational } from "../exact/rational.js";
import { type GrowthRun, type GrowthTable, sampleGrowth } from "../kernel/growth.js";
import { defineJob } from "../kernel/jobs.js";
import { loadKernel } from "../kernel/kernel.js";
import { loadReal } from "../kernel/real.js";
import { encloseExponent } from "../modular/exponent.js";
import type { Matrix2 } from "../modular/words.js";
import { type PopulationRun, populationPressure } from "./population.js";
import { runWords, type WordsJob } from "./words.js";

export interface SampleJob {
  readonly table: GrowthTable;
  readonly run: GrowthRun;
  readonly memoryLimit: number;
}

/** Logarithms laid out [replicate][checkpoint][exponent]. */
export const sampleJob = defineJob("growth.sample", async ({ table, run, memoryLimit }: SampleJob) =>
  sampleGrowth(await loadKernel({ memoryLimit }), table, run),
);

/** One estimate of Lambda(s) for each independent population. */
export const populationJob = defineJob("growth.population", (run: PopulationRun) => populationPressure(run));

/** Bounds of lambda_1, or of n times an upper bound of it, by enumeration of words. */
export const wordsJob = defineJob("growth.words", (job: WordsJob) => runWords(job));

export interface ExponentJob {
  readonly matrices: readonly Matrix2[];
  readonly probabilities: readonly { readonly num: bigint; readonly den: bigint }[];
  readonly work: number;
}

/** Dimension 2: lambda_1 between bounds, or undefined. */
export const exponentJob = defineJob("growth.exponent", async ({ matrices, probabilities, work }: ExponentJob) =>
  encloseExponent(
    matrices,
    probabilities.map((p) => Rational.of(p.num, p.den)),
    await loadReal(),
    work,
  ),
);
