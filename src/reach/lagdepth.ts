import { latchmapError } from "../recording/errors.js";
import type { Classes } from "../storage/classes.js";
import { groupClasses, splitByLag } from "./classes.js";
import type { CommonWindows } from "./commonwindows.js";
import { requireSamples } from "./reachcurve.js";

/** The most lags a depth map tells apart. */
const MOST_LAGS = 255;

/** How far back each cell's storage comes from. */
export interface LagDepth {
  /** Mean local gain of each lag, in bits; together they are the storage. Shape [lag]. */
  readonly gains: Float64Array;
  /**
   * The number of the lag (1 … K) that told most of the value, shape [time, place]; 0 without a whole
   * window and where no lag told anything.
   */
  readonly depth: Uint8Array<ArrayBuffer>;
  /**
   * The local gain of lag number j, 1 … K, in bits, shape [time, place]: the local storage of lags
   * 1 … j less that of lags 1 … j−1. NaN without a whole window; negative where the lag misled. The
   * gains of a cell add up to its local storage.
   */
  localGain(j: number): Float64Array<ArrayBuffer>;
}

/**
 * Parts the local storage of counted states by lag, after the chain rule: the gain of lag j is
 * log2 p(next | lags 1 … j) / p(next | lags 1 … j−1), with all probabilities from the same windows.
 *
 * @throws {LatchmapError} `too-short` without a window; `bad-call` for more than 255 lags
 * @see Cover & Thomas, Elements of Information Theory, the chain rule of mutual information
 */
export function lagDepth(windows: CommonWindows): LagDepth {
  const { lags, at, timeSteps, places } = windows;
  requireSamples(windows);
  if (lags.length > MOST_LAGS) {
    throw latchmapError(
      "bad-call",
      `a depth map tells ${MOST_LAGS} lags apart; ${lags.length} are given`,
      "Use a shorter history",
      { option: "--history" },
    );
  }
  const depth = new Uint8Array(timeSteps * places);
  const most = new Float64Array(at.length);
  const gains = new Float64Array(lags.length);
  eachLag(windows, lags.length, (j, gainOf) => {
    let sum = 0;
    for (let window = 0; window < at.length; window++) {
      const bits = gainOf(window);
      sum += bits;
      if (bits <= most[window]) continue;
      most[window] = bits;
      depth[at[window]] = j;
    }
    gains[j - 1] = sum / at.length;
  });
  return {
    gains,
    depth,
    localGain: (wanted) => {
      if (!Number.isInteger(wanted) || wanted < 1 || wanted > lags.length) {
        throw latchmapError(
          "bad-call",
          `${wanted} is not the number of a lag`,
          `Give a whole number from 1 to ${lags.length}`,
        );
      }
      const local = new Float64Array(timeSteps * places).fill(Number.NaN);
      eachLag(windows, wanted, (j, gainOf) => {
        if (j < wanted) return;
        for (let window = 0; window < at.length; window++) local[at[window]] = gainOf(window);
      });
      return local;
    },
  };
}

/** Visits the lags 1 … upTo, newest first, with the local gain of every window. */
function eachLag(
  windows: CommonWindows,
  upTo: number,
  visit: (j: number, gainOf: (window: number) => number) => void,
): void {
  let past = groupClasses(windows);
  let before = chances(past, windows);
  for (let j = 1; j <= upTo; j++) {
    past = splitByLag(past, windows, windows.lags[j - 1]);
    const now = chances(past, windows);
    const earlier = before;
    visit(j, (window) => Math.log2(now(window) / earlier(window)));
    before = now;
  }
}

/** The chance of what followed a window, among the windows of its class. */
function chances(past: Classes, windows: CommonWindows): (window: number) => number {
  const joint = splitByLag(past, windows, 0);
  return (window) => joint.counts[joint.of[window]] / past.counts[past.of[window]];
}
