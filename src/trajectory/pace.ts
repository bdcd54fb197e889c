/** How long a walk, and whoever reads its blocks, will still take: from the time that both have taken. */
export interface Share {
  readonly done: number;
  readonly total: number;
}

export class Pace {
  private walking = 0;
  private reading = 0;
  private since: number;

  constructor(private readonly now: () => number = () => performance.now()) {
    this.since = now();
  }

  private lap(): number {
    const before = this.since;
    this.since = this.now();
    return this.since - before;
  }

  /** The walk has worked since the last call of either. */
  walked(): void {
    this.walking += this.lap();
  }

  /** The reader had a block since then. */
  read(): void {
    this.reading += this.lap();
  }

  /** Seconds taken so far. */
  get seconds(): number {
    return (this.walking + this.reading) / 1000;
  }

  /**
   * Seconds left. The walk's from its share of work, the reader's from its share of positions.
   * @param rows undefined: the reader's time is nothing that matters
   * @returns undefined while one of the two has shown nothing yet
   */
  secondsLeft(work: Share, rows: Share | undefined): number | undefined {
    if (!(work.done > 0) || rows?.done === 0) return undefined;
    const left = (spent: number, { done, total }: Share) => (spent * Math.max(0, total - done)) / done;
    return (left(this.walking, work) + (rows === undefined ? 0 : left(this.reading, rows))) / 1000;
  }
}
