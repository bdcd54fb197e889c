/** The modular route's pieces for the pool. */
import { defineJob } from "../kernel/jobs.js";
import { boxBracket } from "./box-bracket.js";
import { findGap } from "./gap.js";
import { modularSums } from "./modular.js";

/** The sums of all observables of one walk. */
export const modularJob = defineJob("averages.modular", modularSums);

/** Norm, spectral radius and free generators. */
export const gapJob = defineJob("averages.gap", findGap);

/** Bounds of a box's variance. */
export const bracketJob = defineJob("averages.bracket", boxBracket);
