/** How long the walk stays beside the orbit of a rational point: predicted, and sampled by exact walks. */
import { Rational } from "../exact/rational.js";
import { exponentEstimates } from "../growth/intervals.js";
import { samplingPlan } from "../growth/plan.js";
import { sampleReplicates } from "../growth/sample.js";
import { cumulativeWeights } from "../kernel/draws.js";
import { growthTable } from "../kernel/growth.js";
import type { Real } from "../kernel/real.js";
import { enclosedBetween, estimatedQuantity, quantityNumber } from "../quantity/quantity.js";
import type { Effort, Session } from "../session.js";
import { meanEstimate } from "../statistics/intervals.js";
import { quantile, sorted } from "../statistics/moments.js";
import type { Walk } from "../walk/walk.js";
import type { Approximation } from "./approximations.js";
import { exitsJob } from "./jobs.js";
import type { SampledHold, Trap } from "./result.js";

/** Moves of the products from which the growth rate is taken: holds are known to a few moves anyway. */
const RATE_STEPS = 2048;

/** A short estimate of the top exponent, in natural logarithms per move. */
export async function quickRate(walk: Walk, session: Session): Promise<number> {
  const table = growthTable(
    walk.moves.map((move) => move.matrix),
    cumulativeWeights(walk.moves.map((move) => move.probability)),
  );
  const plan = samplingPlan(table, "quick", RATE_STEPS);
  const samples = await sampleReplicates(session, table, { ...plan, replicates: plan.round }, undefined);
  return exponentEstimates(samples, session.level).estimates[0]?.value ?? 0;
}

/** Half of the smallest distance between points with the orbit's denominator. */
export function roomOf({ orbitDenominator }: Approximation): Rational {
  return Rational.of(1n, 2n * orbitDenominator);
}

/** The traps whose predicted hold is positive, longest first. */
export function predictedTraps(found: readonly Approximation[], rate: number, real: Real): Trap[] {
  const traps = found.flatMap((approximation): Trap[] => {
    const { denominator, numerators, distance } = approximation;
    const room = roomOf(approximation);
    const hold = real.log(room.div(distance.high).toNumber()) / rate;
    if (!(hold > 0)) return [];
    const d = numerators.length;
    const usual = Math.sqrt(d) / (denominator * real.pow(denominator, 1 / d));
    const excess = real.log(usual / distance.high.toNumber()) / rate;
    return [
      {
        denominator,
        numerators,
        distance: enclosedBetween(distance.low, distance.high, "nearest point, integer arithmetic"),
        room: room.toString(),
        hold: estimatedQuantity(
          hold,
          `log(room / distance) / ${rate.toPrecision(4)}, the top exponent estimated from short products`,
        ),
        excess: estimatedQuantity(
          excess,
          `log(sqrt(d) q^(-1 - 1/d) / distance) / ${rate.toPrecision(4)}: Dirichlet's distance in place of the room`,
        ),
      },
    ];
  });
  return traps.sort((a, b) => Number(b.hold.value) - Number(a.hold.value));
}

const REPLICATES: Record<Effort, number> = { quick: 100, standard: 200, thorough: 1000 };
/** Traps beyond these, the weakest, keep their prediction alone. */
const TRAPS: Record<Effort, number> = { quick: 8, standard: 32, thorough: 64 };
const PER_JOB = 50;
const MOST_STEPS = 4000;

function sampledHold(exits: readonly number[], steps: number, level: number): SampledHold {
  const ordered = sorted(exits);
  const n = ordered.length;
  const tail = (1 - level) / 2;
  const { value, interval } = meanEstimate(ordered, level);
  const first = ordered[0] as number;
  const counts = new Array<number>((ordered[n - 1] as number) - first + 1).fill(0);
  for (const k of ordered) counts[k - first]++;
  return {
    replicates: n,
    low: quantile(ordered, tail),
    median: quantile(ordered, 0.5),
    high: quantile(ordered, 1 - tail),
    mean: estimatedQuantity(
      value,
      `exact walks of the start and of the point under the same moves, ${n} replicates`,
      interval,
      level,
    ),
    unfinished: ordered.filter((k) => k > steps).length,
    exits: { first, counts },
  };
}

/** The first traps with their sampled holds; the others as they are. */
export async function sampledTraps(walk: Walk, traps: readonly Trap[], session: Session): Promise<Trap[]> {
  const jobs = REPLICATES[session.effort] / PER_JOB;
  const chosen = traps.slice(0, TRAPS[session.effort]);
  // Room for the spread of the products' growth about its mean.
  const stepsOf = ({ hold }: Trap) => Math.min(MOST_STEPS, 64 + 4 * Math.ceil(quantityNumber(hold)));
  const payloads = chosen.flatMap((trap) => {
    const [p, q] = (trap.room as string).split("/");
    return Array.from({ length: jobs }, (_, i) => ({
      document: walk.document,
      seed: session.seed,
      memoryLimit: session.memoryLimit,
      denominator: trap.denominator,
      numerators: trap.numerators,
      room: Rational.of(BigInt(p), BigInt(q ?? "1")).toNumber(),
      steps: stepsOf(trap),
      first: i * PER_JOB,
      count: PER_JOB,
    }));
  });
  const results = await session.pool.map(exitsJob, payloads, {
    ...(session.signal === undefined ? {} : { signal: session.signal }),
    onDone: (done) => session.progress("holds", done, payloads.length),
  });
  return traps.map((trap, t) => {
    if (t >= chosen.length) return trap;
    const exits = results.slice(t * jobs, (t + 1) * jobs).flatMap((part) => [...part]);
    return { ...trap, sampledHold: sampledHold(exits, stepsOf(trap), session.level) };
  });
}
