/**
 * Two primes and, for a transform of length M, their roots rho with rho^{2M} = -1: what the
 * check of products (residue.ts) needs, kept in a plan. Montgomery's multiplication, R = 2^32.
 */

/** 15 2^27 + 1 and 375 2^22 + 1: both have roots of unity of order 4 M for M up to 5 2^20. */
export const P1: u32 = 2013265921;
export const P2: u32 = 1572864001;
const G1: u64 = 31;
const G2: u64 = 13;

/** The longest plan whose products can be checked. */
export const LONGEST: u32 = 5 << 20;

/** Bytes of the roots of a plan. */
export const ROOTS_BYTES: usize = 48;

function power(b: u64, e: u64, p: u64): u64 {
  let r: u64 = 1;
  b %= p;
  while (e) {
    if (e & 1) r = (r * b) % p;
    b = (b * b) % p;
    e >>= 1;
  }
  return r;
}

/** The inverse of p modulo 2^32, by Newton's iteration. */
function inverse32(p: u32): u32 {
  let x = p;
  for (let i = 0; i < 4; i++) x *= 2 - p * x;
  return x;
}

/** a w / 2^32 modulo p, below p; w in Montgomery's form, wq = w / p modulo 2^32. */
export function mont(a: u32, w: u32, wq: u32, p: u32): u32 {
  const t = <i64>((<u64>a * w) >> 32) - <i64>((<u64>(a * wq) * p) >> 32);
  return <u32>(t < 0 ? t + p : t);
}

function writePrime(at: usize, m: u32, p: u32, g: u64): void {
  const root = power(g, (<u64>p - 1) / (4 * <u64>m), p);
  const inverse = inverse32(p);
  const w = <u32>((root << 32) % p);
  const v = <u32>((((root * root) % p) << 32) % p);
  store<u32>(at, w);
  store<u32>(at, w * inverse, 4);
  store<u32>(at, v, 8);
  store<u32>(at, v * inverse, 12);
  store<u32>(at, <u32>power(root, m >> 1, p), 16);
}

/** Writes the roots for length m at `at`. */
export function writeRoots(at: usize, m: u32): void {
  writePrime(at, m, P1, G1);
  writePrime(at + 24, m, P2, G2);
}

/** The part of the roots that belongs to one of the primes. */
export function ofPrime(roots: usize, second: bool): usize {
  return second ? roots + 24 : roots;
}

/** Of one prime: rho in Montgomery's form, its quotient by p modulo 2^32, the same of rho^2, and rho^(M/2) itself. */
export function rho(at: usize): u32 {
  return load<u32>(at);
}
export function rhoQuotient(at: usize): u32 {
  return load<u32>(at, 4);
}
export function rhoSquared(at: usize): u32 {
  return load<u32>(at, 8);
}
export function rhoSquaredQuotient(at: usize): u32 {
  return load<u32>(at, 12);
}
export function quarterStep(at: usize): u64 {
  return load<u32>(at, 16);
}
