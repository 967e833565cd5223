import { greedySearch, type SearchWish } from "../storage/greedysearch.js";
import { fTail } from "../storage/tails.js";
import type { LagFactor } from "./gaussiancurve.js";
import { type GreedyLags, lagsOf } from "./greedylags.js";

/** A candidate with less of its own variance left than this is a combination of the lags taken. */
const LEAST_LEFT = 1e-12;

/**
 * Chooses lags of a Gaussian one by one: each time the lag with the largest partial correlation with
 * the next value given those chosen, until the best one's F test, times the number of candidates, says
 * that it may be none. Taken lags are swept out of the covariance.
 *
 * @param factor of windows for all candidates (a model of `fitGaussian` with future 1)
 * @param lags   the candidates in time steps, shape [history]
 * @see Faes, Nollo & Porta 2011, Phys. Rev. E 83:051112, the search; Anderson, ch. 4, the test
 */
export function greedyGaussianLags(
  factor: LagFactor,
  lags: Int32Array,
  wish: SearchWish,
): GreedyLags {
  const size = factor.history + 1;
  const next = factor.history;
  const rest = product(factor.joint, size);
  const own = Float64Array.from({ length: size }, (_, i) => rest[i * size + i]);
  const indexOf = new Map(Array.from(lags, (lag, index) => [lag, index]));
  const partial = (lag: number): number => {
    const i = indexOf.get(lag) ?? 0;
    const left = rest[i * size + i];
    if (!(left > LEAST_LEFT * own[i])) return 0;
    return Math.min(1, rest[i * size + next] ** 2 / (left * rest[next * size + next]));
  };
  const search = greedySearch(lags, wish, {
    gain: (lag) => -Math.log2(1 - partial(lag)) / 2,
    p: (lag, step) => {
      const share = partial(lag);
      const freedom = factor.samples - step - 2;
      return freedom > 0 ? fTail((share / (1 - share)) * freedom, 1, freedom) : 1;
    },
    take: (lag) => sweepInPlace(rest, size, indexOf.get(lag) ?? 0),
  });
  return lagsOf(search);
}

/** L·Lᵀ. */
function product(lower: Float64Array, size: number): Float64Array {
  const matrix = new Float64Array(size * size);
  for (let a = 0; a < size; a++) {
    for (let b = 0; b < size; b++) {
      let sum = 0;
      for (let j = 0; j <= Math.min(a, b); j++) sum += lower[a * size + j] * lower[b * size + j];
      matrix[a * size + b] = sum;
    }
  }
  return matrix;
}

/** Takes out of a covariance what variable i explains. */
function sweepInPlace(matrix: Float64Array, size: number, i: number): void {
  const pivot = matrix[i * size + i];
  const column = Float64Array.from({ length: size }, (_, a) => matrix[a * size + i]);
  for (let a = 0; a < size; a++) {
    for (let b = 0; b < size; b++) matrix[a * size + b] -= (column[a] * column[b]) / pivot;
  }
}
