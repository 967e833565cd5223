import type { Averages } from "./averages.js";

/** What an estimator says of windows, in bits, one value a window. */
export interface ScoredWindows {
  readonly storage: Float64Array;
  /** Local entropy of the next value; undefined where the estimator has none. */
  readonly surprise?: Float64Array;
  readonly averages: Averages;
}
