/**
 * Positions as an Arrow file (Apache Arrow columnar format, IPC file): the column `step`
 * (uint32) and x1, ..., xd (float64, the first 53 bits after the binary point), a record
 * batch a block.
 */
import {
  Field,
  Float64,
  makeData,
  RecordBatch,
  RecordBatchFileWriter,
  Schema,
  Struct,
  type TypeMap,
  Uint32,
} from "apache-arrow";
import type { EncoderFactory } from "./encoder.js";

/** Where a record batch is, as the file's footer lists them: bytes of metadata and of body, offset. */
type Place = readonly [metadata: number, body: number, offset: number];

interface State {
  readonly position: number;
  readonly places: readonly Place[];
}

/** A writer that hands out its bytes as they come, and whose footer can list a former run's batches. */
class Writer extends RecordBatchFileWriter<TypeMap> {
  private pieces: Uint8Array[] = [];

  constructor(
    private readonly columns: Schema,
    state: State | undefined,
  ) {
    super({ autoDestroy: false });
    this.reset(undefined, columns);
    if (state === undefined) return;
    this.pieces = [];
    this._position = state.position;
    this._recordBatchBlocks = state.places.map(([metaDataLength, bodyLength, offset]) => ({
      metaDataLength,
      bodyLength,
      offset,
    }));
  }

  protected override _write(chunk: ArrayBufferView): this {
    if (!this._started || chunk.byteLength === 0) return this;
    this.pieces.push(new Uint8Array(chunk.buffer, chunk.byteOffset, chunk.byteLength));
    this._position += chunk.byteLength;
    return this;
  }

  /** The bytes since the last call, in one piece. */
  take(): Uint8Array {
    const bytes = new Uint8Array(this.pieces.reduce((sum, piece) => sum + piece.length, 0));
    let at = 0;
    for (const piece of this.pieces) {
      bytes.set(piece, at);
      at += piece.length;
    }
    this.pieces = [];
    return bytes;
  }

  end(): Uint8Array {
    this._writeFooter(this.columns);
    return this.take();
  }

  get state(): State {
    const places = this._recordBatchBlocks.map((b): Place => [b.metaDataLength, b.bodyLength, b.offset]);
    return { position: this._position, places };
  }
}

function readState(state: unknown): State {
  const { position, places } = state as State;
  const place = (p: unknown) => Array.isArray(p) && p.length === 3 && p.every((x) => Number.isSafeInteger(x));
  if (!Number.isSafeInteger(position) || !Array.isArray(places) || !places.every(place)) {
    throw new Error("the list of record batches is not readable");
  }
  return { position, places };
}

export const arrowEncoder: EncoderFactory = ({ dimension }, state) => {
  const names = Array.from({ length: dimension }, (_, j) => `x${j + 1}`);
  const fields = [
    new Field("step", new Uint32(), false),
    ...names.map((name) => new Field(name, new Float64(), false)),
  ];
  const writer = new Writer(new Schema(fields), state === undefined ? undefined : readState(state));
  const type = new Struct(fields);
  return {
    header: () => writer.take(),
    rows: (block) => {
      const { first, rows } = block;
      const steps = Uint32Array.from({ length: rows }, (_, row) => first + row);
      const doubles = block.doubles();
      const children = [
        makeData({ type: new Uint32(), data: steps }),
        ...names.map((_, j) => {
          const data = new Float64Array(rows);
          for (let row = 0; row < rows; row++) data[row] = doubles[row * dimension + j] as number;
          return makeData({ type: new Float64(), data });
        }),
      ];
      writer.write(new RecordBatch(new Schema(fields), makeData({ type, length: rows, nullCount: 0, children })));
      return writer.take();
    },
    footer: () => writer.end(),
    get state() {
      return writer.state;
    },
  };
};
