import { uniformInt } from "pure-rand/distribution/uniformInt";
import type { RandomGenerator } from "pure-rand/types/RandomGenerator";
import { namedStream } from "../storage/streams.js";
import type { Windows } from "../storage/windows.js";

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
    sum += measure({ ...windows, next: shuffledRows(windows, namedStream(...name, i)) });
  }
  return sum / permutations;
}

/** The next values of all windows in random order, rows kept whole (Fisher & Yates 1938). */
function shuffledRows({ next, future, count }: Windows, stream: RandomGenerator): Float64Array {
  const shuffled = Float64Array.from(next);
  for (let i = count - 1; i > 0; i--) {
    const j = uniformInt(stream, 0, i);
    for (let f = 0; f < future; f++) {
      const held = shuffled[i * future + f];
      shuffled[i * future + f] = shuffled[j * future + f];
      shuffled[j * future + f] = held;
    }
  }
  return shuffled;
}
