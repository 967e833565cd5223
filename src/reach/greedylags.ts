import { bitsOfTables } from "../storage/classtables.js";
import type { NullWish } from "../storage/drawnnull.js";
import {
  greedySearch,
  type Search,
  type SearchStep,
  type SearchWish,
} from "../storage/greedysearch.js";
import { groupClasses, splitByLag } from "./classes.js";
import type { CommonWindows } from "./commonwindows.js";
import { gainNull, lagTables } from "./gainnull.js";
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

/**
 * Chooses lags of counted states one by one: each time the lag that adds most to those chosen, until
 * the best one's gain is within its null. The null shuffles the candidate's symbols within classes of
 * equal chosen past. The streams are named (seed, step, lag, surrogate).
 *
 * @param windows whole for every candidate, so that all steps use the same samples
 */
export function greedyLags(windows: CommonWindows, wish: SearchWish & NullWish): GreedyLags {
  requireSamples(windows);
  let past = groupClasses(windows);
  const search = greedySearch(windows.lags, wish, {
    gain: (lag) => {
      const tables = lagTables(past, windows, lag);
      return bitsOfTables(tables, tables.cells);
    },
    p: (lag, step) => gainNull(past, windows, lag, wish, [step, lag]).pFitted,
    take: (lag) => {
      past = splitByLag(past, windows, lag);
    },
  });
  return lagsOf(search);
}

/** A search whose candidates were lags. */
export function lagsOf({ steps, refused }: Search): GreedyLags {
  const asLag = ({ candidate, gain, p }: SearchStep): GreedyStep => ({ lag: candidate, gain, p });
  return {
    lags: steps.map(({ candidate }) => candidate).sort((a, b) => a - b),
    steps: steps.map(asLag),
    ...(refused === undefined ? {} : { refused: asLag(refused) }),
  };
}
