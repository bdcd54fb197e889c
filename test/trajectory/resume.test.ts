/** Stopped, killed and refused by the disk: what is kept, and that a resumed walk is the same to the last byte. */
import { execFile, spawn } from "node:child_process";
import { access, mkdtemp, readdir, readFile, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join, resolve } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { OptionsError, StoppedError } from "../../src/errors.js";
import { positionFile } from "../../src/output/file.js";
import { positions } from "../../src/trajectory/stream.js";
import { trajectory } from "../../src/trajectory/trajectory.js";
import type { Walk } from "../../src/walk/walk.js";
import { fraction, makeWalk, squareRoot } from "./walks.js";

const moves = [
  {
    matrix: [
      [2n, 1n],
      [1n, 1n],
    ],
  },
  {
    matrix: [
      [3n, 1n],
      [2n, 1n],
    ],
  },
];
const irrational = makeWalk(moves, [squareRoot(2n), squareRoot(3n)]);
const thirds = makeWalk(moves, [fraction(1, 3), fraction(1, 7)]);
const large = makeWalk(moves, [fraction(1n, 3n ** 80n), fraction(1, 2)]);

let folder = "";
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), "torwend-"));
});
afterAll(() => rm(folder, { recursive: true }));

const named = async (start: string) => (await readdir(folder)).filter((name) => name.startsWith(start)).sort();

/** Walks until `blocks` blocks are written, then stops. */
async function stopAfter(walk: Walk, file: string, steps: number, blocks: number): Promise<unknown> {
  const controller = new AbortController();
  const open = positionFile(file);
  let written = 0;
  return trajectory(walk, {
    steps,
    signal: controller.signal,
    out: async (shape) => {
      const sink = await open(shape);
      return {
        ...sink,
        write: async (block) => {
          await sink.write(block);
          if (++written === blocks) controller.abort();
        },
      };
    },
  }).catch((error: unknown) => error);
}

const cases: readonly [string, Walk, number][] = [
  ["window", irrational, 20_000],
  ["tree", irrational, 80_000],
  ["residue", thirds, 20_000],
  ["fractions in big integers", large, 4000],
];

describe.each(cases)("a stopped walk (%s)", (kind, walk, steps) => {
  it.each([".npy", ".csv", ".arrow"])("goes on as if it had not stopped: %s", async (ending) => {
    const [whole, file] = [join(folder, `${kind}-whole${ending}`), join(folder, `${kind}-again${ending}`)];
    const result = await trajectory(walk, { steps, out: positionFile(whole) });
    const error = (await stopAfter(walk, file, steps, 2)) as Error;
    expect(error).toBeInstanceOf(StoppedError);
    expect(error.message).toMatch(/^stopped after move \d+ of \d+, .*--resume/);
    expect(await named(`${kind}-again${ending}`)).toEqual(
      [".checkpoint", ".part"].map((end) => `${kind}-again${ending}${end}`),
    );
    const resumed = await trajectory(walk, { steps, out: positionFile(file, { resume: true }) });
    expect({ ...resumed, written: undefined }).toEqual({ ...result, written: undefined });
    expect((await readFile(file)).equals(await readFile(whole))).toBe(true);
    expect(await named(`${kind}-again${ending}`)).toEqual([`${kind}-again${ending}`]);
  });

  it("gives the same blocks from any of their ends", async () => {
    const all: [number, number, number][] = [];
    for await (const b of positions(walk, { steps })) all.push([b.first, b.rows, b.doubles()[0] as number]);
    expect(all.reduce((sum, [, rows]) => sum + rows, 0)).toBe(steps + 1);
    const middle = all[Math.floor(all.length / 2)] as [number, number, number];
    const rest: typeof all = [];
    for await (const b of positions(walk, { steps, from: middle[0] })) {
      rest.push([b.first, b.rows, b.doubles()[0] as number]);
    }
    expect(rest).toEqual(all.slice(Math.floor(all.length / 2)));
  });
});

describe("an unfinished walk", () => {
  const faults = async (work: Promise<unknown>) => {
    const error = await work.catch((e: unknown) => e);
    expect(error).toBeInstanceOf(OptionsError);
    return (error as OptionsError).faults.map((f) => `${f.pointer}: ${f.message}`);
  };
  it("is not written over, and not gone on with as another walk", async () => {
    const file = join(folder, "other.npy");
    await stopAfter(irrational, file, 30_000, 1);
    const out = positionFile(file, { resume: true });
    expect(await faults(trajectory(irrational, { steps: 30_000, out: positionFile(file) }))).toEqual([
      expect.stringMatching(/^--out: .*unfinished walk: --resume/),
    ]);
    const lines = await faults(trajectory(thirds, { steps: 30_001, seed: 5, digits: 9, out }));
    for (const what of ["walk", "seed: found 1; accepted: 5", "number of steps", "number of digits"]) {
      expect(lines).toContainEqual(expect.stringContaining(`of another ${what}`));
    }
    await writeFile(`${file}.part`, "short");
    expect(await faults(trajectory(irrational, { steps: 30_000, out }))).toEqual([expect.stringMatching(/shorter/)]);
    await writeFile(`${file}.checkpoint`, "{}");
    expect(await faults(trajectory(irrational, { steps: 30_000, out }))).toEqual([
      expect.stringMatching(/cannot be used/),
    ]);
  });
  it("must be there to be gone on with", async () => {
    const out = positionFile(join(folder, "none.npy"), { resume: true });
    expect(await faults(trajectory(irrational, { steps: 10, out }))).toEqual([
      expect.stringMatching(/^--resume: .* no /),
    ]);
  });
});

/** A walk in a process of its own, with a checkpoint after every block. */
const script = (file: string, resume: boolean) => `
  import { readFileSync } from "node:fs";
  import { positionFile } from ${JSON.stringify(resolve("src/output/file.ts"))};
  import { trajectory } from ${JSON.stringify(resolve("src/trajectory/trajectory.ts"))};
  await trajectory(readFileSync("examples/tray.json", "utf8"), {
    steps: 100_000,
    out: positionFile(${JSON.stringify(file)}, { every: 0, resume: ${resume} }),
  });
`;
const node = ["--import", "tsx", "--input-type=module", "-e"];
const finish = (file: string, resume: boolean) =>
  new Promise<void>((done, fail) => {
    execFile(process.execPath, [...node, script(file, resume)], (error) => (error ? fail(error) : done()));
  });

describe("a process", () => {
  let whole: Buffer;
  beforeAll(async () => {
    const file = join(folder, "killed-whole.csv");
    await finish(file, false);
    whole = await readFile(file);
  });

  it("killed in the middle leaves what the next one goes on with", async () => {
    const file = join(folder, "killed.csv");
    const child = spawn(process.execPath, [...node, script(file, false)]);
    const ended = new Promise((done) => child.on("exit", (_, signal) => done(signal)));
    const there = () =>
      access(`${file}.checkpoint`).then(
        () => true,
        () => false,
      );
    while (!(await there())) await new Promise((done) => setTimeout(done, 5));
    child.kill("SIGKILL");
    expect(await ended).toBe("SIGKILL");
    expect(await named("killed.csv")).toEqual(expect.arrayContaining(["killed.csv.checkpoint", "killed.csv.part"]));
    const { walk } = JSON.parse(await readFile(`${file}.checkpoint`, "utf8"));
    expect(walk.rows).toBeLessThan(100_001);
    // What the process wrote after its checkpoint may be torn.
    await writeFile(`${file}.part`, "torn", { flag: "a" });
    await finish(file, true);
    expect((await readFile(file)).equals(whole)).toBe(true);
  });

  it("refused by the disk says so, and goes on when there is room", async () => {
    const file = join(folder, "full.csv");
    // A limit on the size of files (in blocks of 1024 bytes) stands in for a full disk.
    const limited = `ulimit -f 1000; exec "$0" "$@"`;
    const error = await new Promise<Error | null>((done) => {
      execFile("bash", ["-c", limited, process.execPath, ...node, script(file, false)], (e) => done(e));
    });
    expect(error?.message).toMatch(/LimitError: writing .* ended early .*kept up to move \d+: .*--resume/);
    await finish(file, true);
    expect((await readFile(file)).equals(whole)).toBe(true);
  });
});
