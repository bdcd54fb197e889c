/** The document against its JSON Schema, with one precise line for every fault. */
import type { ErrorObject } from "ajv";
import { closest } from "fastest-levenshtein";
import validate from "../generated/validateWalk.js";
import { below, type Findings, shown } from "./findings.js";
import type { Document } from "./json.js";

type Schema = { readonly accepted?: string; readonly properties?: Readonly<Record<string, unknown>> };

/** Faults of shape; numbers that were rounded are named as they were written. */
export function checkShape(document: Document, findings: Findings): void {
  const told = new Set<string>();
  const tell = (pointer: string, message: string) => {
    // Two keywords of one value say the same thing twice.
    if (!told.has(pointer + message)) findings.add(pointer, message);
    told.add(pointer + message);
  };
  if (!validate(document.value)) {
    for (const error of validate.errors as ErrorObject[]) {
      const { instancePath: at, keyword, params, data } = error;
      const schema = (error.parentSchema ?? {}) as Schema;
      const accepted = `accepted: ${schema.accepted ?? "another value"}`;
      if (keyword === "if") continue;
      if (keyword === "required") tell(at, `the field "${params.missingProperty}" is missing; ${accepted}`);
      else if (keyword === "additionalProperties") {
        const known = Object.keys(schema.properties ?? {});
        const field: string = params.additionalProperty;
        tell(
          below(at, field),
          `unknown field ${shown(field)}; nearest known one: "${closest(field, known)}"; accepted: ${known.join(", ")}`,
        );
      } else if (document.rounded.has(at)) {
        tell(at, `found the number ${document.rounded.get(at)}, which is rounded when JSON is read; ${accepted}`);
      } else tell(at, `found ${shown(data)}; ${accepted}`);
    }
  }
  for (const [pointer, written] of document.rounded) {
    if (findings.at(pointer)) continue;
    const accepted = `accepted: an integer up to 2^53 in absolute value, or the number as a text: "${written}"`;
    findings.add(pointer, `found the number ${written}, which is rounded when JSON is read; ${accepted}`);
  }
}
