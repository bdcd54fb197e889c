import { readdirSync, readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";

const source = new URL("../../src/", import.meta.url);

describe("files that define jobs", () => {
  const files = readdirSync(source, { recursive: true })
    .map(String)
    .map((f) => f.replaceAll("\\", "/"));
  const defining = files.filter(
    (f) =>
      f.endsWith(".ts") && f !== "kernel/jobs.ts" && /\bdefineJob\(/.test(readFileSync(new URL(f, source), "utf8")),
  );
  it("are named so that bundles keep them, and the worker imports them all", () => {
    expect(defining.length).toBeGreaterThan(3);
    expect(defining.filter((f) => !f.endsWith("jobs.ts"))).toEqual([]);
    const worker = readFileSync(new URL("worker.ts", source), "utf8");
    expect(defining.filter((f) => !worker.includes(`"./${f.replace(/\.ts$/, ".js")}"`))).toEqual([]);
  });
});
