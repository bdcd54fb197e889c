/**
 * Means over all words in the moves, by depth-first search; a move's share of the mean is
 * its probability, and sums are taken node by node, so that their error grows with the depth
 * only.
 *
 * `wordMeans`, matrices without negative entries: the stationary law of directions sits, with
 * its mass under w, on the cone spanned by the columns of the word w (the last letter acts
 * first). With |x| a positive linear form, take those columns to |x| = 1 and call q_i(x) = |A_i x|,
 * linear there. The mean growth f = sum p_i log q_i is concave, so on the cone it is
 *   at least its least value at the columns,
 *   at most the greatest value there of its tangent at the columns' middle,
 *       sum p_i (log c_i + q_i / c_i - 1),   c_i the mean of q_i over the columns.
 * A word is cut open (all moves in turn act before it) as long as its share of the width, up to
 * second order in q_i / c_i - 1, is above a threshold.
 *
 * `wordNorms`, any matrices: the mean of log of the smaller of the Frobenius norm and
 * sqrt(largest column sum x largest row sum) over the words of one length: both bound the
 * Euclidean norm.
 */

/** Entries grow no further than 2^900: their sums stay in range. */
const LARGEST: f64 = 8.452712498170644e270;

let d: usize = 0;
let m: usize = 0;
let entries: usize = 0;
let weights: usize = 0;
let stack: usize = 0;
let scratch: usize = 0;
let threshold: f64 = 0;
let deepest: u32 = 0;
let reached: u32 = 0;
let leaves: f64 = 0;
let most: f64 = 0;
let low: f64 = 0;
let high: f64 = 0;

/** out = a b, rows of d doubles. */
function product(out: usize, a: usize, b: usize): void {
  for (let i: usize = 0; i < d; i++) {
    for (let k: usize = 0; k < d; k++) {
      let sum: f64 = 0;
      for (let j: usize = 0; j < d; j++) {
        sum += load<f64>(a + ((i * d + j) << 3)) * load<f64>(b + ((j * d + k) << 3));
      }
      store<f64>(out + ((i * d + k) << 3), sum);
    }
  }
}

function level(depth: u32): usize {
  return stack + ((<usize>depth * d * d) << 3);
}

/** q_i at the columns of w, move after move, in `scratch`; then the c_i. */
function quotients(w: usize): void {
  const length = entries + ((m * d * (d + 1)) << 3);
  for (let i: usize = 0; i < m; i++) {
    const forms = entries + ((m * d * d + i * d) << 3);
    let sum: f64 = 0;
    for (let k: usize = 0; k < d; k++) {
      let above: f64 = 0;
      let below: f64 = 0;
      for (let j: usize = 0; j < d; j++) {
        const x = load<f64>(w + ((j * d + k) << 3));
        above += load<f64>(forms + (j << 3)) * x;
        below += load<f64>(length + (j << 3)) * x;
      }
      const q = above / below;
      store<f64>(scratch + ((i * d + k) << 3), q);
      sum += q;
    }
    store<f64>(scratch + ((m * d + i) << 3), sum / <f64>d);
  }
}

/** The width between the bounds, up to second order. */
function width(): f64 {
  let top: f64 = -Infinity;
  let bottom: f64 = Infinity;
  for (let k: usize = 0; k < d; k++) {
    let tangent: f64 = 0;
    let square: f64 = 0;
    for (let i: usize = 0; i < m; i++) {
      const e = load<f64>(scratch + ((i * d + k) << 3)) / load<f64>(scratch + ((m * d + i) << 3)) - 1;
      const p = load<f64>(weights + (i << 3));
      tangent += p * e;
      square += p * e * e;
    }
    top = max(top, tangent);
    bottom = min(bottom, tangent - square / 2);
  }
  return top - bottom;
}

/** The bounds themselves, in `low` and `high`. */
function bounds(): void {
  let top: f64 = -Infinity;
  low = Infinity;
  for (let k: usize = 0; k < d; k++) {
    let tangent: f64 = 0;
    let value: f64 = 0;
    for (let i: usize = 0; i < m; i++) {
      const q = load<f64>(scratch + ((i * d + k) << 3));
      const p = load<f64>(weights + (i << 3));
      const log = NativeMath.log(q);
      most = max(most, abs(log));
      value += p * log;
      tangent += p * (q / load<f64>(scratch + ((m * d + i) << 3)) - 1);
    }
    low = min(low, value);
    top = max(top, tangent);
  }
  let middle: f64 = 0;
  for (let i: usize = 0; i < m; i++) {
    middle += load<f64>(weights + (i << 3)) * NativeMath.log(load<f64>(scratch + ((m * d + i) << 3)));
  }
  high = middle + top;
}

/** Means of the bounds over the words that end in the one at this depth; left in `low` and `high`. */
function descend(depth: u32, share: f64): void {
  const w = level(depth);
  reached = max(reached, depth);
  quotients(w);
  let open = depth < deepest && !(share * width() <= threshold);
  if (open) {
    let largest: f64 = 0;
    for (let k: usize = 0; k < d * d; k++) largest = max(largest, load<f64>(w + (k << 3)));
    open = largest < LARGEST;
  }
  if (!open) {
    leaves++;
    bounds();
    return;
  }
  let a: f64 = 0;
  let b: f64 = 0;
  for (let i: usize = 0; i < m; i++) {
    const p = load<f64>(weights + (i << 3));
    product(level(depth + 1), w, entries + ((i * d * d) << 3));
    descend(depth + 1, share * p);
    a += p * low;
    b += p * high;
  }
  low = a;
  high = b;
}

/** The mean of log of the norm's bound over the words below this one. */
function norms(depth: u32): f64 {
  const w = level(depth);
  if (depth == deepest) {
    let squares: f64 = 0;
    let rows: f64 = 0;
    let columns: f64 = 0;
    for (let i: usize = 0; i < d; i++) {
      let row: f64 = 0;
      let column: f64 = 0;
      for (let j: usize = 0; j < d; j++) {
        const x = load<f64>(w + ((i * d + j) << 3));
        squares += x * x;
        row += abs(x);
        column += abs(load<f64>(w + ((j * d + i) << 3)));
      }
      rows = max(rows, row);
      columns = max(columns, column);
    }
    leaves++;
    const value = NativeMath.log(min(squares, rows * columns)) / 2;
    most = max(most, abs(value));
    return value;
  }
  let sum: f64 = 0;
  for (let i: usize = 0; i < m; i++) {
    product(level(depth + 1), entries + ((i * d * d) << 3), w);
    sum += load<f64>(weights + (i << 3)) * norms(depth + 1);
  }
  return sum;
}

function open(at: usize, shares: usize, dimension: u32, moves: u32, work: usize, depth: u32): void {
  entries = at;
  weights = shares;
  d = dimension;
  m = moves;
  stack = work;
  deepest = depth;
  reached = 0;
  leaves = 0;
  most = 0;
}

/** low, high, leaves, deepest word, largest |logarithm|. */
function report(out: usize): void {
  store<f64>(out, low);
  store<f64>(out, high, 8);
  store<f64>(out, leaves, 16);
  store<f64>(out, <f64>reached, 24);
  store<f64>(out, most, 32);
}

/**
 * @param at matrices A_i row after row, then for each the linear form |A_i x|, then |x|
 * @param work room for depth + 1 matrices, the first being the word below which the mean is taken; then
 * for moves x (dimension + 1) doubles
 * @param share the first word's probability
 * @param out five doubles: low, high, leaves, deepest word, largest |logarithm|
 */
export function wordMeans(
  at: usize,
  shares: usize,
  dimension: u32,
  moves: u32,
  work: usize,
  depth: u32,
  share: f64,
  cut: f64,
  out: usize,
): void {
  open(at, shares, dimension, moves, work, depth);
  scratch = level(depth + 1);
  threshold = cut;
  descend(0, share);
  report(out);
}

/** The same arguments and results for words of exactly `depth` moves. */
export function wordNorms(
  at: usize,
  shares: usize,
  dimension: u32,
  moves: u32,
  work: usize,
  depth: u32,
  out: usize,
): void {
  open(at, shares, dimension, moves, work, depth);
  low = norms(0);
  high = low;
  reached = depth;
  report(out);
}
