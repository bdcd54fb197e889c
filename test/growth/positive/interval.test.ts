import { describe, expect, it } from "vitest";
import { Rational } from "../../../src/exact/rational.js";
import { planarCone } from "../../../src/growth/positive/interval.js";
import { loadReal } from "../../../src/kernel/real.js";
import { type Numbers, RANDOM_FIBONACCI, shear, walkOf } from "../walks.js";
import { POSITIVE_SETS } from "./walks.js";

describe("planarCone", () => {
  for (const [name, set] of POSITIVE_SETS) {
    it(`finds an interval that is mapped into itself: ${name}`, async () => {
      const cone = planarCone(walkOf(set), await loadReal());
      expect(cone?.reach).toBeGreaterThan(2);
      for (const { rows } of cone!.moves) {
        const [[a, b], [c, d]] = rows as [[bigint, bigint], [bigint, bigint]];
        const determinant = a * d - b * c;
        expect(determinant < 0n ? -determinant : determinant).toBe(cone!.scale * cone!.scale);
        for (const u of [Rational.of(-1), Rational.of(1, 3), Rational.ONE]) {
          const factor = Rational.of(c).mul(u).add(Rational.of(d));
          const image = Rational.of(a).mul(u).add(Rational.of(b)).div(factor);
          expect(factor.sign()).toBe(1);
          expect(image.abs().compare(Rational.ONE)).toBeLessThanOrEqual(0);
        }
      }
    });
  }

  const none: [string, readonly Numbers[]][] = [
    ["random Fibonacci", RANDOM_FIBONACCI],
    ["parabolic moves", [shear(2, 0, 1), shear(2, 1, 0)]],
    ["a parabolic product", [shear(2, 0, 1).map((r) => [...r].reverse()), shear(2, 1, 0).map((r) => [...r].reverse())]],
    [
      "an elliptic move",
      [
        [
          [2, 1],
          [1, 1],
        ],
        [
          [0, -1],
          [1, 0],
        ],
      ],
    ],
    [
      "eigenlines that interleave",
      [
        [
          [2, 1],
          [1, 1],
        ],
        [
          [2, -1],
          [-1, 1],
        ],
        [
          [1, -1],
          [-1, 2],
        ],
      ],
    ],
  ];
  for (const [name, set] of none) {
    it(`finds none: ${name}`, async () => {
      expect(planarCone(walkOf(set), await loadReal())).toBeUndefined();
    });
  }
});
