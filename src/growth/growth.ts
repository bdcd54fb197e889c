/** `growth`: how fast do products grow? */
import { cumulativeWeights } from "../kernel/draws.js";
import { growthTable } from "../kernel/growth.js";
import { loadReal } from "../kernel/real.js";
import { estimatedQuantity, type Quantity } from "../quantity/quantity.js";
import { type Session, type SharedSession, withSession } from "../session.js";
import { meanEstimate } from "../statistics/intervals.js";
import { VERSION } from "../version.js";

import type { Walk } from "../walk/walk.js";
import { exponentEstimates, logNormVariance, type RateEstimate } from "./intervals.js";
import { type GrowthOptions, type GrowthWishes, readOptions } from "./options.js";
import { samplingPlan } from "./plan.js";
import { pressureEstimator, pressureTable } from "./pressure.js";
import { rateTable } from "./rate.js";
import type { GrowthResult } from "./result.js";
import { type GrowthSamples, logAt, sampleReplicates } from "./sample.js";

export type { GrowthOptions } from "./options.js";
export type { GrowthResult } from "./result.js";

/**
 * Exponents, variance of the log norm, pressure and rates of the walk's products, in natural
 * logarithms per move. The norm is the Euclidean one; exponents and pressure do not depend on
 * the norm, and the curve and the variance follow the length of a generic vector, counted
 * from the end of a warm-up.
 *
 * @throws WalkError, OptionsError for wrong input; LimitError where memory or the draws'
 * 63 bits do not suffice; StoppedError when the signal fires.
 */
export async function growth(walk: Walk, options: GrowthOptions & SharedSession = {}): Promise<GrowthResult> {
  const parsed = walk;
  const wishes = readOptions(options);
  return withSession(options, (session) => growthOf(parsed, wishes, session));
}

/** The same for a walk that is parsed and a session that is open. */
export async function growthOf(walk: Walk, wishes: GrowthWishes, session: Session): Promise<GrowthResult> {
  const real = await loadReal();
  const matrices = walk.moves.map((m) => m.matrix);
  const table = growthTable(matrices, cumulativeWeights(walk.moves.map((m) => m.probability)));
  const plan = samplingPlan(table, session.effort, wishes.steps);
  const samples = await sampleReplicates(session, table, plan, wishes.tolerance);
  const { estimates, residual } = exponentEstimates(samples, session.level);
  const variance = logNormVariance(samples, session.level, real);
  const estimator = pressureEstimator(walk, session, real);
  const pressure = await pressureTable(walk, wishes.pressure, estimator, real);
  const rate = await rateTable(estimator);
  return {
    torwend: VERSION,
    walk: walk.title,
    exponents: exponentQuantities(walk.dimension, estimates, samples, session.level),
    logNormVariance: estimatedQuantity(variance.value, variance.method, variance.interval, session.level),
    pressure,
    rate,
    curve: curveOf(samples, session.level),
    replicates: samples.replicates,
    moves: plan.steps,
    warnings: warningsOf(estimates, residual, variance.irregular, wishes),
  };
}

function exponentQuantities(
  dimension: number,
  estimates: readonly RateEstimate[],
  samples: GrowthSamples,
  level: number,
): Quantity[] {
  const { plan, replicates } = samples;
  const method = `renormalised products, ${replicates} replicates of ${plan.steps} moves after ${plan.warmUp}, Student's interval`;
  const quantity = (value: number, half: number, how: string) =>
    estimatedQuantity(value, how, { low: value - half, high: value + half }, level);
  const rows = estimates.map((e) => quantity(e.value, e.halfWidth, method));
  const top = estimates[0];
  if (dimension !== 2 || top === undefined) return rows;
  // |det| = 1: the two exponents are opposite, exactly. The top one is never negative.
  const value = Math.max(0, top.value);
  return [
    quantity(value, top.halfWidth, method),
    quantity(value === 0 ? 0 : -value, top.halfWidth, "minus the first: determinants are +-1"),
  ];
}

function curveOf(samples: GrowthSamples, level: number): GrowthResult["curve"] {
  return samples.plan.checkpoints.map((moves, c) => {
    const rates = Array.from({ length: samples.replicates }, (_, r) => logAt(samples, r, c, 0) / moves);
    const { value, interval } = meanEstimate(rates, level);
    return { moves, mean: value, low: interval?.low ?? value, high: interval?.high ?? value };
  });
}

function warningsOf(
  estimates: readonly RateEstimate[],
  residual: number,
  irregular: boolean,
  wishes: GrowthWishes,
): string[] {
  const warnings: string[] = [];
  const widest = Math.max(...estimates.map((e) => e.halfWidth));
  if (estimates.some((e) => e.drift)) {
    warnings.push("growth rates of the first and second half of the runs differ: intervals are widened by the drift");
  }
  if (irregular) {
    warnings.push("variance between runs and within runs differ: the central limit theorem seems not to apply");
  }
  if (residual > 1e-10 + widest / 10) {
    warnings.push(`rounding: the sampled exponents add up to ${residual.toPrecision(2)} instead of 0`);
  }
  const reached = estimates[0]?.halfWidth ?? 0;
  if (wishes.tolerance !== undefined && reached > wishes.tolerance) {
    warnings.push(
      `the top exponent is known to ${reached.toPrecision(2)}, not to the wanted ${wishes.tolerance}: stopped by the effort's limit`,
    );
  }
  return warnings;
}
