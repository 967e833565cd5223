import { countText } from "../recording/counttext.js";
import { type LatchmapError, latchmapError } from "../recording/errors.js";
import type { Values } from "../recording/recording.js";
import { smallest } from "./growingvalues.js";

/** The rows of a long table: one entry a row in each array. */
export interface LongEntries {
  readonly times: Float64Array;
  /** Index of the place. */
  readonly places: Values;
  readonly values: Values;
  /** The row in the file, counted from 1. */
  readonly rows: Values;
}

/** A long table laid out over time and place. */
export interface Pivoted {
  /** Ascending, every time once. */
  readonly times: Float64Array;
  /** Shape [time, place]. */
  readonly values: Values;
  /** Pairs of time and place without an entry. */
  readonly missing: number;
  /** Whether the entries came in order of time. */
  readonly inOrder: boolean;
}

const MOST_CELLS = 2 ** 28;

/**
 * Lays the entries of a long table out over time and place; pairs without an entry are gaps.
 *
 * @param names the places' names
 * @throws {LatchmapError} `ragged-table` when a pair comes twice, `bad-setting` when the table would
 * be larger than 2^28 cells
 */
export function pivot(entries: LongEntries, names: readonly string[], file: string): Pivoted {
  const { times, inOrder } = distinctTimes(entries.times);
  const cells = times.length * names.length;
  if (cells > MOST_CELLS) throw tooLarge(file, times.length, names.length);
  const values = new Float64Array(cells).fill(Number.NaN);
  const rowOf = new Uint32Array(cells);
  let step = 0;
  for (let i = 0; i < entries.times.length; i++) {
    const time = entries.times[i];
    // Rows in order of time need no search: the step is the last one or the next.
    if (times[step] !== time) step = times[step + 1] === time ? step + 1 : stepOf(times, time);
    const cell = step * names.length + entries.places[i];
    if (rowOf[cell] > 0) throw twice(file, entries.rows[i], rowOf[cell], names[entries.places[i]]);
    rowOf[cell] = entries.rows[i];
    values[cell] = entries.values[i];
  }
  const missing = cells - entries.times.length;
  return { times, inOrder, missing, values: smallest(values) };
}

function distinctTimes(times: Float64Array): { times: Float64Array; inOrder: boolean } {
  const inOrder = times.every((time, i) => i === 0 || times[i - 1] <= time);
  const sorted = inOrder ? times : times.toSorted();
  return { times: sorted.filter((time, i) => i === 0 || sorted[i - 1] !== time), inOrder };
}

function stepOf(times: Float64Array, time: number): number {
  let low = 0;
  let high = times.length - 1;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (times[middle] < time) low = middle + 1;
    else high = middle;
  }
  return low;
}

function twice(file: string, row: number, first: number, place: string): LatchmapError {
  return latchmapError(
    "ragged-table",
    `this time and place have a value already, in row ${first}`,
    "Keep one row for every pair of time and place",
    { file, row, place },
  );
}

function tooLarge(file: string, times: number, places: number): LatchmapError {
  const count = (number: number): string => countText(number);
  return latchmapError(
    "bad-setting",
    `${count(times)} times × ${count(places)} places make ${count(times * places)} cells, more than ${count(MOST_CELLS)}`,
    "Check the columns of time and place, or save the values as an NPY array [time, place]",
    { file },
  );
}
