import { RefiningTable } from "../kernels/refine.js";
import { latchmapError } from "../recording/errors.js";
import type { Averages } from "./averages.js";
import { blockBits, blockTable, groupAverages } from "./blocktable.js";
import type { Windows } from "./windows.js";

/** The longest past whose order patterns are told apart. */
export const LONGEST_PATTERN = 10;

/** What an estimator says of windows, in bits, one value a window. */
export interface ScoredWindows {
  readonly storage: Float64Array;
  /** Local entropy of the next value; undefined where the estimator has none. */
  readonly surprise?: Float64Array;
  readonly averages: Averages;
}

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
  if (history < 2 || history > LONGEST_PATTERN) {
    throw latchmapError(
      "bad-setting",
      `order patterns of ${history} value${history === 1 ? " hold nothing" : "s are too many to count"}`,
      `Use a history from 2 to ${LONGEST_PATTERN}`,
      { option: "--history" },
    );
  }
  const patterns = new RefiningTable();
  const blocks = new RefiningTable();
  const ids = new Uint32Array(count);
  for (let w = 0; w < count; w++) {
    const row = past.subarray(w * history, (w + 1) * history);
    ids[w] = blocks.id(patterns.id(0, patternOf(row)), rankAmong(row, next[w]));
  }
  const counts = new Float64Array(blocks.size);
  for (const id of ids) counts[id]++;
  const table = blockTable({
    jointCounts: counts,
    pastOf: blocks.parents,
    nextOf: blocks.symbols,
    groupOfBlock: new Uint32Array(blocks.size),
    pasts: patterns.size,
    nexts: history + 1,
    groups: 1,
  });
  const bits = blockBits(table);
  return {
    storage: Float64Array.from(ids, (id) => bits.storage[id]),
    surprise: Float64Array.from(ids, (id) => bits.surprise[id]),
    averages: groupAverages(table, bits)[0],
  };
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
