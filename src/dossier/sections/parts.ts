/** The report's small parts: a quantity with its standing, a verdict, a table, a warning. */
import type { Quantity, Verdict } from "../../quantity/quantity.js";
import { type Html, html, type Piece } from "../html.js";
import { brief, shown } from "../numbers.js";
import type { Answer } from "../result.js";
import { prose } from "./prose.js";

/** A short value stays on one line; a long closed form may break. */
function value(text: string): Html {
  return html`<span class="${text.length > 24 ? "value text" : "value"}">${text}</span>`;
}

export function standing(q: Quantity | null | undefined): Html {
  const s = shown(q);
  return html`<span class="standing">${s.standing}${s.interval !== undefined && html` <span class="interval">${s.interval}</span>`}</span>`;
}

/** "1.1433 logs per move (estimated, 95 % interval 1.1430 to 1.1436)". */
export function quantity(q: Quantity | null | undefined, unit?: string): Html {
  return html`${value(shown(q).value)}${unit !== undefined && ` ${unit}`} <span class="standing">(</span>${standing(q)}<span class="standing">)</span>`;
}

/** The same for a table's cell: the standing under the value. */
export function cell(q: Quantity | null | undefined, whole = false): Html {
  const s = shown(q, whole);
  const words = html`<span class="standing">${s.standing}${s.interval !== undefined && html` <span class="interval">${s.interval}</span>`}</span>`;
  return html`<td class="n">${value(s.value)} ${words}</td>`;
}

/** A column of quantities: a standing that all share goes into its head, the intervals under the values. */
export function quantityColumn(name: Piece, all: readonly Quantity[], whole = false) {
  const words = new Set(all.map((q) => shown(q, whole).standing).filter((s) => s !== "exact"));
  const common = words.size === 1 && all.length > 1 ? [...words][0] : undefined;
  const column: Column = {
    name: html`${name}${common !== undefined && html`<span class="standing">${common}</span>`}`,
    n: true,
  };
  const show = (q: Quantity) => {
    const s = shown(q, whole);
    if (s.standing !== common) return cell(q, whole);
    return html`<td class="n">${value(s.value)}${s.interval !== undefined && html` <span class="standing"><span class="interval">${s.interval}</span></span>`}</td>`;
  };
  return { column, show };
}

export function verdict(v: Verdict): Html {
  return html`<span class="verdict ${v.verdict}">${v.verdict}</span>`;
}

export function warning(text: Piece): Html {
  return html`<p class="warning" role="note"><b>Note.</b> ${typeof text === "string" ? prose(text) : text}</p>
`;
}

export interface Column {
  readonly name: Piece;
  /** Set to the right, for numbers. */
  readonly n?: boolean;
}

/** Rows hold ready cells (td or th). The caption stands outside what scrolls, so that a narrow screen shows it whole. */
export function table(caption: Piece, columns: readonly Column[], rows: readonly Piece[]): Html {
  return html`<div class="tabled"><p class="caption">${caption}</p>
<div class="scroll" tabindex="0"><table>
<thead><tr>${columns.map((c) => html`<th scope="col"${c.n === true && html` class="n"`}>${c.name}</th>`)}</tr></thead>
<tbody>
${rows.map((r) => r !== undefined && r !== false && html`<tr>${r}</tr>\n`)}</tbody>
</table></div></div>
`;
}

export function number(x: number): Html {
  return html`<td class="n">${brief(x)}</td>`;
}

/** What stands in a section's place where its question has no answer; undefined where it has one. */
export function missing(answer: Answer<object>): Html | undefined {
  if ("stopped" in answer)
    return warning(html`Not answered: this question met a limit. ${prose(answer.stopped as string)}`);
  if ("skipped" in answer) return html`<p>Not asked: ${prose(answer.skipped as string)}</p>\n`;
  return undefined;
}

/** "a, b and c". */
export function listed(pieces: readonly Piece[]): Html {
  if (pieces.length === 0) return html``;
  if (pieces.length === 1) return html`${pieces[0]}`;
  const head = pieces.slice(0, -1).map((p, i) => html`${i > 0 && ", "}${p}`);
  return html`${head} and ${pieces[pieces.length - 1]}`;
}

export function plural(n: number, one: string, many = `${one}s`): string {
  return `${brief(n)} ${n === 1 ? one : many}`;
}
