/** Evidence of a verdict as a reader can check it: names in words, matrices as grids, the rest as text. */
import { type Html, html, joined, type Piece } from "../html.js";
import { brief } from "../numbers.js";
import { prose } from "./prose.js";

/** "fixedLine" as "fixed line". */
function words(name: string): string {
  return name.replace(/([a-z\d])([A-Z])/g, (_, a: string, b: string) => `${a} ${b.toLowerCase()}`).replace(/_/g, " ");
}

function entry(value: unknown): string {
  return String(value).replace(/^-/, "−");
}

const isEntry = (v: unknown) =>
  typeof v === "number" || typeof v === "bigint" || (typeof v === "string" && v.length < 30);

export function isMatrix(value: unknown): value is readonly (readonly (number | string | bigint)[])[] {
  if (!Array.isArray(value) || value.length === 0) return false;
  const width = Array.isArray(value[0]) ? value[0].length : 0;
  return width > 0 && value.every((row) => Array.isArray(row) && row.length === width && row.every(isEntry));
}

export function matrixGrid(rows: readonly (readonly (number | string | bigint)[])[]): Html {
  const width = rows[0]?.length ?? 0;
  const spoken = rows.map((r) => r.map(String).join(" ")).join("; ");
  return html`<span class="matrix" role="img" aria-label="matrix with rows ${spoken}" style="grid-template-columns: repeat(${width}, auto)">${rows.map((r) => r.map((v) => html`<span>${entry(v)}</span>`))}</span>`;
}

function show(value: unknown, depth: number): Piece {
  if (value === null || value === undefined) return "none";
  if (typeof value === "number") return brief(value, 10);
  if (typeof value === "string") return /^-?[\d./]+$/.test(value) ? entry(value) : prose(value);
  if (typeof value === "boolean" || typeof value === "bigint") return entry(value);
  if (isMatrix(value)) return matrixGrid(value);
  if (depth > 4) return JSON.stringify(value);
  if (Array.isArray(value)) {
    if (value.length === 0) return "none";
    if (value.every(isEntry)) {
      const numbers = value.every((v) => typeof v !== "string" || /^-?[\d./]+$/.test(v));
      return numbers ? `(${value.map(entry).join(", ")})` : value.map(entry).join(", ");
    }
    // Words in the moves: short tuples of one after the other.
    if (value.every((v) => Array.isArray(v) && v.length < 9 && v.every((x) => typeof x === "number"))) {
      const even = new Set(value.map((v) => v.length)).size === 1;
      if (!even || !isMatrix(value))
        return joined(
          value.map((v) => show(v, depth + 1)),
          ", ",
        );
    }
    if (value.every(isMatrix)) return html`<div class="matrices tight">${value.map(matrixGrid)}</div>`;
    return value.map((v) => html`<div>${show(v, depth + 1)}</div>`);
  }
  return html`<dl class="plain">${Object.entries(value).map(
    ([name, v]) => html`<dt>${words(name)}</dt><dd>${show(v, depth + 1)}</dd>`,
  )}</dl>`;
}

/** Undefined where there is none. */
export function evidence(found: Readonly<Record<string, unknown>>): Html | undefined {
  if (Object.keys(found).length === 0) return undefined;
  return html`${show(found, 0)}`;
}
