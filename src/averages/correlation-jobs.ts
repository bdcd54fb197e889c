/** The correlations' piece for the pool. In a file of its own name: bundles keep the side effects of files ending in jobs.ts only. */
import { defineJob } from "../kernel/jobs.js";
import { correlationSums } from "./correlations.js";

/** The sums of one observable. */
export const correlationsJob = defineJob("averages.correlations", correlationSums);
