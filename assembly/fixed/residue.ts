/**
 * The check of a product: digit polynomials evaluated modulo two primes of 31 bits whose
 * product passes 2^61, at a point rho with rho^{2M} = -1, so that the check holds for
 * products modulo x^{2M} + 1 too (where the integer's high half is never formed, and a
 * residue of the integer itself would say nothing). A wrong coefficient escapes where it
 * changes the polynomial by a multiple of both minimal factors: about once in 2^61.
 *
 * The four quarters of the digits are the four lanes. A quarter is evaluated block by block:
 * within a block, sums of products with the powers of rho, exact in doubles; from block to
 * block, Horner's rule with rho^BLOCK. Sums stay below 2^52: a digit is below 2^14, a power
 * (nearest to 0) below 2^30, and a block has 2^6 terms. A coefficient, below 2^48 where the
 * transform is proved right, is cut into pieces of 17 bits, each at most 2^16 (the top one
 * below 2^14), and the pieces are evaluated apart.
 */
import { planLength, planRoots } from "./plan";
import { BLOCK, blockStep, blockStepQuotient, ofPrime, P1, P2, powers, quarterStep } from "./roots";

/** Pieces of a coefficient: 2^17 and 2^34, and their inverses. */
const LOW: f64 = 131072.0;
const HIGH: f64 = 17179869184.0;
const BY_LOW: f64 = 0.00000762939453125;
const BY_HIGH: f64 = 5.820766091346741e-11;

const BY_P1: f64 = 1.0 / 2013265921.0;
const BY_P2: f64 = 1.0 / 1811939329.0;

/** The two residues of the digits in a transform that has not been evaluated, as one word. */
export function digitResidues(plan: usize, at: usize): u64 {
  if (ASC_FEATURE_SIMD) return digitsLanes(planRoots(plan), at, planLength(plan) >> 1);
  return withoutLanes(planRoots(plan), at, planLength(plan) >> 1, 0.0);
}

/** The two residues of the rounded coefficients (stored times M) of a transform that has come back. */
export function coefficientResidues(plan: usize, at: usize): u64 {
  const scale = 1.0 / <f64>planLength(plan);
  if (ASC_FEATURE_SIMD) return coefficientsLanes(planRoots(plan), at, planLength(plan) >> 1, scale);
  return withoutLanes(planRoots(plan), at, planLength(plan) >> 1, scale);
}

/** A sum below 2^52 in absolute value, modulo p. */
function reduce(x: f64, p: f64, inverse: f64): u64 {
  const r = x - nearest(x * inverse) * p;
  return <u64>(<i64>(r < 0 ? r + p : r));
}

/** Both residues for the plain build; scale 0: digits, exact as they stand. */
function withoutLanes(roots: usize, at: usize, count: u32, scale: f64): u64 {
  const r1 = quarters(ofPrime(roots, false), at, count, scale, P1, BY_P1);
  const r2 = quarters(ofPrime(roots, true), at, count, scale, P2, BY_P2);
  return (r1 << 32) | r2;
}

function quarters(prime: usize, at: usize, count: u32, scale: f64, p: u64, inverse: f64): u64 {
  const table = powers(prime);
  const step = quarterStep(prime);
  // rho^BLOCK out of the table: the last power once more.
  const first = reduce(load<f64>(table, 8), <f64>p, inverse);
  const last = reduce(load<f64>(table + ((<usize>BLOCK - 1) << 3)), <f64>p, inverse);
  const block = (first * last) % p;
  let result: u64 = 0;
  for (let q = 3; q >= 0; q--) {
    let value: u64 = 0;
    for (let from = ((count - 1) / BLOCK) * BLOCK; ; from -= BLOCK) {
      const end = min(BLOCK, count - from);
      let s = at + ((<usize>from) << 5) + ((<usize>q) << 3);
      let low: f64 = 0;
      let middle: f64 = 0;
      let high: f64 = 0;
      for (let j: u32 = 0; j < end; j++, s += 32) {
        const c = load<f64>(table + ((<usize>j) << 3));
        let x = load<f64>(s);
        if (scale != 0) {
          x = nearest(x * scale);
          const h = nearest(x * BY_HIGH);
          x -= h * HIGH;
          const m = nearest(x * BY_LOW);
          x -= m * LOW;
          high += h * c;
          middle += m * c;
        }
        low += x * c;
      }
      const l = reduce(low, <f64>p, inverse);
      const m = reduce(middle, <f64>p, inverse);
      const h = reduce(high, <f64>p, inverse);
      value = (value * block + pieces(l, m, h, p)) % p;
      if (from == 0) break;
    }
    result = (result * step + value) % p;
  }
  return result;
}

function montLanes(a: v128, w: v128, wp: v128, p: v128): v128 {
  const q = i32x4.mul(a, wp);
  const low = i64x2.sub(i64x2.extmul_low_i32x4_u(a, w), i64x2.extmul_low_i32x4_u(q, p));
  const high = i64x2.sub(i64x2.extmul_high_i32x4_u(a, w), i64x2.extmul_high_i32x4_u(q, p));
  const t = v128.shuffle<i32>(low, high, 1, 3, 5, 7);
  return i32x4.min_u(t, i32x4.add(t, p));
}

/** Four sums below 2^52 (two pairs) modulo p, as four 32-bit integers below p. */
function reduceLanes(re: v128, im: v128, p: v128, inverse: v128, p32: v128): v128 {
  const r = f64x2.sub(re, f64x2.mul(f64x2.nearest(f64x2.mul(re, inverse)), p));
  const i = f64x2.sub(im, f64x2.mul(f64x2.nearest(f64x2.mul(im, inverse)), p));
  const t = v128.shuffle<i64>(i32x4.trunc_sat_f64x2_s_zero(r), i32x4.trunc_sat_f64x2_s_zero(i), 0, 2);
  return i32x4.min_u(t, i32x4.add(t, p32));
}

/** h w + r modulo p, lane by lane. */
function hornerLanes(h: v128, w: v128, wp: v128, r: v128, p32: v128): v128 {
  const t = i32x4.sub(i32x4.add(montLanes(h, w, wp, p32), r), p32);
  // Below p as it is, or after p is given back.
  return i32x4.min_u(t, i32x4.add(t, p32));
}

/** sum over quarters q of lane q times step^q. */
function join(a: v128, step: u64, p: u64): u64 {
  let r = <u64>(<u32>i32x4.extract_lane(a, 3)) % p;
  r = (r * step + <u64>(<u32>i32x4.extract_lane(a, 2))) % p;
  r = (r * step + <u64>(<u32>i32x4.extract_lane(a, 1))) % p;
  return (r * step + <u64>(<u32>i32x4.extract_lane(a, 0))) % p;
}

function digitsLanes(roots: usize, at: usize, count: u32): u64 {
  const first = ofPrime(roots, false);
  const second = ofPrime(roots, true);
  const table1 = powers(first);
  const table2 = powers(second);
  const p1 = i32x4.splat(P1);
  const p2 = i32x4.splat(P2);
  let h1 = i32x4.splat(0);
  let h2 = i32x4.splat(0);
  for (let from = ((count - 1) / BLOCK) * BLOCK; ; from -= BLOCK) {
    const end = (<usize>min(BLOCK, count - from)) << 3;
    let s = at + ((<usize>from) << 5);
    let re1 = f64x2.splat(0);
    let im1 = f64x2.splat(0);
    let re2 = f64x2.splat(0);
    let im2 = f64x2.splat(0);
    for (let j: usize = 0; j < end; j += 8, s += 32) {
      const c1 = v128.load64_splat(table1 + j);
      const c2 = v128.load64_splat(table2 + j);
      const re = v128.load(s);
      const im = v128.load(s, 16);
      re1 = f64x2.add(re1, f64x2.mul(re, c1));
      im1 = f64x2.add(im1, f64x2.mul(im, c1));
      re2 = f64x2.add(re2, f64x2.mul(re, c2));
      im2 = f64x2.add(im2, f64x2.mul(im, c2));
    }
    const r1 = reduceLanes(re1, im1, f64x2.splat(<f64>P1), f64x2.splat(BY_P1), p1);
    const r2 = reduceLanes(re2, im2, f64x2.splat(<f64>P2), f64x2.splat(BY_P2), p2);
    h1 = hornerLanes(h1, i32x4.splat(blockStep(first)), i32x4.splat(blockStepQuotient(first)), r1, p1);
    h2 = hornerLanes(h2, i32x4.splat(blockStep(second)), i32x4.splat(blockStepQuotient(second)), r2, p2);
    if (from == 0) break;
  }
  return (join(h1, quarterStep(first), P1) << 32) | join(h2, quarterStep(second), P2);
}

/** Sums of a block's pieces for both primes: low, middle, high of the first, then of the second. */
const sums: usize = memory.data(96 * 2);

/** Half of a block's lanes (real or imaginary parts): their six sums go to `into`. */
function pieceSums(s: usize, end: usize, table1: usize, table2: usize, scale: v128, into: usize): void {
  let low1 = f64x2.splat(0);
  let middle1 = f64x2.splat(0);
  let high1 = f64x2.splat(0);
  let low2 = f64x2.splat(0);
  let middle2 = f64x2.splat(0);
  let high2 = f64x2.splat(0);
  for (let j: usize = 0; j < end; j += 8, s += 32) {
    let x = f64x2.nearest(f64x2.mul(v128.load(s), scale));
    const h = f64x2.nearest(f64x2.mul(x, f64x2.splat(BY_HIGH)));
    x = f64x2.sub(x, f64x2.mul(h, f64x2.splat(HIGH)));
    const m = f64x2.nearest(f64x2.mul(x, f64x2.splat(BY_LOW)));
    x = f64x2.sub(x, f64x2.mul(m, f64x2.splat(LOW)));
    const c1 = v128.load64_splat(table1 + j);
    const c2 = v128.load64_splat(table2 + j);
    low1 = f64x2.add(low1, f64x2.mul(x, c1));
    low2 = f64x2.add(low2, f64x2.mul(x, c2));
    middle1 = f64x2.add(middle1, f64x2.mul(m, c1));
    middle2 = f64x2.add(middle2, f64x2.mul(m, c2));
    high1 = f64x2.add(high1, f64x2.mul(h, c1));
    high2 = f64x2.add(high2, f64x2.mul(h, c2));
  }
  v128.store(into, low1);
  v128.store(into, middle1, 32);
  v128.store(into, high1, 64);
  v128.store(into, low2, 96);
  v128.store(into, middle2, 128);
  v128.store(into, high2, 160);
}

function coefficientsLanes(roots: usize, at: usize, count: u32, scale: f64): u64 {
  const first = ofPrime(roots, false);
  const second = ofPrime(roots, true);
  const by = f64x2.splat(scale);
  const p1 = i32x4.splat(P1);
  const p2 = i32x4.splat(P2);
  const f1 = f64x2.splat(<f64>P1);
  const f2 = f64x2.splat(<f64>P2);
  const i1 = f64x2.splat(BY_P1);
  const i2 = f64x2.splat(BY_P2);
  const w1 = i32x4.splat(blockStep(first));
  const w1p = i32x4.splat(blockStepQuotient(first));
  const w2 = i32x4.splat(blockStep(second));
  const w2p = i32x4.splat(blockStepQuotient(second));
  let low1 = i32x4.splat(0);
  let middle1 = i32x4.splat(0);
  let high1 = i32x4.splat(0);
  let low2 = i32x4.splat(0);
  let middle2 = i32x4.splat(0);
  let high2 = i32x4.splat(0);
  for (let from = ((count - 1) / BLOCK) * BLOCK; ; from -= BLOCK) {
    const end = (<usize>min(BLOCK, count - from)) << 3;
    const s = at + ((<usize>from) << 5);
    pieceSums(s, end, powers(first), powers(second), by, sums);
    pieceSums(s + 16, end, powers(first), powers(second), by, sums + 16);
    low1 = hornerLanes(low1, w1, w1p, reduceLanes(v128.load(sums), v128.load(sums, 16), f1, i1, p1), p1);
    middle1 = hornerLanes(middle1, w1, w1p, reduceLanes(v128.load(sums, 32), v128.load(sums, 48), f1, i1, p1), p1);
    high1 = hornerLanes(high1, w1, w1p, reduceLanes(v128.load(sums, 64), v128.load(sums, 80), f1, i1, p1), p1);
    low2 = hornerLanes(low2, w2, w2p, reduceLanes(v128.load(sums, 96), v128.load(sums, 112), f2, i2, p2), p2);
    middle2 = hornerLanes(middle2, w2, w2p, reduceLanes(v128.load(sums, 128), v128.load(sums, 144), f2, i2, p2), p2);
    high2 = hornerLanes(high2, w2, w2p, reduceLanes(v128.load(sums, 160), v128.load(sums, 176), f2, i2, p2), p2);
    if (from == 0) break;
  }
  const s1 = quarterStep(first);
  const s2 = quarterStep(second);
  const x1 = pieces(join(low1, s1, P1), join(middle1, s1, P1), join(high1, s1, P1), P1);
  const x2 = pieces(join(low2, s2, P2), join(middle2, s2, P2), join(high2, s2, P2), P2);
  return (x1 << 32) | x2;
}

/** low + 2^17 middle + 2^34 high. */
function pieces(low: u64, middle: u64, high: u64, p: u64): u64 {
  const upper = ((high << 17) + middle) % p;
  return ((upper << 17) + low) % p;
}

/** sum of products of residues, both primes: acc + a b. */
export function addResidueProduct(acc: u64, a: u64, b: u64): u64 {
  const r1 = ((acc >> 32) + (((a >> 32) * (b >> 32)) % P1)) % P1;
  const r2 = ((acc & 0xffffffff) + (((a & 0xffffffff) * (b & 0xffffffff)) % P2)) % P2;
  return (r1 << 32) | r2;
}
