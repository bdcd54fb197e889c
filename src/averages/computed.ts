/** What is computed of trigonometric polynomials under Haar measure: correlations, and in dimension 2 sums over all n. */
import { isSelfAdjoint } from "../dual/adjoint.js";
import { type IntegerTerms, integerMoves, integerTerms } from "../dual/integers.js";
import { adjointMoves, forwardMoves } from "../dual/moves.js";
import { shapeOf, type TrigPolynomial, tableTerms } from "../dual/polynomial.js";
import type { DualMove, DualShape } from "../kernel/dual.js";
import type { Session } from "../session.js";
import type { Move, Walk } from "../walk/walk.js";
import type { ExactBudget } from "./budget.js";
import { correlationsJob } from "./correlation-jobs.js";
import type { CorrelationSums, CorrelationsPayload } from "./correlations.js";
import { type ModularSums, modularPayload, moduliOf } from "./modular.js";
import { modularJob } from "./modular-jobs.js";
import type { PoissonFit } from "./poisson.js";
import { poissonJob } from "./poisson-jobs.js";

export interface Computed {
  readonly sums: CorrelationSums;
  /** In dimension 2. */
  readonly modular?: ModularSums;
  /** Beside `modular.dominating`: the same terms one by one, <F, Q^n F> (see ModularSums). */
  readonly head?: CorrelationSums;
  /** In dimension 3 and more. */
  readonly poisson?: PoissonFit;
}

const isTranslated = (walk: Walk) => walk.moves.some((m) => m.translation !== undefined);

function withoutTranslations(walk: Walk): Walk {
  return { ...walk, moves: walk.moves.map(({ translation: _, ...move }): Move => move) };
}

function correlationsOf(
  walk: Walk,
  list: readonly TrigPolynomial[],
  session: Session,
  budget: ExactBudget,
  share: number,
  integers: boolean,
): CorrelationsPayload[] {
  const phases = isTranslated(walk);
  const forward = forwardMoves(walk);
  const backward: { readonly backward?: readonly DualMove[] } = isSelfAdjoint(walk)
    ? {}
    : { backward: adjointMoves(walk) };
  return list.map((f) => {
    const shape = shapeOf(f, walk.dimension, phases);
    const whole = integers ? integerTerms(f, shape) : undefined;
    return {
      ...(whole === undefined
        ? { shape, forward, ...backward, ...tableTerms(f, shape) }
        : inIntegers(walk, shape, whole, forward, backward.backward)),
      entries: budget.entries,
      products: budget.products / share,
      last: budget.last,
      memoryLimit: session.memoryLimit,
    };
  });
}

function inIntegers(
  walk: Walk,
  shape: DualShape,
  { terms, scale, size }: IntegerTerms,
  forward: readonly DualMove[],
  backward: readonly DualMove[] | undefined,
) {
  const { moves, total } = integerMoves(walk, forward);
  return {
    shape: { ...shape, exact: true },
    forward: moves,
    ...(backward === undefined ? {} : { backward: integerMoves(walk, backward).moves }),
    terms,
    bound: { size: 0, error: 0 },
    exact: { scale, total, size },
  };
}

async function poissonFits(
  walk: Walk,
  list: readonly TrigPolynomial[],
  session: Session,
  budget: ExactBudget,
): Promise<PoissonFit[]> {
  const shape = { dimension: walk.dimension, width: 2, fold: "conjugate" } as const;
  const forward = forwardMoves(walk);
  const backward = isSelfAdjoint(walk) ? {} : { backward: adjointMoves(walk) };
  const stage = "Poisson equation on a set of frequencies";
  session.progress(stage, 0, list.length);
  const payloads = list.map((f) => ({
    forward,
    ...backward,
    terms: tableTerms(f, shape).terms,
    entries: budget.poisson,
  }));
  const fits = await session.pool.map(poissonJob, payloads, {
    signal: session.signal,
    onDone: (done) => session.progress(stage, done, list.length),
  });
  session.checkStop();
  return fits;
}

/**
 * @param list centred or not (constants are passed over), none of them constant
 * @param at where generating functions are asked for
 */
export async function computeSums(
  walk: Walk,
  list: readonly TrigPolynomial[],
  session: Session,
  budget: ExactBudget,
  at: readonly number[],
  integers = false,
): Promise<Computed[]> {
  if (list.length === 0) return [];
  let modular: readonly ModularSums[] = [];
  if (walk.dimension === 2) {
    const stage = "sums over all n by Green's function";
    session.progress(stage, 0, 1);
    const payload = modularPayload(walk, list, budget.states, at);
    [modular = []] = await session.pool.map(modularJob, [payload], { signal: session.signal });
    session.progress(stage, 1, 1);
    session.checkStop();
  }
  const dominated = list.filter((_, i) => modular[i]?.dominating !== undefined);
  const share = list.length + dominated.length;
  const payloads = [
    ...correlationsOf(walk, list, session, budget, share, integers),
    ...correlationsOf(withoutTranslations(walk), dominated.map(moduliOf), session, budget, share, false),
  ];
  const stage = "correlations by the dual walk";
  session.progress(stage, 0, payloads.length);
  const sums = await session.pool.map(correlationsJob, payloads, {
    signal: session.signal,
    onDone: (done) => session.progress(stage, done, payloads.length),
  });
  session.checkStop();
  const fits = walk.dimension === 2 ? [] : await poissonFits(walk, list, session, budget);
  return list.map((f, i): Computed => {
    const place = dominated.indexOf(f);
    return {
      sums: sums[i] as CorrelationSums,
      ...(modular[i] === undefined ? {} : { modular: modular[i] }),
      ...(fits[i] === undefined ? {} : { poisson: fits[i] }),
      ...(place < 0 ? {} : { head: sums[list.length + place] as CorrelationSums }),
    };
  });
}
