import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { compareWithDoubles } from "../../src/dossier/compare.js";
import { withSession } from "../../src/session.js";
import { parseWalk } from "../../src/walk/parse.js";

const tray = JSON.parse(readFileSync(new URL("../../examples/tray.json", import.meta.url), "utf8"));
const run = (document: object, seed = 1) =>
  withSession({ workers: 0, seed }, (session) => compareWithDoubles(parseWalk(document), session));

describe("the exact trajectory beside doubles", () => {
  it("parts from them at about 53 ln 2 / lambda_1 moves", async () => {
    const found = await run(tray);
    expect(found.positions.length).toBe(found.moves + 1);
    expect(found.doubles.length).toBe(found.distances.length);
    expect(found.doubles.length).toBe((found.partedAt as number) + 61);
    // sqrt(2) - 1 and sqrt(3) - 1, from memory.
    expect(found.positions[0]?.point).toEqual(["0.41421356237309504880", "0.73205080756887729353"]);
    expect(found.distances[0]).toBeGreaterThan(0);
    expect(found.distances[0]).toBeLessThan(2 ** -53);
    const parted = found.partedAt as number;
    expect(found.distances[parted]).toBeGreaterThan(found.apart);
    expect(found.distances.slice(0, parted).every((d) => d <= found.apart)).toBe(true);
    // The rate is 1.1433 (Pollicott 2010), so 2^-54 reaches a hundredth after some 29 moves; the walk's own rate wavers.
    expect(parted).toBeGreaterThan(22);
    expect(parted).toBeLessThan(40);
  });
  it("never parts from doubles where these are exact", async () => {
    const found = await run({ ...tray, start: ["1/2", "1/4"] });
    expect(found.partedAt).toBeUndefined();
    expect(found.distances.every((d) => d === 0)).toBe(true);
    expect(found.standing).toBe("exact");
  });
  it("starts doubles at the drawn point of a uniform start", async () => {
    const found = await run({ ...tray, start: { uniform: true } });
    expect(found.distances[0]).toBeLessThan(2 ** -53);
    expect(found.partedAt).toBeGreaterThan(20);
  });
  it("refuses a density, from which no point can be drawn", async () => {
    const density = { density: [{ frequency: [0, 0], cos: "1" }] };
    await expect(run({ ...tray, start: density })).rejects.toThrow("density");
  });
});
