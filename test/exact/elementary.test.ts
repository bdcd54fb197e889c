import { Decimal } from "decimal.js";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { type Ball, TooCoarse } from "../../src/exact/ball.js";
import { cosineOfTurn, expOfBall, logOfBall } from "../../src/exact/elementary.js";

/** An independent arbitrary-precision library. */
const Wide = Decimal.clone({ precision: 260, toExpNeg: -9000, toExpPos: 9000 });
const PI = Wide.acos(-1);

const unit = (p: number) => new Wide(2).pow(-p);
const decimal = (m: bigint, p: number) => new Wide(m.toString()).mul(unit(p));

/** Contains the value, with room for no more than `units`. */
function expectAround(ball: Ball, value: Decimal, p: number, units: bigint): void {
  const gap = decimal(ball.mid, p).minus(value).abs().div(unit(p));
  expect(gap.lte(new Wide(ball.rad.toString()))).toBe(true);
  expect(ball.rad <= units).toBe(true);
}

const precision = fc.integer({ min: 20, max: 420 });

describe("elementary functions of balls", () => {
  it("contain the logarithm and are narrow", () => {
    fc.assert(
      fc.property(fc.bigInt(1n, 1n << 200n), fc.integer({ min: 0, max: 190 }), precision, (x, cut, p) => {
        const m = (x >> BigInt(cut)) + 1n;
        expectAround(logOfBall({ mid: m, rad: 0n }, p), decimal(m, p).ln(), p, 3n);
      }),
      { numRuns: 60 },
    );
  });

  it("contain the exponential and are narrow", () => {
    fc.assert(
      fc.property(fc.double({ min: -40, max: 40, noNaN: true }), precision, (x, p) => {
        const m = BigInt(Math.round(x * 2 ** 19)) << BigInt(p - 19);
        expectAround(expOfBall({ mid: m, rad: 0n }, p), decimal(m, p).exp(), p, 3n);
      }),
      { numRuns: 60 },
    );
  });

  it("contain the cosine and are narrow", () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 500 }), fc.nat(500), precision, (d, n, p) => {
        const turn = n % (d + 1);
        expectAround(cosineOfTurn(turn, d, p), PI.mul(turn).div(d).cos(), p, 3n);
      }),
      { numRuns: 60 },
    );
  });

  it("take the operand's radius along", () => {
    const p = 80;
    for (const [mid, rad] of [
      [3n << 79n, 1n << 60n],
      [1n << 70n, 1n << 69n],
      [-5n << 80n, 1n << 78n],
    ] as const) {
      for (const x of [mid - rad, mid + rad]) {
        const grown = expOfBall({ mid, rad }, p);
        expect(decimal(x, p).exp().minus(decimal(grown.mid, p)).abs().lte(decimal(grown.rad, p))).toBe(true);
        if (mid < 0n) continue;
        const log = logOfBall({ mid, rad }, p);
        expect(decimal(x, p).ln().minus(decimal(log.mid, p)).abs().lte(decimal(log.rad, p))).toBe(true);
      }
    }
  });

  it("refuse balls that say too little", () => {
    expect(() => logOfBall({ mid: 5n, rad: 5n }, 3)).toThrow(TooCoarse);
    expect(() => expOfBall({ mid: 0n, rad: 9n }, 3)).toThrow(TooCoarse);
  });
});
