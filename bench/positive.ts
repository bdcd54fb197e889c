/** Proofs for positive sets: the certificate at several precisions, enumeration of words, and its kernel against plain TypeScript. */
import { PositiveSet } from "../src/growth/positive/positive.js";
import { meansJob } from "../src/growth/words.js";
import { loadKernel } from "../src/kernel/kernel.js";
import { loadReal, type Real } from "../src/kernel/real.js";
import { type WordTable, wordMeans, wordNorms } from "../src/kernel/words.js";
import { parseWalk } from "../src/walk/parse.js";
import { type Comparison, compare } from "./compare.js";

const DEPTH = 15;

const PAIR = parseWalk({
  torwend: 1,
  title: "bench",
  dimension: 2,
  moves: [
    {
      matrix: [
        [2, 1],
        [1, 1],
      ],
    },
    {
      matrix: [
        [3, 1],
        [2, 1],
      ],
    },
  ],
});

const SPACE = parseWalk({
  torwend: 1,
  title: "bench",
  dimension: 3,
  moves: [
    {
      matrix: [
        [1, 1, 1],
        [1, 2, 2],
        [1, 2, 3],
      ],
    },
    {
      matrix: [
        [2, 1, 1],
        [1, 1, 1],
        [1, 1, 2],
      ],
    },
  ],
});

/** The mean of log of the norm's bound over words, by recursion on arrays. */
function plainNorms({ dimension: d, moves: m, entries, shares }: WordTable, real: Real): number {
  const unit = Float64Array.from({ length: d * d }, (_, k) => (k % (d + 1) === 0 ? 1 : 0));
  const mean = (w: Float64Array, left: number): number => {
    if (left === 0) {
      let squares = 0;
      const [rows, columns] = [new Float64Array(d), new Float64Array(d)];
      for (let i = 0; i < d; i++) {
        for (let j = 0; j < d; j++) {
          const x = w[i * d + j]!;
          squares += x * x;
          rows[i]! += Math.abs(x);
          columns[j]! += Math.abs(x);
        }
      }
      return real.log(Math.min(squares, Math.max(...rows) * Math.max(...columns))) / 2;
    }
    let sum = 0;
    for (let a = 0; a < m; a++) {
      const next = new Float64Array(d * d);
      for (let i = 0; i < d; i++) {
        for (let k = 0; k < d; k++) {
          let s = 0;
          for (let j = 0; j < d; j++) s += entries[a * d * d + i * d + j]! * w[j * d + k]!;
          next[i * d + k] = s;
        }
      }
      sum += shares[a]! * mean(next, left - 1);
    }
    return sum;
  };
  return mean(unit, DEPTH);
}

interface Bounds {
  readonly low: number;
  readonly high: number;
}

const meet = (a: Bounds, b: Bounds) => a.low <= b.high && b.low <= a.high;

export async function suite(): Promise<Comparison[]> {
  const [kernel, scalar, real] = await Promise.all([loadKernel(), loadKernel({ target: "plain" }), loadReal()]);
  const certificate = (walk: typeof PAIR, bits: number) => (): Bounds => {
    const { low, high } = PositiveSet.of(walk, real)!.exponent(bits);
    // A double's width outward: the ends of many digits are rounded to doubles here.
    return { low: low.toNumber() - 1e-15, high: high.toNumber() + 1e-15 };
  };
  const out: Comparison[] = [];
  for (const [name, walk, precisions] of [
    ["dimension 2", PAIR, [52, 174, 672]],
    ["dimension 3", SPACE, [44]],
  ] as const) {
    const { table } = meansJob(walk, "standard")!;
    out.push(
      await compare(
        `top exponent of a positive pair, ${name}`,
        [
          ...precisions.map((bits) => ({
            label: `certificate, ${Math.floor(bits * 0.301)} digits`,
            run: certificate(walk, bits),
          })),
          { label: "enumeration, 12 digits", run: (): Bounds => wordMeans(kernel, table, 100, 2 ** -56) },
        ],
        meet,
      ),
    );
    out.push(
      await compare(
        `log norm of 2^${DEPTH} words, ${name}`,
        [
          { label: "kernel, SIMD build", run: (): Bounds => wordNorms(kernel, table, DEPTH) },
          { label: "kernel, plain build", run: (): Bounds => wordNorms(scalar, table, DEPTH) },
          {
            label: "TypeScript",
            run: (): Bounds => {
              const mean = plainNorms(table, real);
              return { low: mean, high: mean };
            },
          },
        ],
        meet,
      ),
    );
  }
  return out;
}
