/** What is found wrong with a document while it is read, collected to be thrown at once. */
import type { Fault } from "../errors.js";

const LENGTH_SHOWN = 60;

/** A value as a message shows it: short, on one line. */
export function shown(value: unknown): string {
  if (value === undefined) return "nothing";
  if (Array.isArray(value)) {
    const text = JSON.stringify(value);
    return value.length === 0 ? "an empty list" : text.length <= LENGTH_SHOWN ? text : `a list of ${value.length}`;
  }
  if (typeof value === "object" && value !== null) {
    const keys = Object.keys(value);
    return keys.length === 0 ? "an empty object" : `an object with ${shortened(keys.join(", "))}`;
  }
  return shortened(JSON.stringify(value) ?? String(value));
}

function shortened(text: string): string {
  return text.length <= LENGTH_SHOWN ? text : `${text.slice(0, LENGTH_SHOWN - 20)}... (${text.length} characters)`;
}

/** One more step of a JSON Pointer (RFC 6901). */
export function below(pointer: string, ...steps: (string | number)[]): string {
  return pointer + steps.map((s) => `/${String(s).replaceAll("~", "~0").replaceAll("/", "~1")}`).join("");
}

export class Findings {
  private readonly faults: Fault[] = [];

  add(pointer: string, message: string): void {
    this.faults.push({ pointer, message });
  }

  get any(): boolean {
    return this.faults.length > 0;
  }

  at(pointer: string): boolean {
    return this.faults.some((f) => f.pointer === pointer);
  }

  /** Nothing is wrong at the pointer or below it. */
  clean(pointer: string): boolean {
    return !this.faults.some((f) => f.pointer === pointer || f.pointer.startsWith(`${pointer}/`));
  }

  /** The faults in the order of the document: by the place of their pointers in `document`. */
  ordered(document: unknown): Fault[] {
    const place = new Map<string, number>();
    const visit = (value: unknown, pointer: string) => {
      place.set(pointer, place.size);
      if (typeof value !== "object" || value === null) return;
      for (const [key, item] of Object.entries(value)) visit(item, below(pointer, key));
    };
    visit(document, "");
    const of = (f: Fault) => place.get(f.pointer) ?? place.size;
    return [...this.faults].sort((a, b) => of(a) - of(b));
  }
}
