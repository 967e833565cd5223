import { groupClasses, splitByLag } from "./classes.js";
import type { CommonWindows } from "./commonwindows.js";
import { lagTables } from "./contingency.js";
import { gainNull, type NullWish } from "./gainnull.js";
import { requireSamples } from "./reachcurve.js";

/** One lag of a greedy search, in the order of the search. */
export interface GreedyStep {
  readonly lag: number;
  /** What the lag adds to those chosen before it, in bits. */
  readonly gain: number;
  /** Chance of a gain as large where no candidate adds anything; 0 … 1. */
  readonly p: number;
}

/** The lags of a past that need not be evenly spaced. */
export interface GreedyLags {
  /** Chosen lags, ascending; empty where no lag tells anything. */
  readonly lags: readonly number[];
  /** The steps that chose them. */
  readonly steps: readonly GreedyStep[];
  /** The candidate that ended the search, the best of those left; undefined when none was left. */
  readonly refused?: GreedyStep;
}

/** How a greedy search stops. */
export interface GreedyWish {
  /** A best candidate is taken while its p is at most this. */
  readonly alpha: number;
  /** Most lags chosen. */
  readonly most?: number;
}

/**
 * Chooses lags of counted states one by one: each time the lag that adds most to those chosen, until
 * the best one's gain is within its null. The null shuffles the candidate's symbols within classes of
 * equal chosen past; as the candidate was picked as the best of several, its p is multiplied by their
 * number (Bonferroni). The streams are named (seed, step, lag, surrogate).
 *
 * @param windows whole for every candidate, so that all steps use the same samples
 * @see Faes, Nollo & Porta 2011, Phys. Rev. E 83:051112, non-uniform embedding
 */
export function greedyLags(windows: CommonWindows, wish: GreedyWish & NullWish): GreedyLags {
  requireSamples(windows);
  let past = groupClasses(windows);
  return greedySearch(windows.lags, wish, {
    gain: (lag) => {
      const tables = lagTables(past, windows, lag);
      return (tables.cells + tables.constant) / tables.samples;
    },
    p: (lag, step) => gainNull(past, windows, lag, wish, [step, lag]).pFitted,
    take: (lag) => {
      past = splitByLag(past, windows, lag);
    },
  });
}

/** What a greedy search asks of the model behind it. */
export interface GreedyModel {
  /** What a candidate adds to the lags taken, in bits. */
  gain(lag: number): number;
  /** Chance of such a gain where the candidate adds nothing, for this candidate alone. */
  p(lag: number, step: number): number;
  take(lag: number): void;
}

/** The search itself, whatever gains are made of; of equal gains the newer lag comes first. */
export function greedySearch(
  candidates: Iterable<number>,
  wish: GreedyWish,
  model: GreedyModel,
): GreedyLags {
  const left = new Set(candidates);
  const steps: GreedyStep[] = [];
  const most = wish.most ?? left.size;
  let refused: GreedyStep | undefined;
  while (left.size > 0 && steps.length < most && refused === undefined) {
    let lag = 0;
    let gain = Number.NEGATIVE_INFINITY;
    for (const candidate of left) {
      const bits = model.gain(candidate);
      // The smallest lead beyond rounding decides, so that ties go the same way everywhere.
      if (bits > gain + 1e-12) [lag, gain] = [candidate, bits];
    }
    const p = Math.min(1, left.size * model.p(lag, steps.length));
    if (p > wish.alpha) {
      refused = { lag, gain, p };
    } else {
      steps.push({ lag, gain, p });
      model.take(lag);
      left.delete(lag);
    }
  }
  return {
    lags: steps.map((step) => step.lag).sort((a, b) => a - b),
    steps,
    ...(refused === undefined ? {} : { refused }),
  };
}
