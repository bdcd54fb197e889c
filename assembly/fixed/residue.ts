/**
 * The check of a product: digit polynomials evaluated modulo two primes of 31 bits whose
 * product passes 2^61, at a point rho with rho^{2M} = -1, so that the check holds for
 * products modulo x^{2M} + 1 too (where the integer's high half is never formed, and a
 * residue of the integer itself would say nothing). A wrong coefficient escapes where it
 * changes the polynomial by a multiple of both minimal factors: about once in 2^61.
 *
 * The four quarters of the digits are the four lanes; Horner's rule runs over a quarter.
 */
import { planLength, planRoots } from "./plan";
import { mont, ofPrime, P1, P2, quarterStep, rho, rhoQuotient, rhoSquared, rhoSquaredQuotient } from "./roots";

const MAGIC: f64 = 6755399441055744.0;
const SPLIT: f64 = 4194304.0; // 2^22
const UNSPLIT: f64 = 2.384185791015625e-7; // 2^-22

function montLanes(a: v128, w: v128, wp: v128, p: v128): v128 {
  const q = i32x4.mul(a, wp);
  const low = i64x2.sub(i64x2.extmul_low_i32x4_u(a, w), i64x2.extmul_low_i32x4_u(q, p));
  const high = i64x2.sub(i64x2.extmul_high_i32x4_u(a, w), i64x2.extmul_high_i32x4_u(q, p));
  const t = v128.shuffle<i32>(low, high, 1, 3, 5, 7);
  return i32x4.min_u(t, i32x4.add(t, p));
}

/** a + d for a small signed d, kept within 32 bits. */
function addLanes(a: v128, d: v128, p: v128): v128 {
  const s = i32x4.add(a, d);
  return i32x4.min_u(s, i32x4.add(s, p));
}

/** Four doubles (two pairs) as four 32-bit integers. */
function toLanes(re: v128, im: v128): v128 {
  return v128.shuffle<i64>(i32x4.trunc_sat_f64x2_s_zero(re), i32x4.trunc_sat_f64x2_s_zero(im), 0, 2);
}

/** The two residues of the digits in a transform that has not been evaluated, as one word. */
export function digitResidues(plan: usize, at: usize): u64 {
  if (ASC_FEATURE_SIMD) return digitsLanes(planRoots(plan), at, planLength(plan));
  return withoutLanes(plan, at, 0.0);
}

/** The two residues of the rounded coefficients (stored times M) of a transform that has come back. */
export function coefficientResidues(plan: usize, at: usize): u64 {
  const scale = 1.0 / <f64>planLength(plan);
  if (ASC_FEATURE_SIMD) return coefficientsLanes(planRoots(plan), at, planLength(plan), scale);
  return withoutLanes(plan, at, scale);
}

/** Both residues for the plain build; scale 0: digits, exact as they stand. */
function withoutLanes(plan: usize, at: usize, scale: f64): u64 {
  const roots = planRoots(plan);
  const step1 = quarterStep(ofPrime(roots, false));
  const step2 = quarterStep(ofPrime(roots, true));
  let r1: u64 = 0;
  let r2: u64 = 0;
  for (let q = 3; q >= 0; q--) {
    const e = quarterPlain(roots, at + ((<usize>q) << 3), planLength(plan), scale);
    r1 = (r1 * step1 + (e >> 32)) % P1;
    r2 = (r2 * step2 + (e & 0xffffffff)) % P2;
  }
  return (r1 << 32) | r2;
}

/** One quarter's polynomial at rho, both primes. */
function quarterPlain(roots: usize, at: usize, m: u32, scale: f64): u64 {
  const first = ofPrime(roots, false);
  const second = ofPrime(roots, true);
  const w1 = rho(first);
  const w1p = rhoQuotient(first);
  const w2 = rho(second);
  const w2p = rhoQuotient(second);
  let a1: u32 = 0;
  let a2: u32 = 0;
  let s = at + ((<usize>m) << 4);
  do {
    s -= 32;
    const d = scale == 0.0 ? <i64>load<f64>(s) : <i64>(load<f64>(s) * scale + MAGIC - MAGIC);
    let d1 = d % <i64>P1;
    if (d1 < 0) d1 += P1;
    let d2 = d % <i64>P2;
    if (d2 < 0) d2 += P2;
    a1 = <u32>((<u64>mont(a1, w1, w1p, P1) + <u64>d1) % P1);
    a2 = <u32>((<u64>mont(a2, w2, w2p, P2) + <u64>d2) % P2);
  } while (s > at);
  return ((<u64>a1) << 32) | a2;
}

/** sum over quarters q of lane q times step^q. */
function join(a: v128, step: u64, p: u64): u64 {
  let r = <u64>(<u32>i32x4.extract_lane(a, 3)) % p;
  r = (r * step + <u64>(<u32>i32x4.extract_lane(a, 2))) % p;
  r = (r * step + <u64>(<u32>i32x4.extract_lane(a, 1))) % p;
  return (r * step + <u64>(<u32>i32x4.extract_lane(a, 0))) % p;
}

function digitsLanes(roots: usize, at: usize, m: u32): u64 {
  // Even and odd positions apart, so that four chains of multiplications run side by side.
  const first = ofPrime(roots, false);
  const second = ofPrime(roots, true);
  const p1 = i32x4.splat(P1);
  const p2 = i32x4.splat(P2);
  const v1 = i32x4.splat(rhoSquared(first));
  const v1p = i32x4.splat(rhoSquaredQuotient(first));
  const v2 = i32x4.splat(rhoSquared(second));
  const v2p = i32x4.splat(rhoSquaredQuotient(second));
  let e1 = i32x4.splat(0);
  let e2 = i32x4.splat(0);
  let o1 = i32x4.splat(0);
  let o2 = i32x4.splat(0);
  let s = at + ((<usize>m) << 4);
  do {
    s -= 64;
    const even = toLanes(v128.load(s), v128.load(s, 16));
    const odd = toLanes(v128.load(s, 32), v128.load(s, 48));
    e1 = addLanes(montLanes(e1, v1, v1p, p1), even, p1);
    e2 = addLanes(montLanes(e2, v2, v2p, p2), even, p2);
    o1 = addLanes(montLanes(o1, v1, v1p, p1), odd, p1);
    o2 = addLanes(montLanes(o2, v2, v2p, p2), odd, p2);
  } while (s > at);
  o1 = montLanes(o1, i32x4.splat(rho(first)), i32x4.splat(rhoQuotient(first)), p1);
  o2 = montLanes(o2, i32x4.splat(rho(second)), i32x4.splat(rhoQuotient(second)), p2);
  const s1 = quarterStep(first);
  const s2 = quarterStep(second);
  const x1 = (join(e1, s1, P1) + join(o1, s1, P1)) % P1;
  const x2 = (join(e2, s2, P2) + join(o2, s2, P2)) % P2;
  return (x1 << 32) | x2;
}

function coefficientsLanes(roots: usize, at: usize, m: u32, scale: f64): u64 {
  const first = ofPrime(roots, false);
  const second = ofPrime(roots, true);
  const p1 = i32x4.splat(P1);
  const p2 = i32x4.splat(P2);
  const v1 = i32x4.splat(rho(first));
  const v1p = i32x4.splat(rhoQuotient(first));
  const v2 = i32x4.splat(rho(second));
  const v2p = i32x4.splat(rhoQuotient(second));
  const by = f64x2.splat(scale);
  const magic = f64x2.splat(MAGIC);
  const split = f64x2.splat(SPLIT);
  const unsplit = f64x2.splat(UNSPLIT);
  let h1 = i32x4.splat(0);
  let h2 = i32x4.splat(0);
  let l1 = i32x4.splat(0);
  let l2 = i32x4.splat(0);
  let s = at + ((<usize>m) << 4);
  do {
    s -= 32;
    const re = f64x2.sub(f64x2.add(f64x2.mul(v128.load(s), by), magic), magic);
    const im = f64x2.sub(f64x2.add(f64x2.mul(v128.load(s, 16), by), magic), magic);
    const hr = f64x2.nearest(f64x2.mul(re, unsplit));
    const hi = f64x2.nearest(f64x2.mul(im, unsplit));
    const high = toLanes(hr, hi);
    const low = toLanes(f64x2.sub(re, f64x2.mul(hr, split)), f64x2.sub(im, f64x2.mul(hi, split)));
    h1 = addLanes(montLanes(h1, v1, v1p, p1), high, p1);
    h2 = addLanes(montLanes(h2, v2, v2p, p2), high, p2);
    l1 = addLanes(montLanes(l1, v1, v1p, p1), low, p1);
    l2 = addLanes(montLanes(l2, v2, v2p, p2), low, p2);
  } while (s > at);
  const s1 = quarterStep(first);
  const s2 = quarterStep(second);
  const x1 = ((join(h1, s1, P1) << 22) + join(l1, s1, P1)) % P1;
  const x2 = ((join(h2, s2, P2) << 22) + join(l2, s2, P2)) % P2;
  return (x1 << 32) | x2;
}

/** sum of products of residues, both primes: acc + a b. */
export function addResidueProduct(acc: u64, a: u64, b: u64): u64 {
  const r1 = ((acc >> 32) + (((a >> 32) * (b >> 32)) % P1)) % P1;
  const r2 = ((acc & 0xffffffff) + (((a & 0xffffffff) * (b & 0xffffffff)) % P2)) % P2;
  return (r1 << 32) | r2;
}
