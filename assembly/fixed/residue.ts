/**
 * The check of a product: digit polynomials evaluated modulo two primes of 31 bits whose
 * product passes 2^61, at a point rho with rho^{2M} = -1, so that the check holds for
 * products modulo x^{2M} + 1 too (where the integer's high half is never formed, and a
 * residue of the integer itself would say nothing). A wrong coefficient escapes where it
 * changes the polynomial by a multiple of both minimal factors: about once in 2^61.
 *
 * The four quarters of the digits are the four lanes; Horner's rule runs over a quarter,
 * with Montgomery's multiplication (R = 2^32).
 */
import { planLength } from "./plan";

/** 15 2^27 + 1 and 375 2^22 + 1: both leave roots of unity of order 4 M for M up to 5 2^20. */
const P1: u32 = 2013265921;
const P2: u32 = 1572864001;
const G1: u64 = 31;
const G2: u64 = 13;
const MAGIC: f64 = 6755399441055744.0;
const SPLIT: f64 = 4194304.0; // 2^22
const UNSPLIT: f64 = 2.384185791015625e-7; // 2^-22

/** The longest plan whose products can be checked. */
export function longestChecked(): u32 {
  return 5 << 20;
}

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

/** A root of order 4 M. */
function rootOf(m: u32, p: u64, g: u64): u64 {
  return power(g, (p - 1) / (4 * <u64>m), p);
}

function mont(a: u32, w: u32, wp: u32, p: u32): u32 {
  const t = <i64>((<u64>a * w) >> 32) - <i64>((<u64>(a * wp) * p) >> 32);
  return <u32>(t < 0 ? t + p : t);
}

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

/** sum over quarters q of lane q times rho^{q H}, H digits a quarter. */
function joinQuarters(e0: u64, e1: u64, e2: u64, e3: u64, m: u32, p: u64, g: u64): u64 {
  const step = power(rootOf(m, p, g), m >> 1, p);
  return (((((e3 * step + e2) % p) * step + e1) % p) * step + e0) % p;
}

/** The two residues of the digits in a transform that has not been evaluated, as one word. */
export function digitResidues(plan: usize, at: usize): u64 {
  return evaluate(plan, at, 0.0);
}

/** The two residues of the rounded coefficients (stored times M) of a transform that has come back. */
export function coefficientResidues(plan: usize, at: usize): u64 {
  return evaluate(plan, at, 1.0 / <f64>planLength(plan));
}

function evaluate(plan: usize, at: usize, scale: f64): u64 {
  const m = planLength(plan);
  const rho1 = rootOf(m, P1, G1);
  const rho2 = rootOf(m, P2, G2);
  const w1 = <u32>((rho1 << 32) % P1);
  const w2 = <u32>((rho2 << 32) % P2);
  if (ASC_FEATURE_SIMD) {
    return scale == 0.0 ? digitsLanes(at, m, w1, w2) : coefficientsLanes(at, m, w1, w2, scale);
  }
  let r1: u64 = 0;
  let r2: u64 = 0;
  const step1 = power(rho1, m >> 1, P1);
  const step2 = power(rho2, m >> 1, P2);
  for (let q = 3; q >= 0; q--) {
    const e = quarterPlain(at + ((<usize>q) << 3), m, w1, w2, scale);
    r1 = (r1 * step1 + (e >> 32)) % P1;
    r2 = (r2 * step2 + (e & 0xffffffff)) % P2;
  }
  return (r1 << 32) | r2;
}

/** One quarter's polynomial at rho, both primes. */
function quarterPlain(at: usize, m: u32, w1: u32, w2: u32, scale: f64): u64 {
  const w1p = w1 * inverse32(P1);
  const w2p = w2 * inverse32(P2);
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

function join(a: v128, m: u32, p: u64, g: u64): u64 {
  return joinQuarters(
    <u32>i32x4.extract_lane(a, 0),
    <u32>i32x4.extract_lane(a, 1),
    <u32>i32x4.extract_lane(a, 2),
    <u32>i32x4.extract_lane(a, 3),
    m,
    p,
    g,
  );
}

function digitsLanes(at: usize, m: u32, w1: u32, w2: u32): u64 {
  // Even and odd positions apart, so that four chains of multiplications run side by side.
  const s1 = <u32>(<u64>mont(w1, w1, w1 * inverse32(P1), P1) % P1);
  const s2 = <u32>(<u64>mont(w2, w2, w2 * inverse32(P2), P2) % P2);
  const p1 = i32x4.splat(P1);
  const p2 = i32x4.splat(P2);
  const v1 = i32x4.splat(s1);
  const v2 = i32x4.splat(s2);
  const v1p = i32x4.splat(s1 * inverse32(P1));
  const v2p = i32x4.splat(s2 * inverse32(P2));
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
  const r1 = i32x4.splat(w1);
  const r2 = i32x4.splat(w2);
  o1 = montLanes(o1, r1, i32x4.splat(w1 * inverse32(P1)), p1);
  o2 = montLanes(o2, r2, i32x4.splat(w2 * inverse32(P2)), p2);
  const x1 = (join(e1, m, P1, G1) + join(o1, m, P1, G1)) % P1;
  const x2 = (join(e2, m, P2, G2) + join(o2, m, P2, G2)) % P2;
  return (x1 << 32) | x2;
}

function coefficientsLanes(at: usize, m: u32, w1: u32, w2: u32, scale: f64): u64 {
  const p1 = i32x4.splat(P1);
  const p2 = i32x4.splat(P2);
  const v1 = i32x4.splat(w1);
  const v2 = i32x4.splat(w2);
  const v1p = i32x4.splat(w1 * inverse32(P1));
  const v2p = i32x4.splat(w2 * inverse32(P2));
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
  const x1 = ((join(h1, m, P1, G1) << 22) + join(l1, m, P1, G1)) % P1;
  const x2 = ((join(h2, m, P2, G2) << 22) + join(l2, m, P2, G2)) % P2;
  return (x1 << 32) | x2;
}

/** sum of products of residues, both primes: acc + a b. */
export function addResidueProduct(acc: u64, a: u64, b: u64): u64 {
  const r1 = ((acc >> 32) + (((a >> 32) * (b >> 32)) % P1)) % P1;
  const r2 = ((acc & 0xffffffff) + (((a & 0xffffffff) * (b & 0xffffffff)) % P2)) % P2;
  return (r1 << 32) | r2;
}
