/** The jobs of positive sets: one enclosure each. Grids and factorisations of the last set are kept in a thread. */
import { Rational } from "../../exact/rational.js";
import { defineJob } from "../../kernel/jobs.js";
import { loadReal, type Real } from "../../kernel/real.js";
import type { WeightedMoves } from "../../walk/weights.js";
import { type Enclosure, PositiveSet } from "./positive.js";
import { rateAt } from "./rates.js";

export type PositiveTask =
  | { readonly kind: "exponent" | "variance"; readonly bits: number }
  | { readonly kind: "pressure"; readonly s: number; readonly bits: number }
  | { readonly kind: "rate"; readonly speed: number };

interface Fraction {
  readonly num: bigint;
  readonly den: bigint;
}

/** Moves and enclosures as they cross between threads: classes do not. */
interface PlainMove {
  readonly matrix: readonly (readonly bigint[])[];
  readonly determinant: 1 | -1;
  readonly probability: Fraction;
}

export interface PositiveJob {
  readonly dimension: number;
  readonly moves: readonly PlainMove[];
  readonly task: PositiveTask;
}

export interface PlainEnclosure {
  readonly low: Fraction;
  readonly high: Fraction;
}

const plain = ({ num, den }: Rational): Fraction => ({ num, den });

export function jobOf({ dimension, moves }: WeightedMoves, task: PositiveTask): PositiveJob {
  return {
    dimension,
    moves: moves.map(({ matrix, determinant, probability }) => ({
      matrix,
      determinant,
      probability: plain(probability),
    })),
    task,
  };
}

let last: { key: string; set: PositiveSet | undefined } | undefined;

function setOf({ dimension, moves }: PositiveJob, real: Real): PositiveSet | undefined {
  const key = moves.map((m) => `${m.matrix.flat()};${m.probability.num}/${m.probability.den}`).join();
  if (last?.key !== key) {
    const weighted = moves.map((m) => ({ ...m, probability: Rational.of(m.probability.num, m.probability.den) }));
    last = { key, set: PositiveSet.of({ dimension, moves: weighted }, real) };
  }
  return last.set;
}

function enclosureFor(set: PositiveSet, task: PositiveTask): Enclosure | undefined {
  switch (task.kind) {
    case "exponent":
      return set.exponent(task.bits);
    case "variance":
      return set.variance(task.bits);
    case "pressure":
      return set.pressure(task.s, task.bits);
    case "rate":
      return rateAt(set, task.speed);
  }
}

/** The enclosure, or undefined where it could not be proved. */
export const positiveJob = defineJob(
  "growth.positive",
  async (job: PositiveJob): Promise<PlainEnclosure | undefined> => {
    const set = setOf(job, await loadReal());
    if (set === undefined) return undefined;
    const found = enclosureFor(set, job.task);
    return found && { low: plain(found.low), high: plain(found.high) };
  },
);
