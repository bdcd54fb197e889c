/** C peers: compiled where a compiler and libgmp are there, run as processes, their answers' hashes compared. */
import { execFileSync } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";

const sources = join(dirname(fileURLToPath(import.meta.url)), "native");

export interface Peer {
  /** Runs with these input words and arguments. @returns median milliseconds, and the answer's hash */
  run(input: BigUint64Array, ...args: string[]): { milliseconds: number; hash: bigint };
  /** Milliseconds of the whole process, started cold. */
  cold(input: BigUint64Array, ...args: string[]): number;
}

/**
 * @param compiler gcc or g++, with these further arguments
 * @returns undefined where it cannot be built here; the reason goes to standard error
 */
export function peer(source: string, compiler: "gcc" | "g++", libraries: readonly string[]): Peer | undefined {
  const folder = mkdtempSync(join(tmpdir(), "torwend-bench-"));
  process.on("exit", () => rmSync(folder, { recursive: true, force: true }));
  const program = join(folder, "peer");
  try {
    const flags = ["-O3", "-march=native", "-o", program, join(sources, source), ...libraries];
    execFileSync(compiler, flags, { stdio: ["ignore", "ignore", "pipe"] });
  } catch (error) {
    const first = String((error as { stderr?: unknown }).stderr ?? error).split("\n")[0];
    process.stderr.write(`${source} is left out: it cannot be built here (${first})\n`);
    return undefined;
  }
  const file = join(folder, "input");
  const call = (input: BigUint64Array, args: readonly string[]) => {
    writeFileSync(file, new Uint8Array(input.buffer, input.byteOffset, input.byteLength));
    const start = performance.now();
    const printed = execFileSync(program, [file, ...args], { encoding: "utf8" });
    return { printed, elapsed: performance.now() - start };
  };
  return {
    run(input, ...args) {
      const [milliseconds, hash] = call(input, args).printed.trim().split(" ") as [string, string];
      return { milliseconds: Number(milliseconds), hash: BigInt(`0x${hash}`) };
    },
    cold: (input, ...args) => call(input, args).elapsed,
  };
}

const PRIME = 1099511628211n;

/** The hash of the peers' positions: see hash_words in native/common.h. */
export function hashWords(hash: bigint, words: BigUint64Array, from = 0, to = words.length): bigint {
  for (let i = from; i < to; i++) hash = BigInt.asUintN(64, (hash ^ ((words[i] as bigint) >> 24n)) * PRIME);
  return hash;
}
