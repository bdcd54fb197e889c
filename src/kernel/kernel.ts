/**
 * One instance of the compiled kernel and its arena. This folder is the only place that
 * knows offsets and status codes: a file beside this one wraps each group of exports in
 * functions of typed arrays, and questions call those.
 */
import { instantiateSync } from "@assemblyscript/loader";
import { LimitError } from "../errors.js";
import type { KernelExports } from "../generated/exports.js";
import { plainBase64 } from "../generated/plain.js";
import { simdBase64 } from "../generated/simd.js";

export type KernelTarget = "simd" | "plain";

/** What an arena may hold unless the caller says otherwise, in bytes. */
export const DEFAULT_MEMORY_LIMIT = 2 ** 30;
/** A 32-bit memory ends here. */
const HARD_LIMIT = 0xffff0000;

const compiled = new Map<KernelTarget, Promise<WebAssembly.Module>>();

function decode(base64: string): Uint8Array<ArrayBuffer> {
  const text = atob(base64);
  const bytes = new Uint8Array(text.length);
  for (let i = 0; i < text.length; i++) bytes[i] = text.charCodeAt(i);
  return bytes;
}

let simdRuns: boolean | undefined;

/** Whether this engine takes the SIMD module. */
export function simdSupported(): boolean {
  simdRuns ??= WebAssembly.validate(decode(simdBase64));
  return simdRuns;
}

function compile(target: KernelTarget): Promise<WebAssembly.Module> {
  let module = compiled.get(target);
  if (module === undefined) {
    module = WebAssembly.compile(decode(target === "simd" ? simdBase64 : plainBase64));
    compiled.set(target, module);
  }
  return module;
}

export interface KernelOptions {
  /** Bytes that this instance's memory may reach; a run that needs more throws LimitError. */
  readonly memoryLimit?: number;
  /** Which build; chosen by the engine's abilities unless a test says otherwise. Results agree bit for bit. */
  readonly target?: KernelTarget;
}

/** Compiles the kernel (once a process and target) and makes a fresh instance with an empty arena. */
export async function loadKernel(options: KernelOptions = {}): Promise<Kernel> {
  const target = options.target ?? (simdSupported() ? "simd" : "plain");
  const module = await compile(target);
  return new Kernel(module, target, options.memoryLimit ?? DEFAULT_MEMORY_LIMIT);
}

export class Kernel {
  /** The raw exports; for files of this folder only. */
  readonly raw: KernelExports;

  constructor(
    module: WebAssembly.Module,
    readonly target: KernelTarget,
    readonly memoryLimit: number,
  ) {
    this.raw = instantiateSync<KernelExports>(module, {}).exports;
    this.raw.setCeiling(Math.min(memoryLimit, HARD_LIMIT));
  }

  /**
   * Takes `bytes` bytes of the arena, not cleared, aligned to 64.
   * Views made before may be detached: make them after the last allocation.
   * @throws LimitError where the limit would be passed; `what` names the need in the message.
   */
  alloc(bytes: number, what: string): number {
    this.require(bytes, what);
    const at = this.raw.alloc(bytes) >>> 0;
    if (at === 0) throw this.refusal(bytes, what);
    return at;
  }

  /** Throws LimitError where `bytes` more bytes would pass the limit; takes nothing. */
  require(bytes: number, what: string): void {
    if (!(bytes >= 0) || (this.raw.mark() >>> 0) + bytes > Math.min(this.memoryLimit, HARD_LIMIT)) {
      throw this.refusal(bytes, what);
    }
  }

  private refusal(bytes: number, what: string): LimitError {
    const mib = (x: number) => `${Math.ceil(x / 2 ** 20)} MiB`;
    return new LimitError(`${what} would take ${mib(bytes)} of memory; the limit is ${mib(this.memoryLimit)} in all`);
  }

  /** Runs `body` and gives back all that it took from the arena. */
  scoped<T>(body: () => T): T {
    const mark = this.raw.mark();
    try {
      return body();
    } finally {
      this.raw.release(mark);
    }
  }

  private get buffer(): ArrayBuffer {
    return this.raw.memory.buffer as ArrayBuffer;
  }

  u8(at: number, length: number): Uint8Array<ArrayBuffer> {
    return new Uint8Array(this.buffer, at, length);
  }
  u16(at: number, length: number): Uint16Array<ArrayBuffer> {
    return new Uint16Array(this.buffer, at, length);
  }
  u32(at: number, length: number): Uint32Array<ArrayBuffer> {
    return new Uint32Array(this.buffer, at, length);
  }
  i32(at: number, length: number): Int32Array<ArrayBuffer> {
    return new Int32Array(this.buffer, at, length);
  }
  u64(at: number, length: number): BigUint64Array<ArrayBuffer> {
    return new BigUint64Array(this.buffer, at, length);
  }
  i64(at: number, length: number): BigInt64Array<ArrayBuffer> {
    return new BigInt64Array(this.buffer, at, length);
  }
  f64(at: number, length: number): Float64Array<ArrayBuffer> {
    return new Float64Array(this.buffer, at, length);
  }
}
