/** A plan's product in doubles, for bounds. */
import { Batch, Window, windowRecordBytes } from "./batches";

/** Beyond this a product in doubles is scaled down, by its inverse. */
const LARGE: f64 = 1.157920892373162e77; // 2^256
const SMALL: f64 = 8.636168555094445e-78;

/**
 * The plan's product in doubles: out = [d x inputs entries, the same again as scratch,
 * exponent e, radius]; entries times 2^e are within radius times 2^e of the true product,
 * in row-sum norm. With u = 2^-53, one step rounds a row sum by at most (d + 3) u |B| |M|
 * (|B| exact in doubles, or within u where a single move passes 2^53).
 */
export function windowProduct(window: usize, out: usize): void {
  const w = changetype<Window>(window);
  const d = <usize>w.dimension;
  const inputs = <usize>w.inputs;
  const entries = d * inputs;
  const spare = out + (entries << 3);
  const bytes = <usize>windowRecordBytes(w.dimension, w.inputs);
  const unit = <f64>(<i64>d + 4) * 1.1102230246251565e-16;
  memory.fill(out, 0, (2 * entries + 2) << 3);
  for (let i: usize = 0; i < d; i++) store<f64>(out + ((i * inputs + i) << 3), 1.0);
  let exponent: f64 = 0;
  let radius: f64 = 0;
  let scale: f64 = 1; // 2^-exponent, for the constants' column of a batch
  let size: f64 = 1;
  let record = w.records;
  for (let b: u32 = 0; b < w.batches; b++, record += bytes) {
    const m = record + offsetof<Batch>();
    let norm: f64 = 0;
    let next: f64 = 0;
    for (let i: usize = 0; i < d; i++) {
      let rowNorm: f64 = 0;
      for (let k: usize = 0; k < inputs; k++) rowNorm += abs(<f64>load<i64>(m + ((i * inputs + k) << 3)));
      norm = max(norm, rowNorm);
      let sum: f64 = 0;
      for (let j: usize = 0; j < inputs; j++) {
        let x: f64 = j >= d ? <f64>load<i64>(m + ((i * inputs + j) << 3)) * scale : 0.0;
        for (let k: usize = 0; k < d; k++) {
          x += <f64>load<i64>(m + ((i * inputs + k) << 3)) * load<f64>(out + ((k * inputs + j) << 3));
        }
        store<f64>(spare + ((i * inputs + j) << 3), x);
        sum += abs(x);
      }
      next = max(next, sum);
    }
    // What a batch adds through its constants is rounded too: |B| (|M| + scale) covers both.
    radius = norm * (radius + unit * (size + radius + scale)) * (1.0 + unit);
    memory.copy(out, spare, entries << 3);
    size = next;
    if (size > LARGE) {
      for (let i: usize = 0; i < entries; i++) store<f64>(out + (i << 3), load<f64>(out + (i << 3)) * SMALL);
      size *= SMALL;
      radius *= SMALL;
      scale *= SMALL;
      exponent += 256;
    }
  }
  store<f64>(out + ((2 * entries) << 3), exponent);
  store<f64>(out + ((2 * entries + 1) << 3), radius);
}
