import { Decimal } from "decimal.js";
import { describe, expect, it } from "vitest";
import { evaluationError, observeProgram } from "../../src/averages/program.js";
import { Rational } from "../../src/exact/rational.js";
import { drawStartWords } from "../../src/kernel/draws.js";
import { type KernelTarget, loadKernel } from "../../src/kernel/kernel.js";
import { OBSERVE_BLOCK, type ObserveProgram, Observer } from "../../src/kernel/observe.js";
import type { Walk } from "../../src/walk/walk.js";
import { box, fraction, makeWalk, STROKES, wave } from "./walks.js";

const TARGETS: KernelTarget[] = ["simd", "plain"];
const Fine = Decimal.clone({ precision: 50 });
const PI = Fine.acos(-1);
const FULL = 1n << 64n;

async function observer(target: KernelTarget, program: ObserveProgram): Promise<Observer> {
  return new Observer(await loadKernel({ target }), program);
}

async function randomPath(rows: number, dimension: number): Promise<BigUint64Array> {
  return drawStartWords(await loadKernel(), 5n, 0, 0, rows * dimension);
}

/** cos and sin of 2 pi p / 2^64, right to 40 digits. */
function exactPair(p: bigint): [Decimal, Decimal] {
  const angle = new Fine(p.toString()).div(FULL.toString()).mul(PI).mul(2);
  return [angle.cos(), angle.sin()];
}

describe("phases", () => {
  for (const target of TARGETS) {
    it(`cosine and sine within 2^-51 at random and at awkward phases (${target})`, async () => {
      const eighth = 1n << 61n;
      const corners = Array.from({ length: 9 }, (_, i) =>
        [-1n, 0n, 1n, 1n << 11n].map((e) => BigInt.asUintN(64, BigInt(i) * eighth + e)),
      ).flat();
      const phases = [...corners, ...(await randomPath(301, 1))];
      const path = new BigUint64Array(2 * phases.length);
      for (const [i, p] of phases.entries()) path[2 * i] = p;
      const both = {
        dimension: 2,
        frequencies: [[1n, 0n]],
        observables: [
          { type: "waves", waves: [{ frequency: 0, cos: 1, sin: 0 }] },
          { type: "waves", waves: [{ frequency: 0, cos: 0, sin: 1 }] },
        ],
      } satisfies ObserveProgram;
      const values = (await observer(target, both)).valuesAlong(path, phases.length);
      for (const [i, p] of phases.entries()) {
        const [cos, sin] = exactPair(p);
        expect(cos.sub(values[i]!).abs().toNumber()).toBeLessThan(2 ** -51);
        expect(
          sin
            .sub(values[phases.length + i]!)
            .abs()
            .toNumber(),
        ).toBeLessThan(2 ** -51);
      }
    });
  }

  it("quarter turns are exact", async () => {
    const program = observeProgram(makeWalk(STROKES, { type: "uniform" }, [wave([1, 0], 1), wave([1, 0], 0, 1)]));
    const path = BigUint64Array.from([0n, 0n, 1n << 62n, 0n, 1n << 63n, 0n, 3n << 62n, 0n]);
    for (const target of TARGETS) {
      const values = [...(await observer(target, program)).valuesAlong(path, 4)].map((x) => x + 0);
      expect(values).toEqual([1, 0, -1, 0, 0, 1, 0, -1]);
    }
  });
});

/** The observables at a row, phases in BigInt, cosines in many digits. */
function naive(walk: Walk, row: bigint[]): Decimal[] {
  return walk.observables.map((f) => {
    if (f.type === "box") {
      // The row is the dyadic point itself, so exact fractions decide.
      const inside = row.every((x, j) => {
        const at = Rational.of(x, FULL);
        return at.compare(f.low[j]!.rational!) >= 0 && at.compare(f.high[j]!.rational!) < 0;
      });
      return new Fine(inside ? 1 : 0);
    }
    return f.terms.reduce((s, t) => {
      const p = BigInt.asUintN(
        64,
        t.frequency.reduce((q, k, j) => q + k * row[j]!, 0n),
      );
      const [cos, sin] = exactPair(p);
      return s.add(cos.mul(t.cos.toNumber())).add(sin.mul(t.sin.toNumber()));
    }, new Fine(0));
  });
}

describe("valuesAlong", () => {
  const observables = [
    wave([1, 0, 0], 1),
    wave([-1, 0, 0], 0, 3),
    {
      ...wave([0, 0, 0], 2),
      terms: [...terms([0, 0, 0], 2, 0), ...terms([7, -5, 1], -1, 4), ...terms([-7, 5, -1], 2, 2)],
    },
    wave([2 ** 40, -(2 ** 50), 3], 1, 1),
    wave([1, 1, 1], 0, 0),
    box(
      [
        [0, 1],
        [0, 1],
        [0, 1],
      ],
      [
        [1, 2],
        [1, 1],
        [1, 1],
      ],
    ),
    box(
      [
        [1, 4],
        [0, 1],
        [1, 2],
      ],
      [
        [1, 1],
        [1, 3],
        [1, 1],
      ],
    ),
    box(
      [
        [0, 1],
        [0, 1],
        [0, 1],
      ],
      [
        [1, 1],
        [1, 1],
        [1, 1],
      ],
    ),
  ];
  function terms(frequency: number[], cos: number, sin: number) {
    return [{ frequency: frequency.map(BigInt), cos: fraction(cos), sin: fraction(sin) }];
  }
  const identity = [
    [1, 0, 0],
    [0, 1, 0],
    [0, 0, 1],
  ];
  const walk = makeWalk([identity], { type: "uniform" }, observables);
  const program = observeProgram(walk);

  it("merges frequencies up to sign", () => {
    expect(program.frequencies).toHaveLength(5);
  });

  for (const target of TARGETS) {
    it(`agrees with many digits within the stated error (${target})`, async () => {
      const path = await randomPath(60, 3);
      path.set([0n, 0n, 1n << 63n, FULL - 1n, FULL - 1n, FULL - 1n, 1n << 62n, 0n, 1n << 63n, 1n << 63n, 0n, 0n]);
      const values = (await observer(target, program)).valuesAlong(path, 60);
      for (let r = 0; r < 60; r++) {
        for (const [i, exact] of naive(walk, [...path.subarray(3 * r, 3 * r + 3)]).entries()) {
          // Rows are the points themselves here, so that the position's share (large for the fourth) must not be used.
          const bound = i === 3 ? 2 ** -48 : evaluationError(observables[i]!);
          expect(
            exact
              .sub(values[i * 60 + r]!)
              .abs()
              .toNumber(),
          ).toBeLessThanOrEqual(bound);
        }
      }
    });
  }

  it("gives the same bits in both builds, for every length and dimension", async () => {
    for (const rows of [1, 2, 3, 17, OBSERVE_BLOCK, OBSERVE_BLOCK + 1]) {
      const path = await randomPath(rows, 3);
      const [a, b] = await Promise.all(TARGETS.map(async (t) => (await observer(t, program)).valuesAlong(path, rows)));
      expect(new BigUint64Array(a!.buffer)).toEqual(new BigUint64Array(b!.buffer));
    }
    const k = [1n, -2n, 3n, 0n, 5n, 0n, 0n, -1n];
    const wide: ObserveProgram = {
      dimension: 8,
      frequencies: [k],
      observables: [{ type: "waves", waves: [{ frequency: 0, cos: 1, sin: 2 }] }],
    };
    const path = await randomPath(33, 8);
    const [a, b] = await Promise.all(TARGETS.map(async (t) => (await observer(t, wide)).valuesAlong(path, 33)));
    expect(a).toEqual(b);
    for (let r = 0; r < 33; r++) {
      const [cos, sin] = exactPair(
        BigInt.asUintN(
          64,
          k.reduce((q, c, j) => q + c * path[8 * r + j]!, 0n),
        ),
      );
      expect(cos.add(sin.mul(2)).sub(a![r]!).abs().toNumber()).toBeLessThan(2 ** -49);
    }
  });

  it("a fraction on a side is inside at the low end, outside at the high one", async () => {
    const third = FULL / 3n;
    const at = observeProgram(
      makeWalk(STROKES, { type: "uniform" }, [
        box(
          [
            [1, 3],
            [0, 1],
          ],
          [
            [1, 1],
            [1, 1],
          ],
        ),
        box(
          [
            [0, 1],
            [0, 1],
          ],
          [
            [1, 3],
            [1, 1],
          ],
        ),
      ]),
    );
    const values = (await observer("simd", at)).valuesAlong(BigUint64Array.from([third, 0n, third - 1n, 0n]), 2);
    expect([...values]).toEqual([1, 0, 0, 1]);
  });

  it("a box thinner than the resolution is empty", async () => {
    const thin = makeWalk(STROKES, { type: "uniform" }, [
      {
        type: "box",
        label: "thin",
        low: [fraction(1, 3), fraction(0)],
        high: [fraction((1n << 80n) + 3n, 3n << 80n), fraction(1)],
      },
    ]);
    const values = (await observer("simd", observeProgram(thin))).valuesAlong(BigUint64Array.from([FULL / 3n, 0n]), 1);
    expect([...values]).toEqual([0]);
  });
});

describe("segmentSums", () => {
  for (const target of TARGETS) {
    it(`adds the values of each segment, across blocks (${target})`, async () => {
      const walk = makeWalk(STROKES, { type: "uniform" }, [
        wave([3, 1], 1, 1),
        box(
          [
            [0, 1],
            [0, 1],
          ],
          [
            [1, 2],
            [1, 2],
          ],
        ),
      ]);
      const rows = 2 * OBSERVE_BLOCK + 77;
      const path = await randomPath(rows, 2);
      const o = await observer(target, observeProgram(walk));
      const values = o.valuesAlong(path, rows);
      const ends = [1, 2, 5, 1000, OBSERVE_BLOCK, OBSERVE_BLOCK + 1, rows - 1, rows];
      const sums = new Float64Array(2 * ends.length);
      o.segmentSums(path, ends, sums);
      for (const [j, end] of ends.entries()) {
        for (const i of [0, 1]) {
          const part = values.subarray(i * rows + (ends[j - 1] ?? 0), i * rows + end);
          const exact = part.reduce((s, v) => s.add(Rational.fromNumber(v)), Rational.ZERO).toNumber();
          expect(Math.abs(sums[i * ends.length + j]! - exact)).toBeLessThanOrEqual(2 ** -51 * Math.abs(exact));
        }
      }
    });
  }

  it("gives the same bits in both builds", async () => {
    const program = observeProgram(makeWalk(STROKES, { type: "uniform" }, [wave([3, 1], 1, 1)]));
    const path = await randomPath(3000, 2);
    const [a, b] = await Promise.all(
      TARGETS.map(async (t) => {
        const out = new Float64Array(3);
        (await observer(t, program)).segmentSums(path, [10, 2999, 3000], out);
        return out;
      }),
    );
    expect(a).toEqual(b);
  });
});
