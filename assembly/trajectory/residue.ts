/**
 * Walks on points with a common denominator q < 2^63, exactly, in machine words: numerators
 * in [0, q) move by x -> A x + b mod q. No division in the loop. Let N be the largest row
 * sum of |A| (entries are centred residues), plus one for b.
 *
 * Narrow: N <= 2^18 and N q < 2^62. Sums S are made non-negative by a multiple of q, and
 * S < N q. With D = q / 2^s of p = 22 bits, h = floor(S / 2^s), e = p + 3 + bits of N and
 * m = floor(2^e / D), k = floor(h m / 2^e) is at most S / q, and more than
 *   (S / 2^s - 1)(1 / D - 2^-e) - 1 >= S / q - 2^(1-p) - N 2^p 2^-e - 1 > S / q - 2,
 * so that S - k q lies in [0, 2 q): one comparison is left, and where the next sum is formed
 * even that can wait (N stands for twice the row sum then). h m < N 2^(e+1) <= 2^62.
 *
 * Wide: N <= 2^40. Sums wrap modulo 2^64, and the quotient comes from doubles: it is off by
 * less than 2^-8, so that its floor is off by one at most, and then S - k q lies just below
 * 0 or just above q: as q < 2^63, the two are told apart though the sum has wrapped.
 */

/** What a modulus needs, at an address that the caller allocates. */
@unmanaged
export class Modulus {
  q: u64;
  /** Narrow: s, e, m; e = 0 where the modulus is wide. */
  shift: u64;
  scale: u64;
  factor: u64;
  /** 1 / q to the nearest. */
  inverse: f64;
}

/** Bytes of a Modulus. */
export function modulusBytes(): u32 {
  return offsetof<Modulus>();
}

/** Bits of D. */
const BITS: u64 = 22;

/** @param rows N, twice the largest row sum and one; 0: wide whatever it is */
export function modulusOpen(at: usize, q: u64, rows: u64): void {
  const modulus = changetype<Modulus>(at);
  modulus.q = q;
  modulus.inverse = 1.0 / <f64>q;
  const bits = 64 - clz(q);
  modulus.shift = bits > BITS ? bits - BITS : 0;
  modulus.scale = 0;
  if (rows == 0) return;
  modulus.scale = BITS + 3 + (64 - clz(rows));
  // floor(2^e 2^s / q), 2^e 2^s by long division: e + s may pass 64.
  let rest: u64 = 1 % q;
  let factor: u64 = 0;
  for (let i = modulus.scale + modulus.shift; i > 0; i--) {
    rest <<= 1;
    factor <<= 1;
    if (rest >= q) {
      rest -= q;
      factor |= 1;
    }
  }
  modulus.factor = factor;
}

/** s mod q, or q more. */
function nearly(s: u64, q: u64, shift: u64, factor: u64, scale: u64): u64 {
  return s - (((s >> shift) * factor) >> scale) * q;
}

/** Below 2 q to below q. */
function fully(r: u64, q: u64): u64 {
  return min(r, r - q);
}

/** s wrapped, its quotient by q in doubles. */
function wide(s: u64, quotient: f64, q: u64): u64 {
  const r = s - <u64>(<i64>Math.floor(quotient)) * q;
  if (r < q) return r;
  return r > 0xc000000000000000 ? r + q : r - q;
}

/** floor(2^64 r / q), 32 bits at a time. */
function fraction(r: u64, q: u64, inverse: f64): u64 {
  const t = <f64>(<i64>r) * 4294967296.0 * inverse;
  let k = <u64>(<i64>Math.floor(t));
  let rest = (r << 32) - k * q;
  if (rest >= q) {
    const below = rest > 0xc000000000000000;
    k = below ? k - 1 : k + 1;
    rest = below ? rest + q : rest - q;
  }
  const u = <f64>(<i64>rest) * 4294967296.0 * inverse;
  let l = <u64>(<i64>Math.floor(u));
  const last = (rest << 32) - l * q;
  if (last >= q) l = last > 0xc000000000000000 ? l - 1 : l + 1;
  return (k << 32) + l;
}

/** Writes floor(2^64 r / q) for each of `count` numerators. */
function emit(state: usize, count: usize, q: u64, inverse: f64, out: usize): void {
  for (let j: usize = 0; j < count; j++) {
    store<u64>(out + (j << 3), fraction(load<u64>(state + (j << 3)), q, inverse));
  }
}

/** One move, from `state` to `next`. */
function step(d: usize, move: usize, state: usize, next: usize, modulus: Modulus): void {
  const end = state + (d << 3);
  const last = next + (d << 3);
  const q = modulus.q;
  const scale = modulus.scale;
  for (; next < last; next += 8, move += 8) {
    let sum: u64 = 0;
    let quotient: f64 = 0;
    for (let x = state; x < end; x += 8, move += 8) {
      sum += load<u64>(move) * load<u64>(x);
      if (scale == 0) quotient += <f64>load<i64>(move) * <f64>load<i64>(x);
    }
    sum += load<u64>(move);
    if (scale == 0) store<u64>(next, wide(sum, (quotient + <f64>load<i64>(move)) * modulus.inverse, q));
    else store<u64>(next, fully(nearly(sum, q, modulus.shift, modulus.factor, scale), q));
  }
}

/**
 * @param moves d x (d + 1) signed 64-bit each: centred residues of A, then b in [0, q), for a
 * narrow modulus plus the multiple of q that makes all sums non-negative
 * @param state d numerators, replaced by the last position's; d more words of work space follow
 * @param out positions 0, ..., steps as floor(2^64 x), or 0
 * @param numerators the same as numerators over q, or 0
 */
export function residueWalk(
  dimension: u32,
  moves: usize,
  choices: usize,
  steps: u32,
  modulus: usize,
  state: usize,
  out: usize,
  numerators: usize,
): void {
  const m = changetype<Modulus>(modulus);
  if (dimension == 2 && m.scale != 0 && out == 0 && numerators != 0) {
    narrow2(moves, choices, steps, m, state, numerators);
    return;
  }
  const d = <usize>dimension;
  const row = d << 3;
  const size = row * (d + 1);
  const last = choices + ((<usize>steps) << 1);
  let here = state;
  let next = state + row;
  for (let choice = choices; ; choice += 2) {
    if (out != 0) {
      emit(here, d, m.q, m.inverse, out);
      out += row;
    }
    if (numerators != 0) {
      for (let j: usize = 0; j < row; j += 8) store<i64>(numerators + j, load<i64>(here + j));
      numerators += row;
    }
    if (choice == last) break;
    step(d, moves + <usize>load<u16>(choice) * size, here, next, m);
    const spare = here;
    here = next;
    next = spare;
  }
  if (here != state) memory.copy(state, here, row);
}

/** Numerators alone, narrow, dimension 2: in registers. */
function narrow2(moves: usize, choices: usize, steps: u32, modulus: Modulus, state: usize, numerators: usize): void {
  const q = modulus.q;
  const shift = modulus.shift;
  const factor = modulus.factor;
  const scale = modulus.scale;
  const last = choices + ((<usize>steps) << 1);
  let x = load<u64>(state);
  let y = load<u64>(state, 8);
  store<u64>(numerators, x);
  store<u64>(numerators, y, 8);
  for (let choice = choices; choice < last; choice += 2) {
    numerators += 16;
    const m = moves + <usize>load<u16>(choice) * 48;
    const u = load<u64>(m) * x + load<u64>(m, 8) * y + load<u64>(m, 16);
    const v = load<u64>(m, 24) * x + load<u64>(m, 32) * y + load<u64>(m, 40);
    x = nearly(u, q, shift, factor, scale);
    y = nearly(v, q, shift, factor, scale);
    store<u64>(numerators, fully(x, q));
    store<u64>(numerators, fully(y, q), 8);
  }
  store<u64>(state, fully(x, q));
  store<u64>(state, fully(y, q), 8);
}
