/**
 * NumPy's array file, format version 1.0 (NumPy reference, numpy.lib.format): magic,
 * header, then the values, here little-endian doubles in C order.
 */
import { type EncoderFactory, NOTHING } from "./encoder.js";

/** The file's beginning for an array of shape (rows, columns); a multiple of 64 bytes. */
export function npyHeader(rows: number, columns: number): Uint8Array<ArrayBuffer> {
  const fixed = 10; // magic, version and the header's length
  let text = `{'descr': '<f8', 'fortran_order': False, 'shape': (${rows}, ${columns}), }`;
  text = `${text.padEnd(Math.ceil((fixed + text.length + 1) / 64) * 64 - fixed - 1)}\n`;
  const bytes = new Uint8Array(fixed + text.length);
  bytes.set([0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59, 1, 0, text.length & 0xff, text.length >> 8]);
  for (let i = 0; i < text.length; i++) bytes[fixed + i] = text.charCodeAt(i);
  return bytes;
}

const littleEndian = new Uint8Array(new Uint16Array([1]).buffer)[0] === 1;

/** Values as the file holds them, row-major; on the usual machines a view of the values themselves. */
function npyValues(values: Float64Array<ArrayBuffer>): Uint8Array<ArrayBuffer> {
  if (littleEndian) return new Uint8Array(values.buffer, values.byteOffset, values.byteLength);
  const view = new DataView(new ArrayBuffer(values.byteLength));
  for (const [i, x] of values.entries()) view.setFloat64(8 * i, x, true);
  return new Uint8Array(view.buffer);
}

/** Doubles of shape (steps + 1, d): the first 53 bits after the binary point. */
export const npyEncoder: EncoderFactory = ({ rows, dimension }) => ({
  header: () => npyHeader(rows, dimension),
  rows: (block) => npyValues(block.doubles()),
  footer: () => NOTHING,
  state: {},
});
