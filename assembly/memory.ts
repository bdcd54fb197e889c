/**
 * The arena: one bump allocator an instance, released by marks. Kernels never
 * allocate in a loop; the border plans a run's memory, takes it here once, and
 * releases it (or drops the whole instance) when the run is over.
 *
 * Memory grows geometrically, since a page fault costs more than the arithmetic
 * on the page. Growing detaches every view that JavaScript holds, so the border
 * makes its views after the last allocation.
 */

/** Alignment of every block: one cache line. */
const LINE: usize = 64;

let top: usize = 0;
let ceiling: usize = 0xffff0000;

/** Sets the number of bytes that the arena may not pass. */
export function setCeiling(bytes: u32): void {
  ceiling = bytes;
}

/** Takes `bytes` bytes, aligned to 64; 0 where the ceiling or the engine refuses. Contents are not cleared. */
export function alloc(bytes: u32): usize {
  if (top == 0) top = (__heap_base + LINE - 1) & ~(LINE - 1);
  const start = top;
  const end = <u64>start + <u64>bytes + LINE - 1;
  if (end > <u64>ceiling) return 0;
  const next = <usize>end & ~(LINE - 1);
  const pages = <i32>((next + 0xffff) >>> 16);
  const have = memory.size();
  if (pages > have) {
    const most = <i32>(ceiling >>> 16);
    const wanted = min(max(pages, have + (have >> 1)), max(most, pages));
    if (memory.grow(wanted - have) < 0 && memory.grow(pages - have) < 0) return 0;
  }
  top = next;
  return start;
}

/** The arena's present end, to be handed back to `release`. */
export function mark(): usize {
  if (top == 0) top = (__heap_base + LINE - 1) & ~(LINE - 1);
  return top;
}

/** Gives back all that was taken since `mark` returned `to`. */
export function release(to: usize): void {
  top = to;
}
