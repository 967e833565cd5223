const DIGIT_BITS = 16;
const DIGITS = 2 ** DIGIT_BITS;
const PASSES = 64 / DIGIT_BITS;
/** Of the words of a number in memory the least comes first, as on every machine in use. */
const LEAST_FIRST = new Uint8Array(Uint16Array.of(1).buffer)[0] === 1;

/**
 * The positions of numbers ≥ 0 in ascending order; equal ones stay in the order of
 * `before`. By counting digits of their bits, least first, which for such numbers sort as they do.
 */
export function ascendingBy(keys: Float64Array, before: Uint32Array): Uint32Array {
  const { length } = keys;
  let order = before;
  const digits = new Uint16Array(keys.buffer, keys.byteOffset, PASSES * length);
  const starts = new Uint32Array(DIGITS + 1);
  for (let pass = 0; pass < PASSES; pass++) {
    const word = LEAST_FIRST ? pass : PASSES - 1 - pass;
    starts.fill(0);
    for (let i = 0; i < length; i++) starts[digits[PASSES * i + word] + 1]++;
    // All the same: nothing to part.
    if (length > 0 && starts[digits[word] + 1] === length) continue;
    for (let digit = 1; digit <= DIGITS; digit++) starts[digit] += starts[digit - 1];
    const sorted = new Uint32Array(length);
    for (let i = 0; i < length; i++) {
      const at = order[i];
      sorted[starts[digits[PASSES * at + word]]++] = at;
    }
    order = sorted;
  }
  return order;
}
