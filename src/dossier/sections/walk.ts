/** The walk itself, typeset: moves, start, observables. */
import type { ExactNumber } from "../../exact/number.js";
import type { Move, Observable, Term, Walk } from "../../walk/walk.js";
import { type Html, html, joined, type Piece } from "../html.js";
import { significant } from "../numbers.js";
import { matrixGrid } from "./evidence.js";
import { plural } from "./parts.js";

const text = (x: ExactNumber | bigint | number | string) =>
  (typeof x === "object" ? x.text : String(x)).replace(/^-/, "−");

function tuple(entries: readonly (ExactNumber | bigint | number | string)[]): Html {
  return html`(${joined(entries.map(text), ", ")})`;
}

/** A column vector beside a matrix. */
function column(entries: readonly ExactNumber[]): Html {
  return matrixGrid(entries.map((e) => [e.text]));
}

function moveBlock(move: Move): Html {
  const p = move.probability;
  const chance = p.isInteger() ? "always drawn" : `drawn with probability ${p} ≈ ${significant(p.toNumber(), 4)}`;
  const shift = move.translation !== undefined && html`<span aria-label="plus">+</span> ${column(move.translation)}`;
  return html`<div class="move"><p class="name">${move.label}</p><p class="chance">${chance}${move.determinant === -1 && "; determinant −1"}</p>
<div class="formula"><i>x</i> ↦ ${matrixGrid(move.matrix)} <i>x</i> ${shift}</div></div>
`;
}

const isZero = (x: ExactNumber) => x.rational?.sign() === 0;
const isOne = (x: ExactNumber) => x.rational?.isInteger() === true && x.rational.num === 1n;

/** A sum inside a factor needs its brackets. */
function factor(x: ExactNumber): Piece {
  if (isOne(x)) return "";
  return /[+\-\s]/.test(x.text.slice(1)) ? html`(${text(x)})\u2009` : html`${text(x)}\u2009`;
}

function waves(terms: readonly Term[]): Html {
  const parts: Html[] = [];
  for (const t of terms) {
    const constant = t.frequency.every((k) => k === 0n);
    if (!isZero(t.cos))
      parts.push(constant ? html`${text(t.cos)}` : html`${factor(t.cos)}cos 2π${tuple(t.frequency)}·<i>x</i>`);
    if (!isZero(t.sin) && !constant) parts.push(html`${factor(t.sin)}sin 2π${tuple(t.frequency)}·<i>x</i>`);
  }
  if (parts.length === 0) return html`0`;
  const most = 12;
  const kept = joined(parts.slice(0, most), " + ");
  return parts.length > most ? html`${kept} + … (${parts.length} terms)` : kept;
}

export function observableFormula(o: Observable): Html {
  if (o.type === "terms") return html`<i>f</i>(<i>x</i>) = ${waves(o.terms)}`;
  const sides = o.low.map((low, i) => html`[${text(low)}, ${text(o.high[i] as ExactNumber)})`);
  return html`indicator of ${joined(sides, " × ")}`;
}

function start(walk: Walk): Html {
  const s = walk.start;
  if (s.type === "uniform") return html`<p>Start: drawn from the uniform measure.</p>`;
  if (s.type === "density") return html`<p>Start: drawn from the density ${waves(s.terms)}.</p>`;
  return html`<p>Start: <i>x</i><sub>0</sub> = ${tuple(s.point)} mod 1.</p>`;
}

export function walkSection(walk: Walk): Html {
  return html`<section id="walk"><h2>The walk</h2>
<p>On the torus of dimension ${walk.dimension}. ${walk.moves.length === 1 ? "Each move applies the same map modulo 1:" : html`Each move draws one of ${plural(walk.moves.length, "map")}, independently of the past, and applies it modulo 1:`}</p>
<div class="matrices">
${walk.moves.map(moveBlock)}</div>
${start(walk)}
<p>Observables:</p>
<dl class="plain">${walk.observables.map((o) => html`<dt>${o.label}</dt><dd>${observableFormula(o)}</dd>\n`)}</dl>
</section>
`;
}
