/**
 * Real trigonometric polynomials in exact arithmetic, composed with moves. Coefficients
 * are complex, at the representative of +-k; a move's phase must be a quarter turn.
 */
import { Rational } from "../exact/rational.js";
import { transpose } from "../walk/integers.js";
import type { Move } from "../walk/walk.js";
import { ExactForm } from "./form.js";
import { apply } from "./matrix.js";
import { canonical, type TrigPolynomial } from "./polynomial.js";

export interface ExactEntry {
  readonly frequency: readonly bigint[];
  readonly re: ExactForm;
  readonly im: ExactForm;
}
export type ExactFunction = ReadonlyMap<string, ExactEntry>;

/** Twice the coefficient of e_k is cos - i sin. */
export function functionOf(f: TrigPolynomial): ExactFunction {
  return new Map(f.harmonics.map((h) => [h.frequency.join(), { frequency: h.frequency, re: h.cos, im: h.sin.neg() }]));
}

export function polynomialFrom(g: ExactFunction): TrigPolynomial {
  const harmonics = [...g.values()].map(({ frequency, re, im }) => ({ frequency, cos: re, sin: im.neg() }));
  return { constant: ExactForm.ZERO, harmonics };
}

/** k.b in quarter turns, where it is a whole number of them. */
function quarterTurns(k: readonly bigint[], move: Move): number | undefined {
  if (move.translation === undefined) return 0;
  let sum = Rational.ZERO;
  for (const [j, b] of move.translation.entries()) {
    if (k[j] === 0n) continue;
    if (b.rational === undefined) return undefined;
    sum = sum.add(b.rational.mul(Rational.of(k[j] as bigint)));
  }
  const turns = sum.mul(Rational.of(4n));
  return turns.isInteger() ? Number(((turns.num % 4n) + 4n) % 4n) : undefined;
}

/** The image of one entry under composition with a move; undefined where its phase is not a quarter turn. */
export function composeEntry(entry: ExactEntry, move: Move): ExactEntry | undefined {
  const turns = quarterTurns(entry.frequency, move);
  if (turns === undefined) return undefined;
  let { re, im } = entry;
  for (let i = 0; i < turns; i++) [re, im] = [im.neg(), re];
  const image = canonical(apply(transpose(move.matrix), entry.frequency));
  if (image === undefined) throw new RangeError("composeEntry: the matrix is singular");
  return { frequency: image.frequency, re, im: image.flipped ? im.neg() : im };
}

/** g after the move, x -> g(A x + b). */
export function compose(g: ExactFunction, move: Move): ExactFunction | undefined {
  const out = new Map<string, ExactEntry>();
  for (const entry of g.values()) {
    const image = composeEntry(entry, move);
    if (image === undefined) return undefined;
    out.set(image.frequency.join(), image);
  }
  return out;
}

/** a - b, without entries proved zero. */
export function subtract(a: ExactFunction, b: ExactFunction): ExactFunction {
  const out = new Map(a);
  for (const [key, { frequency, re, im }] of b) {
    const old = out.get(key);
    const entry = {
      frequency,
      re: (old?.re ?? ExactForm.ZERO).add(re.neg()),
      im: (old?.im ?? ExactForm.ZERO).add(im.neg()),
    };
    if (entry.re.isZero && entry.im.isZero) out.delete(key);
    else out.set(key, entry);
  }
  return out;
}

export const provedNonZero = (e: ExactEntry): boolean => e.re.isNonZero || e.im.isNonZero;
