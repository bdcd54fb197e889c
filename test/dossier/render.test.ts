import { parseHTML } from "linkedom";
import { describe, expect, it } from "vitest";
import { renderDossier } from "../../src/dossier/render.js";
import { fixture, TAME } from "./fixture.js";
import { faults } from "./wellformed.js";

const HOSTILE = `<script>alert(1)</script> ]]> & "quoted" 'single' --> </style></svg><img src=x onerror=alert(2)> \u202e`;
const SECTIONS = [
  "summary",
  "walk",
  "conditions",
  "growth",
  "start",
  "averages",
  "law",
  "orbits",
  "positions",
  "reproduce",
];

function parsed(markup: string): Document {
  return parseHTML(markup).document as unknown as Document;
}

const report = renderDossier(fixture());

describe("the report", () => {
  it("is well-formed, with each section where it belongs", () => {
    expect(faults(report)).toEqual([]);
    const sections = [...parsed(report).querySelectorAll("main > section")].map((s) => s.id);
    expect(sections).toEqual(SECTIONS);
  });
  it("has unique identifiers, and every reference to one leads somewhere", () => {
    const document = parsed(report);
    const ids = [...document.querySelectorAll("[id]")].map((e) => e.id);
    expect(new Set(ids).size).toBe(ids.length);
    const targets = [
      ...[...document.querySelectorAll("a[href]")].map((a) => a.getAttribute("href")?.replace("#", "")),
      ...[...document.querySelectorAll("[aria-describedby]")].map((e) => e.getAttribute("aria-describedby")),
    ];
    expect(targets.filter((t) => !ids.includes(t as string))).toEqual([]);
  });
  it("has every plot, with a caption, a label and axes with their names", () => {
    const document = parsed(report);
    const figures = [...document.querySelectorAll("figure")].map((f) => f.id);
    expect(figures).toEqual([
      "plot-growth",
      "plot-pressure",
      "plot-rate",
      "plot-traps",
      ...[1, 2].flatMap((i) => [`plot-correlations-${i}`, `plot-running-${i}`, `plot-histogram-${i}`]),
      "plot-law",
      "plot-orbits",
      "plot-positions",
      "plot-cloud",
      "plot-stray",
    ]);
    for (const svg of document.querySelectorAll("svg")) {
      expect(svg.getAttribute("role")).toBe("img");
      expect(svg.getAttribute("aria-label")?.length).toBeGreaterThan(20);
      const axes = [...svg.querySelectorAll("[aria-label$='axis label']")].map((g) => g.textContent);
      expect(axes.length).toBe(2);
      expect(axes.every((text) => (text ?? "").trim().length > 2)).toBe(true);
    }
  });
  it("fetches nothing and runs nothing", () => {
    expect(report).not.toMatch(/<(script|link|iframe|img|object|embed|base)\b/i);
    expect(report).not.toMatch(/\son[a-z]+=/i);
    expect(report).not.toMatch(/url\(|@import|javascript:/i);
    expect(report.replace(/xmlns(:\w+)?="[^"]*"/g, "")).not.toMatch(/https?:/);
  });
  it("shows no value that a program forgot", () => {
    const text = parsed(report).querySelector("body")?.textContent ?? "";
    expect(text).not.toMatch(/NaN|undefined|\[object|\bnull\b|Infinity/);
    expect(report).not.toMatch(/="[^"]*(NaN|undefined|Infinity)/);
  });
  it("answers in the order of the questions, each number with its standing", () => {
    const questions = [...parsed(report).querySelectorAll("dl.answers dt")].map((dt) => dt.textContent);
    expect(questions.map((q) => q?.split(" ").slice(0, 3).join(" "))).toEqual([
      "Do the conditions",
      "How fast do",
      "Is the start",
      "What do time",
      "How fast is",
      "How do finite",
      "How far can",
    ]);
    const growth = parsed(report).querySelector("dl.answers a[href='#growth']")?.closest("div")?.textContent;
    expect(growth).toContain("1.14320");
    expect(growth).toContain("estimated, 95\u202f% interval 1.14250 to 1.14390");
  });
  it("is the same twice", () => {
    expect(renderDossier(fixture())).toBe(report);
  });
  it("survives the way through JSON", () => {
    expect(renderDossier(JSON.parse(JSON.stringify(fixture())))).toBe(report);
  });
});

describe("warnings", () => {
  it("stand in the summary too, where a reader may stop", () => {
    const text = "the sum may be far from its limit";
    const summary = parsed(renderDossier(fixture({ ...TAME, text }))).querySelector("#summary");
    const answer = (id: string) => summary?.querySelector(`a[href='#${id}']`)?.closest("div")?.textContent;
    expect(answer("averages")).toContain(text);
    expect(answer("growth")).toContain(text);
  });
});

describe("text from the file", () => {
  const labels = { title: HOSTILE, move: HOSTILE, observable: HOSTILE, text: HOSTILE };
  const hostile = renderDossier(fixture(labels));
  it("never becomes markup", () => {
    expect(faults(hostile)).toEqual([]);
    const document = parsed(hostile);
    expect(document.querySelectorAll("script, img, main style").length).toBe(0);
    expect([...document.querySelectorAll("main > section")].map((s) => s.id)).toEqual(SECTIONS);
    expect([...document.querySelectorAll("*")].some((e) => e.hasAttribute("onerror"))).toBe(false);
  });
  it("is shown as it was written", () => {
    const document = parsed(hostile);
    const written = HOSTILE.replace("\u202e", "\ufffd");
    expect(document.querySelector("h1")?.textContent).toBe(written);
    expect(document.querySelector(".move .name")?.textContent).toBe(written);
    expect(document.querySelector("#averages h3")?.textContent).toBe(written);
  });
});

describe("questions without an answer", () => {
  it("are told as such, and the others stand", () => {
    const gap = { stopped: "the memory limit of 1 MiB was met" };
    const none = {
      ...fixture(),
      conditions: gap,
      growth: gap,
      start: gap,
      averages: gap,
      law: gap,
      orbits: { skipped: "a translation is irrational" },
      trajectory: gap,
      precision: { skipped: "no growth rate" },
    };
    const text = renderDossier(none);
    expect(faults(text)).toEqual([]);
    expect([...parsed(text).querySelectorAll("main > section")].map((s) => s.id)).toEqual(SECTIONS);
    expect(text.match(/the memory limit of 1 MiB was met/g)?.length).toBeGreaterThanOrEqual(11);
    expect(text).toContain("a translation is irrational");
    for (const key of ["conditions", "growth", "start", "averages", "law", "orbits", "trajectory"]) {
      const one = renderDossier({ ...fixture(), [key]: gap });
      expect(faults(one)).toEqual([]);
    }
  });
});
