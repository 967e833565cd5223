/**
 * The share of the variance of values that lies between groups of nodes (the correlation ratio η²),
 * 0 … 1; NaN where the values do not vary.
 * @param groupOf the group of every node, from 0 on
 */
export function shareBetween(values: Float64Array, groupOf: Uint32Array): number {
  const groups = 1 + groupOf.reduce((most, group) => Math.max(most, group), 0);
  const sums = new Float64Array(groups);
  const sizes = new Float64Array(groups);
  let total = 0;
  for (let i = 0; i < values.length; i++) {
    sums[groupOf[i]] += values[i];
    sizes[groupOf[i]]++;
    total += values[i];
  }
  const mean = total / values.length;
  let variance = 0;
  for (const value of values) variance += (value - mean) ** 2;
  let between = 0;
  for (let group = 0; group < groups; group++) {
    if (sizes[group] > 0) between += sizes[group] * (sums[group] / sizes[group] - mean) ** 2;
  }
  return variance === 0 ? Number.NaN : between / variance;
}
