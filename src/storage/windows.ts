import type { Past } from "./past.js";

/**
 * The whole windows of some places, one row a window, ordered by series and then by time.
 * `past` has shape [window, lag], the newest lag first; `next` has shape [window, future].
 */
export interface Windows {
  readonly count: number;
  readonly history: number;
  readonly future: number;
  readonly past: Float64Array;
  readonly next: Float64Array;
  /** Time step of the first predicted value. */
  readonly time: Uint32Array;
  readonly place: Uint32Array;
  /** Which unbroken series a window belongs to: one place in one run. */
  readonly series: Uint32Array;
}

/** Values over time × places, all in memory, shape [time, place]; NaN is a gap. */
export interface ValueTable {
  readonly values: Float64Array;
  readonly timeSteps: number;
  readonly places: number;
  /** Where each run begins; windows never cross from one run into the next. One run when left out. */
  readonly runStarts?: readonly number[];
}

/** Which windows are wanted. */
export interface WindowWish {
  readonly past: Past;
  /** Values predicted together, one delay apart, from the window's time on; 1 for storage. */
  readonly future: number;
  /** Leading steps of each run that are left out of every window. */
  readonly skip: number;
  /** The places whose windows are wanted, in order. */
  readonly members: readonly number[];
}

/** Time steps between the values of a future: the delay, or 1 where the lags are not even. */
export function futureStep(past: Past): number {
  return Math.max(1, past.delay);
}

/** Gathers the windows that meet no gap and no end of a run. */
export function collectWindows(table: ValueTable, wish: WindowWish): Windows {
  const { values, timeSteps, places, runStarts = [0] } = table;
  const { past, future, skip, members } = wish;
  const history = past.history;
  const ahead = (future - 1) * futureStep(past);
  const most = Math.max(0, timeSteps - ahead - past.span) * members.length;
  const pasts = new Float64Array(most * history);
  const nexts = new Float64Array(most * future);
  const time = new Uint32Array(most);
  const place = new Uint32Array(most);
  const series = new Uint32Array(most);
  let count = 0;
  const take = (member: number, step: number): boolean => {
    for (let j = 0; j < history; j++) {
      const value = values[(step - past.lags[j]) * places + member];
      if (Number.isNaN(value)) return false;
      pasts[count * history + j] = value;
    }
    for (let f = 0; f < future; f++) {
      const value = values[(step + f * futureStep(past)) * places + member];
      if (Number.isNaN(value)) return false;
      nexts[count * future + f] = value;
    }
    return true;
  };
  for (const member of members) {
    runStarts.forEach((start, run) => {
      const end = runStarts[run + 1] ?? timeSteps;
      for (let step = start + skip + past.span; step + ahead < end; step++) {
        if (!take(member, step)) continue;
        time[count] = step;
        place[count] = member;
        series[count] = run * places + member;
        count++;
      }
    });
  }
  return {
    count,
    history,
    future,
    past: pasts.subarray(0, count * history),
    next: nexts.subarray(0, count * future),
    time: time.subarray(0, count),
    place: place.subarray(0, count),
    series: series.subarray(0, count),
  };
}
