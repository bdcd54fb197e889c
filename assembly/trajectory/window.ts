/**
 * The window's run: positions of planned moves. See batches.ts for the plan, and for the
 * proof that every position is right.
 */
import { applyNarrow, applyNarrow2, applyWide } from "../fixed/limbs";
import { Batch, limbsFor, Window, windowRecordBytes } from "./batches";

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
  const bytes = (<usize>(2 * w.words + 1) * w.inputs) << 2;
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

/** `inside` in registers, for dimension 2, no translations, one word. */
function inside2(w: Window, length: u32, out: usize): void {
  const low = load<u64>(w.hi - 24);
  const mid = load<u64>(w.hi - 16);
  const top = load<u64>(w.hi - 8);
  let x0 = <i64>(low & 0xffffffff);
  let x1 = <i64>(mid & 0xffffffff);
  let x2 = <i64>(top & 0xffffffff);
  let y0 = <i64>(low >> 32);
  let y1 = <i64>(mid >> 32);
  let y2 = <i64>(top >> 32);
  let choice = w.choices + ((<usize>w.step) << 1);
  const end = choice + ((<usize>length - 1) << 1);
  while (true) {
    store<i64>(out, (x2 << 32) | x1);
    store<i64>(out, (y2 << 32) | y1, 8);
    if (choice == end) break;
    out += 16;
    const m = w.moves + ((<usize>load<u16>(choice)) << 5);
    choice += 2;
    const a = load<i64>(m);
    const b = load<i64>(m, 8);
    const c = load<i64>(m, 16);
    const d = load<i64>(m, 24);
    let u = a * x0 + b * y0;
    let v = c * x0 + d * y0;
    x0 = u & 0xffffffff;
    y0 = v & 0xffffffff;
    u = a * x1 + b * y1 + (u >> 32);
    v = c * x1 + d * y1 + (v >> 32);
    x1 = u & 0xffffffff;
    y1 = v & 0xffffffff;
    u = a * x2 + b * y2 + (u >> 32);
    v = c * x2 + d * y2 + (v >> 32);
    x2 = u & 0xffffffff;
    y2 = v & 0xffffffff;
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
  let done: u32 = 0;
  while (w.next < w.batches) {
    const batch = changetype<Batch>(w.record);
    if (batch.length > most - done) break;
    const needed = w.hi - <usize>limbsFor(w.base + batch.need) * limb;
    if (needed > w.lo) w.lo = needed;
    if (out != 0) {
      if (plain2 && w.words == 1) inside2(w, batch.length, out);
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

/** Moves an integer vector (interleaved limbs, two's complement) through every batch of the plan. */
export function windowCarry(window: usize, lo: usize, hi: usize): void {
  const w = changetype<Window>(window);
  const bytes = <usize>windowRecordBytes(w.dimension, w.inputs);
  let record = w.records;
  for (let i: u32 = 0; i < w.batches; i++, record += bytes) {
    const m = record + offsetof<Batch>();
    if (changetype<Batch>(record).wide) applyWide(m, w.dimension, w.inputs, lo, hi, w.work);
    else if (w.inputs == 2) applyNarrow2(load<i64>(m), load<i64>(m, 8), load<i64>(m, 16), load<i64>(m, 24), lo, hi);
    else applyNarrow(m, w.dimension, w.inputs, lo, hi, w.work);
  }
}
