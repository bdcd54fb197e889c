/** How long the walk stays beside the orbit of a rational point: predicted, and sampled by exact walks. */
import { Rational } from "../exact/rational.js";
import { exponentEstimates } from "../growth/intervals.js";
import { samplingPlan } from "../growth/plan.js";
import { sampleReplicates } from "../growth/sample.js";
import { cumulativeWeights } from "../kernel/draws.js";
import { growthTable } from "../kernel/growth.js";
import type { Real } from "../kernel/real.js";
import { enclosedBetween, estimatedQuantity } from "../quantity/quantity.js";
import type { Effort, Session } from "../session.js";
import { quantile, sorted } from "../statistics/moments.js";
import type { Walk } from "../walk/walk.js";
import type { Approximation } from "./approximations.js";
import { exitsJob } from "./jobs.js";
import type { Trap } from "./result.js";

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
      },
    ];
  });
  return traps.sort((a, b) => Number(b.hold.value) - Number(a.hold.value));
}

const REPLICATES: Record<Effort, number> = { quick: 100, standard: 200, thorough: 1000 };
const TRAPS: Record<Effort, number> = { quick: 2, standard: 4, thorough: 8 };
const PER_JOB = 50;
const MOST_STEPS = 4000;

/** The first traps with their sampled holds; the others as they are. */
export async function sampledTraps(walk: Walk, traps: readonly Trap[], session: Session): Promise<Trap[]> {
  const replicates = REPLICATES[session.effort];
  const chosen = traps.slice(0, TRAPS[session.effort]);
  const payloads = chosen.flatMap(({ denominator, numerators, room, hold }) => {
    const [p, q] = (room as string).split("/");
    return Array.from({ length: replicates / PER_JOB }, (_, i) => ({
      document: walk.document,
      seed: session.seed,
      memoryLimit: session.memoryLimit,
      denominator,
      numerators,
      room: Rational.of(BigInt(p), BigInt(q ?? "1")).toNumber(),
      // Room for the spread of the products' growth about its mean.
      steps: Math.min(MOST_STEPS, 64 + 4 * Math.ceil(Number(hold.value))),
      first: i * PER_JOB,
      count: PER_JOB,
    }));
  });
  const results = await session.pool.map(exitsJob, payloads, {
    ...(session.signal === undefined ? {} : { signal: session.signal }),
    onDone: (done) => session.progress("holds", done, payloads.length),
  });
  const jobs = replicates / PER_JOB;
  return traps.map((trap, t) => {
    if (t >= chosen.length) return trap;
    const exits = sorted(results.slice(t * jobs, (t + 1) * jobs).flatMap((part) => [...part]));
    const tail = (1 - session.level) / 2;
    const at = (p: number) => quantile(exits, p);
    return { ...trap, sampledHold: { replicates, low: at(tail), median: at(0.5), high: at(1 - tail) } };
  });
}
