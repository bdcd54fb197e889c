/** The rate at which one coefficient of the law shrinks: fitted, beside what the operator's norm gives. */

import { EXACT_BUDGET } from "../averages/budget.js";
import { provedGap } from "../averages/proved-gap.js";
import type { Real } from "../kernel/real.js";
import { above, below } from "../quantity/interval.js";
import { enclosedQuantity, estimatedQuantity } from "../quantity/quantity.js";
import type { Session } from "../session.js";
import { commonDenominator } from "../walk/denominator.js";
import type { Walk } from "../walk/walk.js";
import { modulusOf } from "./jobs.js";
import type { Decay, LawCoefficient, NormBound } from "./result.js";

/** Steps that a fit needs at least. */
const FEWEST = 6;

/** Least squares of log |coefficient| over the second half of the steps, those proved different from 0; undefined where too few. */
export function fitDecay(coefficients: readonly LawCoefficient[], real: Real): Decay | undefined {
  const points = coefficients.slice(coefficients.length >> 1).flatMap((c) => {
    const { low, high } = modulusOf(c);
    // Steps where rounding covers more than a hundredth say little.
    return low > 0 && high < 1.01 * low ? [{ x: c.step, y: real.log((low + high) / 2) }] : [];
  });
  if (points.length < FEWEST) return undefined;
  const n = points.length;
  const mx = points.reduce((s, p) => s + p.x, 0) / n;
  const my = points.reduce((s, p) => s + p.y, 0) / n;
  const sxx = points.reduce((s, p) => s + (p.x - mx) ** 2, 0);
  const slope = points.reduce((s, p) => s + (p.x - mx) * (p.y - my), 0) / sxx;
  const left = points.reduce((s, p) => s + (p.y - my - slope * (p.x - mx)) ** 2, 0);
  return {
    rate: estimatedQuantity(-slope, `least squares of log |coefficient| over ${n} steps; natural log per move`),
    from: points[0]!.x,
    to: points[n - 1]!.x,
    residual: Math.sqrt(left / n),
  };
}

const READING = {
  density:
    "For a start with this density |E exp(2 pi i k.x_n)| <= |P^n| |density - 1|: in the long run it shrinks at least at this rate.",
  point:
    "The integral of |E exp(2 pi i k.x_n)|^2 over all starts is at most |P^n|^2: from almost every start it shrinks at least at this rate in the long run, from a single one it need not.",
} as const;

/** From the proved spectral radius; undefined where none is at hand (dimension 3 and more, uniform or rational starts). */
export async function normBound(walk: Walk, session: Session, real: Real): Promise<NormBound | undefined> {
  const { type } = walk.start;
  if (walk.dimension !== 2 || type === "uniform" || commonDenominator(walk) !== undefined) return undefined;
  const gap = await provedGap(walk, EXACT_BUDGET[session.effort].normStates, session);
  const radius = Number(gap?.spectralRadius.high);
  if (gap === undefined || !(radius < 1)) return undefined;
  // Error of the logarithm below one unit, and the end was rounded outward to 17 digits.
  const rate = -real.log(above(radius));
  return {
    spectralRadius: gap.spectralRadius,
    rate: enclosedQuantity(
      below(below(rate)),
      above(above(-real.log(below(radius)))),
      "-log of the proved upper bound on the spectral radius",
    ),
    reading: READING[type],
  };
}
