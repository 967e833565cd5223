/** The bytes of an NPY file of whole numbers below 256, version 1.0, C order (NumPy's format note NEP 1). */
export function npyFile(shape: readonly number[], values: ArrayLike<number>): Uint8Array {
  const shapeText = shape.length === 1 ? `${shape[0]},` : shape.join(", ");
  const text = `{'descr': '|u1', 'fortran_order': False, 'shape': (${shapeText}), }`;
  const length = Math.ceil((10 + text.length + 1) / 64) * 64;
  const bytes = new Uint8Array(length + values.length).fill(0x20, 0, length);
  bytes.set([0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59, 1, 0, (length - 10) & 255, (length - 10) >> 8]);
  bytes.set(new TextEncoder().encode(text), 10);
  bytes[length - 1] = 0x0a;
  bytes.set(Uint8Array.from(values), length);
  return bytes;
}
