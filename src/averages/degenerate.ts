/**
 * Is the limit variance 0? Write T_i x = A_i x + b_i and m for the mean of f.
 *
 * Sufficient, everywhere: a trigonometric polynomial g with f - m = g - g o T_1 and all
 * g o T_i equal. Then S_n - n m = g(x_0) - g(x_n) stays bounded.
 *
 * Necessary, in dimension 2 under strong irreducibility: some P^n then contracts functions
 * of mean zero (the differences w w'^-1 of equally long words generate a group that is not
 * amenable, while stabilisers of non-zero integer vectors are), so f - m = g - P g for a g in
 * L2, with variance |g|^2 - |P g|^2. That is 0 exactly if all g o T_i are equal, so g is
 * invariant under all T_i T_j^-1, and |coefficients| are constant on the orbits of covectors under
 * the group D of the A_i A_j^-1: g lives on finite orbits. There are three cases.
 * - D has none: the variance is positive for every f that is not constant.
 * - D is infinite and keeps a rational line L of covectors up to sign: f - m = g - g o T_1 with
 *   g on L and g o T_1 on A_1^T L, another line; so g is the part of f on L, and one looks.
 * - D is finite: for a hyperbolic product T_w of moves, f + f o T_(w_1) + f o T_(w_2) T_(w_1) + ...
 *   is g - g o T_w. All orbits of T_w on frequencies are infinite, and |coefficients| of g are
 *   constant on an orbit where that sum has none: g in L2 is unique, found by adding up along
 *   orbits, and is there only if each orbit's sum is 0.
 */

import { decidePlane, type PlaneFinding } from "../conditions/plane.js";
import type { Word } from "../conditions/words.js";
import {
  compose,
  composeEntry,
  type ExactEntry,
  type ExactFunction,
  functionOf,
  polynomialFrom,
  provedNonZero,
  subtract,
} from "../dual/function.js";
import { apply } from "../dual/matrix.js";
import { canonical, type TrigPolynomial } from "../dual/polynomial.js";
import type { Verdict } from "../quantity/quantity.js";
import { type IntegerMatrix, inverseMatrix, multiplyMatrices, transpose } from "../walk/integers.js";
import type { Move, Walk } from "../walk/walk.js";

/** What the moves alone decide, for all observables; in dimension 2 only. */
export interface Differences {
  readonly moves: PlaneFinding;
  /** The group D on covectors: it has finite orbits there where it is finite or keeps a rational line. */
  readonly group: PlaneFinding;
}

export interface Degeneracy {
  readonly verdict: Verdict;
  /** The g that was found: the time average is off by at most 2 sup|g| / n. */
  readonly g?: TrigPolynomial;
}

export function differencesOf(walk: Walk): Differences | undefined {
  if (walk.dimension !== 2) return undefined;
  const first = walk.moves[0] as Move;
  const back = inverseMatrix(first.matrix);
  const differences = walk.moves.map(
    (m): Move => ({
      ...m,
      matrix: transpose(multiplyMatrices(m.matrix, back)),
      determinant: m.determinant === first.determinant ? 1 : -1,
    }),
  );
  return { moves: decidePlane(walk.moves), group: decidePlane(differences) };
}

const LONGEST_CHAIN = 200;

function size(k: readonly bigint[]): bigint {
  let largest = 0n;
  for (const x of k) {
    const a = x < 0n ? -x : x;
    if (a > largest) largest = a;
  }
  return largest;
}

/**
 * The frequencies of f, each after those from which a move's orbit leads to it; undefined
 * where an orbit is finite, so that g would not be determined. Orbits are followed far
 * beyond f's own size, but a link that is missed only means that no g is found.
 */
function orderAlongOrbits(f: ExactFunction, { matrix }: Step): string[] | undefined {
  const step = transpose(matrix);
  const far = [...f.values()].reduce((m, e) => (size(e.frequency) > m ? size(e.frequency) : m), 1n) << 64n;
  const earlier = new Map([...f.keys()].map((key) => [key, 0]));
  for (const [key, { frequency }] of f) {
    let k = frequency;
    for (let n = 0; n < LONGEST_CHAIN && size(k) < far; n++) {
      k = canonical(apply(step, k))?.frequency as readonly bigint[];
      const name = k.join();
      if (name === key) return undefined;
      const before = earlier.get(name);
      if (before !== undefined) earlier.set(name, before + 1);
    }
  }
  return [...earlier].sort(([, a], [, b]) => a - b).map(([key]) => key);
}

/** A map of the torus: its matrix, and e_k -> e_k o T. */
interface Step {
  readonly matrix: IntegerMatrix;
  readonly compose: (entry: ExactEntry) => ExactEntry | undefined;
}

const stepOf = (move: Move): Step => ({ matrix: move.matrix, compose: (entry) => composeEntry(entry, move) });

/** The product of moves of a word; its first index acts first. */
function stepAlong(walk: Walk, word: Word): Step {
  const moves = word.indices.map((i) => walk.moves[i] as Move).reverse();
  return {
    matrix: word.matrix,
    compose: (entry) =>
      moves.reduce<ExactEntry | undefined>((e, move) => (e === undefined ? e : composeEntry(e, move)), entry),
  };
}

/**
 * g with f = g - g o T, by summing along orbits; `none` where an orbit's sum is proved not to
 * be 0, undefined where none was found.
 */
function telescoped(f: ExactFunction, step: Step): ExactFunction | "none" | undefined {
  const order = orderAlongOrbits(f, step);
  if (order === undefined) return undefined;
  const g = new Map<string, ExactEntry>();
  const done = new Set<string>();
  for (const first of order) {
    if (done.has(first)) continue;
    done.add(first);
    let entry = f.get(first) as ExactEntry;
    for (let n = 0; !(entry.re.isZero && entry.im.isZero); n++) {
      if (n > 2 * LONGEST_CHAIN) return provedNonZero(entry) ? "none" : undefined;
      g.set(entry.frequency.join(), entry);
      const image = step.compose(entry);
      if (image === undefined) return undefined;
      const own = f.get(image.frequency.join());
      done.add(image.frequency.join());
      entry = own === undefined ? image : { ...image, re: own.re.add(image.re), im: own.im.add(image.im) };
    }
  }
  return g;
}

/** Whether f = g - g o T_i for every i: both answers proved; unknown where a phase or a difference is not decided. */
function solves(f: ExactFunction, g: ExactFunction, walk: Walk): "yes" | "no" | "unknown" {
  let answer: "yes" | "unknown" = "yes";
  for (const move of walk.moves) {
    const moved = compose(g, move);
    const off = moved === undefined ? undefined : [...subtract(subtract(g, moved), f).values()];
    if (off?.some(provedNonZero)) return "no";
    if (off === undefined || off.length > 0) answer = "unknown";
  }
  return answer;
}

function show(g: TrigPolynomial) {
  return g.harmonics.map(({ frequency, cos, sin }) => ({
    frequency: frequency.map(String),
    cos: cos.rational?.toString() ?? cos.toDouble().value,
    sin: sin.rational?.toString() ?? sin.toDouble().value,
  }));
}

function found(g: ExactFunction): Degeneracy {
  const polynomial = polynomialFrom(g);
  const reason = "f - mean = g - g(A_i x + b_i) for every move i, so that sums of f - mean stay bounded.";
  return { verdict: { verdict: "holds", reason, evidence: { g: show(polynomial) } }, g: polynomial };
}

const fails = (reason: string, evidence: Record<string, unknown>): Degeneracy => ({
  verdict: { verdict: "fails", reason, evidence },
});
const undecided = (reason: string, evidence: Record<string, unknown>): Degeneracy => ({
  verdict: { verdict: "undecided", reason, evidence },
});

/** The verdict for a trigonometric polynomial under Haar measure. */
export function degeneracyOf(walk: Walk, f: TrigPolynomial, differences: Differences | undefined): Degeneracy {
  if (f.harmonics.length === 0) {
    return {
      verdict: { verdict: "holds", reason: "The observable is constant.", evidence: {} },
      g: { ...f, harmonics: [] },
    };
  }
  const exact = functionOf(f);
  const tried: string[] = [];
  for (const move of walk.moves) {
    const g = telescoped(exact, stepOf(move));
    if (g !== undefined && g !== "none" && solves(exact, g, walk) === "yes") return found(g);
    tried.push(`sums along the orbits of "${move.label}"`);
  }
  if (differences?.moves.type !== "strongly irreducible") {
    const why =
      differences !== undefined
        ? "The moves are not strongly irreducible: no contraction is at hand that would turn variance 0 into an equation."
        : "In dimension 3 and more the finite orbits of the differences are not decided here.";
    return undecided(`${why} No g with f - mean = g - g(A_i x + b_i) was found.`, { tried });
  }
  const { group } = differences;
  if (group.type === "irrational lines" || group.type === "strongly irreducible") return withoutFiniteOrbit(group);
  if (group.type === "finite") {
    return alongWord(walk, exact, differences.moves.word, group.elements.length);
  }
  const line = group.line as [bigint, bigint];
  const onLine = new Map(
    [...exact].filter(
      ([
        ,
        {
          frequency: [x, y],
        },
      ]) => x! * line[1] === y! * line[0],
    ),
  );
  const evidence = { line: line.map(String), partOnLine: show(polynomialFrom(onLine)) };
  const answer = solves(exact, onLine, walk);
  if (answer === "yes") return found(onLine);
  const image = apply(transpose((walk.moves[0] as Move).matrix), line) as [bigint, bigint];
  const outside = [...exact.values()].find(
    (e) =>
      e.frequency[0]! * line[1] !== e.frequency[1]! * line[0] &&
      e.frequency[0]! * image[1] !== e.frequency[1]! * image[0] &&
      provedNonZero(e),
  );
  if (outside !== undefined || answer === "no") {
    return fails(
      "Variance 0 would need f - mean = g - g(A_1 x + b_1) with g the part of f on the one line of frequencies that the A_i A_j^-1 keep; it is not so.",
      { ...evidence, ...(outside === undefined ? {} : { frequencyOutside: outside.frequency.map(String) }) },
    );
  }
  return undecided("Equality of irrational coefficients or phases could not be decided.", evidence);
}

/** The sum of f along a word's moves: g - g o T_w wherever f = g - g o T_i for all i. */
function summedAlong(walk: Walk, f: ExactFunction, word: Word): ExactFunction | undefined {
  let sum: ExactFunction | undefined = f;
  for (const i of word.indices.slice(0, -1).reverse()) {
    const moved: ExactFunction | undefined = sum === undefined ? undefined : compose(sum, walk.moves[i] as Move);
    sum = moved === undefined ? undefined : subtract(f, negated(moved));
  }
  return sum;
}

function negated(f: ExactFunction): ExactFunction {
  return new Map([...f].map(([key, e]) => [key, { ...e, re: e.re.neg(), im: e.im.neg() }]));
}

/** Entries of a word for which orbits are surely followed to their end (see orderAlongOrbits). */
const LARGEST_ENTRY = 1n << 24n;

/** Decided by a hyperbolic product of moves; `order`: of the finite group of the differences. */
function alongWord(walk: Walk, f: ExactFunction, word: Word, order: number): Degeneracy {
  const evidence = {
    hyperbolicProduct: { indices: word.indices, matrix: word.matrix.map((row) => row.map(String)) },
    orderOfDifferences: order,
  };
  const small = word.matrix.flat().every((x) => (x < 0n ? -x : x) < LARGEST_ENTRY);
  const sum = small ? summedAlong(walk, f, word) : undefined;
  const g = sum === undefined ? undefined : telescoped(sum, stepAlong(walk, word));
  const answer = g === undefined || g === "none" ? g : solves(f, g, walk);
  if (answer === "yes") return found(g as ExactFunction);
  if (answer === "none") {
    return fails(
      "Variance 0 would need a g whose difference along a hyperbolic product of moves is the sum of f - mean along it; that sum does not add up to 0 along an orbit of frequencies, so there is none.",
      evidence,
    );
  }
  if (answer === "no") {
    return fails(
      "Variance 0 would need f - mean = g - g(A_i x + b_i) for every move; along a hyperbolic product of moves one g alone can do that, and it does not for every move.",
      { ...evidence, g: show(polynomialFrom(g as ExactFunction)) },
    );
  }
  return undecided(
    `The A_i A_j^-1 generate a finite group (order ${order}), so that the variance may be 0; equality of irrational coefficients or phases could not be decided.`,
    evidence,
  );
}

function withoutFiniteOrbit(group: PlaneFinding & { type: "irrational lines" | "strongly irreducible" }): Degeneracy {
  const { word } = group;
  return fails(
    "The A_i A_j^-1 have no finite orbit on non-zero frequencies, so that no observable but a constant has variance 0.",
    {
      hyperbolicElement: {
        productOf: word.indices.map((i) => `transpose of A_${i} A_0^-1`),
        matrix: word.matrix.map((row) => row.map(String)),
      },
    },
  );
}

/**
 * The verdict for the indicator of a box under Haar measure. Its frequencies fill a
 * coordinate axis (one side is not whole) or infinitely many lines, never a line and its image alone.
 */
export function boxDegeneracy(whole: boolean, differences: Differences | undefined): Degeneracy {
  if (whole) {
    const g = polynomialFrom(new Map());
    return { verdict: { verdict: "holds", reason: "The box is the whole torus.", evidence: {} }, g };
  }
  if (differences?.moves.type === "strongly irreducible") {
    const { group } = differences;
    if (group.type === "irrational lines" || group.type === "strongly irreducible") return withoutFiniteOrbit(group);
    if (group.type === "rational line") {
      return fails(
        "Variance 0 would need a g whose frequencies, and the box's, lie on one line and its image under A_1^T; a box's never do.",
        { line: group.line.map(String) },
      );
    }
  }
  return undecided("A box has infinitely many frequencies; the criterion for its variance is not decided here.", {});
}
