import { solveLowerInPlace } from "./cholesky.js";
import { fitGaussian } from "./gaussian.js";
import type { Rearranged } from "./rearranged.js";
import type { Windows } from "./windows.js";

/**
 * Gaussian storage of rearranged windows with one next value: that of `fitGaussian`, to rounding. The
 * pasts are turned into uncorrelated ones of variance 1 once; then R² is the sum of squared correlations
 * of the next value with them.
 *
 * @throws {LatchmapError} as `fitGaussian`
 */
export function rearrangedGaussian(windows: Windows, ridge = 0): Rearranged {
  const { count, history } = windows;
  const { joint, mean, scale, alone } = fitGaussian(windows, ridge);
  const size = history + 1;
  const white = new Float64Array(count * history);
  const next = new Float64Array(count);
  const row = new Float64Array(size);
  for (let w = 0; w < count; w++) {
    for (let j = 0; j < history; j++) row[j] = windows.past[w * history + j] / scale - mean[j];
    solveLowerInPlace(joint, size, row);
    white.set(row.subarray(0, history), w * history);
    next[w] = (windows.next[w] / scale - mean[history]) / alone[0];
  }
  /** Correlations with each uncorrelated past. */
  const correlations = (order: Uint32Array): Float64Array => {
    const sums = new Float64Array(history);
    for (let w = 0; w < count; w++) {
      const y = next[order[w]];
      for (let j = 0; j < history; j++) sums[j] += white[w * history + j] * y;
    }
    return sums.map((sum) => sum / count);
  };
  const openShare = (r: Float64Array): number => 1 - r.reduce((sum, one) => sum + one * one, 0);
  return {
    storage: (order) => -Math.log2(openShare(correlations(order))) / 2,
    local: (order) => {
      const r = correlations(order);
      const open = openShare(r);
      const average = -Math.log2(open) / 2;
      return Float64Array.from({ length: count }, (_, w) => {
        const y = next[order[w]];
        let rest = y;
        for (let j = 0; j < history; j++) rest -= r[j] * white[w * history + j];
        return average + (y * y - (rest * rest) / open) * (Math.LOG2E / 2);
      });
    },
  };
}
