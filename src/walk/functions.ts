/** Trigonometric polynomials, boxes and starts of a document whose shape is right. */
import { compareExact } from "../exact/compare.js";
import { type ExactNumber, exactRational } from "../exact/number.js";
import { Rational } from "../exact/rational.js";
import { exactFromText } from "../exact/read.js";
import { below, type Findings, shown } from "./findings.js";
import { numberAt, numbersAt, sizeIs, type WrittenNumber } from "./numbers.js";
import type { Observable, Start, Term } from "./walk.js";

export interface WrittenTerm {
  readonly frequency: readonly (string | number)[];
  readonly cos?: WrittenNumber;
  readonly sin?: WrittenNumber;
}

export interface WrittenObservable {
  readonly label?: string;
  readonly terms?: readonly WrittenTerm[];
  readonly box?: { readonly low: readonly WrittenNumber[]; readonly high: readonly WrittenNumber[] };
}

export type WrittenStart =
  | readonly WrittenNumber[]
  | { readonly uniform: true }
  | { readonly density: readonly WrittenTerm[] };

const ZERO = exactRational(Rational.ZERO);
const ONE = exactRational(Rational.ONE);

function termsAt(terms: readonly WrittenTerm[], pointer: string, d: number | undefined, findings: Findings): Term[] {
  return terms.flatMap((term, i) => {
    if (!findings.clean(below(pointer, i)) && (typeof term !== "object" || term === null)) return [];
    const at = (field: string) => below(pointer, i, field);
    const cos = term.cos === undefined ? ZERO : numberAt(term.cos, at("cos"), findings);
    const sin = term.sin === undefined ? ZERO : numberAt(term.sin, at("sin"), findings);
    const readable = term.frequency !== undefined && findings.clean(at("frequency"));
    const frequency =
      readable && sizeIs(term.frequency, at("frequency"), d, "integers", findings) ? term.frequency : undefined;
    if (frequency === undefined || cos === undefined || sin === undefined) return [];
    return [{ frequency: frequency.map((k) => BigInt(k)), cos, sin }];
  });
}

/** A density has mean 1: its coefficients at frequency 0 sum to 1, exactly. */
function checkMean(written: readonly WrittenTerm[], terms: readonly Term[], pointer: string, findings: Findings): void {
  const constants = terms.flatMap((t, i) =>
    t.frequency.every((k) => k === 0n) ? [{ cos: t.cos, text: written[i].cos ?? 0 }] : [],
  );
  const texts = constants.filter(({ text }) => typeof text !== "object");
  // Polynomial numbers have no text that can be added; a single one can be compared.
  const mean =
    constants.length === 1
      ? constants[0].cos
      : texts.length === constants.length
        ? exactFromText(["0", ...texts.map(({ text }) => `(${text})`)].join("+"))
        : undefined;
  if (mean?.rational?.equals(Rational.ONE) === true) return;
  const found = mean?.rational?.toString() ?? (mean === undefined ? "not proved to be 1" : `about ${mean.toNumber()}`);
  const where = constants.length === 0 ? " (no term has frequency 0)" : "";
  findings.add(pointer, `found mean ${found}${where}; accepted: coefficients cos at frequency 0 that sum to exactly 1`);
}

export function readStart(start: WrittenStart | undefined, d: number | undefined, findings: Findings): Start {
  if (start === undefined || findings.at("/start") || "uniform" in start) return { type: "uniform" };
  if ("density" in start) {
    const pointer = "/start/density";
    if (findings.at(pointer)) return { type: "uniform" };
    const terms = termsAt(start.density, pointer, d, findings);
    if (findings.clean(pointer)) checkMean(start.density, terms, pointer, findings);
    return { type: "density", terms };
  }
  if (!Array.isArray(start)) return { type: "uniform" };
  return { type: "point", point: numbersAt(start, "/start", d, findings) ?? [] };
}

/** 0 <= low < high <= 1 in every coordinate, decided exactly. */
function checkBox(
  written: NonNullable<WrittenObservable["box"]>,
  low: readonly ExactNumber[],
  high: readonly ExactNumber[],
  pointer: string,
  findings: Findings,
): void {
  low.forEach((from, i) => {
    const to = high[i];
    const [below0, above1, order] = [compareExact(ZERO, from), compareExact(to, ONE), compareExact(from, to)];
    const fault = (side: "low" | "high", what: string) => {
      findings.add(
        below(pointer, side, i),
        `found ${shown(written[side][i])}${what}; accepted: 0 <= low < high <= 1 in every coordinate`,
      );
    };
    if (below0 === undefined || above1 === undefined || order === undefined) {
      fault("low", `, an order that could not be proved`);
    } else {
      if (below0 > 0) fault("low", ", which is below 0");
      if (above1 > 0) fault("high", ", which is above 1");
      if (order >= 0) fault("low", `, which is not below the high end ${shown(written.high[i])}`);
    }
  });
}

function defaultObservables(d: number): Observable[] {
  return Array.from({ length: d }, (_, i) => {
    const frequency = Array.from({ length: d }, (_, j) => (i === j ? 1n : 0n));
    return [
      { type: "terms" as const, label: `cosine of x${i + 1}`, terms: [{ frequency, cos: ONE, sin: ZERO }] },
      { type: "terms" as const, label: `sine of x${i + 1}`, terms: [{ frequency, cos: ZERO, sin: ONE }] },
    ];
  }).flat();
}

/** Valid only where `findings` has stayed empty. */
export function readObservables(
  observables: readonly WrittenObservable[] | undefined,
  d: number | undefined,
  findings: Findings,
): Observable[] {
  if (observables === undefined) return defaultObservables(d ?? 0);
  return observables.map(({ label, terms, box }, i): Observable => {
    const at = (field: string) => below("/observables", i, field);
    const name = label ?? `observable ${i}`;
    if (box !== undefined && !findings.at(at("box"))) {
      const low = box.low ? numbersAt(box.low, below(at("box"), "low"), d, findings) : undefined;
      const high = box.high ? numbersAt(box.high, below(at("box"), "high"), d, findings) : undefined;
      if (low !== undefined && high?.length === low.length) checkBox(box, low, high, at("box"), findings);
      return { type: "box", label: name, low: low ?? [], high: high ?? [] };
    }
    const read = terms !== undefined && !findings.at(at("terms")) ? termsAt(terms, at("terms"), d, findings) : [];
    return { type: "terms", label: name, terms: read };
  });
}
