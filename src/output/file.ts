/**
 * Files of positions, for Node: written block by block to a temporary name beside the
 * file, and renamed when whole, so that a file of that name is never half-written.
 */
import { type FileHandle, open, rename, unlink } from "node:fs/promises";
import { LimitError, OptionsError } from "../errors.js";
import type { PositionBlock } from "../trajectory/block.js";
import type { PositionShape, PositionSink } from "../trajectory/options.js";
import { csvHeader, csvRows } from "./csv.js";
import { npyHeader, npyValues } from "./npy.js";

interface Format {
  header(shape: PositionShape): Uint8Array | string;
  rows(block: PositionBlock, shape: PositionShape): Uint8Array | string;
}

const formats: Readonly<Record<string, Format>> = {
  ".npy": {
    header: ({ rows, dimension }) => npyHeader(rows, dimension),
    rows: (block) => npyValues(block.doubles()),
  },
  ".csv": {
    header: ({ dimension }) => csvHeader(dimension),
    rows: (block, { digits }) => csvRows(block, digits),
  },
};

function reason(error: unknown): string {
  return error instanceof Error ? error.message : String(error);
}

async function append(handle: FileHandle, data: Uint8Array | string): Promise<void> {
  const bytes = typeof data === "string" ? new TextEncoder().encode(data) : data;
  for (let at = 0; at < bytes.length; ) at += (await handle.write(bytes, at)).bytesWritten;
}

/**
 * The `out` option of `trajectory` for a file whose name ends in `.npy` (doubles, shape
 * (steps + 1, d), the first 53 bits after the binary point) or `.csv` (step and decimals).
 * @throws OptionsError for another ending; when opened, where the file cannot be written
 */
export function positionFile(file: string): (shape: PositionShape) => Promise<PositionSink> {
  const format = formats[/\.[^./\\]*$/.exec(file)?.[0]?.toLowerCase() ?? ""];
  if (format === undefined) {
    const accepted = `accepted: a name that ends in ${Object.keys(formats).join(" or ")}`;
    throw new OptionsError([{ pointer: "--out", message: `found ${file}; ${accepted}` }]);
  }
  return async (shape) => {
    const temporary = `${file}.${process.pid}.part`;
    let handle: FileHandle;
    try {
      handle = await open(temporary, "w");
    } catch (error) {
      throw new OptionsError([{ pointer: "--out", message: `${file} cannot be written: ${reason(error)}` }]);
    }
    const guarded = async (work: () => Promise<void>) => {
      try {
        await work();
      } catch (error) {
        throw new LimitError(`writing ${file} ended early (${reason(error)}); no part of it is kept`);
      }
    };
    let opened = false;
    return {
      file,
      write: (block) =>
        guarded(async () => {
          if (!opened) await append(handle, format.header(shape));
          opened = true;
          await append(handle, format.rows(block, shape));
        }),
      finish: () =>
        guarded(async () => {
          await handle.sync();
          await handle.close();
          await rename(temporary, file);
        }),
      discard: async () => {
        await handle.close().catch(() => undefined);
        await unlink(temporary).catch(() => undefined);
      },
    };
  };
}
