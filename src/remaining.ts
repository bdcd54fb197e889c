/** The remaining time of a stage of even pieces of work, from those that are done. */

/** Milliseconds that a stage must have run before its pace is told. */
const SETTLED = 500;

export class Remaining {
  private stage: string | undefined;
  private since = 0;
  private from = 0;

  constructor(private readonly now: () => number = () => performance.now()) {}

  /** @returns seconds; undefined where there is too little to tell them from */
  left(stage: string, done: number, total: number): number | undefined {
    const now = this.now();
    if (stage !== this.stage || done < this.from) {
      this.stage = stage;
      this.since = now;
      this.from = done;
      return undefined;
    }
    const elapsed = now - this.since;
    const gone = done - this.from;
    if (elapsed < SETTLED || gone <= 0) return undefined;
    return (elapsed * Math.max(0, total - done)) / gone / 1000;
  }
}
