/**
 * pi and e as balls, by binary splitting of a rational series; the best so far is kept.
 * pi: Chudnovsky and Chudnovsky 1988. e: the exponential series.
 */
import type { Ball } from "./ball.js";
import { integerSqrt } from "./integer-roots.js";

interface Split {
  readonly p: bigint;
  readonly q: bigint;
  readonly t: bigint;
}

/** Sum over a <= k < b of the terms, with p and q the products of the ratios' parts. */
function split(a: number, b: number, term: (k: number) => Split): Split {
  if (b - a === 1) return term(a);
  const middle = Math.floor((a + b) / 2);
  const left = split(a, middle, term);
  const right = split(middle, b, term);
  return { p: left.p * right.p, q: left.q * right.q, t: left.t * right.q + left.p * right.t };
}

function chudnovsky(index: number): Split {
  const k = BigInt(index);
  const p = k === 0n ? 1n : -(6n * k - 5n) * (2n * k - 1n) * (6n * k - 1n);
  const q = k === 0n ? 1n : k * k * k * 10939058860032000n;
  return { p, q, t: p * (13591409n + 545140134n * k) };
}

/**
 * pi = 426880 sqrt(10005) / sum. The terms alternate and fall at least as fast as
 * (1 + 41 k) 2^(-47 k), so that p/47 + 3 terms leave less than 2^-(p+60) of the whole; the
 * root is off by 2^-q of itself over 100, the quotient by one unit: together under 2 units.
 */
function computePi(p: number): Ball {
  const q = p + 8;
  const sum = split(0, Math.floor(q / 47) + 3, chudnovsky);
  const root = integerSqrt(10005n << BigInt(2 * q));
  return { mid: ((sum.q * 426880n * root) / sum.t) >> 8n, rad: 2n };
}

/** sum 1/k! for k < n, where n! >= 2^(p+2): the tail is below 2/n! <= 2^-(p+1). */
function computeE(p: number): Ball {
  let n = 2;
  for (let bits = 0; bits < p + 2; n++) bits += 31 - Math.clz32(n);
  const sum = split(1, n, (k) => ({ p: 1n, q: BigInt(k), t: 1n }));
  return { mid: ((sum.q + sum.t) << BigInt(p)) / sum.q, rad: 2n };
}

/** Keeps the widest value asked for; a narrower one is its leading part. */
function kept(compute: (p: number) => Ball): (p: number) => Ball {
  let best: { p: number; ball: Ball } | undefined;
  return (p) => {
    if (best === undefined || best.p < p) best = { p, ball: compute(p) };
    if (best.p === p) return best.ball;
    const shift = BigInt(best.p - p);
    // The dropped digits are less than one unit, and the radius shrinks below one.
    return { mid: best.ball.mid >> shift, rad: 2n };
  };
}

export const piBall: (p: number) => Ball = kept(computePi);
export const eBall: (p: number) => Ball = kept(computeE);
