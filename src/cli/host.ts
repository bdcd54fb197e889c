/** What the command line is given by its surroundings: streams, environment and a stop signal. */

export interface Sink {
  write(text: string): unknown;
  readonly isTTY?: boolean | undefined;
  readonly columns?: number | undefined;
}

export interface Host {
  readonly stdout: Sink;
  readonly stderr: Sink;
  /** All of standard input. */
  readonly stdin: () => Promise<Uint8Array>;
  readonly signal?: AbortSignal;
}
