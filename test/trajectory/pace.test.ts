import { describe, expect, it } from "vitest";
import { timeLeft } from "../../src/cli/progress.js";
import { StoppedError } from "../../src/errors.js";
import { Remaining } from "../../src/remaining.js";
import type { Progress } from "../../src/session.js";
import { Pace } from "../../src/trajectory/pace.js";
import { openPath } from "../../src/trajectory/paths.js";
import { positions } from "../../src/trajectory/stream.js";
import { trajectory } from "../../src/trajectory/trajectory.js";
import { fraction, makeWalk, squareRoot } from "./walks.js";

const moves = [
  [2n, 1n, 1n, 1n],
  [3n, 1n, 2n, 1n],
].map(([a, b, c, d]) => ({
  matrix: [
    [a!, b!],
    [c!, d!],
  ],
}));
const walk = makeWalk(moves, [squareRoot(2n), squareRoot(3n)]);

describe("the remaining time", () => {
  it("of a walk and its reader, each at its own pace", () => {
    let now = 0;
    const pace = new Pace(() => now);
    expect(pace.secondsLeft({ done: 0, total: 10 }, undefined)).toBeUndefined();
    now += 3000;
    pace.walked();
    // 3 s for 3 of 4 parts: one second more.
    expect(pace.secondsLeft({ done: 3, total: 4 }, undefined)).toBe(1);
    expect(pace.secondsLeft({ done: 3, total: 4 }, { done: 0, total: 50 })).toBeUndefined();
    now += 2000;
    pace.read();
    // 2 s for 10 of 50 positions: eight more.
    expect(pace.secondsLeft({ done: 3, total: 4 }, { done: 10, total: 50 })).toBe(9);
    expect(pace.seconds).toBe(5);
  });

  it("of even pieces, once there is something to tell it from, stage by stage", () => {
    let now = 0;
    const remaining = new Remaining(() => now);
    expect(remaining.left("a", 5, 25)).toBeUndefined();
    now = 100;
    expect(remaining.left("a", 6, 25)).toBeUndefined();
    now = 2000;
    expect(remaining.left("a", 15, 25)).toBe(2);
    expect(remaining.left("b", 15, 25)).toBeUndefined();
  });

  it("in words", () => {
    expect([undefined, 0.4, 1.2, 99, 101, 7201].map(timeLeft)).toEqual([
      "",
      "",
      ", about 2 s left",
      ", about 99 s left",
      ", about 2 min left",
      ", about 3 h left",
    ]);
  });
});

describe("a path's work", () => {
  it.each([
    ["tree", walk, 0],
    ["window", walk, Number.POSITIVE_INFINITY],
    ["residue", makeWalk(moves, [fraction(1, 3), fraction(1, 7)]), 0],
  ])("only grows, and is all done at the end (%s)", async (_, given, treeBits) => {
    for (const from of [0, 11_000]) {
      const path = await openPath(given, { seed: 1n, steps: 20_000, digits: 15, memoryLimit: 2 ** 28, treeBits });
      let last = 0;
      for (const _block of path.blocks(from)) {
        const { done } = path.work();
        expect(done).toBeGreaterThanOrEqual(last);
        last = done;
      }
      const { done, total } = path.work();
      expect(Math.abs(done / total - 1)).toBeLessThan(1e-9);
    }
  });
});

describe("a long walk", () => {
  it("can be stopped before its first position", async () => {
    const stop = new AbortController();
    let blocks = 0;
    const onProgress = () => stop.abort();
    const run = async () => {
      for await (const _ of positions(walk, { steps: 600_000, signal: stop.signal, onProgress })) blocks++;
    };
    await expect(run()).rejects.toThrow(StoppedError);
    expect(blocks).toBe(0);
  });

  it("tells how far it is, forwards only", async () => {
    const told: Progress[] = [];
    await trajectory(walk, { steps: 1_200_000, onProgress: (p) => told.push(p) });
    expect(told.length).toBeGreaterThan(1);
    expect(told.every((p, i) => i === 0 || p.done >= told[i - 1]!.done)).toBe(true);
    expect(told.at(-1)).toEqual({ stage: "walking", done: 1000, total: 1000, secondsLeft: 0 });
  });
});
