/** How positions become the bytes of a file, block by block. */
import type { PositionBlock } from "../trajectory/block.js";
import type { PositionShape } from "../trajectory/options.js";

export interface Encoder {
  header(): Uint8Array;
  rows(block: PositionBlock): Uint8Array;
  footer(): Uint8Array;
  /** What another encoder needs to go on after the rows written so far; JSON. */
  readonly state: unknown;
}

/**
 * @param state of an encoder whose work is to be gone on with
 * @throws Error where the state is not one of this format's
 */
export type EncoderFactory = (shape: PositionShape, state?: unknown) => Encoder;

export const NOTHING: Uint8Array = new Uint8Array(0);
