/** Building HTML out of text that may come from a file: everything is escaped unless it is Html already. */

/** Markup that is ready to be written; only `html` and `trusted` make it. */
export class Html {
  constructor(readonly markup: string) {}
  toString(): string {
    return this.markup;
  }
}

export type Piece = Html | string | number | bigint | readonly Piece[] | undefined | false;

const ENTITIES: Readonly<Record<string, string>> = {
  "&": "&amp;",
  "<": "&lt;",
  ">": "&gt;",
  '"': "&quot;",
  "'": "&#39;",
};

/**
 * Text for an element or for a quoted attribute. Control characters, which no HTML may hold,
 * and those that turn the direction of the text around them become a visible stand-in.
 */
export function escapeText(text: string): string {
  return (
    text
      // biome-ignore lint/suspicious/noControlCharactersInRegex: these are what is looked for.
      .replace(/[\u0000-\u0008\u000b\u000c\u000e-\u001f\u007f-\u009f\u202a-\u202e\u2066-\u2069\ufffe\uffff]/g, "\ufffd")
      .replace(/[&<>"']/g, (c) => ENTITIES[c] as string)
  );
}

/** Markup made elsewhere (a rendered plot, a style sheet). Never text from a file. */
export function trusted(markup: string): Html {
  return new Html(markup);
}

function write(piece: Piece): string {
  if (piece === undefined || piece === false) return "";
  if (piece instanceof Html) return piece.markup;
  if (Array.isArray(piece)) return piece.map(write).join("");
  return escapeText(String(piece));
}

/** A template whose values are escaped; `undefined` and `false` write nothing. */
export function html(parts: TemplateStringsArray, ...values: Piece[]): Html {
  let markup = parts[0] as string;
  for (let i = 0; i < values.length; i++) markup += write(values[i]) + parts[i + 1];
  return new Html(markup);
}

/** Pieces with something between them. */
export function joined(pieces: readonly Piece[], between: Piece): Html {
  return new Html(pieces.map(write).join(write(between)));
}
