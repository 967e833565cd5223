import { latchmapError } from "../recording/errors.js";
import { type Averages, NEGATIVE_BELOW } from "./averages.js";
import type { ScoredWindows } from "./scored.js";
import type { Windows } from "./windows.js";

/** How the box kernel counts. */
export interface BoxSettings {
  /** Half the side of the box, in standard deviations of the next values. */
  readonly width: number;
  /** Windows of the same place closer than this many steps in time do not count; 0 leaves out none. */
  readonly exclude: number;
}

/**
 * Storage by counting windows within a box: probabilities are shares of the windows whose values lie
 * within the width of this one's (max norm, the window itself included, so that no share is 0).
 *
 * @throws {LatchmapError} `bad-setting` where the values are constant or the width is not above 0
 * @see Schreiber 2000, Phys. Rev. Lett. 85:461–464, the step kernel
 */
export function scoreBox(windows: Windows, settings: BoxSettings): ScoredWindows {
  const { count, history, past, next, time, series } = windows;
  const width = settings.width * deviationOf(next, count);
  if (!(width > 0)) {
    throw latchmapError(
      "bad-setting",
      settings.width > 0 ? "the values are constant" : `${settings.width} is not a width`,
      "Leave constant places out with --places, and give a width above 0",
      { option: "--width" },
    );
  }
  const order = Uint32Array.from({ length: count }, (_, w) => w).sort(
    (a, b) => past[a * history] - past[b * history] || a - b,
  );
  const storage = new Float64Array(count);
  let first = 0;
  for (let i = 0; i < count; i++) {
    const w = order[i];
    while (past[w * history] - past[order[first] * history] > width) first++;
    let nearPast = 0;
    let nearBoth = 0;
    for (let j = first; j < count; j++) {
      const other = order[j];
      if (past[other * history] - past[w * history] > width) break;
      if (isExcluded(w, other) || !nearInPast(w, other)) continue;
      nearPast++;
      if (Math.abs(next[other] - next[w]) <= width) nearBoth++;
    }
    storage[w] = nearBoth / nearPast;
  }
  scaleByNextInPlace(storage);
  return { storage, averages: averagesOf(storage) };

  function isExcluded(w: number, other: number): boolean {
    if (w === other || series[w] !== series[other]) return false;
    return Math.abs(time[w] - time[other]) < settings.exclude;
  }

  function nearInPast(w: number, other: number): boolean {
    for (let lag = 1; lag < history; lag++) {
      if (Math.abs(past[other * history + lag] - past[w * history + lag]) > width) return false;
    }
    return true;
  }

  /** Turns p(next given past) into the local storage, by the share of windows near in the next value. */
  function scaleByNextInPlace(given: Float64Array): void {
    const byNext = Uint32Array.from({ length: count }, (_, w) => w).sort(
      (a, b) => next[a] - next[b] || a - b,
    );
    let low = 0;
    for (let i = 0; i < count; i++) {
      const w = byNext[i];
      while (next[w] - next[byNext[low]] > width) low++;
      let near = 0;
      let all = 0;
      for (let j = low; j < count && next[byNext[j]] - next[w] <= width; j++) {
        if (!isExcluded(w, byNext[j])) near++;
      }
      all = count - excludedFrom(w);
      given[w] = Math.log2(given[w] / (near / all));
    }
  }

  function excludedFrom(w: number): number {
    if (settings.exclude <= 1) return 0;
    let excluded = 0;
    for (const step of [-1, 1]) {
      for (let other = w + step; other >= 0 && other < count; other += step) {
        if (!isExcluded(w, other)) break;
        excluded++;
      }
    }
    return excluded;
  }
}

/** The averages of local values where the estimator has no entropies of its own. */
export function averagesOf(storage: Float64Array): Averages {
  let sum = 0;
  let negative = 0;
  for (const bits of storage) {
    sum += bits;
    if (bits < NEGATIVE_BELOW) negative++;
  }
  return {
    samples: storage.length,
    storage: sum / storage.length,
    storageCorrected: Number.NaN,
    entropy: Number.NaN,
    entropyRate: Number.NaN,
    negativeFraction: negative / storage.length,
    pastStatesSeen: Number.NaN,
    nextStatesSeen: Number.NaN,
    jointStatesSeen: Number.NaN,
  };
}

function deviationOf(values: Float64Array, count: number): number {
  const mean = values.reduce((sum, value) => sum + value, 0) / count;
  return Math.sqrt(values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / count);
}
