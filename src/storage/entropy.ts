/**
 * The entropy of counts, in bits, with the number of states seen (counts above 0).
 * Equal counts are summed together, in ascending order, so that neither the order of the states nor
 * the way they were numbered leaves a trace in the last bit.
 *
 * @param counts whole numbers ≥ 0
 * @param total their sum; with a total of 0 the entropy is 0
 */
export function entropyOfCounts(
  counts: Float64Array | Uint32Array,
  total: number,
): { readonly bits: number; readonly seen: number } {
  let positive = 0;
  for (let i = 0; i < counts.length; i++) if (counts[i] > 0) positive++;
  const seen = new Float64Array(positive);
  for (let i = 0, filled = 0; i < counts.length; i++) {
    if (counts[i] > 0) seen[filled++] = counts[i];
  }
  seen.sort();
  let bits = 0;
  for (let i = 0; i < seen.length; ) {
    const count = seen[i];
    const first = i;
    while (i < seen.length && seen[i] === count) i++;
    bits += (i - first) * (count / total) * Math.log2(total / count);
  }
  return { bits, seen: seen.length };
}
