/** Reading input and writing output files. */
import { access, constants, mkdir, readFile, rename, stat, unlink, writeFile } from "node:fs/promises";
import { dirname, join, resolve } from "node:path";
import { type Fault, OptionsError } from "../errors.js";
import { reason } from "../output/reason.js";

/** UTF-8 text, a byte order mark taken off; or what is wrong. */
export function decodeText(bytes: Uint8Array): string | undefined {
  try {
    return new TextDecoder("utf-8", { fatal: true }).decode(bytes);
  } catch {
    return undefined;
  }
}

/** @throws OptionsError where the file of an option cannot be read */
export async function readOptionFile(option: string, file: string): Promise<string> {
  const fail = (message: string): never => {
    throw new OptionsError([{ pointer: option, message }]);
  };
  try {
    return decodeText(await readFile(file)) ?? fail(`${file} is not UTF-8 text`);
  } catch (error) {
    if (error instanceof OptionsError) throw error;
    return fail(`${file} cannot be read: ${reason(error)}`);
  }
}

function unwritable(what: string, error: unknown): OptionsError {
  const fault: Fault = { pointer: "--out", message: `${what} cannot be written: ${reason(error)}` };
  return new OptionsError([fault]);
}

/** Level by level: Node's own recursive mkdir does not return where the system refuses with ENOENT, as under /proc. */
async function makeDirectory(directory: string): Promise<void> {
  const there = await stat(directory).catch(() => undefined);
  if (there?.isDirectory()) return;
  if (dirname(directory) !== directory) await makeDirectory(dirname(directory));
  await mkdir(directory);
}

/** Makes the directory where it is missing, and sees that files can be made in it. @throws OptionsError */
export async function prepareDirectory(directory: string): Promise<void> {
  try {
    await makeDirectory(resolve(directory));
    await access(directory, constants.W_OK);
  } catch (error) {
    throw unwritable(directory, error);
  }
}

/** Sees that a file of that name can be made. @throws OptionsError */
export async function prepareFile(file: string): Promise<void> {
  try {
    await access(dirname(file), constants.W_OK);
    const there = await stat(file).catch(() => undefined);
    if (there?.isDirectory()) throw Object.assign(new Error(), { code: "EISDIR" });
  } catch (error) {
    throw unwritable(file, error);
  }
}

/** Writes each file whole under a temporary name, then gives all of them their names. @throws OptionsError */
export async function writeFiles(directory: string, files: Readonly<Record<string, string>>): Promise<void> {
  const made: string[] = [];
  try {
    for (const [name, text] of Object.entries(files)) {
      const temporary = join(directory, `${name}.${process.pid}.part`);
      made.push(temporary);
      await writeFile(temporary, text);
    }
    for (const [i, name] of Object.keys(files).entries()) await rename(made[i] as string, join(directory, name));
  } catch (error) {
    for (const file of made) await unlink(file).catch(() => undefined);
    throw unwritable(directory, error);
  }
}
