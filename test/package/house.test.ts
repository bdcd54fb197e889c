/** Rules of the house that a reader would otherwise have to check by eye. */
import { readdirSync, readFileSync, statSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { VERSION } from "../../src/version.js";

function sources(folder: string): string[] {
  return readdirSync(folder).flatMap((name) => {
    const path = join(folder, name);
    if (statSync(path).isDirectory()) return name === "generated" ? [] : sources(path);
    return path.endsWith(".ts") ? [path] : [];
  });
}

const src = sources("src");

describe("the house", () => {
  it("has one version", () => {
    expect(JSON.parse(readFileSync("package.json", "utf8")).version).toBe(VERSION);
  });
  it("takes no transcendental function from the engine behind a number", () => {
    // Plots and the wording around them may: what they draw is not reported.
    const behindNumbers = src.filter((path) => !/dossier[\\/](plots|sections)[\\/]/.test(path));
    const used = behindNumbers.filter((path) =>
      /\bMath\.(log|log2|log10|log1p|exp|expm1|sin|cos|tan|asin|acos|atan|atan2|sinh|cosh|tanh|pow|hypot|cbrt)\(/.test(
        readFileSync(path, "utf8"),
      ),
    );
    expect(used).toEqual([]);
  });
  it("loads every module of jobs in the worker", () => {
    const worker = readFileSync("src/worker.ts", "utf8");
    const defining = src.filter((path) => /\bdefineJob\(/.test(readFileSync(path, "utf8")) && !path.includes("kernel"));
    expect(defining.length).toBeGreaterThan(0);
    for (const path of defining) {
      expect(worker).toContain(
        `./${path
          .replaceAll("\\", "/")
          .replace(/^src\//, "")
          .replace(/\.ts$/, ".js")}`,
      );
    }
  });
  it("keeps offsets and status codes behind the border", () => {
    const leaks = src.filter((path) => !/[\\/]kernel[\\/]/.test(path) && /\.raw\b/.test(readFileSync(path, "utf8")));
    expect(leaks).toEqual([]);
  });
});
