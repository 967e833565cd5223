import type { JointRows } from "./countedparts.js";
import type { Past } from "./past.js";
import { rowSymbols } from "./rowsymbols.js";
import type { ValueTable, Windows } from "./windows.js";

/** Which windows are wanted of places together with their sources. */
export interface JointWish {
  readonly past: Past;
  /** The lags of each source's past, in time steps, ascending. */
  readonly sourceLags: Int32Array;
  /** Leading steps of each run that are left out of every window. */
  readonly skip: number;
  readonly members: readonly number[];
  /**
   * The places that are the sources of each member, as many for each; −1 where there is none, such as
   * beyond an edge, and then the member has no window.
   */
  readonly sourcesOf: (member: number) => ArrayLike<number>;
  readonly sources: number;
}

/**
 * Windows whose past holds that of the place itself (`own` columns, the newest lag first) and then
 * those of its sources (`perSource` columns each). The future is one value.
 */
export interface JointWindows extends Windows {
  readonly own: number;
  readonly perSource: number;
  readonly sources: number;
}

/** Gathers the windows that are whole for the place and for all its sources, by place and then time. */
export function collectJointWindows(table: ValueTable, wish: JointWish): JointWindows {
  const { values, timeSteps, places, runStarts = [0] } = table;
  const { past, sourceLags, skip, members, sources } = wish;
  const history = past.history + sources * sourceLags.length;
  const span = Math.max(past.span, ...(sources > 0 ? sourceLags : []));
  const most = Math.max(0, timeSteps - span) * members.length;
  const pasts = new Float64Array(most * history);
  const next = new Float64Array(most);
  const time = new Uint32Array(most);
  const place = new Uint32Array(most);
  const series = new Uint32Array(most);
  let count = 0;
  for (const member of members) {
    const from = [
      ...Array.from(past.lags, (lag) => member - lag * places),
      ...Array.from(wish.sourcesOf(member)).flatMap((source) =>
        Array.from(sourceLags, (lag) => source - lag * places),
      ),
    ];
    if (Array.from(wish.sourcesOf(member)).some((source) => source < 0)) continue;
    runStarts.forEach((start, run) => {
      const end = runStarts[run + 1] ?? timeSteps;
      for (let step = start + skip + span; step < end; step++) {
        const cell = step * places;
        let whole = !Number.isNaN(values[cell + member]);
        for (let column = 0; whole && column < history; column++) {
          const value = values[cell + from[column]];
          pasts[count * history + column] = value;
          whole = !Number.isNaN(value);
        }
        if (!whole) continue;
        next[count] = values[cell + member];
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
    future: 1,
    own: past.history,
    perSource: sourceLags.length,
    sources,
    past: pasts.subarray(0, count * history),
    next: next.subarray(0, count),
    time: time.subarray(0, count),
    place: place.subarray(0, count),
    series: series.subarray(0, count),
  };
}

/** Joint windows of states as rows of symbols, one a window. */
export function jointRows(windows: JointWindows): JointRows {
  const { own, perSource, sources, next, count } = windows;
  return {
    next: rowSymbols(next, count, 1, 0, 1),
    own: rowSymbols(windows.past, count, windows.history, 0, own),
    sources: Array.from({ length: sources }, (_, j) => {
      const from = own + j * perSource;
      return rowSymbols(windows.past, count, windows.history, from, from + perSource);
    }),
  };
}
