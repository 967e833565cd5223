import { elementOf, type Values } from "../recording/recording.js";

const CODES = {
  uint8: "|u1",
  int8: "|i1",
  uint16: "<u2",
  int16: "<i2",
  uint32: "<u4",
  int32: "<i4",
  float32: "<f4",
  float64: "<f8",
} as const;

const LITTLE_ENDIAN_HERE = new Uint8Array(Uint16Array.of(1).buffer)[0] === 1;

/**
 * An array as the bytes of an NPY file, version 1.0, C order, little-endian, the values at a multiple
 * of 64 bytes.
 *
 * @param values row-major, as many as the shape holds
 * @see NumPy Enhancement Proposal 1, the .npy format
 */
export function npyBytes(values: Values, shape: readonly number[]): Uint8Array<ArrayBuffer> {
  const cells = shape.reduce((product, length) => product * length, 1);
  if (cells !== values.length) {
    throw new RangeError(`${values.length} values do not fill the shape [${shape.join(", ")}]`);
  }
  const dimensions = shape.length === 1 ? `${shape[0]},` : shape.join(", ");
  const fields = `{'descr': '${CODES[elementOf(values)]}', 'fortran_order': False, 'shape': (${dimensions}), }`;
  const start = Math.ceil((10 + fields.length + 1) / 64) * 64;
  const bytes = new Uint8Array(start + values.byteLength);
  const view = new DataView(bytes.buffer);
  bytes.set([0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59, 1, 0]);
  view.setUint16(8, start - 10, true);
  bytes.set(new TextEncoder().encode(`${fields.padEnd(start - 11)}\n`), 10);
  writeLittleEndian(values, view, start);
  return bytes;
}

function writeLittleEndian(values: Values, view: DataView, start: number): void {
  const { BYTES_PER_ELEMENT: width } = values;
  const bytes = new Uint8Array(values.buffer, values.byteOffset, values.byteLength);
  const target = new Uint8Array(view.buffer, start);
  target.set(bytes);
  if (width === 1 || LITTLE_ENDIAN_HERE) return;
  for (let i = 0; i < target.length; i += width) target.subarray(i, i + width).reverse();
}
