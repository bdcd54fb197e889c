/** A worker's own end of the line, in Node. */
import { parentPort } from "node:worker_threads";

export function listen(
  handle: (request: unknown, reply: (message: unknown, transfer: ArrayBuffer[]) => void) => void,
): void {
  parentPort?.on("message", (request) =>
    handle(request, (message, transfer) => parentPort?.postMessage(message, transfer)),
  );
}
