/**
 * The window's run: positions of planned moves. See batches.ts for the plan, and for the
 * proof that every position is right.
 */
import { applyNarrow, applyNarrow2, applyWide } from "../fixed/limbs";
import { Batch, limbsFor, smallMoves, Window, windowConsumes, windowRecordBytes } from "./batches";

/** Hands over the vector: `limbs` interleaved limbs at `lo`, the top limb last. */
export function windowStart(window: usize, lo: usize, limbs: u32): void {
  const w = changetype<Window>(window);
  w.lo = lo;
  w.hi = lo + ((<usize>limbs * w.inputs) << 2);
}

/** Writes a position: for each coordinate `words` 64-bit words, the most significant first. */
function emit(w: Window, top: usize, out: usize): void {
  const stride = (<usize>w.inputs) << 2;
  const d = <usize>w.dimension;
  for (let j: usize = 0; j < d; j++) {
    let p = top + (j << 2);
    for (let i: u32 = 0; i < w.words; i++) {
      p -= stride;
      const high = <u64>load<u32>(p);
      p -= stride;
      store<u64>(out, (high << 32) | <u64>load<u32>(p));
      out += 8;
    }
  }
}

/** Writes the present position. */
export function windowEmit(window: usize, out: usize): void {
  const w = changetype<Window>(window);
  emit(w, w.hi, out);
}

/** Positions inside a batch, from a copy of the top of the vector. */
function inside(w: Window, length: u32, out: usize): void {
  const size = (<usize>(w.dimension * w.inputs)) << 3;
  const bytes = (<usize>(2 * w.words + 2) * w.inputs) << 2;
  const copy = w.work + 64 + ((<usize>w.inputs) << 3);
  const top = copy + bytes;
  const row = (<usize>w.dimension * w.words) << 3;
  memory.copy(copy, w.hi - bytes, bytes);
  let c = w.choices + ((<usize>w.step) << 1);
  emit(w, top, out);
  for (let i: u32 = 1; i < length; i++, c += 2) {
    const move = w.moves + <usize>load<u16>(c) * size;
    applyNarrow(move, w.dimension, w.inputs, copy, top, w.work);
    out += row;
    emit(w, top, out);
  }
}

/** The low 56 bits. */
const MASK56: i64 = 0xffffffffffffff;

/**
 * `inside` in registers, for dimension 2, no translations, one word: the top 128 bits as a
 * digit of 16 bits (a multiple of 2^40) and two of 56, so that small moves leave the carries
 * room in a signed word.
 */
function inside2(w: Window, length: u32, out: usize): void {
  const hi = w.hi;
  const lowest = load<u64>(hi - 32);
  const low = load<u64>(hi - 24);
  const mid = load<u64>(hi - 16);
  const top = load<u64>(hi - 8);
  // Limbs of x lie in the low halves, limbs of y in the high ones.
  const xh = ((top & 0xffffffff) << 32) | (mid & 0xffffffff);
  const xl = ((low & 0xffffffff) << 32) | (lowest & 0xffffffff);
  const yh = (top & 0xffffffff00000000) | (mid >> 32);
  const yl = (low & 0xffffffff00000000) | (lowest >> 32);
  let x2 = <i64>(xh >> 8);
  let x1 = <i64>(((xh & 0xff) << 48) | (xl >> 16));
  let x0 = <i64>((xl & 0xffff) << 40);
  let y2 = <i64>(yh >> 8);
  let y1 = <i64>(((yh & 0xff) << 48) | (yl >> 16));
  let y0 = <i64>((yl & 0xffff) << 40);
  const moves = w.moves;
  let choice = w.choices + ((<usize>w.step) << 1);
  const end = choice + ((<usize>length - 1) << 1);
  while (true) {
    store<i64>(out, (x2 << 8) | (x1 >> 48));
    store<i64>(out, (y2 << 8) | (y1 >> 48), 8);
    if (choice == end) break;
    out += 16;
    const m = moves + ((<usize>load<u16>(choice)) << 5);
    choice += 2;
    const a = load<i64>(m);
    const b = load<i64>(m, 8);
    const c = load<i64>(m, 16);
    const d = load<i64>(m, 24);
    let u = a * x0 + b * y0;
    let v = c * x0 + d * y0;
    x0 = u & MASK56;
    y0 = v & MASK56;
    u = a * x1 + b * y1 + (u >> 56);
    v = c * x1 + d * y1 + (v >> 56);
    x1 = u & MASK56;
    y1 = v & MASK56;
    u = a * x2 + b * y2 + (u >> 56);
    v = c * x2 + d * y2 + (v >> 56);
    x2 = u & MASK56;
    y2 = v & MASK56;
  }
}

/**
 * Runs whole batches while they fit `most` moves (at least `windowLongest()`).
 * @param out one position a move, the position before it; 0: none are written
 * @returns the number of moves made; fewer than `most` also where the plan ends
 */
export function windowAdvance(window: usize, most: u32, out: usize): u32 {
  const w = changetype<Window>(window);
  const bytes = <usize>windowRecordBytes(w.dimension, w.inputs);
  const row = (<usize>w.dimension * w.words) << 3;
  const limb = (<usize>w.inputs) << 2;
  const plain2 = w.inputs == 2;
  const brief = plain2 && w.words == 1 && smallMoves(w);
  let done: u32 = 0;
  while (w.next < w.batches) {
    const batch = changetype<Batch>(w.record);
    if (batch.length > most - done) break;
    const needed = w.hi - <usize>limbsFor(w.base + batch.need) * limb;
    if (needed > w.lo) w.lo = needed;
    if (out != 0) {
      if (brief) inside2(w, batch.length, out);
      else inside(w, batch.length, out);
      out += <usize>batch.length * row;
    }
    const m = w.record + offsetof<Batch>();
    if (batch.wide) applyWide(m, w.dimension, w.inputs, w.lo, w.hi, w.work);
    else if (plain2) applyNarrow2(load<i64>(m), load<i64>(m, 8), load<i64>(m, 16), load<i64>(m, 24), w.lo, w.hi);
    else applyNarrow(m, w.dimension, w.inputs, w.lo, w.hi, w.work);
    done += batch.length;
    w.step += batch.length;
    w.next++;
    w.record += bytes;
  }
  return done;
}

/** Lengthens integers from `top` to `wanted` by their signs (interleaved limbs, `step` bytes a limb). */
function lengthen(top: usize, wanted: usize, step: usize): void {
  for (let p = top; p < wanted; p += 4) store<u32>(p, <u32>(load<i32>(p - step) >> 31));
}

/**
 * Moves a unit vector (interleaved limbs, two's complement) through every batch of the plan.
 * Only the limbs that it can have filled are moved: batch i adds at most L_i - L_(i+1) bits.
 * @param lo limbs of which all but the first are 0
 */
export function windowCarry(window: usize, lo: usize, hi: usize): void {
  const w = changetype<Window>(window);
  const bytes = <usize>windowRecordBytes(w.dimension, w.inputs);
  const step = (<usize>w.inputs) << 2;
  let top = lo + step;
  let record = w.records;
  for (let i: u32 = 0; i < w.batches; i++, record += bytes) {
    const below = i + 1 < w.batches ? changetype<Batch>(record + bytes).need : 0.0;
    const bits = windowConsumes(window) - below;
    const wanted = min(hi, lo + <usize>limbsFor(bits + 2.0) * step);
    if (wanted > top) {
      lengthen(top, wanted, step);
      top = wanted;
    }
    const m = record + offsetof<Batch>();
    if (changetype<Batch>(record).wide) applyWide(m, w.dimension, w.inputs, lo, top, w.work);
    else if (w.inputs == 2) applyNarrow2(load<i64>(m), load<i64>(m, 8), load<i64>(m, 16), load<i64>(m, 24), lo, top);
    else applyNarrow(m, w.dimension, w.inputs, lo, top, w.work);
  }
  lengthen(top, hi, step);
}
