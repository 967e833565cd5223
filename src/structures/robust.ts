/** The median; NaN of nothing. */
export function medianOf(values: ArrayLike<number>): number {
  const sorted = Float64Array.from(values).sort();
  const middle = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2;
}

/** What the median absolute deviation is to the standard deviation of normal values. */
const NORMAL = 1.4826;

/** The spread of values, as a standard deviation that outliers hardly move: 1.4826 median deviations. */
export function spreadOf(values: ArrayLike<number>): number {
  const centre = medianOf(values);
  return NORMAL * medianOf(Float64Array.from(values, (value) => Math.abs(value - centre)));
}

/** Means over blocks of so many steps, NaN where more than half of a block is missing. */
export function blockMeans(values: Float64Array, steps: number): number[] {
  return Array.from({ length: Math.floor(values.length / steps) }, (_, block) => {
    const own = values
      .subarray(block * steps, (block + 1) * steps)
      .filter((value) => !Number.isNaN(value));
    const sum = own.reduce((total, value) => total + value, 0);
    return 2 * own.length < steps ? Number.NaN : sum / own.length;
  });
}
