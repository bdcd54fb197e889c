/** The Poisson equation's piece for the pool. */
import { defineJob } from "../kernel/jobs.js";
import { poissonFit } from "./poisson.js";

/** The best g of one observable. */
export const poissonJob = defineJob("averages.poisson", poissonFit);
