import { readFileSync } from "node:fs";
import { beforeAll, describe, expect, it } from "vitest";
import { assess } from "../../src/dossier/assess.js";
import { AssessStopped } from "../../src/dossier/attempt.js";
import { renderDossier } from "../../src/dossier/render.js";
import { type Dossier, isAnswered } from "../../src/dossier/result.js";
import { LimitError, OptionsError, WalkError } from "../../src/errors.js";
import type { Progress } from "../../src/session.js";
import { faults } from "./wellformed.js";

const file = readFileSync(new URL("../../examples/tray.json", import.meta.url), "utf8");
const small = { ...JSON.parse(file), observables: [{ label: "east probe", terms: [{ frequency: [1, 0], cos: "1" }] }] };

const QUANTITY = ["exact", "enclosed", "estimated"];

describe("assess", () => {
  let dossier: Dossier;
  const progress: Progress[] = [];
  beforeAll(async () => {
    dossier = await assess(small, { effort: "quick", workers: 0, seed: 7, onProgress: (p) => progress.push(p) });
  }, 60_000);

  it("answers every question of the contract, with the fields of that question", () => {
    const plain = JSON.parse(JSON.stringify(dossier));
    const fields = {
      conditions: ["stronglyIrreducible", "proximal", "exponentialMoment", "equidistribution", "centralLimit"],
      growth: ["exponents", "logNormVariance", "pressure", "rate"],
      start: ["kind", "verdict", "traps"],
      averages: ["observables"],
      law: ["coefficients"],
      orbits: ["orbits"],
    };
    for (const [question, names] of Object.entries(fields)) {
      for (const name of [...names, "torwend", "walk"]) expect(plain[question], question).toHaveProperty(name);
    }
    expect(plain.torwend).toBe(plain.growth.torwend);
    expect(plain.walk).toBe("Tray stirring, two strokes");
    expect(plain.law.frequency).toEqual(["1", "0"]);
    expect(plain.law.others.length).toBeGreaterThan(0);
    expect(plain.orbits.others.length).toBeGreaterThan(3);
    expect(QUANTITY).toContain(plain.growth.exponents[0].standing);
    expect(plain.trajectory.partedAt).toBeGreaterThan(20);
  });
  it("agrees with what is known of this walk", () => {
    if (!isAnswered(dossier.conditions) || !isAnswered(dossier.growth)) throw new Error("no answer");
    expect(dossier.conditions.stronglyIrreducible.verdict).toBe("holds");
    // 1.1433110351...: Pollicott, Invent. Math. 2010.
    const first = dossier.growth.exponents[0];
    expect(Math.abs(Number(first?.value) - 1.1433110351)).toBeLessThan(2e-3);
  });
  it("is plain JSON: nothing is lost on the way through a file", () => {
    expect(JSON.parse(JSON.stringify(dossier))).toEqual(dossier);
  });
  it("gives the same bytes for the same seed", async () => {
    const again = await assess(JSON.stringify(small), { effort: "quick", workers: 0, seed: 7n });
    expect(JSON.stringify(again)).toBe(JSON.stringify(dossier));
  });
  it("shows one progress, which ends at the end and never goes back", () => {
    expect(progress.every((p, i) => i === 0 || p.done >= (progress[i - 1] as Progress).done)).toBe(true);
    expect(progress.at(-1)).toEqual({ stage: "done", done: 1000, total: 1000 });
    expect(new Set(progress.map((p) => p.stage.split(":")[0])).size).toBeGreaterThan(2);
  });
  it("becomes a report without faults", () => {
    const report = renderDossier(dossier);
    expect(faults(report)).toEqual([]);
    expect(report.replace(/<[^>]*>/g, " ")).not.toMatch(/NaN|undefined|\[object|\bnull\b|Infinity/);
    expect(renderDossier(JSON.parse(JSON.stringify(dossier)))).toBe(report);
  });
});

describe("assess, stopped or refused", () => {
  it("keeps what was finished when the signal fires", async () => {
    const stop = new AbortController();
    const onProgress = ({ stage }: Progress) => {
      if (stage.startsWith("growth")) stop.abort();
    };
    const error = await assess(small, { effort: "quick", workers: 0, signal: stop.signal, onProgress }).catch((e) => e);
    expect(error).toBeInstanceOf(AssessStopped);
    expect(error.exitStatus).toBe(3);
    expect(error.answered).toEqual(["conditions"]);
    expect(error.dossier.conditions.proximal.verdict).toBe("holds");
    expect(error.dossier.averages).toHaveProperty("stopped");
    expect(faults(renderDossier(error.dossier))).toEqual([]);
  });
  it("goes on past a question that meets its limit", async () => {
    const found = await assess(small, { effort: "quick", workers: 0, memoryLimit: 2 ** 12 });
    expect(found.conditions).toHaveProperty("proximal");
    const stopped = Object.entries(found).filter(([, a]) => typeof a === "object" && a !== null && "stopped" in a);
    expect(stopped.length).toBeGreaterThan(0);
    for (const [, answer] of stopped) expect(answer.stopped.length).toBeGreaterThan(10);
  });
  it("refuses wrong input and wrong options", async () => {
    await expect(assess({ ...small, dimension: 9 })).rejects.toBeInstanceOf(WalkError);
    await expect(assess(small, { level: 2 })).rejects.toBeInstanceOf(OptionsError);
    expect(new LimitError("x").exitStatus).toBe(3);
  });
});
