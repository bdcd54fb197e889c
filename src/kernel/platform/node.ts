/** What differs between Node and a browser, Node's side: workers and the number of processors. */
import { existsSync } from "node:fs";
import { availableParallelism } from "node:os";
import { Worker } from "node:worker_threads";
import type { WorkerPort } from "./port.js";

export function defaultWorkers(): number {
  return availableParallelism();
}

/** Starts a worker, or returns undefined where the worker's file is not there (running from sources). */
export function startWorker(): WorkerPort | undefined {
  const url = new URL("./worker.js", import.meta.url);
  if (url.protocol !== "file:" || !existsSync(url)) return undefined;
  const worker = new Worker(url);
  worker.unref();
  return {
    post: (message, transfer) => worker.postMessage(message, transfer as never),
    onMessage: (listener) => worker.on("message", listener),
    onError: (listener) => {
      worker.on("error", listener);
    },
    hold: () => worker.ref(),
    letGo: () => worker.unref(),
    end: () => {
      void worker.terminate();
    },
  };
}
