/** Progress on standard error: a bar on a terminal, plain lines where asked for elsewhere. */
import { SingleBar } from "cli-progress";
import type { Progress } from "../session.js";
import type { Sink } from "./host.js";

export interface ProgressView {
  readonly show: ((progress: Progress) => void) | undefined;
  readonly end: () => void;
}

/** In words, rounded up to what a reader can use; nothing for less than a second. */
export function timeLeft(seconds: number | undefined): string {
  if (seconds === undefined || seconds < 1) return "";
  if (seconds < 100) return `, about ${Math.ceil(seconds)} s left`;
  if (seconds < 6000) return `, about ${Math.ceil(seconds / 60)} min left`;
  return `, about ${Math.ceil(seconds / 3600)} h left`;
}

function bar(stream: Sink): ProgressView {
  let drawn: SingleBar | undefined;
  let stage = "";
  const end = () => {
    drawn?.stop();
    drawn = undefined;
  };
  const show = (p: Progress) => {
    if (drawn === undefined || p.stage !== stage) {
      end();
      stage = p.stage;
      drawn = new SingleBar({
        format: "{stage} [{bar}] {percentage} %{left}",
        barCompleteChar: "=",
        barIncompleteChar: " ",
        barsize: 30,
        hideCursor: true,
        clearOnComplete: true,
        stopOnComplete: false,
        gracefulExit: false,
        stream: stream as NodeJS.WritableStream,
      });
      drawn.start(Math.max(1, p.total), p.done, { stage, left: timeLeft(p.secondsLeft) });
    }
    drawn.setTotal(Math.max(1, p.total));
    drawn.update(p.done, { stage, left: timeLeft(p.secondsLeft) });
  };
  return { show, end };
}

/** One line a stage and tenth. */
function lines(stream: Sink): ProgressView {
  let last = "";
  const show = ({ stage, done, total, secondsLeft }: Progress) => {
    const line = `${stage}: ${total > 0 ? Math.min(100, 10 * Math.floor((10 * done) / total)) : 0} %`;
    if (line !== last) stream.write(`${line}${timeLeft(secondsLeft)}\n`);
    last = line;
  };
  return { show, end: () => undefined };
}

export function openProgress(stream: Sink, asked: boolean): ProgressView {
  if (stream.isTTY === true) return bar(stream);
  return asked ? lines(stream) : { show: undefined, end: () => undefined };
}
