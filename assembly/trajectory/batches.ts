/**
 * The window's plan: positions of a walk from a start held as fixed-point fractions with
 * exactly the bits that are still needed; limbs are dropped as the moves consume them.
 *
 * Moves and translations. The distinct translation coordinates of the walk are constants
 * z_1, ..., z_s held beside the point x (components d, ..., d + s - 1 of the vector). A
 * move is then one d x (d + s) integer matrix [A | E], with b = E z, and so is the product
 * of consecutive moves. |M| below is the largest row sum of absolute entries.
 *
 * Batches. Consecutive moves are multiplied while |product| <= 2^30; the positions inside
 * a batch are read off a copy of the top 64 words + 64 bits (or some more), moved one move at a time, and
 * the whole vector is moved once, by the product. A move that is larger alone (at most
 * 2^62) is a batch by itself.
 *
 * Bits. Let M_i be the product of batch i, m_i the largest |prefix| of it, and
 *   L_i = max(log2 m_i, log2 |M_i| + L_(i+1)),  L_end = 0.
 * Cutting x and z to w bits before batch i moves each later position by at most
 * 2^(L_i - w). With w_i = 64 words + GUARD + log2(batches + 2) + L_i the cuts of all batches
 * and of the start together move no position by more than 2^-(64 words + GUARD), and reading
 * inside a batch adds at most 2^30 2^-(64 words + 64), the same: every position is right
 * to 2^-(64 words + GUARD - 1) before its last floor. So a word is the floor of the true
 * one, or the next below it where the true one is within that of a whole unit: GUARD = 34
 * makes that about one word in 2^33. The |M_i| are exact integers of the actual draws; moves
 * that cancel inside a batch cost nothing, and only the joints between batches are bounded
 * by submultiplicativity.
 */
import { FULL, OK } from "../status";

/** Bits that are held beside those shown, so that floors come out right: see above. */
const GUARD: u32 = 34;
/** Largest row sum of a batch. */
const NARROW: f64 = 1073741824.0;
const NARROW_INTEGER: i64 = 1073741824;
/** Moves of row sums up to this are multiplied to a batch without a thought of overflow. */
const MODEST: f64 = 2147483648.0;
/** Moves of row sums up to this leave room for digits of 56 bits in a signed word of 64. */
const SMALL: f64 = 63.0;
/** Largest row sum that a product of 64-bit integers is let near. */
const WIDE: f64 = <f64>((<u64>1) << 62);
/** A batch's positions are written together: bounds the caller's buffer. */
const LONGEST: u32 = 256;
/** Covers the rounding of a bound on a logarithm and of a sum of at most 2^31 bits. */
const MARGIN: f64 = 0.00000095367431640625;

/** One run's state, at an address that the caller allocates. */
@unmanaged
export class Window {
  dimension: u32;
  inputs: u32;
  words: u32;
  batches: u32;
  moves: usize;
  norms: usize;
  work: usize;
  choices: usize;
  records: usize;
  /** First record not yet run, its number, and the number of its first move. */
  record: usize;
  next: u32;
  step: u32;
  lo: usize;
  hi: usize;
  /** Bits beside L_i: those shown and the guard. */
  base: f64;
  /** The largest row sum of a move. */
  largest: f64;
  /** No move has a negative entry. */
  positive: bool;
}

/** What is kept of a batch, followed by its product, d x inputs signed 64-bit integers. */
@unmanaged
export class Batch {
  /** |product|, then (after the backward pass) L_i. */
  need: f64;
  /** Largest |prefix|. */
  most: f64;
  length: u32;
  wide: u32;
}

/** Whether positions inside a batch may be read off digits of 56 bits. */
export function smallMoves(w: Window): bool {
  return w.largest <= SMALL;
}

/**
 * log2 x from above, by at most 0.018, for x >= 1: with x = 2^e m, 1 <= m < 2, the quadratic through
 * log2 at 1, 3/2 and 2 is never more than 0.0088 below log2 m.
 */
export function logAbove(x: f64): f64 {
  const bits = reinterpret<i64>(x);
  const e = <f64>((bits >> 52) - 1023);
  const t = reinterpret<f64>((bits & 0xfffffffffffff) | 0x3ff0000000000000) - 1.0;
  return e + t + 0.33985000288462474 * t * (1.0 - t) + 0.0089;
}

export function windowLongest(): u32 {
  return LONGEST;
}

/** Bytes of a run's state. */
export function windowBytes(): u32 {
  return offsetof<Window>();
}

/** Bytes of one batch's record. */
export function windowRecordBytes(dimension: u32, inputs: u32): u32 {
  return offsetof<Batch>() + ((dimension * inputs) << 3);
}

/** Bytes of the work space: carries, one limb's components, a product, and the window. */
export function windowWorkBytes(dimension: u32, inputs: u32, words: u32): u32 {
  return 64 + (inputs << 3) + ((dimension * inputs) << 3) + (((2 * words + 2) * inputs) << 2);
}

/**
 * @param moves matrices [A | E], d x inputs i64 each
 * @param norms |[A | E]| of each of `count` moves, f64, rounded up, at most 2^62
 */
export function windowOpen(
  window: usize,
  dimension: u32,
  inputs: u32,
  words: u32,
  moves: usize,
  norms: usize,
  count: u32,
  work: usize,
): void {
  const w = changetype<Window>(window);
  w.dimension = dimension;
  w.inputs = inputs;
  w.words = words;
  w.moves = moves;
  w.norms = norms;
  w.work = work;
  let largest: f64 = 0;
  for (let i: u32 = 0; i < count; i++) largest = max(largest, load<f64>(norms + ((<usize>i) << 3)));
  w.largest = largest;
  let least: i64 = 0;
  const entries = count * dimension * inputs;
  for (let i: u32 = 0; i < entries; i++) least = min(least, load<i64>(moves + ((<usize>i) << 3)));
  w.positive = least == 0;
}

/** to := A of `move` times from, plus its E; returns |to|. */
function multiply(w: Window, to: usize, move: usize, from: usize): f64 {
  const d = <usize>w.dimension;
  const inputs = <usize>w.inputs;
  let norm: i64 = 0;
  for (let i: usize = 0; i < d; i++) {
    const row = move + ((i * inputs) << 3);
    let sum: i64 = 0;
    for (let j: usize = 0; j < inputs; j++) {
      let x: i64 = j >= d ? load<i64>(row + (j << 3)) : 0;
      for (let k: usize = 0; k < d; k++) x += load<i64>(row + (k << 3)) * load<i64>(from + ((k * inputs + j) << 3));
      store<i64>(to + ((i * inputs + j) << 3), x);
      sum += x < 0 ? -x : x;
    }
    if (sum > norm) norm = sum;
  }
  return <f64>norm;
}

/** Lengthens the batch whose first move is `k` - 1; returns the first move that is not in it. */
function extend(w: Window, batch: Batch, k: u32, end: u32): u32 {
  const size = (<usize>(w.dimension * w.inputs)) << 3;
  const product = changetype<usize>(batch) + offsetof<Batch>();
  const spare = w.work + 64 + ((<usize>w.inputs) << 3);
  let norm = batch.need;
  let most = norm;
  while (k < end) {
    const c = <usize>load<u16>(w.choices + ((<usize>k) << 1));
    if (norm * load<f64>(w.norms + (c << 3)) > WIDE) break;
    const longer = multiply(w, spare, w.moves + c * size, product);
    if (longer > NARROW) break;
    memory.copy(product, spare, size);
    norm = longer;
    if (norm > most) most = norm;
    k++;
  }
  batch.need = norm;
  batch.most = most;
  return k;
}

/** `extend` in registers, for dimension 2 without translations and moves of row sums up to MODEST. */
function extend2(w: Window, batch: Batch, k: u32, end: u32): u32 {
  const product = changetype<usize>(batch) + offsetof<Batch>();
  let p = load<i64>(product);
  let q = load<i64>(product, 8);
  let r = load<i64>(product, 16);
  let s = load<i64>(product, 24);
  let norm = <i64>batch.need;
  let most = norm;
  const moves = w.moves;
  let choice = w.choices + ((<usize>k) << 1);
  const last = w.choices + ((<usize>end) << 1);
  for (; choice < last; choice += 2) {
    const m = moves + ((<usize>load<u16>(choice)) << 5);
    const ma = load<i64>(m);
    const mb = load<i64>(m, 8);
    const mc = load<i64>(m, 16);
    const md = load<i64>(m, 24);
    const np = ma * p + mb * r;
    const nq = ma * q + mb * s;
    const nr = mc * p + md * r;
    const ns = mc * q + md * s;
    const top = abs(np) + abs(nq);
    const low = abs(nr) + abs(ns);
    const longer = max(top, low);
    if (longer > NARROW_INTEGER) break;
    p = np;
    q = nq;
    r = nr;
    s = ns;
    norm = longer;
    most = max(longer, most);
  }
  store<i64>(product, p);
  store<i64>(product, q, 8);
  store<i64>(product, r, 16);
  store<i64>(product, s, 24);
  batch.need = <f64>norm;
  batch.most = <f64>most;
  return <u32>((choice - w.choices) >> 1);
}

/**
 * `extend2` for moves without negative entries. Row sums are then only looked at where the
 * bound |A| |M| has passed 2^30; and no prefix has a larger one than the whole, since each
 * row of M goes into some row of A M.
 */
function extendPositive2(w: Window, batch: Batch, k: u32, end: u32): u32 {
  const product = changetype<usize>(batch) + offsetof<Batch>();
  let p = load<i64>(product);
  let q = load<i64>(product, 8);
  let r = load<i64>(product, 16);
  let s = load<i64>(product, 24);
  let bound = batch.need;
  const moves = w.moves;
  const norms = w.norms;
  let choice = w.choices + ((<usize>k) << 1);
  const last = w.choices + ((<usize>end) << 1);
  for (; choice < last; choice += 2) {
    const c = <usize>load<u16>(choice);
    const m = moves + (c << 5);
    const ma = load<i64>(m);
    const mb = load<i64>(m, 8);
    const mc = load<i64>(m, 16);
    const md = load<i64>(m, 24);
    const np = ma * p + mb * r;
    const nq = ma * q + mb * s;
    const nr = mc * p + md * r;
    const ns = mc * q + md * s;
    bound *= load<f64>(norms + (c << 3));
    if (bound > NARROW) {
      bound = <f64>max(np + nq, nr + ns);
      if (bound > NARROW) break;
    }
    p = np;
    q = nq;
    r = nr;
    s = ns;
  }
  store<i64>(product, p);
  store<i64>(product, q, 8);
  store<i64>(product, r, 16);
  store<i64>(product, s, 24);
  const norm = <f64>max(p + q, r + s);
  batch.need = norm;
  batch.most = norm;
  return <u32>((choice - w.choices) >> 1);
}

/**
 * Cuts the moves into batches and finds the bits that each needs.
 * @param choices `steps` move indices, u16
 * @param records room for `capacity` records
 * @returns FULL where the batches are more than that
 */
export function windowPlan(window: usize, choices: usize, steps: u32, records: usize, capacity: u32): i32 {
  const w = changetype<Window>(window);
  w.choices = choices;
  const size = (<usize>(w.dimension * w.inputs)) << 3;
  const bytes = <usize>windowRecordBytes(w.dimension, w.inputs);
  const plain2 = w.inputs == 2 && w.largest <= MODEST;
  let count: u32 = 0;
  let record = records;
  for (let k: u32 = 0; k < steps; ) {
    if (count == capacity) return FULL;
    const batch = changetype<Batch>(record);
    const c = <usize>load<u16>(choices + ((<usize>k) << 1));
    memory.copy(record + offsetof<Batch>(), w.moves + c * size, size);
    const norm = load<f64>(w.norms + (c << 3));
    batch.need = norm;
    batch.most = norm;
    const wide = norm > NARROW;
    batch.wide = <u32>wide;
    const first = k++;
    if (!wide) {
      const end = min(steps, first + LONGEST);
      if (!plain2) k = extend(w, batch, k, end);
      else if (w.positive) k = extendPositive2(w, batch, k, end);
      else k = extend2(w, batch, k, end);
    }
    batch.length = k - first;
    count++;
    record += bytes;
  }
  let need: f64 = 0;
  for (let i = count; i > 0; i--) {
    record -= bytes;
    const batch = changetype<Batch>(record);
    need = max(logAbove(batch.most), logAbove(batch.need) + need) + MARGIN;
    batch.need = need;
  }
  windowReplay(window, choices, records, count);
  return OK;
}

/** Takes up a plan that `windowPlan` has made: `count` batches at `records`, for the moves at `choices`. */
export function windowReplay(window: usize, choices: usize, records: usize, count: u32): void {
  const w = changetype<Window>(window);
  w.choices = choices;
  w.records = records;
  w.batches = count;
  w.base = <f64>(64 * w.words + GUARD) + logAbove(<f64>count + 2.0) + MARGIN;
  w.record = records;
  w.next = 0;
  w.step = 0;
}

/** Number of batches of the plan. */
export function windowBatches(window: usize): u32 {
  return changetype<Window>(window).batches;
}

/** Whole limbs for so many bits. */
export function limbsFor(bits: f64): u32 {
  return <u32>Math.ceil(bits * 0.03125);
}

/** 32-bit limbs, a component, that the rest of the run needs. */
export function windowLimbs(window: usize): u32 {
  const w = changetype<Window>(window);
  return limbsFor(w.base + (w.next < w.batches ? changetype<Batch>(w.record).need : 0.0));
}

/** L_0: bits of the start, beside those shown and the guard, that the planned moves consume at most. */
export function windowConsumes(window: usize): f64 {
  const w = changetype<Window>(window);
  return w.batches > 0 ? changetype<Batch>(w.records).need : 0.0;
}
