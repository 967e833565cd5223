import type { Averages } from "../storage/averages.js";
import { digamma } from "../storage/digamma.js";
import { chiSquareTail, fTail } from "../storage/tails.js";

/** What the law of storage without storage says of an estimate. */
export interface AnalyticNull {
  readonly statistic: number;
  /** Degrees of freedom: of a chi-square one number; of an F those above and below. */
  readonly freedom: readonly number[];
  /** The chance of so much storage where there is none; 0 ≤ p ≤ 1, NaN without windows. */
  readonly p: number;
  /** What storage is on average where there is none, in bits: the bias of the estimate. */
  readonly nullMean: number;
}

/**
 * Counted storage of one next value in large samples without storage: 2N·ln2·storage has a chi-square distribution with
 * (pasts seen − 1)(next values seen − 1) degrees of freedom. Blocks met fewer than about five times make
 * it inexact; permutation is exact there. Where nothing can vary, p is 1.
 *
 * @see Wilks 1938, Annals of Mathematical Statistics 9:60–62; Anderson & Goodman 1957, Annals of
 *   Mathematical Statistics 28:89–110, for the states of a chain
 */
export function chiSquareNull(
  averages: Pick<Averages, "samples" | "storage" | "pastStatesSeen" | "nextStatesSeen">,
): AnalyticNull {
  const { samples, storage, pastStatesSeen, nextStatesSeen } = averages;
  const freedom = (pastStatesSeen - 1) * (nextStatesSeen - 1);
  const statistic = 2 * samples * Math.LN2 * storage;
  const tail = freedom > 0 ? chiSquareTail(statistic, freedom) : 1;
  return {
    statistic,
    freedom: [freedom],
    p: samples > 0 ? tail : Number.NaN,
    nullMean: freedom / (2 * samples * Math.LN2),
  };
}

/**
 * Gaussian storage of independent Gaussian values: R² = 1 − 2^(−2·storage) has a beta distribution, which
 * is the F test of the regression of the next value on the past, exact at any length. A ridge makes p too
 * large, never too small.
 *
 * @param history number of lags; windows must outnumber them by two
 * @see Anderson, An Introduction to Multivariate Statistical Analysis, ch. 4
 */
export function gaussianNull(
  { samples, storage }: Pick<Averages, "samples" | "storage">,
  history: number,
): AnalyticNull {
  const below = samples - history - 1;
  const statistic = (Math.expm1(2 * Math.LN2 * storage) * below) / history;
  const nats = (digamma((samples - 1) / 2) - digamma(below / 2)) / 2;
  return {
    statistic,
    freedom: [history, below],
    p: fTail(statistic, history, below),
    nullMean: nats * Math.LOG2E,
  };
}
