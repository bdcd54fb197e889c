/**
 * A pool of workers that runs jobs, or the calling thread where none is wanted or can be
 * had. The results' order is the payloads' order, whatever finished first.
 */
import { defaultWorkers, startWorker } from "#platform";
import { StoppedError } from "../errors.js";
import type { Job } from "./jobs.js";
import type { WorkerPort } from "./platform/port.js";

/** What goes to a worker, and what comes back. */
export interface JobRequest {
  readonly id: number;
  readonly name: string;
  readonly payload: unknown;
}
export type JobReply =
  | { readonly id: number; readonly result: unknown }
  | {
      readonly id: number;
      readonly error: { readonly name: string; readonly message: string; readonly stack?: string };
    };

interface Seat {
  readonly port: WorkerPort;
  settle: ((reply: JobReply) => void) | undefined;
}

export interface MapOptions {
  readonly signal?: AbortSignal | undefined;
  /** Called as results come in, with the number that is finished. */
  readonly onDone?: ((done: number) => void) | undefined;
}

/** Lets timers and messages run, so that an in-thread map can be stopped and can show progress. */
function breathe(): Promise<void> {
  return new Promise((resolve) => setTimeout(resolve, 0));
}

function revive(
  error: { name: string; message: string; stack?: string },
  known: ReadonlyMap<string, new (message: string) => Error>,
): Error {
  const Class = known.get(error.name);
  const revived = Class === undefined ? new Error(error.message) : new Class(error.message);
  if (error.stack !== undefined) revived.stack = error.stack;
  return revived;
}

export class Pool {
  private readonly seats: Seat[] = [];
  private started = false;
  private nextId = 0;

  /**
   * @param workers number of workers; 0 and 1 run in the calling thread. Default: the processors.
   * @param known errors that keep their class across the border, by name.
   */
  constructor(
    private readonly workers: number = defaultWorkers(),
    private readonly known: ReadonlyMap<string, new (message: string) => Error> = new Map(),
  ) {}

  private start(): void {
    if (this.started) return;
    this.started = true;
    if (this.workers < 2) return;
    for (let i = 0; i < this.workers; i++) {
      const port = startWorker();
      if (port === undefined) break;
      const seat: Seat = { port, settle: undefined };
      port.onMessage((message) => seat.settle?.(message as JobReply));
      port.onError((error) =>
        seat.settle?.({ id: -1, error: { name: "Error", message: `a worker failed: ${String(error)}` } }),
      );
      this.seats.push(seat);
    }
  }

  /** Runs the job on each payload. @throws StoppedError when the signal fires, and what a job throws. */
  async map<P, R>(job: Job<P, R>, payloads: readonly P[], options: MapOptions = {}): Promise<R[]> {
    this.start();
    const { signal, onDone } = options;
    const results = new Array<R>(payloads.length);
    let next = 0;
    let done = 0;
    const stopIfAsked = () => {
      if (signal?.aborted) throw new StoppedError();
    };
    const finish = (index: number, result: R) => {
      results[index] = result;
      done++;
      onDone?.(done);
    };
    stopIfAsked();
    if (this.seats.length === 0) {
      for (; next < payloads.length; next++) {
        await breathe();
        stopIfAsked();
        finish(next, await job.run(payloads[next] as P));
      }
      return results;
    }
    const serve = async (seat: Seat) => {
      while (next < payloads.length) {
        const index = next++;
        stopIfAsked();
        finish(index, await this.ask<R>(seat, job.name, payloads[index], signal));
      }
    };
    try {
      await Promise.all(this.seats.map(serve));
    } catch (error) {
      // A worker may be in the middle of a job that nobody waits for: end them all, start afresh when asked again.
      next = payloads.length;
      this.close();
      throw error;
    }
    return results;
  }

  private ask<R>(seat: Seat, name: string, payload: unknown, signal: AbortSignal | undefined): Promise<R> {
    return new Promise<R>((resolve, reject) => {
      const id = this.nextId++;
      const stop = () => {
        release();
        reject(new StoppedError());
      };
      const release = () => {
        seat.settle = undefined;
        seat.port.letGo();
        signal?.removeEventListener("abort", stop);
      };
      seat.settle = (reply) => {
        release();
        if ("error" in reply) reject(revive(reply.error, this.known));
        else resolve(reply.result as R);
      };
      signal?.addEventListener("abort", stop, { once: true });
      seat.port.hold();
      seat.port.post({ id, name, payload } satisfies JobRequest, []);
    });
  }

  close(): void {
    for (const seat of this.seats) seat.port.end();
    this.seats.length = 0;
    this.started = false;
  }
}
