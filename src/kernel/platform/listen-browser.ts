/** A worker's own end of the line, in a browser. */
interface Scope {
  onmessage: ((event: MessageEvent) => void) | null;
  postMessage(message: unknown, transfer: ArrayBuffer[]): void;
}

export function listen(
  handle: (request: unknown, reply: (message: unknown, transfer: ArrayBuffer[]) => void) => void,
): void {
  const scope = globalThis as unknown as Scope;
  scope.onmessage = (event) => handle(event.data, (message, transfer) => scope.postMessage(message, transfer));
}
