/**
 * Files of positions, for Node: written block by block to `FILE.part` and given their name
 * when whole, so that a file of that name is never half-written; with checkpoints from which
 * a stopped or killed run goes on (see checkpoint.ts).
 */
import { type FileHandle, open, rename } from "node:fs/promises";
import { type Fault, LimitError, OptionsError } from "../errors.js";
import type { PositionShape, PositionSink, SavedWalk } from "../trajectory/options.js";
import {
  type Checkpoint,
  checkpointOf,
  differences,
  partOf,
  readCheckpoint,
  removeUnfinished,
  writeCheckpoint,
} from "./checkpoint.js";
import { csvEncoder } from "./csv.js";
import type { EncoderFactory } from "./encoder.js";
import { npyEncoder } from "./npy.js";
import { reason } from "./reason.js";

/** Arrow's library is loaded only where it is asked for. */
const formats: Readonly<Record<string, () => Promise<EncoderFactory>>> = {
  ".npy": async () => npyEncoder,
  ".csv": async () => csvEncoder,
  ".arrow": async () => (await import("./arrow.js")).arrowEncoder,
};

export interface PositionFileOptions {
  /** Goes on with the unfinished walk that FILE.checkpoint tells of. */
  readonly resume?: boolean;
  /** Milliseconds from one checkpoint to the next; default 2000. */
  readonly every?: number;
}

function refuse(...faults: Fault[]): never {
  throw new OptionsError(faults);
}

const fault = (pointer: string, message: string): Fault => ({ pointer, message });

/** The checkpoint that is to be gone on with; undefined for a walk from its start. */
async function findCheckpoint(file: string, shape: PositionShape, resume: boolean): Promise<Checkpoint | undefined> {
  const found = await readCheckpoint(file);
  const name = checkpointOf(file);
  if (!resume) {
    if (found === undefined) return undefined;
    return refuse(
      fault("--out", `${name} tells of an unfinished walk: --resume goes on with it; delete it to begin anew`),
    );
  }
  if (found === undefined) return refuse(fault("--resume", `there is no ${name} to go on from`));
  if (typeof found === "string") return refuse(fault("--resume", `${name} cannot be used: ${found}`));
  const faults = differences(file, found.identity, shape.identity);
  return faults.length > 0 ? refuse(...faults) : found;
}

async function openPart(file: string, checkpoint: Checkpoint | undefined): Promise<FileHandle> {
  const part = partOf(file);
  try {
    if (checkpoint === undefined) return await open(part, "w");
    const handle = await open(part, "r+");
    const { size } = await handle.stat();
    if (size >= checkpoint.bytes) {
      // What came after the checkpoint may be torn.
      await handle.truncate(checkpoint.bytes);
      return handle;
    }
    await handle.close();
  } catch (error) {
    return refuse(fault("--out", `${part} cannot be written: ${reason(error)}`));
  }
  return refuse(fault("--resume", `${part} is shorter than its checkpoint says: it cannot be gone on with`));
}

/**
 * The `out` option of `trajectory` for a file whose name ends in `.npy` (doubles, shape
 * (steps + 1, d)), `.csv` (step and decimals) or `.arrow` (columns step, x1, ..., xd).
 * @throws OptionsError for another ending; when opened, where the file cannot be written,
 * where an unfinished walk is in the way, or where it is not the one to go on with.
 * While writing, LimitError where the disk refuses: what the checkpoint holds is kept.
 */
export function positionFile(
  file: string,
  { resume = false, every = 2000 }: PositionFileOptions = {},
): (shape: PositionShape) => Promise<PositionSink> {
  const load = formats[/\.[^./\\]*$/.exec(file)?.[0]?.toLowerCase() ?? ""];
  if (load === undefined) {
    const names = Object.keys(formats);
    const accepted = `accepted: a name that ends in ${names.slice(0, -1).join(", ")} or ${names.at(-1)}`;
    return refuse(fault("--out", `found ${file}; ${accepted}`));
  }
  return async (shape) => {
    const checkpoint = await findCheckpoint(file, shape, resume);
    const encoder = (await load())(shape, checkpoint?.encoder);
    const handle = await openPart(file, checkpoint);
    let bytes = checkpoint?.bytes ?? 0;
    let saved = checkpoint?.walk;
    let last = performance.now();
    const guarded = async (work: () => Promise<void>) => {
      try {
        await work();
      } catch (error) {
        await handle.close().catch(() => undefined);
        if (saved === undefined) await removeUnfinished(file);
        const kept =
          saved === undefined
            ? "no part of it is kept: make room and run again"
            : `the walk is kept up to move ${saved.rows - 1}: make room and run again with --resume`;
        throw new LimitError(`writing ${file} ended early (${reason(error)}); ${kept}`);
      }
    };
    const append = async (data: Uint8Array) => {
      for (let at = 0; at < data.length; ) {
        at += (await handle.write(data, at, data.length - at, bytes + at)).bytesWritten;
      }
      bytes += data.length;
    };
    const save = (walk: SavedWalk) =>
      guarded(async () => {
        await handle.datasync();
        await writeCheckpoint(file, { identity: shape.identity, bytes, encoder: encoder.state, walk });
        saved = walk;
        last = performance.now();
      });
    return {
      file,
      ...(checkpoint === undefined ? {} : { saved: checkpoint.walk }),
      write: (block) =>
        guarded(async () => {
          if (bytes === 0) await append(encoder.header());
          await append(encoder.rows(block));
        }),
      save: async (walk) => {
        if (performance.now() - last >= every) await save(walk());
      },
      finish: () =>
        guarded(async () => {
          await append(encoder.footer());
          await handle.sync();
          await handle.close();
          await rename(partOf(file), file);
          await removeUnfinished(file);
        }),
      suspend: async (walk) => {
        await save(walk());
        await handle.close();
        return "run again with --resume to go on";
      },
      discard: async () => {
        await handle.close().catch(() => undefined);
        if (saved === undefined) await removeUnfinished(file);
      },
    };
  };
}
