/**
 * Time averages of observables along the walk: their limit, the limit variance, whether it
 * is 0, and the moves that a given accuracy takes; the exact part beside what replicates show.
 */
import { type Quantity, quantityNumber } from "../quantity/quantity.js";
import { type SharedSession, withSession } from "../session.js";
import { VERSION } from "../version.js";
import { asWalk, type WalkInput } from "../walk/parse.js";
import { exactAverages } from "./exact.js";
import { type AveragesOptions, samplingOf } from "./options.js";
import type { AveragesResult, SampledAverage } from "./result.js";
import { sampleAverages } from "./sampled.js";
import { startCosts } from "./start-cost.js";
import { stepsFor } from "./steps.js";

export type { AveragesOptions } from "./options.js";

/** Replicates from which the variance over them is a better estimate than the batch means within them. */
const MANY = 30;

function sampledVariance(seen: SampledAverage): Quantity {
  return seen.replicates < MANY ? seen.batchMeansVariance : seen.variance;
}

/**
 * Findings for every observable of the walk, in its order; averages run over positions 0 to n - 1.
 * @throws WalkError, OptionsError; LimitError where memory does not suffice; StoppedError
 */
export async function averages(
  input: WalkInput,
  options: AveragesOptions & SharedSession = {},
): Promise<AveragesResult> {
  const walk = asWalk(input);
  return withSession(options, async (session) => {
    const sampling = samplingOf(options, session, walk);
    const { findings, orbit, gap, warnings } = await exactAverages(
      walk,
      session,
      undefined,
      options.generating,
      options.exact,
    );
    const means = findings.map((f) => quantityNumber(f.mean));
    const costs = orbit === undefined ? await startCosts(walk, means, session) : undefined;
    const sampled = await sampleAverages(walk, session, {
      ...sampling,
      means,
      variances: findings.map((f) => (f.variance === undefined ? undefined : quantityNumber(f.variance))),
    });
    return {
      torwend: VERSION,
      walk: walk.title,
      ...(orbit === undefined ? {} : { orbit }),
      ...(gap === undefined ? {} : { gap }),
      observables: findings.map(({ spread, variance: known, ...finding }, i) => {
        const seen = sampled[i]!;
        const variance = known ?? sampledVariance(seen);
        const cost = costs?.[i];
        const startSum = cost === undefined ? undefined : quantityNumber(cost.sum);
        return {
          ...finding,
          variance,
          ...(cost === undefined ? {} : { startCost: cost }),
          stepsFor: stepsFor({ variance, level: session.level, spread, startSum }),
          sampled: seen,
        };
      }),
      warnings,
    };
  });
}
