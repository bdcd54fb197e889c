/** `growth`: how fast do products grow? */
import { bitLength } from "../exact/rational.js";
import { cumulativeWeights } from "../kernel/draws.js";
import { growthTable } from "../kernel/growth.js";
import { loadReal, type Real } from "../kernel/real.js";
import { estimatedQuantity, type Quantity } from "../quantity/quantity.js";
import { type Session, type SharedSession, withSession } from "../session.js";
import { meanEstimate } from "../statistics/intervals.js";
import { VERSION } from "../version.js";

import { asWalk, type WalkInput } from "../walk/parse.js";
import type { Walk } from "../walk/walk.js";
import { checkDoubles } from "./check.js";
import { enumeratedBounds } from "./enumerated.js";
import { flatGrowth, lineGrowth } from "./exceptional.js";
import { exponentEstimates, logNormVariance, type RateEstimate } from "./intervals.js";
import { type PlanarGroup, planarGroup } from "./lines.js";
import { type GrowthOptions, type GrowthWishes, readOptions } from "./options.js";
import { samplingPlan } from "./plan.js";
import { enclosePlanar } from "./planar.js";
import { provePositive } from "./positive/findings.js";
import {
  type PressureEstimator,
  pressureEstimator,
  pressureTable,
  requireMoments,
  singleEstimator,
} from "./pressure.js";
import { exactLogNorms } from "./products.js";
import type { GrowthProof } from "./proof.js";
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
export async function growth(walk: WalkInput, options: GrowthOptions & SharedSession = {}): Promise<GrowthResult> {
  const parsed = asWalk(walk);
  const wishes = readOptions(options);
  return withSession(options, (session) => growthOf(parsed, wishes, session));
}

/** The same for a walk that is parsed and a session that is open. */
export async function growthOf(walk: Walk, wishes: GrowthWishes, session: Session): Promise<GrowthResult> {
  const real = await loadReal();
  const group = walk.dimension === 2 ? planarGroup(walk) : undefined;
  const proof = group === undefined ? await provePositive(walk, wishes, session, real) : undefined;
  if (group === undefined && proof === undefined && walk.moves.length > 1) requireMoments(wishes.pressure);
  const found =
    group === undefined ? await sampled(walk, wishes, session, real, proof) : await known(walk, group, session, real);
  const { estimator, ...rest } = found;
  return {
    torwend: VERSION,
    walk: walk.title,
    ...rest,
    pressure: await pressureTable(walk, wishes.pressure, estimator, proof),
    rate: proof?.rates ?? (await rateTable(estimator)),
  };
}

type Findings = Omit<GrowthResult, "torwend" | "walk" | "pressure" | "rate"> & {
  readonly estimator: PressureEstimator;
};

/** Exponents and variance from sampled products, in their places what is proved. */
async function sampled(
  walk: Walk,
  wishes: GrowthWishes,
  session: Session,
  real: Real,
  proof: GrowthProof | undefined,
): Promise<Findings> {
  const table = growthTable(
    walk.moves.map((m) => m.matrix),
    cumulativeWeights(walk.moves.map((m) => m.probability)),
  );
  // Beside a proof of all exponents, samples are for the curve only.
  const light = proof?.exponents.every((q) => q !== undefined) === true;
  const full = samplingPlan(table, light ? "quick" : session.effort, wishes.steps);
  const plan = light ? { ...full, replicates: Math.min(full.replicates, 64) } : full;
  const planar = proof === undefined ? await enclosePlanar(walk, session) : undefined;
  const tolerance = proof === undefined && planar === undefined ? wishes.tolerance : undefined;
  const samples = await sampleReplicates(session, table, plan, tolerance);
  const { estimates, residual } = exponentEstimates(samples, session.level);
  const variance = logNormVariance(samples, session.level, real);
  const check = await checkDoubles(walk, table, session, estimates[0]?.value ?? 0, real);
  const lost = check.worst > 1e-6;
  const widened = lost ? estimates.map((e) => ({ ...e, halfWidth: e.halfWidth + 2 * check.rate })) : estimates;
  const warnings = [...(proof?.warnings ?? []), ...warningsOf(widened, residual, variance.irregular, tolerance)];
  if (lost) {
    warnings.push(
      `rounding: over ${check.moves} moves, doubles and exact integers differ by ${check.worst.toPrecision(2)} in log norm; sampled exponents may be biased`,
    );
  }
  const exponents = exponentQuantities(walk.dimension, widened, samples, session.level);
  const top = widened[0] as RateEstimate;
  const bounds =
    proof !== undefined
      ? {}
      : planar !== undefined
        ? { enclosure: planar }
        : await enumeratedBounds(walk, session, real);
  const enclosed = proof?.exponents[0] ?? bounds.enclosure;
  const biased = excludes(top, enclosed, bounds.upperBound?.value);
  if (biased) {
    warnings.push(
      `sampling in doubles is biased here: it gives ${top.value} for the top exponent, ${top.halfWidth.toPrecision(2)} either way, which is proved impossible`,
    );
  }
  if (planar !== undefined && wishes.tolerance !== undefined && widthOf(planar) > 2 * wishes.tolerance) {
    warnings.push(
      `the top exponent is enclosed to ${(widthOf(planar) / 2).toPrecision(2)}, not to the wanted ${wishes.tolerance}: this proof works in doubles`,
    );
  }
  const narrow = enclosed !== undefined && (biased || widthOf(enclosed) <= 2 * top.halfWidth);
  return {
    exponents: narrow ? withProved(exponents, proof?.exponents ?? [enclosed]) : exponents,
    logNormVariance:
      proof?.variance ?? estimatedQuantity(variance.value, variance.method, variance.interval, session.level),
    ...(narrow ? { sampled: exponents[0] as Quantity } : bounds),
    curve: curveOf(plan.checkpoints, samples.replicates, (r, c) => logAt(samples, r, c, 0), session.level),
    replicates: samples.replicates,
    moves: plan.steps,
    warnings,
    estimator:
      walk.moves.length > 1
        ? pressureEstimator(walk, session, real)
        : singleEstimator(widened[0] as RateEstimate, session.level),
  };
}

const widthOf = (q: Quantity) => Number(q.high) - Number(q.low);

/** The exponents, proved ones in their places; in dimension 2 the second is minus the first. */
function withProved(exponents: readonly Quantity[], proved: GrowthProof["exponents"]): Quantity[] {
  const [first] = proved;
  if (exponents.length === 2 && first !== undefined) return [first, proved[1] ?? opposite(first)];
  return exponents.map((q, j) => proved[j] ?? q);
}

/** Minus an enclosed quantity. */
function opposite(top: Quantity): Quantity {
  const negative = (text: string) => (text === "0" ? "0" : text.startsWith("-") ? text.slice(1) : `-${text}`);
  return {
    value: 0 - (top.value as number),
    standing: "enclosed",
    low: negative(top.high as string),
    high: negative(top.low as string),
    method: "minus the first: determinants are +-1",
  };
}

/** Whether proofs exclude a sampled exponent: six half-widths off are no chance. */
function excludes(estimate: RateEstimate, enclosed: Quantity | undefined, upper: Quantity | undefined): boolean {
  const room = 6 * estimate.halfWidth + 1e-12;
  const most = enclosed ?? upper;
  if (most !== undefined && estimate.value > Number(most.high) + room) return true;
  return enclosed !== undefined && estimate.value < Number(enclosed.low) - room;
}

/** Dimension 2, group finite or keeping lines: no sampling but for the curve, in exact integers. */
async function known(walk: Walk, group: PlanarGroup, session: Session, real: Real): Promise<Findings> {
  const found = group.kind === "two lines" ? lineGrowth(walk, group, real) : flatGrowth(group);
  const replicates = 64;
  const bits = Math.max(...walk.moves.flatMap((m) => m.matrix.flat().map(bitLength)));
  const powers = Array.from({ length: 10 }, (_, k) => 2 ** (k + 1));
  const checkpoints = powers.filter((n) => n <= Math.max(8, 4096 / bits));
  const logs = await exactLogNorms(walk, session.seed, replicates, checkpoints, real);
  return {
    ...found,
    curve: curveOf(checkpoints, replicates, (r, c) => logs[r]?.[c] as number, session.level),
    replicates,
    moves: checkpoints.at(-1) as number,
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

/** Means of (1/n) log norm over replicates, with Student's interval; `log(r, c)`: replicate r at checkpoints[c]. */
function curveOf(
  checkpoints: readonly number[],
  replicates: number,
  log: (r: number, c: number) => number,
  level: number,
): GrowthResult["curve"] {
  return checkpoints.map((moves, c) => {
    const rates = Array.from({ length: replicates }, (_, r) => log(r, c) / moves);
    const { value, interval } = meanEstimate(rates, level);
    return { moves, mean: value, low: interval?.low ?? value, high: interval?.high ?? value };
  });
}

function warningsOf(
  estimates: readonly RateEstimate[],
  residual: number,
  irregular: boolean,
  tolerance: number | undefined,
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
  if (tolerance !== undefined && reached > tolerance) {
    warnings.push(
      `the top exponent is known to ${reached.toPrecision(2)}, not to the wanted ${tolerance}: stopped by the effort's limit`,
    );
  }
  return warnings;
}
