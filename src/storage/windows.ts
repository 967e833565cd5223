import type { Past } from "./past.js";

/**
 * The whole windows of some places, one row a window, ordered by place and then by time.
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
}

/** Values over time × places, all in memory, shape [time, place]; NaN is a gap. */
export interface ValueTable {
  readonly values: Float64Array;
  readonly timeSteps: number;
  readonly places: number;
}

/** Which windows are wanted. */
export interface WindowWish {
  readonly past: Past;
  /** Steps predicted together, from the window's time on; 1 for storage. */
  readonly future: number;
  /** Leading steps left out of every window. */
  readonly skip: number;
  /** The places whose windows are wanted, in order. */
  readonly members: readonly number[];
}

/** Gathers the windows that meet no gap and no end of the recording. */
export function collectWindows(table: ValueTable, wish: WindowWish): Windows {
  const { values, timeSteps, places } = table;
  const { past, future, skip, members } = wish;
  const first = skip + past.span;
  const most = Math.max(0, timeSteps - future + 1 - first) * members.length;
  const history = past.history;
  const pasts = new Float64Array(most * history);
  const nexts = new Float64Array(most * future);
  const time = new Uint32Array(most);
  const place = new Uint32Array(most);
  let count = 0;
  for (const member of members) {
    for (let step = first; step + future <= timeSteps; step++) {
      let whole = true;
      for (let j = 0; j < history; j++) {
        const value = values[(step - past.lags[j]) * places + member];
        whole &&= !Number.isNaN(value);
        pasts[count * history + j] = value;
      }
      for (let f = 0; f < future; f++) {
        const value = values[(step + f) * places + member];
        whole &&= !Number.isNaN(value);
        nexts[count * future + f] = value;
      }
      if (!whole) continue;
      time[count] = step;
      place[count] = member;
      count++;
    }
  }
  return {
    count,
    history,
    future,
    past: pasts.subarray(0, count * history),
    next: nexts.subarray(0, count * future),
    time: time.subarray(0, count),
    place: place.subarray(0, count),
  };
}
