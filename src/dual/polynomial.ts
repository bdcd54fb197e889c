/**
 * Trigonometric polynomials with equal frequencies merged: k and -k are one entry, at the
 * representative whose first non-zero component is positive.
 */
import { Rational } from "../exact/rational.js";
import type { DualShape, FrequencyTerm } from "../kernel/dual.js";
import type { TableBound } from "../kernel/dual-rounding.js";
import type { Term } from "../walk/walk.js";
import { ExactForm } from "./form.js";

/** cos(2 pi k.x) and sin(2 pi k.x) with their coefficients, k not 0. */
export interface Harmonic {
  readonly frequency: readonly bigint[];
  readonly cos: ExactForm;
  readonly sin: ExactForm;
}

export interface TrigPolynomial {
  readonly constant: ExactForm;
  /** No frequency twice, none whose two coefficients are proved zero. */
  readonly harmonics: readonly Harmonic[];
}

/** The representative of +-k, and whether that is -k; undefined for k = 0. */
export function canonical(
  k: readonly bigint[],
): { readonly frequency: readonly bigint[]; readonly flipped: boolean } | undefined {
  const lead = k.find((x) => x !== 0n);
  if (lead === undefined) return undefined;
  return lead > 0n ? { frequency: k, flipped: false } : { frequency: k.map((x) => -x), flipped: true };
}

export function polynomialOf(terms: readonly Term[]): TrigPolynomial {
  let constant = ExactForm.ZERO;
  const merged = new Map<string, Harmonic>();
  for (const term of terms) {
    const cos = ExactForm.of(term.cos);
    const sin = ExactForm.of(term.sin);
    const key = canonical(term.frequency);
    if (key === undefined) {
      constant = constant.add(cos);
      continue;
    }
    const name = key.frequency.join();
    const old = merged.get(name) ?? { frequency: key.frequency, cos: ExactForm.ZERO, sin: ExactForm.ZERO };
    merged.set(name, {
      frequency: key.frequency,
      cos: old.cos.add(cos),
      sin: old.sin.add(key.flipped ? sin.neg() : sin),
    });
  }
  const harmonics = [...merged.values()].filter((h) => !h.cos.isZero || !h.sin.isZero);
  return { constant, harmonics };
}

/** How the centred polynomial lies in a folded table: one double a slot where it stays even, or odd. */
export function shapeOf(f: TrigPolynomial, dimension: number, phases: boolean): DualShape {
  const even = !phases && f.harmonics.every((h) => h.sin.isZero);
  const odd = !phases && !even && f.harmonics.every((h) => h.cos.isZero);
  return { dimension, width: even || odd ? 1 : 2, fold: even ? "even" : "conjugate" };
}

/**
 * The centred polynomial as a folded table's terms: the coefficient of e_k is (cos - i sin) / 2;
 * an odd one keeps the imaginary part alone. `bound` accounts for rounding the coefficients.
 */
export function tableTerms(f: TrigPolynomial, shape: DualShape): { terms: FrequencyTerm[]; bound: TableBound } {
  const half = Rational.of(1, 2);
  let size = 0;
  let error = 0;
  const terms = f.harmonics.map(({ frequency, cos, sin }) => {
    const re = cos.scale(half).toDouble();
    const im = sin.scale(half).neg().toDouble();
    // Both k and -k count.
    size += 2 * (Math.abs(re.value) + re.error + Math.abs(im.value) + im.error);
    error += 2 * (re.error + im.error);
    const odd = shape.width === 1 && shape.fold === "conjugate";
    return { frequency, re: odd ? im.value : re.value, im: im.value };
  });
  const up = 1 + (4 * terms.length + 8) * 2 ** -52;
  return { terms, bound: { size: size * up, error: error * up } };
}
