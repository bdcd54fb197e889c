/**
 * Philox4x32-10, a counter-based generator (Salmon, Moraes, Dror, Shaw: Parallel
 * random numbers: as easy as 1, 2, 3; SC 2011). A draw is a pure function of
 * (seed, stream, replicate, position), so any schedule over any number of workers
 * gives the same numbers.
 *
 * Counter words here: [position low, position high, replicate, stream].
 */
const M0: u64 = 0xd2511f53;
const M1: u64 = 0xcd9e8d57;
const W0: u32 = 0x9e3779b9;
const W1: u32 = 0xbb67ae85;

/** Writes the four 32-bit words of one block at `out`. */
export function philoxBlock(out: usize, c0: u32, c1: u32, c2: u32, c3: u32, k0: u32, k1: u32): void {
  for (let round = 0; round < 10; round++) {
    const p0 = M0 * <u64>c0;
    const p1 = M1 * <u64>c2;
    c0 = <u32>(p1 >> 32) ^ c1 ^ k0;
    c1 = <u32>p1;
    c2 = <u32>(p0 >> 32) ^ c3 ^ k1;
    c3 = <u32>p0;
    k0 += W0;
    k1 += W1;
  }
  store<u32>(out, c0);
  store<u32>(out, c1, 4);
  store<u32>(out, c2, 8);
  store<u32>(out, c3, 12);
}
