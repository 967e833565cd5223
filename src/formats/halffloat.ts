let table: Float32Array | undefined;

/**
 * The value of every 16-bit float by its bits, 65,536 entries, made at the first call.
 * @see IEEE 754-2019, binary16: 1 sign bit, 5 exponent bits (bias 15), 10 fraction bits
 */
export function halfFloats(): Float32Array {
  table ??= Float32Array.from({ length: 65_536 }, (_, bits) => {
    const sign = bits & 0x8000 ? -1 : 1;
    const exponent = (bits >> 10) & 0x1f;
    const fraction = bits & 0x3ff;
    if (exponent === 0) return sign * fraction * 2 ** -24;
    if (exponent === 0x1f) return fraction === 0 ? sign * Number.POSITIVE_INFINITY : Number.NaN;
    return sign * (1 + fraction / 1024) * 2 ** (exponent - 15);
  });
  return table;
}
