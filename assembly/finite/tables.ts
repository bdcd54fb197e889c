/**
 * The moves as permutations of (Z/q)^d, and its orbits.
 *
 * The point x has the index sum x_i q^(d-1-i). A table holds, point after point, the
 * indices of its images under move 0, 1, ..., m - 1 (u32 each), so that one point's images
 * share a cache line. On a finite set every inverse is a power: forward search finds orbits.
 */

/** In the place of a number: not met yet. */
const NONE: u32 = 0xffffffff;

/** Writes at `index` the index of A x + b, x being the digits at `x`. */
function imageOf(move: usize, d: usize, q: u64, x: usize): u32 {
  let index: u64 = 0;
  for (let i: usize = 0; i < d; i++) {
    let sum: u64 = 0;
    for (let j: usize = 0; j < d; j++) {
      sum += (<u64>load<u32>(move) * load<u32>(x + (j << 2))) % q;
      move += 4;
    }
    sum += load<u32>(move);
    move += 4;
    index = index * q + (sum % q);
  }
  return <u32>index;
}

/**
 * @param moves m x d x (d + 1) residues in [0, q): the rows of A, each followed by its entry of b
 * @param points q^d, below 2^32
 * @param work 2 d words
 * @param table points x m, written
 */
export function orbitTables(
  dimension: u32,
  q: u32,
  moves: usize,
  count: u32,
  points: u32,
  work: usize,
  table: usize,
): void {
  const d = <usize>dimension;
  const size = (d * (d + 1)) << 2;
  const stride = (<usize>count) << 2;
  const image = work + (d << 2);
  for (let m: usize = 0; m < <usize>count; m++) {
    const move = moves + m * size;
    memory.fill(work, 0, d << 2);
    let out = table + (m << 2);
    for (let p: u32 = 0; p < points; ) {
      // A row of q points that differ in the last digit alone: the image moves by the last column.
      const first = imageOf(move, d, q, work);
      let rest = first;
      for (let i = d; i > 0; i--) {
        store<u32>(image + ((i - 1) << 2), rest % q);
        rest /= q;
      }
      for (let last: u32 = 0; last < q; last++, p++) {
        let index: u32 = 0;
        for (let i: usize = 0; i < d; i++) {
          const y = load<u32>(image + (i << 2));
          index = index * q + y;
          const moved = y + load<u32>(move + ((i * (d + 1) + d - 1) << 2));
          store<u32>(image + (i << 2), moved >= q ? moved - q : moved);
        }
        store<u32>(out, index);
        out += stride;
      }
      for (let i = d - 1; i > 0; i--) {
        const at = work + ((i - 1) << 2);
        const x = load<u32>(at) + 1;
        store<u32>(at, x == q ? 0 : x);
        if (x != q) break;
      }
    }
  }
}

/**
 * Breadth-first search from each point not met yet, moves in order.
 * @param queue points, orbit after orbit, written
 * @param rank each point's place in the queue, written
 * @param starts the first place of each orbit, and `points` after the last; room for points + 1
 * @returns the number of orbits
 */
export function orbitLabel(table: usize, count: u32, points: u32, queue: usize, rank: usize, starts: usize): u32 {
  memory.fill(rank, 0xff, (<usize>points) << 2);
  const row = (<usize>count) << 2;
  let orbits: u32 = 0;
  let filled: u32 = 0;
  for (let p: u32 = 0; p < points; p++) {
    if (load<u32>(rank + ((<usize>p) << 2)) != NONE) continue;
    store<u32>(starts + ((<usize>orbits) << 2), filled);
    orbits++;
    let next = filled;
    store<u32>(queue + ((<usize>filled) << 2), p);
    store<u32>(rank + ((<usize>p) << 2), filled);
    filled++;
    for (; next < filled; next++) {
      const at = table + <usize>load<u32>(queue + ((<usize>next) << 2)) * row;
      for (let m: usize = 0; m < row; m += 4) {
        const t = load<u32>(at + m);
        const place = rank + ((<usize>t) << 2);
        if (load<u32>(place) != NONE) continue;
        store<u32>(place, filled);
        store<u32>(queue + ((<usize>filled) << 2), t);
        filled++;
      }
    }
  }
  store<u32>(starts + ((<usize>orbits) << 2), filled);
  return orbits;
}

/** An orbit's own table: size x m, its points numbered from 0 in the queue's order. */
export function orbitLocal(
  table: usize,
  count: u32,
  queue: usize,
  rank: usize,
  start: u32,
  size: u32,
  into: usize,
): void {
  const row = (<usize>count) << 2;
  for (let i: u32 = start; i < start + size; i++) {
    const at = table + <usize>load<u32>(queue + ((<usize>i) << 2)) * row;
    for (let m: usize = 0; m < row; m += 4) {
      store<u32>(into, load<u32>(rank + ((<usize>load<u32>(at + m)) << 2)) - start);
      into += 4;
    }
  }
}

/** Search from y, comparing each number given with the other orbit's; the entries compared, or less one's complement at a difference. */
function compareFrom(y: u32, table: usize, row: usize, local: usize, size: u32, number: usize, order: usize): i64 {
  store<u32>(order, y);
  store<u32>(number + ((<usize>y) << 2), 0);
  let filled: u32 = 1;
  let steps: i64 = 0;
  let same = true;
  for (let i: u32 = 0; same && i < filled; i++) {
    const at = table + <usize>load<u32>(order + ((<usize>i) << 2)) * row;
    for (let m: usize = 0; m < row; m += 4) {
      const t = load<u32>(at + m);
      const place = number + ((<usize>t) << 2);
      let k = load<u32>(place);
      if (k == NONE) {
        k = filled;
        store<u32>(place, k);
        store<u32>(order + ((<usize>filled) << 2), t);
        filled++;
      }
      steps++;
      if (k != load<u32>(local)) {
        same = false;
        break;
      }
      local += 4;
    }
  }
  for (let i: u32 = 0; i < filled; i++) {
    store<u32>(number + ((<usize>load<u32>(order + ((<usize>i) << 2))) << 2), NONE);
  }
  return same && filled == size ? steps : -steps;
}

/**
 * Whether some numbering of the orbit at queue places start, ..., start + size - 1 gives it
 * the table `local`: whether a bijection carries each move to itself.
 * @param number a word a point, all NONE before and after
 * @param budget entries that may be compared
 * @returns entries compared where one was found, minus them where none is; 0 where the budget ended
 */
export function orbitMatch(
  table: usize,
  count: u32,
  queue: usize,
  start: u32,
  size: u32,
  local: usize,
  number: usize,
  order: usize,
  budget: i64,
): i64 {
  const row = (<usize>count) << 2;
  let spent: i64 = 0;
  for (let i: u32 = start; i < start + size; i++) {
    const y = load<u32>(queue + ((<usize>i) << 2));
    const steps = compareFrom(y, table, row, local, size, number, order);
    spent += abs(steps);
    if (steps > 0) return spent;
    if (spent > budget) return 0;
  }
  return -spent;
}
