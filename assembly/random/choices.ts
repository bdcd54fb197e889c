/**
 * Draws of moves from exact weights, without bias.
 *
 * Weights are integers over a common denominator W < 2^63, given as cumulative sums.
 * A uniform word x of B bits becomes floor(x W / 2^B), and is redrawn where the low
 * part of the product falls below 2^B mod W (Lemire: Fast random integer generation
 * in an interval, ACM TOMACS 2019). B is 32 where W < 2^32 (four moves a block), else
 * 64 (two moves a block). Redraws come from a stream of their own, indexed by the move
 * and the attempt, so that move n of replicate r is a function of (seed, r, n) alone.
 */
import { philoxBlock } from "./philox";

/** Streams, the low byte of the last counter word; an attempt or a coordinate sits above it. */
const STREAM_MOVES: u32 = 0;
const STREAM_REDRAW: u32 = 1;
const STREAM_START: u32 = 2;

const block = memory.data(16, 16);
const spare = memory.data(16, 16);

/** High 64 bits of a 64 x 64-bit product. */
export function mulHigh(a: u64, b: u64): u64 {
  const al = a & 0xffffffff;
  const ah = a >> 32;
  const bl = b & 0xffffffff;
  const bh = b >> 32;
  const m = ah * bl + ((al * bl) >> 32);
  return ah * bh + (m >> 32) + ((al * bh + (m & 0xffffffff)) >> 32);
}

/**
 * The index i with cumulative[i - 1] <= t < cumulative[i]. Short lists are counted through:
 * a draw's outcome is what a processor cannot predict, so a branch on it would cost more.
 */
function locate(cumulative: usize, t: u64, moves: u32): u32 {
  let i: u32 = 0;
  if (moves <= 8) {
    for (let j: u32 = 0; j + 1 < moves; j++) i += u32(load<u64>(cumulative + ((<usize>j) << 3)) <= t);
  } else {
    while (load<u64>(cumulative + ((<usize>i) << 3)) <= t) i++;
  }
  return i;
}

function redraw(total: u64, move: u64, replicate: u32, k0: u32, k1: u32): u64 {
  const reject = (0 - total) % total; // 2^64 mod total
  let attempt: u32 = 0;
  while (true) {
    philoxBlock(spare, <u32>move, <u32>(move >> 32), replicate, STREAM_REDRAW | (attempt << 8), k0, k1);
    for (let half: usize = 0; half < 16; half += 8) {
      const x = load<u64>(spare + half);
      if (x * total >= reject) return mulHigh(x, total);
    }
    attempt++;
  }
}

/**
 * Writes moves first, ..., first + count - 1 of a replicate at `out`, 16 bits each.
 * `cumulative`: cumulative integer weights (u64), the last being the total W < 2^63.
 */
export function drawMoves(
  out: usize,
  count: u32,
  first: u64,
  replicate: u32,
  seed: u64,
  cumulative: usize,
  moves: u32,
): void {
  const k0 = <u32>seed;
  const k1 = <u32>(seed >> 32);
  const total = load<u64>(cumulative + ((<usize>(moves - 1)) << 3));
  const wide = total >> 32 != 0;
  const shift: u64 = wide ? 1 : 2; // two or four moves a block
  const reject: u64 = wide ? (0 - total) % total : ((<u64>1) << 32) % total;
  let held: u64 = u64.MAX_VALUE;
  for (let i: u32 = 0; i < count; i++) {
    const n = first + i;
    const at = n >> shift;
    if (at != held) {
      philoxBlock(block, <u32>at, <u32>(at >> 32), replicate, STREAM_MOVES, k0, k1);
      held = at;
    }
    let t: u64;
    if (wide) {
      const x = load<u64>(block + ((<usize>(n & 1)) << 3));
      t = x * total >= reject ? mulHigh(x, total) : redraw(total, n, replicate, k0, k1);
    } else {
      const m = <u64>load<u32>(block + ((<usize>(n & 3)) << 2)) * total;
      t = (m & 0xffffffff) >= reject ? m >> 32 : redraw(total, n, replicate, k0, k1);
    }
    store<u16>(out + ((<usize>i) << 1), <u16>locate(cumulative, t, moves));
  }
}

/**
 * Binary digits of a uniform point: coordinate `coordinate` of replicate `replicate`,
 * 64-bit words first, ..., first + count - 1 after the binary point, most significant
 * first. Asking for more words later extends the same point.
 */
export function drawStart(out: usize, count: u32, first: u64, coordinate: u32, replicate: u32, seed: u64): void {
  const k0 = <u32>seed;
  const k1 = <u32>(seed >> 32);
  for (let i: u32 = 0; i < count; i++) {
    const n = first + i;
    const at = n >> 1;
    philoxBlock(block, <u32>at, <u32>(at >> 32), replicate, STREAM_START | (coordinate << 8), k0, k1);
    store<u64>(out + ((<usize>i) << 3), load<u64>(block + ((<usize>(n & 1)) << 3)));
  }
}
