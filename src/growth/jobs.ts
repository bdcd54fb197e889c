/** The jobs of `growth`: a few replicates' logarithms, the pressure at one s, or bounds by enumeration. */
import { type GrowthRun, type GrowthTable, sampleGrowth } from "../kernel/growth.js";
import { defineJob } from "../kernel/jobs.js";
import { loadKernel } from "../kernel/kernel.js";
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
