/** Lambda(s) at the s that were asked for: proved where symmetric powers prove it, else estimated. */

import { OptionsError } from "../errors.js";
import { cumulativeWeights } from "../kernel/draws.js";
import type { Real } from "../kernel/real.js";
import { estimatedQuantity, type Quantity } from "../quantity/quantity.js";
import type { Effort, Session } from "../session.js";
import { meanEstimate } from "../statistics/intervals.js";
import type { Walk } from "../walk/walk.js";
import { populationJob } from "./jobs.js";
import { DirectionOperator } from "./operator.js";
import type { GrowthProof } from "./proof.js";
import { provedPressure } from "./symmetric.js";

/** Lambda at one s, as a number or with its standing. */
export interface PressureEstimator {
  /** Estimates, in the order of `values`. */
  estimate(values: readonly number[]): Promise<Quantity[]>;
}

const GRID: Record<Effort, number> = { quick: 512, standard: 1024, thorough: 4096 };
const PARTICLES: Record<Effort, number> = { quick: 128, standard: 1024, thorough: 4096 };
const STEPS: Record<Effort, number> = { quick: 128, standard: 256, thorough: 256 };
const POPULATIONS = 6;

/** Dimension 2: the operator on directions, at two sizes of grid. */
function planar(walk: Walk, session: Session, real: Real): PressureEstimator {
  const most = Math.max(128, Math.floor(2 ** 17 / walk.moves.length));
  const size = 2 * Math.floor(Math.min(GRID[session.effort], most) / 2);
  const fine = new DirectionOperator(walk, size, real);
  const coarse = new DirectionOperator(walk, size / 2, real);
  return {
    async estimate(values) {
      const out: Quantity[] = [];
      for (const [i, s] of values.entries()) {
        session.checkStop();
        session.progress("pressure", i, values.length);
        const [a, b] = [fine.leading(s), coarse.leading(s)];
        const gap = Math.abs(a.value - b.value) + a.spread;
        out.push(
          estimatedQuantity(
            a.value,
            `weighted operator on ${size} directions; half the grid differs by ${gap.toPrecision(2)}`,
          ),
        );
      }
      return out;
    },
  };
}

/** Dimension 3 and more: independent populations. */
function spatial(walk: Walk, session: Session): PressureEstimator {
  const entries = Float64Array.from(
    walk.moves.flatMap((m) => m.matrix.flat()),
    Number,
  );
  const cumulative = cumulativeWeights(walk.moves.map((m) => m.probability));
  const particles = PARTICLES[session.effort];
  const steps = STEPS[session.effort];
  return {
    async estimate(values) {
      const runs = values.map((s) => ({
        s,
        seed: session.seed,
        populations: POPULATIONS,
        particles,
        steps,
        dimension: walk.dimension,
        entries,
        cumulative,
      }));
      const answers = await session.pool.map(populationJob, runs, {
        signal: session.signal,
        onDone: (done) => session.progress("pressure", done, values.length),
      });
      return answers.map((answer) => {
        const { value, interval } = meanEstimate(answer, session.level);
        const method = `${POPULATIONS} populations of ${particles} directions, ${steps} moves, Student's interval (bias of order 1/${particles} not included)`;
        return estimatedQuantity(value, method, interval, session.level);
      });
    },
  };
}

/** One move: nothing is random, Lambda(s) = s lambda_1. */
export function singleEstimator(top: { value: number; halfWidth: number }, level: number): PressureEstimator {
  const quantity = (s: number) => {
    const half = Math.abs(s) * top.halfWidth;
    const interval = { low: s * top.value - half, high: s * top.value + half };
    return estimatedQuantity(s * top.value, "one move: s times the first exponent", interval, level);
  };
  return { estimate: async (values) => values.map(quantity) };
}

export function pressureEstimator(walk: Walk, session: Session, real: Real): PressureEstimator {
  return walk.dimension === 2 ? planar(walk, session, real) : spatial(walk, session);
}

/**
 * Where nothing but an estimate is at hand, s must be above -1: moments of vectors and of norms part there.
 * @throws OptionsError naming every s that is not
 */
export function requireMoments(values: readonly number[]): void {
  const low = values.filter((s) => s <= -1);
  if (low.length === 0) return;
  throw new OptionsError(
    low.map((s) => ({
      pointer: "--pressure",
      message: `found ${s}; accepted: numbers above -1, where the moves are not positive on a common cone`,
    })),
  );
}

/** Lambda at each s: exact where symmetric powers make it so, enclosed by `proof` or by them, else estimated. */
export async function pressureTable(
  walk: Walk,
  values: readonly number[],
  estimator: PressureEstimator,
  proof?: GrowthProof,
): Promise<{ s: number; value: Quantity }[]> {
  const proved = new Map(
    values.map((s) => {
      const known = provedPressure(walk, s);
      return [s, known?.standing === "exact" ? known : (proof?.pressure(s) ?? known)];
    }),
  );
  const open = values.filter((s) => proved.get(s) === undefined);
  // The cone proves what is asked far below 0; where its polynomials do not reach, there is no estimate.
  requireMoments(proof === undefined ? [] : open);
  const estimates = await estimator.estimate(open);
  return values.map((s) => ({ s, value: proved.get(s) ?? (estimates[open.indexOf(s)] as Quantity) }));
}
