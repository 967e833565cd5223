import { latchmapError } from "../recording/errors.js";
import { cholesky, log2Determinant, solveLowerInPlace } from "./cholesky.js";
import type { Windows } from "./windows.js";

/** A pivot below this share of its variance counts as zero: 64-bit rounding reaches about 1e-15. */
export const LEAST_PIVOT = 1e-13;

/**
 * A Gaussian fitted to windows: means and Cholesky factors of their covariances, for values divided
 * by `scale` (a power of two that keeps squares within range).
 */
export interface GaussianModel {
  readonly history: number;
  readonly future: number;
  readonly samples: number;
  readonly scale: number;
  /** Past lags first, then the future; shape [history + future]. */
  readonly mean: Float64Array;
  /** Factor of the joint covariance, shape [history + future, history + future]. */
  readonly joint: Float64Array;
  /** Factor of the covariance of the future alone, shape [future, future]. */
  readonly alone: Float64Array;
  readonly ridge: number;
}

/** What a Gaussian model says on average, in bits; entropies are differential. */
export interface GaussianAverages {
  readonly storage: number;
  readonly entropy: number;
  readonly entropyRate: number;
}

/**
 * Fits means and maximum-likelihood covariances (divided by the number of windows) to windows.
 *
 * @param ridge added to the diagonal of the past's covariance, as a share of its mean variance; 0 adds
 *   nothing
 * @throws {LatchmapError} `too-short` with too few windows; `bad-setting` where the value is constant,
 *   the past collinear, or the future an exact function of the past
 */
export function fitGaussian(windows: Windows, ridge = 0): GaussianModel {
  const { count, history, future } = windows;
  const size = history + future;
  const { scale, mean, covariance } = gaussianMoments(windows);
  const pastVariance = trace(covariance, size, 0, history) / history;
  for (let j = 0; j < history; j++) covariance[j * size + j] += ridge * pastVariance;
  const joint = cholesky(covariance, size, LEAST_PIVOT);
  if ("dependentRow" in joint) throw dependent(windows, joint.dependentRow);
  const aloneMatrix = Float64Array.from({ length: future * future }, (_, i) => {
    const row = history + Math.floor(i / future);
    return covariance[row * size + history + (i % future)];
  });
  const alone = cholesky(aloneMatrix, future, LEAST_PIVOT);
  if ("dependentRow" in alone) throw dependent(windows, history + alone.dependentRow);
  return {
    history,
    future,
    samples: count,
    scale,
    mean,
    joint: joint.lower,
    alone: alone.lower,
    ridge,
  };
}

/** Means and maximum-likelihood covariances of windows, past first, of values divided by `scale`. */
export interface GaussianMoments {
  readonly samples: number;
  readonly scale: number;
  /** Shape [history + future]. */
  readonly mean: Float64Array;
  /** Shape [history + future, history + future]. */
  readonly covariance: Float64Array;
}

/**
 * The moments of windows.
 * @throws {LatchmapError} `too-short` with too few windows, `bad-setting` where the value is constant
 */
export function gaussianMoments(windows: Windows): GaussianMoments {
  const { count, history, future } = windows;
  const size = history + future;
  if (count <= size) {
    throw latchmapError(
      "too-short",
      `a Gaussian model of ${history} lags needs more than ${size} whole windows; there are ${count}`,
      "Use a shorter history, or a longer recording with fewer gaps",
      { option: "--history" },
    );
  }
  const scale = powerOfTwoAbove(windows);
  const mean = meansOf(windows, scale);
  const covariance = covarianceOf(windows, scale, mean);
  refuseConstant(windows, covariance, size);
  return { samples: count, scale, mean, covariance };
}

/**
 * The averages of a model: storage is −½ log2(1 − R²), from the determinants of its covariances.
 * @see Cover & Thomas, Elements of Information Theory, the mutual information of Gaussians
 */
export function gaussianAverages(model: GaussianModel): GaussianAverages {
  const { history, future, scale } = model;
  const size = history + future;
  const open = log2Determinant(model.joint, size, history, size) / 2;
  const all = log2Determinant(model.alone, future, 0, future) / 2;
  const constant = (future / 2) * Math.log2(2 * Math.PI * Math.E) + future * Math.log2(scale);
  return { storage: all - open, entropy: all + constant, entropyRate: open + constant };
}

/**
 * The local storage and local entropy of every window, in bits; over the windows of the fit their
 * means are the averages.
 */
export function gaussianLocals(
  model: GaussianModel,
  windows: Windows,
): { readonly storage: Float64Array; readonly surprise: Float64Array } {
  const { history, future, scale, mean } = model;
  const size = history + future;
  const storage = new Float64Array(windows.count);
  const surprise = new Float64Array(windows.count);
  const { storage: average, entropy } = gaussianAverages(model);
  const row = new Float64Array(size);
  const own = new Float64Array(future);
  for (let w = 0; w < windows.count; w++) {
    for (let j = 0; j < size; j++) row[j] = scaled(windows, w, j, scale) - mean[j];
    own.set(row.subarray(history));
    solveLowerInPlace(model.joint, size, row);
    solveLowerInPlace(model.alone, future, own);
    let given = 0;
    let alone = 0;
    for (let f = 0; f < future; f++) {
      given += row[history + f] ** 2;
      alone += own[f] ** 2;
    }
    storage[w] = average + (alone - given) * (Math.LOG2E / 2);
    surprise[w] = entropy + (alone - future) * (Math.LOG2E / 2);
  }
  return { storage, surprise };
}

/** Entry j of window w, past first, divided by the scale in two exact steps. */
function scaled(windows: Windows, w: number, j: number, scale: number): number {
  const { history, future, past, next } = windows;
  const value = j < history ? past[w * history + j] : next[w * future + j - history];
  return value / scale;
}

/** The power of two at or above the largest absolute value; at least the smallest normal number. */
function powerOfTwoAbove(windows: Windows): number {
  let largest = 0;
  for (const value of windows.past) largest = Math.max(largest, Math.abs(value));
  for (const value of windows.next) largest = Math.max(largest, Math.abs(value));
  if (largest === 0) return 1;
  return 2 ** Math.min(1023, Math.ceil(Math.log2(largest)));
}

function meansOf(windows: Windows, scale: number): Float64Array {
  const size = windows.history + windows.future;
  // A first guess is taken off before summing, so that a large offset costs no digits.
  const guess = Float64Array.from({ length: size }, (_, j) => scaled(windows, 0, j, scale));
  return guess.map((start, j) => {
    let sum = 0;
    for (let w = 0; w < windows.count; w++) sum += scaled(windows, w, j, scale) - start;
    return start + sum / windows.count;
  });
}

function covarianceOf(windows: Windows, scale: number, mean: Float64Array): Float64Array {
  const size = mean.length;
  const sums = new Float64Array(size * size);
  const row = new Float64Array(size);
  for (let w = 0; w < windows.count; w++) {
    for (let j = 0; j < size; j++) row[j] = scaled(windows, w, j, scale) - mean[j];
    for (let a = 0; a < size; a++) {
      for (let b = 0; b <= a; b++) sums[a * size + b] += row[a] * row[b];
    }
  }
  for (let a = 0; a < size; a++) {
    for (let b = 0; b <= a; b++) {
      const value = sums[a * size + b] / windows.count;
      sums[a * size + b] = value;
      sums[b * size + a] = value;
    }
  }
  return sums;
}

function trace(matrix: Float64Array, size: number, from: number, to: number): number {
  let sum = 0;
  for (let j = from; j < to; j++) sum += matrix[j * size + j];
  return sum;
}

function refuseConstant(windows: Windows, covariance: Float64Array, size: number): void {
  const first = windows.next[0];
  if (windows.next.every((value) => value === first) || !(covariance[size * size - 1] > 0)) {
    throw latchmapError(
      "bad-setting",
      `the values are constant (${first}), so a Gaussian model has no variance to explain`,
      "Leave the place out with --places, or look at why the sensor says one value",
      { option: "--estimator gaussian" },
    );
  }
}

function dependent(windows: Windows, row: number): Error {
  if (row >= windows.history) {
    return latchmapError(
      "bad-setting",
      "the past predicts the next value exactly, so its storage under a Gaussian model is infinite",
      "Look at whether the values are computed from each other; plug-in states have a finite storage",
      { option: "--estimator gaussian" },
    );
  }
  return latchmapError(
    "bad-setting",
    `the past is collinear: lag ${row + 1} of ${windows.history} in the past is, to rounding, a combination of the lags before it`,
    "Use a shorter history, a longer delay, or ask for a ridge with --ridge 0.001",
    { option: "--history" },
  );
}
