/**
 * An exact number of the walk file: a real number that can be evaluated to any number of
 * bits with a proved error, and whose kind is known.
 */
import { bitLength, floorDiv, Rational } from "./rational.js";

/** `rational` and `algebraic` (irrational) are proved; `unproved`: neither could be proved. */
export type NumberKind = "rational" | "algebraic" | "unproved";

export interface ExactNumber {
  /** As the file wrote it (for a polynomial: a readable rendering). */
  readonly text: string;
  readonly kind: NumberKind;
  /** The value, when `kind` is `rational`. */
  readonly rational?: Rational;
  /**
   * When `kind` is `algebraic`: an integer polynomial that vanishes at the number,
   * coefficients from the constant term up (not always the minimal one).
   */
  readonly polynomial?: readonly bigint[];
  /** An integer m with |x 2^bits - m| <= 1, proved. */
  toFixed(bits: number): bigint;
  /** A double within two units in the last place of the value. */
  toNumber(): number;
}

/** The exact number that equals a fraction. */
export function exactRational(value: Rational, text: string = value.toString()): ExactNumber {
  return {
    text,
    kind: "rational",
    rational: value,
    toFixed: (bits) => floorDiv(value.num << BigInt(bits), value.den),
    toNumber: () => value.toNumber(),
  };
}

/** The double for a number known through its fixed-point values: one unit in the last place at most away. */
export function fixedToNumber(toFixed: (bits: number) => bigint): number {
  for (let bits = 64; ; bits *= 2) {
    const m = toFixed(bits);
    // 62 digits make the error of one unit smaller than a double's; beyond 2^-2000 all is 0.
    if (bitLength(m) >= 62 || bits > 2000) return Rational.of(m, 1n << BigInt(bits)).toNumber();
  }
}
