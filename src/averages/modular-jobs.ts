/** The modular route's piece for the pool. */
import { defineJob } from "../kernel/jobs.js";
import { modularSums } from "./modular.js";

/** The sums of all observables of one walk. */
export const modularJob = defineJob("averages.modular", modularSums);
