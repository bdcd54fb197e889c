/**
 * The butterflies of the transform, forward and inverse, radix 2, 3, 4 and 5, and the
 * pointwise products. Complex numbers are stored in pairs: two real parts, then two
 * imaginary parts (32 bytes); T is a pair (SIMD) or one lane of it (plain).
 *
 * A block at p holds `radix` parts of `part` bytes; tw points at its twiddles
 * w, w^2, ..., each a pair. Forward: inputs times their twiddles, then the small Fourier
 * transform; inverse: the small transform's conjugate, then conjugate twiddles.
 */
import { add, mul, splat, sub } from "./lanes";

const HALF_SQRT3: f64 = 0.86602540378443864676;
const COS1: f64 = 0.3090169943749474241; // cos(2 pi / 5)
const COS2: f64 = -0.8090169943749474241; // cos(4 pi / 5)
const SIN1: f64 = 0.95105651629515357212;
const SIN2: f64 = 0.58778525229247312917;

function cmulRe<T>(ar: T, ai: T, wr: T, wi: T): T {
  return sub(mul(ar, wr), mul(ai, wi));
}
function cmulIm<T>(ar: T, ai: T, wr: T, wi: T): T {
  return add(mul(ar, wi), mul(ai, wr));
}
/** Stores (br + i bi) conj(w). */
function storeTurned<T>(p: usize, br: T, bi: T, wr: T, wi: T): void {
  store<T>(p, add(mul(br, wr), mul(bi, wi)));
  store<T>(p, sub(mul(bi, wr), mul(br, wi)), 16);
}

export function forward2<T>(p: usize, part: usize, tw: usize): void {
  const wr = load<T>(tw);
  const wi = load<T>(tw, 16);
  let q = p + part;
  const end = q;
  do {
    const ar = load<T>(q);
    const ai = load<T>(q, 16);
    const br = cmulRe(ar, ai, wr, wi);
    const bi = cmulIm(ar, ai, wr, wi);
    const cr = load<T>(p);
    const ci = load<T>(p, 16);
    store<T>(p, add(cr, br));
    store<T>(p, add(ci, bi), 16);
    store<T>(q, sub(cr, br));
    store<T>(q, sub(ci, bi), 16);
    p += 32;
    q += 32;
  } while (p < end);
}

export function inverse2<T>(p: usize, part: usize, tw: usize): void {
  const wr = load<T>(tw);
  const wi = load<T>(tw, 16);
  let q = p + part;
  const end = q;
  do {
    const ar = load<T>(p);
    const ai = load<T>(p, 16);
    const br = load<T>(q);
    const bi = load<T>(q, 16);
    store<T>(p, add(ar, br));
    store<T>(p, add(ai, bi), 16);
    storeTurned(q, sub(ar, br), sub(ai, bi), wr, wi);
    p += 32;
    q += 32;
  } while (p < end);
}

export function forward3<T>(p: usize, part: usize, tw: usize): void {
  const w1r = load<T>(tw);
  const w1i = load<T>(tw, 16);
  const w2r = load<T>(tw, 32);
  const w2i = load<T>(tw, 48);
  const half = splat<T>(0.5);
  const s3 = splat<T>(HALF_SQRT3);
  let p1 = p + part;
  let p2 = p1 + part;
  const end = p1;
  do {
    let ar = load<T>(p1);
    let ai = load<T>(p1, 16);
    const b1r = cmulRe(ar, ai, w1r, w1i);
    const b1i = cmulIm(ar, ai, w1r, w1i);
    ar = load<T>(p2);
    ai = load<T>(p2, 16);
    const b2r = cmulRe(ar, ai, w2r, w2i);
    const b2i = cmulIm(ar, ai, w2r, w2i);
    const cr = load<T>(p);
    const ci = load<T>(p, 16);
    const sr = add(b1r, b2r);
    const si = add(b1i, b2i);
    const dr = mul(s3, sub(b1r, b2r));
    const di = mul(s3, sub(b1i, b2i));
    const tr = sub(cr, mul(half, sr));
    const ti = sub(ci, mul(half, si));
    store<T>(p, add(cr, sr));
    store<T>(p, add(ci, si), 16);
    store<T>(p1, sub(tr, di));
    store<T>(p1, add(ti, dr), 16);
    store<T>(p2, add(tr, di));
    store<T>(p2, sub(ti, dr), 16);
    p += 32;
    p1 += 32;
    p2 += 32;
  } while (p < end);
}

export function inverse3<T>(p: usize, part: usize, tw: usize): void {
  const w1r = load<T>(tw);
  const w1i = load<T>(tw, 16);
  const w2r = load<T>(tw, 32);
  const w2i = load<T>(tw, 48);
  const half = splat<T>(0.5);
  const s3 = splat<T>(HALF_SQRT3);
  let p1 = p + part;
  let p2 = p1 + part;
  const end = p1;
  do {
    const c1r = load<T>(p1);
    const c1i = load<T>(p1, 16);
    const c2r = load<T>(p2);
    const c2i = load<T>(p2, 16);
    const c0r = load<T>(p);
    const c0i = load<T>(p, 16);
    const sr = add(c1r, c2r);
    const si = add(c1i, c2i);
    const dr = mul(s3, sub(c1r, c2r));
    const di = mul(s3, sub(c1i, c2i));
    const tr = sub(c0r, mul(half, sr));
    const ti = sub(c0i, mul(half, si));
    store<T>(p, add(c0r, sr));
    store<T>(p, add(c0i, si), 16);
    storeTurned(p1, add(tr, di), sub(ti, dr), w1r, w1i);
    storeTurned(p2, sub(tr, di), add(ti, dr), w2r, w2i);
    p += 32;
    p1 += 32;
    p2 += 32;
  } while (p < end);
}

/** Outputs in the order 0, 2, 1, 3. */
export function forward4<T>(p: usize, part: usize, tw: usize): void {
  const w1r = load<T>(tw);
  const w1i = load<T>(tw, 16);
  const w2r = load<T>(tw, 32);
  const w2i = load<T>(tw, 48);
  const w3r = load<T>(tw, 64);
  const w3i = load<T>(tw, 80);
  let p1 = p + part;
  let p2 = p1 + part;
  let p3 = p2 + part;
  const end = p1;
  do {
    let ar = load<T>(p1);
    let ai = load<T>(p1, 16);
    const b1r = cmulRe(ar, ai, w1r, w1i);
    const b1i = cmulIm(ar, ai, w1r, w1i);
    ar = load<T>(p3);
    ai = load<T>(p3, 16);
    const b3r = cmulRe(ar, ai, w3r, w3i);
    const b3i = cmulIm(ar, ai, w3r, w3i);
    const sr = add(b1r, b3r);
    const si = add(b1i, b3i);
    const dr = sub(b1r, b3r);
    const di = sub(b1i, b3i);
    ar = load<T>(p2);
    ai = load<T>(p2, 16);
    const b2r = cmulRe(ar, ai, w2r, w2i);
    const b2i = cmulIm(ar, ai, w2r, w2i);
    const cr = load<T>(p);
    const ci = load<T>(p, 16);
    const tr = add(cr, b2r);
    const ti = add(ci, b2i);
    const ur = sub(cr, b2r);
    const ui = sub(ci, b2i);
    store<T>(p, add(tr, sr));
    store<T>(p, add(ti, si), 16);
    store<T>(p1, sub(tr, sr));
    store<T>(p1, sub(ti, si), 16);
    store<T>(p2, sub(ur, di));
    store<T>(p2, add(ui, dr), 16);
    store<T>(p3, add(ur, di));
    store<T>(p3, sub(ui, dr), 16);
    p += 32;
    p1 += 32;
    p2 += 32;
    p3 += 32;
  } while (p < end);
}

export function inverse4<T>(p: usize, part: usize, tw: usize): void {
  const w1r = load<T>(tw);
  const w1i = load<T>(tw, 16);
  const w2r = load<T>(tw, 32);
  const w2i = load<T>(tw, 48);
  const w3r = load<T>(tw, 64);
  const w3i = load<T>(tw, 80);
  let p1 = p + part;
  let p2 = p1 + part;
  let p3 = p2 + part;
  const end = p1;
  do {
    const c0r = load<T>(p);
    const c0i = load<T>(p, 16);
    const c1r = load<T>(p1);
    const c1i = load<T>(p1, 16);
    const s0r = add(c0r, c1r);
    const s0i = add(c0i, c1i);
    const d0r = sub(c0r, c1r);
    const d0i = sub(c0i, c1i);
    const c2r = load<T>(p2);
    const c2i = load<T>(p2, 16);
    const c3r = load<T>(p3);
    const c3i = load<T>(p3, 16);
    const s1r = add(c2r, c3r);
    const s1i = add(c2i, c3i);
    const d1r = sub(c2r, c3r);
    const d1i = sub(c2i, c3i);
    store<T>(p, add(s0r, s1r));
    store<T>(p, add(s0i, s1i), 16);
    storeTurned(p2, sub(s0r, s1r), sub(s0i, s1i), w2r, w2i);
    storeTurned(p1, add(d0r, d1i), sub(d0i, d1r), w1r, w1i);
    storeTurned(p3, sub(d0r, d1i), add(d0i, d1r), w3r, w3i);
    p += 32;
    p1 += 32;
    p2 += 32;
    p3 += 32;
  } while (p < end);
}

export function forward5<T>(p: usize, part: usize, tw: usize): void {
  const c1 = splat<T>(COS1);
  const c2 = splat<T>(COS2);
  const s1 = splat<T>(SIN1);
  const s2 = splat<T>(SIN2);
  let p1 = p + part;
  let p2 = p1 + part;
  let p3 = p2 + part;
  let p4 = p3 + part;
  const end = p1;
  do {
    let ar = load<T>(p1);
    let ai = load<T>(p1, 16);
    let wr = load<T>(tw);
    let wi = load<T>(tw, 16);
    const b1r = cmulRe(ar, ai, wr, wi);
    const b1i = cmulIm(ar, ai, wr, wi);
    ar = load<T>(p2);
    ai = load<T>(p2, 16);
    wr = load<T>(tw, 32);
    wi = load<T>(tw, 48);
    const b2r = cmulRe(ar, ai, wr, wi);
    const b2i = cmulIm(ar, ai, wr, wi);
    ar = load<T>(p3);
    ai = load<T>(p3, 16);
    wr = load<T>(tw, 64);
    wi = load<T>(tw, 80);
    const b3r = cmulRe(ar, ai, wr, wi);
    const b3i = cmulIm(ar, ai, wr, wi);
    ar = load<T>(p4);
    ai = load<T>(p4, 16);
    wr = load<T>(tw, 96);
    wi = load<T>(tw, 112);
    const b4r = cmulRe(ar, ai, wr, wi);
    const b4i = cmulIm(ar, ai, wr, wi);
    const cr = load<T>(p);
    const ci = load<T>(p, 16);
    const t1r = add(b1r, b4r);
    const t1i = add(b1i, b4i);
    const t2r = add(b2r, b3r);
    const t2i = add(b2i, b3i);
    const d1r = sub(b1r, b4r);
    const d1i = sub(b1i, b4i);
    const d2r = sub(b2r, b3r);
    const d2i = sub(b2i, b3i);
    store<T>(p, add(cr, add(t1r, t2r)));
    store<T>(p, add(ci, add(t1i, t2i)), 16);
    let er = add(cr, add(mul(c1, t1r), mul(c2, t2r)));
    let ei = add(ci, add(mul(c1, t1i), mul(c2, t2i)));
    let fr = add(mul(s1, d1r), mul(s2, d2r));
    let fi = add(mul(s1, d1i), mul(s2, d2i));
    store<T>(p1, sub(er, fi));
    store<T>(p1, add(ei, fr), 16);
    store<T>(p4, add(er, fi));
    store<T>(p4, sub(ei, fr), 16);
    er = add(cr, add(mul(c2, t1r), mul(c1, t2r)));
    ei = add(ci, add(mul(c2, t1i), mul(c1, t2i)));
    fr = sub(mul(s2, d1r), mul(s1, d2r));
    fi = sub(mul(s2, d1i), mul(s1, d2i));
    store<T>(p2, sub(er, fi));
    store<T>(p2, add(ei, fr), 16);
    store<T>(p3, add(er, fi));
    store<T>(p3, sub(ei, fr), 16);
    p += 32;
    p1 += 32;
    p2 += 32;
    p3 += 32;
    p4 += 32;
  } while (p < end);
}

export function inverse5<T>(p: usize, part: usize, tw: usize): void {
  const c1 = splat<T>(COS1);
  const c2 = splat<T>(COS2);
  const s1 = splat<T>(SIN1);
  const s2 = splat<T>(SIN2);
  let p1 = p + part;
  let p2 = p1 + part;
  let p3 = p2 + part;
  let p4 = p3 + part;
  const end = p1;
  do {
    const b1r = load<T>(p1);
    const b1i = load<T>(p1, 16);
    const b4r = load<T>(p4);
    const b4i = load<T>(p4, 16);
    const t1r = add(b1r, b4r);
    const t1i = add(b1i, b4i);
    const d1r = sub(b1r, b4r);
    const d1i = sub(b1i, b4i);
    const b2r = load<T>(p2);
    const b2i = load<T>(p2, 16);
    const b3r = load<T>(p3);
    const b3i = load<T>(p3, 16);
    const t2r = add(b2r, b3r);
    const t2i = add(b2i, b3i);
    const d2r = sub(b2r, b3r);
    const d2i = sub(b2i, b3i);
    const cr = load<T>(p);
    const ci = load<T>(p, 16);
    store<T>(p, add(cr, add(t1r, t2r)));
    store<T>(p, add(ci, add(t1i, t2i)), 16);
    let er = add(cr, add(mul(c1, t1r), mul(c2, t2r)));
    let ei = add(ci, add(mul(c1, t1i), mul(c2, t2i)));
    let fr = add(mul(s1, d1r), mul(s2, d2r));
    let fi = add(mul(s1, d1i), mul(s2, d2i));
    storeTurned(p1, add(er, fi), sub(ei, fr), load<T>(tw), load<T>(tw, 16));
    storeTurned(p4, sub(er, fi), add(ei, fr), load<T>(tw, 96), load<T>(tw, 112));
    er = add(cr, add(mul(c2, t1r), mul(c1, t2r)));
    ei = add(ci, add(mul(c2, t1i), mul(c1, t2i)));
    fr = sub(mul(s2, d1r), mul(s1, d2r));
    fi = sub(mul(s2, d1i), mul(s1, d2i));
    storeTurned(p2, add(er, fi), sub(ei, fr), load<T>(tw, 32), load<T>(tw, 48));
    storeTurned(p3, sub(er, fi), add(ei, fr), load<T>(tw, 64), load<T>(tw, 80));
    p += 32;
    p1 += 32;
    p2 += 32;
    p3 += 32;
    p4 += 32;
  } while (p < end);
}

/** c = a b over `bytes` bytes of pairs. */
export function pointProduct<T>(c: usize, a: usize, b: usize, bytes: usize): void {
  const end = c + bytes;
  do {
    const ar = load<T>(a);
    const ai = load<T>(a, 16);
    const br = load<T>(b);
    const bi = load<T>(b, 16);
    store<T>(c, cmulRe(ar, ai, br, bi));
    store<T>(c, cmulIm(ar, ai, br, bi), 16);
    a += 32;
    b += 32;
    c += 32;
  } while (c < end);
}

/** c += a b. */
export function pointAddProduct<T>(c: usize, a: usize, b: usize, bytes: usize): void {
  const end = c + bytes;
  do {
    const ar = load<T>(a);
    const ai = load<T>(a, 16);
    const br = load<T>(b);
    const bi = load<T>(b, 16);
    store<T>(c, add(load<T>(c), cmulRe(ar, ai, br, bi)));
    store<T>(c, add(load<T>(c, 16), cmulIm(ar, ai, br, bi)), 16);
    a += 32;
    b += 32;
    c += 32;
  } while (c < end);
}

/** c = a b + d e: the entry of a product of 2 x 2 matrices in one pass over memory. */
export function pointTwoProducts<T>(c: usize, a: usize, b: usize, d: usize, e: usize, bytes: usize): void {
  const end = c + bytes;
  do {
    const ar = load<T>(a);
    const ai = load<T>(a, 16);
    const br = load<T>(b);
    const bi = load<T>(b, 16);
    const dr = load<T>(d);
    const di = load<T>(d, 16);
    const er = load<T>(e);
    const ei = load<T>(e, 16);
    store<T>(c, add(cmulRe(ar, ai, br, bi), cmulRe(dr, di, er, ei)));
    store<T>(c, add(cmulIm(ar, ai, br, bi), cmulIm(dr, di, er, ei)), 16);
    a += 32;
    b += 32;
    c += 32;
    d += 32;
    e += 32;
  } while (c < end);
}
