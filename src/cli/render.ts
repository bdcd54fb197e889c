/** Findings as text: quantities with their standing, verdicts, tables. Plain characters, no colour. */
import Table from "cli-table3";
import { shown } from "../dossier/numbers.js";
import { type Quantity, quantityNumber, type Verdict } from "../quantity/quantity.js";

const WIDTH = 96;
const POWERS = "⁰¹²³⁴⁵⁶⁷⁸⁹";

/** Typeset numbers made such that they can be copied: 1e-7, -3, no spaces within. */
export function plain(text: string): string {
  return text
    .replace(
      /\u202f?×\u202f?10([⁻⁰¹²³⁴⁵⁶⁷⁸⁹]+)/g,
      (_, power: string) => `e${power.replace(/./g, (c) => (c === "⁻" ? "-" : String(POWERS.indexOf(c))))}`,
    )
    .replace(/−/g, "-")
    .replace(/\u202f%/g, " %")
    .replace(/[\u202f\u2009]/g, "");
}

/** A quantity's value, interval and standing, as in a sentence. */
function parts(q: Quantity, whole = false): [string, string, string] {
  const { value: near, interval = "", standing } = shown(q, whole);
  // A count without an interval: the next whole number is enough.
  const count = whole && interval === "" && q.standing !== "exact" && Number.isFinite(quantityNumber(q));
  const value = count ? String(Math.ceil(quantityNumber(q)) + 0) : near;
  return [
    plain(value),
    plain(interval),
    plain(standing).replace(/, (no|\S+ %) interval$/, (_, x) => (x === "no" ? "" : `, ${x}`)),
  ];
}

/** The three cells of a quantity: value, interval, and the standing as one word of the contract. */
export function cells(q: Quantity, whole = false): [string, string, string] {
  const [value, interval, standing] = parts(q, whole);
  return [value, interval, standing.replace("proved to lie in", "enclosed")];
}

/** One quantity in a line: "1.14331 (estimated, 95 %: 1.14329 to 1.14333)". */
export function quantity(q: Quantity, whole = false): string {
  const [value, interval, standing] = parts(q, whole);
  return interval === "" ? `${value} (${standing})` : `${value} (${standing}: ${interval})`;
}

/** A number without a standing, such as a parameter. */
export function number(x: number, digits = 4): string {
  if (!Number.isFinite(x)) return "not available";
  return Number.isInteger(x) ? String(x + 0) : String(Number(x.toPrecision(digits)));
}

/** Columns under a header and a rule; a column without entries is left out. */
export function table(head: readonly string[], rows: readonly (readonly string[])[]): string {
  const kept = head.flatMap((_, i) => (rows.some((r) => (r[i] ?? "") !== "") ? [i] : []));
  const pick = (line: readonly string[]) => kept.map((i) => line[i] ?? "");
  const none = ["top", "top-mid", "top-left", "top-right", "bottom", "bottom-mid", "bottom-left", "bottom-right"];
  const inner = ["left", "left-mid", "mid", "mid-mid", "right", "right-mid"];
  const chars = Object.fromEntries([...none, ...inner].map((name) => [name, ""]));
  const drawn = new Table({
    chars: { ...chars, middle: "  " },
    style: { head: [], border: [], "padding-left": 0, "padding-right": 0 },
  });
  const widths = kept.map((i) => Math.max(head[i]!.length, ...rows.map((r) => [...(r[i] ?? "")].length)));
  drawn.push(
    pick(head),
    widths.map((w) => "-".repeat(w)),
    ...rows.map(pick),
  );
  return drawn
    .toString()
    .split("\n")
    .map((line) => `  ${line}`.trimEnd())
    .join("\n");
}

/** A paragraph wrapped to the page, each line after `indent` spaces. */
export function paragraph(text: string, indent = 2): string {
  const lines: string[] = [];
  let line = "";
  for (const word of text.split(/\s+/)) {
    if (line !== "" && line.length + word.length + 1 > WIDTH - indent) {
      lines.push(line);
      line = word;
    } else line = line === "" ? word : `${line} ${word}`;
  }
  lines.push(line);
  return lines.map((l) => `${" ".repeat(indent)}${l}`).join("\n");
}

/** "strong irreducibility: holds", and the reason under it. */
export function verdict(name: string, v: Verdict): string {
  return `  ${name}: ${v.verdict}\n${paragraph(v.reason, 4)}`;
}

/** A title and blocks under headings, with a blank line between. */
export function page(title: string, blocks: readonly (string | undefined)[]): string {
  return `${[title, ...blocks.filter((b) => b !== undefined)].join("\n\n")}\n`;
}

export function block(heading: string, body: string): string {
  return `${heading}\n${body}`;
}
