/** Large steps of the dual walk spread over the pool, from a start at one point. */
import { encloseAround } from "../dual/enclose.js";
import { pointFractions } from "../dual/moves.js";
import { LimitError } from "../errors.js";
import type { DualMove, DualShape, PackedFrequencies, StepEnd } from "../kernel/dual.js";
import { afterStep, evaluationError, type TableBound, U } from "../kernel/dual-rounding.js";
import type { Session } from "../session.js";
import type { Start } from "../walk/walk.js";
import type { LawCoefficient } from "./result.js";
import { PARTS, type StepPart, stepJob } from "./spread-jobs.js";

/** Products of a step from which it is spread. */
export const SPREAD_FROM = 2_000_000;

interface SpreadRequest {
  readonly shape: DualShape;
  readonly moves: readonly DualMove[];
  readonly start: Start & { readonly type: "point" };
  readonly session: Session;
  /** Frequencies of all parts together. */
  readonly entries: number;
  readonly phases: boolean;
}

const METHOD = "dual walk evaluated at the start";

interface SpreadState {
  readonly packed: PackedFrequencies;
  readonly bound: TableBound;
}

interface SpreadStep {
  readonly end: StepEnd;
  readonly state?: SpreadState;
  readonly read?: Pick<LawCoefficient, "real" | "imag" | "frequencies">;
}

/** The parts one after the other, in memory that workers can share where the engine has such. */
function joined(parts: readonly StepPart[]): PackedFrequencies {
  const length = parts.reduce((n, { words }) => n + words.length, 0);
  const bytes = 8 * length;
  const buffer = typeof SharedArrayBuffer === "undefined" ? new ArrayBuffer(bytes) : new SharedArrayBuffer(bytes);
  const words = new BigInt64Array(buffer as ArrayBuffer);
  let at = 0;
  let largest = 0n;
  for (const part of parts) {
    words.set(part.words, at);
    at += part.words.length;
    if (part.largest > largest) largest = part.largest;
  }
  return { words, largest };
}

/** One step. @throws StoppedError */
async function spreadStep(request: SpreadRequest, state: SpreadState): Promise<SpreadStep> {
  const { shape, moves, session, start } = request;
  const point = pointFractions(start.point);
  // Parts differ in size by little: a hash spreads keys evenly.
  const words = shape.dimension + shape.width;
  const most = Math.min(request.entries, (state.packed.words.length / words) * moves.length);
  const entries = Math.ceil((1.05 * most) / PARTS) + 64;
  const payloads = Array.from({ length: PARTS }, (_, part) => ({
    shape,
    moves,
    source: state.packed,
    part,
    entries,
    point,
    memoryLimit: session.memoryLimit,
  }));
  let parts: StepPart[];
  try {
    parts = await session.pool.map(stepJob, payloads, { signal: session.signal });
  } catch (error) {
    if (error instanceof LimitError) return { end: "full" };
    throw error;
  }
  const failed = parts.find(({ end }) => end !== "done");
  if (failed !== undefined) return { end: failed.end };
  const packed = joined(parts);
  const frequencies = packed.words.length / words;
  if (frequencies > request.entries) return { end: "full" };
  const bound = afterStep(state.bound, moves.length, request.phases);
  // Each part's sum is rounded once, and so is each addition of two of them.
  const error = evaluationError(bound) + 2 * PARTS * U * (bound.size + bound.error);
  const sum = (of: (part: StepPart) => number) => parts.reduce((s, part) => s + of(part), 0);
  return {
    end: "done",
    state: { packed, bound },
    read: {
      real: encloseAround(
        sum((p) => p.re),
        error,
        METHOD,
      ),
      imag: encloseAround(
        sum((p) => p.im),
        error,
        METHOD,
      ),
      frequencies,
    },
  };
}

/** What was made and spent before. */
interface SoFar {
  readonly coefficients: LawCoefficient[];
  readonly step: number;
  readonly spent: number;
  /** Frequencies one step earlier. */
  readonly before: number;
}

interface Limits {
  readonly last: number;
  readonly products: number;
  readonly pause?: ((step: number, products: number) => Promise<void> | void) | undefined;
}

/** Goes on from a table, spread, until the last step or a limit; adds to `coefficients`. */
export async function followSpread(
  request: SpreadRequest,
  from: SpreadState,
  { coefficients, ...sofar }: SoFar,
  { last, products, pause }: Limits,
): Promise<{ coefficients: LawCoefficient[]; end: StepEnd | "budget" }> {
  const { shape, moves } = request;
  const words = shape.dimension + shape.width;
  let { step, spent, before } = sofar;
  let state = from;
  for (;;) {
    const count = state.packed.words.length / words;
    // A step that ends full costs as much as one that is of use: foreseen by the last step's growth.
    if (count * Math.min(moves.length, count / Math.max(1, before)) > 1.02 * request.entries) {
      return { coefficients, end: "full" };
    }
    const made = await spreadStep(request, state);
    if (made.state === undefined || made.read === undefined) return { coefficients, end: made.end };
    before = count;
    state = made.state;
    coefficients.push({ step: ++step, ...made.read });
    if (step === last) return { coefficients, end: "done" };
    const next = made.read.frequencies * moves.length;
    spent += next;
    if (spent > products) return { coefficients, end: "budget" };
    await pause?.(step, next);
  }
}
