import { latchmapError } from "../recording/errors.js";
import { entropyOfCounts } from "./entropy.js";
import type { ScoredWindows } from "./scored.js";
import { scoreCounts } from "./windowcounts.js";
import type { Windows } from "./windows.js";

/** The longest past whose order patterns are told apart. */
export const LONGEST_PATTERN = 10;

/**
 * Storage between the order pattern of the past and the rank of the next value among its values.
 * Past and next share no value, so there is no storage by construction.
 *
 * Ties rank the earlier value lower, so a next value equal to a past one ranks above it.
 *
 * @param windows with one next value; history at least 2, since one value has one pattern
 * @throws {LatchmapError} `bad-setting` for a history beyond 10 or below 2
 * @see Bandt & Pompe 2002, Phys. Rev. Lett. 88:174102, order patterns
 */
export function scoreOrdinal(windows: Windows): ScoredWindows {
  const { count, history, past, next } = windows;
  requirePatternLength(history);
  const patterns = new Float64Array(count);
  const ranks = new Float64Array(count);
  for (let w = 0; w < count; w++) {
    const row = past.subarray(w * history, (w + 1) * history);
    patterns[w] = patternOf(row);
    ranks[w] = rankAmong(row, next[w]);
  }
  return scoreCounts({ ...windows, history: 1, past: patterns, next: ranks });
}

function requirePatternLength(length: number): void {
  if (length < 2 || length > LONGEST_PATTERN) {
    throw latchmapError(
      "bad-setting",
      `order patterns of ${length} value${length === 1 ? " hold nothing" : "s are too many to count"}`,
      `Use a history from 2 to ${LONGEST_PATTERN}`,
      { option: "--history" },
    );
  }
}

/**
 * The number of an order pattern, 0 … m!−1: for each value, how many later ones are smaller (Lehmer's
 * code). Ties rank the earlier value lower.
 *
 * @param newestFirst the values of a past, the newest first
 */
export function patternOf(newestFirst: ArrayLike<number>): number {
  const m = newestFirst.length;
  let code = 0;
  for (let i = m - 1; i >= 0; i--) {
    let smallerLater = 0;
    for (let later = 0; later < i; later++) {
      if (newestFirst[later] < newestFirst[i]) smallerLater++;
    }
    code = code * (i + 1) + smallerLater;
  }
  return code;
}

/** How many values of a past are not greater than the next value: its rank from below. */
function rankAmong(past: ArrayLike<number>, next: number): number {
  let rank = 0;
  for (let i = 0; i < past.length; i++) if (past[i] <= next) rank++;
  return rank;
}

/** How often each order pattern of `order` values, `delay` steps apart, is met. */
export interface PatternCounts {
  /** One count a pattern, order! of them, by `patternOf`. */
  readonly counts: Float64Array;
  readonly windows: number;
}

/**
 * Counts the order patterns of one series; windows that touch a gap are left out.
 *
 * @param values one value a time step, NaN a gap
 * @throws {LatchmapError} `bad-setting` for an order beyond 10 or below 2
 */
export function countPatterns(values: Float64Array, order: number, delay: number): PatternCounts {
  requirePatternLength(order);
  let patterns = 1;
  for (let m = 2; m <= order; m++) patterns *= m;
  const counts = new Float64Array(patterns);
  const newestFirst = new Float64Array(order);
  let windows = 0;
  for (let step = (order - 1) * delay; step < values.length; step++) {
    for (let j = 0; j < order; j++) newestFirst[j] = values[step - j * delay];
    if (newestFirst.some(Number.isNaN)) continue;
    counts[patternOf(newestFirst)]++;
    windows++;
  }
  return { counts, windows };
}

/**
 * The permutation entropy of a series, in bits: the entropy of its order patterns.
 * @see Bandt & Pompe 2002, Phys. Rev. Lett. 88:174102
 */
export function permutationEntropy(values: Float64Array, order: number, delay = 1): number {
  const { counts, windows } = countPatterns(values, order, delay);
  return entropyOfCounts(counts, windows).bits;
}
