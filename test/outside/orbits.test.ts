import { describe, expect, it } from "vitest";
import { orbits } from "../../src/orbits/orbits.js";
import { quantityNumber } from "../../src/quantity/quantity.js";

/**
 * Gabber and Galil, Explicit constructions of linear-sized superconcentrators (J. Comput.
 * System Sci. 22, 1981), as restated by Hoory, Linial and Wigderson, Expander graphs and
 * their applications (Bull. AMS 43, 2006), section 8: on (Z/q)^2 join (x, y) to
 * (x +- 2y, y), (x +- (2y + 1), y), (x, y +- 2x), (x, y +- (2x + 1)). This 8-regular graph
 * has second eigenvalue at most 5 sqrt(2) < 8, for every q. (Statement from memory.)
 */
function family(q: number): object {
  const [right, left] = [
    [
      [1, 2],
      [0, 1],
    ],
    [
      [1, -2],
      [0, 1],
    ],
  ];
  const [up, down] = [
    [
      [1, 0],
      [2, 1],
    ],
    [
      [1, 0],
      [-2, 1],
    ],
  ];
  const one = q === 1 ? "0" : `1/${q}`;
  return {
    torwend: 1,
    title: "eight affine maps",
    dimension: 2,
    moves: [
      { label: "x + 2y", matrix: right },
      { label: "x - 2y", matrix: left },
      { label: "x + 2y + 1", matrix: right, translation: [one, "0"] },
      { label: "x - 2y - 1", matrix: left, translation: [`-${one}`, "0"] },
      { label: "y + 2x", matrix: up },
      { label: "y - 2x", matrix: down },
      { label: "y + 2x + 1", matrix: up, translation: ["0", one] },
      { label: "y - 2x - 1", matrix: down, translation: ["0", `-${one}`] },
    ],
  };
}

const BOUND = (5 * Math.sqrt(2)) / 8;

describe("the eight maps of Gabber and Galil", () => {
  it.each([2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12, 16, 25, 27, 30, 31, 32, 49, 60, 64, 97, 128])(
    "have one orbit and a second eigenvalue at most 5 sqrt(2) / 8, modulus %i",
    async (q) => {
      const { orbits: rows, symmetric } = await orbits(family(q), { modulus: q, workers: 0 });
      expect(symmetric).toBe(true);
      expect(rows.map((r) => [r.size, r.count])).toEqual([[q * q, 1]]);
      const second = quantityNumber(rows[0]!.secondEigenvalue);
      expect(second + (rows[0]!.residual ?? 0)).toBeLessThanOrEqual(BOUND);
      // And it is no trivial number: a regular graph of degree 8 on n points cannot have it near 0.
      expect(second).toBeGreaterThan(0.2);
    },
  );
});
