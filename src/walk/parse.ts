/** From a walk file to a typed walk, or to everything that is wrong with it. */
import { WalkError } from "../errors.js";
import { Findings, shown } from "./findings.js";
import { readObservables, readStart, type WrittenObservable, type WrittenStart } from "./functions.js";
import { documentFromObject, documentFromText } from "./json.js";
import { effectiveDimension, readMoves, type WrittenMove } from "./moves.js";
import { checkShape } from "./shape.js";
import type { Walk } from "./walk.js";

/** What every question takes: a parsed walk, the text of a walk file, or its document. */
export type WalkInput = Walk | string | object;

interface Written {
  readonly title?: string;
  readonly dimension: number;
  readonly moves: readonly WrittenMove[];
  readonly start?: WrittenStart;
  readonly observables?: readonly WrittenObservable[];
}

/** The walks made by parseWalk: these need no second look. */
const parsed = new WeakSet<object>();

const isObject = (value: unknown): value is Record<string, unknown> =>
  typeof value === "object" && value !== null && !Array.isArray(value);

/**
 * Validates a walk file: its text (strict JSON), or the document as an object, where BigInts
 * are welcome as matrix entries and frequencies.
 * @throws WalkError with every fault at once, in the order of the document.
 */
export function parseWalk(input: string | object): Walk {
  const findings = new Findings();
  if (typeof input !== "string" && !isObject(input)) {
    throw new WalkError([
      { pointer: "", message: `found ${shown(input)}; accepted: the text or the object of a walk file` },
    ]);
  }
  const document = typeof input === "string" ? documentFromText(input, findings) : documentFromObject(input, findings);
  checkShape(document, findings);
  if (!isObject(document.value)) throw new WalkError(findings.ordered(document.value));

  // Parts with a faulty shape are passed over; the rest is judged too, to tell all at once.
  const written = document.value as unknown as Written;
  const objects = <T extends object>(pointer: string, items: readonly T[] | undefined): readonly T[] | undefined =>
    findings.at(pointer) ? undefined : items?.map((item) => (isObject(item) ? item : ({} as T)));
  const moves = objects("/moves", written.moves) ?? [];
  const d = effectiveDimension(written.dimension, moves, findings);
  const readyMoves = readMoves(moves, d, findings);
  const start = readStart(written.start, d, findings);
  const observables = readObservables(objects("/observables", written.observables), d, findings);
  if (findings.any) throw new WalkError(findings.ordered(document.value));

  const walk: Walk = Object.freeze({
    title: written.title ?? "untitled walk",
    dimension: written.dimension,
    moves: readyMoves,
    start,
    observables,
    document: document.value,
  });
  parsed.add(walk);
  return walk;
}

/** The walk itself where it comes from parseWalk, else what parseWalk makes of it. @throws WalkError */
export function asWalk(input: WalkInput): Walk {
  return typeof input === "object" && parsed.has(input) ? (input as Walk) : parseWalk(input);
}
