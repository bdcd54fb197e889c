/** The jobs of the sampled averages. */
import { defineJob } from "../kernel/jobs.js";
import { canonicalText } from "../walk/hash.js";
import { parseWalk } from "../walk/parse.js";
import type { Walk } from "../walk/walk.js";
import { type SegmentsRequest, segmentSums } from "./replicates.js";

export interface SegmentsPayload extends SegmentsRequest {
  /** The walk's document, since a walk itself holds functions. */
  readonly document: unknown;
}

/** The walk of the last job: the digits of its start, dear for long walks, are kept with it. */
let last: { readonly text: string; readonly walk: Walk } | undefined;

function walkOf(document: unknown): Walk {
  const text = canonicalText(document);
  if (last?.text !== text) last = { text, walk: parseWalk(document as object) };
  return last.walk;
}

/** Sums of the observables over segments of replicates `first`, ..., `first + count - 1`: see `segmentSums`. */
export const segmentsJob = defineJob("averages.segments", (payload: SegmentsPayload) =>
  segmentSums(walkOf(payload.document), payload),
);
