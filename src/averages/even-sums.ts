/**
 * Exact sums of cos(2 pi r / q) and sin(2 pi r / q) over a list of residues r, where they are
 * rational for a visible reason: in each class gcd(r, q) = q / n the residues are hit evenly
 * (up to sign), so that the class sums to a multiple of the sum of the primitive n-th roots
 * of unity, which is the Moebius function mu(n).
 */
import { Rational } from "../exact/rational.js";

function gcd(a: number, b: number): number {
  while (b !== 0) [a, b] = [b, a % b];
  return a;
}

/** mu(n) and Euler's phi(n). */
function arithmetic(n: number): { mu: number; phi: number } {
  let mu = 1;
  let phi = n;
  let left = n;
  for (let p = 2; p * p <= left; p++) {
    if (left % p !== 0) continue;
    left /= p;
    mu = left % p === 0 ? 0 : -mu;
    while (left % p === 0) left /= p;
    phi -= phi / p;
  }
  return left > 1 ? { mu: -mu, phi: phi - phi / left } : { mu, phi };
}

/** Each sum, undefined where the reason does not apply. */
export function evenSums(residues: Int32Array, q: number): { cos: Rational | undefined; sin: Rational | undefined } {
  const hits = new Map<number, number>();
  for (const r of residues) hits.set(r, (hits.get(r) ?? 0) + 1);
  const at = (r: number) => hits.get(r === 0 ? 0 : q - r) ?? 0;
  // For each class: how many of its residues are hit up to sign, and how often r and -r are hit together.
  const classes = new Map<number, { together: number; count: number; even: boolean; odd: number }>();
  const seen = new Set<number>();
  for (const given of hits.keys()) {
    for (const r of [given, given === 0 ? 0 : q - given]) {
      if (seen.has(r)) continue;
      seen.add(r);
      const n = q / gcd(q, r);
      const here = hits.get(r) ?? 0;
      const together = here + at(r);
      const odd = here - at(r);
      const c = classes.get(n) ?? { together, count: 0, even: true, odd: 0 };
      c.count++;
      if (c.together !== together) c.even = false;
      // In the class of quarter turns the sine itself is whole: 1 at q / 4, -1 at 3 q / 4.
      if (n === 4) c.odd = r === q / 4 ? odd : c.odd;
      else if (odd !== 0) c.odd = Number.NaN;
      classes.set(n, c);
    }
  }
  let twice: number | undefined = 0;
  let sine: number | undefined = 0;
  for (const [n, { together, count, even, odd }] of classes) {
    const { mu, phi } = arithmetic(n);
    if (!even || count !== phi) twice = undefined;
    else if (twice !== undefined) twice += together * mu;
    if (Number.isNaN(odd)) sine = undefined;
    else if (sine !== undefined) sine += odd;
  }
  return {
    cos: twice === undefined ? undefined : Rational.of(twice, 2),
    sin: sine === undefined ? undefined : Rational.of(sine),
  };
}
