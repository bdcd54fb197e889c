/**
 * Two primes and, for a transform of length M, their roots rho with rho^{2M} = -1: what the
 * check of products (residue.ts) needs, kept in a plan. Montgomery's multiplication, R = 2^32.
 */

/**
 * 15 2^27 + 1 and 27 2^26 + 1: the first has roots of unity of order 4 M for M = 2^a, 3 2^a
 * and 5 2^a up to a = 25, the second up to a = 24, of order 4 M / 5 where M has the factor 5
 * (rho^{2M} = (-1)^5 all the same).
 */
export const P1: u32 = 2013265921;
export const P2: u32 = 1811939329;
const G1: u64 = 31;
const G2: u64 = 13;

/** Longer plans have no such roots. */
export const LONGEST: u32 = (1 << 25) - 1;

/** Powers of rho that are kept: a block of digits is a sum of products with them. */
export const BLOCK: u32 = 64;
/** Of one prime: rho^BLOCK in Montgomery's form, its quotient by p modulo 2^32, rho^(M/2), then the powers. */
const POWERS: usize = 16;
const PRIME_BYTES: usize = POWERS + ((<usize>BLOCK) << 3);

/** Bytes of the roots of a plan. */
export const ROOTS_BYTES: usize = 2 * PRIME_BYTES;

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

function writePrime(at: usize, m: u32, p: u32, g: u64): void {
  const whole = <u64>p - 1;
  const order = 4 * <u64>m;
  const root = power(g, whole / (whole % order == 0 ? order : order / 5), p);
  const w = <u32>((power(root, BLOCK, p) << 32) % p);
  store<u32>(at, w);
  store<u32>(at, w * inverse32(p), 4);
  store<u32>(at, <u32>power(root, m >> 1, p), 8);
  let x: u64 = 1;
  for (let j: u32 = 0; j < BLOCK; j++) {
    store<f64>(at + POWERS + ((<usize>j) << 3), <f64>(x > <u64>p >> 1 ? <i64>x - <i64>p : <i64>x));
    x = (x * root) % p;
  }
}

/** Writes the roots for length m at `at`. */
export function writeRoots(at: usize, m: u32): void {
  writePrime(at, m, P1, G1);
  writePrime(at + PRIME_BYTES, m, P2, G2);
}

/** The part of the roots that belongs to one of the primes. */
export function ofPrime(roots: usize, second: bool): usize {
  return second ? roots + PRIME_BYTES : roots;
}

/** Of one prime: rho^BLOCK in Montgomery's form, and its quotient by p modulo 2^32. */
export function blockStep(at: usize): u32 {
  return load<u32>(at);
}
export function blockStepQuotient(at: usize): u32 {
  return load<u32>(at, 4);
}
/** rho^(M/2): from one quarter of the digits to the next. */
export function quarterStep(at: usize): u64 {
  return load<u32>(at, 8);
}
/** Address of the powers rho^0, ..., rho^(BLOCK - 1): doubles, the residues nearest to 0. */
export function powers(at: usize): usize {
  return at + POWERS;
}
