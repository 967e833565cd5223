import type { Classes } from "../storage/classes.js";
import { type ClassTables, tablesWithin } from "../storage/classtables.js";
import { type DrawnNull, type NullWish, tableNull } from "../storage/drawnnull.js";
import { groupClasses, splitByLag, symbolsAt } from "./classes.js";
import type { CommonWindows } from "./commonwindows.js";

/**
 * A lag's gain, I(next; lag | newer lags), beside what it would be if the lag told nothing that the
 * newer lags do not.
 */
export interface GainNull extends DrawnNull {
  readonly lag: number;
}

/**
 * The nulls of every lag of the windows: given the newer lags, the symbols at the lag are shuffled
 * within each class of equal newer past. Lag by lag and surrogate by surrogate, the draws come from
 * streams named (seed, lag, surrogate).
 *
 * @returns one null a lag, in the order of the windows' lags
 */
export function gainNulls(windows: CommonWindows, wish: NullWish): GainNull[] {
  let past = groupClasses(windows);
  return Array.from(windows.lags, (lag) => {
    const found = gainNull(past, windows, lag, wish, [lag]);
    past = splitByLag(past, windows, lag);
    return found;
  });
}

/**
 * The null of one lag given classes of windows.
 * @param name what the streams are named by, after the seed and before the surrogate's number
 */
export function gainNull(
  past: Classes,
  windows: CommonWindows,
  lag: number,
  wish: NullWish,
  name: readonly number[],
): GainNull {
  return { lag, ...tableNull(lagTables(past, windows, lag), wish, name) };
}

/** Tabulates a lag against the next value within classes of equal newer past. */
export function lagTables(past: Classes, windows: CommonWindows, lag: number): ClassTables {
  return tablesWithin(past, symbolsAt(windows, 0), symbolsAt(windows, lag));
}
