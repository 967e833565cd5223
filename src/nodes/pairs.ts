import { centresOf, type ResampledMeans } from "./resampledmeans.js";
import { studentReach, studentTail } from "./studentt.js";

/** The differences of all pairs of nodes, one entry a pair; `a` comes before `b` in the order of nodes. */
export interface PairDifferences {
  readonly a: Uint32Array;
  readonly b: Uint32Array;
  /** Storage of a less that of b, in bits. */
  readonly difference: Float64Array;
  readonly low: Float64Array;
  readonly high: Float64Array;
  /** Chance of so large a difference, either way, between nodes that do not differ. */
  readonly p: Float64Array;
}

/**
 * Which nodes differ. The standard error of a difference is that of the differences of the means over
 * the resamples. All nodes were resampled with the same time steps, so what they share cancels. Its
 * interval and p are those of Student's t with as many degrees of freedom as there are independent
 * blocks, less one: unlike a share of the resamples this p can be as small as many pairs ask for, down to 1e-9.
 *
 * @param estimates storage of every node in bits, corrected for bias; the correction shifts the interval
 * @param level     chance that the interval misses, such as 0.1 for 90% intervals
 */
export function comparePairs(
  estimates: Float64Array,
  resampled: ResampledMeans,
  level: number,
): PairDifferences {
  const { nodes, freedom } = resampled;
  const covariance = covarianceOf(resampled);
  const count = (nodes * (nodes - 1)) / 2;
  const pairs = {
    a: new Uint32Array(count),
    b: new Uint32Array(count),
    difference: new Float64Array(count),
    low: new Float64Array(count),
    high: new Float64Array(count),
    p: new Float64Array(count),
  };
  const reach = studentReach(level, freedom);
  let pair = 0;
  for (let a = 0; a < nodes; a++) {
    for (let b = a + 1; b < nodes; b++) {
      const [ofA, ofB] = [covariance[a * nodes + a], covariance[b * nodes + b]];
      const variance = ofA + ofB - 2 * covariance[a * nodes + b];
      const error = Math.sqrt(variance < ROUNDING * (ofA + ofB) ? 0 : variance);
      const difference = estimates[a] - estimates[b];
      pairs.a[pair] = a;
      pairs.b[pair] = b;
      pairs.difference[pair] = difference;
      pairs.low[pair] = difference - reach * error;
      pairs.high[pair] = difference + reach * error;
      pairs.p[pair] = chanceOf(difference, error, resampled);
      pair++;
    }
  }
  return pairs;
}

/** Below this share of the variances, their difference is rounding. */
const ROUNDING = 1e-13;
/** Bits below which two storages are the same. */
const SAME = 1e-12;
/** Farther out the tail of Student's t says nothing that could be relied on. */
const LEAST_P = 1e-9;

/** Without any spread over the resamples, their number bounds what can be said. */
function chanceOf(difference: number, error: number, { count, freedom }: ResampledMeans): number {
  if (Number.isNaN(difference) || Number.isNaN(error)) return Number.NaN;
  if (Math.abs(difference) < SAME) return 1;
  if (error === 0) return 1 / (count + 1);
  return Math.max(LEAST_P, studentTail(difference / error, freedom));
}

/** Covariances of the means over the resamples, shape [node, node]. */
function covarianceOf(resampled: ResampledMeans): Float64Array {
  const { count, nodes, means } = resampled;
  const centres = centresOf(resampled);
  const covariance = new Float64Array(nodes * nodes);
  const row = new Float64Array(nodes);
  for (let resample = 0; resample < count; resample++) {
    for (let node = 0; node < nodes; node++) {
      row[node] = means[resample * nodes + node] - centres[node];
    }
    for (let a = 0; a < nodes; a++) {
      for (let b = a; b < nodes; b++) covariance[a * nodes + b] += row[a] * row[b];
    }
  }
  return covariance.map((sum) => sum / (count - 1));
}
