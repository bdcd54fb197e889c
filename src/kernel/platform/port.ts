/** The few things that a pool needs of a worker, in Node or in a browser. */
export interface WorkerPort {
  post(message: unknown, transfer: readonly ArrayBuffer[]): void;
  onMessage(listener: (message: unknown) => void): void;
  onError(listener: (error: unknown) => void): void;
  /** While held, the worker keeps the process alive. */
  hold(): void;
  letGo(): void;
  end(): void;
}
