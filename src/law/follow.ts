/** One coefficient of the law followed from step to step, as far as a budget allows. */

import { integerMoves } from "../dual/integers.js";
import { forwardMoves } from "../dual/moves.js";
import { type DualMove, type DualShape, DualTables, entriesWithin, movesFit, type StepEnd } from "../kernel/dual.js";
import { afterStep, type TableBound } from "../kernel/dual-rounding.js";
import { loadKernel } from "../kernel/kernel.js";
import type { Session } from "../session.js";
import { type IntegerMatrix, inverseMatrix } from "../walk/integers.js";
import type { Walk } from "../walk/walk.js";
import { type ComplexQuantity, exactly, exactReaderOf, readerOf } from "./readers.js";
import type { LawCoefficient } from "./result.js";
import { followSpread, SPREAD_FROM } from "./spread.js";

export interface FollowRequest {
  readonly frequency: readonly bigint[];
  readonly steps: number;
  /** Common denominator of start and translations, where they are rational. */
  readonly denominator: bigint | undefined;
  /** Frequencies that a table may hold, and products that may be made in all. */
  readonly entries: number;
  readonly products: number;
  readonly memoryLimit: number;
  /** In exact integers: see `notInIntegers`; from a density with rational coefficients. */
  readonly exact?: boolean;
  /** Where large steps are spread over its pool: not inside of a job. */
  readonly session?: Session;
  /** Called before each step with the products since the last pause; may wait, or throw to stop. */
  readonly pause?: (step: number, products: number) => Promise<void> | void;
}

export interface LawEnd {
  readonly coefficients: readonly LawCoefficient[];
  /** `coefficients`: exact integers may pass 63 bits. */
  readonly end: StepEnd | "budget" | "coefficients";
}

/** The coefficient at every step where nothing has to be followed: k = 0, k.x_n whole, or a uniform start. */
export function constantLaw(walk: Walk, k: readonly bigint[], q: bigint | undefined): ComplexQuantity | undefined {
  if (k.every((x) => x === 0n)) return exactly(1n, "the frequency 0");
  if (walk.start.type === "uniform") return exactly(0n, "the uniform law is invariant");
  if (q !== undefined && k.every((x) => x % q === 0n)) {
    return exactly(1n, `the walk stays on points with denominator ${q}, where k.x is whole`);
  }
  return undefined;
}

/** The largest of some absolute values, 1 at least. */
function largestOf(values: readonly bigint[]): bigint {
  let most = 1n;
  for (const x of values) {
    const size = x < 0n ? -x : x;
    if (size > most) most = size;
  }
  return most;
}

/** Largest row sum of |entries|: what a matrix multiplies the largest component by at most. */
function reachOf(matrices: readonly IntegerMatrix[]): bigint {
  const sum = (row: readonly bigint[]) => row.reduce((s, x) => (x < 0n ? s - x : s + x), 0n);
  return largestOf(matrices.flatMap((m) => m.map(sum)));
}

/**
 * The largest component that a frequency may have after n steps and still be one of the
 * density's at step `last` or before: each step back multiplies by at most the inverses' reach.
 * Others are dropped, which changes no coefficient. Undefined for a start at one point.
 */
function keepFor(walk: Walk, dual: readonly DualMove[], last: number): ((n: number) => bigint) | undefined {
  if (walk.start.type !== "density") return undefined;
  const largest = largestOf(walk.start.terms.flatMap((t) => t.frequency));
  const back = reachOf(dual.map((m) => inverseMatrix(m.matrix)));
  // Beyond 63 bits nothing is dropped.
  return (n) => back ** BigInt(Math.min(last - n, 64)) * largest;
}

/** @throws LimitError where the memory limit is too small for any table */
export async function follow(walk: Walk, request: FollowRequest): Promise<LawEnd> {
  const { frequency, steps, denominator: q } = request;
  const constant = constantLaw(walk, frequency, q);
  if (constant !== undefined) {
    const coefficients = Array.from({ length: steps + 1 }, (_, step) => ({ step, ...constant, frequencies: 0 }));
    return { coefficients, end: "done" };
  }
  const phases = walk.moves.some((m) => m.translation !== undefined);
  // A walk on points with denominator q sees frequencies modulo q only.
  const residues = q !== undefined && q < 1n << 31n;
  const shape: DualShape = {
    dimension: walk.dimension,
    width: phases ? 2 : 1,
    fold: "none",
    ...(request.exact === true ? { exact: true } : {}),
    ...(residues ? { modulus: Number(q) } : {}),
  };
  const kernel = await loadKernel({ memoryLimit: request.memoryLimit });
  const entries = Math.min(request.entries, entriesWithin(0.9 * request.memoryLimit, shape, 2));
  const tables = new DualTables(kernel, shape, entries, 2);
  const forward = forwardMoves(walk);
  const whole = request.exact === true ? integerMoves(walk, forward) : undefined;
  const dual = whole?.moves ?? forward;
  const fits = residues || movesFit(dual);
  const moves = tables.place(fits ? dual : []);
  const read = whole === undefined ? readerOf(walk.start, walk.dimension) : exactReaderOf(walk.start, whole.total);
  const keep = residues ? undefined : keepFor(walk, forward, steps);
  tables.fill(0, [whole === undefined ? { frequency, re: 1, im: 0 } : { frequency, re: 1n, im: 0n }]);
  let bound: TableBound = { size: 1, error: 0 };
  let now = 0;
  let spent = 0;
  let before = 1;
  const coefficients: LawCoefficient[] = [];
  for (let step = 0; ; step++) {
    coefficients.push({ step, ...read(tables, now, bound, step), frequencies: tables.count(now) });
    if (step === steps) return { coefficients, end: "done" };
    if (!fits) return { coefficients, end: "overflow" };
    const products = tables.count(now) * moves.count;
    spent += products;
    if (spent > request.products) return { coefficients, end: "budget" };
    // The coefficients' sum is the total weight to the power of the steps.
    if (whole !== undefined && whole.total ** BigInt(step + 1) >= 1n << 63n)
      return { coefficients, end: "coefficients" };
    await request.pause?.(step, products);
    if (request.session !== undefined && products >= SPREAD_FROM && walk.start.type === "point" && !residues) {
      const spread = { shape, moves: dual, start: walk.start, session: request.session, entries, phases };
      const state = { packed: tables.packed(now), bound };
      const { pause, products: most } = request;
      return followSpread(spread, state, { coefficients, step, spent, before }, { last: steps, products: most, pause });
    }
    const most = keep?.(step + 1);
    const drops = most !== undefined && tables.largest(now) * moves.reach > most;
    const end = !drops && tables.wouldFill(now, before, moves) ? "full" : tables.evolve(now, 1 - now, moves, most);
    if (end !== "done") return { coefficients, end };
    before = tables.count(now);
    now = 1 - now;
    bound = afterStep(bound, moves.count, phases);
  }
}
