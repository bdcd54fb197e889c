/**
 * The law of x_n through its Fourier coefficients E exp(2 pi i k.x_n), by the dual walk:
 * E e_k(x_n) is the integral of P^n e_k against the law of x_0. No sampling.
 */

import { forwardMoves } from "../dual/moves.js";
import { type DualShape, DualTables, entriesWithin, movesFit, type StepEnd } from "../kernel/dual.js";
import { afterStep, type TableBound } from "../kernel/dual-rounding.js";
import { loadKernel } from "../kernel/kernel.js";
import { type Session, type SharedSession, withSession } from "../session.js";
import { VERSION } from "../version.js";
import { commonDenominator } from "../walk/denominator.js";
import { asWalk, type WalkInput } from "../walk/parse.js";
import type { Walk } from "../walk/walk.js";
import { LAW_BUDGET, type LawOptions, type LawRequest, readOptions } from "./options.js";
import { type ComplexQuantity, exactly, readerOf } from "./readers.js";
import type { LawCoefficient, LawResult } from "./result.js";

export type { LawOptions } from "./options.js";

/** The coefficient at every step where nothing has to be followed: k = 0, k.x_n whole, or a uniform start. */
function constantLaw(walk: Walk, k: readonly bigint[], q: bigint | undefined): ComplexQuantity | undefined {
  if (k.every((x) => x === 0n)) return exactly(1n, "the frequency 0");
  if (walk.start.type === "uniform") return exactly(0n, "the uniform law is invariant");
  if (q !== undefined && k.every((x) => x % q === 0n)) {
    return exactly(1n, `the walk stays on points with denominator ${q}, where k.x is whole`);
  }
  return undefined;
}

const END_REASON: Readonly<Record<StepEnd | "budget", string>> = {
  done: "all steps asked for",
  full: "the frequency table would be full; a higher --effort or a higher memory limit allows a larger one",
  overflow: "a frequency of the next step needs more than 63 bits",
  budget: "the products that this effort allows are used up; a higher --effort allows more",
};

const breathe = () => new Promise<void>((resolve) => setTimeout(resolve, 0));

async function follow(walk: Walk, request: LawRequest, q: bigint | undefined, session: Session): Promise<LawEnd> {
  const budget = LAW_BUDGET[session.effort];
  const phases = walk.moves.some((m) => m.translation !== undefined);
  // A walk on points with denominator q sees frequencies modulo q only.
  const residues = q !== undefined && q < 1n << 31n;
  const shape: DualShape = {
    dimension: walk.dimension,
    width: phases ? 2 : 1,
    fold: "none",
    ...(residues ? { modulus: Number(q) } : {}),
  };
  const kernel = await loadKernel({ memoryLimit: session.memoryLimit });
  const entries = Math.min(budget.entries, entriesWithin(0.9 * session.memoryLimit, shape, 2));
  const tables = new DualTables(kernel, shape, entries, 2);
  const dual = forwardMoves(walk);
  const fits = residues || movesFit(dual);
  const moves = tables.place(fits ? dual : []);
  const read = readerOf(walk.start, walk.dimension);
  tables.fill(0, [{ frequency: request.frequency, re: 1, im: 0 }]);
  let bound: TableBound = { size: 1, error: 0 };
  let now = 0;
  let spent = 0;
  let sinceBreath = 0;
  let before = 1;
  const coefficients: LawCoefficient[] = [];
  for (let step = 0; ; step++) {
    coefficients.push({ step, ...read(tables, now, bound), frequencies: tables.count(now) });
    if (step === request.steps) return { coefficients, end: "done" };
    if (!fits) return { coefficients, end: "overflow" };
    const products = tables.count(now) * moves.count;
    spent += products;
    if (spent > budget.products) return { coefficients, end: "budget" };
    sinceBreath += products;
    if (sinceBreath > 500_000) {
      session.progress("law", step, request.steps);
      await breathe();
      sinceBreath = 0;
    }
    session.checkStop();
    const end = tables.wouldFill(now, before, moves) ? "full" : tables.evolve(now, 1 - now, moves);
    if (end !== "done") return { coefficients, end };
    before = tables.count(now);
    now = 1 - now;
    bound = afterStep(bound, moves.count, phases);
  }
}

interface LawEnd {
  readonly coefficients: readonly LawCoefficient[];
  readonly end: StepEnd | "budget";
}

/**
 * E exp(2 pi i k.x_n) for n = 0, 1, ..., as far as the budget of the effort allows; each
 * part is enclosed with a proved bound on rounding, or exact where nothing has to be computed.
 * @throws WalkError for a walk that is wrong.
 * @throws OptionsError for a frequency or a number of steps that does not fit.
 * @throws LimitError where the memory limit is too small for any table.
 */
export async function law(input: WalkInput, options: LawOptions & SharedSession): Promise<LawResult> {
  const walk = asWalk(input);
  return withSession(options, async (session) => {
    const request = readOptions(options, walk.dimension);
    const q = commonDenominator(walk);
    const constant = constantLaw(walk, request.frequency, q);
    const { coefficients, end }: LawEnd =
      constant === undefined
        ? await follow(walk, request, q, session)
        : {
            coefficients: Array.from({ length: request.steps + 1 }, (_, step) => ({
              step,
              ...constant,
              frequencies: 0,
            })),
            end: "done",
          };
    const reached = { step: coefficients.length - 1, reason: END_REASON[end] };
    return {
      torwend: VERSION,
      walk: walk.title,
      frequency: request.frequency.map(String),
      coefficients,
      reached,
      ...(end !== "done" && request.asked ? { stoppedAt: reached } : {}),
    };
  });
}
