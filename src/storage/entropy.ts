const DIRECT = 65_536;

/**
 * The entropy of counts, in bits, with the number of states seen (counts above 0).
 * Summed over equal counts in ascending order, so that the order of the states leaves no trace in
 * the last bit.
 *
 * @param counts whole numbers ≥ 0
 * @param total their sum, above 0
 */
export function entropyOfCounts(
  counts: ArrayLike<number>,
  total: number,
): { readonly bits: number; readonly seen: number } {
  const statesWith = new Float64Array(DIRECT);
  const large: number[] = [];
  let seen = 0;
  for (let i = 0; i < counts.length; i++) {
    const count = counts[i];
    if (count === 0) continue;
    seen++;
    if (count < DIRECT) statesWith[count]++;
    else large.push(count);
  }
  let bits = 0;
  for (let count = 1; count < DIRECT; count++) {
    const states = statesWith[count];
    if (states > 0) bits += states * (count / total) * Math.log2(total / count);
  }
  large.sort((a, b) => a - b);
  for (const count of large) bits += (count / total) * Math.log2(total / count);
  return { bits, seen };
}
