import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { planarGroup } from "../../src/growth/lines.js";
import { exactLogNorms } from "../../src/growth/products.js";
import {
  characteristicPolynomial,
  provedPressure,
  spectralRadius,
  symmetricPower,
} from "../../src/growth/symmetric.js";
import { loadReal } from "../../src/kernel/real.js";
import { determinant, type Numbers, POSITIVE_PAIR, RANDOM_FIBONACCI, shear, walkOf } from "./walks.js";

const square = (size: number) =>
  fc.array(fc.array(fc.bigInt(-5n, 5n), { minLength: size, maxLength: size }), {
    minLength: size,
    maxLength: size,
  });

const times = (a: bigint[][], b: bigint[][]) =>
  a.map((row) => b[0]!.map((_, k) => row.reduce((s, x, j) => s + x * b[j]![k]!, 0n)));

describe("symmetric powers", () => {
  it("are multiplicative", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 2, max: 3 }).chain((d) => fc.tuple(square(d), square(d))),
        fc.integer({ min: 1, max: 4 }),
        ([a, b], s) => {
          expect(symmetricPower(times(a, b), s)).toEqual(times(symmetricPower(a, s), symmetricPower(b, s)));
        },
      ),
      { numRuns: 40 },
    );
  });

  it("have characteristic polynomials that det(x - M) confirms", () => {
    fc.assert(
      fc.property(square(4), fc.bigInt(-9n, 9n), (m, x) => {
        const p = characteristicPolynomial(m);
        const shifted = m.map((row, i) => row.map((y, j) => (i === j ? x - y : -y)));
        expect(p.reduceRight((v, c) => v * x + c, 0n)).toBe(determinant(shifted));
      }),
      { numRuns: 40 },
    );
  });

  it("bisect the largest root, simple or double, integer or not", () => {
    // (x - 3)^2 (x + 1); x^2 - 2; (x^2 - 2)^2; x^3.
    expect(spectralRadius([9n, 3n, -5n, 1n])).toEqual({ integer: 3n });
    expect(spectralRadius([0n, 0n, 0n, 1n])).toEqual({ integer: 0n });
    for (const p of [
      [-2n, 0n, 1n],
      [4n, 0n, -4n, 0n, 1n],
    ]) {
      const r = spectralRadius(p);
      if ("integer" in r) throw new Error("sqrt 2 is no integer");
      const one = 1n << BigInt(2 * r.shift + 1);
      expect(r.low * r.low < one && r.high * r.high > one && r.high - r.low === 1n && r.shift > 50).toBe(true);
    }
  });

  it("give the exact moments' growth: E |A_n...A_1|_F^2 by enumeration", async () => {
    const real = await loadReal();
    const moment = (matrices: readonly Numbers[], n: number): number => {
      let sum = 0n;
      const walk = (m: bigint[][], left: number): void => {
        if (left === 0) sum += m.flat().reduce((s, x) => s + x * x, 0n);
        else
          for (const a of matrices)
            walk(
              times(
                a.map((row) => row.map(BigInt)),
                m,
              ),
              left - 1,
            );
      };
      walk(
        [
          [1n, 0n],
          [0n, 1n],
        ],
        n,
      );
      return Number(sum) / matrices.length ** n;
    };
    for (const set of [POSITIVE_PAIR, RANDOM_FIBONACCI]) {
      const q = provedPressure(walkOf(set), 2)!;
      expect(real.log(moment(set, 10) / moment(set, 9))).toBeCloseTo(q.value as number, 4);
      expect(Number(q.high) - Number(q.low)).toBeLessThan(1e-14);
      expect(q.standing).toBe("enclosed");
    }
    expect(provedPressure(walkOf(RANDOM_FIBONACCI), 1)).toBeUndefined();
    expect(provedPressure(walkOf(RANDOM_FIBONACCI), 0)?.value).toBe(0);
    // Rotations by a quarter turn: every moment stays 1.
    expect(
      provedPressure(
        walkOf([
          [
            [0, -1],
            [1, 0],
          ],
        ]),
        4,
      ),
    ).toMatchObject({ value: 0, standing: "exact" });
    expect(provedPressure(walkOf([shear(8, 0, 1), shear(8, 1, 0)]), 2)?.standing).toBe("enclosed");
  });
});

describe("planarGroup", () => {
  const kinds: [string, Numbers[], string | undefined][] = [
    [
      "the identity",
      [shear(2, 0, 0)].map(() => [
        [1, 0],
        [0, 1],
      ]),
      "finite or flat",
    ],
    [
      "a quarter turn and a reflection",
      [
        [
          [0, -1],
          [1, 0],
        ],
        [
          [1, 0],
          [0, -1],
        ],
      ],
      "finite or flat",
    ],
    [
      "order 6",
      [
        [
          [1, -1],
          [1, 0],
        ],
      ],
      "finite",
    ],
    ["one shear", [shear(2, 0, 1)], "rational line"],
    [
      "shears and a sign on one line",
      [
        shear(2, 0, 1),
        [
          [-1, 3],
          [0, 1],
        ],
      ],
      "rational line",
    ],
    ["one hyperbolic matrix", [POSITIVE_PAIR[0]!], "two lines"],
    [
      "a matrix and its inverse",
      [
        POSITIVE_PAIR[0]!,
        [
          [1, -1],
          [-1, 2],
        ],
      ],
      "two lines",
    ],
    [
      "lines that are exchanged",
      [
        POSITIVE_PAIR[0]!,
        [
          [0, -1],
          [1, 0],
        ],
      ],
      "two lines",
    ],
    ["a positive pair", [...POSITIVE_PAIR], undefined],
    ["random Fibonacci", [...RANDOM_FIBONACCI], undefined],
    ["shears both ways", [shear(2, 0, 1), shear(2, 1, 0)], undefined],
  ];
  for (const [name, matrices, kind] of kinds) {
    it(`${name}: ${kind ?? "none"}`, () => {
      const found = planarGroup(walkOf(matrices))?.kind;
      if (kind === "finite or flat") expect(["finite", "rational line"]).toContain(found);
      else expect(found).toBe(kind);
    });
  }

  it("names exchanges and the expanded line", () => {
    const group = planarGroup(
      walkOf([
        POSITIVE_PAIR[0]!,
        [
          [1, -1],
          [-1, 2],
        ],
        [
          [0, -1],
          [1, 0],
        ],
      ]),
    );
    if (group?.kind !== "two lines") throw new Error("two lines expected");
    const [a, b, c] = group.actions;
    expect([a?.exchanges, b?.exchanges, c?.exchanges]).toEqual([false, false, true]);
    expect(a!.sign * b!.sign).toBe(-1);
  });
});

describe("exactLogNorms", () => {
  it("starts from the moves' own norms", async () => {
    const real = await loadReal();
    const [[log]] = (await exactLogNorms(walkOf([POSITIVE_PAIR[0]!]), 1n, 1, [1], real)) as [[number]];
    expect(log).toBeCloseTo(real.log(7) / 2, 14);
  });
});
