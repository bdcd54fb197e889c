/**
 * The renormalised cocycle: growth of vectors (dimension 2) and of orthonormal frames
 * (dimension 3 to 8) under products of drawn moves.
 *
 * Moves are applied a word at a time: the border tabulates the exact products of all words
 * of a fixed length, so that one matrix serves several moves and a logarithm is taken at
 * checkpoints only. Matrices in the table: single moves first, then words; the word that
 * does i_1 first, then i_2, ... sits at i_1 + m i_2 + m^2 i_3 + ...
 *
 * Dimension 2. A vector (x, y) and a power of two e stand for 2^e (x, y). Rescaling is by
 * powers of two, hence exact, so the only roundings are those of the products. The second
 * exponent follows from the determinant.
 *
 * Dimension 3 and more. A Q = Q' R by modified Gram-Schmidt (Benettin, Galgani, Giorgilli,
 * Strelcyn 1980): the products of the diagonals of R, as mantissa and exponent, give all exponents.
 *
 * Lanes run over the two components of the vector, or over the columns of the frame; each
 * lane does what the plain build does in turn, so both builds give the same bits.
 */
import { drawMoves } from "../random/choices";

/** Moves drawn at a time; a multiple of every word length. */
const CHUNK: u32 = 1024;
/** Replicates of dimension 2 that advance side by side, to keep the processor's pipelines full. */
const TOGETHER: u32 = 4;

const draws = memory.data(8192, 16); // TOGETHER * CHUNK indices of 16 bits

const FRACTION: u64 = 0x000fffffffffffff;
const ONE: u64 = 0x3ff0000000000000;

/** The binary exponent of a normal number: 2^e <= |x| < 2^(e+1). */
function exponentOf(x: f64): i64 {
  return <i64>((reinterpret<u64>(x) >> 52) & 0x7ff) - 1023;
}

/** 2^e for -1022 <= e <= 1023. */
function power(e: i64): f64 {
  return reinterpret<f64>((<u64>(e + 1023)) << 52);
}

/** Turns drawn moves into table indices of words, in place: 32 bits each would not be needed, words are few. */
function combine(at: usize, count: u32, length: u32, moves: u32): void {
  const words = count / length;
  for (let w: u32 = 0; w < words; w++) {
    let index: u32 = 0;
    for (let j = length; j > 0; j--) index = index * moves + load<u16>(at + ((<usize>(w * length + j - 1)) << 1));
    store<u16>(at + ((<usize>w) << 1), <u16>(moves + index));
  }
}

/** Where a matrix of dimension 2 begins: 32 bytes each, columns one after the other. */
function matrixAt(table: usize, draw: usize): usize {
  return table + ((<usize>load<u16>(draw)) << 5);
}

/** (x, y) at `v` becomes M (x, y). */
function applyTwo(v: usize, m: usize): void {
  if (ASC_FEATURE_SIMD) {
    const p = v128.load(v);
    const x = v128.shuffle<f64>(p, p, 0, 0);
    const y = v128.shuffle<f64>(p, p, 1, 1);
    v128.store(v, f64x2.add(f64x2.mul(v128.load(m), x), f64x2.mul(v128.load(m, 16), y)));
  } else {
    const x = load<f64>(v);
    const y = load<f64>(v, 8);
    store<f64>(v, load<f64>(m) * x + load<f64>(m, 16) * y);
    store<f64>(v, load<f64>(m, 8) * x + load<f64>(m, 24) * y, 8);
  }
}

/** Four vectors through `count` matrices each, their draws CHUNK indices apart. */
function applyFour(v: usize, table: usize, at: usize, count: u32): void {
  const stride: usize = (<usize>CHUNK) << 1;
  if (ASC_FEATURE_SIMD) {
    let p0 = v128.load(v);
    let p1 = v128.load(v, 32);
    let p2 = v128.load(v, 64);
    let p3 = v128.load(v, 96);
    for (let w: u32 = 0; w < count; w++) {
      const m0 = matrixAt(table, at);
      const m1 = matrixAt(table, at + stride);
      const m2 = matrixAt(table, at + 2 * stride);
      const m3 = matrixAt(table, at + 3 * stride);
      p0 = f64x2.add(
        f64x2.mul(v128.load(m0), v128.shuffle<f64>(p0, p0, 0, 0)),
        f64x2.mul(v128.load(m0, 16), v128.shuffle<f64>(p0, p0, 1, 1)),
      );
      p1 = f64x2.add(
        f64x2.mul(v128.load(m1), v128.shuffle<f64>(p1, p1, 0, 0)),
        f64x2.mul(v128.load(m1, 16), v128.shuffle<f64>(p1, p1, 1, 1)),
      );
      p2 = f64x2.add(
        f64x2.mul(v128.load(m2), v128.shuffle<f64>(p2, p2, 0, 0)),
        f64x2.mul(v128.load(m2, 16), v128.shuffle<f64>(p2, p2, 1, 1)),
      );
      p3 = f64x2.add(
        f64x2.mul(v128.load(m3), v128.shuffle<f64>(p3, p3, 0, 0)),
        f64x2.mul(v128.load(m3, 16), v128.shuffle<f64>(p3, p3, 1, 1)),
      );
      at += 2;
    }
    v128.store(v, p0);
    v128.store(v, p1, 32);
    v128.store(v, p2, 64);
    v128.store(v, p3, 96);
  } else {
    for (let w: u32 = 0; w < count; w++) {
      for (let r: usize = 0; r < 4; r++) applyTwo(v + (r << 5), matrixAt(table, at + r * stride));
      at += 2;
    }
  }
}

/** Brings each vector's larger component into [1, 2), exactly. */
function rescaleFour(v: usize): void {
  for (let r: usize = 0; r < 4; r++) {
    const at = v + (r << 5);
    const x = load<f64>(at);
    const y = load<f64>(at, 8);
    const e = exponentOf(max(abs(x), abs(y)));
    const scale = power(-e);
    store<f64>(at, x * scale);
    store<f64>(at, y * scale, 8);
    store<i64>(at, load<i64>(at, 16) + e, 16);
  }
}

/**
 * Advances vectors in dimension 2 by `count` moves, first, ..., first + count - 1.
 * `vectors`: `replicates` (a multiple of 4) times (x, y: f64, e: i64, 8 bytes unused).
 * `length`: moves in a word, a power of two up to 8; `every`: words after which vectors are rescaled.
 */
export function advanceVectors(
  vectors: usize,
  replicates: u32,
  firstReplicate: u32,
  seed: u64,
  cumulative: usize,
  moves: u32,
  table: usize,
  length: u32,
  every: u32,
  first: u64,
  count: u32,
): void {
  for (let r: u32 = 0; r < replicates; r += TOGETHER) {
    const v = vectors + ((<usize>r) << 5);
    for (let done: u32 = 0; done < count; done += CHUNK) {
      const c = min(CHUNK, count - done);
      const long = c - (c % length);
      for (let j: u32 = 0; j < TOGETHER; j++) {
        const at = draws + ((<usize>(j * CHUNK)) << 1);
        drawMoves(at, c, first + done, firstReplicate + r + j, seed, cumulative, moves);
        if (length > 1) combine(at, long, length, moves);
      }
      const words = long / length;
      for (let w: u32 = 0; w < words; w += every) {
        applyFour(v, table, draws + ((<usize>w) << 1), min(every, words - w));
        rescaleFour(v);
      }
      // What does not fill a word: single moves, few of them.
      for (let n = long; n < c; n += every) {
        applyFour(v, table, draws + ((<usize>n) << 1), min(every, c - n));
        rescaleFour(v);
      }
    }
  }
}

/** Writes log |v| of each vector at `out`, one f64 a replicate. */
export function vectorLogs(out: usize, vectors: usize, replicates: u32): void {
  for (let r: u32 = 0; r < replicates; r++) {
    const at = vectors + ((<usize>r) << 5);
    const x = load<f64>(at);
    const y = load<f64>(at, 8);
    const log = NativeMath.log(Math.sqrt(x * x + y * y)) + <f64>load<i64>(at, 16) * Math.LN2;
    store<f64>(out + ((<usize>r) << 3), log);
  }
}

/** target = M source for frames of d rows of `bytes` bytes (an even number of columns). */
function applyFrame(target: usize, m: usize, source: usize, d: usize, bytes: usize): void {
  for (let i: usize = 0; i < d; i++) {
    const row = m + ((i * d) << 3);
    for (let k: usize = 0; k < bytes; k += 16) {
      if (ASC_FEATURE_SIMD) {
        let s = f64x2.mul(v128.load64_splat(row), v128.load(source + k));
        for (let j: usize = 1; j < d; j++) {
          s = f64x2.add(s, f64x2.mul(v128.load64_splat(row + (j << 3)), v128.load(source + j * bytes + k)));
        }
        v128.store(target + i * bytes + k, s);
      } else {
        let s = load<f64>(row) * load<f64>(source + k);
        let t = load<f64>(row) * load<f64>(source + k, 8);
        for (let j: usize = 1; j < d; j++) {
          const a = load<f64>(row + (j << 3));
          s += a * load<f64>(source + j * bytes + k);
          t += a * load<f64>(source + j * bytes + k, 8);
        }
        store<f64>(target + i * bytes + k, s);
        store<f64>(target + i * bytes + k, t, 8);
      }
    }
  }
}

/** Orthonormalises the d columns at `q` and multiplies the diagonal of R into (mantissa, exponent) at `growth`. */
function gramSchmidt(q: usize, d: usize, bytes: usize, growth: usize): void {
  for (let j: usize = 0; j < d; j++) {
    const column = q + (j << 3);
    for (let i: usize = 0; i < j; i++) {
      const other = q + (i << 3);
      let dot: f64 = 0;
      for (let k: usize = 0; k < d; k++) dot += load<f64>(column + k * bytes) * load<f64>(other + k * bytes);
      for (let k: usize = 0; k < d; k++) {
        const at = column + k * bytes;
        store<f64>(at, load<f64>(at) - dot * load<f64>(other + k * bytes));
      }
    }
    let square: f64 = 0;
    for (let k: usize = 0; k < d; k++) square += load<f64>(column + k * bytes) * load<f64>(column + k * bytes);
    const r = Math.sqrt(square);
    const inverse = 1 / r;
    for (let k: usize = 0; k < d; k++) store<f64>(column + k * bytes, load<f64>(column + k * bytes) * inverse);
    const at = growth + (j << 4);
    const p = load<f64>(at) * r;
    store<f64>(at, reinterpret<f64>((reinterpret<u64>(p) & FRACTION) | ONE));
    store<i64>(at, load<i64>(at, 8) + exponentOf(p), 8);
  }
}

/**
 * Advances frames in dimension d by `count` moves and leaves them orthonormal.
 * A replicate's state is 16 d bytes (mantissa: f64, exponent: i64 for each exponent), then
 * two frames of d rows, each row of d columns padded to an even number; the first is current.
 * `table` holds matrices row after row. `every`: words between orthonormalisations.
 */
export function advanceFrames(
  states: usize,
  replicates: u32,
  firstReplicate: u32,
  seed: u64,
  cumulative: usize,
  moves: u32,
  table: usize,
  length: u32,
  every: u32,
  first: u64,
  count: u32,
  dimension: u32,
): void {
  const d = <usize>dimension;
  const bytes: usize = ((d + 1) & ~1) << 3;
  const size: usize = (d << 4) + 2 * d * bytes;
  const matrix = (d * d) << 3;
  for (let r: u32 = 0; r < replicates; r++) {
    const state = states + <usize>r * size;
    const home = state + (d << 4);
    let q = home;
    let t = home + d * bytes;
    let since: u32 = 0;
    for (let done: u32 = 0; done < count; done += CHUNK) {
      const c = min(CHUNK, count - done);
      const long = c - (c % length);
      drawMoves(draws, c, first + done, firstReplicate + r, seed, cumulative, moves);
      if (length > 1) combine(draws, long, length, moves);
      const words = long / length;
      const singles = c - long;
      for (let w: u32 = 0; w < words + singles; w++) {
        const at = w < words ? w : long + w - words;
        applyFrame(t, table + matrix * <usize>load<u16>(draws + ((<usize>at) << 1)), q, d, bytes);
        const swap = q;
        q = t;
        t = swap;
        if (++since >= every) {
          gramSchmidt(q, d, bytes, state);
          since = 0;
        }
      }
    }
    if (since > 0) gramSchmidt(q, d, bytes, state);
    if (q != home) memory.copy(home, q, d * bytes);
  }
}

/** Writes the d accumulated logarithms of each replicate at `out`. */
export function frameLogs(out: usize, states: usize, replicates: u32, dimension: u32): void {
  const d = <usize>dimension;
  const size: usize = (d << 4) + 2 * d * (((d + 1) & ~1) << 3);
  for (let r: usize = 0; r < <usize>replicates; r++) {
    for (let j: usize = 0; j < d; j++) {
      const at = states + r * size + (j << 4);
      const log = NativeMath.log(load<f64>(at)) + <f64>load<i64>(at, 8) * Math.LN2;
      store<f64>(out + ((r * d + j) << 3), log);
    }
  }
}
