/** Starts of window runs: the digits of a drawn point among the interleaved limbs. */
import { drawStart } from "../random/choices";

/**
 * Writes the first `limbs` 32-bit digits of the uniform point of `replicate` as components
 * 0, ..., dimension - 1 of a vector of `inputs` components.
 * @param scratch room for (limbs + 1) / 2 words of 64 bits
 */
export function scatterStart(
  lo: usize,
  limbs: u32,
  dimension: u32,
  inputs: u32,
  replicate: u32,
  seed: u64,
  scratch: usize,
): void {
  const stride = (<usize>inputs) << 2;
  const top = lo + <usize>limbs * stride;
  for (let j: u32 = 0; j < dimension; j++) {
    drawStart(scratch, (limbs + 1) >> 1, 0, j, replicate, seed);
    let p = top + ((<usize>j) << 2);
    for (let i: u32 = 0; i < limbs; i++) {
      // Words are little-endian in memory: the high half of word i / 2 comes first.
      p -= stride;
      store<u32>(p, load<u32>(scratch + ((<usize>(i ^ 1)) << 2)));
    }
  }
}
