/**
 * What is kept of an unfinished file of positions: `FILE.part` holds its bytes so far,
 * `FILE.checkpoint` (JSON) how many of them are whole, what walk they are of, and what the
 * encoder and the report need to go on. Both go when the file is whole.
 */
import { readFile, rename, unlink, writeFile } from "node:fs/promises";
import type { Fault } from "../errors.js";
import type { SavedWalk } from "../trajectory/options.js";

export interface Checkpoint {
  /** Version of torwend, walk, seed, steps and whatever else decides the bytes. */
  readonly identity: Readonly<Record<string, string>>;
  /** Bytes of FILE.part that are whole. */
  readonly bytes: number;
  readonly encoder: unknown;
  readonly walk: SavedWalk;
}

export const partOf = (file: string) => `${file}.part`;
export const checkpointOf = (file: string) => `${file}.checkpoint`;

/** Replaces the checkpoint at once: a reader finds the old one or the new one, whole. */
export async function writeCheckpoint(file: string, checkpoint: Checkpoint): Promise<void> {
  const temporary = `${checkpointOf(file)}.new`;
  await writeFile(temporary, JSON.stringify(checkpoint), { flush: true } as object);
  await rename(temporary, checkpointOf(file));
}

/** @returns undefined where there is none; a text says what is wrong with the one that is there */
export async function readCheckpoint(file: string): Promise<Checkpoint | string | undefined> {
  let text: string;
  try {
    text = await readFile(checkpointOf(file), "utf8");
  } catch (error) {
    return (error as { code?: string }).code === "ENOENT" ? undefined : String((error as Error).message);
  }
  try {
    const read = JSON.parse(text) as Checkpoint;
    const whole = (x: unknown) => Number.isSafeInteger(x) && (x as number) >= 0;
    const good =
      typeof read.identity === "object" &&
      whole(read.bytes) &&
      whole(read.walk?.rows) &&
      Array.isArray(read.walk.positions) &&
      read.walk.positions.every((p) => whole(p?.step) && Array.isArray(p?.point));
    return good ? read : "it is no checkpoint of torwend";
  } catch {
    return "it is not JSON";
  }
}

/** One fault for each thing in which the unfinished walk differs from the one that is asked for. */
export function differences(
  file: string,
  found: Readonly<Record<string, string>>,
  wanted: Readonly<Record<string, string>>,
): Fault[] {
  return [...new Set([...Object.keys(wanted), ...Object.keys(found)])]
    .filter((key) => found[key] !== wanted[key])
    .map((key) => ({
      pointer: "--resume",
      message:
        `${checkpointOf(file)} is of another ${key}: found ${found[key] ?? "none"}; ` +
        `accepted: ${wanted[key] ?? "none"}, as asked for now`,
    }));
}

export async function removeUnfinished(file: string): Promise<void> {
  await unlink(checkpointOf(file)).catch(() => undefined);
  await unlink(partOf(file)).catch(() => undefined);
}
