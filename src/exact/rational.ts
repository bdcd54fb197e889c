/** Exact fractions of BigInt, always in lowest terms with a positive denominator. */

function gcd(a: bigint, b: bigint): bigint {
  a = a < 0n ? -a : a;
  b = b < 0n ? -b : b;
  while (b !== 0n) [a, b] = [b, a % b];
  return a;
}

/** Largest integer at most a / b (b > 0). */
export function floorDiv(a: bigint, b: bigint): bigint {
  const q = a / b;
  return a % b < 0n ? q - 1n : q;
}

/** Number of binary digits of |a|; 0 for 0. */
export function bitLength(a: bigint): number {
  const hex = (a < 0n ? -a : a).toString(16);
  return hex === "0" ? 0 : 4 * (hex.length - 1) + (32 - Math.clz32(Number.parseInt(hex[0] as string, 16)));
}

export { gcd as gcdBig };

export class Rational {
  private constructor(
    readonly num: bigint,
    readonly den: bigint,
  ) {}

  static readonly ZERO = new Rational(0n, 1n);
  static readonly ONE = new Rational(1n, 1n);

  /** num / den in lowest terms. @throws RangeError when den is 0. */
  static of(num: bigint | number, den: bigint | number = 1n): Rational {
    let n = BigInt(num);
    let d = BigInt(den);
    if (d === 0n) throw new RangeError("Rational.of: denominator 0");
    if (d < 0n) {
      n = -n;
      d = -d;
    }
    const g = gcd(n, d);
    return g === 1n ? new Rational(n, d) : new Rational(n / g, d / g);
  }

  /** The exact value of a finite double. @throws RangeError for NaN and infinities. */
  static fromNumber(x: number): Rational {
    if (!Number.isFinite(x)) throw new RangeError(`Rational.fromNumber: ${x} is not finite`);
    let den = 1n;
    while (!Number.isInteger(x)) {
      // Doubling a double is exact, and at most 1074 doublings make it an integer.
      x *= 2;
      den *= 2n;
    }
    return Rational.of(BigInt(x), den);
  }

  add(other: Rational): Rational {
    return Rational.of(this.num * other.den + other.num * this.den, this.den * other.den);
  }
  sub(other: Rational): Rational {
    return Rational.of(this.num * other.den - other.num * this.den, this.den * other.den);
  }
  mul(other: Rational): Rational {
    return Rational.of(this.num * other.num, this.den * other.den);
  }
  /** @throws RangeError when `other` is 0. */
  div(other: Rational): Rational {
    return Rational.of(this.num * other.den, this.den * other.num);
  }
  neg(): Rational {
    return new Rational(-this.num, this.den);
  }
  abs(): Rational {
    return this.num < 0n ? this.neg() : this;
  }
  /** The representative in [0, 1) modulo 1. */
  mod1(): Rational {
    return new Rational(this.num - floorDiv(this.num, this.den) * this.den, this.den);
  }
  floor(): bigint {
    return floorDiv(this.num, this.den);
  }
  compare(other: Rational): -1 | 0 | 1 {
    const d = this.num * other.den - other.num * this.den;
    return d < 0n ? -1 : d > 0n ? 1 : 0;
  }
  equals(other: Rational): boolean {
    return this.num === other.num && this.den === other.den;
  }
  sign(): -1 | 0 | 1 {
    return this.num < 0n ? -1 : this.num > 0n ? 1 : 0;
  }
  isInteger(): boolean {
    return this.den === 1n;
  }

  /** The double nearest to the value (ties to even); subnormal results may be off by one unit. */
  toNumber(): number {
    if (this.num === 0n) return 0;
    const negative = this.num < 0n;
    const n = negative ? -this.num : this.num;
    // 64 quotient bits, the last one sticky: rounding that to a double is rounding the value.
    const shift = 64 - (bitLength(n) - bitLength(this.den));
    const scaled = shift >= 0 ? n << BigInt(shift) : n;
    const by = shift >= 0 ? this.den : this.den << BigInt(-shift);
    let q = scaled / by;
    if (scaled % by !== 0n) q |= 1n;
    let x = Number(q);
    for (let left = -shift; left !== 0; ) {
      const step = Math.max(-1000, Math.min(1000, left));
      x *= 2 ** step;
      left -= step;
    }
    return negative ? -x : x;
  }

  /** "p/q", or "p" for an integer. */
  toString(): string {
    return this.den === 1n ? this.num.toString() : `${this.num}/${this.den}`;
  }
}
