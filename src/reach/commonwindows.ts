import type { StateArray } from "../kernels/blocks.js";
import type { Pool } from "../recording/pools.js";

/**
 * States over time × places, all in memory, shape [time, place]: symbols 0 … alphabet−1, −1 a gap.
 */
export interface StateTable {
  readonly states: StateArray;
  readonly timeSteps: number;
  readonly places: number;
  readonly alphabet: number;
  /** Where each run begins; windows never cross from one run into the next. One run when left out. */
  readonly runStarts?: readonly number[];
}

/** Which windows are compared: those whole for every lag tried, so that all see the same samples. */
export interface WindowChoice {
  /** Lags tried, ascending, in time steps. */
  readonly lags: Int32Array;
  /** Leading steps of each run that are left out of every window. */
  readonly skip: number;
  /** The groups of places that count apart. */
  readonly pool: Pool;
  /** The places whose windows are wanted; all where it is left out. */
  readonly members?: readonly number[];
}

/**
 * The windows that are whole for every lag of a choice, in time order. `at` holds the cell of each
 * predicted value, time · places + place.
 */
export interface CommonWindows extends StateTable {
  readonly lags: Int32Array;
  readonly pool: Pool;
  readonly at: Uint32Array;
}

/** Finds the windows of a table of states that are whole for every lag. */
export function commonWindows(table: StateTable, choice: WindowChoice): CommonWindows {
  const at = wholeCells(table, choice, (cell) => table.states[cell] < 0);
  return { ...table, lags: choice.lags, pool: choice.pool, at };
}

/** The cells whose value and whose every lagged value are there, in time order. */
export function wholeCells(
  table: Pick<StateTable, "timeSteps" | "places" | "runStarts">,
  { lags, skip, members }: Pick<WindowChoice, "lags" | "skip" | "members">,
  isGap: (cell: number) => boolean,
): Uint32Array {
  const { timeSteps, places, runStarts = [0] } = table;
  const broken = new Uint8Array(timeSteps * places);
  if (members !== undefined) {
    broken.fill(1);
    for (let cell = 0; cell < broken.length; cell += places) {
      for (const member of members) broken[cell + member] = 0;
    }
  }
  const lead = skip + lags[lags.length - 1];
  for (const start of runStarts) broken.fill(1, start * places, (start + lead) * places);
  let count = 0;
  for (let cell = 0; cell < broken.length; cell++) {
    if (isGap(cell)) {
      broken[cell] = 1;
      // Beyond the end of a run this reaches only cells that have no whole window anyway.
      for (const lag of lags) {
        const reached = cell + lag * places;
        if (reached < broken.length) broken[reached] = 1;
      }
    }
    count += 1 - broken[cell];
  }
  const at = new Uint32Array(count);
  count = 0;
  for (let cell = 0; cell < broken.length; cell++) if (broken[cell] === 0) at[count++] = cell;
  return at;
}

/** At most so many cells, one from each equal stretch, at places in it that no period can match. */
export function evenlySpread(cells: Uint32Array, most: number): Uint32Array {
  if (cells.length <= most) return cells;
  const stretch = cells.length / most;
  const golden = (Math.sqrt(5) - 1) / 2;
  return Uint32Array.from(
    { length: most },
    (_, i) => cells[Math.floor((i + ((i * golden) % 1)) * stretch)],
  );
}
