/** The tray's walk in BigInt: by the tree, and move by move. */

const FACTORS = [
  [2n, 1n, 1n, 1n],
  [3n, 1n, 2n, 1n],
] as const;
const LEAF = 64;

type Product = readonly [bigint, bigint, bigint, bigint];

function times(a: Product, b: Product): Product {
  return [a[0] * b[0] + a[1] * b[2], a[0] * b[1] + a[1] * b[3], a[2] * b[0] + a[3] * b[2], a[2] * b[1] + a[3] * b[3]];
}

const bitsOf = (p: Product) => 4 * Math.max(...p.map((x) => x.toString(16).length)) + 1;

/** A node of the tree; only left halves' products are formed. */
interface Node {
  readonly from: number;
  readonly to: number;
  readonly bits: number;
  readonly product?: Product;
  readonly halves?: readonly [Node, Node];
}

function build(choices: Uint16Array, from: number, to: number, formed: boolean): Node {
  if (to - from <= LEAF) {
    let product: Product = [1n, 0n, 0n, 1n];
    for (let k = from; k < to; k++) product = times(FACTORS[choices[k] as number] as Product, product);
    return { from, to, bits: bitsOf(product), product };
  }
  const middle = from + LEAF * 2 ** Math.floor(Math.log2((to - from - 1) / LEAF));
  const halves = [build(choices, from, middle, true), build(choices, middle, to, formed)] as const;
  const [a, b] = halves;
  if (!formed) return { from, to, bits: a.bits + b.bits, halves };
  const product = times(b.product as Product, a.product as Product);
  return { from, to, bits: bitsOf(product), product, halves };
}

/** All positions 0, ..., n - 1 to 64 bits. @param starts x and y as integers over 2^bits */
export function bigintTree(choices: Uint16Array, starts: readonly [bigint, bigint], bits: number): BigUint64Array {
  const out = new BigUint64Array(2 * choices.length);
  const walk = (node: Node, x: bigint, y: bigint, held: number): void => {
    const want = node.bits + 130;
    if (held > want) {
      const cut = BigInt(held - want);
      walk(node, x >> cut, y >> cut, want);
      return;
    }
    if (node.halves === undefined) {
      const down = BigInt(held - 64);
      for (let k = node.from; k < node.to; k++) {
        out[2 * k] = x >> down;
        out[2 * k + 1] = y >> down;
        const [a, b, c, d] = FACTORS[choices[k] as number] as Product;
        [x, y] = [BigInt.asUintN(held, a * x + b * y), BigInt.asUintN(held, c * x + d * y)];
      }
      return;
    }
    const [left, right] = node.halves;
    walk(left, x, y, held);
    const [a, b, c, d] = left.product as Product;
    walk(right, BigInt.asUintN(held, a * x + b * y), BigInt.asUintN(held, c * x + d * y), held);
  };
  walk(build(choices, 0, choices.length, false), starts[0], starts[1], bits);
  return out;
}

/** The same, move by move with all the bits: what one would write first. */
export function plainBigInt(choices: Uint16Array, starts: readonly [bigint, bigint], bits: number): BigUint64Array {
  const out = new BigUint64Array(2 * choices.length);
  const down = BigInt(bits - 64);
  let [x, y] = starts;
  for (let k = 0; k < choices.length; k++) {
    out[2 * k] = x >> down;
    out[2 * k + 1] = y >> down;
    const [a, b, c, d] = FACTORS[choices[k] as number] as Product;
    [x, y] = [BigInt.asUintN(bits, a * x + b * y), BigInt.asUintN(bits, c * x + d * y)];
  }
  return out;
}
