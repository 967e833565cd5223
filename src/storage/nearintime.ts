import type { Barred } from "../kernels/neighbours.js";
import type { Windows } from "./windows.js";

/**
 * The windows that are too close in time to be neighbours of each: those of its own series less than
 * `exclude` steps away, itself always. Windows are ordered by series and time, so they stand in a row.
 */
export function nearInTimeInPlace(
  { count, time, series }: Pick<Windows, "count" | "time" | "series">,
  exclude: number,
  { from, until }: Barred,
): void {
  const isNear = (a: number, b: number): boolean =>
    a === b || (series[a] === series[b] && time[b] - time[a] < exclude);
  let first = 0;
  let end = 0;
  for (let w = 0; w < count; w++) {
    while (!isNear(first, w)) first++;
    end = Math.max(end, w + 1);
    while (end < count && isNear(w, end)) end++;
    from[w] = first;
    until[w] = end;
  }
}
