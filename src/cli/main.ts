/** The executable: the process's streams and signals around `run`. */
import { run } from "./run.js";

async function stdin(): Promise<Uint8Array> {
  const chunks: Buffer[] = [];
  for await (const chunk of process.stdin) chunks.push(chunk as Buffer);
  return Buffer.concat(chunks);
}

// A reader such as `head` that has seen enough is no fault.
process.stdout.on("error", (error: NodeJS.ErrnoException) => {
  if (error.code === "EPIPE") process.exit(0);
  throw error;
});
process.stderr.on("error", () => undefined);

const stop = new AbortController();
for (const signal of ["SIGINT", "SIGTERM"] as const) {
  process.on(signal, () => {
    if (stop.signal.aborted) process.exit(3);
    process.stderr.write(
      `\ntorwend: stopping; ${signal === "SIGINT" ? "Ctrl-C" : "the signal"} again ends it at once\n`,
    );
    stop.abort();
  });
}

process.exitCode = await run(process.argv.slice(2), {
  stdout: process.stdout,
  stderr: process.stderr,
  stdin,
  signal: stop.signal,
});
// Nothing is left to wait for; a signal handler must not keep the process.
process.stdout.write("", () => process.exit());
