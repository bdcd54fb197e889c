/** Answer of `trajectory`. */
export interface TrajectoryResult {
  readonly torwend: string;
  readonly walk: string;
  readonly positions: readonly { readonly step: number; readonly point: readonly string[] }[];
  /** Binary digits of the start, a coordinate, beyond those shown that position `steps` needed: log2 of the product's size. */
  readonly bitsConsumed: number;
  readonly standing: "exact" | "enclosed";
  readonly digits: number;
  readonly method: string;
  /** Where `--out` wrote all positions. */
  readonly written?: { readonly file: string; readonly rows: number };
}
