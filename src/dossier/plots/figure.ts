/**
 * A figure: one drawing at two widths (a column of text, a telephone), a caption, a
 * description for those who cannot see it. Drawn by Observable Plot; its marks take the
 * report's colours by name, so that both colour schemes and paper work.
 */
import * as Plot from "@observablehq/plot";
import { plotDocument } from "#document";
import { type Html, html, type Piece, trusted } from "../html.js";

export interface Size {
  readonly width: number;
  readonly narrow: boolean;
  /** Of the text in the drawing, in pixels. */
  readonly fontSize: number;
}

const WIDE: Size = { width: 680, narrow: false, fontSize: 12.5 };
const NARROW: Size = { width: 330, narrow: true, fontSize: 11.5 };

/** Colours and marks of series, in order: told apart by dash and symbol as well. */
export const SERIES = [
  { colour: "var(--c1)", dash: "", symbol: "circle" },
  { colour: "var(--c2)", dash: "6 3", symbol: "square" },
  { colour: "var(--c3)", dash: "2 3", symbol: "triangle" },
  { colour: "var(--c4)", dash: "8 3 2 3", symbol: "diamond" },
] as const;

export interface FigureContent {
  /** Unique in the report; letters, digits and dashes. */
  readonly id: string;
  /** Read out in the drawing's place. */
  readonly label: string;
  readonly caption: Piece;
  readonly draw: (size: Size) => Plot.PlotOptions;
}

/** A tenth of a pixel is enough, and makes the file a third smaller. */
function shorter(svg: string): string {
  return svg.replace(/ (?:d|transform|x|y|x1|x2|y1|y2|width|height)="[^"]*"/g, (attribute) =>
    attribute.replace(/\d+\.\d{2,}/g, (n) => String(Math.round(10 * Number(n)) / 10)),
  );
}

function drawing(content: FigureContent, size: Size, name: string): Html {
  const svg = Plot.plot({
    document: plotDocument(),
    width: size.width,
    className: "drawing",
    marginTop: 18,
    marginRight: 18,
    ...content.draw(size),
    style: { fontSize: `${size.fontSize}px`, background: "none" },
  }) as unknown as SVGElement;
  // Plot's own style sheet would be repeated in every drawing; the report's covers it.
  svg.querySelector("style")?.remove();
  svg.removeAttribute("class");
  svg.removeAttribute("font-family");
  const markup = shorter(svg.outerHTML).slice("<svg".length);
  return html`<svg class="${name}" role="img" aria-label="${content.label}" aria-describedby="${content.id}-caption"${trusted(markup)}`;
}

function framed(content: FigureContent, drawings: Piece): Html {
  return html`<figure id="${content.id}">
${drawings}
<figcaption id="${content.id}-caption">${content.caption}</figcaption>
</figure>
`;
}

/** As wide as the text, and drawn again for narrow screens. */
export function figure(content: FigureContent): Html {
  return framed(content, [drawing(content, WIDE, "wide"), drawing(content, NARROW, "narrow")]);
}

/** Half as wide as the text: two stand beside each other in `pair`, one on a narrow screen. */
export function smallFigure(content: FigureContent): Html {
  return framed(content, drawing(content, NARROW, "small"));
}

/** Two small figures beside each other where there is room; undefined where there is neither. */
export function pair(first: Html | undefined, second: Html | undefined): Html | undefined {
  if (first === undefined && second === undefined) return undefined;
  return html`<div class="pair">${first}${second}</div>
`;
}
