/** The sampled part of `averages`: replicates of exact walks on the session's threads. */
import { LimitError, OptionsError } from "../errors.js";
import { loadReal } from "../kernel/real.js";
import type { Effort, Session } from "../session.js";
import type { Walk } from "../walk/walk.js";
import { segmentsJob } from "./jobs.js";
import { evaluationError, observableSize, observableSwing } from "./program.js";
import { HELD_MOVES } from "./replicates.js";
import type { SampledAverage } from "./result.js";
import { planSegments } from "./segments.js";
import { summarise } from "./summary.js";

export interface SamplingPlan {
  /** Moves of each replicate: 2 to 2^31. */
  readonly steps: number;
  /** 2 to 2^20. */
  readonly replicates: number;
  /** The limit mean of each observable of the walk. */
  readonly means: readonly number[];
  /** lim n Var(average) of each; where undefined, the batch means' estimate serves. */
  readonly variances: readonly (number | undefined)[];
}

const MOST_STEPS = 2 ** 31;
const MOST_REPLICATES = 2 ** 20;

/**
 * Moves and replicates that an effort affords on two cores in dimension 2, at most: quick
 * about 2 s, standard 15 s, thorough 2 min; translations cost the most, a walk without them
 * takes about a third. A move costs more in higher dimensions, so paths get
 * shorter there, by (2/d)^(3/2); the number of replicates decides what coverage and
 * distance can tell, and stays. Time grows with the square of the digits that a path
 * carries, since large entries also leave fewer moves to a pass over them: such walks get
 * paths as much shorter as their moves consume more.
 * @param bits that a move consumes, about (see bitsPerMove)
 */
export function defaultSampling(effort: Effort, dimension: number, bits = 0): { steps: number; replicates: number } {
  const table = {
    quick: { steps: 16_000, replicates: 500 },
    standard: { steps: 48_000, replicates: 800 },
    thorough: { steps: 160_000, replicates: 1000 },
  };
  const { steps, replicates } = table[effort];
  const share = 2 / dimension;
  const small = SMALL_BITS / Math.max(SMALL_BITS, bits);
  return { steps: Math.max(64, Math.floor(steps * share * Math.sqrt(share) * small)), replicates };
}

/** Bits of a move's largest row sum: of moves with entries of a few units, for which the paths' lengths are meant. */
const SMALL_BITS = 4;

/** A bound on the bits that a move consumes in the mean: those of its largest row sum. */
export function bitsPerMove(walk: Walk): number {
  const bits = (x: bigint) => x.toString(2).length;
  const size = (row: readonly bigint[]) => bits(row.reduce((s, a) => s + (a < 0n ? -a : a), 0n));
  return walk.moves.reduce((s, m) => s + m.probability.toNumber() * Math.max(...m.matrix.map(size)), 0);
}

/**
 * Replicates in one job, by a rule that knows of the walk and the moves alone: about a
 * quarter of a second, as far as a move's time can be told beforehand (measured: some
 * d^2 (0.03 + 2e-6 steps) microseconds, the second part for the digits that it carries, up
 * to the lengths from which the cost of a move hardly grows).
 */
function replicatesPerJob(dimension: number, steps: number, observables: number): number {
  const move = dimension * dimension * (0.03 + 2e-6 * Math.min(steps, HELD_MOVES)) + 0.02 * observables;
  return Math.max(1, Math.min(256, Math.floor(250_000 / (move * steps))));
}

function check({ steps, replicates }: SamplingPlan): void {
  const faults: { pointer: string; message: string }[] = [];
  const whole = (pointer: string, found: number, most: number) => {
    if (Number.isInteger(found) && found >= 2 && found <= most) return;
    faults.push({ pointer, message: `found ${found}; accepted: a whole number from 2 to ${most}` });
  };
  whole("--steps", steps, MOST_STEPS);
  whole("--replicates", replicates, MOST_REPLICATES);
  if (faults.length > 0) throw new OptionsError(faults);
}

/**
 * What replicates of the exact walk show of each observable, in the walk's order. Time
 * averages run over the positions 0, ..., steps - 1. The same for any number of workers.
 * A density start is replaced by the uniform one (the limits are the same), and the
 * quantities' methods say so.
 * @throws OptionsError for steps or replicates out of range; LimitError where memory does not suffice; StoppedError
 */
export async function sampleAverages(walk: Walk, session: Session, plan: SamplingPlan): Promise<SampledAverage[]> {
  check(plan);
  const { steps, replicates } = plan;
  const real = await loadReal();
  const segments = planSegments(steps, real);
  const { ends } = segments;
  const observables = walk.observables.length;
  const stride = observables * ends.length;
  if (8 * stride * replicates > session.memoryLimit) {
    throw new LimitError(
      `the sums along ${replicates} replicates of ${observables} observables need ${8 * stride * replicates} bytes; ` +
        `the limit is ${session.memoryLimit}: ask for fewer replicates`,
    );
  }
  const each = replicatesPerJob(walk.dimension, steps, observables);
  const payloads = Array.from({ length: Math.ceil(replicates / each) }, (_, i) => ({
    document: walk.document,
    seed: session.seed,
    steps,
    first: i * each,
    count: Math.min(each, replicates - i * each),
    ends,
    memoryLimit: session.memoryLimit,
  }));
  const parts = await session.pool.map(segmentsJob, payloads, {
    signal: session.signal,
    onDone: (done) => session.progress("sampling exact walks", done, payloads.length),
  });
  session.checkStop();
  const rows = parts.flatMap((part) =>
    Array.from({ length: part.length / stride }, (_, r) => part.subarray(r * stride, (r + 1) * stride)),
  );
  const start =
    walk.start.type === "point"
      ? "the given point"
      : walk.start.type === "uniform"
        ? "uniform points"
        : "uniform points in place of the density";
  return walk.observables.map((f, i) =>
    summarise(
      {
        segments,
        replicates: rows.map((row) => row.subarray(i * ends.length, (i + 1) * ends.length)),
        mean: plan.means[i] as number,
        variance: plan.variances[i],
        size: observableSize(f),
        swing: observableSwing(f),
        error: evaluationError(f),
        level: session.level,
        start,
      },
      real,
    ),
  );
}
