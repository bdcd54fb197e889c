/**
 * Values of observables along a path, and their sums.
 *
 * Positions are unsigned 64-bit integers X in units of 2^-64, row-major, d a row. A phase
 * k.x mod 1 is then k.X mod 2^64: multiplication and addition wrap exactly, so the only error
 * is that of the position, at most |k|_1 2^-63 turns where each X 2^-64 is within 2^-63 of its coordinate.
 *
 * cos and sin of 2 pi p: the nearest quarter turn is split off exactly, the rest r, |r| <= 1/8
 * turn, goes through the polynomials of fdlibm's kernels (k_sin.c, k_cos.c of FreeBSD's msun,
 * coefficients from there; error of the polynomials below 2^-57 on |t| <= pi/4). Converting r,
 * scaling it to radians and evaluating cost some units of 2^-53: the error stays below 2^-51.
 *
 * Both builds do the same operations on each value in the same order.
 */
const QUARTER_HALF: u64 = 1 << 61;
/** 2 pi 2^-64. */
const RADIANS: f64 = 3.4061215800865545e-19;

const S1: f64 = -0.16666666666666632;
const S2: f64 = 0.00833333333332249;
const S3: f64 = -0.0001984126982985795;
const S4: f64 = 2.7557313707070068e-6;
const S5: f64 = -2.5050760253406863e-8;
const S6: f64 = 1.58969099521155e-10;
const C1: f64 = 0.0416666666666666;
const C2: f64 = -0.001388888888887411;
const C3: f64 = 2.480158728947673e-5;
const C4: f64 = -2.7557314351390663e-7;
const C5: f64 = 2.087572321298175e-9;
const C6: f64 = -1.1359647557788195e-11;

/** Writes k.X mod 2^64 for each row at `out`. */
function phases(positions: usize, rows: u32, dimension: u32, frequency: usize, out: usize): void {
  const stride = (<usize>dimension) << 3;
  const stop = out + ((<usize>rows) << 3);
  if (dimension == 2) {
    const k0 = load<u64>(frequency);
    const k1 = load<u64>(frequency, 8);
    for (; out < stop; out += 8) {
      store<u64>(out, load<u64>(positions) * k0 + load<u64>(positions, 8) * k1);
      positions += 16;
    }
    return;
  }
  for (; out < stop; out += 8) {
    let p: u64 = 0;
    for (let j: usize = 0; j < stride; j += 8) p += load<u64>(positions + j) * load<u64>(frequency + j);
    store<u64>(out, p);
    positions += stride;
  }
}

/** The rest of a phase beside its nearest quarter turn, in radians: [-pi/4, pi/4]. */
function restOf(p: u64): f64 {
  const quarter = (p + QUARTER_HALF) >> 62;
  return <f64>(<i64>(p - (quarter << 62))) * RADIANS;
}

function pairPlain(p: u64, cosOut: usize, sinOut: usize): void {
  const t = restOf(p);
  const z = t * t;
  const sr = S2 + z * (S3 + z * (S4 + z * (S5 + z * S6)));
  const s = t + z * t * (S1 + z * sr);
  const cr = z * (C1 + z * (C2 + z * (C3 + z * (C4 + z * (C5 + z * C6)))));
  const h = z * 0.5;
  const w = 1.0 - h;
  const c = w + (1.0 - w - h + z * cr);
  const q = (p + QUARTER_HALF) >> 62;
  const odd = (q & 1) != 0;
  store<u64>(cosOut, reinterpret<u64>(odd ? s : c) ^ (((q + 1) & 2) << 62));
  store<u64>(sinOut, reinterpret<u64>(odd ? c : s) ^ ((q & 2) << 62));
}

/** Two phases at once; the conversion of a rest r = h 2^32 + l rounds once, as the scalar one does. */
function pairWide(p: v128, cosOut: usize, sinOut: usize): void {
  const q = i64x2.shr_u(i64x2.add(p, i64x2.splat(QUARTER_HALF)), 62);
  const rest = i64x2.sub(p, i64x2.shl(q, 62));
  const high = f64x2.convert_low_i32x4_s(v128.shuffle<i32>(rest, rest, 1, 3, 1, 3));
  const low = f64x2.convert_low_i32x4_u(v128.shuffle<i32>(rest, rest, 0, 2, 0, 2));
  const t = f64x2.mul(f64x2.add(f64x2.mul(high, f64x2.splat(4294967296.0)), low), f64x2.splat(RADIANS));
  const z = f64x2.mul(t, t);
  let r = f64x2.add(f64x2.splat(S5), f64x2.mul(z, f64x2.splat(S6)));
  r = f64x2.add(f64x2.splat(S4), f64x2.mul(z, r));
  r = f64x2.add(f64x2.splat(S3), f64x2.mul(z, r));
  r = f64x2.add(f64x2.splat(S2), f64x2.mul(z, r));
  r = f64x2.add(f64x2.splat(S1), f64x2.mul(z, r));
  const s = f64x2.add(t, f64x2.mul(f64x2.mul(z, t), r));
  r = f64x2.add(f64x2.splat(C5), f64x2.mul(z, f64x2.splat(C6)));
  r = f64x2.add(f64x2.splat(C4), f64x2.mul(z, r));
  r = f64x2.add(f64x2.splat(C3), f64x2.mul(z, r));
  r = f64x2.add(f64x2.splat(C2), f64x2.mul(z, r));
  r = f64x2.add(f64x2.splat(C1), f64x2.mul(z, r));
  r = f64x2.mul(z, r);
  const h = f64x2.mul(z, f64x2.splat(0.5));
  const one = f64x2.splat(1.0);
  const w = f64x2.sub(one, h);
  const c = f64x2.add(w, f64x2.add(f64x2.sub(f64x2.sub(one, w), h), f64x2.mul(z, r)));
  const odd = i64x2.neg(v128.and(q, i64x2.splat(1)));
  const two = i64x2.splat(2);
  const cosSign = i64x2.shl(v128.and(i64x2.add(q, i64x2.splat(1)), two), 62);
  const sinSign = i64x2.shl(v128.and(q, two), 62);
  v128.store(cosOut, v128.xor(v128.bitselect(s, c, odd), cosSign));
  v128.store(sinOut, v128.xor(v128.bitselect(c, s, odd), sinSign));
}

/** cos and sin of 2 pi k.x for `rows` positions; `frequency`: d 64-bit components of k, mod 2^64. */
export function observePhases(
  positions: usize,
  rows: u32,
  dimension: u32,
  frequency: usize,
  cosOut: usize,
  sinOut: usize,
): void {
  // The phases wait where the cosines will be.
  phases(positions, rows, dimension, frequency, cosOut);
  const stop = cosOut + ((<usize>rows) << 3);
  if (ASC_FEATURE_SIMD) {
    for (; cosOut + 16 <= stop; cosOut += 16) {
      pairWide(v128.load(cosOut), cosOut, sinOut);
      sinOut += 16;
    }
  }
  for (; cosOut < stop; cosOut += 8) {
    pairPlain(load<u64>(cosOut), cosOut, sinOut);
    sinOut += 8;
  }
}

/** values[i] += c cos[i] + s sin[i]. */
export function observeAdd(values: usize, rows: u32, cosAt: usize, sinAt: usize, c: f64, s: f64): void {
  let i: usize = 0;
  const bytes = (<usize>rows) << 3;
  if (ASC_FEATURE_SIMD) {
    const cc = f64x2.splat(c);
    const ss = f64x2.splat(s);
    for (; i + 16 <= bytes; i += 16) {
      const a = f64x2.add(f64x2.mul(cc, v128.load(cosAt + i)), f64x2.mul(ss, v128.load(sinAt + i)));
      v128.store(values + i, f64x2.add(v128.load(values + i), a));
    }
  }
  for (; i < bytes; i += 8) {
    const a = c * load<f64>(cosAt + i) + s * load<f64>(sinAt + i);
    store<f64>(values + i, load<f64>(values + i) + a);
  }
}

/**
 * values[i] = 1 where the position lies in the box, else 0. `sides`: triples of 64-bit words
 * (coordinate, low, span): low <= X <= low + span, decided without wrapping by X - low <= span.
 */
export function observeBox(values: usize, positions: usize, rows: u32, dimension: u32, sides: usize, count: u32): void {
  const stride = (<usize>dimension) << 3;
  const end = sides + <usize>count * 24;
  for (let i: u32 = 0; i < rows; i++) {
    let inside = true;
    for (let side = sides; side < end; side += 24) {
      const x = load<u64>(positions + (load<usize>(side) << 3));
      inside = inside && x - load<u64>(side, 8) <= load<u64>(side, 16);
    }
    store<f64>(values, inside ? 1.0 : 0.0);
    values += 8;
    positions += stride;
  }
}

/**
 * The sum of `count` values, two interleaved chains (even and odd places), each carrying its
 * rounding errors along (Ogita, Rump, Oishi 2005, Sum2): error at most 2^-53 |sum| + (count
 * 2^-53)^2 sum |value|, up to a factor near 1.
 */
export function observeSum(values: usize, count: u32): f64 {
  let s0: f64 = 0;
  let s1: f64 = 0;
  let e0: f64 = 0;
  let e1: f64 = 0;
  const pairs = count >> 1;
  if (ASC_FEATURE_SIMD) {
    let s = f64x2.splat(0);
    let e = f64x2.splat(0);
    for (let i: u32 = 0; i < pairs; i++) {
      const v = v128.load(values);
      const t = f64x2.add(s, v);
      const z = f64x2.sub(t, s);
      e = f64x2.add(e, f64x2.add(f64x2.sub(s, f64x2.sub(t, z)), f64x2.sub(v, z)));
      s = t;
      values += 16;
    }
    s0 = f64x2.extract_lane(s, 0);
    s1 = f64x2.extract_lane(s, 1);
    e0 = f64x2.extract_lane(e, 0);
    e1 = f64x2.extract_lane(e, 1);
  } else {
    for (let i: u32 = 0; i < pairs; i++) {
      const v0 = load<f64>(values);
      const v1 = load<f64>(values, 8);
      const t0 = s0 + v0;
      const z0 = t0 - s0;
      e0 += s0 - (t0 - z0) + (v0 - z0);
      s0 = t0;
      const t1 = s1 + v1;
      const z1 = t1 - s1;
      e1 += s1 - (t1 - z1) + (v1 - z1);
      s1 = t1;
      values += 16;
    }
  }
  let t = s0 + s1;
  let z = t - s0;
  let e = e0 + e1 + (s0 - (t - z) + (s1 - z));
  if (count & 1) {
    const v = load<f64>(values);
    const last = t;
    t = last + v;
    z = t - last;
    e += last - (t - z) + (v - z);
  }
  return t + e;
}
