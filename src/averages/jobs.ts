/** The jobs of the sampled averages. */
import { defineJob } from "../kernel/jobs.js";
import { parseWalk } from "../walk/parse.js";
import { type SegmentsRequest, segmentSums } from "./replicates.js";

export interface SegmentsPayload extends SegmentsRequest {
  /** The walk's document, since a walk itself holds functions. */
  readonly document: unknown;
}

/** Sums of the observables over segments of replicates `first`, ..., `first + count - 1`: see `segmentSums`. */
export const segmentsJob = defineJob("averages.segments", (payload: SegmentsPayload) =>
  segmentSums(parseWalk(payload.document as object), payload),
);
