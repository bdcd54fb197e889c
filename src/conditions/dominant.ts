/**
 * Proximal products, proved: a characteristic polynomial with one simple root of largest
 * modulus. Squaring the roots N = 1, 2, 4, ... times over (Graeffe) keeps integers, and
 * Pellet's theorem then counts: if |c_{d-1}| r^(d-1) exceeds the sum of all |c_j| r^j with
 * j not d-1, exactly d-1 roots have modulus below r, and the last one lies beyond, hence is
 * real and simple. With r = |c_{d-1}| / 2 that reads, for a monic polynomial and
 * C = |c_{d-1}|: C^d > sum over j <= d-2 of |c_j| 2^(d-j) C^j.
 */
import type { IntegerMatrix } from "../dual/matrix.js";
import { characteristicPolynomial, plainVector } from "./matrix.js";
import type { Word } from "./words.js";

const abs = (a: bigint) => (a < 0n ? -a : a);

/** The monic polynomial whose roots are the squares of the roots of f. */
export function squaredRoots(f: readonly bigint[]): bigint[] {
  const d = f.length - 1;
  return f.map((_, k) => {
    // The coefficient of x^2k in (-1)^d f(x) f(-x).
    let sum = 0n;
    for (let i = Math.max(0, 2 * k - d); i <= Math.min(d, 2 * k); i++) {
      sum += (i % 2 === 0 ? 1n : -1n) * f[i] * f[2 * k - i];
    }
    return d % 2 === 0 ? sum : -sum;
  });
}

export function pellet(f: readonly bigint[]): boolean {
  const d = f.length - 1;
  const c = abs(f[d - 1]);
  let others = 0n;
  let power = 1n;
  for (let j = 0; j <= d - 2; j++) {
    others += abs(f[j]) * power * (1n << BigInt(d - j));
    power *= c;
  }
  return power * c > others;
}

export interface Dominance {
  /** Coefficients from the constant term up. */
  readonly polynomial: readonly bigint[];
  /** Pellet's inequality holds for the polynomial of the N-th powers of the roots. */
  readonly power: number;
}

/** A proof that the matrix is proximal, or undefined where none is found with powers up to 2^rounds. */
export function dominance(matrix: IntegerMatrix, rounds: number): Dominance | undefined {
  const polynomial = characteristicPolynomial(matrix);
  let f: readonly bigint[] = polynomial;
  for (let k = 0; ; k++) {
    if (pellet(f)) return { polynomial, power: 2 ** k };
    if (k === rounds) return undefined;
    f = squaredRoots(f);
  }
}

/** The first word that is proved proximal: a quick look at all, then a close one at the shortest. */
export function proximalWord(words: readonly Word[]): { word: Word; proof: Dominance } | undefined {
  for (const [most, rounds] of [
    [words.length, 3],
    [80, 8],
  ]) {
    for (const word of words.slice(0, most)) {
      const proof = dominance(word.matrix, rounds);
      if (proof !== undefined) return { word, proof };
    }
  }
  return undefined;
}

export function dominanceEvidence({ polynomial, power }: Dominance): Record<string, unknown> {
  let f: readonly bigint[] = polynomial;
  for (let n = power; n > 1; n /= 2) f = squaredRoots(f);
  return {
    characteristicPolynomial: plainVector(polynomial),
    power,
    // Beyond this the integers are too long to read; they are reached by squaring the roots again.
    ...(power <= 16 ? { polynomialOfPowers: plainVector(f) } : {}),
    check:
      "Pellet: |c_(d-1)| r^(d-1) > sum of the other |c_j| r^j at r = |c_(d-1)| / 2, coefficients from the constant term up",
  };
}
