/**
 * Correlations <f, P^n f> of a centred trigonometric polynomial under Haar measure, by
 * the dual walk at half depth: <f, P^(a+b) f> = <(P*)^a f, P^b f>. Where P = P* one
 * sequence of tables serves both sides.
 */

import { Rational } from "../exact/rational.js";
import {
  type DualMove,
  type DualShape,
  DualTables,
  entriesWithin,
  type FrequencyTerm,
  type IntegerTerm,
  movesFit,
  type StepEnd,
} from "../kernel/dual.js";
import { afterStep, pairingError, type TableBound } from "../kernel/dual-rounding.js";
import { loadKernel } from "../kernel/kernel.js";

export interface CorrelationsPayload {
  readonly shape: DualShape;
  readonly forward: readonly DualMove[];
  /** The moves of P*; absent where P is its own adjoint. */
  readonly backward?: readonly DualMove[];
  readonly terms: readonly (FrequencyTerm | IntegerTerm)[];
  readonly bound: TableBound;
  /** For tables of integers: coefficients are these over `scale`, weights over `total`; `size`: sum of absolute values. */
  readonly exact?: { readonly scale: bigint; readonly total: bigint; readonly size: bigint };
  /** Frequencies that a table may hold, and products that may be made in all. */
  readonly entries: number;
  readonly products: number;
  /** The last n wanted. */
  readonly last: number;
  readonly memoryLimit: number;
}

export interface CorrelationSums {
  /** <f, P^n f> for n = 0, 1, ..., as computed. */
  readonly values: readonly number[];
  /** Proved bounds on their errors; 0 where no frequency is common, so that the value 0 is exact. */
  readonly errors: readonly number[];
  /** The values themselves, numerator and denominator, where integers were asked for. */
  readonly fractions?: readonly (readonly [bigint, bigint])[];
  readonly end: CorrelationsEnd;
  /** Frequencies (of +-k one) in the two last tables together. */
  readonly frequencies: number;
}

/** `coefficients`: the next integers may need more than 63 bits. */
export type CorrelationsEnd = StepEnd | "budget" | "coefficients";

/** One side of the pairing: the table it is in, what is proved of it. */
interface Side {
  table: number;
  /** Frequencies one step earlier. */
  before: number;
  bound: TableBound;
  /** Moves made so far. */
  depth: number;
}

export async function correlationSums(payload: CorrelationsPayload): Promise<CorrelationSums> {
  const { shape, forward, backward, terms, last } = payload;
  const tableCount = backward === undefined ? 2 : 3;
  const kernel = await loadKernel({ memoryLimit: payload.memoryLimit });
  const entries = Math.min(payload.entries, entriesWithin(0.9 * payload.memoryLimit, shape, tableCount));
  const tables = new DualTables(kernel, shape, entries, tableCount);
  const phases = [...forward, ...(backward ?? [])].some((m) => m.translation !== undefined);
  const fits = movesFit(forward) && (backward === undefined || movesFit(backward));
  const movesOf = { ahead: tables.place(fits ? forward : []), back: tables.place(fits ? (backward ?? forward) : []) };
  const ahead: Side = { table: 0, before: terms.length, bound: payload.bound, depth: 0 };
  tables.fill(0, terms);
  const back: Side = backward === undefined ? { ...ahead } : { ...ahead, table: 1 };
  if (backward !== undefined) tables.fill(1, terms);
  let spare = tableCount - 1;

  const values: number[] = [];
  const errors: number[] = [];
  const fractions: [bigint, bigint][] = [];
  const { exact } = payload;
  const recordExact = ({ scale, total }: NonNullable<typeof exact>) => {
    const value = Rational.of(
      2n * tables.pairExact(back.table, ahead.table),
      scale ** 2n * total ** BigInt(back.depth + ahead.depth),
    );
    fractions.push([value.num, value.den]);
    values.push(value.toNumber());
    errors.push(value.num === 0n ? 0 : Math.abs(value.toNumber()) * 2 ** -52 + 2 ** -1000);
  };
  const record = () => {
    if (exact !== undefined) {
      recordExact(exact);
      return;
    }
    const { sum, absolute, met } = tables.pair(back.table, ahead.table);
    // Both halves of the fold, k and -k.
    values.push(2 * sum);
    const largest = [back, ahead].map((side) => tables.largestCoefficient(side.table)) as [number, number];
    errors.push(met === 0 ? 0 : pairingError(back.bound, ahead.bound, ...largest, 2 * absolute));
  };
  let spent = 0;
  const advance = (side: Side, moves: typeof movesOf.ahead): CorrelationsEnd => {
    if (exact !== undefined && exact.size * exact.total ** BigInt(side.depth + 1) >= 1n << 63n) return "coefficients";
    spent += tables.count(side.table) * moves.count;
    if (spent > payload.products) return "budget";
    if (tables.wouldFill(side.table, side.before, moves)) return "full";
    const end = tables.evolve(side.table, spare, moves);
    if (end !== "done") return end;
    side.before = tables.count(side.table);
    side.depth++;
    const left = side.table;
    side.table = spare;
    side.bound = afterStep(side.bound, moves.count, phases);
    // With one sequence the other side still stands on the table that this one left.
    if (backward !== undefined) spare = left;
    return "done";
  };
  const finish = (end: CorrelationsEnd): CorrelationSums => ({
    values,
    errors,
    ...(exact === undefined ? {} : { fractions }),
    end,
    frequencies: tables.count(ahead.table) + (ahead.table === back.table ? 0 : tables.count(back.table)),
  });

  record();
  if (!fits) return finish("overflow");
  for (let n = 1; n <= last; n++) {
    if (backward === undefined && n % 2 === 0) {
      spare = back.table;
      back.table = ahead.table;
      back.bound = ahead.bound;
      back.depth = ahead.depth;
    } else {
      const useAhead = backward === undefined || tables.count(ahead.table) <= tables.count(back.table);
      const end = useAhead ? advance(ahead, movesOf.ahead) : advance(back, movesOf.back);
      if (end !== "done") return finish(end);
    }
    record();
  }
  return finish("done");
}
