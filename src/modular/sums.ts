/** Sums of doubles with a bound of their error. */

/**
 * Running sums, several at once, carried in twice the precision (Knuth's exact addition of two
 * doubles), and bounds of how far each is from the sum of its exact terms: each term comes
 * with its own error.
 */
export class BoundedSums {
  private readonly sum: Float64Array;
  private readonly carried: Float64Array;
  private readonly size: Float64Array;
  private readonly error: Float64Array;
  private readonly terms: Float64Array;

  constructor(count: number) {
    this.sum = new Float64Array(count);
    this.carried = new Float64Array(count);
    this.size = new Float64Array(count);
    this.error = new Float64Array(count);
    this.terms = new Float64Array(count);
  }

  /** @param error bound of |x - its exact term| */
  add(i: number, x: number, error: number): void {
    const before = this.sum[i]!;
    const s = before + x;
    const z = s - before;
    this.carried[i]! += before - (s - z) + (x - z);
    this.sum[i] = s;
    this.size[i]! += x < 0 ? -x : x;
    this.error[i]! += error;
    this.terms[i]!++;
  }

  value(i: number): number {
    return this.sum[i]! + this.carried[i]!;
  }

  /**
   * Adding n carries rounds each by at most 2^-53 of their sum, itself at most n 2^-53 of the
   * terms' sizes: n^2 2^-106 of these; the last addition 2^-53 of the value. The bounds' own
   * sums round as well: the factor covers that for n up to 2^40.
   */
  radius(i: number): number {
    const n = this.terms[i]!;
    const own = n * n * 2 ** -106 * this.size[i]! + 2 ** -52 * Math.abs(this.value(i));
    return (this.error[i]! + own) * (1 + n * 2 ** -50 + 2 ** -40) + Number.MIN_VALUE;
  }
}
