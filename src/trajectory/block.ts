/**
 * Consecutive positions of one walk, as `trajectory` hands them to whoever consumes them
 * in order. A block is valid until the next is asked for.
 */
import { floorDiv, Rational } from "../exact/rational.js";

export interface PositionBlock {
  /** The step of the first row. */
  readonly first: number;
  readonly rows: number;
  readonly dimension: number;
  /** rows x dimension doubles in [0, 1): the first 53 bits after the binary point. */
  doubles(): Float64Array<ArrayBuffer>;
  /** rows x dimension 64-bit words, floor(x 2^64) up to one unit on the circle; overwritten by the next block. */
  fixed(): BigUint64Array;
  /** One position, each coordinate with `digits` decimals: see `decimal`. */
  decimals(row: number, digits: number): string[];
  /** One position as exact fractions, where the walk is rational. */
  fractions?(row: number): string[];
}

/**
 * A number in [0, 1) to the nearest decimal of `digits` places, on the circle: what would
 * round to 1 is written as 0. Given x = value / scale with an error of at most 10^-digits / 2,
 * the decimal is within 10^-digits of x.
 */
export function decimal(value: bigint, scale: bigint, digits: number): string {
  const ten = 10n ** BigInt(digits);
  const nearest = floorDiv(2n * value * ten + scale, 2n * scale);
  return `0.${(nearest === ten ? 0n : nearest).toString().padStart(digits, "0")}`;
}

/** Words of 64 bits whose error of two units is below 10^-digits / 2. */
export function wordsFor(digits: number): number {
  // log2(10) < 3.32193; one bit for the half, one for the two units.
  return Math.ceil((digits * 3.32193 + 2) / 64);
}

/** The top 53 bits of every `words`-th 64-bit word as doubles in [0, 1). */
export function toDoubles<T extends Float64Array>(positions: BigUint64Array, words: number, into: T): T {
  const halves = new Uint32Array(positions.buffer, positions.byteOffset, 2 * positions.length);
  for (let i = 0, p = 0; i < into.length; i++, p += 2 * words) {
    into[i] = ((halves[p + 1] as number) * 0x200000 + ((halves[p] as number) >>> 11)) * 2 ** -53;
  }
  return into;
}

/** Positions as 64-bit words, the most significant of a coordinate first, within two units of the last. */
export class WordBlock implements PositionBlock {
  constructor(
    readonly first: number,
    readonly rows: number,
    readonly dimension: number,
    private readonly words: number,
    private readonly positions: BigUint64Array,
  ) {}

  doubles(): Float64Array<ArrayBuffer> {
    return toDoubles(this.positions, this.words, new Float64Array(this.rows * this.dimension));
  }

  fixed(): BigUint64Array {
    if (this.words === 1) return this.positions;
    return BigUint64Array.from(
      { length: this.rows * this.dimension },
      (_, i) => this.positions[i * this.words] as bigint,
    );
  }

  decimals(row: number, digits: number): string[] {
    const scale = 1n << BigInt(64 * this.words);
    return Array.from({ length: this.dimension }, (_, j) => {
      const at = (row * this.dimension + j) * this.words;
      let value = 0n;
      for (let i = 0; i < this.words; i++) value = (value << 64n) | (this.positions[at + i] as bigint);
      return decimal(value, scale, digits);
    });
  }
}

/** Positions as numerators over one denominator. */
export class FractionBlock implements PositionBlock {
  constructor(
    readonly first: number,
    readonly rows: number,
    readonly dimension: number,
    private readonly numerators: ArrayLike<bigint>,
    private readonly denominator: bigint,
    /** floor(x 2^64), where a kernel has them. */
    private readonly words?: () => BigUint64Array,
  ) {}

  private row(row: number): bigint[] {
    return Array.from({ length: this.dimension }, (_, j) => this.numerators[row * this.dimension + j] as bigint);
  }

  doubles(): Float64Array<ArrayBuffer> {
    return Float64Array.from(this.numerators, (n) => Number((n << 53n) / this.denominator) * 2 ** -53);
  }
  fixed(): BigUint64Array {
    return this.words?.() ?? BigUint64Array.from(this.numerators, (n) => (n << 64n) / this.denominator);
  }
  decimals(row: number, digits: number): string[] {
    return this.row(row).map((n) => decimal(n, this.denominator, digits));
  }
  fractions(row: number): string[] {
    return this.row(row).map((n) => Rational.of(n, this.denominator).toString());
  }
}
