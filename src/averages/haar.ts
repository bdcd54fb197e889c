/**
 * The exact part under Haar measure, in which the walk is stationary: mean, correlations by
 * the dual walk, the limit variance, and whether that is 0.
 */

import { encloseAround, formQuantity } from "../dual/enclose.js";
import { polynomialOf, type TrigPolynomial } from "../dual/polynomial.js";
import { Rational } from "../exact/rational.js";
import type { Interval } from "../quantity/interval.js";
import { enclosedQuantity, exactQuantity, type Quantity, type Verdict } from "../quantity/quantity.js";
import type { Session } from "../session.js";
import type { Observable, Walk } from "../walk/walk.js";
import { boxTerms } from "./box-series.js";
import type { ExactBudget } from "./budget.js";
import { type Computed, computeSums } from "./computed.js";
import type { CorrelationSums } from "./correlations.js";
import { boxDegeneracy, type Degeneracy, type Differences, degeneracyOf, differencesOf } from "./degenerate.js";
import type { ExactFinding } from "./finding.js";
import { generatingFunction } from "./generating.js";
import { type Box, boxMean, boxSquareNorm, endsOf, isWholeTorus } from "./integral.js";
import { LAST_SHOWN, limitVariance } from "./limit-variance.js";
import { movesOf } from "./modular.js";
import { bracketJob } from "./modular-jobs.js";

const END: Readonly<Record<CorrelationSums["end"], string>> = {
  done: "as many terms as are ever computed",
  full: "the frequency table would be full; a higher effort or a higher memory limit allows a larger one",
  overflow: "a frequency of the next term needs more than 63 bits",
  budget: "the products that this effort allows are used up; a higher effort allows more",
  coefficients: "the exact integers of the next term may need more than 63 bits",
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

function correlationQuantities(f: TrigPolynomial, { values, errors, fractions }: CorrelationSums): Quantity[] {
  if (fractions !== undefined) {
    return fractions.map(([num, den]) => exactQuantity(Rational.of(num, den), "dual walk in exact integers"));
  }
  const norm = squareNorm(f);
  return values.map((value, n) =>
    n === 0 && norm !== undefined
      ? exactQuantity(norm, "half the sum of the squared coefficients")
      : errors[n] === 0
        ? exactQuantity(0n, "dual walk: no frequency comes back")
        : encloseAround(value, errors[n]!, "dual walk, paired at half depth"),
  );
}

function ofTerms(
  label: string,
  f: TrigPolynomial,
  degeneracy: Degeneracy,
  computed: Computed | undefined,
  at: readonly number[],
): ExactFinding {
  const mean = formQuantity(f.constant, "integral: the constant term");
  if (computed === undefined) {
    const zero = exactQuantity(0n, "the observable is constant");
    const generating = at.map((z) => ({ z, value: zero }));
    return {
      label,
      mean,
      variance: zero,
      degenerate: degeneracy.verdict,
      correlations: [zero],
      ...(at.length === 0 ? {} : { generating }),
      spread: 0,
      notes: [],
    };
  }
  const { sums, modular } = computed;
  const correlations = correlationQuantities(f, sums);
  const reached = { step: sums.values.length - 1, reason: END[sums.end] };
  const generating = generatingFunction(at, sums, modular);
  const common = { label, mean, correlations, reached, ...(at.length === 0 ? {} : { generating }) };
  if (degeneracy.g !== undefined) {
    const variance = exactQuantity(0n, "f - mean = g - P g with g invariant: sums stay bounded");
    const spread = spreadOf(degeneracy.g);
    return { ...common, variance, degenerate: degeneracy.verdict, spread, notes: [] };
  }
  const { variance, terms, poisson, notes } = limitVariance(computed);
  const lastTerms = correlations.map((value, step) => ({ step, value })).slice(-LAST_SHOWN);
  return {
    ...common,
    variance,
    degenerate: decidedBy(variance, degeneracy.verdict),
    ...(poisson === undefined ? {} : { poisson }),
    ...(terms ? { lastTerms } : {}),
    notes,
  };
}

/** Where algebra left it open, an enclosure that excludes 0 decides. */
function decidedBy(variance: Quantity, verdict: Verdict): Verdict {
  if (verdict.verdict !== "undecided" || variance.standing !== "enclosed" || !(Number(variance.low) > 0))
    return verdict;
  return {
    verdict: "fails",
    reason: "The variance is proved to lie in an interval that does not contain 0.",
    evidence: { low: variance.low, high: variance.high },
  };
}

function ofBox(
  box: Box,
  differences: Differences | undefined,
  bracket: Interval | undefined,
  contraction: number,
): ExactFinding {
  const whole = isWholeTorus(box);
  const { verdict } = boxDegeneracy(whole, differences);
  const norm = boxSquareNorm(box);
  return {
    label: box.label,
    mean: boxMean(box),
    ...(whole ? { variance: norm, spread: 0 } : {}),
    ...(bracket === undefined ? {} : { bracket: bracketQuantity(bracket) }),
    degenerate: bracket === undefined ? verdict : decidedBy(bracketQuantity(bracket), verdict),
    correlations: [norm],
    notes: whole
      ? []
      : [
          "A box's indicator has infinitely many frequencies: <f, P^n f> is given for n = 0 only, and the variance comes from the exact walks.",
          "A box's indicator is not continuous. Equidistribution still gives its volume as the limit, since its boundary has measure 0; the central limit theorem for continuous functions does not cover it.",
          ...(contraction < 1
            ? [
                "What is still true: since |P| < 1 on functions of mean 0 is proved, f - mean = g - P g with g in L2, and the central limit theorem with this variance holds from almost every start (Gordin 1969); for one given start it is not proved.",
              ]
            : []),
        ],
  };
}

function bracketQuantity({ low, high }: Interval): Quantity {
  return enclosedQuantity(
    low,
    high,
    "enclosed variance of the largest terms of the Fourier series, and |rest|^2 (1 + |P|) / (1 - |P|) at most for the rest",
  );
}

/** Wider brackets than this, high over low, help nobody. */
const WIDEST = 4;

/** Of each box; undefined where none was proved that is narrow enough to help. */
async function boxBrackets(
  walk: Walk,
  session: Session,
  budget: ExactBudget,
  contraction: number,
): Promise<ReadonlyMap<Observable, Interval>> {
  const translated = walk.moves.some((m) => m.translation !== undefined);
  if (walk.dimension !== 2 || translated || !(contraction < 1)) return new Map();
  const boxes = walk.observables.flatMap((box) => {
    if (box.type !== "box" || isWholeTorus(box)) return [];
    const terms = boxTerms(box, budget.boxTerms);
    return terms === undefined ? [] : [{ box, terms, norm: endsOf(boxSquareNorm(box)) }];
  });
  const payloads = boxes.map(({ terms, norm }) => ({
    moves: movesOf(walk),
    states: budget.states,
    terms,
    norm,
    contraction,
  }));
  const stage = "variances of boxes";
  session.progress(stage, 0, payloads.length);
  const found = await session.pool.map(bracketJob, payloads, {
    signal: session.signal,
    onDone: (done) => session.progress(stage, done, payloads.length),
  });
  session.checkStop();
  return new Map(
    boxes.flatMap(({ box }, i) => {
      const bracket = found[i];
      return bracket !== undefined && bracket.high <= WIDEST * bracket.low ? [[box, bracket] as const] : [];
    }),
  );
}

/**
 * @param contraction a proved bound of |P| on functions of mean 0; 1 where none is known
 * @param integers correlations in exact integers, where coefficients and weights allow it
 */
export async function haarFindings(
  walk: Walk,
  session: Session,
  budget: ExactBudget,
  at: readonly number[] = [],
  contraction = 1,
  integers = false,
): Promise<ExactFinding[]> {
  const differences = differencesOf(walk);
  const parts = walk.observables.map((observable) => {
    if (observable.type === "box") return { observable };
    const f = polynomialOf(observable.terms);
    return { observable, f, degeneracy: degeneracyOf(walk, f, differences) };
  });
  const followed = parts.flatMap((part) => (part.f !== undefined && !constantOf(part.degeneracy) ? [part] : []));
  const computed = await computeSums(
    walk,
    followed.map(({ f }) => f),
    session,
    budget,
    at,
    integers,
  );
  const brackets = await boxBrackets(walk, session, budget, contraction);
  return parts.map((part) => {
    const { label } = part.observable as Observable;
    if (part.f === undefined) {
      return ofBox(part.observable as Box, differences, brackets.get(part.observable), contraction);
    }
    const place = followed.indexOf(part as (typeof followed)[number]);
    return ofTerms(label, part.f, part.degeneracy, computed[place], at);
  });
}
