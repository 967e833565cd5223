import {
  type Classes,
  LARGEST_SPLIT_TABLE,
  type Symbols,
  splitClasses,
  wholeClass,
} from "../storage/classes.js";
import type { CommonWindows } from "./commonwindows.js";

/** One class for every group of the pool that has a window. */
export function groupClasses({ at, places, pool }: CommonWindows): Classes {
  const whole = wholeClass(at.length);
  if (pool.names.length === 1) return whole;
  return splitClasses(whole, {
    of: at.map((cell) => pool.groupOf[cell % places]),
    alphabet: pool.names.length,
  });
}

/**
 * Splits every class by the symbol at a lag; lag 0 is the predicted value. Split lag by lag, newest
 * first, the classes are those of equal pasts.
 */
export function splitByLag(classes: Classes, windows: CommonWindows, lag: number): Classes {
  return splitClasses(classes, symbolsAt(windows, lag));
}

/** How often each class is followed by each symbol: counts above 0, in no promised order. */
export function nextCounts(classes: Classes, windows: CommonWindows): Float64Array {
  const { alphabet } = windows;
  if (classes.size * alphabet > LARGEST_SPLIT_TABLE) return splitByLag(classes, windows, 0).counts;
  const { of: symbols } = symbolsAt(windows, 0);
  const counts = new Float64Array(classes.size * alphabet);
  const { of } = classes;
  for (let window = 0; window < of.length; window++) {
    counts[of[window] * alphabet + symbols[window]]++;
  }
  return counts.filter((count) => count > 0);
}

/** The symbol of every window at a lag. */
export function symbolsAt({ states, at, places, alphabet }: CommonWindows, lag: number): Symbols {
  const back = lag * places;
  const of = new Uint32Array(at.length);
  for (let window = 0; window < at.length; window++) of[window] = states[at[window] - back];
  return { of, alphabet };
}
