/** The package as published: packed, unpacked elsewhere, used by name. Needs `npm run build` (npm test does it). */
import { execFileSync } from "node:child_process";
import {
  existsSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  symlinkSync,
  writeFileSync,
} from "node:fs";
import { tmpdir } from "node:os";
import { join, resolve } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { VERSION } from "../../src/version.js";

let home: string;
let unpacked: string;

beforeAll(() => {
  if (!existsSync("dist/node/index.js")) throw new Error("dist is missing: npm run build");
  home = mkdtempSync(join(tmpdir(), "torwend-package-"));
  const [packed] = JSON.parse(
    execFileSync("npm", ["pack", "--ignore-scripts", "--json", "--pack-destination", home], { encoding: "utf8" }),
  );
  // Dependencies are those of the clone; the package itself is what was packed.
  const modules = join(home, "node_modules");
  unpacked = join(modules, "torwend");
  mkdirSync(unpacked, { recursive: true });
  execFileSync("tar", ["-xzf", join(home, packed.filename), "-C", unpacked, "--strip-components=1"]);
  for (const name of Object.keys(JSON.parse(readFileSync("package.json", "utf8")).dependencies)) {
    mkdirSync(join(modules, name, ".."), { recursive: true });
    symlinkSync(resolve("node_modules", name), join(modules, name));
  }
}, 60_000);

afterAll(() => rmSync(home, { recursive: true, force: true }));

/** What a module of a user's own prints. */
function run(source: string): string {
  const file = join(home, "user.mjs");
  writeFileSync(file, source);
  return execFileSync(process.execPath, [file], { encoding: "utf8", cwd: home });
}

describe("the published package", () => {
  it("gives the same answers with workers and without, by name", () => {
    const printed = run(`
      import { readFileSync } from "node:fs";
      import { averages, growth, VERSION } from "torwend";
      const walk = readFileSync(${JSON.stringify(resolve("examples/tray.json"))}, "utf8");
      const ask = async (workers) => {
        const options = { workers, effort: "quick", seed: 3 };
        return [await growth(walk, options), await averages(walk, { ...options, steps: 200, replicates: 40 })];
      };
      const [alone, shared] = [await ask(0), await ask(2)].map((answers) => JSON.stringify(answers));
      console.log(VERSION, alone.length > 1000, alone === shared);
    `);
    expect(printed.trim()).toBe(`${VERSION} true true`);
  });

  it("has what its exports promise", () => {
    const { exports, bin, types } = JSON.parse(readFileSync(join(unpacked, "package.json"), "utf8"));
    const files = (entry: unknown): string[] =>
      typeof entry === "string" ? [entry] : Object.values(entry as object).flatMap(files);
    for (const file of [...files(exports), ...files(bin), types]) {
      expect(existsSync(join(unpacked, file)), file).toBe(true);
    }
  });

  it("carries its kernels as files, and the schema", () => {
    for (const target of ["simd", "plain"]) {
      expect(WebAssembly.validate(readFileSync(join(unpacked, `dist/kernel/${target}.wasm`)))).toBe(true);
    }
    const printed = run(`
      import schema from "torwend/walk.schema.json" with { type: "json" };
      console.log(Object.keys(schema.properties).includes("moves"));
    `);
    expect(printed.trim()).toBe("true");
  });

  it("runs as a command", () => {
    const cli = join(unpacked, "dist/node/cli.js");
    expect(execFileSync(process.execPath, [cli, "--version"], { encoding: "utf8" }).trim()).toBe(VERSION);
  });

  it("brings all that a browser needs: its modules import nothing but each other", () => {
    for (const name of readdirSync(join(unpacked, "dist/browser")).filter((file) => file.endsWith(".js"))) {
      const source = readFileSync(join(unpacked, "dist/browser", name), "utf8");
      const imported = [...source.matchAll(/\b(?:from|import)\s*\(?"([\w@./:-]+)"/g)].map(
        (match) => match[1] as string,
      );
      expect(imported.filter((path) => !path.startsWith("./"))).toEqual([]);
    }
  });

  it("takes no test, source or bench along", () => {
    for (const name of ["src", "test", "bench", "assembly"]) expect(existsSync(join(unpacked, name))).toBe(false);
  });
});
