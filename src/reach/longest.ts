import { latchmapError } from "../recording/errors.js";
import { commonWindows, type StateTable, type WindowChoice } from "./commonwindows.js";

const MOST = 12;
/** The longest history may cost so large a share of the windows of the shortest. */
const SHARE_KEPT = 0.5;

/** The lags τ, 2τ, …, kτ. */
export function evenLags(history: number, delay: number): Int32Array {
  return Int32Array.from({ length: history }, (_, j) => (j + 1) * delay);
}

/**
 * The longest history that is worth trying on counted states, at most 12: there is at least one window
 * for every possible past of a group, and half the windows of history 1 are still whole.
 *
 * @throws {LatchmapError} `too-short` when not even history 1 has a whole window
 */
export function longestWorthTrying(
  table: StateTable,
  delay: number,
  choice: Omit<WindowChoice, "lags">,
): number {
  const windowsOf = (history: number): number =>
    commonWindows(table, { ...choice, lags: evenLags(history, delay) }).at.length;
  const shortest = windowsOf(1);
  if (shortest === 0) {
    throw latchmapError(
      "too-short",
      `no two values ${delay} time steps apart are both there`,
      "Use a shorter delay, or a longer recording with fewer gaps",
      { option: "--delay" },
    );
  }
  const pasts = shortest / choice.pool.names.length;
  let longest = 1;
  while (
    longest < MOST &&
    table.alphabet ** (longest + 1) <= pasts &&
    windowsOf(longest + 1) >= SHARE_KEPT * shortest
  ) {
    longest++;
  }
  return longest;
}
