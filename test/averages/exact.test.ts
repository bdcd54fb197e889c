import { describe, expect, it } from "vitest";
import { exactAverages } from "../../src/averages/exact.js";
import type { ExactFinding } from "../../src/averages/finding.js";
import { LimitError } from "../../src/errors.js";
import type { Rational } from "../../src/exact/rational.js";
import { type Quantity, quantityNumber } from "../../src/quantity/quantity.js";
import { type CommonOptions, withSession } from "../../src/session.js";
import type { Observable, Term, Walk } from "../../src/walk/walk.js";
import { dot, move, naivePair, naiveStep, naiveTable, number, phase, point, r, walkOf } from "../dual/naive.js";

const term = (frequency: number[], cos: number, sin = 0): Term => ({
  frequency: frequency.map(BigInt),
  cos: number(cos),
  sin: number(sin),
});
const terms = (label: string, ...list: Term[]): Observable => ({ type: "terms", label, terms: list });
const small = {
  entries: 2 ** 16,
  products: 2e5,
  last: 60,
  states: 100,
  normStates: 1,
  poisson: 1000,
  boxTerms: 60,
  points: 2000,
};
const run = (walk: Walk, options: CommonOptions = {}) =>
  withSession({ effort: "quick", workers: 0, ...options }, (session) => exactAverages(walk, session, small));
const first = async (walk: Walk) => (await run(walk)).findings[0] as ExactFinding;

const mirrored = [
  move(
    [
      [0, 1],
      [1, 1],
    ],
    r(1, 3),
    -1,
  ),
  move(
    [
      [1, -2],
      [0, 1],
    ],
    r(1, 6),
    1,
    [r(2, 7), r(-1, 5)],
  ),
  move(
    [
      [2, 1],
      [1, 1],
    ],
    r(1, 2),
    1,
    [r(1, 2), r(0)],
  ),
];
const wave = terms(
  "wave",
  term([0, 0], 5),
  term([1, 0], 1, 2),
  term([-1, 0], 1, 1),
  term([2, -1], 0, 1),
  term([1, 0], 1),
);
const deep = [
  move(
    [
      [1, 1, 0],
      [0, 1, 1],
      [0, 0, 1],
    ],
    r(1, 2),
  ),
  move(
    [
      [0, 0, 1],
      [1, 0, 0],
      [0, 1, -1],
    ],
    r(1, 4),
    1,
    [r(1, 3), r(0), r(1, 4)],
  ),
  move(
    [
      [-1, 0, 0],
      [2, 1, 0],
      [0, 0, 1],
    ],
    r(1, 4),
    -1,
  ),
];

function inside(q: Quantity, x: number, width: number) {
  if (q.standing === "exact") return expect(Math.abs(x - quantityNumber(q))).toBeLessThan(1e-13);
  expect(q.standing).toBe("enclosed");
  expect(Number(q.low)).toBeLessThanOrEqual(x + 1e-14);
  expect(Number(q.high)).toBeGreaterThanOrEqual(x - 1e-14);
  return expect(Number(q.high) - Number(q.low)).toBeLessThan(width);
}

describe("correlations under Haar measure", () => {
  it("agree with integration on a fine grid", async () => {
    const walk = walkOf(mirrored, { type: "uniform" }, [wave]);
    const { correlations, mean } = await first(walk);
    expect(mean).toMatchObject({ value: 5, standing: "exact" });
    // Merged by hand: 3 cos(2 pi x_1) + sin(2 pi x_1) + sin(2 pi (2 x_1 - x_2)); exact for frequencies below 41 / 2.
    const N = 41;
    const f = (x: number, y: number) => {
      const a = 2 * Math.PI * x;
      return 3 * Math.cos(a) + Math.sin(a) + Math.sin(2 * a - 2 * Math.PI * y);
    };
    const maps = walk.moves.map((m) => ({
      p: m.probability.toNumber(),
      m: m.matrix.map((row) => row.map(Number)),
      b: m.translation?.map((x) => x.toNumber()) ?? [0, 0],
    }));
    const later = (n: number, x: number, y: number): number =>
      n === 0
        ? f(x, y)
        : maps.reduce(
            (s, { p, m, b }) =>
              s + p * later(n - 1, m[0]![0]! * x + m[0]![1]! * y + b[0]!, m[1]![0]! * x + m[1]![1]! * y + b[1]!),
            0,
          );
    for (const n of [0, 1, 2]) {
      let sum = 0;
      for (let a = 0; a < N; a++) for (let b = 0; b < N; b++) sum += f(a / N, b / N) * later(n, a / N, b / N);
      inside(correlations[n]!, sum / N ** 2, 1e-12);
    }
  });

  for (const [name, moves, observable] of [
    ["dimension 2", mirrored, wave],
    ["dimension 3", deep, terms("probe", term([1, 0, -1], 1, -1), term([0, 1, 0], 2))],
    [
      "dimension 8",
      [
        move(
          Array.from({ length: 8 }, (_, i) => Array.from({ length: 8 }, (_, j) => +(j === (i + 1) % 8))),
          r(1, 2),
          -1,
        ),
        move(
          Array.from({ length: 8 }, (_, i) => Array.from({ length: 8 }, (_, j) => +(i === j || (i === 0 && j === 1)))),
          r(1, 2),
        ),
      ],
      terms("probe", term([1, 0, 0, 0, 0, 0, 0, 0], 1), term([0, 1, 0, 0, 0, 0, 0, 1], 0, 1)),
    ],
  ] as const) {
    it(`at half depth agree with the full depth, ${name}`, async () => {
      const walk = walkOf([...moves], { type: "uniform" }, [observable]);
      const { correlations, reached } = await first(walk);
      expect(reached!.step).toBeGreaterThan(6);
      const list = observable.type === "terms" ? observable.terms : [];
      const start = naiveTable(
        list
          .filter((t) => t.frequency.some((k) => k !== 0n))
          .flatMap((t) => {
            const [c, s] = [t.cos.toNumber() / 2, t.sin.toNumber() / 2];
            return [
              { k: [...t.frequency], c: { re: c, im: -s } },
              { k: t.frequency.map((x) => -x), c: { re: c, im: s } },
            ];
          }),
      );
      const dual = walk.moves.map((m) => ({
        matrix: m.matrix.map((_, j) => m.matrix.map((row) => row[j]!)),
        weight: m.probability.toNumber(),
        ...(m.translation === undefined ? {} : { translation: m.translation.map((x) => x.rational!) }),
      }));
      let now = start;
      for (let n = 0; n <= 6; n++, now = naiveStep(now, dual)) inside(correlations[n]!, naivePair(start, now), 1e-12);
    });
  }

  it("are exactly zero when no frequency comes back, as under a positive pair", async () => {
    const pair = [
      move(
        [
          [2, 1],
          [1, 1],
        ],
        r(1, 2),
      ),
      move(
        [
          [3, 1],
          [2, 1],
        ],
        r(1, 2),
      ),
    ];
    const { correlations, variance } = await first(
      walkOf(pair, { type: "uniform" }, [terms("probe", term([1, 0], 1))]),
    );
    expect(correlations.slice(1).every((c) => c.standing === "exact" && c.value === 0)).toBe(true);
    inside(variance!, 0.5, 1e-11);
  });

  it("give <f, f> alone where a matrix entry needs more than 63 bits", async () => {
    const wide = [
      move(
        [
          [1, 2n ** 70n],
          [0, 1],
        ],
        r(1, 2),
      ),
      move(
        [
          [1, 0],
          [1, 1],
        ],
        r(1, 2),
      ),
    ];
    const f = await first(walkOf(wide, { type: "uniform" }, [wave]));
    // (9 + 1 + 1) / 2
    expect(f.correlations).toMatchObject([{ value: "11/2", standing: "exact" }]);
    expect(f.reached!.reason).toMatch(/63 bits/);
  });

  it("know a constant, however it is written", async () => {
    const zero = terms("nothing", term([1, 2], 1, 1), term([-1, -2], -1, 1), term([0, 0], 3, 7));
    const f = await first(walkOf(mirrored, { type: "uniform" }, [zero]));
    expect(f.mean.value).toBe(3);
    expect(f.variance).toMatchObject({ value: 0, standing: "exact" });
    expect(f.degenerate.verdict).toBe("holds");
    expect(f.correlations.map((c) => c.value)).toEqual([0]);
  });

  it("give the same for any number of workers, and stop at the memory limit with a clear error", async () => {
    const walk = walkOf(mirrored, { type: "uniform" }, [wave, terms("east", term([1, 0], 1))]);
    expect((await run(walk, { workers: 0 })).findings).toEqual((await run(walk, { workers: 1 })).findings);
    await expect(run(walk, { memoryLimit: 2 ** 17 })).rejects.toThrow(LimitError);
  });
});

describe("boxes", () => {
  it("have their volume as mean and V (1 - V) as the first correlation", async () => {
    const box: Observable = {
      type: "box",
      label: "corner",
      low: [number(0), number(1, 3)],
      high: [number(1, 2), number(1, 1)],
    };
    const f = await first(walkOf(mirrored, { type: "uniform" }, [box]));
    expect(f.mean).toMatchObject({ value: "1/3", standing: "exact" });
    expect(f.correlations).toMatchObject([{ value: "2/9", standing: "exact" }]);
    expect(f.variance).toBeUndefined();
    expect(f.degenerate.verdict).toBe("fails");
  });
});

describe("a rational start", () => {
  const pair = [
    move(
      [
        [2, 1],
        [1, 1],
      ],
      r(1, 3),
    ),
    move(
      [
        [1, 0],
        [1, 1],
      ],
      r(2, 3),
    ),
  ];
  const corner: Observable = {
    type: "box",
    label: "corner",
    low: [number(0), number(0)],
    high: [number(1, 2), number(1, 4)],
  };
  const east = terms("east", term([0, 0], 1), term([1, 0], 1), term([1, 1], 0, 3));

  it("is about the finite orbit: exact means", async () => {
    const { findings, orbit } = await run(walkOf(pair, point([1, 5], [2, 5]), [east, corner]));
    // All points with denominator 5 but 0: the sum of cos(2 pi x_1) over them is -1.
    expect(orbit).toEqual({ denominator: 5, size: 24 });
    expect(findings[0]!.mean).toMatchObject({ value: "23/24", standing: "exact" });
    // x_1 in {0, 1, 2} / 5 and x_2 in {0, 1} / 5, without 0.
    expect(findings[1]!.mean).toMatchObject({ value: "5/24", standing: "exact" });
  });

  it("encloses a mean that has no such reason to be rational", async () => {
    const turn = [
      move(
        [
          [0, -1],
          [1, 0],
        ],
        r(1),
      ),
    ];
    const walk = walkOf(turn, point([1, 7], [2, 7]), [terms("east", term([1, 0], 1), term([0, 3], 0, 1))]);
    const { mean } = await first(walk);
    const points = [
      [1, 2],
      [-2, 1],
      [-1, -2],
      [2, -1],
    ];
    const expected =
      points.reduce((s, [x, y]) => s + Math.cos((2 * Math.PI * x!) / 7) + Math.sin((6 * Math.PI * y!) / 7), 0) / 4;
    inside(mean, expected, 1e-13);
  });

  it("has correlations and variance of the chain on the orbit", async () => {
    const walk = walkOf(
      [
        ...pair,
        move(
          [
            [1, 1],
            [0, 1],
          ],
          r(1, 3),
          1,
          [r(1, 2), r(0)],
        ),
      ].map((m) => ({ ...m, weight: r(1, 3) })),
      point([1, 3], [0, 1]),
      [east, corner],
    );
    const { findings, orbit } = await run(walk);
    for (const [i, f] of findings.entries()) {
      // Straight from the definition, on a list of points made here.
      const points: Rational[][] = [[r(1, 3), r(0)]];
      const at = new Map([[points[0]!.join(), 0]]);
      const images: number[][] = [];
      for (let s = 0; s < points.length; s++) {
        images.push(
          walk.moves.map((m) => {
            const x = m.matrix.map((row, j) =>
              dot(row, points[s]!)
                .add(m.translation?.[j]?.rational ?? r(0))
                .mod1(),
            );
            if (!at.has(x.join())) at.set(x.join(), points.push(x) - 1);
            return at.get(x.join())!;
          }),
        );
      }
      expect(points.length).toBe(orbit!.size);
      const value = ([x, y]: Rational[]) => {
        if (i === 1) return +(x!.compare(r(1, 2)) < 0 && y!.compare(r(1, 4)) < 0);
        return 1 + phase(x!).re + 3 * phase(x!.add(y!)).im;
      };
      const values = points.map(value);
      const mean = values.reduce((a, b) => a + b) / values.length;
      expect(quantityNumber(f.mean)).toBeCloseTo(mean, 13);
      const centred = values.map((v) => v - mean);
      let g = centred;
      let sum = 0;
      for (let n = 0; n < 400; n++) {
        const c = centred.reduce((s, v, j) => s + v * g[j]!, 0) / values.length;
        if (n < 40) inside(f.correlations[n]!, c, 1e-12);
        sum += n === 0 ? c : 2 * c;
        g = g.map((_, s) => images[s]!.reduce((t, to) => t + g[to]! / 3, 0));
      }
      expect(quantityNumber(f.variance!)).toBeCloseTo(sum, 8);
      expect(f.degenerate.verdict).toBe("fails");
    }
  });

  it("at 0 is a single point", async () => {
    const { findings, orbit } = await run(walkOf(pair, point([0, 1], [0, 1]), [east, corner]));
    expect(orbit).toEqual({ denominator: 1, size: 1 });
    expect(findings.map((f) => [f.mean.value, f.variance!.value, f.degenerate.verdict])).toEqual([
      [2, 0, "holds"],
      [1, 0, "holds"],
    ]);
  });

  it("says so when the orbit is too large to list", async () => {
    const { findings, warnings } = await run(walkOf(pair, point([1, 1000003], [5, 1000003]), [east, corner]));
    expect(findings.map((f) => f.mean.standing)).toEqual(["estimated", "estimated"]);
    expect(findings[0]!.degenerate.verdict).toBe("undecided");
    expect(warnings[0]).toMatch(/1000003/);
  });

  it("recognises variance 0 for a box on a periodic orbit, exactly", async () => {
    const turn = [
      move(
        [
          [0, -1],
          [1, 0],
        ],
        r(1),
      ),
    ];
    const { findings } = await run(walkOf(turn, point([1, 5], [2, 5]), [corner]));
    expect(findings[0]!.degenerate.verdict).toBe("holds");
    expect(findings[0]!.variance).toMatchObject({ value: 0, standing: "exact" });
  });
});
