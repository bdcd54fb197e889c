import { describe, expect, it } from "vitest";
import { LimitError, OptionsError, StoppedError } from "../../src/errors.js";
import { decimal, wordsFor } from "../../src/trajectory/block.js";
import { parseChoices } from "../../src/trajectory/choices.js";
import { consumedBits } from "../../src/trajectory/consumed.js";
import { defaultSteps } from "../../src/trajectory/options.js";
import { trajectory } from "../../src/trajectory/trajectory.js";
import { fraction, makeWalk, naiveWalk, rationalPath, squareRoot } from "./walks.js";

const long = [
  [2n, 1n],
  [1n, 1n],
];
const short = [
  [3n, 1n],
  [2n, 1n],
];
const point = [squareRoot(2n), squareRoot(3n)];
const tray = makeWalk([{ matrix: long }, { matrix: short }], point);

/** |a - b| on the circle, of decimals as integers over 10^places. */
function apart(a: string, value: bigint, bits: number, digits: number): bigint {
  const one = 10n ** BigInt(digits + 6);
  const shown = BigInt(a.replace("0.", "")) * 10n ** 6n;
  const d = (((shown - (value * one) / (1n << BigInt(bits))) % one) + one) % one;
  return d > one / 2n ? one - d : d;
}

describe("trajectory", () => {
  it("shows digits right to the last, for few digits and many", async () => {
    const choices = Array.from({ length: 300 }, (_, i) => (i * i + 1) % 2);
    for (const digits of [1, 15, 18, 19, 40, 200]) {
      const result = await trajectory(tray, { choices, digits, at: [0, 7, 299, 300] });
      expect(result).toMatchObject({ standing: "enclosed", digits, bitsConsumedKind: "exact" });
      const bits = 2048;
      const naive = naiveWalk(
        tray,
        point.map((x) => x.toFixed(bits)),
        choices,
        bits,
      );
      for (const { step, point: shown } of result.positions) {
        for (const [j, text] of shown.entries()) {
          expect(text).toHaveLength(digits + 2);
          // Half a unit of the last digit and the naive walk's truncation: 10^6 is one unit.
          expect(apart(text, naive[step]![j]!, bits, digits) <= 500_001n).toBe(true);
        }
      }
    }
  });

  it("gives fractions from a rational start, small and large denominators alike", async () => {
    for (const q of [60n, 10n ** 9n + 7n, 10n ** 40n + 1n]) {
      const walk = makeWalk(
        [{ matrix: long, translation: [fraction(1, 3), fraction(0)] }, { matrix: short }],
        [fraction(5n, q), fraction(q - 1n, q)],
      );
      const choices = Array.from({ length: 3000 }, (_, i) => (i % 3 === 0 ? 1 : 0));
      const result = await trajectory(walk, { choices, at: [0, 1, 1024, 2999, 3000] });
      expect(result.standing).toBe("exact");
      const want = rationalPath(walk, choices);
      for (const p of result.positions) {
        expect(p.fractions).toEqual(want[p.step]!.map(String));
        expect(p.point).toEqual(want[p.step]!.map((x) => decimal(x.num, x.den, 15)));
      }
    }
  });

  it("is the same in one block and in many, drawn or given", async () => {
    const at = [0, 100, 8191, 8192, 8193, 20_000];
    const drawn = await trajectory(tray, { steps: 20_000, seed: 5, at });
    const again = await trajectory(tray, { steps: 20_000, seed: 5, at, digits: 100 });
    for (const [i, p] of again.positions.entries()) {
      const digits15 = p.point.map((x) => decimal(BigInt(x.slice(2)), 10n ** 100n, 15));
      expect(drawn.positions[i]!.point).toEqual(digits15);
    }
    // log2 of lambda_1 = 1.14331...: 20,000 moves consume 32,989 bits but for fluctuations.
    expect(Math.abs(drawn.bitsConsumed - 32_989)).toBeLessThan(300);
    expect(drawn.bitsHeld! / drawn.bitsConsumed).toBeLessThan(1.06);
  });

  it("holds few bits more than a group walk's products need, though moves cancel", async () => {
    const moves = [2n, -2n].flatMap((c) => [
      [
        [1n, c],
        [0n, 1n],
      ],
      [
        [1n, 0n],
        [c, 1n],
      ],
    ]);
    const walk = makeWalk(
      moves.map((matrix) => ({ matrix })),
      point,
    );
    const { bitsConsumed, bitsHeld } = await trajectory(walk, { steps: 8000, at: [8000] });
    const sumOfNorms = 8000 * Math.log2(3);
    expect(bitsConsumed).toBeLessThan(0.6 * sumOfNorms);
    expect(bitsHeld! - 64).toBeGreaterThan(bitsConsumed);
    expect(bitsHeld! / bitsConsumed).toBeLessThan(1.15);
  });

  it("takes no moves, one move, and reports every step of a short walk", async () => {
    const none = await trajectory(tray, { steps: 0 });
    expect(none.positions).toEqual([{ step: 0, point: ["0.414213562373095", "0.732050807568877"] }]);
    expect(none.bitsConsumed).toBe(0);
    expect((await trajectory(tray, { steps: 12 })).positions.map((p) => p.step)).toEqual([...Array(13).keys()]);
    expect(defaultSteps(1000)).toEqual([0, 1, 2, 5, 10, 20, 50, 100, 200, 500, 1000]);
  });

  it("names every wrong option at once", async () => {
    const wrong = trajectory(tray, { steps: -1, digits: 0, at: [3], choices: [0, 2] });
    await expect(wrong).rejects.toThrow(OptionsError);
    await expect(wrong).rejects.toThrow(
      /--choices: entry 1: found 2; accepted: a move index from 0 to 1\n--steps: found -1.*\n--digits.*\n--at: found 3/,
    );
    await expect(trajectory(tray, { steps: 3, choices: [0] })).rejects.toThrow("found 1 moves; accepted: at least 3");
    await expect(trajectory(tray, {})).rejects.toThrow("--steps: found nothing");
    const density = makeWalk([{ matrix: long }], "density");
    await expect(trajectory(density, { steps: 1 })).rejects.toThrow("/start: found a density");
  });

  it("refuses what memory does not hold, and stops when asked", async () => {
    const small = trajectory(tray, { steps: 5_000_000, memoryLimit: 2 ** 22 });
    await expect(small).rejects.toThrow(LimitError);
    const controller = new AbortController();
    setTimeout(() => controller.abort(), 20);
    const stopped = trajectory(tray, { steps: 3_000_000, signal: controller.signal });
    await expect(stopped).rejects.toThrow(StoppedError);
  });
});

describe("decimal", () => {
  it("rounds to the nearest and wraps at 1", () => {
    expect(decimal(2n, 3n, 4)).toBe("0.6667");
    expect(decimal(0n, 3n, 4)).toBe("0.0000");
    expect(decimal(99_995n, 100_000n, 4)).toBe("0.0000");
    expect(decimal(99_994n, 100_000n, 4)).toBe("0.9999");
  });
  it("has words enough that two units of the last stay below half a digit", () => {
    for (let digits = 1; digits < 400; digits++) {
      expect(2n * 2n * 10n ** BigInt(digits) <= 1n << BigInt(64 * wordsFor(digits))).toBe(true);
    }
  });
});

describe("consumedBits", () => {
  it("is log2 of the product's row sums, rounded up", () => {
    // long^n has entries of the Fibonacci sequence: the row sums of long^3 are 13 + 8 and 8 + 5.
    expect(consumedBits(tray, [0, 0, 0])).toEqual({ bits: 5, kind: "exact" });
    expect(consumedBits(tray, [])).toEqual({ bits: 0, kind: "exact" });
    const bound = consumedBits(tray, new Uint16Array(600_000), 12.5);
    expect(bound).toEqual({ bits: 13, kind: "bound" });
  });
});

describe("parseChoices", () => {
  it("reads one index a line", () => {
    expect([...parseChoices("# drawn by hand\r\n0\n 1 \n1\n\n", 2)]).toEqual([0, 1, 1]);
    expect([...parseChoices("", 2)]).toEqual([]);
  });
  it("names the lines that are wrong", () => {
    const read = () => parseChoices("0\n2\n\n-1\n1.0\n0", 2);
    expect(read).toThrow(OptionsError);
    expect(read).toThrow(
      /line 2: found "2"; accepted: a move index from 0 to 1\n--choices: line 3: found an empty line.*\n.*line 4: found "-1".*\n.*line 5/,
    );
    expect(() => parseChoices("x\n".repeat(100), 1)).toThrow(/the move index 0(.|\n)*100 lines are wrong in all/);
  });
});
