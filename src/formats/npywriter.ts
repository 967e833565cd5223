import { latchmapError } from "../recording/errors.js";
import { type ElementType, elementOf, type Values } from "../recording/recording.js";

const DESCR: Readonly<Record<ElementType, string>> = {
  uint8: "|u1",
  int8: "|i1",
  uint16: "<u2",
  int16: "<i2",
  uint32: "<u4",
  int32: "<i4",
  float32: "<f4",
  float64: "<f8",
};

/**
 * An NPY file, version 1.0: C order, little-endian, the values beginning at a multiple of 64 bytes.
 *
 * @param values row-major
 * @param shape  the extent of each axis; their product is the number of values
 * @throws {LatchmapError} `bad-setting` when shape and values do not fit
 * @see numpy.lib.format (NEP 1)
 */
export function npyBytes(values: Values, shape: readonly number[]): Uint8Array<ArrayBuffer> {
  const cells = shape.reduce((product, length) => product * length, 1);
  if (cells !== values.length) {
    throw latchmapError(
      "bad-setting",
      `the shape [${shape.join(", ")}] has ${cells} cells for ${values.length} values`,
      "Give a shape whose product is the number of values",
    );
  }
  const tuple = shape.length === 1 ? `(${shape[0]},)` : `(${shape.join(", ")})`;
  const header = `{'descr': '${DESCR[elementOf(values)]}', 'fortran_order': False, 'shape': ${tuple}, }`;
  const dataStart = Math.ceil((10 + header.length + 1) / 64) * 64;
  const file = new Uint8Array(dataStart + values.byteLength);
  file.set([0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59, 1, 0]);
  new DataView(file.buffer).setUint16(8, dataStart - 10, true);
  file.set(new TextEncoder().encode(`${header.padEnd(dataStart - 11)}\n`), 10);
  file.set(littleEndian(values), dataStart);
  return file;
}

function littleEndian(values: Values): Uint8Array {
  const bytes = new Uint8Array(values.buffer, values.byteOffset, values.byteLength);
  if (new Uint8Array(Uint16Array.of(1).buffer)[0] === 1) return bytes;
  const each = values.BYTES_PER_ELEMENT;
  return bytes.map((_, i) => bytes[i - (i % each) + each - 1 - (i % each)]);
}
