/** One coefficient of the law followed from step to step, as far as a budget allows. */
import { forwardMoves } from "../dual/moves.js";
import { type DualShape, DualTables, entriesWithin, movesFit, type StepEnd } from "../kernel/dual.js";
import { afterStep, type TableBound } from "../kernel/dual-rounding.js";
import { loadKernel } from "../kernel/kernel.js";
import type { Walk } from "../walk/walk.js";
import { type ComplexQuantity, exactly, readerOf } from "./readers.js";
import type { LawCoefficient } from "./result.js";

export interface FollowRequest {
  readonly frequency: readonly bigint[];
  readonly steps: number;
  /** Common denominator of start and translations, where they are rational. */
  readonly denominator: bigint | undefined;
  /** Frequencies that a table may hold, and products that may be made in all. */
  readonly entries: number;
  readonly products: number;
  readonly memoryLimit: number;
  /** Called before each step with the products since the last pause; may wait, or throw to stop. */
  readonly pause?: (step: number, products: number) => Promise<void> | void;
}

export interface LawEnd {
  readonly coefficients: readonly LawCoefficient[];
  readonly end: StepEnd | "budget";
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
    ...(residues ? { modulus: Number(q) } : {}),
  };
  const kernel = await loadKernel({ memoryLimit: request.memoryLimit });
  const entries = Math.min(request.entries, entriesWithin(0.9 * request.memoryLimit, shape, 2));
  const tables = new DualTables(kernel, shape, entries, 2);
  const dual = forwardMoves(walk);
  const fits = residues || movesFit(dual);
  const moves = tables.place(fits ? dual : []);
  const read = readerOf(walk.start, walk.dimension);
  tables.fill(0, [{ frequency, re: 1, im: 0 }]);
  let bound: TableBound = { size: 1, error: 0 };
  let now = 0;
  let spent = 0;
  let before = 1;
  const coefficients: LawCoefficient[] = [];
  for (let step = 0; ; step++) {
    coefficients.push({ step, ...read(tables, now, bound), frequencies: tables.count(now) });
    if (step === steps) return { coefficients, end: "done" };
    if (!fits) return { coefficients, end: "overflow" };
    const products = tables.count(now) * moves.count;
    spent += products;
    if (spent > request.products) return { coefficients, end: "budget" };
    await request.pause?.(step, products);
    const end = tables.wouldFill(now, before, moves) ? "full" : tables.evolve(now, 1 - now, moves);
    if (end !== "done") return { coefficients, end };
    before = tables.count(now);
    now = 1 - now;
    bound = afterStep(bound, moves.count, phases);
  }
}
