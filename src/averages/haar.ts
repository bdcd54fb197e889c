/**
 * The exact part under Haar measure: mean, correlations by the dual walk, their partial sum
 * as the variance, and whether the variance is 0.
 */

import { isSelfAdjoint } from "../dual/adjoint.js";
import { encloseAround, formQuantity } from "../dual/enclose.js";
import { adjointMoves, forwardMoves } from "../dual/moves.js";
import { polynomialOf, shapeOf, type TrigPolynomial, tableTerms } from "../dual/polynomial.js";
import { Rational } from "../exact/rational.js";
import { estimatedQuantity, exactQuantity, type Quantity } from "../quantity/quantity.js";
import type { Session } from "../session.js";
import type { Observable, Walk } from "../walk/walk.js";
import type { ExactBudget } from "./budget.js";
import { correlationsJob } from "./correlation-jobs.js";
import type { CorrelationSums, CorrelationsPayload } from "./correlations.js";
import { boxDegeneracy, type Degeneracy, type Differences, degeneracyOf, differencesOf } from "./degenerate.js";
import type { ExactFinding } from "./finding.js";
import { type Box, boxMean, boxSquareNorm, isWholeTorus } from "./integral.js";

const LAST_SHOWN = 5;

const END: Readonly<Record<CorrelationSums["end"], string>> = {
  done: "as many terms as are ever computed",
  full: "the frequency table would be full; a higher effort or a higher memory limit allows a larger one",
  overflow: "a frequency of the next term needs more than 63 bits",
  budget: "the products that this effort allows are used up; a higher effort allows more",
};

const constantOf = (degeneracy: Degeneracy) => degeneracy.g !== undefined && degeneracy.g.harmonics.length === 0;

/** sup g - inf g is at most twice the sum of g's coefficients. */
function spreadOf(g: TrigPolynomial): number {
  const size = g.harmonics.reduce((s, { cos, sin }) => {
    const [a, b] = [cos.toDouble(), sin.toDouble()];
    return s + Math.sqrt(a.value ** 2 + b.value ** 2) + a.error + b.error;
  }, 0);
  return 2 * size * (1 + 2 ** -40);
}

/** <f, f> of the centred polynomial, where its coefficients are rational. */
function squareNorm(f: TrigPolynomial): Rational | undefined {
  let sum = Rational.ZERO;
  for (const { cos, sin } of f.harmonics) {
    const [c, s] = [cos.rational, sin.rational];
    if (c === undefined || s === undefined) return undefined;
    sum = sum.add(c.mul(c)).add(s.mul(s));
  }
  return sum.mul(Rational.of(1, 2));
}

function correlationQuantities(f: TrigPolynomial, { values, errors }: CorrelationSums): Quantity[] {
  const norm = squareNorm(f);
  return values.map((value, n) =>
    n === 0 && norm !== undefined
      ? exactQuantity(norm, "half the sum of the squared coefficients")
      : errors[n] === 0
        ? exactQuantity(0n, "dual walk: no frequency comes back")
        : encloseAround(value, errors[n]!, "dual walk, paired at half depth"),
  );
}

/** <f, f> + 2 sum of the correlations from n = 1 on, as far as they are known. */
function partialSum(values: readonly number[]): number {
  let sum = 0;
  for (let n = values.length - 1; n >= 1; n--) sum += values[n]!;
  return Math.max(0, values[0]! + 2 * sum);
}

function ofTerms(
  label: string,
  f: TrigPolynomial,
  degeneracy: Degeneracy,
  sums: CorrelationSums | undefined,
): ExactFinding {
  const mean = formQuantity(f.constant, "integral: the constant term");
  const degenerate = degeneracy.verdict;
  if (sums === undefined) {
    const zero = exactQuantity(0n, "the observable is constant");
    return { label, mean, variance: zero, degenerate, correlations: [zero], spread: 0, notes: [] };
  }
  const correlations = correlationQuantities(f, sums);
  const last = sums.values.length - 1;
  const lastTerms = correlations.map((value, step) => ({ step, value })).slice(-LAST_SHOWN);
  const reached = { step: last, reason: END[sums.end] };
  const notes: string[] = [];
  if (degeneracy.g !== undefined) {
    const variance = exactQuantity(0n, "f - mean = g - P g with g invariant: sums stay bounded");
    return {
      label,
      mean,
      variance,
      degenerate,
      correlations,
      lastTerms,
      reached,
      spread: spreadOf(degeneracy.g),
      notes,
    };
  }
  const value = partialSum(sums.values);
  const tail = 2 * sums.values.slice(-LAST_SHOWN).reduce((s, x) => s + Math.abs(x), 0);
  const share = tail / sums.values[0]!;
  if (share > 0.05) {
    notes.push(
      `The last ${lastTerms.length} correlations computed still add ${(100 * share).toFixed(0)} % of <f, f>: the partial sum may be far from the limit.`,
    );
  }
  const variance = estimatedQuantity(
    value,
    `<f, f> + 2 sum of <f, P^n f> for n = 1 to ${last}; the terms beyond are left out`,
  );
  return { label, mean, variance, degenerate, correlations, lastTerms, reached, notes };
}

function ofBox(box: Box, differences: Differences | undefined): ExactFinding {
  const whole = isWholeTorus(box);
  const { verdict } = boxDegeneracy(whole, differences);
  const norm = boxSquareNorm(box);
  return {
    label: box.label,
    mean: boxMean(box),
    ...(whole ? { variance: norm, spread: 0 } : {}),
    degenerate: verdict,
    correlations: [norm],
    notes: whole
      ? []
      : [
          "A box's indicator has infinitely many frequencies: <f, P^n f> is given for n = 0 only, and the variance comes from the exact walks.",
          "A box's indicator is not continuous. Equidistribution still gives its volume as the limit, since its boundary has measure 0; the central limit theorem for continuous functions does not cover it.",
        ],
  };
}

export async function haarFindings(walk: Walk, session: Session, budget: ExactBudget): Promise<ExactFinding[]> {
  const differences = differencesOf(walk);
  const phases = walk.moves.some((m) => m.translation !== undefined);
  const forward = forwardMoves(walk);
  const backward = isSelfAdjoint(walk) ? {} : { backward: adjointMoves(walk) };
  const parts = walk.observables.map((observable) => {
    if (observable.type === "box") return { observable };
    const f = polynomialOf(observable.terms);
    return { observable, f, degeneracy: degeneracyOf(walk, f, differences) };
  });
  const followed = parts.flatMap((part) => (part.f !== undefined && !constantOf(part.degeneracy) ? [part] : []));
  const payloads: CorrelationsPayload[] = followed.map(({ f }) => {
    const shape = shapeOf(f, walk.dimension, phases);
    return {
      shape,
      forward,
      ...backward,
      ...tableTerms(f, shape),
      entries: budget.entries,
      products: budget.products / followed.length,
      last: budget.last,
      memoryLimit: session.memoryLimit,
    };
  });
  const stage = "correlations by the dual walk";
  session.progress(stage, 0, payloads.length);
  const sums = await session.pool.map(correlationsJob, payloads, {
    signal: session.signal,
    onDone: (done) => session.progress(stage, done, payloads.length),
  });
  session.checkStop();
  return parts.map((part) => {
    const { label } = part.observable as Observable;
    if (part.f === undefined) return ofBox(part.observable as Box, differences);
    const at = followed.indexOf(part as (typeof followed)[number]);
    return ofTerms(label, part.f, part.degeneracy, sums[at]);
  });
}
