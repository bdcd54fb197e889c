import { mkdtemp, readFile, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { tableFromIPC } from "apache-arrow";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { OptionsError } from "../../src/errors.js";
import { positionFile } from "../../src/output/file.js";
import { npyHeader } from "../../src/output/npy.js";
import { trajectory } from "../../src/trajectory/trajectory.js";
import { prepareWalker } from "../../src/trajectory/walker.js";
import { fraction, makeWalk, squareRoot } from "./walks.js";

const matrix = [
  [2n, 1n, 0n],
  [1n, 1n, 0n],
  [0n, 1n, 1n],
];
const point = [2n, 3n, 5n].map(squareRoot);
const walk = makeWalk([{ matrix }, { matrix, translation: point }], point);

let folder = "";
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), "torwend-"));
});
afterAll(() => rm(folder, { recursive: true }));

/** Reads an array file as its format says, with none of the writer's code. */
function readNpy(bytes: Buffer): { header: string; values: number[] } {
  expect(bytes.subarray(0, 8)).toEqual(Buffer.from([0x93, ...Buffer.from("NUMPY"), 1, 0]));
  const end = 10 + bytes.readUInt16LE(8);
  expect(end % 64).toBe(0);
  const header = bytes.subarray(10, end).toString("latin1");
  expect(header.endsWith("\n")).toBe(true);
  const values = Array.from({ length: (bytes.length - end) / 8 }, (_, i) => bytes.readDoubleLE(end + 8 * i));
  return { header: header.trimEnd(), values };
}

describe("files of positions", () => {
  it("npy: every position as doubles, with the shape", async () => {
    const file = join(folder, "path.npy");
    const steps = 9000;
    const result = await trajectory(walk, { steps, at: [steps], seed: 2, out: positionFile(file) });
    expect(result.written).toEqual({ file, rows: steps + 1 });
    const { header, values } = readNpy(await readFile(file));
    expect(header).toBe(`{'descr': '<f8', 'fortran_order': False, 'shape': (${steps + 1}, 3), }`);
    const walker = await prepareWalker(walk, { seed: 2n, steps });
    const doubles = walker.run(0).toDoubles();
    expect(values).toHaveLength(3 * (steps + 1));
    expect(values.every((x, i) => Math.abs(x - doubles[i]!) < 2 ** -52)).toBe(true);
    expect(npyHeader(4_294_967_296, 8).length % 64).toBe(0);
  });

  it("csv: step and decimals, the same as the result's", async () => {
    const file = join(folder, "path.csv");
    const result = await trajectory(walk, { steps: 60, digits: 30, out: positionFile(file) });
    const lines = (await readFile(file, "utf8")).trimEnd().split("\n");
    expect(lines[0]).toBe("step,x1,x2,x3");
    expect(lines.slice(1)).toEqual(result.positions.map((p) => [p.step, ...p.point].join(",")));
  });

  it("csv and npy of a rational walk", async () => {
    const rational = makeWalk([{ matrix }], [fraction(1, 2), fraction(0), fraction(1, 3)]);
    const file = join(folder, "rational.npy");
    await trajectory(rational, { steps: 1, out: positionFile(file) });
    const third = Math.floor(2 ** 53 / 3) / 2 ** 53;
    expect(readNpy(await readFile(file)).values).toEqual([0.5, 0, third, 0, 0.5, third]);
    const text = join(folder, "rational.csv");
    await trajectory(rational, { steps: 1, digits: 3, out: positionFile(text) });
    expect(await readFile(text, "utf8")).toBe("step,x1,x2,x3\n0,0.500,0.000,0.333\n1,0.000,0.500,0.333\n");
  });

  it("leaves nothing half-written behind, and names what it cannot write", async () => {
    expect(() => positionFile("path.txt")).toThrow(/--out: found path.txt; accepted: .*\.npy, \.csv or \.arrow/);
    const lost = trajectory(walk, { steps: 5, out: positionFile(join(folder, "no", "path.npy")) });
    await expect(lost).rejects.toThrow(OptionsError);
  });

  it("arrow: steps and positions, as Arrow's own reader reads them", async () => {
    const file = join(folder, "path.arrow");
    const steps = 9000;
    await trajectory(walk, { steps, at: [steps], seed: 2, out: positionFile(file) });
    await trajectory(walk, { steps, at: [steps], seed: 2, out: positionFile(join(folder, "same.npy")) });
    const table = tableFromIPC(await readFile(file));
    expect(table.schema.fields.map((f) => `${f.name}: ${f.type}`)).toEqual([
      "step: Uint32",
      "x1: Float64",
      "x2: Float64",
      "x3: Float64",
    ]);
    expect(table.getChild("step")?.toArray()).toEqual(Uint32Array.from({ length: steps + 1 }, (_, k) => k));
    const { values } = readNpy(await readFile(join(folder, "same.npy")));
    for (const j of [0, 1, 2]) {
      const column = values.filter((_, i) => i % 3 === j);
      expect(table.getChild(`x${j + 1}`)?.toArray()).toEqual(Float64Array.from(column));
    }
  });
});
