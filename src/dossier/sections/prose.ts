/**
 * Reasons and methods come as plain text ("A_i A_j^-1", "<f, P^n f>"): set here as a reader
 * expects formulas to look. What stands in double quotes is a label of the file and stays as it is.
 */
import { type Html, html, type Piece } from "../html.js";

const RAISED_OR_LOWERED = /([_^])(\{[^{}]*\}|\([^()]*\)|-?[A-Za-z0-9]+)/g;

function signs(text: string): string {
  return text
    .replace(/\+-/g, "±")
    .replace(/\.\.\./g, "…")
    .replace(/<([A-Za-z][^<>]{0,30}, [^<>]{1,30})>/g, "⟨$1⟩")
    .replace(/<=/g, "≤")
    .replace(/>=/g, "≥")
    .replace(/ - (?=\S)/g, " − ")
    .replace(/\blambda\b|\blambda(?=_)/g, "λ")
    .replace(/\bpi\b/g, "π");
}

/** One stretch outside quotes, with its indices and exponents. */
function formulas(text: string): Piece[] {
  const pieces: Piece[] = [];
  let end = 0;
  for (const match of text.matchAll(RAISED_OR_LOWERED)) {
    pieces.push(text.slice(end, match.index));
    const inner = (match[2] as string).replace(/^[{(](.*)[)}]$/, "$1").replace(/^-/, "−");
    pieces.push(match[1] === "_" ? html`<sub>${inner}</sub>` : html`<sup>${inner}</sup>`);
    end = match.index + match[0].length;
  }
  pieces.push(text.slice(end));
  return pieces;
}

export function prose(text: string): Html {
  // Odd parts of the split are inside quotes.
  return html`${text.split('"').map((part, i) => (i % 2 === 1 ? `“${part}”` : formulas(signs(part))))}`;
}
