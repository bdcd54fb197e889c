import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { LimitError } from "../../src/errors.js";
import { canonicalText, fnv1a64, walkHash } from "../../src/walk/hash.js";
import {
  determinant,
  type IntegerMatrix,
  identityMatrix,
  inverseMatrix,
  matrixAsI64,
  multiplyMatrices,
  transpose,
} from "../../src/walk/integers.js";

/** The determinant by its definition, along the first row. */
function expanded(a: IntegerMatrix): bigint {
  if (a.length === 0) return 1n;
  return a[0].reduce((sum, c, j) => {
    const minor = a.slice(1).map((row) => row.filter((_, k) => k !== j));
    return sum + (j % 2 === 0 ? c : -c) * expanded(minor);
  }, 0n);
}

const entry = fc.oneof(fc.bigInt({ min: -3n, max: 3n }), fc.bigInt({ min: -(1n << 70n), max: 1n << 70n }));
const square = (least: number, most: number) =>
  fc
    .integer({ min: least, max: most })
    .chain((n) => fc.array(fc.array(entry, { minLength: n, maxLength: n }), { minLength: n, maxLength: n }));

/** Products of elementary matrices and a swap: determinant 1 or -1. */
const unimodular = fc
  .tuple(
    fc.integer({ min: 2, max: 8 }),
    fc.array(fc.tuple(fc.nat(7), fc.nat(7), fc.bigInt({ min: -9n, max: 9n })), { maxLength: 20 }),
  )
  .map(([d, steps]) =>
    steps.reduce((a: bigint[][], [i, j, c]) => {
      const step = identityMatrix(d);
      if (i % d === j % d) step[i % d][i % d] = -1n;
      else step[i % d][j % d] = c;
      return multiplyMatrices(a, step);
    }, identityMatrix(d)),
  );

describe("integer matrices", () => {
  it("determinants agree with the definition, zero pivots included", () => {
    fc.assert(
      fc.property(square(1, 6), (a) => {
        expect(determinant(a)).toBe(expanded(a));
      }),
    );
    expect(
      determinant([
        [0n, 0n],
        [1n, 2n],
      ]),
    ).toBe(0n);
    expect(
      determinant([
        [0n, 1n, 0n],
        [0n, 0n, 1n],
        [1n, 0n, 0n],
      ]),
    ).toBe(1n);
  });

  it("inverts matrices of determinant 1 and -1", () => {
    fc.assert(
      fc.property(unimodular, (a) => {
        expect(multiplyMatrices(a, inverseMatrix(a))).toEqual(identityMatrix(a.length));
        expect(transpose(transpose(a))).toEqual(a);
      }),
    );
    expect(() =>
      inverseMatrix([
        [2n, 0n],
        [0n, 1n],
      ]),
    ).toThrow("inverseMatrix: determinant 2; accepted: 1 or -1");
  });

  it("go to 64 bits row by row, or say which entry does not fit", () => {
    const [least, most] = [-(1n << 63n), (1n << 63n) - 1n];
    expect([
      ...matrixAsI64([
        [least, 1n],
        [2n, most],
      ]),
    ]).toEqual([least, 1n, 2n, most]);
    expect(() =>
      matrixAsI64([
        [most + 1n, 0n],
        [0n, 1n],
      ]),
    ).toThrow(LimitError);
    expect(() =>
      matrixAsI64([
        [1n, least - 1n],
        [0n, 1n],
      ]),
    ).toThrow("the matrix entry -9223372036854775809 is beyond 64 bits");
  });
});

describe("the fingerprint of a walk", () => {
  it("does not see the order of keys, but everything else", () => {
    const a = {
      document: {
        torwend: 1,
        moves: [
          {
            matrix: [
              [1, 2],
              [0, 1],
            ],
            label: "é",
          },
        ],
      },
    };
    const b = {
      document: {
        moves: [
          {
            label: "é",
            matrix: [
              [1, 2],
              [0, 1],
            ],
          },
        ],
        torwend: 1,
      },
    };
    expect(walkHash(a)).toBe(walkHash(b));
    expect(walkHash(a)).toMatch(/^[0-9a-f]{16}$/);
    const others = [
      {
        torwend: 1,
        moves: [
          {
            matrix: [
              [1, 2],
              [1, 1],
            ],
            label: "é",
          },
        ],
      },
      {
        torwend: 1,
        moves: [
          {
            matrix: [
              [1, 2],
              [0, 1],
            ],
            label: "e",
          },
        ],
      },
      { torwend: 1, moves: [{ matrix: [[12], [0, 1]], label: "é" }] },
    ];
    const seen = new Set([walkHash(a), ...others.map((document) => walkHash({ document }))]);
    expect(seen.size).toBe(4);
    expect(canonicalText({ b: [1, null], a: { d: "x", c: true } })).toBe('{"a":{"c":true,"d":"x"},"b":[1,null]}');
  });

  it("is FNV-1a of 64 bits, against its definition in BigInt", () => {
    fc.assert(
      fc.property(fc.string({ unit: "grapheme" }), (text) => {
        let h = 0xcbf29ce484222325n;
        for (const byte of new TextEncoder().encode(text)) h = BigInt.asUintN(64, (h ^ BigInt(byte)) * 0x100000001b3n);
        expect(fnv1a64(text)).toBe(h.toString(16).padStart(16, "0"));
      }),
    );
  });
});
