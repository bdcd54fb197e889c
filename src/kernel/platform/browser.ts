/** What differs between Node and a browser, the browser's side: workers and the number of processors. */
import type { WorkerPort } from "./port.js";

export function defaultWorkers(): number {
  return globalThis.navigator?.hardwareConcurrency ?? 1;
}

/** Starts a module worker, or returns undefined where the page may not. */
export function startWorker(): WorkerPort | undefined {
  if (typeof Worker === "undefined") return undefined;
  let worker: Worker;
  try {
    worker = new Worker(new URL("./worker.js", import.meta.url), { type: "module" });
  } catch {
    return undefined;
  }
  return {
    post: (message, transfer) => worker.postMessage(message, transfer as ArrayBuffer[]),
    onMessage: (listener) => worker.addEventListener("message", (event) => listener(event.data)),
    onError: (listener) => {
      worker.addEventListener("error", (event) => listener(event.error ?? new Error(event.message)));
    },
    hold: () => {},
    letGo: () => {},
    end: () => worker.terminate(),
  };
}
