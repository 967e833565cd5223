import type { GaussianModel } from "../storage/gaussian.js";
import { fTail } from "../storage/tails.js";
import type { ReachCurve, ReachPoint } from "./reachcurve.js";

/** A point of a Gaussian curve. */
export interface GaussianPoint extends ReachPoint {
  /** Squared partial correlation of this lag with the next value, given the newer lags; 0 … 1. */
  readonly partial: number;
  /** Probability of a partial correlation as large where there is none (F test, 1 and N−k−1). */
  readonly p: number;
}

/** What a joint covariance is factored into, past lags first and the next value last. */
export interface LagFactor {
  readonly history: number;
  /** Cholesky factor, shape [history + 1, history + 1]. */
  readonly joint: Float64Array;
  /** Values are divided by this before the factor is made. */
  readonly scale: number;
  readonly samples: number;
}

/**
 * The reach curve of a Gaussian: one factor holds every history length, since the last row of the
 * Cholesky factor splits the variance of the next value into what each further lag explains.
 * The corrected storage is less the mean of its null, k / (2 N ln 2); nothing else is corrected.
 *
 * @param factor of windows for the longest history (a model of `fitGaussian` with future 1)
 * @param lags   the lags of the past in time steps, shape [history]
 * @see Anderson, An Introduction to Multivariate Statistical Analysis, ch. 4, partial correlations
 */
export function gaussianReachCurve(
  factor: LagFactor | GaussianModel,
  lags: Int32Array,
): ReachCurve<GaussianPoint> {
  const { history, joint, scale, samples } = factor;
  const row = joint.subarray(history * (history + 1), (history + 1) ** 2);
  // What is left is summed from the far end, so that a small remainder keeps its digits.
  const left = new Float64Array(history + 2);
  for (let j = history; j >= 0; j--) left[j] = left[j + 1] + row[j] ** 2;
  const constant = Math.log2(2 * Math.PI * Math.E) / 2 + Math.log2(scale);
  const entropy = Math.log2(left[0]) / 2 + constant;
  const points: GaussianPoint[] = [];
  let storage = 0;
  for (let j = 0; j < history; j++) {
    const k = j + 1;
    const gain = Math.log2(left[j] / left[k]) / 2;
    storage += gain;
    const partial = row[j] ** 2 / left[j];
    const freedom = samples - k - 1;
    points.push({
      history: k,
      lag: lags[j],
      storage,
      storageCorrected: storage - k / (2 * samples * Math.LN2),
      gain,
      entropyRate: entropy - storage,
      partial,
      p: fTail((row[j] ** 2 / left[k]) * freedom, 1, freedom),
    });
  }
  return { samples, entropy, points };
}
