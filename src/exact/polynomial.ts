/**
 * Integer polynomials, exactly: greatest common divisors, square-free parts, Sturm's count
 * of real roots. A polynomial is its coefficients from the constant term up, the last one
 * not 0; the zero polynomial is [].
 */
import { bitLength, gcdBig, Rational } from "./rational.js";

export type Polynomial = readonly bigint[];

const abs = (a: bigint) => (a < 0n ? -a : a);

export function trimmed(f: Polynomial): Polynomial {
  let n = f.length;
  while (n > 0 && f[n - 1] === 0n) n--;
  return n === f.length ? f : f.slice(0, n);
}

export function degree(f: Polynomial): number {
  return f.length - 1;
}

/** f over the (positive) greatest common divisor of its coefficients; signs are kept. */
export function primitivePart(f: Polynomial): Polynomial {
  const g = f.reduceRight(gcdBig, 0n);
  return g <= 1n ? f : f.map((c) => c / g);
}

export function derivative(f: Polynomial): Polynomial {
  return f.slice(1).map((c, i) => c * BigInt(i + 1));
}

export function multiplyPolynomials(f: Polynomial, g: Polynomial): Polynomial {
  if (f.length === 0 || g.length === 0) return [];
  const product = new Array<bigint>(f.length + g.length - 1).fill(0n);
  f.forEach((a, i) => {
    g.forEach((b, j) => {
      product[i + j] += a * b;
    });
  });
  return product;
}

/** The remainder of a positive multiple of f by g (g not zero), so that signs are those of f mod g. */
function remainder(f: Polynomial, g: Polynomial): Polynomial {
  const lead = g[g.length - 1];
  let rest = [...f];
  while (rest.length >= g.length) {
    const top = rest[rest.length - 1];
    const shift = rest.length - g.length;
    const by = lead < 0n ? -top : top;
    rest = rest.map((c, i) => c * abs(lead) - (i >= shift ? by * g[i - shift] : 0n));
    rest = [...trimmed(rest)];
  }
  return primitivePart(rest);
}

/** f / g where g divides f over the rationals; primitive, with the leading sign of f. */
export function exactQuotient(f: Polynomial, g: Polynomial): Polynomial {
  const lead = abs(g[g.length - 1]);
  const scale = lead ** BigInt(Math.max(0, f.length - g.length + 1));
  const rest = f.map((c) => c * scale);
  const quotient = new Array<bigint>(Math.max(0, f.length - g.length + 1)).fill(0n);
  for (let k = quotient.length - 1; k >= 0; k--) {
    const c = rest[k + g.length - 1] / g[g.length - 1];
    quotient[k] = c;
    g.forEach((b, i) => {
      rest[k + i] -= c * b;
    });
  }
  const result = primitivePart(quotient);
  const flipped = result[result.length - 1] < 0n !== f[f.length - 1] < 0n;
  return flipped ? result.map((c) => -c) : result;
}

export function gcdPolynomials(f: Polynomial, g: Polynomial): Polynomial {
  let [a, b] = [primitivePart(f), primitivePart(g)];
  while (b.length > 0) [a, b] = [b, remainder(a, b)];
  return a;
}

/** 2^31 - 1, a prime. */
const PRIME = 2147483647n;

function inverseModPrime(a: bigint): bigint {
  let [r, s, u, v] = [PRIME, a, 0n, 1n];
  while (s !== 0n) {
    const q = r / s;
    [r, s, u, v] = [s, r - q * s, v, u - q * v];
  }
  return u;
}

/**
 * True proves that f has no multiple factor: f and f' have no common factor modulo a prime
 * that does not divide the leading coefficient. False proves nothing.
 */
export function isSquareFree(f: Polynomial): boolean {
  const residue = (c: bigint) => ((c % PRIME) + PRIME) % PRIME;
  let a = f.map(residue);
  if (a.length === 0 || a[a.length - 1] === 0n) return false;
  let b = trimmed(derivative(f).map(residue)).slice();
  while (b.length > 0) {
    const inverse = inverseModPrime(b[b.length - 1]);
    const rest = [...a];
    for (let k = a.length - b.length; k >= 0; k--) {
      const q = residue(rest[k + b.length - 1] * inverse);
      for (let i = 0; i < b.length; i++) rest[k + i] = residue(rest[k + i] - q * b[i]);
    }
    [a, b] = [b, [...trimmed(rest)]];
  }
  return a.length === 1;
}

/** The product of the distinct irreducible factors, primitive, with a positive leading coefficient. */
export function squareFreePart(f: Polynomial): Polynomial {
  const g = f.length > 1 && !isSquareFree(f) ? gcdPolynomials(f, derivative(f)) : [1n];
  const part = g.length > 1 ? exactQuotient(f, g) : primitivePart(f);
  return part[part.length - 1] < 0n ? part.map((c) => -c) : part;
}

/** den^deg f(num/den): the sign is that of f(num/den) as den > 0. */
export function evaluateHomogeneous(f: Polynomial, num: bigint, den: bigint): bigint {
  let value = 0n;
  let power = 1n;
  for (let i = f.length - 1; i >= 0; i--) {
    value = value * num + f[i] * power;
    power *= den;
  }
  return value;
}

export function signAt(f: Polynomial, x: Rational): -1 | 0 | 1 {
  const value = evaluateHomogeneous(f, x.num, x.den);
  return value < 0n ? -1 : value > 0n ? 1 : 0;
}

/** f(t + m). */
export function shifted(f: Polynomial, m: bigint): Polynomial {
  const g = [...f];
  for (let start = 0; start < g.length - 1; start++) {
    for (let i = g.length - 2; i >= start; i--) g[i] += m * g[i + 1];
  }
  return g;
}

/** Number of distinct real roots in the closed interval [low, high] (low <= high), by Sturm's theorem. */
export function countRealRoots(f: Polynomial, low: Rational, high: Rational): number {
  const base = squareFreePart(f);
  const chain: Polynomial[] = [base];
  for (let next = derivative(base); next.length > 0; ) {
    chain.push(next);
    next = remainder(chain[chain.length - 2], next).map((c) => -c);
  }
  const variations = (x: Rational) => {
    const signs = chain.map((g) => signAt(g, x)).filter((s) => s !== 0);
    return signs.filter((s, i) => i > 0 && s !== signs[i - 1]).length;
  };
  // V(low) - V(high) counts the roots in (low, high].
  return variations(low) - variations(high) + (signAt(base, low) === 0 ? 1 : 0);
}

/**
 * Every root of f other than 0 has absolute value above 2^-k for the k returned:
 * Cauchy's bound for the reverse polynomial, |root| >= |g0| / (|g0| + max |g_i|) >= |g0| / sum |g_i|.
 */
export function bitsBelowRoots(f: Polynomial): number {
  const g = f.slice(f.findIndex((c) => c !== 0n));
  const total = g.reduce((sum, c) => sum + abs(c), 0n);
  return Math.max(0, bitLength(total) - bitLength(g[0]) + 1);
}

/**
 * Two different roots of f are further apart than 2^-k for the k returned: Mahler 1964,
 * sep > sqrt(3) n^(-(n+2)/2) |disc|^(1/2) |f|_2^(1-n), for f square-free, |disc| >= 1.
 */
export function bitsBelowSeparation(f: Polynomial): number {
  const n = degree(f);
  const squares = f.reduce((sum, c) => sum + c * c, 0n);
  return Math.ceil(((n + 2) * bitLength(BigInt(n)) + (n - 1) * bitLength(squares)) / 2) + 1;
}

/** "x^3 - 2", for messages. */
export function polynomialText(f: readonly (bigint | Rational)[]): string {
  const parts: string[] = [];
  for (let i = f.length - 1; i >= 0; i--) {
    const c = f[i] instanceof Rational ? (f[i] as Rational) : Rational.of(f[i] as bigint);
    if (c.sign() === 0) continue;
    const size = c.abs();
    const power = i === 0 ? "" : i === 1 ? "x" : `x^${i}`;
    const factor = power !== "" && size.equals(Rational.ONE) ? "" : size.toString();
    const sign = parts.length === 0 ? (c.sign() < 0 ? "-" : "") : c.sign() < 0 ? " - " : " + ";
    parts.push(`${sign}${factor}${factor !== "" && power !== "" ? " " : ""}${power}`);
  }
  return parts.join("") || "0";
}
