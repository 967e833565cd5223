import { namedStream } from "../storage/streams.js";
import type { Windows } from "../storage/windows.js";
import { shuffledOrder } from "./rearrangements.js";
import { rearrangedNext } from "./surrogates.js";

/**
 * What an estimator gives on average when the next values are shuffled against the pasts, so that no
 * storage is left: its bias. The measure is handed in, so that every estimator can be asked.
 *
 * @param name the whole numbers that name this estimate; permutation i draws from (name…, i)
 * @returns the mean over the permutations, in bits
 */
export function permutationMean(
  windows: Windows,
  measure: (windows: Windows) => number,
  permutations: number,
  name: readonly number[],
): number {
  let sum = 0;
  for (let i = 0; i < permutations; i++) {
    sum += measure(rearrangedNext(windows, shuffledOrder(windows.count, namedStream(...name, i))));
  }
  return sum / permutations;
}
